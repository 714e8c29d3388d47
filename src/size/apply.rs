//! A build with one number changed, and what follows from it.

use super::knob::Knob;
use crate::build::{
    Accessory, BatterySpec, Build, Draw, Duty, Figure, Origin, SourceKind, State, Works,
};
use crate::quantity::{AmpHours, Amps, Fraction, Hours, Rpm, Volts, Watts};
use std::sync::Arc;

/// Volts a cell below which a constant power or current drops out: 10.5 V of a 12 V system, as an
/// accessory of a build file has without saying so. Common practice, no source.
const DROP_OUT_CELL: f64 = 1.75;

impl Knob {
    /// The build with the amount at `x`, in the knob's unit. Equal to reading its file again with
    /// the value set.
    pub(super) fn apply(&self, build: &Build, x: f64) -> Build {
        let mut changed = build.clone();
        self.turn(&mut changed, x);
        changed
    }

    fn turn(&self, build: &mut Build, x: f64) {
        match self {
            Knob::Winding(index) => scale(build, *index, Fraction(x)),
            Knob::Capacity => {
                if let Some(battery) = &mut build.battery {
                    set_capacity(battery, AmpHours(x));
                }
            }
            Knob::ColdCranking => {
                if let Some(battery) = &mut build.battery {
                    set_cranking(battery, Amps(x));
                }
            }
            Knob::Reserve => {
                if let Some(battery) = &mut build.battery {
                    battery.reserve = Some(Figure {
                        path: "battery.reserve".to_owned(),
                        ..figure(Fraction::from_percent(x))
                    });
                }
            }
            Knob::Parked => set(&mut build.parked, Hours(x)),
            Knob::Draw(index) => {
                if let Some(accessory) = build.accessory_mut(*index) {
                    let draw = drawing(accessory.draw.value, x);
                    set(&mut accessory.draw, draw);
                }
            }
            Knob::Speed(index) => {
                if let Some(speed) = build.speeds.get_mut(*index) {
                    set(&mut speed.rpm, Rpm(x));
                }
            }
            Knob::Time(index) => {
                if let Some(step) = build.shift.get_mut(*index) {
                    set(&mut step.time, Hours::from_minutes(x));
                }
            }
            Knob::Duty { accessory, state } => {
                if let Some(accessory) = build.accessory_mut(*accessory) {
                    set_duty(&mut accessory.duty, *state, Fraction::from_percent(x));
                }
            }
            Knob::AddedPower => add(build, Draw::Power(Watts(x))),
            Knob::AddedCurrent => add(build, Draw::Current(Amps(x))),
        }
    }
}

fn set<T>(figure: &mut Figure<T>, value: T) {
    figure.value = value;
    figure.origin = Origin::Stated;
}

/// Gives a winding another scale: the same volts, resistance and inductance divided by it.
fn scale(build: &mut Build, index: usize, to: Fraction) {
    let Some(SourceKind::Winding(winding)) = build.sources.get_mut(index).map(|s| &mut s.kind)
    else {
        return;
    };
    let times = Fraction(to.0 / winding.scale.value.0);
    if let Ok(constants) = winding.constants.scaled(times) {
        winding.constants = constants;
        set(&mut winding.scale, to);
    }
}

/// Another capacity. Reserve minutes that come from a catalog part belong to another size.
fn set_capacity(battery: &mut BatterySpec, to: AmpHours) {
    if matches!(battery.capacity.origin, Origin::Catalog(_)) {
        battery.label.reserve_capacity = None;
    }
    battery.label.capacity = to;
    set(&mut battery.capacity, to);
}

/// Other cold cranking amps. A capacity that was assumed from them follows.
fn set_cranking(battery: &mut BatterySpec, to: Amps) {
    let assumed = matches!(battery.capacity.origin, Origin::Assumed(_));
    if assumed && battery.label.reserve_capacity.is_none() {
        let capacity = battery.label.chemistry.capacity_from_cranking(to);
        battery.label.capacity = capacity;
        battery.capacity.value = capacity;
    }
    battery.label.cold_cranking = Some(to);
    battery.cold_cranking = Some(Figure {
        value: to,
        origin: Origin::Stated,
        tolerance: None,
        path: "battery.cold_cranking".to_owned(),
    });
}

fn set_duty(duty: &mut Duty, state: Option<State>, share: Fraction) {
    match state {
        None => duty.running.iter_mut().for_each(|f| set(f, share)),
        Some(State::Running(speed)) => {
            if let Some(figure) = duty.running.get_mut(speed) {
                set(figure, share);
            }
        }
        Some(State::Stopped) => set(&mut duty.stopped, share),
        Some(State::Crank) => set(&mut duty.crank, share),
        Some(State::Parked) => {}
    }
}

fn figure<T>(value: T) -> Figure<T> {
    Figure {
        value,
        origin: Origin::Stated,
        tolerance: None,
        path: String::new(),
    }
}

/// A draw of the same law and another amount, in its own unit.
fn drawing(draw: Draw, x: f64) -> Draw {
    match draw {
        Draw::Current(_) => Draw::Current(Amps(x)),
        Draw::Power(_) => Draw::Power(Watts(x)),
        Draw::Filament { at, .. } => Draw::Filament {
            power: Watts(x),
            at,
        },
        Draw::Resistance(ohms) => Draw::Resistance(ohms),
    }
}

/// Adds an accessory that is on whenever the engine runs.
fn add(build: &mut Build, draw: Draw) {
    let low = Volts(DROP_OUT_CELL * f64::from(build.cells()));
    let duty = Duty {
        running: vec![figure(Fraction::ONE); build.speeds.len()],
        stopped: figure(Fraction::ZERO),
        crank: figure(Fraction::ZERO),
    };
    let works = Works {
        low: Some(low),
        high: None,
        stated: false,
    };
    let more = Accessory::plain("more load".to_owned(), figure(draw), duty, works);
    build.accessories.push(Arc::new(more));
}
