//! What draws.

use super::{Figure, State};
use crate::description::accessory::LoadKind;
use crate::quantity::{Amps, Celsius, Fraction, Henries, Hours, Metres, Money, Ohms, Volts, Watts};
use serde::Serialize;

/// One accessory, or several alike.
#[derive(Clone, Debug, Serialize)]
pub struct Accessory {
    /// Name in the answers; unique in a build.
    pub name: String,
    /// Path of its entry, `accessories[2]`.
    pub path: String,
    /// Catalog part, where it is one.
    pub part: Option<String>,
    /// How many.
    pub count: u32,
    /// What one draws; tolerance and path are those of the amount written.
    pub draw: Figure<Draw>,
    /// When it is on.
    pub duty: Duty,
    /// Volts within which it works.
    pub works: Works,
    /// Surge at switch-on.
    pub inrush: Option<Inrush>,
    /// Its circuit: none is the battery bus.
    pub circuit: Option<String>,
    /// Draw of one with the key off.
    pub parked: Amps,
    /// Inductance of a coil.
    pub coil: Option<Henries>,
    /// On together with these (indices into the build's accessories).
    pub together: Vec<usize>,
    /// Never on with these.
    pub apart: Vec<usize>,
    /// Price of one.
    pub price: Option<Money>,
    /// Light of one, lumens, as a pure number.
    pub lumens: Option<Fraction>,
    /// What its current is to a switch.
    pub kind: LoadKind,
    /// Whether it accepts alternating current.
    pub accepts_ac: bool,
    /// How its wire runs.
    pub wire: Wire,
}

/// What one accessory draws, in the law it follows.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
pub enum Draw {
    /// The same current at any volts.
    Current(Amps),
    /// I = V / R.
    Resistance(Ohms),
    /// I = P / V.
    Power(Watts),
    /// I = (P / at) (V / at)^0.55.
    Filament {
        /// Watts at the stated volts.
        power: Watts,
        /// The stated volts.
        at: Volts,
    },
}

/// Shares of the time on, by state.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Duty {
    /// At each named speed, in the order of the build's speeds.
    pub running: Vec<Figure<Fraction>>,
    /// Key on, engine off.
    pub stopped: Figure<Fraction>,
    /// While cranking.
    pub crank: Figure<Fraction>,
}

/// Volts within which an accessory works.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
pub struct Works {
    /// Drops out below; none never does.
    pub low: Option<Volts>,
    /// Flagged above.
    pub high: Option<Volts>,
    /// Whether the user or the catalog gave the range (a default drops out but is not judged on a circuit without a battery).
    pub stated: bool,
}

/// Surge at switch-on.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
pub struct Inrush {
    /// Times its steady current.
    pub times: Fraction,
    /// How long.
    pub time: Hours,
}

/// How an accessory's wire runs.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Wire {
    /// One-way length, where stated.
    pub run: Option<Metres>,
    /// A supply wire shared with others.
    pub feed: Option<String>,
    /// Returns by a second wire (else by the frame).
    pub return_wire: bool,
    /// Insulation's temperature class.
    pub insulation: Celsius,
    /// Through the engine space.
    pub engine_space: bool,
    /// Conductors bundled together.
    pub bundle: u32,
    /// Most volts lost, as a share of the system's.
    pub max_drop: Fraction,
    /// Contact rating of the switch fitted.
    pub switch: Amps,
}

impl Duty {
    /// The greatest share of any running state and of standing.
    #[must_use]
    pub fn most(&self) -> Fraction {
        let shares = self.running.iter().chain([&self.stopped]);
        shares.map(|f| f.value).fold(Fraction::ZERO, Fraction::max)
    }

    /// The share in a state; none while parked.
    #[must_use]
    pub fn share(&self, state: State) -> Fraction {
        match state {
            State::Running(speed) => self.running.get(speed).map_or(Fraction::ZERO, |f| f.value),
            State::Stopped => self.stopped.value,
            State::Crank => self.crank.value,
            State::Parked => Fraction::ZERO,
        }
    }
}

impl Accessory {
    /// A load of no part: one of them, never parked, no run of wire given, on the battery bus.
    #[must_use]
    pub fn plain(name: String, draw: Figure<Draw>, duty: Duty, works: Works) -> Accessory {
        Accessory {
            name,
            path: String::new(),
            part: None,
            count: 1,
            draw,
            duty,
            works,
            inrush: None,
            circuit: None,
            parked: Amps::ZERO,
            coil: None,
            together: Vec::new(),
            apart: Vec::new(),
            price: None,
            lumens: None,
            kind: LoadKind::Electronics,
            accepts_ac: false,
            wire: Wire {
                run: None,
                feed: None,
                return_wire: false,
                insulation: Celsius(105.0),
                engine_space: false,
                bundle: 1,
                max_drop: Fraction(0.03),
                switch: Amps(20.0),
            },
        }
    }
}
