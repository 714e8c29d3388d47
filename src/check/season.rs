//! The verdict over a range of air temperatures.

use super::answer::Verdict;
use super::error::SolveError;
use super::ruling::{reserve, rule_on};
use crate::battery::Charge;
use crate::build::Build;
use crate::ledger::Machine;
use crate::quantity::{AmpHours, Celsius, Fraction, Kelvins, Volts};
use serde::Serialize;

/// The temperatures looked at.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Range {
    /// Coldest.
    pub from: Celsius,
    /// Hottest.
    pub to: Celsius,
    /// Between two of them.
    pub step: Kelvins,
}

impl Default for Range {
    /// From −20 °C to 40 °C, every five kelvins.
    fn default() -> Range {
        Range {
            from: Celsius(-20.0),
            to: Celsius(40.0),
            step: Kelvins(5.0),
        }
    }
}

/// The verdicts over the season.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Season {
    /// Version of these names.
    pub format: u32,
    /// Name of the build.
    pub build: String,
    /// One row a temperature, coldest first.
    pub rows: Vec<SeasonRow>,
}

/// The verdict at one temperature.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct SeasonRow {
    /// Air temperature.
    pub air_c: Celsius,
    /// The verdict.
    pub verdict: Verdict,
    /// Shifts that hold the reserve; none when it keeps up.
    pub shifts_carried: Option<u32>,
    /// Ah lacking each shift; none when no charging can help.
    pub lacks_ah: Option<AmpHours>,
    /// Charge at which each shift begins once settled.
    pub settles_soc: Option<Fraction>,
    /// The reserve.
    pub reserve_soc: Fraction,
    /// Starter's volts over the least, at the end of its starts: from the settled charge, or from
    /// full where it does not settle.
    pub crank_margin_v: Option<Volts>,
    /// Temperature at which the battery freezes at its lowest charge in the settled shift, or at
    /// the reserve.
    pub freezes_c: Celsius,
}

/// Rules on a build at every temperature of a range.
///
/// # Errors
/// [`SolveError`]: there is no answer at one of them.
pub fn season(build: &Build, range: Range) -> Result<Season, SolveError> {
    let count = ((range.to.0 - range.from.0) / range.step.0.max(0.1) + 1e-9)
        .floor()
        .max(0.0) as u32;
    let rows = (0..=count.min(200))
        .map(|k| row(build, range.from.warmer(f64::from(k) * range.step)))
        .collect::<Result<_, _>>()?;
    Ok(Season {
        format: super::FORMAT,
        build: build.name.clone(),
        rows,
    })
}

fn row(build: &Build, air: Celsius) -> Result<SeasonRow, SolveError> {
    let mut build = build.clone();
    build.air.value = air;
    let machine = Machine::new(&build).ok_or(SolveError::NoBattery)?;
    let ruling = rule_on(&build, &machine)?;
    let from = ruling.settles.map_or(Charge::FULL, |(charge, _)| charge);
    let margin = build.starter.as_ref().map(|starter| {
        machine
            .battery
            .start_margin(Charge::rested(from.soc), &starter.asks(), air)
            .volts
    });
    let kept = reserve(&build, &machine).soc.min(Fraction::ONE);
    let lowest = ruling.settles.map_or(kept, |(_, lowest)| lowest);
    Ok(SeasonRow {
        air_c: air,
        verdict: ruling.verdict,
        shifts_carried: ruling.shifts_carried,
        lacks_ah: ruling.lacks,
        settles_soc: ruling.settles.map(|(charge, _)| charge.soc),
        reserve_soc: kept,
        crank_margin_v: margin,
        freezes_c: machine.battery.freezing_point(lowest),
    })
}
