//! Invented builds for the tests of sizes and remedies: a few fixed ones, and any number from a
//! seeded generator.

#![allow(
    dead_code,
    reason = "each test that includes this module uses its own part of it"
)]

use std::fmt::Write as _;

/// An invented mower that falls short.
pub const MOWER: &str = "build: mower
air: 12 °C
engine: {speeds: {idle: 1700 rpm, governed: 3300 rpm}, starter: {draw: 130 A, time: 3 s}}
charging:
  - winding: {open_circuit: 29 V at 3600 rpm, resistance: 0.16 ohm, inductance: 0.33 mH, poles: 16, working: 20 °C}
    rectifier: full-wave
    regulator: {holds: 14.3 V}
battery: {capacity: 32 Ah, cold_cranking: 290 A, type: flooded, reserve: 55 %}
accessories:
  - {name: work lamps, draw: 200 W, law: filament, at: 13.2 V, duty: {idle: 100 %, governed: 100 %, stopped: 50 %}}
  - {name: pump, draw: 5 A, duty: {governed: 20 %}}
  - {name: fan, draw: 2.2 ohm, duty: 10 %}
shift: [crank, {idle: 25 min}, {governed: 140 min}, {stopped: 12 min}, crank, {governed: 70 min}, {idle: 10 min}]
parked: 13 h
";

/// The invented machine's checks K083 and K094: its clutch of 2.9 ohm at 20 °C is
/// 3.58382 ohm at 80 °C (copper, 0.00393 a degree).
pub const STATOR_OF_THE_FACTS: &str = "build: stator of the facts
air: 20 °C
engine: {speeds: {governed: 3600 rpm}}
charging:
  - winding: {open_circuit: 28 V at 3600 rpm, resistance: 0.15 ohm, inductance: 0.35 mH, poles: 18, working: 20 °C}
    rectifier: {kind: full-wave, drop: 0.9 V}
    regulator: {holds: 14.4 V}
battery: {capacity: 30 Ah, cold_cranking: 300 A, type: flooded}
accessories:
  - {name: clutch, draw: 3.58382 ohm, duty: 100 %}
  - {name: lamps, draw: 54 W, law: filament, at: 12 V, duty: 100 %}
  - {name: light, draw: 18 W, duty: 100 %}
  - {name: solenoid, draw: 0.7 A, duty: 100 %}
  - {name: meter, draw: 0.02 A, duty: 100 %}
shift: [{governed: 1 h}]
parked: 12 h
";

/// A linear congruential generator (Knuth's constants for 64 bits, from memory).
pub struct Draws(u64);

impl Draws {
    pub fn new(seed: u64) -> Draws {
        Draws(seed)
    }
    /// Between two numbers.
    pub fn between(&mut self, low: f64, high: f64) -> f64 {
        self.0 = self
            .0
            .wrapping_mul(6_364_136_223_846_793_005)
            .wrapping_add(1_442_695_040_888_963_407);
        low + (high - low) * (self.0 >> 11) as f64 / (1u64 << 53) as f64
    }
    /// One of several.
    pub fn one<'t, T>(&mut self, of: &'t [T]) -> &'t T {
        let at = self.between(0.0, of.len() as f64) as usize;
        &of[at.min(of.len() - 1)]
    }
    /// Whether something so likely happens.
    pub fn chance(&mut self, share: f64) -> bool {
        self.between(0.0, 1.0) < share
    }
}

/// An invented build: any topology, battery, mix of loads and shift.
pub fn build_text(draws: &mut Draws) -> String {
    let d = draws;
    let (idle, governed) = (
        d.between(1500.0, 2100.0).round(),
        d.between(3000.0, 3600.0).round(),
    );
    let starter = d.chance(0.6);
    let mut text = String::from("build: generated\n");
    let mut line = |t: String| {
        text.push_str(&t);
        text.push('\n');
    };
    line(format!("air: {:.0} °C", d.between(-8.0, 30.0)));
    let crank = if starter {
        format!(
            ", starter: {{draw: {:.0} A, time: 2.5 s}}",
            d.between(90.0, 160.0)
        )
    } else {
        String::new()
    };
    line(format!(
        "engine: {{speeds: {{idle: {idle} rpm, governed: {governed} rpm}}{crank}}}"
    ));
    let half = d.chance(0.15);
    for part in charging(d, half) {
        line(part);
    }
    line(battery(d, starter));
    line("accessories:".into());
    for load in loads(d, half) {
        line(load);
    }
    line(shift(d, starter));
    line(format!("parked: {:.0} h", d.between(10.0, 20.0)));
    if d.chance(0.2) {
        line("days: {shifts: 5, parked: 2}".into());
    }
    if d.chance(0.15) {
        line("charger: {amps: 3 A, after: 1 h, time: 6 h}".into());
    }
    text
}

/// A winding by its rating or its inductance, half-wave or bridge.
fn charging(d: &mut Draws, half: bool) -> Vec<String> {
    let known = if d.chance(0.5) {
        format!(
            "rated: {:.1} A at 3600 rpm",
            d.between(if half { 3.0 } else { 10.0 }, if half { 6.0 } else { 22.0 })
        )
    } else {
        format!("inductance: {:.3} mH", d.between(0.25, 0.45))
    };
    let mut lines = vec!["charging:".to_owned()];
    lines.push(format!(
        "  - winding: {{{known}, open_circuit: {:.1} V at 3600 rpm, resistance: {:.3} ohm, poles: {}}}",
        d.between(27.0, 33.0),
        d.between(0.1, 0.2),
        d.one(&[12, 16, 18])
    ));
    lines.push(format!(
        "    rectifier: {}",
        if half { "half-wave" } else { "full-wave" }
    ));
    if !half || d.chance(0.5) {
        lines.push(format!(
            "    regulator: {{holds: {:.2} V, kind: {}}}",
            d.between(13.9, 14.6),
            d.one(&["series", "shunt"])
        ));
    }
    lines
}

/// A battery, its reserve stated or left to the cold start.
fn battery(d: &mut Draws, starter: bool) -> String {
    let (capacity, per_ah) = (d.between(18.0, 60.0), d.between(7.0, 11.0));
    let reserve = if !starter || d.chance(0.5) {
        format!(", reserve: {:.0} %", d.between(30.0, 70.0))
    } else {
        String::new()
    };
    format!(
        "battery: {{capacity: {capacity:.1} Ah, cold_cranking: {:.0} A, type: {}{reserve}}}",
        capacity * per_ah,
        d.one(&["flooded", "flooded", "agm", "gel"])
    )
}

fn loads(d: &mut Draws, small: bool) -> Vec<String> {
    let size = if small { 0.25 } else { 1.0 };
    let count = 2 + d.between(0.0, 3.99) as usize;
    (0..count)
        .map(|k| {
            let most = size * d.between(20.0, 100.0);
            let draw = match d.between(0.0, 4.0) as u32 {
                0 => format!("draw: {most:.1} W, law: filament, at: 13.2 V"),
                1 => format!("draw: {:.2} ohm", 170.0 / most),
                2 => format!("draw: {:.2} A", most / 13.0),
                _ => format!("draw: {most:.1} W"),
            };
            let duty = if d.chance(0.3) {
                format!("{:.0} %", d.between(10.0, 100.0))
            } else {
                let mut states = format!("{{governed: {:.0} %", d.between(20.0, 100.0));
                if d.chance(0.6) {
                    let _ = write!(states, ", idle: {:.0} %", d.between(20.0, 100.0));
                }
                if d.chance(0.2) {
                    let _ = write!(states, ", stopped: {:.0} %", d.between(10.0, 60.0));
                }
                states + "}"
            };
            let parked = if d.chance(0.2) { ", parked: 12 mA" } else { "" };
            format!("  - {{name: load {k}, {draw}, duty: {duty}{parked}}}")
        })
        .collect()
}

fn shift(d: &mut Draws, starter: bool) -> String {
    let mut steps: Vec<String> = Vec::new();
    let crank = |steps: &mut Vec<String>| {
        if starter {
            steps.push("crank".into());
        }
    };
    crank(&mut steps);
    steps.push(format!("{{idle: {:.0} min}}", d.between(5.0, 40.0)));
    steps.push(format!("{{governed: {:.0} min}}", d.between(40.0, 180.0)));
    if d.chance(0.7) {
        steps.push(format!("{{stopped: {:.0} min}}", d.between(5.0, 40.0)));
        crank(&mut steps);
    }
    steps.push(format!("{{governed: {:.0} min}}", d.between(30.0, 120.0)));
    if d.chance(0.5) {
        steps.push(format!("{{idle: {:.0} min}}", d.between(5.0, 20.0)));
    }
    format!("shift: [{}]", steps.join(", "))
}
