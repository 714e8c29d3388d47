//! The choice: the thinnest wire and the smallest fuse that hold all three constraints.
//!
//! 1. The fuse carries the load at four fifths of its rating, and does not open at a surge.
//! 2. The fuse is not above what the wire may carry where it lies.
//! 3. The volts lost, hot, are not above those allowed.

use super::ampacity::{Laid, Place};
use super::answer::SurgeRow;
use super::conductor::{Conductor, Gauge};
use super::demand::Demand;
use super::fuse::Fuse;
use super::surge::Surge;
use super::tables::{Ground, Tables};
use crate::build::State;
use crate::quantity::{Amps, Celsius, Fraction, Hours, Ohms, Volts};

/// Rounds in which current, temperature and volts lost settle.
const ROUNDS: usize = 60;
/// Change of the volts lost that counts as none.
const STILL: f64 = 1e-12;

/// A wire with its current settled.
#[derive(Clone, Debug)]
pub(super) struct Settled {
    /// The wire.
    pub(super) wire: Conductor,
    /// Worst steady current.
    pub(super) amps: Amps,
    /// The state it is met in.
    pub(super) state: Option<State>,
    /// What the table lets the wire carry by itself at 30 °C.
    pub(super) table: Amps,
    /// What it may carry where it lies.
    pub(super) allows: Amps,
    /// Temperature of its copper at that current.
    pub(super) copper: Celsius,
    /// Its resistance then.
    pub(super) resistance: Ohms,
    /// Volts lost then.
    pub(super) lost: Volts,
    /// What the table's figure rests on.
    pub(super) ground: Ground,
}

/// A surge that decided on the fuse, or came nearest to opening it.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Held {
    /// Whose it is.
    pub(super) accessory: String,
    /// The surge.
    pub(super) surge: Surge,
    /// The shortest time in which the fuse may open at its peak; none where it holds.
    pub(super) opens: Option<Hours>,
}

impl Held {
    /// As a row of the answer.
    pub(super) fn row(&self) -> SurgeRow {
        SurgeRow {
            accessory: self.accessory.clone(),
            peak_a: self.surge.peak(),
            lasts_s: self.surge.lasts(),
            opens_s: self.opens,
        }
    }
}

/// A fuse with the surges it holds.
#[derive(Clone, Debug)]
pub(super) struct Fused {
    /// The fuse.
    pub(super) fuse: Fuse,
    /// The smallest that carries the steady load, where a surge asked for more.
    pub(super) steady: Option<Fuse>,
    /// The surge that comes nearest to opening it.
    pub(super) held: Option<Held>,
}

/// A constraint that a wire does not hold.
#[derive(Clone, Debug, PartialEq)]
pub(super) enum Miss {
    /// No fuse of the list carries the load.
    NoFuse {
        /// The load.
        amps: Amps,
        /// What the largest carries.
        most: Amps,
    },
    /// No fuse of the list holds the surge.
    Surge {
        /// Whose it is.
        accessory: String,
        /// Its peak.
        peak: Amps,
    },
    /// The wire may carry less than its fuse.
    Ampacity {
        /// Its fuse.
        fuse: Amps,
        /// What it may carry.
        allows: Amps,
    },
    /// More volts are lost than allowed.
    Drop {
        /// Volts lost.
        lost: Volts,
        /// Volts allowed.
        allowed: Volts,
    },
}

/// Why there is no choice at all.
#[derive(Clone, Debug)]
pub(super) enum NoChoice {
    /// The table has no such insulation.
    Insulation(Celsius),
    /// The list of sizes is empty, or the table has none of them.
    NoSizes,
    /// Even the thickest wire misses these.
    Thickest(Box<Settled>, Vec<Miss>),
}

/// A wire and its fuse.
#[derive(Clone, Debug)]
pub(super) struct Choice {
    /// The wire at its current.
    pub(super) settled: Settled,
    /// The fuse.
    pub(super) fused: Fused,
    /// What the next thinner wire misses; none where this is the thinnest laid.
    pub(super) thinner: Option<(Settled, Vec<Miss>)>,
    /// Where it lies.
    pub(super) place: Place,
}

/// Chooses wire and fuse.
pub(super) fn choose(
    tables: &Tables,
    gauge: Gauge,
    demand: &Demand,
    laid: &Laid,
) -> Result<Choice, NoChoice> {
    let place = tables
        .ampacity
        .place(laid)
        .ok_or(NoChoice::Insulation(laid.insulation))?;
    let mut thinner = None;
    for wire in tables.conductors.offered(gauge) {
        let Some(settled) = settle(tables, demand, &place, wire) else {
            continue;
        };
        let fused = fuse(tables, demand, &settled);
        let misses = misses(demand, &settled, &fused);
        match fused {
            Ok(fused) if misses.is_empty() => {
                return Ok(Choice {
                    settled,
                    fused,
                    thinner,
                    place,
                });
            }
            _ => thinner = Some((settled, misses)),
        }
    }
    Err(thinner.map_or(NoChoice::NoSizes, |(settled, misses)| {
        NoChoice::Thickest(Box::new(settled), misses)
    }))
}

/// A wire with its current settled: what is drawn depends on the volts lost, they on the wire's
/// resistance, that on its temperature, and that on the current. Every round raises all of them, so
/// they close in from below; copper hotter than its insulation bears is taken as that hot.
pub(super) fn settle(
    tables: &Tables,
    demand: &Demand,
    place: &Place,
    wire: Conductor,
) -> Option<Settled> {
    let (table, ground) = tables.ampacity.single(wire.section, place.class)?;
    let allows = table * place.share();
    let mut lost = Volts::ZERO;
    let mut settled = (None, Amps::ZERO, place.ambient, Ohms::ZERO);
    for _ in 0..ROUNDS {
        let (state, amps) = demand.worst(lost);
        let load = if allows > Amps::ZERO {
            (amps / allows).min(1.0)
        } else {
            1.0
        };
        let copper = place.copper(Fraction(load));
        let resistance = wire.resistance(demand.length(), copper);
        settled = (state, amps, copper, resistance);
        let now = amps * resistance;
        let change = (now - lost).abs();
        lost = now;
        if change.0 <= STILL {
            break;
        }
    }
    let (state, amps, copper, resistance) = settled;
    Some(Settled {
        wire,
        amps,
        state,
        table,
        allows,
        copper,
        resistance,
        lost,
        ground,
    })
}

/// The smallest fuse that carries the load and holds every surge.
fn fuse(tables: &Tables, demand: &Demand, settled: &Settled) -> Result<Fused, Miss> {
    let ratings = tables.fuses.ratings();
    let Some(first) = tables.fuses.for_load(settled.amps) else {
        let largest = ratings.last().map_or(Amps::ZERO, |f| f.rating);
        let share = tables
            .fuses
            .loading()
            .map_or(Fraction::ONE, |(share, _)| share);
        return Err(Miss::NoFuse {
            amps: settled.amps,
            most: largest * share,
        });
    };
    let surges = demand.surges(settled.amps, settled.lost);
    let mut opened = None;
    for fuse in ratings.into_iter().filter(|f| f.rating >= first.rating) {
        let (holds, held) = nearest(tables, &fuse, &surges);
        if holds {
            let steady = Some(first).filter(|first| first.rating < fuse.rating);
            return Ok(Fused { fuse, steady, held });
        }
        opened = held;
    }
    Err(Miss::Surge {
        peak: opened.as_ref().map_or(Amps::ZERO, |held| held.surge.peak()),
        accessory: opened.map_or_else(String::new, |held| held.accessory),
    })
}

/// Whether a fuse holds the surges, and the one that comes nearest to opening it.
fn nearest(tables: &Tables, fuse: &Fuse, surges: &[(&str, Surge)]) -> (bool, Option<Held>) {
    let mut worst: Option<(f64, Held)> = None;
    for (name, surge) in surges {
        let opens = tables.fuses.least_time(fuse, surge.peak());
        let near = opens.map_or(0.0, |opens| surge.lasts() / opens);
        if worst.as_ref().is_none_or(|(n, _)| near > *n) {
            let held = Held {
                accessory: (*name).to_owned(),
                surge: *surge,
                opens,
            };
            worst = Some((near, held));
        }
    }
    let holds = worst.as_ref().is_none_or(|(near, _)| *near < 1.0);
    (holds, worst.map(|(_, held)| held))
}

/// The constraints that a wire does not hold.
fn misses(demand: &Demand, settled: &Settled, fused: &Result<Fused, Miss>) -> Vec<Miss> {
    let mut misses = Vec::new();
    match fused {
        Err(miss) => misses.push(miss.clone()),
        Ok(fused) if fused.fuse.rating > settled.allows => misses.push(Miss::Ampacity {
            fuse: fused.fuse.rating,
            allows: settled.allows,
        }),
        Ok(_) => {}
    }
    let allowed = demand.allowed();
    if settled.lost > allowed {
        misses.push(Miss::Drop {
            lost: settled.lost,
            allowed,
        });
    }
    misses
}
