//! The reserve against the air: warmer air never asks for more charge, nor takes volts from a start.
//!
//! Outside ground, each of them easing as the air warms: an engine needs less cranking power
//! (printed "power required" table: 1.55 at 0 °C, 2.10 at −18 °C and 3.50 at −29 °C, over 27 °C), a
//! battery has less resistance and more usable capacity (IEEE 485, from memory), and full acid stays
//! clear of freezing. A starter's least volts do not fall with the cold: V = k n + I R (law of the
//! direct-current motor), at the same speed n and a greater current I.

mod seasons_bench;

use ampledger::battery::{Battery, Charge, Chemistry, Label, StartFloor, Starter};
use ampledger::build::Build;
use ampledger::check::answer::Verdict;
use ampledger::check::season::{Range, season};
use ampledger::quantity::{AmpHours, Amps, Celsius, Fraction, Hours, Kelvins, Ohms, Volts};
use seasons_bench::*;

/// Halvings of the search for the reserve end within this share of charge.
const ROUNDING: f64 = 1e-12;
/// Every kelvin from −30 to 40 °C.
const AIRS: std::ops::RangeInclusive<i32> = -30..=40;

/// The reserve (over 1: not even full is enough) and the volts to spare from a full battery.
fn at(build: &Build, air: i32) -> (Fraction, Volts) {
    let mut build = build.clone();
    build.air.value = Celsius(f64::from(air));
    let machine = machine(&build);
    let asks = build.starter.as_ref().unwrap().asks();
    let margin = machine
        .battery
        .start_margin(Charge::FULL, &asks, build.air.value);
    (reserve(&build, &machine), margin.volts)
}

/// Holds a build to it, and counts the airs at which its reserve truly moves.
fn eases(build: &Build) -> usize {
    let all: Vec<(Fraction, Volts)> = AIRS.map(|air| at(build, air)).collect();
    for (pair, air) in all.windows(2).zip(AIRS) {
        let [(reserve, margin), (warmer, warmer_margin)] = pair else {
            panic!("pairs");
        };
        let name = &build.name;
        assert!(
            warmer.0 <= reserve.0 + ROUNDING,
            "{name}: {reserve:?} at {air} °C, {warmer:?} a kelvin warmer"
        );
        assert!(
            warmer_margin >= margin,
            "{name}: {margin:?} at {air} °C, {warmer_margin:?} a kelvin warmer"
        );
    }
    all.windows(2).filter(|pair| pair[1].0 < pair[0].0).count()
}

#[test]
fn the_examples_ask_for_no_more_in_warmer_air() {
    let mut started = 0;
    for entry in std::fs::read_dir("examples").unwrap() {
        let path = entry.unwrap().path();
        if path.extension().is_none_or(|e| e != "yaml") {
            continue;
        }
        let text = std::fs::read_to_string(&path).unwrap();
        if !text.contains("starter:") {
            continue;
        }
        let build = made(&text);
        // A 24 V machine with 18 V a start or any other least of its own is held to it as well.
        assert!(eases(&build) >= 5, "{path:?}: its reserve hardly moves");
        started += 1;
    }
    assert!(started >= 12, "{started} examples with a starter");
}

#[test]
fn random_builds_ask_for_no_more_in_warmer_air() {
    let moved = (0..60).filter(|seed| eases(&made(&random(*seed))) > 5);
    assert!(moved.count() > 50);
}

/// Labels and starters far outside the builds': small and large, weak and strong, long rows of starts.
#[test]
fn random_labels_ask_for_no_more_in_warmer_air() {
    let mut r = Seeded(7);
    let mut started = 0;
    for _ in 0..300 {
        let capacity = r.between(4.0, 200.0);
        let cranks = Amps(capacity * r.between(3.0, 15.0));
        let battery = Battery::from_label(&Label {
            cells: r.one_of(&[3, 6, 12]),
            cold_cranking: Some(cranks),
            health: Fraction(r.between(0.3, 1.0)),
            ..Label::new(
                r.one_of(&[Chemistry::Flooded, Chemistry::Agm, Chemistry::Gel]),
                AmpHours(capacity),
            )
        });
        let starter = Starter {
            time: Hours::from_seconds(r.between(1.0, 20.0)),
            attempts: 1 + r.below(10),
            rest: Hours::from_seconds(r.between(0.0, 60.0)),
            cable: Ohms(r.between(0.0, 0.3) / cranks.0),
            ..Starter::new(r.between(0.1, 0.8) * cranks)
        };
        let floor = |air: i32| match battery.start_floor(&starter, Celsius(f64::from(air))) {
            StartFloor::Down { to, .. } => to.0,
            StartFloor::Cannot { .. } => 2.0,
        };
        let all: Vec<f64> = AIRS.map(floor).collect();
        started += usize::from(all.iter().any(|soc| *soc > 0.2 && *soc < 1.0));
        for (pair, air) in all.windows(2).zip(AIRS) {
            assert!(
                pair[1] <= pair[0] + ROUNDING,
                "{starter:?}\n{battery:?}\n{pair:?} at {air} °C and a kelvin warmer"
            );
        }
    }
    assert!(
        started > 200,
        "{started} of 300 have a reserve that matters"
    );
}

/// The case that came out wrong: a limit of 7.2 V below −10 °C and 9.0 V from there on let it keep up
/// at −15 °C and not at −10 °C.
#[test]
fn no_cold_year_turns_twice() {
    let text = std::fs::read_to_string("examples/fleet-verge-mower.yaml").unwrap();
    let range = Range {
        from: Celsius(-20.0),
        to: Celsius(20.0),
        step: Kelvins(1.0),
    };
    let rows = season(&made(&text), range).unwrap().rows;
    let keeps: Vec<bool> = rows
        .iter()
        .map(|row| row.verdict == Verdict::KeepsUp)
        .collect();
    assert!(!keeps[0] && keeps[40], "{keeps:?}");
    assert!(keeps.is_sorted(), "{keeps:?}");
    // Stating what its starter is known to work with moves the cold edge, and nothing else.
    let text = text.replace(
        "{part: starter-twin-small}",
        "{part: starter-twin-small, least_volts: 7.2 V}",
    );
    let weaker = season(&made(&text), range).unwrap().rows;
    for (row, weaker) in rows.iter().zip(&weaker) {
        assert!(weaker.reserve_soc <= row.reserve_soc, "{row:?} {weaker:?}");
    }
    assert_eq!(weaker[5].verdict, Verdict::KeepsUp, "{:?}", weaker[5]);
}
