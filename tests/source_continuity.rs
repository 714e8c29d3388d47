//! Current is a continuous, monotone function of speed and bus volts, over all borders between modes of conduction.

use ampledger::quantity::{Henries, Ohms, Rpm, Volts, VoltsPerRpm};
use ampledger::source::{Phases, Rectifier, Winding, cut_in_speed, rectified};

const DROP: Volts = Volts(0.9);

fn cases() -> Vec<(Winding, Rectifier)> {
    let mut cases = Vec::new();
    let topologies = [
        (Phases::One, Rectifier::HalfWave { drop: DROP }),
        (Phases::One, Rectifier::FullWave { drop: DROP }),
        (Phases::Three, Rectifier::FullWave { drop: DROP }),
    ];
    for (phases, rectifier) in topologies {
        // Reactance over resistance at 3600 rpm and 12 poles: 0.1, 1, 3, 10, and no resistance at all.
        for (r, x) in [(0.5, 0.05), (0.5, 0.5), (0.3, 0.9), (0.1, 1.0), (0.0, 1.0)] {
            let l = Henries(x / (2.0 * std::f64::consts::PI * 360.0));
            let k = VoltsPerRpm(24.0 / 3600.0);
            cases.push((Winding::new(k, Ohms(r), l, 12, phases).unwrap(), rectifier));
        }
    }
    cases
}

/// Follows the greater change into ever smaller steps: what is left after 40 halvings is a jump.
fn jump(f: &dyn Fn(f64) -> [f64; 2], low: f64, high: f64) -> f64 {
    let change = |a: [f64; 2], b: [f64; 2]| (a[0] - b[0]).abs().max((a[1] - b[1]).abs());
    let (mut low, mut high) = (low, high);
    let (mut at_low, mut at_high) = (f(low), f(high));
    for _ in 0..40 {
        let middle = 0.5 * (low + high);
        let at_middle = f(middle);
        if change(at_low, at_middle) > change(at_middle, at_high) {
            (high, at_high) = (middle, at_middle);
        } else {
            (low, at_low) = (middle, at_middle);
        }
    }
    change(at_low, at_high)
}

/// The greatest jump between `low` and `high` on a scan of `steps`.
fn greatest_jump(f: &dyn Fn(f64) -> [f64; 2], low: f64, high: f64, steps: u32) -> f64 {
    let at = |n: u32| low + (high - low) * f64::from(n) / f64::from(steps);
    (0..steps)
        .map(|n| jump(f, at(n), at(n + 1)))
        .fold(0.0, f64::max)
}

#[test]
fn no_jump_against_volts_or_speed() {
    for (winding, rectifier) in cases() {
        let scale = winding.emf(Rpm(3600.0)).0
            / winding
                .resistance()
                .0
                .hypot(winding.reactance(Rpm(3600.0)).0);
        let at = |rpm: f64, bus: f64| {
            let out = rectified(&winding, &rectifier, Rpm(rpm), Volts(bus));
            [out.dc.0, out.winding_rms.0]
        };
        let against_volts = greatest_jump(&|bus| at(3600.0, bus), 0.0, 62.0, 62);
        assert!(
            against_volts < 1e-6 * scale,
            "{winding:?} {rectifier:?}: {against_volts} A at some volts"
        );
        let against_speed = greatest_jump(&|rpm| at(rpm, 14.0), 500.0, 8000.0, 60);
        assert!(
            against_speed < 1e-6 * scale,
            "{winding:?} {rectifier:?}: {against_speed} A at some speed"
        );
    }
}

#[test]
fn current_falls_with_volts_and_rises_with_speed() {
    for (winding, rectifier) in cases() {
        let dc = |rpm: f64, bus: f64| rectified(&winding, &rectifier, Rpm(rpm), Volts(bus)).dc.0;
        for rpm in [1500.0, 3600.0] {
            let mut before = f64::INFINITY;
            for n in 0..600 {
                let now = dc(rpm, 0.1 * f64::from(n));
                assert!(
                    now <= before * (1.0 + 1e-12) + 1e-14,
                    "{winding:?} {rectifier:?} {rpm} rpm, step {n}"
                );
                before = now;
            }
        }
        let mut before = 0.0;
        for n in 0..600 {
            let now = dc(10.0 * f64::from(n), 14.0);
            assert!(
                now >= before * (1.0 - 1e-12),
                "{winding:?} {rectifier:?} {} rpm",
                10 * n
            );
            before = now;
        }
    }
}

#[test]
fn every_mode_is_crossed() {
    let mut modes: Vec<String> = Vec::new();
    for (winding, rectifier) in cases() {
        for n in 0..1200 {
            let out = rectified(
                &winding,
                &rectifier,
                Rpm(3600.0),
                Volts(0.05 * f64::from(n)),
            );
            modes.push(format!("{:?}", out.mode));
        }
    }
    modes.sort();
    modes.dedup();
    assert_eq!(
        modes,
        [
            "Commutating",
            "Continuous",
            "Off",
            "OverlappingPulses",
            "Pulses"
        ]
    );
}

#[test]
fn current_starts_at_the_cut_in_speed() {
    for (winding, rectifier) in cases() {
        let start = cut_in_speed(&winding, &rectifier, Volts(14.0));
        let dc = |share: f64| {
            rectified(&winding, &rectifier, start * share, Volts(14.0))
                .dc
                .0
        };
        assert_eq!(dc(1.0 - 1e-9), 0.0);
        assert!(dc(1.0 + 1e-4) > 0.0, "{winding:?} {rectifier:?}");
    }
}
