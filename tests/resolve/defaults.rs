//! What is assumed where nothing is stated, and where each figure is changed.

use crate::support::{BARE, WHOLE, assumed, made, read, swap, winding};
use ampledger::battery::Chemistry;
use ampledger::build::{Origin, State};
use ampledger::catalog::Catalogs;
use ampledger::description::charging::RegulatorKind;
use ampledger::quantity::{Amps, Celsius, Fraction, Hours, Rpm, Volts};
use ampledger::resolve::resolve;
use ampledger::source::{Magnets, Rectifier};

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
    assert_eq!(
        assumed(&build, "least volts at the starter").unwrap().0,
        "9 V"
    );
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
    assert_eq!(build.assumed.len(), rows.len() + 9);
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
fn the_commands_may_set_air_and_start() {
    let mut description = read(BARE);
    description.set_air(Celsius(-10.0));
    let build = resolve(&description, &Catalogs::builtin()).expect("complete");
    let build = build.starting_at(Fraction(0.8));
    assert_eq!(
        (build.air.value, build.start),
        (Celsius(-10.0), Fraction(0.8))
    );
    assert_eq!(build.air.origin, Origin::Stated);
    assert!(assumed(&build, "air temperature").is_none());
}
