//! Circuits without a battery, from the build file to volts: against an independent simulator, and by hand.

mod circuit_machine;

use ampledger::check::answer::Weight;
use ampledger::circuit::{Circuit, CircuitError, accessory_rows, at_speed, circuit_rows, findings};
use ampledger::quantity::Rpm;
use circuit_machine::{
    CLUTCH, STIFF, TWO_LAMPS, WINDING, at, by_halving, governed, machine, made, near, only,
};
use std::f64::consts::{FRAC_1_SQRT_2, PI};

#[derive(serde::Deserialize)]
#[allow(non_snake_case)]
struct Row {
    id: String,
    topology: String,
    E_rms_open: f64,
    rpm: f64,
    poles: u32,
    R: f64,
    L: f64,
    Vf: f64,
    R_load: Option<f64>,
    lamp_W: Option<f64>,
    lamp_Vr: Option<f64>,
    coil_R: Option<f64>,
    coil_L: Option<f64>,
    V_out: Option<f64>,
}

fn reference(topology: &str) -> Vec<Row> {
    let text = include_str!("reference/source_cases.csv");
    let all = csv::Reader::from_reader(text.as_bytes()).into_deserialize();
    all.map(|row: Result<Row, csv::Error>| row.unwrap())
        .filter(|row| row.topology == topology)
        .collect()
}

/// Circuits of the reference cases (an independent circuit simulator, ngspice 39), from a build file.
fn of_row(row: &Row) -> Circuit {
    let always = "duty: {governed: 100 %}, circuit: own, works: 0 V to 100 V";
    let mut hung = Vec::new();
    if let (Some(w), Some(v)) = (row.lamp_W, row.lamp_Vr) {
        hung.push(format!(
            "name: lamps, draw: {w} W, law: filament, at: {v} V, {always}"
        ));
    }
    if let Some(r) = row.R_load.filter(|r| *r < 1e6) {
        hung.push(format!("name: heater, draw: {r} ohm, {always}"));
    }
    if let (Some(r), Some(l)) = (row.coil_R, row.coil_L) {
        hung.push(format!(
            "name: clutch, draw: {r} ohm, coil: {} mH, {always}",
            l * 1e3
        ));
    }
    let hung: String = hung.iter().map(|a| format!("  - {{{a}}}\n")).collect();
    let rectifier = match row.topology.as_str() {
        "lamps" => "none".to_owned(),
        "bridge_coil" => format!("{{kind: full-wave, drop: {} V}}", row.Vf),
        _ => format!("{{kind: half-wave, drop: {} V}}", row.Vf),
    };
    only(&made(&format!(
        "build: reference
engine: {{speeds: {{governed: {rpm} rpm}}}}
charging:
  - winding: {{open_circuit: {e} V at {rpm} rpm, resistance: {r} ohm, inductance: {l} mH, poles: {poles}, working: 20 °C, feeds: own}}
    rectifier: {rectifier}
accessories:
{hung}shift: [{{governed: 1 h}}]
",
        rpm = row.rpm,
        e = row.E_rms_open,
        r = row.R,
        l = row.L * 1e3,
        poles = row.poles
    )))
}

#[test]
fn lamps_and_coils_of_the_simulator() {
    for (topology, least) in [("lamps", 5), ("bridge_coil", 5), ("half_coil", 3)] {
        let rows = reference(topology);
        assert!(rows.len() >= least, "{} rows of {topology}", rows.len());
        for row in rows {
            let got = at(&of_row(&row).volts(), "governed");
            let want = row.V_out.unwrap();
            assert!(
                (got / want - 1.0).abs() < 0.01,
                "{}: {got} V for {want}",
                row.id
            );
        }
    }
}

#[test]
fn a_diode_across_the_coil_of_the_simulator() {
    let rows = reference("half_fw_coil");
    assert!(rows.len() >= 3);
    for row in rows {
        let circuit = of_row(&row);
        let with = circuit.states[0].freewheel.unwrap().0;
        let want = row.V_out.unwrap();
        assert!(
            (with / want - 1.0).abs() < 0.01,
            "{}: {with} V for {want}",
            row.id
        );
        assert!(circuit.states[0].volts.0 < with);
    }
}

#[test]
fn two_headlamps_on_a_lighting_winding() {
    let build = machine(WINDING, "none", TWO_LAMPS);
    let circuit = only(&build);
    assert!(circuit.alternating);
    // X = 2π · 3600 · 12/120 · 0.8 mH; at 1800 rpm half of it and half the EMF.
    let x = 2.0 * PI * 360.0 * 0.8e-3;
    let fast = by_halving(20.0, 0.3, x, 54.0, 12.8);
    let slow = by_halving(10.0, 0.3, x / 2.0, 54.0, 12.8);
    near(at(&circuit.volts(), "governed"), fast, 1e-9);
    near(at(&circuit.volts(), "idle"), slow, 1e-9);
    near(circuit.states[1].open_circuit.0, 20.0, 1e-12);
    let amps = circuit.accessories[0].states[1].amps.0;
    near(amps, 54.0 / 12.8 * (fast / 12.8).powf(0.55), 1e-9);
    near(circuit.states[1].copper.0, 0.3 * amps * amps, 1e-9);
    // Half an hour at idle, one and a half at governed speed, engine off dark.
    let idle = circuit.accessories[0].states[0].amps.0;
    near(circuit.accessories[0].ah.0, 0.5 * idle + 1.5 * amps, 1e-12);

    let burnt = circuit.burnt_out.as_ref().unwrap();
    let alone = by_halving(20.0, 0.3, x, 27.0, 12.8);
    assert_eq!(burnt.state, "governed");
    near(burnt.before.0, fast, 1e-9);
    near(burnt.after.0, alone, 1e-9);
    near(burnt.life.0, (alone / 12.8).powi(-13), 1e-6);
}

#[test]
#[allow(clippy::approx_constant)] // as the table prints them
fn form_factors_of_rectified_sines() {
    // K070, K071 (textbook): a rectified sine averages 0.31831 and 0.63662 of its peak, and its rms
    // is 1.5708 and 1.1107 times its mean. The rms heats a filament.
    let lamp = &["name: lamp, draw: 10 W, law: filament, at: 12 V"];
    let peak = 20.0 / FRAC_1_SQRT_2;
    for (kind, mean, form) in [
        ("half-wave", 0.318_31, 1.5708),
        ("full-wave", 0.636_62, 1.1107),
    ] {
        let build = machine(STIFF, &format!("{{kind: {kind}, drop: 0 V}}"), lamp);
        let seen = &only(&build).accessories[0].states[1];
        near(seen.volts.0, mean * peak, 2e-5);
        near(seen.heating.lowest.0 / seen.volts.0, form, 5e-5);
        // Its resistance is that at the rms volts: mean current = mean volts / R.
        let at_rms = 10.0 / 12.0 * (seen.heating.lowest.0 / 12.0).powf(0.55);
        near(
            seen.amps.0,
            at_rms * seen.volts.0 / seen.heating.lowest.0,
            1e-9,
        );
    }
}

#[test]
fn three_phases_and_overlap_of_a_textbook() {
    // K073: a three-phase bridge averages 1.35047 of the volts between leads.
    let coil = |ohms: f64| format!("name: coil, draw: {ohms} ohm, coil: 500 mH, kind: coil");
    let none = "{kind: full-wave, drop: 0 V}";
    let stiff = "open_circuit: 10 V at 3600 rpm, resistance: 0.00002 ohm, inductance: 0 mH, poles: 12, phases: 3";
    near(
        governed(&machine(stiff, none, &[&coil(5.0)])),
        13.5047,
        1e-5,
    );
    // A plain heater sees the same mean: taken as steady, six pulses ripple by 4 % (K072).
    near(
        governed(&machine(stiff, none, &["name: heater, draw: 5 ohm"])),
        13.5047,
        1e-5,
    );
    // K075: 20 V between leads, 400 Hz, 0.05 mH a phase, 30 A: 23.409 V.
    let overlap = "open_circuit: 20 V at 3600 rpm, resistance: 0.01 mohm, inductance: 0.1 mH, poles: 12, phases: 3";
    // 12 poles at 3600 rpm are 360 Hz: the same reactance wants 0.05 mH · 400/360, twice that between leads.
    let lead = overlap.replace("0.1 mH", &format!("{} mH", 0.1 * 400.0 / 360.0));
    near(
        governed(&machine(&lead, none, &[&coil(23.409 / 30.0)])),
        23.409,
        2e-5,
    );
    // K074: one phase, 120 V, 60 Hz, 1 mH, 10 A: 105.638 V. At 360 Hz a sixth of the inductance.
    let single = format!(
        "open_circuit: 120 V at 3600 rpm, resistance: 0.01 mohm, inductance: {} mH, poles: 12",
        60.0 / 360.0
    );
    near(
        governed(&machine(&single, none, &[&coil(10.5638)])),
        105.638,
        2e-5,
    );
}

#[test]
fn a_coil_on_alternating_current_is_a_phasor() {
    // A relay coil of 30 ohm and 20 mH beside a 6 ohm heater, by complex numbers written out.
    let coil = "name: relay, draw: 30 ohm, coil: 20 mH";
    let build = machine(WINDING, "none", &["name: heater, draw: 6 ohm", coil]);
    let omega = 2.0 * PI * 360.0;
    let xc = omega * 0.02;
    let (g, b) = (1.0 / 6.0 + 30.0 / (900.0 + xc * xc), xc / (900.0 + xc * xc));
    let x = omega * 0.8e-3;
    let v = 20.0 / (1.0 + 0.3 * g + x * b).hypot(x * g - 0.3 * b);
    near(governed(&build), v, 1e-12);
    let relay = &only(&build).accessories[1];
    near(relay.states[1].amps.0, v / 30.0_f64.hypot(xc), 1e-12);
}

#[test]
fn constant_power_on_alternating_current_takes_the_higher_of_two_points() {
    // (V + R P/V)² + (X P/V)² = E²: with y = V², y² + (2RP − E²) y + (R² + X²) P² = 0 (quadratic).
    let led = "name: led, draw: 18 W, accepts_ac: true, works: 9 V to 30 V";
    let build = machine(WINDING, "none", &[led]);
    let x = 2.0 * PI * 360.0 * 0.8e-3;
    let (b, c) = (2.0 * 0.3 * 18.0 - 400.0, (0.09 + x * x) * 324.0);
    let v = ((-b + (b * b - 4.0 * c).sqrt()) / 2.0).sqrt();
    near(governed(&build), v, 1e-9);
    // At idle: y² + (10.8 − 100) y + … still two points, 9.2 V, within its range. With 60 W the
    // winding cannot carry it at idle: its volts break down under its limit, and it misses its time.
    let heavy = machine(
        WINDING,
        "none",
        &["name: led, draw: 60 W, accepts_ac: true, works: 9 V to 30 V"],
    );
    let circuit = only(&heavy);
    let idle = at(&circuit.volts(), "idle");
    assert!(idle > 0.0 && idle < 9.0, "{idle}");
    assert!(circuit.accessories[0].missed.0 > 0.0);
    let all = findings(&heavy, &[circuit]);
    let dropped = all.iter().find(|f| f.what == "drop-out");
    assert!(
        dropped.is_some_and(|f| f.weight == Weight::Fault),
        "{all:#?}"
    );
}

#[test]
fn apart_and_together() {
    // Heaters of 4 and 8 ohm never on at once: the circuit's volts are those of the 4 ohm one, the
    // other sees its own. Divider by hand: V = E / |1 + Z/R|.
    let apart = machine(
        WINDING,
        "none",
        &[
            "name: low, draw: 8 ohm, duty: 50 %",
            "name: high, draw: 4 ohm, duty: 50 %, apart: [low]",
        ],
    );
    let circuit = only(&apart);
    let x = 2.0 * PI * 360.0 * 0.8e-3;
    let v = |r: f64| 20.0 / (1.0 + 0.3 / r).hypot(x / r);
    near(at(&circuit.volts(), "governed"), v(4.0), 1e-12);
    near(circuit.accessories[0].states[1].volts.0, v(8.0), 1e-12);
    near(circuit.accessories[1].states[1].volts.0, v(4.0), 1e-12);
    near(
        circuit.accessories[0].ah.0,
        0.5 * (1.5 * v(8.0) / 8.0 + 0.5 * circuit.accessories[0].states[0].volts.0 / 8.0),
        1e-12,
    );
    // Free of each other both may be on: 8/3 ohm; the least that the lamp sees on is alone.
    let free = machine(
        WINDING,
        "none",
        &[
            "name: low, draw: 8 ohm, duty: 50 %",
            "name: high, draw: 4 ohm, duty: 50 %",
        ],
    );
    let circuit = only(&free);
    near(at(&circuit.volts(), "governed"), v(8.0 / 3.0), 1e-12);
    near(
        circuit.accessories[0].states[1].between.highest.0,
        v(8.0),
        1e-12,
    );
}

#[test]
fn a_clutch_alone_on_a_bridge_cold_and_hot() {
    // Without resistance: V = 2E/π − (2X/π) I − 2Vf (commutation overlap, textbook).
    // All impedances ten times over, so that the least resistance that a file may hold is none beside them.
    let lossless = WINDING
        .replace("0.3 ohm", "0.01 mohm")
        .replace("0.8 mH", "8 mH");
    let clutch = CLUTCH.replace("3.1 ohm", "31 ohm");
    let build = machine(&lossless, "{kind: full-wave, drop: 0.9 V}", &[&clutch]);
    let circuit = only(&build);
    let seen = &circuit.accessories[0].states;
    assert_eq!(seen.len(), 1, "off at idle");
    let (e, x) = (20.0 / FRAC_1_SQRT_2, 2.0 * PI * 360.0 * 8e-3);
    let by_hand = |coil: f64| (2.0 * e / PI - 1.8) / (1.0 + 2.0 * x / PI / coil);
    near(seen[0].volts.0, by_hand(31.0), 1e-6);
    // K088: copper at 100 °C has 1.3144 times its resistance at 20 °C (IEC 60028).
    let (amps, volts) = seen[0].hot.unwrap();
    near(volts.0, by_hand(31.0 * 1.3144), 1e-6);
    near(amps.0, volts.0 / (31.0 * 1.3144), 1e-9);
    assert!(volts > seen[0].volts);
    near(
        circuit.accessories[0].ah.0,
        1.5 * 0.85 * seen[0].amps.0,
        1e-12,
    );
    let rows = accessory_rows(&build, std::slice::from_ref(&circuit));
    assert_eq!(
        (rows[0].circuit.as_str(), rows[0].ah),
        ("own", circuit.accessories[0].ah)
    );
    let rows = circuit_rows(&[circuit]);
    assert!(!rows[0].alternating && rows[0].volts.get("idle").is_some());
}

#[test]
fn volts_rise_with_speed_without_a_jump() {
    let lamp = "name: lamp, draw: 27 W, law: filament, at: 12.8 V";
    let meter = "name: meter, draw: 0.3 A";
    let cases = [
        ("none", vec![lamp]),
        ("{kind: full-wave, drop: 0.9 V}", vec![lamp, CLUTCH, meter]),
        ("{kind: half-wave, drop: 0.9 V}", vec![lamp, meter]),
        ("{kind: full-wave, drop: 0.8 V}", vec![lamp, CLUTCH, meter]),
        (
            "{kind: full-wave, drop: 0.7 V}",
            vec!["name: coil, draw: 0.7 ohm, coil: 60 mH"],
        ),
    ];
    let three = format!("{WINDING}, phases: 3");
    for (rectifier, hung) in cases {
        let phases = if rectifier.contains("0.9") || rectifier == "none" {
            WINDING
        } else {
            &three
        };
        let build = machine(phases, rectifier, &hung);
        let volts = |rpm: f64| at_speed(&build, 0, Rpm(rpm)).unwrap().1.volts.0;
        let mut before = volts(300.0);
        for step in 1..400 {
            let rpm = 300.0 + 10.0 * f64::from(step);
            let now = volts(rpm);
            let least = volts(rpm + 1e-6);
            assert!(
                now >= before - 1e-9,
                "{rectifier} {rpm}: {before} then {now}"
            );
            assert!(
                (least - now).abs() <= 1e-6 * now.max(0.1),
                "{rectifier} {rpm}"
            );
            before = now;
        }
    }
}

#[test]
fn charging_and_lighting_on_one_core_each_on_its_own() {
    let build = made(
        "build: two windings
engine: {speeds: {governed: 3600 rpm}}
charging:
  - winding: {open_circuit: 28 V at 3600 rpm, resistance: 0.3 ohm, inductance: 0.9 mH, poles: 12}
    rectifier: half-wave
  - winding: {open_circuit: 20 V at 3600 rpm, resistance: 0.3 ohm, inductance: 0.8 mH, poles: 12, working: 20 °C, feeds: bus}
    rectifier: none
  - winding: {open_circuit: 20 V at 3600 rpm, resistance: 0.3 ohm, inductance: 0.8 mH, poles: 12, braking: true}
    rectifier: none
battery: {capacity: 20 Ah, cold_cranking: 200 A}
accessories:
  - {name: Headlamps, draw: 27 W, count: 2, law: filament, at: 12.8 V, circuit: bus}
  - {name: meter, draw: 0.1 A}
shift: [{governed: 1 h}]
",
    );
    let circuit = only(&build);
    assert_eq!(circuit.name, "bus");
    let x = 2.0 * PI * 360.0 * 0.8e-3;
    near(
        at(&circuit.volts(), "governed"),
        by_halving(20.0, 0.3, x, 54.0, 12.8),
        1e-9,
    );
    assert_eq!(circuit.accessories.len(), 1);
    let empty = at_speed(&build, 0, Rpm(3600.0));
    assert!(
        empty.is_ok(),
        "a winding on the battery has no circuit of its own to load"
    );
    let none = at_speed(&build, 9, Rpm(3600.0));
    assert!(matches!(none, Err(CircuitError::AlternatorAlone { .. })));
}

/// Volts of a three-phase winding behind a bridge with no battery: 10 V a phase at 3600 rpm, 12 poles,
/// 0.08 ohm and 0.366 mH a phase, diodes of 0.9 V (ngspice 39, Gear, 2000 steps a cycle; invented winding). With
/// a coil of 20 mH (the lightest: its ripple costs up to 1 %), and with a plain resistor.
#[test]
fn three_phases_into_heavy_loads_of_the_simulator() {
    let winding = format!(
        "open_circuit: {} V at 3600 rpm, resistance: 0.16 ohm, inductance: 0.732 mH, poles: 12, phases: 3",
        10.0 * 3.0_f64.sqrt()
    );
    let volts = |load: &str| {
        let build = machine(&winding, "{kind: full-wave, drop: 0.9 V}", &[load]);
        let circuit = only(&build);
        (circuit.states[1].volts.0, circuit.states[1].winding.0)
    };
    for (ohms, want, rms) in [
        (8.0, 19.292, 1.909),
        (4.0, 17.547, 3.395),
        (3.0, 16.690, 4.254),
        (2.4, 15.981, 5.039),
        (2.0, 15.277, 5.744),
        (1.2, 12.579, 7.809),
        (0.5, 7.0093, 10.395),
    ] {
        let got = volts(&format!("name: heater, draw: {ohms} ohm"));
        near(got.0, want, 0.004);
        near(got.1, rms, 0.005);
    }
    for (ohms, milli, want, rms) in [
        (4.0, 20.0, 17.590, 3.4018),
        (2.4, 20.0, 15.704, 4.9887),
        (1.6, 20.0, 13.774, 6.4913),
        (1.2, 20.0, 12.039, 7.5337),
        (0.8, 300.0, 9.3502, 8.7526),
    ] {
        let got = volts(&format!("name: coil, draw: {ohms} ohm, coil: {milli} mH"));
        near(got.0, want, 0.01);
        near(got.1, rms, 0.025);
    }
}

/// One diode, a coil of 3 ohm and 60 mH, a plain load beside it, no diode across: 28 V at 3600 rpm, 12
/// poles, 0.3 ohm, 0.8 mH, 0.9 V (ngspice 39, Gear, 1500 steps a cycle; invented winding).
#[test]
fn a_coil_beside_a_plain_load_behind_one_diode_of_the_simulator() {
    let winding =
        "open_circuit: 28 V at 3600 rpm, resistance: 0.3 ohm, inductance: 0.8 mH, poles: 12";
    let coil = "name: coil, draw: 3 ohm, coil: 60 mH";
    let diode = "{kind: half-wave, drop: 0.9 V}";
    for (ohms, want, rms) in [(12.0, 4.183, 2.4526), (3.0, 6.725, 6.5278)] {
        let beside = format!("name: heater, draw: {ohms} ohm");
        let build = machine(winding, diode, &[coil, &beside]);
        near(governed(&build), want, 0.01);
        near(only(&build).states[1].winding.0, rms, 0.01);
    }
    let alone = governed(&machine(winding, diode, &[coil]));
    near(alone, 0.7611, 0.002);
    let nearly = governed(&machine(
        winding,
        diode,
        &[coil, "name: meter, draw: 100000 ohm"],
    ));
    near(nearly, alone, 0.01);
}
