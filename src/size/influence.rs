//! Which inputs move the charge lacking most.
//!
//! ```text
//! dQ/dln x = −t (∂g/∂ln x) / (∂g/∂I)
//! ```
//! where Q charge lacking a shift (below zero to spare), x an input, I the constant current that puts
//! the build on the edge, t the engine's time in a shift, g the gain of the cycle that touches the
//! reserve, taken at that edge. Valid for small changes of x. Source: derived (implicit
//! differentiation of g(x, I) = 0).

use super::knob::{self, Knob};
use crate::build::{Accessory, Build, Draw, SourceKind};
use crate::check::reserve;
use crate::ledger::Machine;
use crate::outlook::{Spread, Turn};
use crate::quantity::{AmpHours, Amps, Fraction, Hours};
use crate::source::Winding;
use serde::Serialize;

/// The change that is made, as a share.
const BY: f64 = 0.01;
/// Change of the current, A.
const BY_AMPS: f64 = 0.05;
/// Influence below which an input is not listed, Ah.
const NOTHING: f64 = 1e-4;

/// How much an input moves the charge lacking.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Influence {
    /// The input, in words.
    pub what: String,
    /// Change of the Ah lacking each shift when the input rises by 1 % of itself; below zero it
    /// then lacks less.
    pub ah_per_percent: AmpHours,
}

/// An input that may be varied by a share of itself.
enum Input {
    Knob(Knob),
    Ohms(usize),
    Setpoint(usize),
    OpenCircuit(usize),
}

/// Every input's influence on the charge lacking each shift, greatest first; none where no charging
/// can help.
#[must_use]
pub fn influence(build: &Build) -> Vec<Influence> {
    let Some(machine) = Machine::new(build) else {
        return Vec::new();
    };
    let kept = reserve(build, &machine).soc;
    if kept > Fraction::ONE || machine.running <= Hours::ZERO {
        return Vec::new();
    }
    let Some(edge) = machine.edge(kept, Spread::Everywhere) else {
        return Vec::new();
    };
    let mut turn = Turn::default();
    let mut gain = |build: &Build, more: f64| -> Option<f64> {
        let mut machine = Machine::new(build)?;
        let reserve = reserve(build, &machine).soc;
        machine.set_extra(edge + Amps(more));
        // Twice: the second begins with this build's own depletion at its lowest point.
        let _first = turn.gain(&machine, reserve);
        let at = turn.gain(&machine, reserve).0;
        (reserve <= Fraction::ONE && at.is_finite()).then_some(at)
    };
    let here = gain(build, 0.0);
    let slope = |high: Option<f64>, low: Option<f64>, width: f64| Some((high? - low?) / width);
    let (more, less) = (gain(build, BY_AMPS), gain(build, -BY_AMPS));
    let Some(by_current) = slope(more, less, 2.0 * BY_AMPS).filter(|s| *s > 0.0) else {
        return Vec::new();
    };
    let time = machine.running_a_shift();
    let mut all: Vec<Influence> = inputs(build)
        .into_iter()
        .filter_map(|input| {
            let less = gain(&input.times(build, 1.0 - BY), 0.0);
            let by_input = if input.may_rise(build) {
                slope(gain(&input.times(build, 1.0 + BY), 0.0), less, 2.0)
            } else {
                slope(here, less, 1.0)
            }?;
            let charge = Amps(-by_input / by_current) * time;
            (charge.0.abs() >= NOTHING).then(|| Influence {
                what: input.what(build),
                ah_per_percent: charge,
            })
        })
        .collect();
    all.sort_by(|a, b| {
        let (a, b) = (a.ah_per_percent.0.abs(), b.ah_per_percent.0.abs());
        b.total_cmp(&a)
    });
    all
}

fn inputs(build: &Build) -> Vec<Input> {
    let knobs = knob::knobs(build).into_iter();
    let knobs = knobs.filter(|k| !matches!(k, Knob::AddedPower | Knob::AddedCurrent));
    let mut all: Vec<Input> = knobs.map(Input::Knob).collect();
    let resists = |a: &Accessory| matches!(a.draw.value, Draw::Resistance(_));
    let on_bus = build.accessories.iter().enumerate();
    let on_bus = on_bus.filter(|(_, a)| a.circuit.is_none() && resists(a));
    all.extend(on_bus.map(|(index, _)| Input::Ohms(index)));
    for (index, source) in build.sources.iter().enumerate() {
        if source.circuit.is_some() || source.braking {
            continue;
        }
        if matches!(source.kind, SourceKind::Winding(_)) {
            all.push(Input::OpenCircuit(index));
        }
        if source.regulator.is_some() {
            all.push(Input::Setpoint(index));
        }
    }
    all
}

impl Input {
    fn what(&self, build: &Build) -> String {
        let source = |index: usize| build.sources.get(index).map_or("source", |s| &s.name);
        match self {
            Input::Knob(Knob::Winding(index)) => format!("current of {}", source(*index)),
            Input::Knob(knob) => knob.what(build),
            Input::Ohms(index) => {
                let name = build
                    .accessories
                    .get(*index)
                    .map_or("accessory", |a| &a.name);
                format!("resistance of {name}")
            }
            Input::Setpoint(index) => format!("setpoint of {}", source(*index)),
            Input::OpenCircuit(index) => format!("open-circuit volts of {}", source(*index)),
        }
    }

    /// Whether it may be more than it is: a duty of 100 % may not.
    fn may_rise(&self, build: &Build) -> bool {
        match self {
            Input::Knob(knob) => knob
                .now(build)
                .is_some_and(|now| now * (1.0 + BY) <= knob.limit(build)),
            _ => true,
        }
    }

    /// The build with the input times a factor.
    fn times(&self, build: &Build, factor: f64) -> Build {
        if let Input::Knob(knob) = self {
            return knob.apply(build, knob.now(build).unwrap_or(0.0) * factor);
        }
        let mut changed = build.clone();
        match self {
            Input::Ohms(index) => {
                if let Some(accessory) = changed.accessory_mut(*index)
                    && let Draw::Resistance(ohms) = &mut accessory.draw.value
                {
                    *ohms = *ohms * factor;
                }
            }
            Input::Setpoint(index) => {
                let source = changed.sources.get_mut(*index);
                if let Some(regulator) = source.and_then(|s| s.regulator.as_mut()) {
                    regulator.holds.value = regulator.holds.value * factor;
                }
            }
            Input::OpenCircuit(index) => {
                let source = changed.sources.get_mut(*index);
                if let Some(SourceKind::Winding(winding)) = source.map(|s| &mut s.kind)
                    && let Some(constants) = livelier(&winding.constants, factor)
                {
                    winding.constants = constants;
                }
            }
            Input::Knob(_) => {}
        }
        changed
    }
}

/// A winding of so many times the open-circuit volts, resistance and inductance the same.
fn livelier(winding: &Winding, factor: f64) -> Option<Winding> {
    Winding::new(
        winding.open_circuit() * factor,
        winding.resistance(),
        winding.inductance(),
        winding.poles(),
        winding.phases(),
    )
    .ok()
}
