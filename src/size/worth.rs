//! What a change is worth, by hand: ampere-hours a shift at bus volts that stay as they are.
//!
//! ```text
//! W(x) = Σ t (ΔI_source(V, x) − ΔI_load(V, x))
//! ```
//! where the sum runs over the steps of the shift, t a step's time, V the bus volts of its state
//! on the edge of keeping up, ΔI the change of what is given and drawn. Valid as a first guess
//! that searches begin with: V moves, and a regulator that holds takes nothing more. Source:
//! derived (charge balance at constant volts).

use super::knob::{self, Knob};
use super::lamps::led_power;
use crate::battery::Charge;
use crate::build::{Build, Draw, SourceKind, State};
use crate::ledger::Machine;
use crate::load::LoadSum;
use crate::quantity::{AmpHours, Amps, Fraction, Hours, Rpm, Volts, Watts};
use crate::root::bracketed;
use crate::source::rectified_dc;

/// How far over the reserve, as a share of what is above it, the volts are taken.
const OVER_RESERVE: f64 = 0.15;
/// Share of the range to which a guess is found.
const GUESS: f64 = 1e-3;

/// The shift at fixed bus volts.
pub(super) struct Worth<'b> {
    build: &'b Build,
    /// State, time and bus volts of each step.
    steps: Vec<(State, Hours, Volts)>,
}

impl<'b> Worth<'b> {
    /// Of a build made ready, at a reserve, with a current added that puts it on the edge.
    pub(super) fn new(build: &'b Build, machine: &Machine, reserve: Fraction, edge: Amps) -> Self {
        let mut machine = machine.clone();
        machine.set_extra(edge);
        let reserve = reserve.min(Fraction::ONE);
        let soc = reserve + OVER_RESERVE * reserve.rest();
        let volts: Vec<(State, Volts)> = machine
            .connected
            .iter()
            .enumerate()
            .map(|(k, w)| (w.state, machine.flow(k, Charge::rested(soc)).bus))
            .collect();
        let at = |state: State| {
            let found = volts.iter().find(|(s, _)| *s == state);
            found.map(|(_, volts)| *volts)
        };
        let steps = build
            .shift
            .iter()
            .filter_map(|step| Some((step.state, step.time.value, at(step.state)?)));
        Worth {
            build,
            steps: steps.collect(),
        }
    }

    /// Charge a shift that a knob at `x` adds.
    pub(super) fn of(&self, knob: &Knob, x: f64) -> AmpHours {
        match knob {
            Knob::Winding(index) => self.of_winding(*index, Fraction(x)),
            Knob::Speed(index) => self.of_speed(*index, Rpm(x)),
            Knob::Duty { accessory, state } => {
                self.of_duty(*accessory, *state, Fraction::from_percent(x))
            }
            Knob::AddedPower => self.over_running(|v| -(Watts(x) / v)),
            Knob::AddedCurrent => self.over_running(|_| Amps(-x)),
            Knob::Capacity
            | Knob::ColdCranking
            | Knob::Reserve
            | Knob::Time(_)
            | Knob::Parked
            | Knob::Draw(_) => AmpHours::ZERO,
        }
    }

    /// Charge a shift that LED lamps in place of filament lamps add.
    pub(super) fn of_led(&self, lamps: &[usize]) -> AmpHours {
        let each = lamps.iter().filter_map(|i| self.build.accessories.get(*i));
        each.filter_map(|a| Some((a, led_power(a)?)))
            .map(|(a, power)| {
                let (old, new) = (
                    LoadSum::of(a.draw.value, a.count),
                    LoadSum::of(Draw::Power(power), a.count),
                );
                let steps = self.steps.iter();
                steps
                    .map(|(state, time, v)| {
                        (old.current_at(*v) - new.current_at(*v)) * a.duty.share(*state) * *time
                    })
                    .sum::<AmpHours>()
            })
            .sum()
    }

    /// The amount between two at which the worth is as wanted; none where it does not reach it.
    pub(super) fn amount(&self, knob: &Knob, wanted: AmpHours, from: f64, to: f64) -> Option<f64> {
        let lacks = |x: f64| self.of(knob, x).0 - wanted.0;
        bracketed(lacks, from, to, GUESS * (to - from).abs()).ok()
    }

    fn over_running(&self, gives: impl Fn(Volts) -> Amps) -> AmpHours {
        let running = self
            .steps
            .iter()
            .filter(|(state, _, _)| matches!(state, State::Running(_)));
        running.map(|(_, time, v)| gives(*v) * *time).sum()
    }

    fn of_winding(&self, index: usize, scale: Fraction) -> AmpHours {
        let Some(winding) = knob::winding(self.build, index) else {
            return AmpHours::ZERO;
        };
        let times = Fraction(scale.0 / winding.scale.value.0);
        let (Ok(scaled), Some(rectifier)) =
            (winding.constants.scaled(times), winding.rectifier.as_ref())
        else {
            return AmpHours::ZERO;
        };
        let steps = self.steps.iter();
        steps
            .map(|(state, time, v)| {
                let rpm = self.build.rpm(*state);
                let gives = |w| rectified_dc(w, rectifier, rpm, *v);
                (gives(&scaled) - gives(&winding.constants)) * *time
            })
            .sum()
    }

    fn of_speed(&self, index: usize, rpm: Rpm) -> AmpHours {
        let state = State::Running(index);
        let steps = self.steps.iter().filter(|(s, _, _)| *s == state);
        let now = self.build.rpm(state);
        let given = |rpm: Rpm, v: Volts| -> Amps {
            let on_bus = self
                .build
                .sources
                .iter()
                .filter(|s| s.circuit.is_none() && !s.braking);
            on_bus
                .map(|source| match &source.kind {
                    SourceKind::Winding(w) => w
                        .rectifier
                        .as_ref()
                        .map_or(Amps::ZERO, |r| rectified_dc(&w.constants, r, rpm, v)),
                    SourceKind::Alternator(a) => a.output(rpm),
                })
                .sum()
        };
        steps
            .map(|(_, time, v)| (given(rpm, *v) - given(now, *v)) * *time)
            .sum()
    }

    fn of_duty(&self, index: usize, state: Option<State>, share: Fraction) -> AmpHours {
        let Some(accessory) = self.build.accessories.get(index) else {
            return AmpHours::ZERO;
        };
        let sum = LoadSum::of(accessory.draw.value, accessory.count);
        let concerned = self.steps.iter().filter(|(s, _, _)| match state {
            Some(state) => *s == state,
            None => matches!(s, State::Running(_)),
        });
        concerned
            .map(|(s, time, v)| sum.current_at(*v) * (accessory.duty.share(*s) - share) * *time)
            .sum()
    }
}
