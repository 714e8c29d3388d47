//! The ruling: reserve, verdict, what is lacking. The part of a check that fleets and tolerance
//! draws need and nothing more.

use super::answer::Verdict;
use super::error::SolveError;
use crate::battery::{Binds, Charge, StartFloor};
use crate::build::{Build, Origin};
use crate::ledger::Machine;
use crate::outlook::{Lacking, Outlook};
use crate::quantity::{AmpHours, Amps, Fraction, Volts};

/// Charge that must stay in the battery, and why.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Reserve {
    /// As a share of full.
    pub soc: Fraction,
    /// What sets it.
    pub from: ReserveFrom,
}

/// What sets the reserve.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum ReserveFrom {
    /// The user's own figure.
    Stated,
    /// Assumed, for want of a starter.
    Assumed,
    /// The next cold start.
    ColdStart,
    /// The acid would freeze below.
    Freezing,
    /// Lower charges are not trusted.
    LeastCharge,
    /// It does not crank even when full: volts at the starter, and volts it needs.
    NeverCranks {
        /// At the end of the last attempt.
        starter: Volts,
        /// Needed.
        least: Volts,
    },
    /// Full acid freezes at this temperature.
    NeverThawed,
}

impl ReserveFrom {
    /// In two words.
    #[must_use]
    pub fn words(self) -> &'static str {
        match self {
            ReserveFrom::Stated => "stated",
            ReserveFrom::Assumed => "assumed",
            ReserveFrom::ColdStart => "cold start",
            ReserveFrom::Freezing => "freezing",
            ReserveFrom::LeastCharge => "least charge",
            ReserveFrom::NeverCranks { .. } => "does not crank",
            ReserveFrom::NeverThawed => "freezes when full",
        }
    }
}

/// The ruling on a build with a battery.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Ruling {
    /// The reserve.
    pub reserve: Reserve,
    /// The verdict.
    pub verdict: Verdict,
    /// Shifts that hold the reserve; none when it keeps up.
    pub shifts_carried: Option<u32>,
    /// Where the charge settles, at the beginning of a shift, and the lowest in it.
    pub settles: Option<(Charge, Fraction)>,
    /// Charge lacking each shift, 0 when it keeps up; none when no charging can help.
    pub lacks: Option<AmpHours>,
    /// The same as a current while the engine runs.
    pub lacks_current: Option<Amps>,
}

/// The reserve of a build at its air temperature.
#[must_use]
pub fn reserve(build: &Build, machine: &Machine) -> Reserve {
    let stated = build
        .battery
        .as_ref()
        .and_then(|b| b.reserve.as_ref())
        .map(|figure| Reserve {
            soc: figure.value,
            from: if matches!(figure.origin, Origin::Assumed(_)) {
                ReserveFrom::Assumed
            } else {
                ReserveFrom::Stated
            },
        });
    let start = build.starter.as_ref().map(|starter| {
        match machine
            .battery
            .start_floor(&starter.asks(), build.air.value)
        {
            StartFloor::Down { to, binds } => Reserve {
                soc: to,
                from: binds.into(),
            },
            StartFloor::Cannot {
                binds: Binds::Freezing,
                ..
            } => Reserve {
                soc: Fraction(2.0),
                from: ReserveFrom::NeverThawed,
            },
            StartFloor::Cannot { starter, least, .. } => Reserve {
                soc: Fraction(2.0),
                from: ReserveFrom::NeverCranks { starter, least },
            },
        }
    });
    match (stated, start) {
        (Some(stated), Some(start)) if start.soc > stated.soc => start,
        (Some(stated), _) => stated,
        (None, Some(start)) => start,
        (None, None) => Reserve {
            soc: Fraction::ZERO,
            from: ReserveFrom::Assumed,
        },
    }
}

impl From<Binds> for ReserveFrom {
    fn from(binds: Binds) -> ReserveFrom {
        match binds {
            Binds::Cranking => ReserveFrom::ColdStart,
            Binds::Freezing => ReserveFrom::Freezing,
            Binds::LeastCharge => ReserveFrom::LeastCharge,
        }
    }
}

/// Rules on a build.
///
/// # Errors
/// [`SolveError`]: the build has no battery, or the charge is not a number.
pub fn rule(build: &Build) -> Result<Ruling, SolveError> {
    let machine = Machine::new(build).ok_or(SolveError::NoBattery)?;
    rule_on(build, &machine)
}

/// Rules on a build made ready.
///
/// # Errors
/// [`SolveError`]: the charge is not a number.
pub fn rule_on(build: &Build, machine: &Machine) -> Result<Ruling, SolveError> {
    let reserve = reserve(build, machine);
    let start = Charge::rested(build.start);
    let outlook = machine.outlook(start, reserve.soc);
    let (verdict, shifts_carried, settles) = match outlook {
        Outlook::Settles { charge, lowest } => (Verdict::KeepsUp, None, Some((charge, lowest))),
        Outlook::Breaks { shifts: 0, .. } => (Verdict::FallsShort, Some(0), None),
        Outlook::Breaks { shifts, .. } => (Verdict::Carries, Some(shifts), None),
    };
    if settles.is_some_and(|(charge, lowest)| !charge.soc.is_finite() || !lowest.is_finite()) {
        return Err(SolveError::NotFinite);
    }
    let lacking = match verdict {
        Verdict::KeepsUp => Lacking::Charge {
            charge: AmpHours::ZERO,
            current: Amps::ZERO,
        },
        _ if reserve.soc > Fraction::ONE => Lacking::BeyondCharging,
        _ => machine.lacking(start, reserve.soc),
    };
    let (lacks, lacks_current) = match lacking {
        Lacking::Charge { charge, current } => (Some(charge), Some(current)),
        Lacking::BeyondCharging => (None, None),
    };
    if lacks.is_some_and(|charge| !charge.is_finite()) {
        return Err(SolveError::NotFinite);
    }
    Ok(Ruling {
        reserve,
        verdict,
        shifts_carried,
        settles,
        lacks,
        lacks_current,
    })
}
