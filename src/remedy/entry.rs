//! Entries written in one line, as they may stand in a build file or behind `--set`.

use crate::description::{AccessoryText, DutyText, ReturnPath, Written};
use crate::quantity::format::precise;

/// A text as a value or a key: bare where that is safe, else in quotation marks.
pub(super) fn word(text: &str) -> String {
    let plain = text.starts_with(|c: char| c.is_ascii_alphabetic())
        && text.ends_with(|c: char| c.is_ascii_alphanumeric())
        && text
            .chars()
            .all(|c| c.is_ascii_alphanumeric() || matches!(c, ' ' | '-' | '_'))
        && !RESERVED.contains(&text.to_ascii_lowercase().as_str());
    if plain {
        text.to_owned()
    } else {
        format!("\"{}\"", text.replace('\\', "\\\\").replace('"', "\\\""))
    }
}

/// Words that some readers of YAML take for no text.
const RESERVED: [&str; 8] = ["true", "false", "null", "yes", "no", "on", "off", "y"];

/// The keys of an accessory that a change of part leaves as they are, with the part.
pub(super) fn accessory(text: &AccessoryText) -> String {
    let mut keys: Vec<String> = Vec::new();
    let mut key = |name: &str, value: Option<String>| {
        keys.extend(value.map(|value| format!("{name}: {value}")));
    };
    let words = |text: &Option<Written<String>>| text.as_ref().map(|w| word(&w.value));
    key("part", words(&text.part));
    key("name", words(&text.name));
    key("count", text.count.as_ref().map(|w| w.value.to_string()));
    key("duty", text.duty.as_ref().map(duty));
    key("circuit", words(&text.circuit));
    key("together", names(&text.together));
    key("apart", names(&text.apart));
    key("run", text.run.as_ref().map(|w| precise(w.value)));
    key("feed", words(&text.feed));
    key("max_drop", text.max_drop.as_ref().map(|w| precise(w.value)));
    key("returns", text.returns.as_ref().map(|w| returns(w.value)));
    key(
        "insulation",
        text.insulation.as_ref().map(|w| precise(w.value)),
    );
    format!("{{{}}}", keys.join(", "))
}

fn names(names: &[Written<String>]) -> Option<String> {
    let list: Vec<String> = names.iter().map(|w| word(&w.value)).collect();
    (!list.is_empty()).then(|| format!("[{}]", list.join(", ")))
}

fn returns(path: ReturnPath) -> String {
    match path {
        ReturnPath::Frame => "frame".to_owned(),
        ReturnPath::Wire => "wire".to_owned(),
    }
}

fn duty(duty: &DutyText) -> String {
    match duty {
        DutyText::Everywhere(share) => precise(share.value),
        DutyText::ByState { shares, .. } => {
            let shares = shares
                .iter()
                .map(|(state, share)| format!("{}: {}", word(&state.value), precise(share.value)));
            format!("{{{}}}", shares.collect::<Vec<_>>().join(", "))
        }
    }
}
