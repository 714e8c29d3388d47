//! The answer row by row.

use super::plan::Entry;
use crate::check::answer::Verdict;
use crate::problem::Refusal;
use crate::quantity::{AmpHours, Celsius, Fraction, Money};
use crate::remedy::Part;
use serde::Serialize;
use std::sync::Arc;

/// One machine in one kit and season.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Row {
    /// What the machine is called.
    pub machine: Arc<str>,
    /// Its build file.
    pub build: Arc<str>,
    /// How many there are of it.
    pub count: u32,
    /// The kit fitted.
    pub kit: Option<Arc<str>>,
    /// The season.
    pub season: Option<Arc<str>>,
    /// Air temperature, in place of the build's own.
    pub air_c: Option<Celsius>,
    /// What came of it.
    #[serde(flatten)]
    pub outcome: Arc<Outcome>,
}

/// What came of one build.
#[derive(Clone, Debug, Default, PartialEq, Serialize)]
pub struct Outcome {
    /// The verdict; none where there is an error, or nothing to judge.
    pub verdict: Option<Verdict>,
    /// Shifts that hold the reserve; none when it keeps up.
    pub shifts_carried: Option<u32>,
    /// Charge lacking each shift, 0 when it keeps up; none when no charging can help, and without a battery.
    pub lacks_ah: Option<AmpHours>,
    /// Where the charge settles.
    pub settles_soc: Option<Fraction>,
    /// The first remedy, where one is needed and found.
    pub remedy: Option<String>,
    /// What it costs a machine, where that is known.
    pub cost: Option<Money>,
    /// The remedy as `--set` takes it.
    pub set: Vec<String>,
    /// What the remedy takes to be bought for a machine.
    pub parts: Vec<Part>,
    /// What binds with all changed that may be, where no remedy was found.
    pub binds: Option<String>,
    /// Why there is no verdict, where that is an error.
    pub error: Option<String>,
}

impl Outcome {
    /// No answer, for a reason.
    #[must_use]
    pub fn failed(why: impl Into<String>) -> Outcome {
        Outcome {
            error: Some(why.into()),
            ..Outcome::default()
        }
    }
}

impl Row {
    pub(super) fn new(entry: &Entry, outcome: Arc<Outcome>) -> Row {
        Row {
            machine: entry.machine.clone(),
            build: entry.build.clone(),
            count: entry.count,
            kit: entry.kit.clone(),
            season: entry.season.clone(),
            air_c: entry.air,
            outcome,
        }
    }
}

/// The first problem of a refusal in one line, its place before it: `mower.yaml:14:1: unknown key …`.
#[must_use]
pub fn one_line(refusal: &Refusal) -> String {
    let (source, problems) = (refusal.source(), refusal.problems());
    let Some(first) = problems.iter().next() else {
        return format!("{}: refused", source.name);
    };
    let place = source
        .place(first)
        .map_or(String::new(), |(line, column)| format!(":{line}:{column}"));
    let help = first.help.clone().or_else(|| first.kind.help());
    let help = help.map_or(String::new(), |help| format!(" ({help})"));
    let more = match problems.len() - 1 {
        0 => String::new(),
        n if problems.more() => format!("; and more than {n} more"),
        n => format!("; and {n} more"),
    };
    let text = format!("{}{place}: {}{help}{more}", source.name, first.kind);
    text.replace('\n', " ")
}
