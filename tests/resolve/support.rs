//! Invented machines, and how a test reads, changes and refuses them.

use ampledger::build::{Build, SourceKind, WindingSource};
use ampledger::catalog::Catalogs;
use ampledger::description::Description;
use ampledger::resolve::{Fault, resolve};

/// An invented machine that states everything that is not assumed silently.
pub const WHOLE: &str = "build: whole
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
pub const BARE: &str = "build: bare
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

pub const LIGHTING: &str = "build: lamps\nengine: {speeds: {governed: 3200 rpm}}\ncharging:\n  - winding: {open_circuit: 22 V at 3600 rpm, resistance: 0.35 ohm, inductance: 1.29 mH, poles: 12, feeds: lighting}\n    rectifier: none\naccessories:\n  - {name: lamp, draw: 27 W, law: filament, at: 12.8 V, circuit: lighting, duty: 100 %}\nshift: [{governed: 1 h}]\n";

pub fn read(text: &str) -> Description {
    let read = ampledger::description::read("test", text.as_bytes());
    read.unwrap_or_else(|e| panic!("{e}")).0
}

pub fn made(text: &str) -> Build {
    let description = read(text);
    resolve(&description, &Catalogs::builtin()).unwrap_or_else(|e| panic!("{e:?}"))
}

/// The faults of a text that reads, with their paths.
#[track_caller]
pub fn faults(text: &str) -> Vec<(String, Fault)> {
    let description = read(text);
    let problems = resolve(&description, &Catalogs::builtin()).expect_err("resolves");
    problems
        .iter()
        .map(|p| (p.path.clone(), Fault::of(p).expect("a fault").clone()))
        .collect()
}

#[track_caller]
pub fn fault(text: &str) -> (String, Fault) {
    let mut all = faults(text);
    assert_eq!(all.len(), 1, "{all:?}");
    all.remove(0)
}

#[track_caller]
pub fn swap(text: &str, from: &str, to: &str) -> String {
    assert!(text.contains(from), "no `{from}`");
    text.replacen(from, to, 1)
}

pub fn winding(build: &Build) -> &WindingSource {
    match &build.sources[0].kind {
        SourceKind::Winding(winding) => winding,
        SourceKind::Alternator(_) => panic!("an alternator"),
    }
}

/// The value and origin of an assumption.
pub fn assumed<'b>(build: &'b Build, what: &str) -> Option<(&'b str, &'b str)> {
    build
        .assumed
        .iter()
        .find(|a| a.what.starts_with(what))
        .map(|a| (a.value.as_str(), a.origin.as_str()))
}
