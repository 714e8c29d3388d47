//! The answer: plain data that every renderer reads and none changes.
//!
//! Field names are those of the JSON; each ends in its unit.

use super::conductor::Gauge;
use crate::build::Assumed;
use crate::quantity::{AmpHours, Amps, Celsius, Fraction, Hours, Metres, Ohms, SquareMm, Volts};
use serde::{Serialize, Serializer};

/// Wire, fuse and relay for everything with a `run:`.
#[derive(Clone, Debug, Serialize)]
pub struct Wires {
    /// Version of these names.
    pub format: u32,
    /// Name of the build.
    pub build: String,
    /// In which sizes the wire is.
    pub gauge: Gauge,
    /// Nominal volts of the system.
    pub system_v: Volts,
    /// One a supply wire, in the order of the build. Each holds all three constraints.
    pub wires: Vec<Wire>,
    /// Supply wires for which no standard pair of wire and fuse holds all three.
    pub unmet: Vec<Unmet>,
    /// Accessories that get no wire.
    pub not_sized: Vec<NotSized>,
    /// What to buy.
    pub buy: Buy,
    /// What the wires do to the charge of the first shift; none without a battery or without wires.
    pub effect: Option<Effect>,
    /// What was assumed of the wiring.
    pub assumed: Vec<Assumed>,
    /// The tables used, each once.
    pub sources: Vec<SourceRow>,
    /// What the reader should know of the figures.
    pub notes: Vec<String>,
    /// Cautions that apply.
    pub cautions: Vec<String>,
}

/// One supply wire with its fuse.
#[derive(Clone, Debug, Serialize)]
pub struct Wire {
    /// The accessory's name, or the feed's.
    pub name: String,
    /// What hangs on it.
    pub accessories: Vec<String>,
    /// Worst steady current, all of a kind on.
    pub amps: Amps,
    /// The state that is met in.
    pub worst_state: String,
    /// One way.
    pub run_m: Metres,
    /// Whether the current returns by a second wire, else by the frame.
    pub return_wire: bool,
    /// Length of wire.
    pub length_m: Metres,
    /// Cross-section.
    pub section_mm2: SquareMm,
    /// Its gauge; beside a metric size the next that is not thinner.
    pub gauge_awg: Option<String>,
    /// What it may carry where it lies.
    pub ampacity_a: Amps,
    /// What the table lets it carry by itself at 30 °C.
    pub table_a: Amps,
    /// Share of that left where it lies.
    pub derating: Fraction,
    /// Class of its insulation in the table.
    pub insulation_c: Celsius,
    /// Air about it.
    pub ambient_c: Celsius,
    /// Its copper at the worst steady current.
    pub copper_c: Celsius,
    /// Its copper if the fuse passes 135 % of its rating, as it may for ten minutes.
    pub overload_c: Celsius,
    /// Its resistance at the worst steady current.
    pub resistance_ohm: Ohms,
    /// Volts lost then.
    pub drop_v: Volts,
    /// The same as a share of the system's volts.
    pub drop_fraction: Fraction,
    /// The most that may be.
    pub max_drop: Fraction,
    /// The fuse.
    pub fuse_a: Amps,
    /// `blade` or `large blade`.
    pub fuse_kind: String,
    /// Its colour.
    pub fuse_colour: Option<String>,
    /// The surge that comes nearest to opening it.
    pub surge: Option<SurgeRow>,
    /// Whether a relay must carry the current because the switch would not.
    pub relay: bool,
    /// Switch by switch.
    pub switches: Vec<SwitchRow>,
    /// What decided on the wire.
    pub binds: String,
    /// The reason for each choice.
    pub reasons: Vec<String>,
    /// What arrives at each accessory.
    pub arrives: Vec<Arrives>,
}

/// A surge against the fuse.
#[derive(Clone, Debug, Serialize)]
pub struct SurgeRow {
    /// Whose it is.
    pub accessory: String,
    /// Its peak, everything else on the wire on.
    pub peak_a: Amps,
    /// How long that peak would have to last to heat a fuse as much; seconds in JSON.
    #[serde(serialize_with = "seconds")]
    pub lasts_s: Hours,
    /// The shortest time in which the fuse may open at it; none where it holds. Seconds in JSON.
    #[serde(serialize_with = "maybe_seconds")]
    pub opens_s: Option<Hours>,
}

/// A time in seconds.
fn seconds<S: Serializer>(time: &Hours, serializer: S) -> Result<S::Ok, S::Error> {
    serializer.serialize_f64(time.seconds())
}

/// A time in seconds, or nothing.
fn maybe_seconds<S: Serializer>(time: &Option<Hours>, serializer: S) -> Result<S::Ok, S::Error> {
    time.map(Hours::seconds).serialize(serializer)
}

/// The switch of one accessory.
#[derive(Clone, Debug, Serialize)]
pub struct SwitchRow {
    /// The accessory.
    pub accessory: String,
    /// Its worst steady current.
    pub amps: Amps,
    /// Multiple of it that a switch must be rated for.
    pub factor: Fraction,
    /// The rating needed.
    pub needs_a: Amps,
    /// The switch's rating.
    pub switch_a: Amps,
    /// Whether a relay takes over.
    pub relay: bool,
    /// Rating of the relay's contacts; none where no relay is needed, or none of the list will do.
    pub relay_a: Option<Amps>,
    /// What those contacts carry in the heat of a machine: no less than the worst steady current.
    pub relay_carries_a: Option<Amps>,
}

/// What arrives at one accessory in the state in which it sees least.
#[derive(Clone, Debug, Serialize)]
pub struct Arrives {
    /// The accessory.
    pub accessory: String,
    /// The state.
    pub state: String,
    /// Bus volts then, everything on, the battery at its lowest.
    pub bus_v: Volts,
    /// Volts at the accessory.
    pub volts: Volts,
    /// Amps of all of it then.
    pub amps: Amps,
    /// Volts under which it drops out.
    pub works_low_v: Option<Volts>,
    /// Whether it works there.
    pub works: bool,
    /// A filament's light there, as a share of that at its stated volts.
    pub light: Option<Fraction>,
    /// The same without the wire.
    pub light_at_bus: Option<Fraction>,
    /// A coil's pull-in when hot.
    pub pull_in: Option<PullIn>,
}

/// Whether a hot coil still pulls in.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
pub struct PullIn {
    /// Temperature of the coil.
    pub coil_c: Celsius,
    /// Volts at it.
    pub volts: Volts,
    /// Its current.
    pub amps: Amps,
    /// The current it has at its lower working limit at 20 °C.
    pub needs_a: Amps,
    /// Whether it has at least that.
    pub pulls_in: bool,
}

/// A supply wire without a choice.
#[derive(Clone, Debug, Serialize)]
pub struct Unmet {
    /// The accessory's name, or the feed's.
    pub name: String,
    /// What hangs on it.
    pub accessories: Vec<String>,
    /// Worst steady current on the thickest wire.
    pub amps: Option<Amps>,
    /// One way.
    pub run_m: Metres,
    /// The constraints that cannot be met, each with its figures.
    pub impossible: Vec<String>,
    /// What would do, each by itself.
    pub would: Vec<String>,
}

/// An accessory without a wire.
#[derive(Clone, Debug, Serialize)]
pub struct NotSized {
    /// The accessory.
    pub name: String,
    /// Why.
    pub why: String,
}

/// What to buy.
#[derive(Clone, Debug, Default, Serialize)]
pub struct Buy {
    /// Wire by size, thinnest first.
    pub wire: Vec<BuyWire>,
    /// Fuses by rating, smallest first; a holder for each.
    pub fuses: Vec<BuyFuse>,
    /// Relays by rating.
    pub relays: Vec<BuyRelay>,
}

/// Wire of one size.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct BuyWire {
    /// Cross-section.
    pub section_mm2: SquareMm,
    /// Gauge, as on the wires.
    pub gauge_awg: Option<String>,
    /// Least class of its insulation.
    pub insulation_c: Celsius,
    /// Length, with nothing added for cutting and ends.
    pub metres: Metres,
}

/// Fuses of one rating.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct BuyFuse {
    /// Rating.
    pub fuse_a: Amps,
    /// `blade` or `large blade`.
    pub kind: String,
    /// Colour.
    pub colour: Option<String>,
    /// How many.
    pub count: u32,
}

/// Relays of one rating.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct BuyRelay {
    /// Contact rating; none where it must be more than any of the list.
    pub relay_a: Option<Amps>,
    /// The current that a relay beyond the list must carry hot.
    pub carries_a: Option<Amps>,
    /// How many.
    pub count: u32,
}

/// What the wires do to the charge of the first shift.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
pub struct Effect {
    /// Drawn by the accessories without the wires' resistance.
    pub loads_ah: AmpHours,
    /// With it.
    pub loads_with_wires_ah: AmpHours,
    /// Net into the battery without it.
    pub balance_ah: AmpHours,
    /// With it.
    pub balance_with_wires_ah: AmpHours,
}

/// One table used.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub struct SourceRow {
    /// What it gives.
    pub what: String,
    /// Where it is from.
    pub source: String,
    /// How far it can be trusted: `standard`, `from memory`, `common practice`.
    pub certainty: String,
}
