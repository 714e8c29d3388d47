//! A constant current taken from the battery until it is empty.

use super::climate::Charge;
use super::{Battery, terminals::Terminals};
use crate::quantity::{AmpHours, Amps, Celsius, Fraction, Hours, Volts};

/// Steps in which a rundown is followed.
const STEPS: u32 = 400;

/// Where a rundown ended.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Rundown {
    /// How long it lasted.
    pub time: Hours,
    /// Charge taken at the terminals.
    pub taken: AmpHours,
    /// Volts at the end.
    pub volts: Volts,
    /// State at the end.
    pub charge: Charge,
}

impl Battery {
    /// A constant discharge until the volts fall to a limit or the charge is spent.
    /// None when nothing is drawn.
    ///
    /// Four hundred equal steps over the longest time the charge could last; the
    /// depletion follows its exact exponential, the gassing current is that of
    /// each step's start; the crossing is found by halving the last step.
    #[must_use]
    pub fn rundown(&self, from: Charge, draw: Amps, until: Volts, air: Celsius) -> Option<Rundown> {
        if draw <= Amps::ZERO || !draw.is_finite() {
            return None;
        }
        let climate = self.climate(air);
        let target = climate.depletion_target(-draw);
        let soc = from.soc.clamp(Fraction::ZERO, Fraction::ONE);
        let step = self.cmax() * soc / draw / f64::from(STEPS);
        // State a time after another: the main branch gives the draw and the gas.
        let later = |charge: Charge, terminals: &Terminals, time: Hours| {
            let main = terminals.current(terminals.volts(-draw)).main;
            Charge {
                soc: (charge.soc + Fraction(main * time / self.cmax())).max(Fraction::ZERO),
                depletion: climate.depletion_after(charge.depletion, target, time),
            }
        };
        let mut charge = Charge { soc, ..from };
        let mut time = Hours::ZERO;
        for _ in 0..STEPS {
            let terminals = climate.at(charge);
            if terminals.volts(-draw) <= until {
                break;
            }
            let whole = later(charge, &terminals, step);
            let at = |part: f64| later(charge, &terminals, step * part);
            if climate.at(whole).volts(-draw) > until {
                charge = whole;
                time += step;
                continue;
            }
            let (mut above, mut below) = (0.0, 1.0);
            for _ in 0..40 {
                let middle = 0.5 * (above + below);
                if climate.at(at(middle)).volts(-draw) > until {
                    above = middle;
                } else {
                    below = middle;
                }
            }
            charge = at(below);
            time += step * below;
            break;
        }
        Some(Rundown {
            time,
            taken: draw * time,
            volts: climate.at(charge).volts(-draw),
            charge,
        })
    }
}
