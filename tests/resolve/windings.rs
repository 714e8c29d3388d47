//! Windings and alternators: constants from what is known, and figures that contradict each other.

use crate::support::{BARE, LIGHTING, WHOLE, assumed, fault, made, swap, winding};
use ampledger::build::{Origin, SourceKind};
use ampledger::quantity::{Amps, Fraction, Henries, Ohms, Rpm, Volts};
use ampledger::resolve::Fault;
use ampledger::source::ConstantsError;

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

#[test]
fn a_winding_by_its_bench_readings() {
    let readings = "readings: [{rpm: 1800 rpm, volts: 12.8 V, amps: 1.5 A}, {rpm: 3400 rpm, volts: 13.6 V, amps: 14.2 A}], open_circuit: 28 V at 3600 rpm, resistance: 0.14 ohm, poles: 12";
    let build = made(&swap(BARE, "rated: 16 A at 3600 rpm, poles: 12", readings));
    let w = winding(&build);
    let rectifier = w.rectifier.unwrap();
    let dc = ampledger::source::rectified_dc(&w.constants, &rectifier, Rpm(3400.0), Volts(13.6));
    assert!((dc - Amps(14.2)).abs() < Amps(1e-6), "{dc:?}");
    assert_eq!(
        w.rated.as_ref().unwrap().path,
        "charging[0].winding.readings[1].amps"
    );
    assert!(
        build
            .notes
            .iter()
            .any(|n| n.contains("of its 2 bench readings"))
    );
}
