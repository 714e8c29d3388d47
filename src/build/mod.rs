//! A complete build: every number present, typed, and with its origin.
//!
//! Made by [`crate::resolve`]; read by the solver. Nothing after this invents a default.

pub mod accessory;
pub mod source;

pub use accessory::{Accessory, Draw, Duty, Inrush, Works};
pub use source::{Alternator, Regulator, Source, SourceKind, WindingSource};

use crate::battery::{self, Label};
use crate::quantity::{Amps, Celsius, Fraction, Hours, Money, Ohms, Rpm, Tolerance, Volts};
use serde::Serialize;
use std::sync::Arc;

/// Where a number comes from.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub enum Origin {
    /// The user wrote it.
    Stated,
    /// A catalog part gave it; the text names the part and its certainty.
    Catalog(String),
    /// It was assumed; the text says on what ground.
    Assumed(String),
}

/// A number with its origin, its tolerance, and the path that `--set` takes to change it.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Figure<T> {
    /// The value.
    pub value: T,
    /// Stated, from a catalog, or assumed.
    pub origin: Origin,
    /// How far it may lie from the value.
    pub tolerance: Option<Tolerance>,
    /// Path in the build file (whether or not it is written there).
    pub path: String,
}

/// One thing that was assumed, as the answers list it.
#[derive(Clone, Debug, PartialEq, serde::Serialize)]
pub struct Assumed {
    /// What, in words: `winding temperature at work`.
    pub what: String,
    /// Its value, as it would be written in a build file.
    pub value: String,
    /// On what ground: `common practice, no source`.
    pub origin: String,
}

/// A complete build.
#[derive(Clone, Debug, Serialize)]
pub struct Build {
    /// Its name.
    pub name: String,
    /// Air temperature.
    pub air: Figure<Celsius>,
    /// Named speeds, in the order written; a [`State::Running`] is an index here.
    pub speeds: Vec<Speed>,
    /// The starter, where one is described.
    pub starter: Option<Starter>,
    /// Windings and alternators.
    pub sources: Vec<Source>,
    /// The battery, where there is one.
    pub battery: Option<BatterySpec>,
    /// What draws; each shared with builds that differ in something else.
    pub accessories: Vec<Arc<Accessory>>,
    /// The shift, in order.
    pub shift: Vec<Step>,
    /// Key off between shifts.
    pub parked: Figure<Hours>,
    /// State of charge at the first shift's beginning.
    pub start: Fraction,
    /// Shifts in a row and days parked after them.
    pub days: Option<Days>,
    /// Shop charger while parked.
    pub charger: Option<Charger>,
    /// All that was assumed, in the order of the file's sections.
    pub assumed: Vec<Assumed>,
    /// What was assumed of the wiring: it bears on wires, fuses and relays only.
    pub wiring_assumed: Vec<Assumed>,
    /// What the reader should know of the figures: guards hit, parts from memory.
    pub notes: Vec<String>,
    /// Currency of the prices: a label.
    pub currency: String,
}

/// A named engine speed.
#[derive(Clone, Debug, Serialize)]
pub struct Speed {
    /// Its name.
    pub name: String,
    /// Its rpm.
    pub rpm: Figure<Rpm>,
}

/// The starter and what its starts ask of the battery.
#[derive(Clone, Debug, Serialize)]
pub struct Starter {
    /// Current while cranking a warm (27 °C) engine.
    pub draw: Figure<Amps>,
    /// Time of one start.
    pub time: Figure<Hours>,
    /// Starts in a row held in reserve.
    pub starts: Figure<u32>,
    /// Rest between them.
    pub rest: Figure<Hours>,
    /// Cable resistance, there and back.
    pub cable: Figure<Ohms>,
    /// Least volts at the starter with which the engine starts.
    pub least_volts: Figure<Volts>,
}

impl Starter {
    /// What its starts ask of the battery.
    #[must_use]
    pub fn asks(&self) -> battery::Starter {
        battery::Starter {
            draw: self.draw.value,
            time: self.time.value,
            attempts: self.starts.value,
            rest: self.rest.value,
            cable: self.cable.value,
            least: Some(self.least_volts.value),
        }
    }
}

/// The battery: its label, and what the user wants kept in it.
#[derive(Clone, Debug, Serialize)]
pub struct BatterySpec {
    /// The label's figures.
    pub label: Label,
    /// Capacity as a figure: tolerance and path of the label's `capacity`.
    pub capacity: Figure<crate::quantity::AmpHours>,
    /// Cold cranking amps as a figure, where given.
    pub cold_cranking: Option<Figure<Amps>>,
    /// Charge never to go below, where stated or, without a starter, assumed.
    pub reserve: Option<Figure<Fraction>>,
    /// Price.
    pub price: Option<Money>,
    /// Catalog part.
    pub part: Option<String>,
}

/// What the machine is doing.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Serialize)]
pub enum State {
    /// Engine running at a named speed: index into [`Build::speeds`].
    Running(usize),
    /// Starter turning the engine.
    Crank,
    /// Key on, engine off.
    Stopped,
    /// Key off.
    Parked,
}

/// One step of the shift.
#[derive(Clone, Debug, Serialize)]
pub struct Step {
    /// What the machine does.
    pub state: State,
    /// For how long; the path is where its time stands in the file.
    pub time: Figure<Hours>,
}

/// Shifts on successive days, then days without.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize)]
pub struct Days {
    /// Shifts in a row.
    pub shifts: u32,
    /// Days parked after them.
    pub parked: u32,
}

/// A shop charger, plugged in while parked.
#[derive(Clone, Debug, Serialize)]
pub struct Charger {
    /// Its most current.
    pub amps: Figure<Amps>,
    /// The voltage it tapers at.
    pub holds: Figure<Volts>,
    /// Hours between key off and plugging in.
    pub after: Figure<Hours>,
    /// How long it stays on.
    pub time: Figure<Hours>,
    /// Price.
    pub price: Option<Money>,
}

impl Build {
    /// An accessory by its index.
    #[must_use]
    pub fn accessory(&self, index: usize) -> Option<&Accessory> {
        self.accessories.get(index).map(|a| &**a)
    }

    /// An accessory to be changed, in this build alone.
    #[must_use]
    pub fn accessory_mut(&mut self, index: usize) -> Option<&mut Accessory> {
        self.accessories.get_mut(index).map(Arc::make_mut)
    }

    /// The name of a state as the file writes it.
    #[must_use]
    pub fn state_name(&self, state: State) -> &str {
        match state {
            State::Running(speed) => self
                .speeds
                .get(speed)
                .map_or("running", |s| s.name.as_str()),
            State::Crank => "crank",
            State::Stopped => "stopped",
            State::Parked => "parked",
        }
    }
    /// Engine speed in a state; none with the engine off.
    #[must_use]
    pub fn rpm(&self, state: State) -> Rpm {
        match state {
            State::Running(speed) => self.speeds.get(speed).map_or(Rpm::ZERO, |s| s.rpm.value),
            _ => Rpm::ZERO,
        }
    }
    /// Cells in series: the battery's, or six without one.
    #[must_use]
    pub fn cells(&self) -> u32 {
        self.battery.as_ref().map_or(6, |b| b.label.cells)
    }
}
