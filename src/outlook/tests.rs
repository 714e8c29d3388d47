//! The ledger and the outlook against a plain, slow computation of the same builds made outside
//! the project: fine steps, every coincidence enumerated, the cycle repeated (own Python program,
//! standard library only; figures copied here).

use super::{Lacking, Outlook};
use crate::battery::{Charge, Chemistry, Label};
use crate::build::{
    Accessory, BatterySpec, Build, Draw, Duty, Figure, Origin, Regulator, Source, SourceKind,
    Speed, State, Step, WindingSource, Works,
};
use crate::description::charging::RegulatorKind;
use crate::ledger::Machine;
use crate::quantity::{
    AmpHours, Amps, Celsius, Fraction, Henries, Hours, Ohms, Rpm, Volts, VoltsPerKelvin, Watts,
};
use crate::source::{Magnets, Rectifier, Winding};

fn figure<T>(value: T) -> Figure<T> {
    Figure {
        value,
        origin: Origin::Stated,
        tolerance: None,
        path: String::new(),
    }
}

struct Case {
    winding: (f64, f64, f64, f64, u32),
    rectifier: Rectifier,
    holds: Option<f64>,
    battery: (f64, f64),
    air: f64,
    loads: Vec<(Draw, [f64; 2], f64)>,
    speeds: [f64; 2],
    shift: Vec<(State, f64)>,
    parked: (f64, f64),
}

const IDLE: State = State::Running(0);
const GOVERNED: State = State::Running(1);

fn accessory(k: usize, draw: Draw, running: [f64; 2], stopped: f64) -> Accessory {
    let duty = Duty {
        running: running.iter().map(|d| figure(Fraction(*d))).collect(),
        stopped: figure(Fraction(stopped)),
        crank: figure(Fraction::ZERO),
    };
    let works = Works {
        low: None,
        high: None,
        stated: false,
    };
    Accessory::plain(format!("load {k}"), figure(draw), duty, works)
}

impl Case {
    fn source(&self) -> Source {
        let (volts, rpm, resistance, inductance, poles) = self.winding;
        let constants = Winding::between_leads(
            Volts(volts) / Rpm(rpm),
            Ohms(resistance),
            Henries(inductance),
            poles,
            crate::source::Phases::One,
        )
        .expect("a winding");
        let winding = WindingSource {
            open_circuit: figure((Volts(volts), Rpm(rpm))),
            resistance: figure(Ohms(resistance)),
            inductance: Some(figure(Henries(inductance))),
            rated: None,
            poles,
            phases: 1,
            working: figure(Celsius(20.0)),
            magnets: Magnets::Ferrite,
            scale: figure(Fraction::ONE),
            rectifier: Some(self.rectifier),
            constants,
        };
        Source {
            name: "winding".into(),
            path: "charging[0]".into(),
            part: None,
            kind: SourceKind::Winding(Box::new(winding)),
            circuit: None,
            braking: false,
            regulator: self.holds.map(|v| Regulator {
                holds: figure(Volts(v)),
                kind: RegulatorKind::Series,
                per_degree: VoltsPerKelvin::ZERO,
            }),
            price: None,
        }
    }

    fn build(&self) -> Build {
        let mut label = Label::new(Chemistry::Flooded, AmpHours(self.battery.0));
        label.cold_cranking = Some(Amps(self.battery.1));
        let mut accessories: Vec<Accessory> = self
            .loads
            .iter()
            .enumerate()
            .map(|(k, (draw, duty, stopped))| accessory(k, *draw, *duty, *stopped))
            .collect();
        let mut clock = accessory(99, Draw::Current(Amps(self.parked.1)), [0.0, 0.0], 0.0);
        clock.parked = Amps(self.parked.1);
        accessories.push(clock);
        Build {
            name: "case".into(),
            air: figure(Celsius(self.air)),
            speeds: ["idle", "governed"]
                .iter()
                .zip(self.speeds)
                .map(|(name, rpm)| Speed {
                    name: (*name).into(),
                    rpm: figure(Rpm(rpm)),
                })
                .collect(),
            starter: None,
            sources: vec![self.source()],
            battery: Some(BatterySpec {
                label,
                capacity: figure(AmpHours(self.battery.0)),
                cold_cranking: None,
                reserve: None,
                price: None,
                part: None,
            }),
            accessories: accessories.into_iter().map(Into::into).collect(),
            shift: self
                .shift
                .iter()
                .map(|(state, hours)| Step {
                    state: *state,
                    time: figure(Hours(*hours)),
                })
                .collect(),
            parked: figure(Hours(self.parked.0)),
            start: Fraction::ONE,
            days: None,
            charger: None,
            assumed: Vec::new(),
            wiring_assumed: Vec::new(),
            notes: Vec::new(),
            currency: String::new(),
        }
    }
}

fn full_wave_drop(drop: f64) -> Rectifier {
    Rectifier::FullWave { drop: Volts(drop) }
}

/// A build, the slow computation's charge after each step of its shift, and its balance.
type Worked = (Case, Vec<f64>, f64);

/// Volts, rpm, ohms, henries and poles of the winding of two of the builds.
const WINDING: (f64, f64, f64, f64, u32) = (27.0, 3600.0, 0.16, 0.38e-3, 16);

/// Four builds with what the slow computation makes of them.
fn cases() -> Vec<Worked> {
    vec![
        regulated_with_cycling_loads(),
        half_wave_unregulated(),
        cold_with_lamps(),
        falling_short(),
    ]
}

/// A regulated bridge with loads that cycle.
fn regulated_with_cycling_loads() -> Worked {
    (
        Case {
            winding: WINDING,
            rectifier: full_wave_drop(0.9),
            holds: Some(14.3),
            battery: (28.0, 280.0),
            air: 20.0,
            loads: vec![
                (Draw::Resistance(Ohms(2.9)), [0.0, 0.8], 0.0),
                (Draw::Power(Watts(60.0)), [1.0, 1.0], 0.0),
                (Draw::Current(Amps(5.0)), [0.5, 0.4], 0.0),
            ],
            speeds: [1750.0, 3450.0],
            shift: vec![
                (IDLE, 0.3),
                (GOVERNED, 1.5),
                (State::Stopped, 0.25),
                (GOVERNED, 1.6),
                (IDLE, 0.25),
            ],
            parked: (15.0, 0.015),
        },
        vec![0.95114, 0.97844, 0.97843, 0.99271, 0.95197],
        -1.4541,
    )
}

/// One diode, no regulator.
fn half_wave_unregulated() -> Worked {
    (
        Case {
            winding: (21.0, 3600.0, 0.7, 1.3e-3, 12),
            rectifier: Rectifier::HalfWave { drop: Volts(0.9) },
            holds: None,
            battery: (20.0, 210.0),
            air: 15.0,
            loads: vec![(Draw::Current(Amps(0.6)), [1.0, 1.0], 0.0)],
            speeds: [1700.0, 3300.0],
            shift: vec![
                (IDLE, 0.15),
                (GOVERNED, 0.9),
                (State::Stopped, 0.1),
                (GOVERNED, 0.6),
            ],
            parked: (18.0, 0.01),
        },
        vec![0.99605, 1.0, 1.0, 1.0],
        0.3686,
    )
}

/// In the cold: lamps, and loads that cycle.
fn cold_with_lamps() -> Worked {
    let lamp = |w: f64| Draw::Filament {
        power: Watts(w),
        at: Volts(13.2),
    };
    (
        Case {
            winding: (30.0, 3600.0, 0.11, 0.25e-3, 14),
            rectifier: full_wave_drop(0.95),
            holds: Some(14.2),
            battery: (40.0, 380.0),
            air: 0.0,
            loads: vec![
                (lamp(55.0), [1.0, 1.0], 0.0),
                (lamp(110.0), [0.0, 0.6], 0.0),
                (Draw::Resistance(Ohms(2.5)), [0.0, 0.7], 0.0),
                (Draw::Power(Watts(300.0)), [0.2, 0.4], 0.0),
                (Draw::Current(Amps(5.0)), [0.0, 0.0], 1.0),
            ],
            speeds: [1500.0, 3500.0],
            shift: vec![
                (IDLE, 0.25),
                (GOVERNED, 2.0),
                (State::Stopped, 0.4),
                (IDLE, 0.2),
                (GOVERNED, 1.5),
            ],
            parked: (13.0, 0.03),
        },
        vec![0.96481, 0.89414, 0.8495, 0.82288, 0.80731],
        -8.6157,
    )
}

/// A constant power that the winding does not carry.
fn falling_short() -> Worked {
    (
        Case {
            winding: WINDING,
            rectifier: full_wave_drop(0.9),
            holds: Some(14.3),
            battery: (30.0, 270.0),
            air: 28.0,
            loads: vec![
                (Draw::Power(Watts(260.0)), [0.0, 1.0], 0.0),
                (Draw::Current(Amps(2.0)), [0.0, 0.0], 1.0),
            ],
            speeds: [1800.0, 3500.0],
            shift: vec![(GOVERNED, 2.5), (State::Stopped, 0.5), (GOVERNED, 1.0)],
            parked: (12.0, 0.0),
        },
        vec![0.56031, 0.53055, 0.3448],
        -22.0172,
    )
}

fn machine(case: &Case) -> Machine {
    Machine::new(&case.build()).expect("a battery")
}

#[test]
fn charge_after_each_step() {
    for (k, (case, ends, balance)) in cases().iter().enumerate() {
        let machine = machine(case);
        let mut charges = vec![0.0; machine.cycle.len()];
        let mut ah = 0.0;
        machine.walk(Charge::FULL, None, |leg, _, stride| {
            charges[leg] = stride.after.soc.0;
            if machine.cycle[leg].state != State::Parked {
                ah += 0.5 * (stride.first.battery.0 + stride.second.battery.0) * stride.time.0;
            }
        });
        for (have, want) in charges.iter().zip(ends) {
            assert!(
                (have - want).abs() < 5e-4,
                "case {k}: {charges:?} for {ends:?}"
            );
        }
        assert!(
            (ah - balance).abs() < 0.005 * balance.abs() + 0.01,
            "case {k}: {ah} for {balance}"
        );
    }
}

#[test]
fn verdicts_of_the_slow_computation() {
    let all = cases();
    let of = |k: usize, reserve: f64| machine(&all[k].0).outlook(Charge::FULL, Fraction(reserve));
    let settles = |outlook: Outlook, at: f64| match outlook {
        Outlook::Settles { charge, .. } => {
            assert!((charge.soc.0 - at).abs() < 2e-3, "{charge:?} for {at}")
        }
        Outlook::Breaks { .. } => panic!("{outlook:?}"),
    };
    settles(of(0, 0.4), 0.92419);
    settles(of(1, 0.4), 0.99152);
    assert!(
        matches!(of(2, 0.75), Outlook::Breaks { shifts: 1, .. }),
        "{:?}",
        of(2, 0.75)
    );
    assert!(matches!(of(3, 0.7), Outlook::Breaks { shifts: 0, .. }));
    for (k, reserve, want) in [(2, 0.75, 14.736), (3, 0.7, 18.398)] {
        match machine(&all[k].0).lacking(Charge::FULL, Fraction(reserve)) {
            Lacking::Charge { charge, .. } => {
                assert!(
                    (charge.0 - want).abs() < 0.01 * want + 0.03,
                    "case {k}: {charge:?} for {want}"
                );
            }
            Lacking::BeyondCharging => panic!("case {k}: charging helps"),
        }
    }
}

/// The edge found by starting at the reserve is the edge found by trying currents one by one.
#[test]
fn the_edge_divides_keeping_up_from_not() {
    for (k, reserve) in [
        (0, 0.93),
        (0, 0.4),
        (1, 0.9),
        (2, 0.75),
        (2, 0.4),
        (3, 0.7),
        (3, 0.3),
    ] {
        let mut machine = machine(&cases()[k].0);
        let edge = machine
            .edge(Fraction(reserve), super::Spread::Everywhere)
            .expect("an edge");
        for (off, keeps) in [(2e-3, true), (-2e-3, false)] {
            machine.set_extra(edge + Amps(off));
            let outlook = machine.outlook(Charge::FULL, Fraction(reserve));
            assert_eq!(
                outlook.keeps_up(),
                keeps,
                "case {k} at {reserve}: edge {edge:?} {off}: {outlook:?}"
            );
        }
    }
}
