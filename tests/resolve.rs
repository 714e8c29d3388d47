//! From a description to a complete build: each default, each origin, each refusal.

use ampledger::battery::Chemistry;
use ampledger::build::{Build, Draw, Origin, SourceKind, State, WindingSource};
use ampledger::catalog::Catalogs;
use ampledger::description::Description;
use ampledger::description::accessory::LoadKind;
use ampledger::description::charging::RegulatorKind;
use ampledger::quantity::{Amps, Celsius, Fraction, Henries, Hours, Ohms, Rpm, Volts, Watts};
use ampledger::resolve::{Fault, resolve};
use ampledger::source::{ConstantsError, Magnets, Rectifier};

/// An invented machine that states everything that is not assumed silently.
const WHOLE: &str = "build: whole
air: 5 °C
engine:
  speeds: {idle: 1800 rpm, governed: 3400 rpm}
  starter: {draw: 150 A, time: 2.5 s, starts: 2, rest: 5 s, cable: 3 mohm, least_volts: 8 V}
charging:
  - name: stator
    winding: {rated: 16 A at 3600 rpm into 13.5 V, open_circuit: 28 V at 3600 rpm, resistance: 0.14 ohm, poles: 12, phases: 1, working: 90 °C, magnets: rare-earth}
    rectifier: {kind: full-wave, drop: 0.8 V}
    regulator: {holds: 14.4 V, kind: shunt, per_degree: -18 mV}
battery: {capacity: 30 Ah, reserve_capacity: 42 min, cold_cranking: 300 A, type: agm, cells: 6, reserve: 60 %}
accessories:
  - {name: lamp, draw: 40 W, works: 10 V to 16 V, duty: {governed: 100 %, stopped: 50 %}}
shift:
  - crank
  - idle: 10 min
  - governed: 2 h
parked: 15 h
";

/// The same, with as little stated as may be.
const BARE: &str = "build: bare
engine: {speeds: {idle: 1800 rpm, governed: 3400 rpm}, starter: {draw: 150 A, time: 2.5 s}}
charging:
  - winding: {rated: 16 A at 3600 rpm, poles: 12}
    rectifier: full-wave
    regulator: {holds: 14.4 V}
battery: {capacity: 30 Ah}
accessories:
  - {name: lamp, draw: 40 W}
shift: [crank, {governed: 1 h}]
";

fn read(text: &str) -> Description {
    let read = ampledger::description::read("test", text.as_bytes());
    read.unwrap_or_else(|e| panic!("{e}")).0
}

fn made(text: &str) -> Build {
    let description = read(text);
    resolve(&description, &Catalogs::builtin()).unwrap_or_else(|e| panic!("{e:?}"))
}

/// The faults of a text that reads, with their paths.
#[track_caller]
fn faults(text: &str) -> Vec<(String, Fault)> {
    let description = read(text);
    let problems = resolve(&description, &Catalogs::builtin()).expect_err("resolves");
    problems
        .iter()
        .map(|p| (p.path.clone(), Fault::of(p).expect("a fault").clone()))
        .collect()
}

#[track_caller]
fn fault(text: &str) -> (String, Fault) {
    let mut all = faults(text);
    assert_eq!(all.len(), 1, "{all:?}");
    all.remove(0)
}

#[track_caller]
fn swap(text: &str, from: &str, to: &str) -> String {
    assert!(text.contains(from), "no `{from}`");
    text.replacen(from, to, 1)
}

fn winding(build: &Build) -> &WindingSource {
    match &build.sources[0].kind {
        SourceKind::Winding(winding) => winding,
        SourceKind::Alternator(_) => panic!("an alternator"),
    }
}

/// The value and origin of an assumption.
fn assumed<'b>(build: &'b Build, what: &str) -> Option<(&'b str, &'b str)> {
    build
        .assumed
        .iter()
        .find(|a| a.what.starts_with(what))
        .map(|a| (a.value.as_str(), a.origin.as_str()))
}

#[test]
fn nothing_is_assumed_of_a_machine_that_states_all() {
    let build = made(WHOLE);
    assert_eq!(build.assumed, [], "assumed");
    let w = winding(&build);
    assert_eq!(
        w.rated.as_ref().unwrap().value,
        (Amps(16.0), Rpm(3600.0), Volts(13.5))
    );
    assert_eq!(
        (w.working.value, w.magnets, w.phases),
        (Celsius(90.0), Magnets::RareEarth, 1)
    );
    assert_eq!(w.rectifier, Some(Rectifier::FullWave { drop: Volts(0.8) }));
    let regulator = build.sources[0].regulator.as_ref().unwrap();
    assert_eq!(regulator.kind, RegulatorKind::Shunt);
    // −18 mV a degree from 25 °C to 5 °C: 14.4 + 0.36 V (arithmetic).
    assert!((regulator.setpoint(build.air.value) - Volts(14.76)).abs() < Volts(1e-12));
    let battery = build.battery.as_ref().unwrap();
    assert_eq!(battery.label.chemistry, Chemistry::Agm);
    assert_eq!(battery.reserve.as_ref().unwrap().value, Fraction(0.6));
    assert_eq!(
        build.accessories[0].duty.share(State::Stopped),
        Fraction(0.5)
    );
    assert_eq!(
        build.accessories[0].duty.share(State::Running(0)),
        Fraction::ZERO
    );
    assert_eq!(build.shift.len(), 3);
    assert_eq!(
        (build.shift[0].state, build.shift[0].time.value),
        (State::Crank, Hours::from_seconds(2.5))
    );
    assert_eq!(build.start, Fraction::ONE);
}

#[test]
fn what_is_not_stated_is_assumed_and_listed() {
    let build = made(BARE);
    let practice = Some("common practice, no source");
    let rows = [
        ("air temperature", "20 °C"),
        ("starts in a row held in reserve", "3"),
        ("rest between starts", "10 s"),
        ("resistance of the starter's cables", "4 mΩ"),
        ("phases of the winding", "1"),
        ("temperature of the winding at work", "100 °C"),
        ("magnets", "ferrite"),
        ("bus volts of the rating", "14 V"),
        ("forward drop of one diode", "0.9 V"),
        ("kind of regulator", "series"),
        ("type of battery", "flooded"),
        ("time parked between shifts", "14 h"),
    ];
    for (what, value) in rows {
        let found = assumed(&build, what);
        assert_eq!(found.map(|f| f.0), Some(value), "{what}");
        assert_eq!(found.map(|f| f.1), practice, "{what}");
    }
    assert_eq!(
        assumed(&build, "change of the setpoint").unwrap().0,
        "0 mV/K"
    );
    assert_eq!(
        assumed(&build, "duty in every running state, lamp")
            .unwrap()
            .0,
        "100 %"
    );
    assert_eq!(
        assumed(&build, "volts under which it drops out, lamp")
            .unwrap()
            .0,
        "10.5 V"
    );
    assert_eq!(assumed(&build, "cold cranking amps").unwrap().0, "240 A");
    assert_eq!(assumed(&build, "Peukert exponent").unwrap().0, "1.25");
    assert_eq!(assumed(&build, "cells of the battery").unwrap().0, "6");
    // 2.1 times 14 V, at 3600 rpm (common practice, from memory).
    assert_eq!(
        assumed(&build, "open-circuit volts").unwrap().0,
        "29.4 V at 3600 rpm"
    );
    assert!(assumed(&build, "winding resistance at 20 °C").is_some());
    assert!(
        assumed(&build, "charge never to go below").is_none(),
        "the starter sets the reserve"
    );
    assert_eq!(build.assumed.len(), rows.len() + 8);
}

#[test]
fn a_rating_alone_carries_wide_tolerances() {
    let build = made(BARE);
    let w = winding(&build);
    assert!(matches!(w.open_circuit.origin, Origin::Assumed(_)));
    // Band 1.8 to 2.6 about 2.1: half of it is 0.4 / 2.1 = 19 %.
    let tolerance = w.open_circuit.tolerance.unwrap().relative;
    assert!((tolerance - Fraction(0.4 / 2.1)).abs() < Fraction(1e-12));
    assert!(w.resistance.tolerance.is_some());
}

#[test]
fn every_figure_has_the_path_that_set_takes() {
    let build = made(BARE);
    let w = winding(&build);
    assert_eq!(build.air.path, "air");
    assert_eq!(build.speeds[1].rpm.path, "engine.speeds.governed");
    assert_eq!(w.scale.path, "charging[0].winding.scale");
    assert_eq!(w.open_circuit.path, "charging[0].winding.open_circuit");
    assert_eq!(
        build.sources[0].regulator.as_ref().unwrap().holds.path,
        "charging[0].regulator.holds"
    );
    assert_eq!(
        build.battery.as_ref().unwrap().capacity.path,
        "battery.capacity"
    );
    assert_eq!(
        build.starter.as_ref().unwrap().cable.path,
        "engine.starter.cable"
    );
    assert_eq!(build.accessories[0].draw.path, "accessories[0].draw");
    assert_eq!(
        build.accessories[0].duty.running[1].path,
        "accessories[0].duty"
    );
    assert_eq!(build.shift[1].time.path, "shift[1].governed");
    assert_eq!(
        build.shift[0].time.path, "engine.starter.time",
        "a start without a time of its own"
    );
    assert_eq!(build.parked.path, "parked");
    let whole = made(WHOLE);
    assert_eq!(
        whole.accessories[0].duty.running[1].path,
        "accessories[0].duty.governed"
    );
    assert_eq!(
        whole.accessories[0].duty.running[0].path,
        "accessories[0].duty.idle"
    );
}

#[test]
fn the_inductance_gives_the_rating_back() {
    let text = swap(WHOLE, "working: 90 °C", "working: 20 °C");
    let build = made(&text);
    let w = winding(&build);
    let dc = ampledger::source::rectified_dc(
        &w.constants,
        &w.rectifier.unwrap(),
        Rpm(3600.0),
        Volts(13.5),
    );
    assert!((dc - Amps(16.0)).abs() < Amps(1e-6), "{dc:?}");
    // Twice the scale, half the impedance, twice the current.
    let twice = made(&swap(&text, "poles: 12,", "poles: 12, scale: 2,"));
    let t = winding(&twice);
    assert!((t.constants.resistance() - Ohms(0.07)).abs() < Ohms(1e-12));
    assert!((t.constants.inductance().0 * 2.0 / w.constants.inductance().0 - 1.0).abs() < 1e-12);
    assert_eq!(t.solve().unwrap(), t.constants);
}

#[test]
fn stated_over_catalog_over_assumed() {
    let text = swap(
        BARE,
        "  - winding: {rated: 16 A at 3600 rpm, poles: 12}\n    rectifier: full-wave\n    regulator: {holds: 14.4 V}\n",
        "  - part: winding-16a\n    winding: {poles: 14}\n    regulator: {holds: 14.1 V}\n",
    );
    let build = made(&text);
    let w = winding(&build);
    assert_eq!(w.poles, 14);
    let source = &build.sources[0];
    assert_eq!(source.name, "charging winding");
    assert_eq!(source.part.as_deref(), Some("winding-16a"));
    let regulator = source.regulator.as_ref().unwrap();
    assert_eq!(
        (regulator.holds.value, regulator.holds.origin.clone()),
        (Volts(14.1), Origin::Stated)
    );
    assert_eq!(regulator.kind, RegulatorKind::Series, "the part's");
    assert!(assumed(&build, "kind of regulator").is_none());
    assert_eq!(
        w.resistance.origin,
        Origin::Catalog("winding-16a, common practice".to_owned())
    );
    assert_eq!(w.resistance.tolerance.unwrap().relative, Fraction(0.2));
    assert!(matches!(w.working.origin, Origin::Assumed(_)));
}

#[test]
fn an_inductance_beside_a_part_displaces_its_rating() {
    let text = swap(
        BARE,
        "  - winding: {rated: 16 A at 3600 rpm, poles: 12}\n    rectifier: full-wave\n    regulator: {holds: 14.4 V}\n",
        "  - part: winding-16a\n    winding: {inductance: 0.4 mH}\n",
    );
    let build = made(&text);
    let w = winding(&build);
    assert!(w.rated.is_none());
    assert_eq!(w.constants.inductance(), Henries(0.4e-3));
}

#[test]
fn a_capacity_beside_a_part_displaces_its_minutes() {
    let part = made(&swap(BARE, "{capacity: 30 Ah}", "{part: battery-agm-30ah}"));
    let label = part.battery.as_ref().unwrap().label;
    assert_eq!((label.capacity.0, label.chemistry), (30.0, Chemistry::Agm));
    assert_eq!(label.reserve_capacity, Some(Hours::from_minutes(54.0)));
    let other = made(&swap(
        BARE,
        "{capacity: 30 Ah}",
        "{part: battery-agm-30ah, capacity: 40 Ah}",
    ));
    let label = other.battery.as_ref().unwrap().label;
    assert_eq!((label.capacity.0, label.reserve_capacity), (40.0, None));
    assert_eq!(label.cold_cranking, Some(Amps(330.0)));
}

#[test]
fn a_battery_known_by_its_minutes() {
    let build = made(&swap(
        BARE,
        "{capacity: 30 Ah}",
        "{reserve_capacity: 42 min, type: flooded}",
    ));
    let capacity = &build.battery.as_ref().unwrap().capacity;
    // Peukert's law with 1.25 through 25 A for 42 min: C = (25 · 0.7 · 500^0.25)^0.8 = 34.2 Ah.
    assert!((capacity.value.0 - 34.21).abs() < 0.02, "{capacity:?}");
    assert!(matches!(capacity.origin, Origin::Assumed(_)));
    assert!(assumed(&build, "20-hour capacity").is_some());
}

#[test]
fn without_a_starter_half_the_charge_is_kept() {
    let text = swap(BARE, ", starter: {draw: 150 A, time: 2.5 s}", "");
    let text = swap(&text, "[crank, {governed: 1 h}]", "[{governed: 1 h}]");
    let build = made(&text);
    let reserve = build.battery.as_ref().unwrap().reserve.as_ref().unwrap();
    assert_eq!(reserve.value, Fraction(0.5));
    assert_eq!(
        assumed(&build, "charge never to go below").unwrap().0,
        "50 %"
    );
    assert!(build.starter.is_none());
}

#[test]
fn a_six_volt_system_has_six_volt_defaults() {
    let text = swap(BARE, "{capacity: 30 Ah}", "{capacity: 30 Ah, cells: 3}");
    let text = swap(&text, "holds: 14.4 V", "holds: 7.2 V");
    let build = made(&text);
    assert_eq!(assumed(&build, "bus volts of the rating").unwrap().0, "7 V");
    assert_eq!(
        assumed(&build, "volts under which it drops out").unwrap().0,
        "5.25 V"
    );
}

#[test]
fn laws_of_a_draw() {
    let draw = |entry: &str| {
        let build = made(&swap(
            BARE,
            "{name: lamp, draw: 40 W}",
            &format!("{{name: x, {entry}}}"),
        ));
        (build.accessories[0].draw.value, build.accessories[0].kind)
    };
    assert_eq!(
        draw("draw: 4 A"),
        (Draw::Current(Amps(4.0)), LoadKind::Motor)
    );
    assert_eq!(
        draw("draw: 15 mA"),
        (Draw::Current(Amps(0.015)), LoadKind::Electronics)
    );
    assert_eq!(
        draw("draw: 3 ohm"),
        (Draw::Resistance(Ohms(3.0)), LoadKind::Heater)
    );
    assert_eq!(draw("draw: 3 ohm, coil: 60 mH").1, LoadKind::Coil);
    assert_eq!(
        draw("draw: 27 W"),
        (Draw::Power(Watts(27.0)), LoadKind::Electronics)
    );
    // R = V² / P = 13.5² / 48 (Ohm's law).
    let (heater, _) = draw("draw: 48 W, law: resistance, at: 13.5 V");
    assert!(matches!(heater, Draw::Resistance(r) if (r - Ohms(3.796_875)).abs() < Ohms(1e-12)));
    assert_eq!(
        draw("draw: 4 A, law: resistance, at: 12 V").0,
        Draw::Resistance(Ohms(3.0))
    );
    let lamp = Draw::Filament {
        power: Watts(55.0),
        at: Volts(13.2),
    };
    assert_eq!(
        draw("draw: 55 W, law: filament, at: 13.2 V"),
        (lamp, LoadKind::Lamp)
    );
}

#[test]
fn volts_of_a_draw_that_are_not_stated_are_nominal() {
    let build = made(&swap(BARE, "draw: 40 W", "draw: 55 W, law: filament"));
    let lamp = Draw::Filament {
        power: Watts(55.0),
        at: Volts(12.0),
    };
    assert_eq!(build.accessories[0].draw.value, lamp);
    assert_eq!(
        assumed(&build, "volts at which the draw is stated, lamp")
            .unwrap()
            .0,
        "12 V"
    );
}

#[test]
fn only_electronics_and_constant_currents_drop_out_by_default() {
    let low = |entry: &str| {
        let build = made(&swap(BARE, "draw: 40 W", entry));
        (
            build.accessories[0].works.low,
            build.accessories[0].works.stated,
        )
    };
    assert_eq!(low("draw: 40 W"), (Some(Volts(10.5)), false));
    assert_eq!(low("draw: 4 A"), (Some(Volts(10.5)), false));
    assert_eq!(low("draw: 3 ohm"), (None, false));
    assert_eq!(low("draw: 40 W, law: filament, at: 12 V"), (None, false));
    assert_eq!(
        low("draw: 3 ohm, works: 11 V to 16 V"),
        (Some(Volts(11.0)), true)
    );
}

#[test]
fn assumptions_alike_share_a_row() {
    let text = swap(
        BARE,
        "  - {name: lamp, draw: 40 W}\n",
        "  - {name: a, draw: 1 A, duty: 100 %}\n  - {name: b, draw: 1 A, duty: 100 %}\n  - {name: c, draw: 1 W, duty: 100 %}\n  - {name: d, draw: 1 W, duty: 100 %}\n  - {name: e, draw: 1 W, duty: 100 %}\n",
    );
    let build = made(&text);
    let rows: Vec<_> = build
        .assumed
        .iter()
        .filter(|a| a.what.contains("drops out"))
        .collect();
    assert_eq!(rows.len(), 1);
    assert_eq!(
        rows[0].what,
        "volts under which it drops out, a, b, c and 2 more"
    );
}

#[test]
fn names_come_from_parts_and_are_numbered_where_alike() {
    let text = swap(
        BARE,
        "  - {name: lamp, draw: 40 W}\n",
        "  - {part: seat-heater}\n  - {part: seat-heater, duty: 10 %}\n  - {part: horn, name: Klaxon}\n",
    );
    let build = made(&text);
    let names: Vec<_> = build.accessories.iter().map(|a| a.name.as_str()).collect();
    assert_eq!(names, ["Seat heater", "Seat heater (2)", "Klaxon"]);
    let heater = &build.accessories[0];
    assert_eq!(
        heater.draw.origin,
        Origin::Catalog("seat-heater, common practice".to_owned())
    );
    assert_eq!(
        heater.duty.share(State::Running(0)),
        Fraction(0.5),
        "the part's"
    );
    assert_eq!(
        build.accessories[1].duty.share(State::Running(0)),
        Fraction(0.1)
    );
    assert_eq!(heater.count, 1);
}

#[test]
fn groups_are_symmetric_and_closed() {
    let text = swap(
        BARE,
        "  - {name: lamp, draw: 40 W}\n",
        "  - {name: a, draw: 1 A, duty: 50 %, together: [b]}\n  - {name: b, draw: 1 A, duty: 50 %, together: [c]}\n  - {name: c, draw: 1 A, duty: 50 %}\n  - {name: d, draw: 1 A, duty: 40 %}\n  - {name: e, draw: 1 A, duty: 60 %, apart: [d]}\n",
    );
    let build = made(&text);
    let groups: Vec<_> = build
        .accessories
        .iter()
        .map(|a| (a.together.clone(), a.apart.clone()))
        .collect();
    assert_eq!(
        groups,
        [
            (vec![1, 2], vec![]),
            (vec![0, 2], vec![]),
            (vec![0, 1], vec![]),
            (vec![], vec![4]),
            (vec![], vec![3])
        ]
    );
}

#[test]
fn an_alternator_by_its_curve() {
    let text = swap(
        BARE,
        "  - winding: {rated: 16 A at 3600 rpm, poles: 12}\n    rectifier: full-wave\n    regulator: {holds: 14.4 V}\n",
        "  - alternator: {curve: [0 A at 1300 rpm, 20 A at 2400 rpm, 40 A at 6000 rpm], ratio: 2}\n",
    );
    let build = made(&text);
    let SourceKind::Alternator(a) = &build.sources[0].kind else {
        panic!("a winding")
    };
    // 1200 rpm · 2 = 2400 rpm: 20 A, less 0.2 % a kelvin over 90 − 23 K: 20 · 0.866 = 17.32 A (arithmetic).
    assert!((a.output(Rpm(1200.0)) - Amps(17.32)).abs() < Amps(1e-9));
    assert_eq!(a.at.value, Volts(13.5));
    assert_eq!(
        build.sources[0].regulator.as_ref().unwrap().holds.value,
        Volts(14.4)
    );
    assert!(assumed(&build, "setpoint of the alternator's regulator").is_some());
}

#[test]
fn a_machine_without_battery_keeps_its_own_circuits() {
    let text = "build: coil\nengine: {speeds: {governed: 3200 rpm}}\ncharging:\n  - winding: {open_circuit: 20 V at 2400 rpm, resistance: 0.3 ohm, inductance: 0.8 mH, poles: 12, feeds: clutch}\n    rectifier: full-wave\n    regulator: {holds: 14 V}\naccessories:\n  - {name: Clutch, draw: 2.6 ohm, coil: 80 mH, circuit: clutch, duty: 100 %}\nshift: [{governed: 1 h}]\n";
    let build = made(text);
    assert!(build.battery.is_none());
    assert_eq!(build.sources[0].circuit.as_deref(), Some("clutch"));
    assert_eq!(build.sources[0].name, "clutch winding");
    assert_eq!(build.accessories[0].circuit.as_deref(), Some("clutch"));
    assert_eq!(build.cells(), 6);
    let (path, wrong) = fault(&swap(text, ", circuit: clutch, duty", ", duty"));
    assert_eq!((path.as_str(), wrong), ("accessories[0]", Fault::NoBus));
    let (path, wrong) = faults(&swap(text, ", feeds: clutch", "")).remove(0);
    assert_eq!(
        (path.as_str(), wrong),
        ("charging[0]", Fault::FeedsNoBattery)
    );
}

const LIGHTING: &str = "build: lamps\nengine: {speeds: {governed: 3200 rpm}}\ncharging:\n  - winding: {open_circuit: 22 V at 3600 rpm, resistance: 0.35 ohm, inductance: 1.29 mH, poles: 12, feeds: lighting}\n    rectifier: none\naccessories:\n  - {name: lamp, draw: 27 W, law: filament, at: 12.8 V, circuit: lighting, duty: 100 %}\nshift: [{governed: 1 h}]\n";

#[test]
fn direct_current_is_refused_on_alternating() {
    assert!(winding(&made(LIGHTING)).rectifier.is_none());
    let led = "draw: 27 W, circuit: lighting";
    let (path, wrong) = fault(&swap(
        LIGHTING,
        "draw: 27 W, law: filament, at: 12.8 V, circuit: lighting",
        led,
    ));
    assert_eq!(path, "accessories[0].circuit");
    assert_eq!(
        wrong,
        Fault::NeedsDc {
            name: "lamp".to_owned(),
            power: true
        }
    );
    let accepts = format!("{led}, accepts_ac: true");
    made(&swap(
        LIGHTING,
        "draw: 27 W, law: filament, at: 12.8 V, circuit: lighting",
        &accepts,
    ));
    made(&swap(
        LIGHTING,
        "draw: 27 W, law: filament, at: 12.8 V",
        "draw: 6 ohm",
    ));
}

#[test]
fn what_must_not_be_connected() {
    let (path, wrong) = fault(&swap(LIGHTING, ", feeds: lighting", ", feeds: lights"));
    assert_eq!(path, "accessories[0].circuit");
    assert_eq!(wrong.help().unwrap(), "did you mean `lights`?");
    let (path, wrong) = fault(&swap(
        LIGHTING,
        "rectifier: none",
        "rectifier: none\n    regulator: {holds: 13 V}",
    ));
    assert_eq!(
        (path.as_str(), wrong),
        ("charging[0].regulator", Fault::RegulatorOnAc)
    );
    let (path, wrong) = fault(&swap(
        BARE,
        "rectifier: full-wave\n    regulator: {holds: 14.4 V}",
        "rectifier: none",
    ));
    assert_eq!(
        (path.as_str(), wrong),
        ("charging[0].rectifier", Fault::AcIntoBattery)
    );
    let three = swap(BARE, "poles: 12}", "poles: 12, phases: 3}");
    let (path, wrong) = fault(&swap(
        &three,
        "rectifier: full-wave",
        "rectifier: half-wave",
    ));
    assert_eq!(
        (path.as_str(), wrong),
        ("charging[0].rectifier", Fault::ThreePhaseNeedsBridge)
    );
}

#[test]
fn a_braking_winding_carries_nothing() {
    let braking = swap(
        LIGHTING,
        "feeds: lighting}",
        "feeds: lighting, braking: true}",
    );
    let (path, wrong) = fault(&braking);
    assert_eq!(path, "accessories[0].circuit");
    assert_eq!(
        wrong,
        Fault::OnBrakingWinding {
            name: "lamp".to_owned()
        }
    );
    assert!(wrong.help().unwrap().contains("to stop the blades"));
    // Without an accessory on it, it is let be, and is on no bus.
    let own = "  - winding: {open_circuit: 18 V at 3600 rpm, resistance: 0.4 ohm, inductance: 1 mH, poles: 12, braking: true}\n    rectifier: none\nbattery:";
    let build = made(&swap(BARE, "battery:", own));
    assert!(build.sources[1].braking);
    assert_eq!(build.sources[1].circuit.as_deref(), Some("braking winding"));
    let (path, wrong) = fault(&swap(
        &swap(BARE, "battery:", own),
        "braking: true",
        "braking: true, feeds: battery",
    ));
    assert_eq!(
        (path.as_str(), wrong),
        ("charging[1].winding.feeds", Fault::BrakingFeedsBattery)
    );
}

#[test]
fn contradictory_figures_of_a_winding() {
    let rated = "rated: 16 A at 3600 rpm, poles: 12";
    let high = swap(
        BARE,
        rated,
        "rated: 60 A at 3600 rpm, open_circuit: 28 V at 3600 rpm, resistance: 0.3 ohm, poles: 12",
    );
    let (path, wrong) = fault(&high);
    assert_eq!(path, "charging[0].winding");
    let Fault::Winding(ConstantsError::Contradiction {
        ceiling,
        rated: amps,
        ..
    }) = wrong
    else {
        panic!("{wrong:?}")
    };
    assert!(amps == Amps(60.0) && ceiling > Amps(10.0) && ceiling < amps);
    let low = swap(
        BARE,
        rated,
        "rated: 16 A at 3600 rpm, open_circuit: 10 V at 3600 rpm, resistance: 0.3 ohm, poles: 12",
    );
    assert!(matches!(
        fault(&low).1,
        Fault::Winding(ConstantsError::UnderBus { .. })
    ));
    let none = swap(
        BARE,
        rated,
        "open_circuit: 28 V at 3600 rpm, resistance: 0.3 ohm, poles: 12",
    );
    assert!(matches!(fault(&none), (path, Fault::Missing { .. }) if path == "charging[0].winding"));
}

#[test]
fn a_rating_beside_an_inductance_is_only_a_check() {
    let figures = "rated: 16 A at 3600 rpm, inductance: 3 mH, open_circuit: 28 V at 3600 rpm, resistance: 0.14 ohm, poles: 12";
    let build = made(&swap(BARE, "rated: 16 A at 3600 rpm, poles: 12", figures));
    assert_eq!(winding(&build).constants.inductance(), Henries(3e-3));
    assert!(
        build
            .notes
            .iter()
            .any(|n| n.contains("where it is rated 16 A")),
        "{:?}",
        build.notes
    );
}

#[test]
fn parts_that_are_not_there() {
    let (path, wrong) = fault(&swap(
        BARE,
        "{name: lamp, draw: 40 W}",
        "{part: seat-heatr}",
    ));
    assert_eq!(path, "accessories[0].part");
    assert_eq!(wrong.help().unwrap(), "did you mean `seat-heater`?");
    let (path, _) = fault(&swap(BARE, "{capacity: 30 Ah}", "{part: battery-30}"));
    assert_eq!(path, "battery.part");
}

#[test]
fn parts_of_a_folder_may_stand_on_parts_but_not_in_a_circle() {
    let dir = tempfile::tempdir().unwrap();
    let text = "accessories:\n  - {id: warm, title: Warm seat, part: seat-heater, draw: 2 ohm}\n  - {id: a, part: b}\n  - {id: b, part: a}\n  - {id: bad, draw: 3 V}\n";
    std::fs::write(dir.path().join("ours.yaml"), text).unwrap();
    let catalogs = Catalogs::with_folder(dir.path()).unwrap();
    let with = |entry: &str| {
        let text = swap(BARE, "{name: lamp, draw: 40 W}", entry);
        resolve(&read(&text), &catalogs)
    };
    let build = with("{part: warm}").unwrap();
    assert_eq!(build.accessories[0].draw.value, Draw::Resistance(Ohms(2.0)));
    assert_eq!(
        build.accessories[0].kind,
        LoadKind::Heater,
        "of the part below"
    );
    assert_eq!(build.accessories[0].name, "Warm seat");
    let first = |r: Result<Build, ampledger::problem::Problems>| {
        let problems = r.expect_err("resolves");
        let first = problems.iter().next().and_then(Fault::of).cloned();
        first.expect("a fault")
    };
    let ids = ["a", "b", "a"].map(str::to_owned).to_vec();
    assert_eq!(first(with("{part: a}")), Fault::PartCycle { ids });
    let Fault::BadPart { id, why, .. } = first(with("{part: bad}")) else {
        panic!("reads")
    };
    assert!(id == "bad" && why.contains("draw"), "{why}");
}

#[test]
fn faults_of_shift_and_accessories() {
    let (path, wrong) = fault(&swap(BARE, ", starter: {draw: 150 A, time: 2.5 s}", ""));
    assert_eq!(
        (path.as_str(), wrong),
        (
            "shift[0]",
            Fault::CannotCrank {
                lacks: "engine.starter"
            }
        )
    );
    let two = "  - {name: a, draw: 1 A, duty: 70 %, apart: [b]}\n  - {name: b, draw: 1 A, duty: {governed: 40 %}}\n";
    let (path, wrong) = fault(&swap(BARE, "  - {name: lamp, draw: 40 W}\n", two));
    assert_eq!(path, "accessories[0].apart");
    assert!(
        matches!(wrong, Fault::ApartOverfull { state, sum, .. } if state == "governed" && (sum - Fraction(1.1)).abs() < Fraction(1e-12))
    );
    let both = "  - {name: a, draw: 1 A, duty: 20 %, apart: [b]}\n  - {name: b, draw: 1 A, duty: 20 %}\n  - {name: c, draw: 1 A, duty: 20 %, together: [a]}\n";
    let (_, wrong) = fault(&swap(BARE, "  - {name: lamp, draw: 40 W}\n", both));
    assert_eq!(
        wrong,
        Fault::TogetherAndApart {
            name: "a".to_owned()
        }
    );
}

#[test]
fn a_winding_by_belt_and_flywheel_at_once() {
    let both = swap(
        BARE,
        "    rectifier",
        "    alternator: {curve: [0 A at 1300 rpm, 20 A at 2400 rpm], ratio: 2}\n    rectifier",
    );
    assert!(ampledger::description::read("test", both.as_bytes()).is_err());
}

#[test]
fn the_commands_may_set_air_and_start() {
    let build = made(BARE).in_air(Celsius(-10.0)).starting_at(Fraction(0.8));
    assert_eq!(
        (build.air.value, build.start),
        (Celsius(-10.0), Fraction(0.8))
    );
    assert_eq!(build.air.origin, Origin::Stated);
    assert!(assumed(&build, "air temperature").is_none());
}

#[test]
fn every_example_resolves() {
    let mut seen = 0;
    for file in std::fs::read_dir("examples").unwrap() {
        let path = file.unwrap().path();
        let text = std::fs::read_to_string(&path).unwrap_or_default();
        if !text.contains("\nbuild:") {
            continue;
        }
        assert!(text.starts_with("# Invented setting"), "{}", path.display());
        let (description, _) =
            ampledger::description::read_file(&path, &[]).unwrap_or_else(|e| panic!("{e}"));
        let build = resolve(&description, &Catalogs::builtin());
        build.unwrap_or_else(|e| panic!("{}: {e:?}", path.display()));
        seen += 1;
    }
    assert!(seen >= 13, "{seen}");
}

/// Every number of every example in turn made nothing, tiny, huge and negative: an answer or a refusal, never a panic,
/// and never a figure that is not finite.
#[test]
fn no_number_can_break_it() {
    let mut tried = 0;
    for file in std::fs::read_dir("examples").unwrap() {
        let path = file.unwrap().path();
        let text = std::fs::read_to_string(&path).unwrap_or_default();
        for (from, to) in numbers(&text) {
            for other in ["0", "1e-6", "1e6", "-1"] {
                let changed = format!("{}{other}{}", &text[..from], &text[to..]);
                let Ok((description, _)) =
                    ampledger::description::read("changed", changed.as_bytes())
                else {
                    continue;
                };
                if let Ok(build) = resolve(&description, &Catalogs::builtin()) {
                    tried += 1;
                    for source in &build.sources {
                        if let SourceKind::Winding(w) = &source.kind {
                            assert!(w.constants.inductance().is_finite(), "{changed}");
                            assert!(w.resistance.value.is_finite(), "{changed}");
                        }
                    }
                }
            }
        }
    }
    assert!(tried > 100, "{tried}");
}

/// Where the numbers stand that begin a value.
fn numbers(text: &str) -> Vec<(usize, usize)> {
    let bytes = text.as_bytes();
    let part = |b: u8| b.is_ascii_digit() || b == b'.';
    let mut found = Vec::new();
    let mut at = 0;
    while at < bytes.len() {
        let begins = bytes[at].is_ascii_digit() && at > 0 && matches!(bytes[at - 1], b' ' | b'-');
        let mut end = at + 1;
        if begins {
            while end < bytes.len() && part(bytes[end]) {
                end += 1;
            }
            found.push((at, end));
        }
        at = end;
    }
    found
}

#[test]
fn a_lighting_winding_by_its_rating() {
    // 60 W of lamps at 12.8 V are 4.6875 A; X = √(E² − (V + R I)²) / I with E = 22 V · 0.92 and R = 0.35 Ω · 1.3144
    // (hot), over 2π 360 Hz: 1.286 mH (Kirchhoff's law of one winding across a resistance).
    let rated = "rated: 4.6875 A at 3600 rpm into 12.8 V, open_circuit: 22 V at 3600 rpm, resistance: 0.35 ohm, poles: 12, feeds: lighting";
    let figures = "open_circuit: 22 V at 3600 rpm, resistance: 0.35 ohm, inductance: 1.29 mH, poles: 12, feeds: lighting";
    let build = made(&swap(LIGHTING, figures, rated));
    let inductance = winding(&build).constants.inductance();
    assert!(
        (inductance.0 * 1e3 - 1.286_14).abs() < 1e-3,
        "{inductance:?}"
    );
}
