//! The verdict of any build, with or without a battery: what fleets and tolerance draws need and nothing more.

use super::answer::Verdict;
use super::error::SolveError;
use super::ruling::{Ruling, rule_on};
use super::solvable;
use crate::build::Build;
use crate::circuit::{circuits, verdict_on_volts};
use crate::ledger::Machine;
use crate::quantity::{AmpHours, Fraction};

/// A build judged.
#[derive(Clone, Debug)]
pub enum Judged {
    /// By the charge of its battery. The machine is boxed, being large.
    OnCharge(Box<Machine>, Ruling),
    /// By the volts of its accessories: it has no battery. The room to the nearest limit as a share of
    /// that limit, below zero beyond it; none where nothing is judged.
    OnVolts(Verdict, Option<Fraction>),
}

impl Judged {
    /// The verdict.
    #[must_use]
    pub fn verdict(&self) -> Verdict {
        match self {
            Judged::OnCharge(_, ruling) => ruling.verdict,
            Judged::OnVolts(verdict, _) => *verdict,
        }
    }

    /// Whether anything was judged: not without a battery where nothing states the volts it works within.
    #[must_use]
    pub fn is_judged(&self) -> bool {
        !matches!(self, Judged::OnVolts(_, None))
    }

    /// Whether it keeps up.
    #[must_use]
    pub fn keeps_up(&self) -> bool {
        self.verdict() == Verdict::KeepsUp
    }

    /// Whether no charging can help.
    #[must_use]
    pub fn beyond_charging(&self) -> bool {
        matches!(self, Judged::OnCharge(_, ruling) if ruling.lacks.is_none())
    }

    /// Charge lacking each shift, 0 when it keeps up; none when no charging can help, and without a battery.
    #[must_use]
    pub fn lacks(&self) -> Option<AmpHours> {
        match self {
            Judged::OnCharge(_, ruling) => ruling.lacks,
            Judged::OnVolts(..) => None,
        }
    }
}

/// Judges a build.
///
/// # Errors
/// [`SolveError`]: there is no answer.
pub fn judge(build: &Build) -> Result<Judged, SolveError> {
    solvable(build)?;
    if let Some(machine) = Machine::new(build) {
        let ruling = rule_on(build, &machine)?;
        return Ok(Judged::OnCharge(Box::new(machine), ruling));
    }
    let circuits = circuits(build).map_err(SolveError::Circuit)?;
    let on_volts = verdict_on_volts(build, &circuits);
    let room = on_volts.tightest.map(|t| t.margin);
    Ok(Judged::OnVolts(on_volts.verdict, room))
}
