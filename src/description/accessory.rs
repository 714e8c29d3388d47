//! `accessories:` as written.

use super::{ReturnPath, Written};
use crate::quantity::{Amps, Celsius, Fraction, Henries, Hours, Metres, Money, Ohms, Volts, Watts};
use serde::Serialize;

/// One accessory as written. A catalog part has the same shape.
#[derive(Clone, Debug, Default)]
pub struct AccessoryText {
    /// Path of the mapping.
    pub path: String,
    /// What it is called in the answers.
    pub name: Option<Written<String>>,
    /// Catalog part that it is.
    pub part: Option<Written<String>>,
    /// How many of it.
    pub count: Option<Written<u32>>,
    /// What one of it draws.
    pub draw: Option<Written<DrawText>>,
    /// Law of the draw where the unit alone does not say.
    pub law: Option<Written<LawName>>,
    /// Volts at which the draw was stated.
    pub at: Option<Written<Volts>>,
    /// When it is on.
    pub duty: Option<DutyText>,
    /// Volts within which it works.
    pub works: Option<Written<WorksText>>,
    /// Surge at switch-on.
    pub inrush: Option<Written<InrushText>>,
    /// The winding's own circuit that it hangs on; the battery bus without it.
    pub circuit: Option<Written<String>>,
    /// Draw of one with the key off.
    pub parked: Option<Written<Amps>>,
    /// Inductance of a coil.
    pub coil: Option<Written<Henries>>,
    /// Accessories whose on-time coincides with its own.
    pub together: Vec<Written<String>>,
    /// Accessories never on at the same time.
    pub apart: Vec<Written<String>>,
    /// Price of one.
    pub price: Option<Written<Money>>,
    /// One-way length of its supply wire.
    pub run: Option<Written<Metres>>,
    /// Name of a supply wire it shares with others.
    pub feed: Option<Written<String>>,
    /// What its current is to a switch: lamp, motor, heater, coil, electronics.
    pub kind: Option<Written<LoadKind>>,
    /// Most volts lost on its wire, as a share of the system's.
    pub max_drop: Option<Written<Fraction>>,
    /// Current returns by the frame or by a second wire.
    pub returns: Option<Written<ReturnPath>>,
    /// Temperature class of its wire's insulation.
    pub insulation: Option<Written<Celsius>>,
    /// Whether its electronics accept alternating current.
    pub accepts_ac: Option<Written<bool>>,
    /// Light of one, lumens, at `at`; kept as a pure number.
    pub lumens: Option<Written<Fraction>>,
}

/// Amount of a draw, in the unit written.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum DrawText {
    /// Amperes.
    Current(Amps),
    /// Ohms (a copper coil is given at 20 °C).
    Resistance(Ohms),
    /// Watts.
    Power(Watts),
}

/// `law:`.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum LawName {
    /// Current in proportion to volts.
    Resistance,
    /// The same current at any volts.
    Current,
    /// The same power at any volts.
    Power,
    /// A filament: current rises as volts to the power 0.55.
    Filament,
}

/// `kind:` what the current is to a switch or relay contact.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize)]
pub enum LoadKind {
    /// A filament lamp.
    Lamp,
    /// A motor.
    Motor,
    /// A heater or other plain resistance.
    Heater,
    /// A coil: clutch, solenoid, relay.
    Coil,
    /// Electronics, LED lamps among them.
    Electronics,
}

/// `duty:` one share for every state in which the engine runs, or one for each state named.
#[derive(Clone, Debug)]
pub enum DutyText {
    /// The same in every running state.
    Everywhere(Written<Fraction>),
    /// By state; states left out have none.
    ByState {
        /// Path of the mapping.
        path: String,
        /// State and share, in the order written; the path of each is that of its value.
        shares: Vec<(Written<String>, Written<Fraction>)>,
    },
}

/// `works: 10.5 V to 16 V`.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct WorksText {
    /// Drops out below.
    pub low: Volts,
    /// Flagged above.
    pub high: Volts,
}

/// `inrush: 8 x for 0.2 s`.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct InrushText {
    /// Times its steady current.
    pub times: Fraction,
    /// How long the surge lasts.
    pub time: Hours,
}
