//! Windings and rectifiers against textbook figures. Numbers K… are told of in DEVELOPERS.md; "derived" means
//! recomputed in closed form or by summation, apart from this program.

use ampledger::quantity::{Amps, Henries, Ohms, Rpm, Volts, VoltsPerRpm, Watts};
use ampledger::source::{
    CircuitLoad, Conduction, Output, Phases, Rectifier, Winding, coil_on_bridge, cut_in_speed,
    rectified, short_circuit, without_battery,
};

/// A plain AC source of `rms` volts and frequency `hertz`, as a two-pole winding.
fn source(rms: f64, hertz: f64, r: f64, l: f64, phases: Phases) -> (Winding, Rpm) {
    let rpm = 60.0 * hertz;
    let k = VoltsPerRpm(rms / rpm);
    (
        Winding::new(k, Ohms(r), Henries(l), 2, phases).unwrap(),
        Rpm(rpm),
    )
}

fn half_wave(rms: f64, r: f64, bus: f64, drop: f64) -> Output {
    let (winding, rpm) = source(rms, 50.0, r, 0.0, Phases::One);
    rectified(
        &winding,
        &Rectifier::HalfWave { drop: Volts(drop) },
        rpm,
        Volts(bus),
    )
}

fn full_wave(rms: f64, r: f64, bus: f64, drop: f64) -> Output {
    let (winding, rpm) = source(rms, 50.0, r, 0.0, Phases::One);
    rectified(
        &winding,
        &Rectifier::FullWave { drop: Volts(drop) },
        rpm,
        Volts(bus),
    )
}

#[track_caller]
fn near(got: f64, want: f64, tolerance: f64) {
    assert!(
        (got - want).abs() <= tolerance,
        "{got} for {want} ± {tolerance}"
    );
}

#[test]
fn battery_charger_of_the_textbook() {
    // Rashid, Power Electronics, battery-charger example (from memory; recomputed). 60 V rms into 12 V:
    // K057 4.2560 ohm for 5 A, K058 8.2123 A rms, K059 287.03 W, K060 96.85 V inverse, K061 17.29 %.
    let out = half_wave(60.0, 4.2560, 12.0, 0.0);
    near(4.2560 * out.dc.0 / 5.0, 4.2560, 0.0005);
    near(out.winding_rms.0, 8.2123, 0.0005);
    let heat = out.winding_rms * Ohms(4.2560) * out.winding_rms;
    near(heat.0, 287.03, 0.05);
    near(out.peak_inverse.0, 96.85, 0.005);
    let into_battery = Volts(12.0) * out.dc;
    near(100.0 * (into_battery / (into_battery + heat)), 17.29, 0.01);
}

#[test]
fn battery_charger_of_the_exercise_sheet() {
    // Published exercise sheet on the half-wave battery charger: 240 V 50 Hz, 180 V, 0.5 ohm.
    // K064 67.243 A mean, K065 1.3449 C a cycle.
    let out = half_wave(240.0, 0.5, 180.0, 0.0);
    near(out.dc.0, 67.243, 0.03);
    near(out.dc.0 / 50.0, 1.3449, 0.0007);
}

#[test]
fn small_chargers() {
    // K066 Neamen, example 2.1 (from memory): 24 V peak, 100 ohm, 12 V, 0.6 V: 24.187 mA, 36 V inverse, 0.1 %.
    let out = half_wave(24.0 / 2.0_f64.sqrt(), 100.0, 12.0, 0.6);
    near(out.dc.0 * 1e3, 24.187, 0.024);
    near(out.peak_inverse.0, 36.0, 0.036);
    // K067 Sedra and Smith, exercise (from memory): ideal diode, 26.159 mA.
    near(
        half_wave(24.0 / 2.0_f64.sqrt(), 100.0, 12.0, 0.0).dc.0 * 1e3,
        26.159,
        0.026,
    );
    // K068, K069 derived: 12 V rms, 60 ohm, into 12 V 13.662 mA, into 14 V 6.272 mA.
    near(half_wave(12.0, 60.0, 12.0, 0.0).dc.0 * 1e3, 13.662, 0.01);
    near(half_wave(12.0, 60.0, 14.0, 0.0).dc.0 * 1e3, 6.272, 0.01);
}

#[test]
fn averages_form_factor_and_ripple() {
    // K070 (textbook): 1 V peak into 1 ohm averages 1/π half-wave, 2/π full-wave. K071: form factor 1.5708, 1.1107.
    // K072: ripple 1.2114, 0.4834. All in per cent here.
    let rms = 0.5_f64.sqrt();
    for (out, mean, form, ripple) in [
        (half_wave(rms, 1.0, 0.0, 0.0), 31.831, 157.08, 121.14),
        (full_wave(rms, 1.0, 0.0, 0.0), 63.662, 111.07, 48.34),
    ] {
        near(100.0 * out.dc.0, mean, 1e-3);
        let factor = out.winding_rms / out.dc;
        near(100.0 * factor, form, 1e-2);
        near(100.0 * (factor * factor - 1.0).sqrt(), ripple, 1e-2);
    }
}

#[test]
fn three_phase_average() {
    // K073 (textbook): a three-phase bridge averages 3√2/π = 1.35047 of the line rms. As its dual: six diodes on
    // three shorted phases of pure reactance rectify 1.35047 of the phase's rms current.
    let (winding, rpm) = source(10.0, 400.0, 0.0, 1e-4, Phases::Three);
    let out = rectified(
        &winding,
        &Rectifier::FullWave { drop: Volts(0.0) },
        rpm,
        Volts(0.0),
    );
    near(out.dc / short_circuit(&winding, rpm), 1.35047, 1e-5);
    // The volts themselves: a coil that asks for next to nothing, 1 V line rms.
    let (winding, rpm) = source(1.0 / 3.0_f64.sqrt(), 400.0, 1e-3, 1e-9, Phases::Three);
    let bridge = Rectifier::FullWave { drop: Volts(0.0) };
    let load = CircuitLoad {
        coil: Some(Ohms(1e6)),
        resistive: None,
    };
    let out = without_battery(&winding, &bridge, rpm, &load, true).unwrap();
    near(out.volts.0, 1.35047, 1e-5);
}

#[test]
fn overlap_of_a_bridge() {
    // K074 (closed form): 120 V rms 60 Hz, 1 mH, 10 A: 105.638 V mean. The coil that takes 10 A of it.
    let (winding, rpm) = source(120.0, 60.0, 0.0, 1e-3, Phases::One);
    let out = coil_on_bridge(&winding, Volts(0.0), rpm, Ohms(10.5638)).unwrap();
    near(out.coil.0, 10.0, 0.0005);
    near(out.volts.0, 105.638, 0.005);
}

#[test]
fn overlap_of_a_three_phase_bridge() {
    // K075 (closed form): 20 V line rms 400 Hz, 0.05 mH, 30 A: 23.409 V mean.
    let (winding, rpm) = source(20.0 / 3.0_f64.sqrt(), 400.0, 0.0, 5e-5, Phases::Three);
    let load = CircuitLoad {
        coil: Some(Ohms(23.409 / 30.0)),
        resistive: None,
    };
    let bridge = Rectifier::FullWave { drop: Volts(0.0) };
    let out = without_battery(&winding, &bridge, rpm, &load, true).unwrap();
    near(out.volts.0, 23.409, 0.005);
    near(out.coil.0, 30.0, 0.007);
}

#[test]
fn resistive_stators() {
    // K077 (closed form): 20 V rms, 1 ohm, 13.2 V, one 0.9 V diode: 3.0970 A mean, 5.9044 A rms.
    let half = half_wave(20.0, 1.0, 13.2, 0.9);
    near(half.dc.0, 3.0970, 0.0005);
    near(half.winding_rms.0, 5.9044, 0.0005);
    // K078 (closed form): bridge, two drops: 5.6036 A, 7.6882 A.
    let full = full_wave(20.0, 1.0, 13.2, 0.9);
    near(full.dc.0, 5.6036, 0.0005);
    near(full.winding_rms.0, 7.6882, 0.0005);
}

#[test]
fn flywheel_stator_with_inductance() {
    // K079 to K083 (exact piecewise solution, plain time stepping agrees; invented machine): 28 V rms at 3600 rpm,
    // 0.15 ohm, 0.35 mH, 18 poles, into 14.0 V through two 0.9 V drops.
    let k = VoltsPerRpm(28.0 / 3600.0);
    let winding = Winding::new(k, Ohms(0.15), Henries(0.35e-3), 18, Phases::One).unwrap();
    let bridge = Rectifier::FullWave { drop: Volts(0.9) };
    for (rpm, mode, dc, rms) in [
        (1200.0, Conduction::Off, 0.0, 0.0),
        (1800.0, Conduction::Pulses, 1.6877, 2.5404),
        (2400.0, Conduction::Pulses, 6.8667, 8.5750),
        (3000.0, Conduction::Continuous, 12.0155, 13.9012),
        (3600.0, Conduction::Continuous, 15.1036, 17.0909),
    ] {
        let out = rectified(&winding, &bridge, Rpm(rpm), Volts(14.0));
        assert_eq!(out.mode, mode);
        near(out.dc.0, dc, 0.002);
        near(out.winding_rms.0, rms, 0.002);
    }
    // K099 (closed form): it starts to charge at 1436.4 rpm.
    near(cut_in_speed(&winding, &bridge, Volts(14.0)).0, 1436.4, 0.1);
}

#[test]
fn without_resistance_the_closed_forms_hold() {
    // Bridge: I = (2/πX) √(E² − (πU/2)²); 10 V peak, X = 1 ohm, U = 4 V: 0.63662 · 7.77952 = 4.95260 A (arithmetic).
    let hertz = 50.0;
    let l = 1.0 / (2.0 * std::f64::consts::PI * hertz);
    let (winding, rpm) = source(10.0 * 0.5_f64.sqrt(), hertz, 0.0, l, Phases::One);
    let ideal = Rectifier::FullWave { drop: Volts(0.0) };
    let bridge = rectified(&winding, &ideal, rpm, Volts(4.0));
    near(bridge.dc.0, 4.952_60, 1e-4);
    // Three phases: I = (3/πX) √(E² − (2πU/9)²); U = 8 V: 0.95493 · 8.29508 = 7.92122 A (arithmetic).
    let (winding, rpm) = source(10.0 * 0.5_f64.sqrt(), hertz, 0.0, l, Phases::Three);
    let three = rectified(&winding, &ideal, rpm, Volts(8.0));
    near(three.dc.0, 7.921_22, 1e-4);
}

#[test]
fn power_in_is_power_out() {
    // Tellegen: the EMF's mean power is U I_dc + R I_rms². For X = 0 and R = 1 ohm its mean of e·i in closed form is
    // (E²(γ/2 + sin(2α)/2) − 2EU cos α)/2π with γ = π − 2α. 20 V rms, 13.2 + 0.9 V.
    let out = half_wave(20.0, 1.0, 13.2, 0.9);
    let (e, u) = (20.0 * 2.0_f64.sqrt(), 14.1);
    let a = f64::asin(u / e);
    let angle = std::f64::consts::PI - 2.0 * a;
    let mean_power = e * (e * (angle / 2.0 + (2.0 * a).sin() / 2.0) - 2.0 * u * a.cos())
        / (2.0 * std::f64::consts::PI);
    let spent = Volts(u) * out.dc + out.winding_rms * Ohms(1.0) * out.winding_rms;
    near((spent - Watts(mean_power)).0, 0.0, 1e-9);
    assert!(out.dc > Amps::ZERO);
}
