//! Invented builds, written as a user writes them, and how a test reads and rules on them.
#![allow(dead_code)] // each test file uses its own part

use ampledger::battery::Charge;
use ampledger::build::Build;
use ampledger::catalog::Catalogs;
use ampledger::check::{Checked, Wanted, check};
use ampledger::description::read;
use ampledger::ledger::Machine;
use ampledger::quantity::Fraction;
use ampledger::resolve::resolve;
use std::fmt::Write as _;

/// The build of a text.
pub fn made(text: &str) -> Build {
    let (description, _) = read("test", text.as_bytes()).unwrap_or_else(|e| panic!("{e}\n{text}"));
    resolve(&description, &Catalogs::builtin()).unwrap_or_else(|e| panic!("{e:?}\n{text}"))
}

/// The same made ready to run.
pub fn machine(build: &Build) -> Machine {
    Machine::new(build).expect("a battery")
}

/// The answer.
pub fn checked(build: &Build) -> Checked {
    check(build, Wanted::default()).unwrap_or_else(|e| panic!("{e}"))
}

/// The reserve.
pub fn reserve(build: &Build, machine: &Machine) -> Fraction {
    ampledger::check::reserve(build, machine).soc
}

/// A text with one part of it put in place of another, which must be there once.
#[track_caller]
pub fn swap(text: &str, old: &str, new: &str) -> String {
    assert_eq!(text.matches(old).count(), 1, "`{old}` stands once");
    text.replace(old, new)
}

/// Charge after a first shift, cranks and parking included.
pub fn after_a_cycle(machine: &Machine, from: Charge) -> Charge {
    machine.pass_around(0, from).end
}

/// Numbers that follow from a seed and nothing else (splitmix64: Steele, Lea, Flood 2014).
pub struct Seeded(pub u64);

impl Seeded {
    /// Between two numbers.
    pub fn between(&mut self, low: f64, high: f64) -> f64 {
        self.0 = self.0.wrapping_add(0x9e37_79b9_7f4a_7c15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
        let unit = ((z ^ (z >> 31)) >> 11) as f64 / (1u64 << 53) as f64;
        low + (high - low) * unit
    }

    /// A whole number under a limit.
    pub fn below(&mut self, limit: u32) -> u32 {
        (self.between(0.0, f64::from(limit)) as u32).min(limit - 1)
    }

    /// One of several.
    pub fn one_of<T: Copy>(&mut self, all: &[T]) -> T {
        all[self.below(all.len() as u32) as usize]
    }
}

/// A random build: a regulated winding, a battery, a starter, two to five loads of every law.
pub fn random(seed: u64) -> String {
    let mut r = Seeded(seed.wrapping_mul(0x5851_f42d_4c95_7f2d));
    let capacity = r.between(18.0, 55.0);
    let mut text = format!(
        "build: random {seed}\nair: {:.1} °C\n",
        r.between(-8.0, 32.0)
    );
    let _ = write!(
        text,
        "engine:\n  speeds: {{idle: {:.0} rpm, governed: {:.0} rpm}}\n  starter: {{draw: {:.0} A, time: 2 s, cable: 2 mohm}}\n",
        r.between(1500.0, 2000.0),
        r.between(3000.0, 3600.0),
        r.between(2.5, 3.5) * capacity,
    );
    let _ = write!(
        text,
        "charging:\n  - winding: {{open_circuit: {:.1} V at 3600 rpm, resistance: {:.3} ohm, inductance: {:.3} mH, poles: {}, working: 20 °C}}\n    rectifier: {}\n    regulator: {{holds: {:.2} V, kind: series}}\n",
        r.between(25.0, 32.0),
        r.between(0.1, 0.3),
        r.between(0.25, 0.6),
        r.one_of(&[12, 14, 16]),
        r.one_of(&["full-wave", "full-wave", "full-wave", "half-wave"]),
        r.between(14.0, 14.6),
    );
    let _ = write!(
        text,
        "battery: {{capacity: {capacity:.1} Ah, cold_cranking: {:.0} A, type: {}, health: {:.0} %}}\naccessories:\n",
        capacity * r.between(8.0, 10.0),
        r.one_of(&["flooded", "flooded", "agm", "gel"]),
        r.between(75.0, 100.0),
    );
    accessories(&mut r, &mut text);
    shift(&mut r, &mut text);
    text
}

/// Two to five loads of every law, and a clock that draws while parked.
fn accessories(r: &mut Seeded, text: &mut String) {
    for k in 0..2 + r.below(4) {
        let draw = match r.below(4) {
            0 => format!("draw: {:.2} A", r.between(1.0, 7.0)),
            1 => format!("draw: {:.2} ohm", r.between(2.5, 9.0)),
            2 => format!("draw: {:.1} W", r.between(15.0, 90.0)),
            _ => format!(
                "draw: {:.1} W, law: filament, at: 12 V",
                r.between(20.0, 75.0)
            ),
        };
        let (idle, governed) = (r.one_of(&[0, 50, 100]), r.one_of(&[30, 60, 90, 100]));
        let _ = writeln!(
            text,
            "  - {{name: load {k}, {draw}, duty: {{idle: {idle} %, governed: {governed} %}}}}"
        );
    }
    let drain = r.between(1.0, 30.0);
    let _ = writeln!(
        text,
        "  - {{name: clock, draw: 0.1 A, parked: {drain:.1} mA, duty: 100 %}}"
    );
}

/// Two starts, idling and work; now and then days parked, or a charger.
fn shift(r: &mut Seeded, text: &mut String) {
    let _ = write!(
        text,
        "shift:\n  - crank\n  - idle: {:.0} min\n  - governed: {:.0} min\n  - crank\n  - governed: {:.0} min\nparked: {:.1} h\n",
        r.between(5.0, 20.0),
        r.between(20.0, 80.0),
        r.between(10.0, 40.0),
        r.between(12.0, 22.0),
    );
    if r.below(4) == 0 {
        *text += "days: {shifts: 3, parked: 1}\n";
    }
    if r.below(5) == 0 {
        *text += "charger: {amps: 2 A, time: 3 h}\n";
    }
}
