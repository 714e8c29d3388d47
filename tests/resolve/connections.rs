//! Circuits without a battery, alternating current, and what must not be connected.

use crate::support::{BARE, LIGHTING, fault, faults, made, swap, winding};
use ampledger::resolve::Fault;

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
    assert_eq!(wrong.label(), "did you mean `lights`?");
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
