//! Standing still: how long until the engine no longer cranks, and when to
//! recharge before that.

use super::Battery;
use crate::quantity::{Amps, Celsius, Fraction, Hours};

/// State of charge at which a stored battery is to be recharged: below, sulphate
/// hardens on the plates. Common practice, no single source (70 to 80 %).
pub const RECHARGE_AT: Fraction = Fraction(0.7);

/// Intervals of the storage integral.
const INTERVALS: u32 = 200;

impl Battery {
    /// Time in which a stored battery falls from one state of charge to another.
    ///
    /// ```text
    ///          s0
    /// t = C_max ∫  ds / (I_par + I_g(E(s, T), T))
    ///          s1
    /// ```
    /// by Simpson's rule in 200 intervals; where I_par parasitic draw (A), I_g
    /// gassing current at the rested volts E (A), C_max greatest capacity (Ah).
    /// Valid for: rested batteries at a steady temperature.
    /// Source: charge balance.
    ///
    /// Zero when it is at or below the lower one already; none when it never gets
    /// there, because what the parasitic draw brings in (it is negative for a
    /// maintaining charger) outweighs the self-discharge on the way.
    #[must_use]
    pub fn storage_time(
        &self,
        from: Fraction,
        to: Fraction,
        parasitic: Amps,
        air: Celsius,
    ) -> Option<Hours> {
        let (from, to) = (from.0.min(1.0), to.0.max(0.0));
        if from <= to {
            return Some(Hours::ZERO);
        }
        let climate = self.climate(air);
        let step = (from - to) / f64::from(INTERVALS);
        let mut sum = 0.0;
        for i in 0..=INTERVALS {
            let loss = parasitic + climate.self_discharge(Fraction(to + step * f64::from(i)));
            if loss <= Amps::ZERO {
                return None;
            }
            let weight = if i == 0 || i == INTERVALS {
                1.0
            } else {
                f64::from(2 + 2 * (i % 2))
            };
            sum += weight / loss.0;
        }
        Some(Hours(self.cmax().0 * sum * step / 3.0))
    }

    /// Time until a stored battery is to be recharged: at [`RECHARGE_AT`], or at
    /// the lowest charge it still starts from when that is higher.
    #[must_use]
    pub fn recharge_after(
        &self,
        from: Fraction,
        start_floor: Fraction,
        parasitic: Amps,
        air: Celsius,
    ) -> Option<Hours> {
        self.storage_time(from, RECHARGE_AT.max(start_floor), parasitic, air)
    }
}
