//! What a regulator does to the winding. What it does to the bus (hold its setpoint) is the bus solver's.

use super::rectifier::Output;
use super::short_circuit::copper_loss;
use super::winding::Winding;
use crate::quantity::{Amps, Fraction, Watts};
use serde::Serialize;

/// A low and a high end.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
pub struct Range<Q> {
    /// The low end.
    pub low: Q,
    /// The high end.
    pub high: Q,
}

/// D, the share of the available mean current that is needed: needed / available, from 0 to 1.
#[must_use]
pub fn share_needed(available: Amps, needed: Amps) -> Fraction {
    if needed <= Amps::ZERO {
        Fraction::ZERO
    } else if available <= needed {
        Fraction::ONE
    } else {
        Fraction(needed / available)
    }
}

/// The winding's rms current under a series regulator that passes `needed` of what is `available` at its setpoint.
///
/// Equation: between D I_rms and √D I_rms, where D = needed / available mean current, I_rms the winding's current when
/// everything passes. √D is exact for whole cycles skipped; a regulator that fires late in each cycle comes lower.
///
/// Valid for 0 ≤ D ≤ 1, held there. Source: derived; the simulator's cases lie between the two.
#[must_use]
pub fn series_regulated_rms(available: &Output, needed: Amps) -> Range<Amps> {
    let share = share_needed(available.dc, needed).0;
    Range {
        low: available.winding_rms * share,
        high: available.winding_rms * share.sqrt(),
    }
}

/// The winding's heat under a series regulator: that of [`series_regulated_rms`]. `available` is the output at the
/// setpoint.
#[must_use]
pub fn series_regulated_heat(winding: &Winding, available: &Output, needed: Amps) -> Range<Watts> {
    let rms = series_regulated_rms(available, needed);
    Range {
        low: copper_loss(winding, rms.low),
        high: copper_loss(winding, rms.high),
    }
}

/// The winding's heat under a shunt regulator, which shorts the winding for the time the load does not need it.
///
/// Equation: P = m R [D I_rms² + (1 − D) I_sc²], where m phases; R ohms of one; D = needed / available mean current;
/// I_rms the winding's current into the bus, I_sc shorted.
///
/// Valid for 0 ≤ D ≤ 1, held there; approximate: −5 % to +37 % against the simulator's cases. Worst with no load.
/// Source: derived, the two states weighed by their time.
#[must_use]
pub fn shunt_regulated_heat(
    winding: &Winding,
    available: &Output,
    shorted: Amps,
    needed: Amps,
) -> Watts {
    let share = share_needed(available.dc, needed);
    copper_loss(winding, available.winding_rms) * share
        + copper_loss(winding, shorted) * share.rest()
}

/// How far [`shunt_regulated_heat`] was found from the simulator's cases: heat computed is between these shares of the
/// true heat.
pub const SHUNT_HEAT_SPREAD: Range<Fraction> = Range {
    low: Fraction(0.95),
    high: Fraction(1.37),
};
