//! The answer of a check: plain data that every renderer reads and none changes.
//!
//! Field names are those of the JSON; each ends in its unit. Charge is a fraction of full.

use crate::build::Assumed;
use crate::quantity::{
    AmpHours, Amps, Celsius, Fraction, Grams, Hours, Minutes, Rpm, Volts, Watts,
};
use serde::{Serialize, Serializer};

/// Does the charging system keep up?
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Serialize)]
pub enum Verdict {
    /// Shift after shift without end the charge stays above the reserve.
    #[serde(rename = "keeps up")]
    KeepsUp,
    /// The first shifts hold the reserve, a later one breaks it.
    #[serde(rename = "carries")]
    Carries,
    /// The first shift breaks the reserve.
    #[serde(rename = "falls short")]
    FallsShort,
}

impl Verdict {
    /// As the answers write it.
    #[must_use]
    pub fn words(self) -> &'static str {
        match self {
            Verdict::KeepsUp => "keeps up",
            Verdict::Carries => "carries",
            Verdict::FallsShort => "falls short",
        }
    }
}

/// Values by state, written as a JSON object in the order of the states.
#[derive(Clone, Debug, PartialEq)]
pub struct ByState<T>(pub Vec<(String, T)>);

impl<T: Serialize> Serialize for ByState<T> {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        serializer.collect_map(self.0.iter().map(|(name, value)| (name, value)))
    }
}

impl<T: Copy> ByState<T> {
    /// The value in a state.
    #[must_use]
    pub fn get(&self, state: &str) -> Option<T> {
        self.0
            .iter()
            .find(|(name, _)| name == state)
            .map(|(_, value)| *value)
    }
}

/// The whole answer.
#[derive(Clone, Debug, Serialize)]
pub struct Check {
    /// Version of these names.
    pub format: u32,
    /// Name of the build.
    pub build: String,
    /// Air temperature of the check.
    pub air_c: Celsius,
    /// Nominal volts of the system: 6, 12, 24.
    pub system_v: Volts,
    /// The verdict.
    pub verdict: Verdict,
    /// Whether anything was judged: false without a battery where nothing states the volts it
    /// works within. The verdict is then no praise.
    pub judged: bool,
    /// The verdict in one sentence.
    pub sentence: String,
    /// Shifts that hold the reserve; none when it keeps up without end.
    pub shifts_carried: Option<u32>,
    /// Ah lacking in each shift; 0 when it keeps up; none when no charging can help.
    pub lacks_ah: Option<AmpHours>,
    /// The same as a current at every running speed.
    pub lacks_a: Option<Amps>,
    /// Why no charging can help, where that is so, and the battery that would.
    pub beyond_charging: Option<String>,
    /// What fails first when it is worked all the same, as a clause; of one that keeps up, the accessory that drops out
    /// on the way, if one does.
    pub fails: Option<String>,
    /// Put away: how long it still cranks, when to recharge.
    pub storage: Option<super::Storage>,
    /// How long it stands with its key on, where the engine never runs.
    pub rundown: Option<super::Rundown>,
    /// Net battery Ah over the first shift, from the charge it starts with.
    pub balance_ah: Option<AmpHours>,
    /// Charge at which each shift begins once it has settled.
    pub settles_soc: Option<Fraction>,
    /// Lowest charge in the settled shift; in the first where the charge does not settle.
    pub lowest_soc: Option<Fraction>,
    /// The reserve.
    pub reserve_soc: Option<Fraction>,
    /// What sets the reserve: `stated`, `cold start`, `freezing`, `assumed`.
    pub reserve_from: Option<String>,
    /// Means over the first shift, one row a state in the order in which the states first occur.
    pub states: Vec<StateRow>,
    /// The first shift step by step, and the parking after it.
    pub steps: Vec<StepRow>,
    /// By accessory, largest Ah first.
    pub accessories: Vec<AccessoryRow>,
    /// Circuits of windings that do not feed the battery.
    pub circuits: Vec<CircuitRow>,
    /// Spare amps at each running speed, with the battery at its settled charge.
    pub spare_a: Option<ByState<Amps>>,
    /// Nearest single changes that make it keep up.
    pub changes: Vec<Change>,
    /// What else the figures show.
    pub findings: Vec<Finding>,
    /// All that was assumed.
    pub assumed: Vec<Assumed>,
    /// Cautions that apply to this build.
    pub cautions: Vec<String>,
    /// Notes on the figures.
    pub notes: Vec<String>,
}

/// One state of the shift: means over its time in the first shift.
#[derive(Clone, Debug, Serialize)]
pub struct StateRow {
    /// Its name.
    pub state: String,
    /// Engine speed; 0 with the engine off.
    pub rpm: Rpm,
    /// Time in the shift, minutes.
    pub minutes: Minutes,
    /// What the source could give at that bus voltage.
    pub available_a: Amps,
    /// What it gives.
    pub source_a: Amps,
    /// What the accessories draw.
    pub loads_a: Amps,
    /// Into the battery; below zero out of it.
    pub battery_a: Amps,
    /// Bus volts.
    pub bus_v: Volts,
    /// Into the battery when all that may be on is on, at its worst in the shift.
    pub worst_battery_a: Amps,
    /// Bus volts then.
    pub worst_bus_v: Volts,
    /// Battery Ah in the state over the shift.
    pub ah: AmpHours,
    /// Copper loss of the windings that feed the battery, watts, highest in the state.
    pub winding_w: Watts,
}

/// One step of the first shift.
#[derive(Clone, Debug, Serialize)]
pub struct StepRow {
    /// Its state.
    pub state: String,
    /// Minutes from the beginning of the shift.
    pub starts_min: Minutes,
    /// Its length.
    pub minutes: Minutes,
    /// Charge at its beginning.
    pub soc_start: Fraction,
    /// Charge at its end.
    pub soc_end: Fraction,
    /// Bus volts at its end.
    pub bus_v_end: Volts,
}

/// One accessory over the first shift.
#[derive(Clone, Debug, Serialize)]
pub struct AccessoryRow {
    /// Its name.
    pub name: String,
    /// How many.
    pub count: u32,
    /// `battery`, or the winding's own circuit.
    pub circuit: String,
    /// Ah in a shift, all of them together.
    pub ah: AmpHours,
    /// Share of all accessories' Ah.
    pub share: Fraction,
    /// Ah it misses because its volts were too low for it.
    pub missed_ah: AmpHours,
    /// Amps when on, by state.
    pub amps: ByState<Amps>,
    /// Volts at it, by state.
    pub volts: ByState<Volts>,
    /// Share of the time on, by state.
    pub duty: ByState<Fraction>,
}

/// Volts of a circuit without the battery.
#[derive(Clone, Debug, Serialize)]
pub struct CircuitRow {
    /// Its name.
    pub name: String,
    /// Whether alternating (rms volts) or rectified (mean volts).
    pub alternating: bool,
    /// Volts by state, all of its accessories on that may be.
    pub volts: ByState<Volts>,
}

/// A single change that makes it keep up.
#[derive(Clone, Debug, Serialize)]
pub struct Change {
    /// In words, with its figure.
    pub text: String,
    /// As `--set` takes it, where the file has such a value.
    pub set: Option<String>,
    /// Where the charge settles then.
    pub settles_soc: Option<Fraction>,
}

/// How much a finding matters.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Serialize)]
#[serde(rename_all = "lowercase")]
pub enum Weight {
    /// Worth knowing.
    Note,
    /// Will wear, dim or annoy.
    Warning,
    /// Fails or harms.
    Fault,
}

/// Something the figures show beside the verdict.
#[derive(Clone, Debug, Serialize)]
pub struct Finding {
    /// Short fixed name: `overcharge`, `dim lamp`, `drop-out`, `cold start`.
    pub what: String,
    /// How much it matters.
    pub weight: Weight,
    /// In words, with its figures.
    pub text: String,
    /// What the limit rests on.
    pub source: String,
}

/// A charge history point, for traces and charts.
#[derive(Clone, Debug, Serialize)]
pub struct TraceRow {
    /// Minutes from the beginning of the first shift.
    pub minutes: Minutes,
    /// State.
    pub state: String,
    /// Engine speed.
    pub rpm: Rpm,
    /// Bus volts.
    pub bus_v: Volts,
    /// What the source gives.
    pub source_a: Amps,
    /// What the accessories draw.
    pub loads_a: Amps,
    /// Into the battery.
    pub battery_a: Amps,
    /// Charge.
    pub soc: Fraction,
}

/// Gassing over a settled shift.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
pub struct Gassing {
    /// Ah that gas instead of charging.
    pub ah: AmpHours,
    /// Water lost.
    pub water_g: Grams,
    /// Time above the gassing voltage.
    pub hours: Hours,
}
