//! What mends a build: combinations of changes, from the catalogs and within its limits.
//!
//! ```text
//! may: + catalogs ──offer──▶ slots, each with its ways ──search──▶ combinations that keep up,
//! cheapest first ──tighten──▶ answers, each judged by the full verdict
//! ```

mod asked;
mod change;
mod entry;
mod offer;
mod part;
mod prices;
mod search;
pub(crate) mod swap;
#[cfg(test)]
mod tests;
mod tighten;

pub use asked::Asked;
pub use part::Part;
pub use prices::{CHARGER, Prices, read_prices};

use crate::check::answer::Verdict;
use crate::check::{FORMAT, SolveError, rule, solvable};
use crate::quantity::{AmpHours, Fraction, Money};
use crate::size::why_not;
use change::{Change, Effort, made};
use offer::{Slot, offers};
use search::{Candidate, Enough, changed, chosen, search};
use serde::Serialize;

/// Answers listed.
pub const MOST: usize = 5;

/// What mends a build.
#[derive(Clone, Debug, Serialize)]
pub struct Remedy {
    /// Version of these names.
    pub format: u32,
    /// Name of the build.
    pub build: String,
    /// Whether it keeps up as it is: then nothing is to be mended.
    pub keeps_up: bool,
    /// Ah it lacks each shift as it is; none where no charging can help.
    pub lacks_ah: Option<AmpHours>,
    /// Currency of the costs, a label; empty where none is named.
    pub currency: String,
    /// The answers, best first.
    pub answers: Vec<Answer>,
    /// How many combinations were tried.
    pub tried: usize,
    /// What was offered: how many things may be changed.
    pub offered: usize,
    /// What binds when all that may be changed is changed, where no combination will do.
    pub binds: Option<String>,
    /// Notes: prices of parts that are in no catalog, limits that were taken.
    pub notes: Vec<String>,
}

/// One combination of changes that makes it keep up.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Answer {
    /// Each change in words.
    pub changes: Vec<String>,
    /// The same as `--set` takes it.
    pub set: Vec<String>,
    /// What is to be bought.
    pub parts: Vec<Part>,
    /// What it costs in parts; none where a price is not known.
    pub cost: Option<Money>,
    /// The full verdict on it.
    pub verdict: Verdict,
    /// Where the charge then settles.
    pub settles_soc: Option<Fraction>,
    /// Charge still lacking: none.
    pub lacks_ah: Option<AmpHours>,
}

/// Finds combinations of changes with which a build keeps up: cheapest first where prices are known,
/// least change first where not. `progress` is told how many of how many combinations are done with.
///
/// # Errors
/// [`SolveError`]: no battery, or no time in the shift.
pub fn remedy(
    asked: &Asked<'_>,
    prices: &Prices,
    progress: &mut dyn FnMut(usize, usize),
) -> Result<Remedy, SolveError> {
    searched(asked, prices, Enough::Of(MOST), progress)
}

/// The first of the answers of [`remedy`], and none of the others: what a fleet needs.
///
/// # Errors
/// [`SolveError`]: no battery, or no time in the shift.
pub fn first_remedy(asked: &Asked<'_>, prices: &Prices) -> Result<Remedy, SolveError> {
    let mut remedy = searched(asked, prices, Enough::First, &mut |_, _| {})?;
    remedy.answers.truncate(1);
    Ok(remedy)
}

fn searched(
    asked: &Asked<'_>,
    prices: &Prices,
    enough: Enough,
    progress: &mut dyn FnMut(usize, usize),
) -> Result<Remedy, SolveError> {
    let build = asked.build;
    solvable(build)?;
    let ruling = rule(build)?;
    let mut remedy = Remedy {
        format: FORMAT,
        build: build.name.clone(),
        keeps_up: ruling.verdict == Verdict::KeepsUp,
        lacks_ah: ruling.lacks,
        currency: prices.currency.clone(),
        answers: Vec::new(),
        tried: 0,
        offered: 0,
        binds: None,
        notes: prices.notes(asked.catalogs),
    };
    if remedy.keeps_up {
        return Ok(remedy);
    }
    let mut slots = offers(asked, prices, false);
    let (mut found, tried) = search(asked, &slots, enough, progress);
    remedy.tried = tried;
    if found.is_empty() && asked.description.may.is_none() {
        slots = offers(asked, prices, true);
        let (more, tried) = search(asked, &slots, enough, progress);
        found = more;
        remedy.tried += tried;
        if !found.is_empty() {
            remedy.notes.push(
                "no change of parts alone will do: the largest loads are on for less".to_owned(),
            );
        }
    }
    remedy.offered = slots.len();
    let mut answers: Vec<(Effort, Answer)> = found
        .iter()
        .filter_map(|candidate| answer(asked, &slots, candidate))
        .collect();
    answers.sort_by(|a, b| a.0.cmp(&b.0));
    remedy.answers = answers.into_iter().map(|(_, answer)| answer).collect();
    remedy.notes.extend(out_of_reach(asked, &remedy.answers));
    if remedy.answers.is_empty() {
        remedy.binds = Some(all_that_may(asked, &slots));
    }
    Ok(remedy)
}

/// Said where an answer changes what came with a kit.
fn out_of_reach(asked: &Asked<'_>, answers: &[Answer]) -> Option<String> {
    let mut sets = answers.iter().flat_map(|a| &a.set);
    let of_kit = sets.any(|set| set.split('=').next().is_some_and(|p| !asked.in_file(p)));
    let note = "accessories of the kit are out of reach of --set: fit the part in the kit itself";
    of_kit.then(|| note.to_owned())
}

/// The answer of a combination, no further from what there is than it needs be.
fn answer(asked: &Asked<'_>, slots: &[Slot], candidate: &Candidate) -> Option<(Effort, Answer)> {
    let changes: Vec<Change> = chosen(slots, &candidate.choice)
        .into_iter()
        .cloned()
        .collect();
    let changes = tighten::tightened(asked, changes);
    let (description, set) = made(asked.description, &changes)?;
    let ruling = rule(&asked.resolved(&description)?).ok()?;
    let effort = Effort::of(&changes);
    (ruling.verdict == Verdict::KeepsUp).then(|| {
        let answer = Answer {
            changes: changes.iter().map(|c| c.words.clone()).collect(),
            set,
            parts: changes.iter().filter_map(|c| c.part(asked)).collect(),
            cost: effort.cost(),
            verdict: ruling.verdict,
            settles_soc: ruling.settles.map(|(charge, _)| charge.soc),
            lacks_ah: ruling.lacks,
        };
        (effort, answer)
    })
}

/// What binds with all changed that may be: of several ways the last offered.
fn all_that_may(asked: &Asked<'_>, slots: &[Slot]) -> String {
    let all = slots.iter().map(|slot| slot.ways.len().checked_sub(1));
    let choice = all.collect();
    let build = changed(asked, chosen(slots, &choice));
    why_not(build.as_ref().unwrap_or(asked.build))
}
