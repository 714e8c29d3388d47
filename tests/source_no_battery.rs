//! Rectified circuits without a battery: limits that are plain by hand, and plain time stepping.

use ampledger::quantity::{Amps, Henries, Ohms, Rpm, Volts, VoltsPerRpm, Watts};
use ampledger::source::{
    CircuitError, CircuitLoad, CircuitOutput, Phases, Rectifier, Winding, rectified,
    without_battery, without_battery_loaded,
};
use std::f64::consts::PI;

const RPM: Rpm = Rpm(3600.0);

fn winding(r: f64, l: f64) -> Winding {
    Winding::new(
        VoltsPerRpm(20.0 / 3600.0),
        Ohms(r),
        Henries(l),
        12,
        Phases::One,
    )
    .unwrap()
}

fn solve(
    w: &Winding,
    rectifier: &Rectifier,
    coil: Option<f64>,
    resistive: Option<f64>,
    freewheel: bool,
) -> CircuitOutput {
    let load = CircuitLoad {
        coil: coil.map(Ohms),
        resistive: resistive.map(Ohms),
    };
    without_battery(w, rectifier, RPM, &load, freewheel).unwrap()
}

const BRIDGE: Rectifier = Rectifier::FullWave { drop: Volts(0.8) };
const DIODE: Rectifier = Rectifier::HalfWave { drop: Volts(0.8) };

#[track_caller]
fn near(got: f64, want: f64, relative: f64) {
    assert!(
        (got - want).abs() <= relative * want.abs(),
        "{got} for {want}"
    );
}

#[test]
fn without_impedance_the_load_sees_the_rectified_sine() {
    let w = winding(1e-6, 1e-12);
    let (e, d) = (20.0 * 2.0_f64.sqrt(), 1.6);
    let out = solve(&w, &BRIDGE, Some(3.0), Some(40.0), true);
    // V = 2E/π − 2Vf; the resistor's heat is the mean of (E|sin| − 2Vf)² over it.
    near(out.volts.0, 2.0 * e / PI - d, 1e-4);
    near(out.coil.0, out.volts.0 / 3.0, 1e-12);
    near(
        out.resistive_power.0,
        (e * e / 2.0 - 4.0 * e * d / PI + d * d) / 40.0,
        1e-4,
    );
    // One diode and a freewheel diode: V = E/π − Vf.
    near(
        solve(&w, &DIODE, Some(3.0), Some(40.0), true).volts.0,
        e / PI - 0.8,
        1e-4,
    );
}

#[test]
fn a_resistor_alone_is_in_series_with_the_winding() {
    let (w, with) = (winding(0.3, 8e-4), winding(4.3, 8e-4));
    for rectifier in [BRIDGE, DIODE] {
        let out = solve(&w, &rectifier, None, Some(4.0), false);
        let series = rectified(&with, &rectifier, RPM, Volts(0.0));
        near(out.volts.0, 4.0 * series.dc.0, 1e-12);
        near(
            out.resistive_power.0,
            4.0 * series.winding_rms.0.powi(2),
            1e-12,
        );
    }
}

#[test]
fn a_vanishing_resistor_leaves_the_coil_alone() {
    let w = winding(0.3, 8e-4);
    for rectifier in [BRIDGE, DIODE] {
        let alone = solve(&w, &rectifier, Some(3.0), None, true);
        let beside = solve(&w, &rectifier, Some(3.0), Some(1e7), true);
        near(beside.volts.0, alone.volts.0, 1e-5);
        near(beside.winding_rms.0, alone.winding_rms.0, 1e-5);
    }
}

#[test]
fn overlap_without_resistance() {
    // V = 2E/π − (2X/π) I − 2Vf; half-wave with freewheel diode V = E/π − X I/2π − Vf (overlap, textbook).
    let w = winding(0.0, 5e-4);
    let (e, x) = (20.0 * 2.0_f64.sqrt(), w.reactance(RPM).0);
    let out = solve(&w, &BRIDGE, Some(3.0), None, true);
    near(
        out.volts.0,
        2.0 * e / PI - 2.0 * x / PI * out.coil.0 - 1.6,
        1e-9,
    );
    let half = solve(&w, &DIODE, Some(3.0), None, true);
    near(
        half.volts.0,
        e / PI - x * half.coil.0 / (2.0 * PI) - 0.8,
        1e-9,
    );
}

/// Mean volts, resistor's heat and winding's rms at a steady coil current, by semi-implicit steps. The load's volts
/// are Rp (|i| − I), or −D where the diodes short it; nothing flows while |e| is under them. `both` half-waves pass
/// with a bridge, `clamped` is the short through the diodes or the freewheel diode.
fn stepped(w: &Winding, d: f64, coil: f64, rp: f64, both: bool, clamped: bool) -> CircuitOutput {
    let (e, r, x) = (
        2.0_f64.sqrt() * w.emf(RPM).0,
        w.resistance().0,
        w.reactance(RPM).0,
    );
    let (cycles, steps) = (30, 40_000);
    let h = 2.0 * PI / f64::from(steps);
    let (mut i, mut sums) = (0.0_f64, [0.0; 3]);
    for n in 0..cycles * steps {
        let emf = e * (h * (f64::from(n) + 0.5)).sin();
        let floor = if clamped { -d } else { f64::NEG_INFINITY };
        let v = (rp * (i.abs() - coil)).max(floor);
        let sign = match both {
            true if i == 0.0 => emf.signum(),
            true => i.signum(),
            false => 1.0,
        };
        let drive = emf - r * i - sign * (v + d);
        let starts = i != 0.0 || drive * sign > 0.0;
        if starts {
            let next = i + h / x * drive / (1.0 + h * rp / x);
            let blocked = next * sign < 0.0 && !(both && v <= floor);
            i = if blocked || (!both && next < 0.0) {
                0.0
            } else {
                next
            };
        }
        if n >= (cycles - 1) * steps {
            sums[0] += v / f64::from(steps);
            sums[1] += v * v / rp / f64::from(steps);
            sums[2] += i * i / f64::from(steps);
        }
    }
    CircuitOutput {
        volts: Volts(sums[0]),
        resistive_power: Watts(sums[1]),
        winding_rms: Amps(sums[2].sqrt()),
        ..CircuitOutput::default()
    }
}

#[test]
fn plain_time_stepping_agrees() {
    for (r, l, coil, beside) in [
        (0.3, 3e-4, 3.0, 20.0),
        (0.5, 1.5e-3, 4.0, 8.0),
        (0.2, 6e-4, 12.0, 3.0),
    ] {
        let w = winding(r, l);
        for (rectifier, freewheel) in [(BRIDGE, true), (DIODE, true), (DIODE, false)] {
            let out = solve(&w, &rectifier, Some(coil), Some(beside), freewheel);
            let both = matches!(rectifier, Rectifier::FullWave { .. });
            let slow = stepped(&w, rectifier.drops().0, out.coil.0, beside, both, freewheel);
            near(out.volts.0, slow.volts.0, 1e-3);
            near(out.resistive_power.0, slow.resistive_power.0, 1e-3);
            near(out.winding_rms.0, slow.winding_rms.0, 1e-3);
        }
    }
}

#[test]
fn a_load_given_by_its_current() {
    let w = winding(0.3, 8e-4);
    // A plain resistance, said as a current, is the same circuit.
    let plain = solve(&w, &BRIDGE, Some(3.0), Some(24.0), true);
    let by_current =
        without_battery_loaded(&w, &BRIDGE, RPM, Some(Ohms(3.0)), |v| v / Ohms(24.0), true)
            .unwrap();
    near(by_current.volts.0, plain.volts.0, 1e-9);
    // Nothing beside the coil.
    let nothing =
        without_battery_loaded(&w, &BRIDGE, RPM, Some(Ohms(3.0)), |_| Amps::ZERO, true).unwrap();
    near(
        nothing.volts.0,
        solve(&w, &BRIDGE, Some(3.0), None, true).volts.0,
        1e-6,
    );
    // 10 W at any volts beside the coil: mean volts times mean current is 10 W.
    let lamp = without_battery_loaded(&w, &BRIDGE, RPM, Some(Ohms(3.0)), |v| Watts(10.0) / v, true)
        .unwrap();
    near((lamp.volts * lamp.resistive).0, 10.0, 1e-9);
    // 500 W at any volts: more than the winding has.
    let much = without_battery_loaded(
        &w,
        &BRIDGE,
        RPM,
        Some(Ohms(3.0)),
        |v| Watts(500.0) / v,
        true,
    );
    assert!(matches!(much, Err(CircuitError::Root(_))), "{much:?}");
}

#[test]
fn standing_still_and_refusals() {
    let w = winding(0.3, 8e-4);
    let coil = CircuitLoad {
        coil: Some(Ohms(3.0)),
        resistive: None,
    };
    let still = without_battery(&w, &BRIDGE, Rpm(0.0), &coil, true);
    assert_eq!(still, Ok(CircuitOutput::default()));
    let nothing = CircuitLoad::default();
    assert_eq!(
        without_battery(&w, &BRIDGE, RPM, &nothing, true),
        Err(CircuitError::Load)
    );
    assert_eq!(
        without_battery(&w, &DIODE, RPM, &coil, false),
        Err(CircuitError::Load)
    );
    let negative = CircuitLoad {
        coil: Some(Ohms(-3.0)),
        resistive: None,
    };
    assert_eq!(
        without_battery(&w, &BRIDGE, RPM, &negative, true),
        Err(CircuitError::Load)
    );
    let k = VoltsPerRpm(12.0 / 3600.0);
    let three = Winding::new(k, Ohms(0.1), Henries(5e-4), 12, Phases::Three).unwrap();
    let both = CircuitLoad {
        coil: Some(Ohms(3.0)),
        resistive: Some(Ohms(20.0)),
    };
    assert_eq!(
        without_battery(&three, &BRIDGE, RPM, &both, true),
        Err(CircuitError::ThreePhase)
    );
    let heavy = CircuitLoad {
        coil: Some(Ohms(0.2)),
        resistive: None,
    };
    assert!(matches!(
        without_battery(&three, &BRIDGE, RPM, &heavy, true),
        Err(CircuitError::Overlap { .. })
    ));
}

#[test]
fn more_load_never_raises_the_volts() {
    for (r, l) in [(0.3, 3e-4), (0.1, 2e-3)] {
        let w = winding(r, l);
        for rectifier in [BRIDGE, DIODE] {
            let mut before = f64::INFINITY;
            for k in 0..120 {
                let beside = 60.0 * 0.95_f64.powi(k);
                let volts = solve(&w, &rectifier, Some(3.0), Some(beside), true).volts.0;
                assert!(
                    volts <= before * (1.0 + 1e-9),
                    "{rectifier:?} {beside}: {volts} after {before}"
                );
                before = volts;
            }
        }
    }
}
