//! What the user wrote: every value typed, with the place it stands at.
//!
//! A [`Description`] holds only what is in the file. Nothing is assumed here;
//! [`crate::resolve`] fills in catalogs and defaults.

pub mod accessory;
pub mod charging;
pub mod fleet;
mod lower;
mod open;
pub mod path;
pub mod places;
pub(crate) mod raw;
mod read;
mod scan;
mod second;
pub mod set;
mod slip;
mod values;

pub use accessory::{AccessoryText, DrawText, DutyText, InrushText, LawName, WorksText};
pub use charging::{
    AlternatorText, ChargingText, RatedText, ReadingText, RectifierText, RegulatorText, WindingText,
};
pub(crate) use open::unprintable;
pub(crate) use read::open_text;
pub use read::{
    bytes_of, bytes_within, read, read_accessory, read_battery, read_charging, read_file,
    read_fleet, read_kit, read_prices, read_set, read_starter,
};
pub(crate) use second::refused;
pub use set::Assignment;

pub(crate) use lower::words;

use crate::battery::Chemistry;
use crate::quantity::{
    AmpHours, Amps, Celsius, Fraction, Hours, Money, Ohms, Rpm, Tolerance, Volts,
};

/// A value as written, with its path (`accessories[2].duty.governed`) and its tolerance.
#[derive(Clone, Debug, PartialEq)]
pub struct Written<T> {
    /// The value.
    pub value: T,
    /// How far it may lie from the value, where the user said so.
    pub tolerance: Option<Tolerance>,
    /// Where it stands: the path by which `--set` and error messages name it.
    pub path: String,
}

impl<T> Written<T> {
    /// A value without a tolerance.
    #[must_use]
    pub fn exact(value: T, path: impl Into<String>) -> Written<T> {
        Written {
            value,
            tolerance: None,
            path: path.into(),
        }
    }
}

/// A whole build file.
#[derive(Clone, Debug)]
pub struct Description {
    /// Name of the build.
    pub build: Written<String>,
    /// Air temperature the machine works and starts at.
    pub air: Option<Written<Celsius>>,
    /// The engine's speeds and starter.
    pub engine: EngineText,
    /// Windings and alternators.
    pub charging: Vec<ChargingText>,
    /// The battery; a machine may have none.
    pub battery: Option<BatteryText>,
    /// What draws.
    pub accessories: Vec<AccessoryText>,
    /// The shift, in order.
    pub shift: Vec<StepText>,
    /// Key off between shifts.
    pub parked: Option<Written<Hours>>,
    /// Working days and days parked in a week of it.
    pub days: Option<DaysText>,
    /// A shop charger between shifts.
    pub charger: Option<ChargerText>,
    /// What a remedy may change.
    pub may: Option<MayText>,
    /// How wires run unless an accessory says otherwise.
    pub wiring: WiringText,
}

impl Description {
    /// Puts the machine in other air, as if the file said so.
    pub fn set_air(&mut self, air: Celsius) {
        self.air = Some(Written::exact(air, "air"));
    }
}

/// `engine:`.
#[derive(Clone, Debug, Default)]
pub struct EngineText {
    /// Named speeds, in the order written.
    pub speeds: Vec<(String, Written<Rpm>)>,
    /// The starter.
    pub starter: Option<StarterText>,
}

/// `engine.starter:`.
#[derive(Clone, Debug, Default)]
pub struct StarterText {
    /// Path of the mapping.
    pub path: String,
    /// Catalog part.
    pub part: Option<Written<String>>,
    /// Current while cranking a warm (27 °C) engine.
    pub draw: Option<Written<Amps>>,
    /// Time of one start.
    pub time: Option<Written<Hours>>,
    /// Starts in a row that the battery must hold in reserve.
    pub starts: Option<Written<u32>>,
    /// Rest between them.
    pub rest: Option<Written<Hours>>,
    /// Resistance of the starter's cables, there and back.
    pub cable: Option<Written<Ohms>>,
    /// Least volts at the starter that still turn the engine.
    pub least_volts: Option<Written<Volts>>,
}

/// `battery:`.
#[derive(Clone, Debug, Default)]
pub struct BatteryText {
    /// Path of the mapping.
    pub path: String,
    /// Catalog part.
    pub part: Option<Written<String>>,
    /// 20-hour capacity.
    pub capacity: Option<Written<AmpHours>>,
    /// Minutes at 25 A.
    pub reserve_capacity: Option<Written<Hours>>,
    /// Cold cranking amps.
    pub cold_cranking: Option<Written<Amps>>,
    /// Flooded, AGM or gel.
    pub chemistry: Option<Written<Chemistry>>,
    /// Measured resistance of the whole battery.
    pub resistance: Option<Written<Ohms>>,
    /// Rested volts when full.
    pub rest_full: Option<Written<Volts>>,
    /// Rested volts when empty.
    pub rest_empty: Option<Written<Volts>>,
    /// Charge never to go below.
    pub reserve: Option<Written<Fraction>>,
    /// Cells in series.
    pub cells: Option<Written<u32>>,
    /// Gassing against a new battery, 1 to 5.
    pub gassing: Option<Written<Fraction>>,
    /// What is left of its capacity when new.
    pub health: Option<Written<Fraction>>,
    /// Price.
    pub price: Option<Written<Money>>,
}

/// One step of the shift.
#[derive(Clone, Debug)]
pub struct StepText {
    /// Path of the entry; its time, where one is written, stands at `path.state`.
    pub path: String,
    /// A speed's name, `crank` or `stopped`.
    pub state: Written<String>,
    /// How long; a `crank` without one lasts the starter's time.
    pub time: Option<Written<Hours>>,
}

/// `days:` shifts in a row, then days parked.
#[derive(Clone, Debug)]
pub struct DaysText {
    /// Shifts on successive days.
    pub shifts: Written<u32>,
    /// Days without a shift after them.
    pub parked: Written<u32>,
}

/// `charger:` plugged in while parked.
#[derive(Clone, Debug)]
pub struct ChargerText {
    /// Path of the mapping.
    pub path: String,
    /// Its most current.
    pub amps: Written<Amps>,
    /// The voltage it tapers at.
    pub holds: Option<Written<Volts>>,
    /// Hours between key off and plugging in.
    pub after: Option<Written<Hours>>,
    /// How long it stays on.
    pub time: Option<Written<Hours>>,
    /// Price.
    pub price: Option<Written<Money>>,
}

/// A kit of a catalog: accessories added to a machine together.
#[derive(Clone, Debug, Default)]
pub struct KitText {
    /// Path of the mapping.
    pub path: String,
    /// What it adds.
    pub accessories: Vec<AccessoryText>,
    /// Price of it all; the sum of its parts where none is written.
    pub price: Option<Written<Money>>,
}

/// `may:` what a remedy may change; without it, all that the catalogs allow.
#[derive(Clone, Debug, Default)]
pub struct MayText {
    /// Speeds, each up to this.
    pub speeds: Vec<(String, Written<Rpm>)>,
    /// Duties by accessory name, each down to this.
    pub duty: Vec<(String, Written<Fraction>)>,
    /// Swap filament lamps for LED of equal light.
    pub lamps: Option<Written<bool>>,
    /// Fit another winding.
    pub winding: Option<Written<bool>>,
    /// Fit another battery.
    pub battery: Option<Written<bool>>,
    /// Use a shop charger while parked.
    pub charger: Option<Written<bool>>,
}

/// A price list of the user's own.
#[derive(Clone, Debug, Default)]
pub struct PricesText {
    /// The currency, a label.
    pub currency: Option<Written<String>>,
    /// Prices by the part's id, in the order written.
    pub prices: Vec<(String, Written<Money>)>,
}

/// `wiring:` how wires run unless an accessory says otherwise.
#[derive(Clone, Debug, Default)]
pub struct WiringText {
    /// Temperature class of the insulation.
    pub insulation: Option<Written<Celsius>>,
    /// Whether the wires run through the engine space.
    pub engine_space: Option<Written<bool>>,
    /// Conductors bundled together.
    pub bundle: Option<Written<u32>>,
    /// Current returns by the frame or by a second wire.
    pub returns: Option<Written<ReturnPath>>,
    /// Most volts lost, as a share of the system's.
    pub max_drop: Option<Written<Fraction>>,
    /// Contact rating of the switches that are fitted.
    pub switch: Option<Written<Amps>>,
}

/// How current comes back from an accessory.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum ReturnPath {
    /// Through the machine's frame.
    Frame,
    /// Through a second wire as long as the first.
    Wire,
}
