//! The battery over the seasons: cold and heat, storage, rundown, age, and systems of 6 and 24 V.

mod seasons_bench;

use ampledger::battery::Charge;
use ampledger::check::answer::Verdict;
use ampledger::check::season::{Range, SeasonRow, season};
use ampledger::check::{first_shift, rule};
use ampledger::quantity::{Celsius, Fraction, Volts};
use seasons_bench::*;

/// A machine that keeps up in summer.
const YARD: &str = "build: yard
air: 20 °C
engine:
  speeds: {idle: 1800 rpm, governed: 3400 rpm}
  starter: {draw: 130 A, time: 3 s, cable: 3 mohm}
charging:
  - winding: {open_circuit: 28 V at 3600 rpm, resistance: 0.14 ohm, inductance: 0.4 mH, poles: 12}
    rectifier: {kind: full-wave, drop: 0.9 V}
    regulator: {holds: 14.4 V}
battery: {capacity: 40 Ah, cold_cranking: 360 A, type: flooded, cells: 6}
accessories:
  - {name: clutch, draw: 3.2 ohm, duty: {governed: 80 %}}
  - {name: lamps, draw: 54 W, law: filament, at: 12 V, duty: {idle: 50 %, governed: 100 %}}
  - {name: screen, draw: 18 W, duty: 100 %}
  - {name: clock, draw: 0.05 A, parked: 15 mA, duty: 100 %}
shift:
  - crank
  - idle: 15 min
  - governed: 1 h 10 min
  - crank
  - governed: 50 min
parked: 16 h
";

fn margin(row: &SeasonRow) -> Volts {
    row.crank_margin_v.unwrap()
}

#[test]
fn cold_takes_the_margin_of_a_start() {
    let rows = season(&made(YARD), Range::default()).unwrap().rows;
    let airs: Vec<f64> = rows.iter().map(|row| row.air_c.0).collect();
    assert_eq!(
        airs,
        [
            -20.0, -15.0, -10.0, -5.0, 0.0, 5.0, 10.0, 15.0, 20.0, 25.0, 30.0, 35.0, 40.0
        ]
    );
    for pair in rows[..11].windows(2) {
        assert!(margin(&pair[0]) < margin(&pair[1]), "{pair:?}");
        assert!(pair[0].reserve_soc >= pair[1].reserve_soc, "{pair:?}");
    }
    // What keeps up in the cold keeps up in the mild; the verdict turns once on the way from -20 to 30 °C.
    let keeps: Vec<bool> = rows[..11]
        .iter()
        .map(|row| row.verdict == Verdict::KeepsUp)
        .collect();
    assert!(!keeps[0] && keeps[10], "{keeps:?}");
    assert_eq!(
        keeps.windows(2).filter(|p| p[0] != p[1]).count(),
        1,
        "{keeps:?}"
    );
    for row in &rows {
        assert_eq!(row.settles_soc.is_some(), row.verdict == Verdict::KeepsUp);
        assert_eq!(
            row.shifts_carried.is_none(),
            row.verdict == Verdict::KeepsUp
        );
        assert!(
            row.freezes_c.0 < row.air_c.0 || row.verdict != Verdict::KeepsUp,
            "{row:?}"
        );
    }
}

/// Every row of a season is the ruling on the build at that air.
#[test]
fn a_row_of_a_season_is_a_check_at_that_air() {
    let range = Range {
        from: Celsius(-12.0),
        to: Celsius(33.0),
        step: ampledger::quantity::Kelvins(15.0),
    };
    let rows = season(&made(YARD), range).unwrap().rows;
    assert_eq!(rows.len(), 4);
    for row in rows {
        let text = swap(YARD, "air: 20 °C", &format!("air: {} °C", row.air_c.0));
        let ruling = rule(&made(&text)).unwrap();
        assert_eq!(
            (row.verdict, row.shifts_carried, row.lacks_ah),
            (ruling.verdict, ruling.shifts_carried, ruling.lacks)
        );
    }
}

/// A 45 Ah battery (70 min, 400 A) with 20 mA of parked draw and a starter of 120 A (three starts of 5 s, 10 s apart, 4 mΩ
/// of cable), put away full.
const SHED: &str = "build: shed
air: 0 °C
engine: {speeds: {governed: 3000 rpm}, starter: {draw: 120 A, time: 5 s, starts: 3, rest: 10 s, cable: 4 mohm}}
charging: []
battery: {capacity: 45 Ah, reserve_capacity: 70 min, cold_cranking: 400 A, type: flooded}
accessories:
  - {name: drain, draw: 20 mA, parked: 20 mA}
shift: [crank]
parked: 24 h
";

#[test]
fn days_until_it_will_not_crank() {
    // Own calculation of the same equations outside the project: the lowest charge with which it starts is 0.48149 at
    // 0 °C, 51.395 days from full; 0.48 and 0.65 at 0 and -18 °C (there with 7.2 V), 51 and 35 days. At 25 °C the floor of the equations is
    // .05 and is held at the least charge trusted, 0.2, so that the 90 days become fewer.
    let at = |air: f64| checked(&made(&swap(SHED, "air: 0 °C", &format!("air: {air} °C")))).check;
    let cold = at(0.0);
    let storage = cold.storage.unwrap();
    assert_eq!(storage.from_soc, Fraction::ONE);
    assert!((storage.drain_a.0 - 0.02).abs() < 1e-12);
    assert!(
        (cold.reserve_soc.unwrap().0 - 0.48149).abs() < 1e-5,
        "{:?}",
        cold.reserve_soc
    );
    assert!(
        (storage.days_to_reserve.unwrap().0 - 51.395).abs() < 1e-3,
        "{storage:?}"
    );
    // The outside figure at -18 °C is for a starter that works with 7.2 V.
    let colder = swap(SHED, "air: 0 °C", "air: -18 °C");
    let colder = swap(
        &colder,
        "cable: 4 mohm",
        "cable: 4 mohm, least_volts: 7.2 V",
    );
    let colder = checked(&made(&colder)).check;
    assert!(
        (colder.reserve_soc.unwrap().0 - 0.65).abs() < 0.005,
        "{:?}",
        colder.reserve_soc
    );
    assert!((colder.storage.unwrap().days_to_reserve.unwrap().0 - 35.0).abs() < 0.5);
    let mild = at(25.0);
    assert_eq!(mild.reserve_soc, Some(Fraction(0.2)));
    let days = mild.storage.unwrap().days_to_reserve.unwrap().0;
    assert!(
        days > storage.days_to_reserve.unwrap().0 && days < 90.0,
        "{days}"
    );
    // To be recharged at 70 %, before that; and the reserve's acid freezes lower than the air.
    assert!(storage.days_to_recharge.unwrap() < storage.days_to_reserve.unwrap());
    assert!(storage.freezes_c.0 < -5.0, "{storage:?}");
}

/// The key on and the engine off: the hours until 10.5 V are the battery's capacity at that draw over the draw.
#[test]
fn a_rundown_takes_the_capacity_at_its_draw() {
    for (amps, air) in [(2.25, 25.0), (9.0, 25.0), (9.0, 0.0)] {
        let text = format!(
            "build: stand\nair: {air} °C\nengine: {{speeds: {{governed: 3000 rpm}}}}\ncharging: []\nbattery: {{capacity: 45 Ah, reserve_capacity: 70 min, cold_cranking: 400 A, type: flooded, reserve: 40 %}}\naccessories:\n  - {{name: load, draw: {amps} A, works: 6 V to 16 V, duty: {{stopped: 100 %}}}}\nshift: [{{stopped: 1 h}}]\n"
        );
        let build = made(&text);
        let found = checked(&build).check.rundown.unwrap();
        let battery = machine(&build).battery;
        let draw = ampledger::quantity::Amps(amps);
        let capacity = battery.capacity_at(draw, Celsius(air));
        let hours = found.hours_to_empty.unwrap();
        // The capacity is where the depleted acid's charge ends; 1.75 V a cell come a little before or after it.
        assert!(
            (hours / (capacity / draw) - 1.0).abs() < 0.06,
            "{hours:?} of {capacity:?} at {draw:?}"
        );
        assert!(
            (found.taken_ah / (draw * hours) - 1.0).abs() < 2e-3,
            "{found:?}"
        );
        // The same by a search of its own in the battery.
        let alone = battery
            .rundown(Charge::FULL, draw, Volts(10.5), Celsius(air))
            .unwrap();
        assert!(
            (hours / alone.time - 1.0).abs() < 5e-3,
            "{hours:?} {alone:?}"
        );
        // 60 % of the greatest capacity go before the reserve is broken; a gassing current of milliamperes comes on top.
        let until = found.hours_to_reserve.unwrap();
        let first = battery.cmax().0 * 0.6 / amps;
        assert!(
            (until.0 / first - 1.0).abs() < 5e-3,
            "{until:?} for {first}"
        );
        assert!(until < hours);
    }
    // The engine runs: no rundown.
    assert!(checked(&made(YARD)).check.rundown.is_none());
}

/// A system of other cells: all volts, ohms, watts and henries in proportion, amps as they are.
fn in_proportion(text: &str, by: f64) -> String {
    let mut out = text.to_owned();
    for (old, value, unit) in [
        ("cable: 3 mohm", 3.0, "cable: {} mohm"),
        ("open_circuit: 28 V", 28.0, "open_circuit: {} V"),
        ("resistance: 0.14 ohm", 0.14, "resistance: {} ohm"),
        ("inductance: 0.4 mH", 0.4, "inductance: {} mH"),
        ("drop: 0.9 V", 0.9, "drop: {} V"),
        ("holds: 14.4 V", 14.4, "holds: {} V"),
        ("cells: 6", 6.0, "cells: {}"),
        ("draw: 3.2 ohm", 3.2, "draw: {} ohm"),
        ("draw: 54 W", 54.0, "draw: {} W"),
        ("at: 12 V", 12.0, "at: {} V"),
        ("draw: 18 W", 18.0, "draw: {} W"),
    ] {
        out = swap(&out, old, &unit.replace("{}", &format!("{}", value * by)));
    }
    out
}

#[test]
fn six_and_twenty_four_volts() {
    for air in ["20 °C", "-12 °C"] {
        let text = swap(YARD, "air: 20 °C", &format!("air: {air}"));
        let twelve = checked(&made(&text)).check;
        for (by, volts) in [(0.5, 6.0), (2.0, 24.0)] {
            let other = checked(&made(&in_proportion(&text, by))).check;
            assert_eq!(other.system_v, Volts(volts));
            assert_eq!(
                (other.verdict, other.shifts_carried),
                (twelve.verdict, twelve.shifts_carried)
            );
            let near = |a: Option<Fraction>, b: Option<Fraction>| match (a, b) {
                (Some(a), Some(b)) => assert!(
                    (a - b).abs() < Fraction(1e-6),
                    "{air}, {volts} V: {a:?} {b:?}"
                ),
                (a, b) => assert_eq!(a, b),
            };
            near(other.settles_soc, twelve.settles_soc);
            near(other.reserve_soc, twelve.reserve_soc);
            near(other.lowest_soc, twelve.lowest_soc);
            assert_eq!(other.steps.len(), twelve.steps.len());
            for (a, b) in other.steps.iter().zip(&twelve.steps) {
                near(Some(a.soc_end), Some(b.soc_end));
                assert!(
                    (a.bus_v_end.0 / by - b.bus_v_end.0).abs() < 1e-4,
                    "{a:?} {b:?}"
                );
            }
            for (a, b) in other.states.iter().zip(&twelve.states) {
                assert!(
                    (a.loads_a - b.loads_a).abs().0 < 1e-4
                        && (a.battery_a - b.battery_a).abs().0 < 1e-4,
                    "{a:?} {b:?}"
                );
            }
        }
    }
}

#[test]
fn an_aged_battery_holds_less_and_cranks_worse() {
    let of = |keys: &str| made(&swap(YARD, "cells: 6", &format!("cells: 6{keys}")));
    let (new, aged) = (of(""), of(", health: 80 %"));
    let (a, b) = (machine(&new).battery, machine(&aged).battery);
    assert!(
        (b.cmax() / a.cmax() - 0.8).abs() < 1e-9,
        "{:?} {:?}",
        a.cmax(),
        b.cmax()
    );
    assert!(b.resistance() > a.resistance());
    let starter = new.starter.as_ref().unwrap().asks();
    let volts = |battery: &ampledger::battery::Battery| {
        battery.crank(Charge::FULL, &starter, Celsius(0.0)).starter
    };
    assert!(volts(&b) < volts(&a));
    let (new, aged) = (checked(&new).check, checked(&aged).check);
    assert!(aged.reserve_soc >= new.reserve_soc);
    // The same shift takes about the same ampere-hours out of less.
    let dip = |check: &ampledger::check::answer::Check| {
        Fraction::ONE
            - check
                .steps
                .iter()
                .map(|s| s.soc_end)
                .fold(Fraction::ONE, Fraction::min)
    };
    assert!(dip(&aged) > dip(&new), "{:?} {:?}", dip(&aged), dip(&new));
    let days =
        |check: &ampledger::check::answer::Check| check.storage.unwrap().days_to_recharge.unwrap();
    assert!(days(&aged) < days(&new));
}

#[test]
fn a_gassing_battery_loses_more_water_and_stands_less_long() {
    let of = |keys: &str| made(&swap(YARD, "cells: 6", &format!("cells: 6{keys}")));
    let (new, old) = (of(""), of(", gassing: 4"));
    let gassed = |build: &ampledger::build::Build| {
        first_shift(build, &machine(build), Charge::FULL, false)
            .book
            .gassed
    };
    let ratio = gassed(&old) / gassed(&new);
    // Four times the current at the same volts; the shift's volts hardly change.
    assert!((3.5..4.2).contains(&ratio), "{ratio}");
    let hold = |build: &ampledger::build::Build| machine(build).battery.cmax();
    assert_eq!(hold(&old), hold(&new));
    let days = |build: &ampledger::build::Build| {
        checked(build)
            .check
            .storage
            .unwrap()
            .days_to_recharge
            .unwrap()
    };
    assert!(days(&old) < days(&new));
    let lost = |build: &ampledger::build::Build| machine(build).battery.water_lost(gassed(build));
    assert!(lost(&old) > lost(&new));
}
