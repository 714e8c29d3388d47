//! The operating point: the one voltage at which the currents on the bus balance.

use super::supply::{Side, Supply};
use crate::battery::Terminals;
use crate::load::{At, LoadSum};
use crate::quantity::{Amps, Volts};

/// Lowest bus volts looked at, a cell: a battery this low delivers what it can.
pub(super) const LEAST_CELL_VOLTS: f64 = 0.05;
/// Steps of the root search; halving alone closes the widest bracket within it.
const MOST_STEPS: usize = 80;
/// Imbalance from which one more of Newton's steps ends the search, A: it squares what is left.
const BALANCED: f64 = 1e-6;

/// Where a regulator or the zero of the battery current divides the bus voltages.
#[derive(Clone, Copy, Debug)]
pub(super) struct Boundary {
    /// Volts.
    pub volts: f64,
    /// What may be drawn there just above: sources less battery, A.
    pub above: f64,
    /// What may be drawn there just below, A; greater where a regulator holds.
    pub below: f64,
    /// Volts as the loads take them.
    pub at: At,
}

/// Everything on the bus at one instant but the loads.
#[derive(Clone, Copy, Debug)]
pub(super) struct Bus<'a> {
    pub supply: &'a Supply,
    pub terminals: &'a Terminals,
    pub filaments: bool,
    /// Volts bracket of the whole search.
    pub low: f64,
    pub high: f64,
}

/// The boundaries of a bus, highest first.
pub(super) struct Boundaries<'b> {
    bus: &'b Bus<'b>,
    /// Next of the supply's setpoints.
    setpoint: usize,
    /// The voltage an added current holds where no regulator does.
    ceiling: Option<f64>,
    /// The battery's own voltage.
    rest: Option<f64>,
}

impl Iterator for Boundaries<'_> {
    type Item = Boundary;

    fn next(&mut self) -> Option<Boundary> {
        if let Some(volts) = self.ceiling.take() {
            return Some(self.bus.boundary(volts, true));
        }
        let held = self.bus.supply.setpoints().get(self.setpoint).copied();
        match (held, self.rest) {
            (Some(held), rest) if rest.is_none_or(|rest| held >= rest) => {
                self.setpoint += 1;
                Some(self.bus.boundary(held, true))
            }
            (_, Some(rest)) => {
                self.rest = None;
                Some(self.bus.boundary(rest, false))
            }
            (_, None) => None,
        }
    }
}

/// A draw on the bus as a function of volts: amps and slope.
pub(super) trait Drawn {
    fn drawn(&self, volts: f64, filaments: bool) -> (f64, f64);
}

impl Drawn for LoadSum {
    fn drawn(&self, volts: f64, filaments: bool) -> (f64, f64) {
        let at = At::new(Volts(volts), filaments);
        (self.current(at).0, self.slope(at))
    }
}

impl<'a> Bus<'a> {
    pub fn new(
        supply: &'a Supply,
        terminals: &'a Terminals,
        filaments: bool,
        cells: u32,
    ) -> Bus<'a> {
        let cells = f64::from(cells);
        let (low, high) = (
            LEAST_CELL_VOLTS * cells,
            super::supply::MOST_CELL_VOLTS * cells,
        );
        Bus {
            supply,
            terminals,
            filaments,
            low,
            high,
        }
    }

    /// What may be drawn at some volts, sources less battery, and its slope.
    fn spare(&self, volts: f64, side: Side) -> (f64, f64) {
        let (give, give_slope) = self.supply.give(volts, side);
        let (battery, resistance) = self.terminals.current_and_resistance(Volts(volts));
        (give - battery.total.0, give_slope - 1.0 / resistance.0)
    }

    /// Setpoints and the battery's own voltage, highest first, each worked out when it is asked for.
    pub fn boundaries(&self) -> Boundaries<'_> {
        let rest = self.terminals.emf().0;
        let ceiling = self.supply.setpoints().is_empty() && self.supply.extra_holds();
        Boundaries {
            bus: self,
            setpoint: 0,
            ceiling: ceiling.then(|| self.supply.ceiling_with_extra()),
            rest: (rest > self.low && rest < self.high).then_some(rest),
        }
    }

    fn boundary(&self, volts: f64, holds: bool) -> Boundary {
        let battery = self.terminals.current(Volts(volts)).total.0;
        let below = self.supply.give(volts, Side::Below).0 - battery;
        let above = if holds {
            self.supply.give(volts, Side::Above).0 - battery
        } else {
            below
        };
        Boundary {
            volts,
            above,
            below,
            at: At::new(Volts(volts), self.filaments),
        }
    }

    /// Whether a draw leaves the bus at or above some volts.
    pub fn holds(&self, draw: &LoadSum, volts: f64) -> bool {
        draw.current(At::new(Volts(volts), self.filaments)).0 <= self.spare(volts, Side::Below).0
    }

    /// The balance of a draw between two voltages where nothing switches: Newton's steps, kept
    /// inside a bracket that halves when they do not close in.
    ///
    /// ```text
    /// f(V) = I_source(V) − I_load(V) − I_battery(V) = 0
    /// ```
    /// falls with V wherever constant powers do not outweigh the battery's own slope, so it has
    /// one root there. Source: Kirchhoff's current law. If the draw exceeds what source and
    /// battery can give even at the lowest volts, the lowest volts are the answer.
    pub fn balance(&self, draw: &impl Drawn, low: f64, high: f64, guess: f64) -> f64 {
        let (mut lo, mut hi) = (low, high);
        let mut volts = if guess > lo && guess < hi {
            guess
        } else {
            0.5 * (lo + hi)
        };
        let mut last = f64::INFINITY;
        for _ in 0..MOST_STEPS {
            let (spare, spare_slope) = self.spare(volts, Side::Below);
            let (drawn, drawn_slope) = draw.drawn(volts, self.filaments);
            let excess = spare - drawn;
            if excess > 0.0 {
                lo = volts;
            } else {
                hi = volts;
            }
            let slope = spare_slope - drawn_slope;
            let newton = volts - excess / slope;
            if excess.abs() < BALANCED || hi - lo < 1e-13 * hi {
                return if newton > low && newton < high {
                    newton
                } else {
                    volts
                };
            }
            let closes = slope < 0.0 && newton > lo && newton < hi && excess.abs() <= 0.5 * last;
            last = excess.abs();
            volts = if closes { newton } else { 0.5 * (lo + hi) };
        }
        volts
    }

    /// A first guess of the bus volts: the battery's, carrying what sources and loads leave it, both
    /// taken along their tangents at its rest.
    pub fn guess(&self, draw: &impl Drawn) -> f64 {
        let rest = self.terminals.emf().0;
        let (give, give_slope) = self.supply.give(rest, Side::Below);
        let (drawn, drawn_slope) = draw.drawn(rest, self.filaments);
        let (spare, slope) = (give - drawn, give_slope - drawn_slope);
        let carrying = |volts: f64| {
            let left = Amps(spare + slope * (volts - rest));
            self.terminals.main_branch_volts(left).0
        };
        carrying(carrying(carrying(rest)))
    }

    /// The operating point of one draw, whatever switches on the way.
    pub fn operating_point(&self, draw: &impl Drawn) -> f64 {
        let (mut low, mut high) = (self.low, self.high);
        for boundary in self.boundaries() {
            let drawn = draw.drawn(boundary.volts, self.filaments).0;
            if drawn <= boundary.above {
                low = boundary.volts;
                break;
            }
            if drawn <= boundary.below {
                return boundary.volts;
            }
            high = boundary.volts;
        }
        self.balance(draw, low, high, self.guess(draw))
    }
}
