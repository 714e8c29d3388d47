//! The terminals of a battery in one state: current against volts, and back.

use super::constants as k;
use crate::quantity::{Amps, Ohms, Volts};

/// Index of the discharge constants in a pair.
const DISCHARGE: usize = 0;
/// Index of the charge constants in a pair.
const CHARGE: usize = 1;

/// Current through a battery's terminals; positive charges.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct BatteryCurrent {
    /// At the terminals: the sum of the two below.
    pub total: Amps,
    /// Through the main branch: what changes the charge held.
    pub main: Amps,
    /// Lost to gas and self-discharge; never negative.
    pub gas: Amps,
}

/// One battery at one temperature in one state, ready for many voltages.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Terminals {
    pub(super) cells: f64,
    /// Electromotive force, V per cell.
    pub(super) emf: f64,
    /// Resistance on discharge and on charge, ohm per cell.
    pub(super) resistance: [f64; 2],
    /// Polarisation on discharge and on charge, V per cell.
    pub(super) polarisation: [f64; 2],
    /// Current at which half of the polarisation acts, A.
    pub(super) half: f64,
    /// Gassing current at 2.23 V, A.
    pub(super) gassing: f64,
}

/// Gassing and self-discharge current.
///
/// ```text
/// I_g = g C20 exp(11 (min(v, 3) − 2.23) + 0.06 ΔT)
/// ```
/// where v cell voltage (V), g the chemistry's gassing current (A/Ah), ΔT air
/// less 25 °C; `at_reference` is g C20 exp(0.06 ΔT).
/// Valid for: cell voltages from rest to about 2.6 V; constant above 3 V.
/// Source: Schiffer et al., Journal of Power Sources 168 (2007) 66, through
/// transcriptions.
pub(super) fn gas(at_reference: f64, cell_volts: f64) -> f64 {
    at_reference
        * (k::GASSING_PER_VOLT * (cell_volts.min(k::GASSING_CEILING) - k::GASSING_REFERENCE)).exp()
}

impl Terminals {
    /// The current at a voltage across the terminals. Strictly increasing and
    /// continuous in the voltage, finite for every finite one.
    ///
    /// ```text
    /// I = I_m + I_g
    /// v = e + Rt I_m + p I_m/(Ik + |I_m|),   Rt = R discharging, R + Kc charging
    /// ```
    /// solved for I_m with x = v − e, a = |x|, b = Rt Ik + p − a, q = √(b² + 4 Rt a Ik):
    /// ```text
    ///         ⎧ 2 a Ik/(b + q)     b > 0
    /// |I_m| = ⎨                              with the sign of x
    ///         ⎩ (q − b)/(2 Rt)     else
    /// ```
    /// where v cell voltage, e electromotive force, p polarisation, Ik its half
    /// current, I_g the gassing current.
    /// Valid for: any volts. Source: derived (closed inverse of the main branch).
    #[must_use]
    pub fn current(&self, bus: Volts) -> BatteryCurrent {
        let cell_volts = bus.0 / self.cells;
        let (main, gas) = (self.main(cell_volts), gas(self.gassing, cell_volts));
        BatteryCurrent {
            total: Amps(main + gas),
            main: Amps(main),
            gas: Amps(gas),
        }
    }

    /// The current, and the resistance a small change of it meets: dV/dI.
    ///
    /// ```text
    /// dI/dv = 1/(Rt + p Ik/(Ik + |I_m|)²) + 11 I_g      per cell; no gas term above 3 V
    /// ```
    /// where the symbols are those of [`current`](Terminals::current).
    /// Valid for: any volts; at zero main current it is the charging side's.
    /// Source: derived.
    #[must_use]
    pub fn current_and_resistance(&self, bus: Volts) -> (BatteryCurrent, Ohms) {
        let current = self.current(bus);
        let cell_volts = bus.0 / self.cells;
        (
            current,
            Ohms(self.cells / self.slope(cell_volts, current.main.0, current.gas.0)),
        )
    }

    /// Volts across the terminals at a current: the inverse of
    /// [`current`](Terminals::current), to rounding.
    ///
    /// The main branch alone bounds it from both sides: without gas the volts
    /// are too high; with the gas of that bound, too low. Between, Newton's
    /// method with halving where it does not close in.
    #[must_use]
    pub fn volts(&self, current: Amps) -> Volts {
        let mut high = self.main_volts(current.0);
        let mut low = self.main_volts(current.0 - gas(self.gassing, high));
        let mut guess = low;
        let mut last = f64::INFINITY;
        // Halving alone closes the bracket to rounding well within this count.
        for _ in 0..128 {
            let (main, gas) = (self.main(guess), gas(self.gassing, guess));
            let excess = main + gas - current.0;
            if excess > 0.0 {
                high = guess;
            } else {
                low = guess;
            }
            let newton = guess - excess / self.slope(guess, main, gas);
            let closes = newton > low && newton < high && excess.abs() <= 0.5 * last;
            last = excess.abs();
            let next = if closes { newton } else { 0.5 * (low + high) };
            let settled = (newton - guess).abs() <= 4.0 * f64::EPSILON * guess.abs();
            if settled || high - low <= 2.0 * f64::EPSILON * high.abs() {
                break;
            }
            guess = next;
        }
        Volts(guess * self.cells)
    }

    /// Volts at no terminal current: just below the electromotive force, by what
    /// drives the self-discharge.
    #[must_use]
    pub fn open_circuit(&self) -> Volts {
        self.volts(Amps::ZERO)
    }

    /// Electromotive force of the whole battery: where the main branch carries nothing.
    #[must_use]
    pub fn emf(&self) -> Volts {
        Volts(self.emf * self.cells)
    }

    /// Volts across the terminals at a current of the main branch alone, gas left out: the
    /// closed form of the equation at [`current`](Terminals::current). A near bound of
    /// [`volts`](Terminals::volts) from above.
    #[must_use]
    pub fn main_branch_volts(&self, main: Amps) -> Volts {
        Volts(self.main_volts(main.0) * self.cells)
    }

    /// Main current at a cell voltage, A.
    fn main(&self, cell_volts: f64) -> f64 {
        let x = cell_volts - self.emf;
        let side = if x >= 0.0 { CHARGE } else { DISCHARGE };
        let (r, p) = (self.resistance[side], self.polarisation[side]);
        let a = x.abs();
        let b = r * self.half + p - a;
        let q = (b * b + 4.0 * r * a * self.half).sqrt();
        let size = if b > 0.0 {
            2.0 * a * self.half / (b + q)
        } else {
            (q - b) / (2.0 * r)
        };
        size.copysign(x)
    }

    /// Cell voltage at a main current, V.
    fn main_volts(&self, main: f64) -> f64 {
        let side = if main > 0.0 { CHARGE } else { DISCHARGE };
        let (r, p) = (self.resistance[side], self.polarisation[side]);
        self.emf + r * main + p * main / (self.half + main.abs())
    }

    /// dI/dv of one cell at a cell voltage whose currents are known, A/V.
    fn slope(&self, cell_volts: f64, main: f64, gas: f64) -> f64 {
        let side = if cell_volts >= self.emf {
            CHARGE
        } else {
            DISCHARGE
        };
        let near = self.half + main.abs();
        let branch = self.resistance[side] + self.polarisation[side] * self.half / (near * near);
        let bubbling = if cell_volts < k::GASSING_CEILING {
            k::GASSING_PER_VOLT * gas
        } else {
            0.0
        };
        1.0 / branch + bubbling
    }
}
