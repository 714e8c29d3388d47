//! One step in time.

use super::machine::{Leg, Machine};
use crate::battery::Charge;
use crate::bus::Flow;
use crate::quantity::{AmpHours, Fraction, Hours};

/// What one step did.
#[derive(Clone, Copy, Debug)]
pub struct Stride {
    /// Length.
    pub time: Hours,
    /// Flow at its beginning.
    pub first: Flow,
    /// Flow at its predicted end.
    pub second: Flow,
    /// Charge at its beginning.
    pub before: Charge,
    /// Charge at its end.
    pub after: Charge,
    /// What the battery could not store because it was full; what it could not give because it
    /// was empty, below zero.
    pub spilled: AmpHours,
}

impl Machine {
    /// Advances the battery by one step in a leg, by Heun's method; the depletion by its exact
    /// exponential toward the mean of its target at both ends.
    ///
    /// ```text
    /// s₁ = s + h I(s,d)/C,   s' = s + h (I(s,d) + I(s₁,d₁)) / 2C,   d' = d̄ + (d − d̄) e^(−h/τ)
    /// ```
    /// where s charge, d depletion, I mean main current over the coincidences, C greatest
    /// capacity, h step, d̄ mean target. Valid for steps of ten minutes (error measured there).
    /// Source: Heun's method, textbook.
    #[must_use]
    pub fn stride(&self, leg: &Leg, charge: Charge, time: Hours) -> Stride {
        let bus = &self.connected[leg.wired].bus;
        let capacity = self.battery.cmax();
        let move_on = |main: crate::quantity::Amps, target: Fraction| -> (Charge, f64) {
            let raw = charge.soc.0 + (main * time) / capacity;
            let soc = raw.clamp(0.0, 1.0);
            let depletion = self.climate.depletion_after(charge.depletion, target, time);
            (
                Charge {
                    soc: Fraction(soc),
                    depletion,
                },
                raw - soc,
            )
        };
        let first = bus.flow(&self.climate, charge, self.cells);
        let (predicted, _) = move_on(first.main, first.depletion);
        let second = bus.flow(&self.climate, predicted, self.cells);
        let target = Fraction(0.5 * (first.depletion.0 + second.depletion.0));
        let (after, over) = move_on(0.5 * (first.main + second.main), target);
        Stride {
            time,
            first,
            second,
            before: charge,
            after,
            spilled: over * capacity,
        }
    }

    /// Number of steps a leg is cut into, and their length.
    #[must_use]
    pub fn steps_of(leg: &Leg, longest: Hours) -> (u32, Hours) {
        let count = (leg.time / longest).ceil().clamp(1.0, 1e6);
        (count as u32, leg.time / count)
    }
}
