//! Wire, fuse and relay: every answer holds all constraints when worked again from the printed
//! tables, a longer run never gets a thinner wire, and what would do does.

mod wire_bench;

use ampledger::build::{Build, Draw, accessory::Wire as Laid};
use ampledger::quantity::{Amps, Celsius, Fraction, Metres, Ohms, Volts, Watts};
use ampledger::wire::{Gauge, Options, Wire, Wires, wires};
use proptest::prelude::*;
use proptest::test_runner::RngSeed;
use wire_bench::*;

/// One random accessory.
#[derive(Clone, Copy, Debug)]
struct Random {
    draw: Draw,
    count: u32,
    run: f64,
    class: usize,
    engine_space: bool,
    return_wire: bool,
    bundle: u32,
    max_drop: f64,
}

fn draws() -> impl Strategy<Value = Draw> {
    prop_oneof![
        (0.01..45.0).prop_map(|a| Draw::Current(Amps(a))),
        (0.3..60.0).prop_map(|r| Draw::Resistance(Ohms(r))),
        (1.0..400.0).prop_map(|p| Draw::Power(Watts(p))),
        (5.0..120.0).prop_map(|p| Draw::Filament {
            power: Watts(p),
            at: Volts(12.8)
        }),
    ]
}

fn randoms() -> impl Strategy<Value = Random> {
    let place = (0usize..7, any::<bool>(), any::<bool>(), 1u32..9);
    (draws(), 1u32..3, 0.0..30.0, place, 0.02..0.1).prop_map(
        |(draw, count, run, place, max_drop)| {
            let (class, engine_space, return_wire, bundle) = place;
            Random {
                draw,
                count,
                run,
                class,
                engine_space,
                return_wire,
                bundle,
                max_drop,
            }
        },
    )
}

fn bare() -> Build {
    machine(
        "",
        &["name: thing, draw: 1 A, duty: {governed: 20 %}, run: 1 m"],
    )
}

fn built(base: &Build, random: &Random) -> Build {
    let mut build = base.clone();
    let accessory = build.accessory_mut(0).expect("an accessory");
    accessory.draw.value = random.draw;
    accessory.count = random.count;
    accessory.works.low = matches!(random.draw, Draw::Power(_)).then_some(Volts(10.5));
    accessory.wire = Laid {
        run: Some(Metres(random.run)),
        feed: None,
        return_wire: random.return_wire,
        insulation: Celsius(CLASSES[random.class]),
        engine_space: random.engine_space,
        bundle: random.bundle,
        max_drop: Fraction(random.max_drop),
        switch: Amps(10.0),
    };
    build
}

/// What the wire's amps must be at least: the draw at a plain supply, worked by hand.
fn plain_amps(random: &Random) -> f64 {
    let count = f64::from(random.count);
    count
        * match random.draw {
            Draw::Current(amps) => amps.0,
            Draw::Resistance(ohms) => 14.4 / ohms.0,
            Draw::Power(watts) => watts.0 / 12.0,
            Draw::Filament { power, at } => power.0 / at.0 * (14.4 / at.0).powf(0.55),
        }
}

/// The figures of one size, worked from the printed tables.
fn worked(area: f64, metre: f64, amps: f64, random: &Random) -> (f64, f64, f64) {
    let carries = may_carry(area, random.class, random.engine_space, random.bundle);
    let air = if random.engine_space { 50.0 } else { 30.0 };
    let copper = air + (CLASSES[random.class] - air) * (amps / carries).min(1.0).powi(2);
    let length = random.run * if random.return_wire { 2.0 } else { 1.0 };
    let ohms = metre * length * (1.0 + 0.00393 * (copper - 20.0));
    (carries, copper, amps * ohms)
}

fn holds(row: &Wire, gauge: Gauge, random: &Random) -> Result<(), TestCaseError> {
    let amps = row.amps.0;
    prop_assert!(amps >= plain_amps(random) * (1.0 - 1e-9), "{amps}");
    let sizes = sizes(gauge);
    let at = sizes
        .iter()
        .position(|(a, _)| (a - row.section_mm2.0).abs() < 1e-6 * a);
    let at = at.ok_or_else(|| TestCaseError::fail(format!("no size of {:?}", row.section_mm2)))?;
    let (carries, copper, lost) = worked(sizes[at].0, sizes[at].1, amps, random);
    prop_assert!((row.ampacity_a.0 - carries).abs() < 1e-9 * carries);
    prop_assert!((row.copper_c.0 - copper).abs() < 1e-6);
    prop_assert!(
        (row.drop_v.0 - lost).abs() <= 1e-9 + 1e-6 * lost,
        "{} for {lost}",
        row.drop_v.0
    );
    prop_assert!(RATINGS.contains(&row.fuse_a.0));
    prop_assert!(
        row.fuse_a.0 * 0.8 >= amps * (1.0 - 1e-9),
        "the fuse is overloaded"
    );
    prop_assert!(
        row.fuse_a.0 <= carries * (1.0 + 1e-12),
        "the fuse is above the wire's allowance"
    );
    prop_assert!(lost <= random.max_drop * 12.0 + 1e-9, "{lost} V lost");
    prop_assert!((row.drop_fraction.0 * 12.0 - row.drop_v.0).abs() < 1e-12);
    // No smaller fuse would carry the load; no thinner wire holds fuse and volts at even this current.
    prop_assert!(RATINGS.iter().all(|r| *r >= row.fuse_a.0 || r * 0.8 < amps));
    if let (Some((area, metre)), Draw::Current(_)) =
        (at.checked_sub(1).map(|k| sizes[k]), random.draw)
    {
        let (carries, _, lost) = worked(area, metre, amps, random);
        prop_assert!(
            carries < row.fuse_a.0 || lost > random.max_drop * 12.0 - 1e-9,
            "a thinner wire would do"
        );
    }
    Ok(())
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 96, failure_persistence: None, rng_seed: RngSeed::Fixed(1), ..ProptestConfig::default() })]

    #[test]
    fn every_answer_holds_all_constraints(random in randoms(), gauge in any::<bool>()) {
        let gauge = if gauge { Gauge::Metric } else { Gauge::Awg };
        let answer = wires(&built(&bare(), &random), &Options { gauge });
        prop_assert_eq!(answer.wires.len() + answer.unmet.len(), 1);
        for row in &answer.wires {
            holds(row, gauge, &random)?;
        }
        for row in &answer.unmet {
            prop_assert!(!row.impossible.is_empty());
        }
    }

    #[test]
    fn a_longer_run_never_gets_a_thinner_wire(random in randoms(), more in 1.0..5.0) {
        let base = bare();
        let far = Random { run: random.run * more, ..random };
        let (short, long) = (metric(&built(&base, &random)), metric(&built(&base, &far)));
        match (short.wires.first(), long.wires.first()) {
            (Some(a), Some(b)) => {
                prop_assert!(b.section_mm2 >= a.section_mm2);
                prop_assert!(b.section_mm2 > a.section_mm2 || b.drop_v >= a.drop_v);
            }
            (None, Some(_)) => prop_assert!(false, "the longer run has a wire, the shorter none"),
            _ => {}
        }
    }
}

/// The build that the acceptance of the whole program sizes, and three times its runs.
#[test]
fn lamps_and_a_pump() {
    let with = |factor: f64| {
        metric(&machine(
            "",
            &[
                &format!(
                    "name: work lamps, draw: 172 W, duty: {{idle: 100 %, governed: 100 %}}, run: {} m",
                    2.5 * factor
                ),
                &format!(
                    "name: spray pump, draw: 4 A, duty: {{governed: 10 %}}, run: {} m",
                    1.8 * factor
                ),
            ],
        ))
    };
    let (near_by, far) = (with(1.0), with(3.0));
    for row in near_by.wires.iter().chain(&far.wires) {
        assert!(RATINGS.contains(&row.fuse_a.0));
        assert!(row.fuse_a.0 >= row.amps.0 / 0.8 && row.fuse_a <= row.ampacity_a);
        assert!(row.drop_fraction.0 <= 0.03);
    }
    assert_eq!(near_by.wires.len(), 2);
    // 172 W at 12 V is 14.33 A: a 20 A fuse, and 2.5 mm² in the engine space may carry 19.5 A only.
    let lamps = &near_by.wires[0];
    assert!(
        lamps.amps.0 > 172.0 / 12.0 && lamps.amps.0 < 15.0,
        "{:?}",
        lamps.amps
    );
    assert_eq!((lamps.fuse_a, lamps.section_mm2.0), (Amps(20.0), 4.0));
    for (a, b) in near_by.wires.iter().zip(&far.wires) {
        assert!(b.section_mm2 >= a.section_mm2);
    }
}

#[test]
fn what_would_do_does() {
    let draw = "name: pump, draw: 30 A, kind: motor, duty: {governed: 5 %}";
    let unmet = |answer: &Wires| answer.unmet.first().cloned();
    let far = metric(&machine("", &[&format!("{draw}, run: 140 m")]));
    let told = unmet(&far).unwrap();
    assert!(
        told.impossible[0].starts_with("volts lost: 95 mm²"),
        "{told:?}"
    );
    let figure = |begins: &str| -> f64 {
        let text = told.would.iter().find(|w| w.starts_with(begins)).unwrap();
        let digits: String = text[begins.len()..]
            .chars()
            .take_while(|c| c.is_ascii_digit() || *c == '.')
            .collect();
        digits.parse().unwrap()
    };
    let run = figure("a run of at most ");
    for (run, does) in [(run, true), (run + 0.2, false)] {
        let answer = metric(&machine("", &[&format!("{draw}, run: {run} m")]));
        assert_eq!(answer.wires.len() == 1, does, "{run} m");
    }
    let share = figure("`max_drop: ");
    for (share, does) in [(share, true), (share - 0.2, false)] {
        let answer = metric(&machine(
            "",
            &[&format!("{draw}, run: 140 m, max_drop: {share} %")],
        ));
        assert_eq!(answer.wires.len() == 1, does, "{share} %");
    }
}

/// Each of the three constraints by itself.
#[test]
fn what_cannot_be_met_is_told() {
    let told = |wiring: &str, accessory: &str| {
        let answer = metric(&machine(wiring, &[accessory]));
        assert!(answer.wires.is_empty());
        let row = answer.unmet[0].clone();
        (row.impossible, row.would)
    };
    let has = |texts: &[String], part: &str| {
        assert!(texts.iter().any(|t| t.contains(part)), "{part}: {texts:?}");
    };
    // 120 A: no standard fuse carries more than 80 A (100 A × 0.8). 120 / 0.8 = 150 A; 35 mm² counts as
    // 2 AWG, 175 A at 80 °C, 0.78 of it 136.5 A; 50 mm² as 1 AWG, 210 A, 163.8 A.
    let winch = "name: winch, draw: 120 A, duty: {stopped: 1 %}, run: 2 m";
    let (impossible, would) = told("", winch);
    has(&impossible, "fuse and load: the load is 120 A");
    has(&would, "150 A to 164 A on 50 mm²");
    // Insulation below the table's lowest class.
    let poor = "name: lamp, draw: 1 A, duty: 10 %, run: 2 m, insulation: 50 °C";
    let (impossible, would) = told("", poor);
    has(&impossible, "60 °C");
    has(&would, "insulation of 60 °C");
    // 64 A in a bundle of 25, 60 °C insulation, engine space: an 80 A fuse, but 95 mm² (3/0 AWG) may
    // carry 260 A × 0.58 × 0.4 = 60.3 A.
    let heater = "name: heater, draw: 64 A, kind: heater, duty: 10 %, run: 1 m";
    let (impossible, would) = told("bundle: 25, insulation: 60 °C", heater);
    has(
        &impossible,
        "fuse and wire: the load needs a fuse of 80 A, 95 mm²",
    );
    has(&impossible, "may carry 60.3 A");
    has(&would, "the wire by itself");
}
