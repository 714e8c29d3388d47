//! Circuits of windings that do not feed a battery: lamps straight across a lighting winding, a
//! rectified winding that feeds a clutch coil.
//!
//! Nothing holds the volts there: they rise with speed and fall with what is on. For each running
//! state of the shift the volts are found with everything on that may be on at once and coils at
//! 20 °C as they are stated, and again with hot coils and with as little on as can be: between the
//! two lies what each accessory sees. On an alternating circuit volts are rms, on a rectified one
//! their mean.

mod burnt_out;
mod error;
mod findings;
mod lamps;
mod loads;
mod point;
mod range;
mod rows;
mod select;
mod state;
mod three_phase;
mod verdict;

pub use burnt_out::BurntOut;
pub use error::CircuitError;
pub use findings::findings;
pub use lamps::lamp_findings;
pub use loads::{HOT_COIL, is_coil};
pub use point::Point;
pub use range::{Extreme, range_findings};
pub use rows::{accessory_rows, circuit_rows};
pub use verdict::{Tightest, VoltsVerdict, verdict_on_volts};

use crate::build::{Accessory, Build, Source, SourceKind, State};
use crate::check::answer::ByState;
use crate::quantity::{AmpHours, Amps, Fraction, Hours, Rpm, Volts, Watts, format};
use crate::source::Phases;
use loads::{Coils, Loads};
use point::Feed;
use select::Active;

/// Name of the circuit of a winding that feeds the bus of a build without a battery.
pub const PLAIN_BUS: &str = "bus";

/// One circuit, solved for the running states of the shift.
#[derive(Clone, Debug)]
pub struct Circuit {
    /// Its name.
    pub name: String,
    /// Its winding: index into the build's sources.
    pub source: usize,
    /// Whether alternating (rms volts) or rectified (mean volts).
    pub alternating: bool,
    /// The volts that its regulator holds at most, where it has one.
    pub holds: Option<Volts>,
    /// One entry a running state, in the order in which the shift first comes to it.
    pub states: Vec<InState>,
    /// What hangs on it, in the order of the build.
    pub accessories: Vec<OnCircuit>,
    /// The worst that a burnt-out lamp does to the others; none with fewer than two lamps.
    pub burnt_out: Option<BurntOut>,
}

/// A circuit in one running state, everything on that may be on at once.
#[derive(Clone, Debug)]
pub struct InState {
    /// The state.
    pub state: State,
    /// Its name.
    pub name: String,
    /// Engine speed.
    pub rpm: Rpm,
    /// Time in one shift.
    pub time: Hours,
    /// Volts with nothing on.
    pub open_circuit: Volts,
    /// Volts with everything on, coils at 20 °C.
    pub volts: Volts,
    /// The same with hot coils; none without coils.
    pub hot: Option<Volts>,
    /// Mean volts if a diode lay across a coil that one diode feeds; none elsewhere.
    pub freewheel: Option<Volts>,
    /// Rms current of the winding, one phase.
    pub winding: Amps,
    /// Heat in the winding's copper.
    pub copper: Watts,
}

/// One accessory on a circuit.
#[derive(Clone, Debug)]
pub struct OnCircuit {
    /// Index into the build's accessories.
    pub accessory: usize,
    /// One entry a running state in which it may be on.
    pub states: Vec<AtState>,
    /// Charge drawn in a shift, all of a kind together: while it is on it is taken as drawing what
    /// it draws with everything on.
    pub ah: AmpHours,
    /// Charge it misses because its volts are under its lower limit, where it then lets go.
    pub missed: AmpHours,
}

/// The lowest and the highest of some volts.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Between {
    /// The lowest.
    pub lowest: Volts,
    /// The highest.
    pub highest: Volts,
}

/// One accessory in one state. Amps are of all of a kind together, mean on a rectified circuit and
/// rms on an alternating one.
#[derive(Clone, Debug)]
pub struct AtState {
    /// Name of the state.
    pub state: String,
    /// Share of the time on.
    pub duty: Fraction,
    /// Its amps with everything on, coils at 20 °C.
    pub amps: Amps,
    /// Volts at it then.
    pub volts: Volts,
    /// Lowest and highest volts it sees: with everything or as little as can be on, coils at 20 °C or
    /// hot.
    pub between: Between,
    /// The same in rms volts, which heat a filament.
    pub heating: Between,
    /// A copper coil's amps and volts when hot, everything on; none for what is no coil.
    pub hot: Option<(Amps, Volts)>,
}

/// Every circuit of the build that does not feed its battery, in the order of its sources.
///
/// Braking windings carry nothing and are left out. Without a battery a winding that names no
/// circuit of its own feeds [`PLAIN_BUS`].
///
/// # Errors
/// [`CircuitError`]: two windings on one circuit, an alternator without a battery, an alternating
/// three-phase circuit, or currents that the equations do not cover.
pub fn circuits(build: &Build) -> Result<Vec<Circuit>, CircuitError> {
    let mut all: Vec<Circuit> = Vec::new();
    for (index, source) in build.sources.iter().enumerate() {
        let Some(name) = circuit_of(build, source) else {
            continue;
        };
        if all.iter().any(|c| c.name == name) {
            return Err(CircuitError::SeveralWindings { circuit: name });
        }
        all.push(circuit(build, index, source, name)?);
    }
    Ok(all)
}

/// The circuit that a source feeds; none where it feeds the battery or is a braking winding.
#[must_use]
pub fn circuit_of(build: &Build, source: &Source) -> Option<String> {
    match &source.circuit {
        _ if source.braking => None,
        Some(name) => Some(name.clone()),
        None if build.battery.is_none() => Some(PLAIN_BUS.to_owned()),
        None => None,
    }
}

/// Whether an accessory hangs on a circuit.
fn hangs(build: &Build, accessory: &Accessory, circuit: &str) -> bool {
    match &accessory.circuit {
        Some(name) => name == circuit,
        None => build.battery.is_none() && circuit == PLAIN_BUS,
    }
}

/// The circuit of a source at any speed: its volts with nothing on, and the point with everything on
/// it that may be on at once in any running state of the shift, coils at 20 °C. Nothing hangs on a source that feeds the battery.
///
/// # Errors
/// As [`circuits`].
pub fn at_speed(build: &Build, source: usize, rpm: Rpm) -> Result<(Volts, Point), CircuitError> {
    let of = build.sources.get(source);
    let name = of.and_then(|s| circuit_of(build, s)).unwrap_or_default();
    let feed = feed(build, source, rpm, &name)?;
    let states = running(build);
    let most = |a: &Accessory| {
        let shares = states.iter().map(|(state, _)| a.duty.share(*state));
        shares.fold(Fraction::ZERO, Fraction::max)
    };
    let everything = Active::new(build, &name, most).all_on();
    let failed = |cause| CircuitError::NoPoint {
        circuit: name.clone(),
        state: format::text(rpm),
        cause,
    };
    let open = feed.solve(&Loads::default()).map_err(failed)?;
    let loads = Loads::of(build, &everything, Coils::Cold);
    Ok((open.volts, feed.solve(&loads).map_err(failed)?))
}

/// Running states of the shift in the order in which they first occur, each with its time.
fn running(build: &Build) -> Vec<(State, Hours)> {
    let mut all: Vec<(State, Hours)> = Vec::new();
    for step in &build.shift {
        if matches!(step.state, State::Running(_)) {
            match all.iter_mut().find(|(state, _)| *state == step.state) {
                Some((_, time)) => *time += step.time.value,
                None => all.push((step.state, step.time.value)),
            }
        }
    }
    all
}

/// What feeds the circuit of a source at a speed.
fn feed(build: &Build, source: usize, rpm: Rpm, name: &str) -> Result<Feed, CircuitError> {
    let of = build.sources.get(source);
    let Some((SourceKind::Winding(winding), regulator)) = of.map(|s| (&s.kind, &s.regulator))
    else {
        let circuit = name.to_owned();
        return Err(CircuitError::AlternatorAlone { circuit });
    };
    if winding.rectifier.is_none() && winding.constants.phases() == Phases::Three {
        let circuit = name.to_owned();
        return Err(CircuitError::AlternatingThreePhase { circuit });
    }
    Ok(Feed {
        winding: winding.constants,
        rectifier: winding.rectifier,
        rpm,
        holds: regulator.as_ref().map(|r| r.setpoint(build.air.value)),
    })
}

fn circuit(
    build: &Build,
    source: usize,
    of: &Source,
    name: String,
) -> Result<Circuit, CircuitError> {
    let hanging = build.accessories.iter().enumerate();
    let accessories = hanging
        .filter(|(_, a)| hangs(build, a, &name))
        .map(|(accessory, _)| OnCircuit {
            accessory,
            states: Vec::new(),
            ah: AmpHours::ZERO,
            missed: AmpHours::ZERO,
        });
    let mut circuit = Circuit {
        source,
        alternating: matches!(&of.kind, SourceKind::Winding(w) if w.rectifier.is_none()),
        holds: of.regulator.as_ref().map(|r| r.setpoint(build.air.value)),
        states: Vec::new(),
        accessories: accessories.collect(),
        burnt_out: None,
        name,
    };
    for (state, time) in running(build) {
        circuit.add_state(build, state, time)?;
    }
    Ok(circuit)
}

impl Between {
    fn of(volts: impl Iterator<Item = Volts>) -> Between {
        let none = Between {
            lowest: Volts(f64::INFINITY),
            highest: Volts::ZERO,
        };
        volts.fold(none, |b, v| Between {
            lowest: b.lowest.min(v),
            highest: b.highest.max(v),
        })
    }
}

impl OnCircuit {
    /// One figure of it by state.
    #[must_use]
    pub fn by_state<T>(&self, figure: impl Fn(&AtState) -> T) -> ByState<T> {
        ByState(
            self.states
                .iter()
                .map(|s| (s.state.clone(), figure(s)))
                .collect(),
        )
    }
}
