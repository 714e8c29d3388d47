//! Windings and alternators: constants from what is known, and figures that contradict each other.

use crate::support::{BARE, LIGHTING, WHOLE, assumed, fault, faults, made, swap, winding};
use ampledger::build::{Origin, SourceKind};
use ampledger::identify::IdentifyError;
use ampledger::quantity::{Amps, Fraction, Henries, Ohms, Rpm, Volts};
use ampledger::resolve::Fault;
use ampledger::source::{ConstantsError, Phases, Rectifier, Winding, rectified_dc};

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
fn a_winding_by_belt_and_flywheel_at_once() {
    let both = swap(
        BARE,
        "    rectifier",
        "    alternator: {curve: [0 A at 1300 rpm, 20 A at 2400 rpm], ratio: 2}\n    rectifier",
    );
    assert!(ampledger::description::read("test", both.as_bytes()).is_err());
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

/// A winding of 28 V at 3600 rpm, 0.14 Ω and 0.4 mH between the leads at 20 °C, at work at 100 °C: ferrite magnets give
/// 0.92 of the volts at 60 °C, copper has 1.3144 of the ohms.
fn made_with() -> Winding {
    let volts = Volts(28.0 * 0.92) / Rpm(3600.0);
    Winding::between_leads(volts, Ohms(0.14 * 1.3144), Henries(0.4e-3), 12, Phases::One).unwrap()
}

/// Its bench table.
fn table(drop: f64) -> String {
    let made = made_with();
    let rows = [
        (1900.0, 12.8),
        (2400.0, 13.2),
        (2900.0, 13.5),
        (3400.0, 13.6),
    ];
    let rows = rows.map(|(rpm, bus)| {
        let rectifier = Rectifier::FullWave { drop: Volts(drop) };
        let amps = rectified_dc(&made, &rectifier, Rpm(rpm), Volts(bus)).0;
        format!("{{rpm: {rpm} rpm, volts: {bus} V, amps: {amps:.5} A}}")
    });
    rows.join(", ")
}

#[test]
fn a_winding_by_its_bench_readings() {
    let readings = format!("readings: [{}], poles: 12", table(0.9));
    let measured = ", open_circuit: 28 V at 3600 rpm, resistance: 0.14 ohm";
    // Where no ohmmeter was used a usual resistance is leaned on, and a little of it shows.
    for (beside, at, limits) in [
        ("", 3400.0, (0.005, 0.025)),
        (measured, 3600.0, (1e-4, 1e-3)),
    ] {
        let readings = format!("{readings}{beside}");
        let build = made(&swap(BARE, "rated: 16 A at 3600 rpm, poles: 12", &readings));
        let w = winding(&build);
        let off = |have: f64, want: f64| (have / want - 1.0).abs();
        let (volts, rpm) = w.open_circuit.value;
        assert_eq!(rpm, Rpm(at));
        assert!(off((volts / rpm).0 * 3600.0, 28.0) < limits.0, "{volts:?}");
        let inductance = w.inductance.as_ref().unwrap();
        assert!(off(inductance.value.0, 0.4e-3) < limits.1, "{inductance:?}");
        assert_eq!(inductance.path, "charging[0].winding.inductance");
        assert!(w.rated.is_none());
        assert_eq!(
            w.solve().unwrap(),
            w.constants,
            "its figures lead to its constants"
        );
        // 3400 rpm, 13.6 V: the last row of the table.
        let full = Rectifier::FullWave { drop: Volts(0.9) };
        let amps = |w: &Winding| rectified_dc(w, &full, Rpm(3400.0), Volts(13.6));
        assert!((amps(&w.constants) - amps(&made_with())).abs() < Amps(0.05));
        let told = "its 4 bench readings lead to";
        assert!(
            build.notes.iter().any(|n| n.contains(told)),
            "{:?}",
            build.notes
        );
        let assumed = |what: &str| build.assumed.iter().any(|a| a.what.contains(what));
        assert!(!assumed("open-circuit") && !assumed("winding resistance"));
    }
}

#[test]
fn readings_at_the_regulator_are_left_out() {
    let held = "{rpm: 3600 rpm, volts: 14.4 V, amps: 3 A}";
    let readings = format!("readings: [{}, {held}], poles: 12", table(0.9));
    let build = made(&swap(BARE, "rated: 16 A at 3600 rpm, poles: 12", &readings));
    let inductance = winding(&build).inductance.as_ref().unwrap().value;
    assert!(
        (inductance.0 / 0.4e-3 - 1.0).abs() < 0.025,
        "{inductance:?}"
    );
    let told = |words: &str| {
        build
            .notes
            .iter()
            .any(|n| n.starts_with("charging winding: ") && n.contains(words))
    };
    assert!(
        told("1 reading at the regulator's 14.4 V left out"),
        "{:?}",
        build.notes
    );
}

#[test]
fn readings_that_lead_to_no_winding() {
    let of = |keys: &str| faults(&swap(BARE, "rated: 16 A at 3600 rpm, poles: 12", keys));
    let at = "charging[0].winding.readings".to_owned();
    let few = of("readings: [{rpm: 3400 rpm, volts: 13.6 V, amps: 14 A}], poles: 12");
    let error = IdentifyError::TooFew {
        figures: 1,
        held: 0,
    };
    assert_eq!(few, [(at.clone(), Fault::Readings(error))]);
    let falling = of(
        "readings: [{rpm: 1800 rpm, volts: 12.8 V, amps: 15 A}, {rpm: 2600 rpm, volts: 13 V, amps: 1 A}, {rpm: 3400 rpm, volts: 13.6 V, amps: 12 A}], poles: 12",
    );
    assert!(
        matches!(falling.as_slice(), [(path, Fault::Readings(IdentifyError::NotConverged { .. }))] if *path == at),
        "{falling:?}"
    );
}

#[test]
fn an_inductance_set_beside_readings_is_used() {
    let readings = format!("readings: [{}], poles: 12, inductance: 0.5 mH", table(0.9));
    let build = made(&swap(
        BARE,
        "rated: 16 A at 3600 rpm, poles: 12",
        &format!("{readings}, open_circuit: 28 V at 3600 rpm, resistance: 0.14 ohm"),
    ));
    assert!((winding(&build).constants.inductance().0 - 0.5e-3).abs() < 1e-12);
}
