//! Stated over catalog: parts, what displaces them, and parts that are not there.

use crate::support::{BARE, assumed, fault, made, read, swap, winding};
use ampledger::battery::Chemistry;
use ampledger::build::{Build, Draw, Origin, State};
use ampledger::catalog::Catalogs;
use ampledger::description::accessory::LoadKind;
use ampledger::description::charging::RegulatorKind;
use ampledger::quantity::{Amps, Fraction, Henries, Hours, Ohms, Volts};
use ampledger::resolve::{Fault, resolve};

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
fn parts_that_are_not_there() {
    let (path, wrong) = fault(&swap(
        BARE,
        "{name: lamp, draw: 40 W}",
        "{part: seat-heatr}",
    ));
    assert_eq!(path, "accessories[0].part");
    assert_eq!(wrong.label(), "did you mean `seat-heater`?");
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
