//! A machine put away: how long it still cranks, and when to recharge it.

use super::ruling::Ruling;
use crate::battery::{Charge, RECHARGE_AT};
use crate::build::Build;
use crate::ledger::Machine;
use crate::quantity::{Amps, Celsius, Days, Fraction};
use serde::Serialize;

/// A battery put away at the build's air temperature.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
pub struct Storage {
    /// Charge it is put away with: where it settles, or full.
    pub from_soc: Fraction,
    /// Drawn with the key off.
    pub drain_a: Amps,
    /// Days until the reserve is reached and it no longer cranks, or the user's own reserve is
    /// broken; none if never.
    pub days_to_reserve: Option<Days>,
    /// Days until it should be recharged: at 70 % of charge, or at the reserve if that is higher.
    pub days_to_recharge: Option<Days>,
    /// Temperature at which its acid freezes when the reserve is reached.
    pub freezes_c: Celsius,
}

/// A machine put away after its settled shift, or full.
#[must_use]
pub fn storage(build: &Build, machine: &Machine, ruling: &Ruling) -> Storage {
    let from = ruling
        .settles
        .map_or(Charge::FULL, |(charge, _)| charge)
        .soc;
    let drain: Amps = build
        .accessories
        .iter()
        .map(|a| f64::from(a.count) * a.parked)
        .sum();
    let reserve = ruling.reserve.soc.min(Fraction::ONE);
    let days = |to: Fraction| {
        machine
            .battery
            .storage_time(from, to, drain, build.air.value)
            .map(Days::from)
    };
    Storage {
        from_soc: from,
        drain_a: drain,
        days_to_reserve: days(reserve),
        days_to_recharge: days(RECHARGE_AT.max(reserve)),
        freezes_c: machine.battery.freezing_point(reserve),
    }
}
