//! Builds for the tests of wires, and the printed tables again, typed in apart from the program's.
#![allow(dead_code, reason = "each test crate uses its part")]

use ampledger::build::Build;
use ampledger::catalog::Catalogs;
use ampledger::wire::{Gauge, Options, Wires, wires};

/// A complete build from the text of a build file.
pub fn made(text: &str) -> Build {
    let (description, _) =
        ampledger::description::read("test", text.as_bytes()).unwrap_or_else(|e| panic!("{e}"));
    ampledger::resolve::resolve(&description, &Catalogs::builtin())
        .unwrap_or_else(|e| panic!("{e:?}"))
}

/// A 12 V machine, invented, with the wiring keys and accessories given, one entry a line.
pub fn machine(wiring: &str, accessories: &[&str]) -> Build {
    let accessories: String = accessories
        .iter()
        .map(|a| format!("  - {{{a}}}\n"))
        .collect();
    made(&format!(
        "build: invented
air: 15 °C
engine: {{speeds: {{idle: 1800 rpm, governed: 3400 rpm}}, starter: {{draw: 140 A, time: 2.5 s}}}}
charging:
  - winding: {{open_circuit: 28 V at 3600 rpm, resistance: 0.15 ohm, inductance: 0.35 mH, poles: 18, working: 20 °C}}
    rectifier: full-wave
    regulator: {{holds: 14.4 V}}
battery: {{capacity: 30 Ah, cold_cranking: 300 A, type: flooded, reserve: 60 %}}
wiring: {{{wiring}}}
accessories:
{accessories}shift: [crank, {{idle: 30 min}}, {{governed: 150 min}}, {{stopped: 18 min}}, {{governed: 60 min}}]
parked: 14 h
"
    ))
}

/// Its wires in square millimetres.
pub fn metric(build: &Build) -> Wires {
    wires(
        build,
        &Options {
            gauge: Gauge::Metric,
        },
    )
}

/// Its wires by gauge.
pub fn awg(build: &Build) -> Wires {
    wires(build, &Options { gauge: Gauge::Awg })
}

/// Holds a figure to a tolerance.
#[track_caller]
pub fn near(a: f64, b: f64, tolerance: f64) {
    assert!((a - b).abs() <= tolerance, "{a} for {b}");
}

/// IEC 60228 class 5, plain copper: mm², mΩ/m at 20 °C at most.
pub const CLASS_5: [(f64, f64); 12] = [
    (1.0, 19.5),
    (1.5, 13.3),
    (2.5, 7.98),
    (4.0, 4.95),
    (6.0, 3.30),
    (10.0, 1.91),
    (16.0, 1.21),
    (25.0, 0.780),
    (35.0, 0.554),
    (50.0, 0.386),
    (70.0, 0.272),
    (95.0, 0.206),
];

/// NEC chapter 9 table 8, stranded, uncoated, 75 °C, ohm per 1000 ft; gauge number with 1/0 as 0.
#[allow(clippy::approx_constant, reason = "3.14 ohm of 14 AWG, not π")]
pub const NEC: [(i32, f64); 14] = [
    (16, 4.99),
    (14, 3.14),
    (12, 1.98),
    (10, 1.24),
    (8, 0.778),
    (6, 0.491),
    (4, 0.308),
    (3, 0.245),
    (2, 0.194),
    (1, 0.154),
    (0, 0.122),
    (-1, 0.0967),
    (-2, 0.0766),
    (-3, 0.0608),
];

/// 33 CFR 183.425 table 5: gauge number, amps at 60, 75, 80, 90, 105, 125, 200 °C.
pub const TABLE_5: [(i32, [f64; 7]); 15] = [
    (18, [10.0, 10.0, 15.0, 20.0, 20.0, 25.0, 25.0]),
    (16, [15.0, 15.0, 20.0, 25.0, 25.0, 30.0, 35.0]),
    (14, [20.0, 20.0, 25.0, 30.0, 35.0, 40.0, 45.0]),
    (12, [25.0, 25.0, 35.0, 40.0, 45.0, 50.0, 55.0]),
    (10, [40.0, 40.0, 50.0, 55.0, 60.0, 70.0, 70.0]),
    (8, [55.0, 65.0, 70.0, 70.0, 80.0, 90.0, 100.0]),
    (6, [80.0, 95.0, 100.0, 100.0, 120.0, 125.0, 135.0]),
    (4, [105.0, 125.0, 130.0, 135.0, 160.0, 170.0, 180.0]),
    (3, [120.0, 145.0, 150.0, 155.0, 180.0, 195.0, 210.0]),
    (2, [140.0, 170.0, 175.0, 180.0, 210.0, 225.0, 240.0]),
    (1, [165.0, 195.0, 210.0, 210.0, 245.0, 265.0, 280.0]),
    (0, [195.0, 230.0, 245.0, 245.0, 285.0, 305.0, 325.0]),
    (-1, [225.0, 265.0, 285.0, 285.0, 330.0, 355.0, 370.0]),
    (-2, [260.0, 310.0, 330.0, 330.0, 385.0, 410.0, 430.0]),
    (-3, [300.0, 360.0, 385.0, 385.0, 445.0, 475.0, 510.0]),
];

/// Insulation classes of table 5.
pub const CLASSES: [f64; 7] = [60.0, 75.0, 80.0, 90.0, 105.0, 125.0, 200.0];

/// Engine-space shares of table 5's note 1.
pub const ENGINE_SPACE: [f64; 7] = [0.58, 0.75, 0.78, 0.82, 0.85, 0.89, 1.0];

/// Ratings of ISO 8820-3.
pub const RATINGS: [f64; 18] = [
    1.0, 2.0, 3.0, 4.0, 5.0, 7.5, 10.0, 15.0, 20.0, 25.0, 30.0, 35.0, 40.0, 50.0, 60.0, 70.0, 80.0,
    100.0,
];

/// Cross-section of a gauge number, mm². Source: ASTM B258.
pub fn section(gauge: i32) -> f64 {
    let diameter = 0.127 * 92f64.powf(f64::from(36 - gauge) / 39.0);
    std::f64::consts::FRAC_PI_4 * diameter * diameter
}

/// The size lists: section and ohm per metre at 20 °C.
pub fn sizes(gauge: Gauge) -> Vec<(f64, f64)> {
    match gauge {
        Gauge::Metric => CLASS_5.iter().map(|(a, r)| (*a, r * 1e-3)).collect(),
        Gauge::Awg => NEC
            .iter()
            .map(|(n, r)| (section(*n), r / 304.8 / (1.0 + 0.00393 * 55.0)))
            .collect(),
    }
}

/// What a wire may carry: table, place and bundle.
pub fn may_carry(area: f64, class: usize, engine_space: bool, bundle: u32) -> f64 {
    let row = TABLE_5
        .iter()
        .rev()
        .find(|(n, _)| section(*n) <= area * (1.0 + 1e-6));
    let heat = if engine_space {
        ENGINE_SPACE[class]
    } else {
        1.0
    };
    let crowd = match bundle {
        0..=2 => 1.0,
        3 => 0.7,
        4..=6 => 0.6,
        7..=24 => 0.5,
        _ => 0.4,
    };
    row.map_or(0.0, |(_, amps)| amps[class] * heat * crowd)
}
