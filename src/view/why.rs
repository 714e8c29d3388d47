//! The working of one state, equation by equation.

use crate::check::why::Why;
use crate::quantity::format;
use crate::report::{Block, Report};

/// The report of a working.
#[must_use]
pub fn why(answer: &Why) -> Report {
    let mut report = Report::new(&answer.build).subtitle(format!(
        "The working of {}: at its first step in the shift, charge {}, bus {}",
        answer.state,
        format::percent(answer.soc),
        format::fixed_unit(answer.bus_v, 3)
    ));
    for line in &answer.lines {
        report = report
            .block(Block::Heading(2, capital(&line.what)))
            .block(Block::Lines(vec![
                format!("  {}", line.equation),
                format!("  {}", line.numbers),
                format!("  [{}]", line.source),
            ]));
    }
    report
}

fn capital(text: &str) -> String {
    let mut letters = text.chars();
    letters.next().map_or(String::new(), |first| {
        first.to_uppercase().chain(letters).collect()
    })
}
