//! Starting the engine: how low the starter's volts fall, and how much charge
//! must be kept so that the next cold start works.

use super::climate::{Charge, Climate};
use super::tables::cranking_factor;
use super::{Battery, constants as k};
use crate::quantity::{AmpHours, Amps, Celsius, Fraction, Hours, Kelvins, Ohms, Volts};

/// Least charge kept whatever the equations say. Own choice: the resistance of
/// nearly empty batteries rises more than the equations hold.
pub const LEAST_CHARGE: Fraction = Fraction(0.2);

/// The acid must freeze this much below the air. Own choice.
pub const FREEZING_MARGIN: Kelvins = Kelvins(5.0);

/// Starter volts per cell that still start, at every temperature: 9.0 V per 12 V. Own choice, under
/// the 9.1 to 9.6 V load tests ask above freezing (US Army TM 5-4210-230-14&P-1), and the 9.0 V left
/// after 30 s in the cold test of DIN 43539-2 at -18 °C (from memory). The 7.2 V of SAE J537 are where
/// the rating of a battery ends, not what a starter needs.
const STARTS_PER_CELL: f64 = 1.5;

/// What the starter asks of the battery.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Starter {
    /// Current while cranking at 27 °C; rises in the cold.
    pub draw: Amps,
    /// Length of one attempt.
    pub time: Hours,
    /// Attempts in a row.
    pub attempts: u32,
    /// Rest between two attempts.
    pub rest: Hours,
    /// Resistance of cables and contacts between battery and starter.
    pub cable: Ohms,
    /// Least volts at the starter; without it 9.0 V per six cells.
    pub least: Option<Volts>,
}

impl Starter {
    /// Three attempts of 5 s, 10 s apart, through a cable without resistance.
    #[must_use]
    pub fn new(draw: Amps) -> Starter {
        Starter {
            draw,
            time: Hours::from_seconds(5.0),
            attempts: 3,
            rest: Hours::from_seconds(10.0),
            cable: Ohms::ZERO,
            least: None,
        }
    }

    /// Current while cranking at an air temperature.
    ///
    /// ```text
    /// I(T) = I(27 °C) · {1, 1.55, 2.10, 3.50} at {27, 0, −18, −29} °C
    /// ```
    /// straight lines between, the end's value beyond.
    /// Valid for: -29..27 °C. Source: printed table of the power an engine needs
    /// to be cranked; used as a ratio of currents, which is own choice.
    #[must_use]
    pub fn draw_at(&self, air: Celsius) -> Amps {
        self.draw * cranking_factor(air)
    }

    /// Least volts at the starter with which it starts: one figure for every temperature.
    ///
    /// ```text
    /// V = k n + I R
    /// ```
    /// where V volts a starter needs (V), k n its countervoltage at the speed n that starts the
    /// engine, I its current (A), R its own resistance (Ω). In the cold I is greater and n no less:
    /// V does not fall, so neither does the limit. A limit that fell with the cold would let an
    /// engine start at -11 °C that does not at -10 °C.
    /// Valid for: direct-current starters. Source: law of the direct-current motor; that its rise
    /// with I is left out, because R is not on a label, is own choice.
    #[must_use]
    pub fn least_for(&self, cells: u32) -> Volts {
        self.least
            .unwrap_or(Volts(STARTS_PER_CELL * f64::from(cells)))
    }
}

/// The end of the last of a row of starts.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Cranked {
    /// Volts at the starter.
    pub starter: Volts,
    /// Volts at the battery.
    pub battery: Volts,
    /// State the battery is left in.
    pub charge: Charge,
}

/// What keeps the charge from going lower.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Binds {
    /// Below, the starter's volts are too low.
    Cranking,
    /// Below, the acid freezes too near the air's temperature.
    Freezing,
    /// Below [`LEAST_CHARGE`] the equations are not trusted.
    LeastCharge,
}

/// Lowest charge from which the engine still starts.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum StartFloor {
    /// It starts down to this.
    Down {
        /// Lowest state of charge.
        to: Fraction,
        /// Why not lower.
        binds: Binds,
    },
    /// It does not start even when full.
    Cannot {
        /// Why not: cranking or freezing.
        binds: Binds,
        /// Volts at the starter, battery full.
        starter: Volts,
        /// Volts it needs.
        least: Volts,
    },
}

/// How far one state is from not starting.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct StartMargin {
    /// Volts at the starter over the least, at the end of the last attempt.
    pub volts: Volts,
    /// Charge over the floor; negative: does not start. None where it cannot
    /// start even when full.
    pub charge: Option<AmpHours>,
}

impl Battery {
    /// A row of starts from one state.
    ///
    /// ```text
    /// each attempt:  d ← d∞ + (d − d∞) exp(−t/τ),   s ← max(s − I t/C_max, 0)
    ///                V = max(v(−I; s, d, T) − I R_cable, 0)
    /// each rest:     d ← d exp(−t_rest/τ)
    /// ```
    /// where I starter current (A), d∞ its depletion target, τ 0.5 h, V volts at
    /// the starter at the attempt's end.
    /// Valid for: attempts short against τ. Source: derived from the battery's states.
    #[must_use]
    pub fn crank(&self, charge: Charge, starter: &Starter, air: Celsius) -> Cranked {
        cranked(&self.climate(air), charge, starter, starter.draw_at(air))
    }

    /// The lowest charge from which a row of starts still leaves the starter its
    /// least volts and the acid does not come near freezing; at least
    /// [`LEAST_CHARGE`]. Found by halving; both conditions ease as charge rises.
    #[must_use]
    pub fn start_floor(&self, starter: &Starter, air: Celsius) -> StartFloor {
        let climate = self.climate(air);
        let (draw, least) = (starter.draw_at(air), starter.least_for(self.cells()));
        let volts =
            |soc: f64| cranked(&climate, Charge::rested(Fraction(soc)), starter, draw).starter;
        let starts = |soc: f64| volts(soc) >= least;
        let thawed = |soc: f64| self.freezing_point(Fraction(soc)).warmer(FREEZING_MARGIN) < air;
        let cannot = |binds| StartFloor::Cannot {
            binds,
            starter: volts(1.0),
            least,
        };
        let Some(cranking) = lowest(starts) else {
            return cannot(Binds::Cranking);
        };
        let Some(freezing) = lowest(thawed) else {
            return cannot(Binds::Freezing);
        };
        let (to, binds) = if cranking >= freezing {
            (cranking, Binds::Cranking)
        } else {
            (freezing, Binds::Freezing)
        };
        if to < LEAST_CHARGE.0 {
            return StartFloor::Down {
                to: LEAST_CHARGE,
                binds: Binds::LeastCharge,
            };
        }
        StartFloor::Down {
            to: Fraction(to),
            binds,
        }
    }

    /// How far a state is from not starting, in volts and in charge.
    #[must_use]
    pub fn start_margin(&self, charge: Charge, starter: &Starter, air: Celsius) -> StartMargin {
        let volts = self.crank(charge, starter, air).starter - starter.least_for(self.cells());
        let charge = match self.start_floor(starter, air) {
            StartFloor::Down { to, .. } => Some(self.cmax() * (charge.soc - to)),
            StartFloor::Cannot { .. } => None,
        };
        StartMargin { volts, charge }
    }
}

/// A row of starts at a current; see [`Battery::crank`].
fn cranked(climate: &Climate, from: Charge, starter: &Starter, draw: Amps) -> Cranked {
    let target = climate.depletion_target(-draw);
    let taken = draw * starter.time / climate.capacity_greatest();
    let mut charge = from;
    // A battery is empty long before so many attempts.
    let attempts = starter.attempts.clamp(1, k::ATTEMPTS_MOST);
    for attempt in 0..attempts {
        if attempt > 0 {
            charge.depletion =
                climate.depletion_after(charge.depletion, Fraction::ZERO, starter.rest);
        }
        charge.depletion = climate.depletion_after(charge.depletion, target, starter.time);
        charge.soc = Fraction((charge.soc.0 - taken).max(0.0));
    }
    // what the battery cannot drive through itself and the cable leaves no volts, not less than none
    let battery = climate.at(charge).volts(-draw).max(Volts::ZERO);
    Cranked {
        starter: (battery - draw * starter.cable).max(Volts::ZERO),
        battery,
        charge,
    }
}

/// The lowest of 0..1 that passes a test which everything above it passes too;
/// none when even 1 fails.
fn lowest(passes: impl Fn(f64) -> bool) -> Option<f64> {
    if passes(0.0) {
        return Some(0.0);
    }
    if !passes(1.0) {
        return None;
    }
    let (mut fails, mut works) = (0.0, 1.0);
    for _ in 0..50 {
        let middle = 0.5 * (fails + works);
        if passes(middle) {
            works = middle;
        } else {
            fails = middle;
        }
    }
    Some(works)
}
