//! Invented machines without a battery, for the tests of circuits.

#![allow(dead_code)] // each test file uses some of it

use ampledger::build::Build;
use ampledger::catalog::Catalogs;
use ampledger::check::answer::ByState;
use ampledger::circuit::{Circuit, circuits};
use ampledger::quantity::Volts;

pub fn made(text: &str) -> Build {
    let (description, _) =
        ampledger::description::read("test", text.as_bytes()).unwrap_or_else(|e| panic!("{e}"));
    ampledger::resolve::resolve(&description, &Catalogs::builtin())
        .unwrap_or_else(|e| panic!("{e:?}"))
}

/// A machine of two speeds without a battery: its winding, rectifier (and regulator) and accessories.
pub fn machine(winding: &str, rectifier: &str, accessories: &[&str]) -> Build {
    let accessories: String = accessories
        .iter()
        .map(|a| format!("  - {{{a}, circuit: own}}\n"))
        .collect();
    made(&format!(
        "build: invented
air: 25 °C
engine: {{speeds: {{idle: 1800 rpm, governed: 3600 rpm}}}}
charging:
  - winding: {{{winding}, working: 20 °C, feeds: own}}
    rectifier: {rectifier}
accessories:
{accessories}shift:
  - idle: 30 min
  - governed: 90 min
  - stopped: 10 min
"
    ))
}

pub const WINDING: &str =
    "open_circuit: 20 V at 3600 rpm, resistance: 0.3 ohm, inductance: 0.8 mH, poles: 12";
/// Next to no impedance, so that volts are those of the EMF.
pub const STIFF: &str =
    "open_circuit: 20 V at 3600 rpm, resistance: 0.00001 ohm, inductance: 0 mH, poles: 12";

pub fn only(build: &Build) -> Circuit {
    let mut all = circuits(build).unwrap_or_else(|e| panic!("{e}"));
    assert_eq!(all.len(), 1);
    all.remove(0)
}

#[track_caller]
pub fn near(got: f64, want: f64, relative: f64) {
    assert!(
        (got - want).abs() <= relative * want.abs(),
        "{got} for {want}"
    );
}

pub fn at(volts: &ByState<Volts>, state: &str) -> f64 {
    volts.get(state).unwrap_or_else(|| panic!("no {state}")).0
}

pub fn governed(build: &Build) -> f64 {
    at(&only(build).volts(), "governed")
}

/// Volts of lamps across an AC winding by halving, apart from the program: E² = (V + R I)² + (X I)²,
/// I = P/at (V/at)^0.55 (phasors; filament law of an encyclopaedia citing an electrical handbook).
pub fn by_halving(emf: f64, r: f64, x: f64, watts: f64, rated: f64) -> f64 {
    let (mut low, mut high) = (0.0, emf);
    for _ in 0..200 {
        let v = 0.5 * (low + high);
        let i = watts / rated * (v / rated).powf(0.55);
        if (v + r * i).hypot(x * i) > emf {
            high = v;
        } else {
            low = v;
        }
    }
    low
}

pub const TWO_LAMPS: &[&str] =
    &["name: Headlamps, draw: 27 W, count: 2, law: filament, at: 12.8 V"];

pub const CLUTCH: &str =
    "name: PTO clutch, draw: 3.1 ohm, coil: 60 mH, duty: {governed: 85 %}, works: 10.5 V to 16 V";
