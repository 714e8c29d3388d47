//! The study of a build's windings: points against an independent simulator, cut-in and break-even
//! against worked figures, lists where none are asked for, and the report.

use ampledger::build::Build;
use ampledger::catalog::Catalogs;
use ampledger::curve::{Curve, curve, default_rpms, default_volts};
use ampledger::quantity::{Amps, Rpm, Volts};
use ampledger::report::{csv as csv_report, text};
use ampledger::view;
use std::f64::consts::PI;

fn made(text: &str) -> Build {
    let (description, _) =
        ampledger::description::read("test", text.as_bytes()).unwrap_or_else(|e| panic!("{e}"));
    ampledger::resolve::resolve(&description, &Catalogs::builtin())
        .unwrap_or_else(|e| panic!("{e:?}"))
}

fn build(charging: &str, accessories: &str) -> Build {
    made(&format!(
        "build: invented
air: 25 °C
engine: {{speeds: {{idle: 1800 rpm, governed: 3400 rpm}}}}
charging:
{charging}battery: {{capacity: 30 Ah, cold_cranking: 300 A}}
accessories: {accessories}
shift: [{{idle: 30 min}}, {{governed: 2 h}}]
"
    ))
}

/// The invented stator of the worked figures: 18 poles, 28 V at 3600 rpm, 0.15 ohm, 0.35 mH.
const STATOR: &str = "  - winding: {open_circuit: 28 V at 3600 rpm, resistance: 0.15 ohm, inductance: 0.35 mH, poles: 18, working: 20 °C}
    rectifier: {kind: full-wave, drop: 0.9 V}
";

/// The loads of the worked figures: clutch 2.9 ohm at 20 °C, at 80 °C 2.9 (1 + 0.00393 · 60) ohm; 54 W of
/// filament at 12 V; 18 W; 0.7 A and 0.02 A: 10.8103 A at 14.0 V.
const LOADS: &str = "
  - {name: clutch, draw: 3.58382 ohm, duty: {governed: 100 %}}
  - {name: lamps, draw: 54 W, law: filament, at: 12 V, duty: {governed: 100 %}}
  - {name: led, draw: 18 W, duty: {governed: 100 %}}
  - {name: solenoid, draw: 0.7 A, duty: {governed: 100 %}}
  - {name: meter, draw: 0.02 A, duty: {governed: 100 %}}";

#[track_caller]
fn near(got: f64, want: f64, absolute: f64) {
    assert!((got - want).abs() <= absolute, "{got} for {want}");
}

#[derive(serde::Deserialize)]
struct Row {
    topology: String,
    open_circuit_v: f64,
    rpm: f64,
    poles: u32,
    resistance_ohm: f64,
    inductance_h: f64,
    bus_v: f64,
    drop_v: f64,
    dc_a: f64,
    winding_rms_a: f64,
    peak_inverse_v: Option<f64>,
}

#[test]
fn points_of_the_simulator() {
    // ngspice 39: 0.5 % of reading and 0.1 % of E/Z, the simulator's own diode.
    let text = include_str!("reference/rectifier.csv");
    let rows = csv::Reader::from_reader(text.as_bytes()).into_deserialize::<Row>();
    let mut seen = 0;
    for row in rows.map(Result::unwrap) {
        let three = row.topology == "three-phase";
        let (volts, each) = if three {
            (3.0_f64.sqrt(), 2.0)
        } else {
            (1.0, 1.0)
        };
        let kind = if row.topology == "half-wave" {
            "half-wave"
        } else {
            "full-wave"
        };
        let charging = format!(
            "  - winding: {{open_circuit: {} V at {} rpm, resistance: {} ohm, inductance: {} mH, poles: {}, phases: {}, working: 20 °C}}\n    rectifier: {{kind: {kind}, drop: {} V}}\n",
            row.open_circuit_v * volts,
            row.rpm,
            row.resistance_ohm * each,
            row.inductance_h * each * 1e3,
            row.poles,
            if three { 3 } else { 1 },
            row.drop_v
        );
        let answer = curve(
            &build(&charging, "[]"),
            &[Rpm(row.rpm)],
            &[Volts(row.bus_v)],
        );
        let point = answer.windings[0].points[0];
        let x = 2.0 * PI * row.rpm * f64::from(row.poles) / 120.0 * row.inductance_h;
        let scale = row.open_circuit_v * 2.0_f64.sqrt() / row.resistance_ohm.hypot(x);
        let within = |want: f64| 0.005 * want + 0.001 * scale;
        near(point.dc_a.unwrap().0, row.dc_a, within(row.dc_a));
        let rms = point.winding_rms_a.unwrap().0;
        near(rms, row.winding_rms_a, within(row.winding_rms_a));
        let phases = if three { 3.0 } else { 1.0 };
        near(
            point.copper_loss_w.unwrap().0,
            phases * row.resistance_ohm * rms * rms,
            1e-9 * scale * scale,
        );
        if let Some(peak) = row.peak_inverse_v {
            near(point.peak_inverse_v.unwrap().0, peak, 0.005 * peak);
        }
        seen += 1;
    }
    assert!(seen >= 80, "{seen}");
}

#[test]
fn break_even_and_cut_in_of_the_invented_machine() {
    let build = build(STATOR, LOADS);
    let answer = curve(&build, &[Rpm(1800.0), Rpm(3600.0)], &[Volts(14.0)]);
    let governed = answer
        .demands
        .iter()
        .find(|d| d.state == "governed")
        .unwrap();
    // K094: 10.8103 A at 14.0 V. K098 (bisection): met at 2847.7 rpm. K099 (closed form): from 1436.4 rpm.
    near(governed.mean_a.0, 10.8103, 0.001);
    near(governed.break_even_rpm.unwrap().0, 2847.7, 2.0);
    near(answer.windings[0].cut_in[0].rpm.unwrap().0, 1436.4, 0.1);
    // K095: +4.2933 A at 3600 rpm, −9.1227 A at 1800.
    let given: Vec<f64> = answer.windings[0]
        .points
        .iter()
        .map(|p| p.dc_a.unwrap().0)
        .collect();
    near(given[1] - governed.mean_a.0, 4.2933, 0.003);
    near(given[0] - governed.mean_a.0, -9.1227, 0.003);
    let idle = answer.demands.iter().find(|d| d.state == "idle").unwrap();
    assert_eq!((idle.mean_a, idle.break_even_rpm), (Amps::ZERO, None));
    // K083: 15.1036 A at 3600 rpm is what it is rated at, into 14 V.
    let rated = answer.windings[0].rated.unwrap();
    near(rated.amps.0, 15.1036, 0.002);
    assert_eq!((rated.rpm, rated.bus_v), (Rpm(3600.0), Volts(14.0)));
}

#[test]
fn mean_and_most_of_a_cycling_load() {
    let loads = "\n  - {name: pump, draw: 8 A, duty: {governed: 25 %}}\n  - {name: lamp, draw: 3 A, duty: {governed: 100 %}}";
    let answer = curve(&build(STATOR, loads), &[], &[Volts(14.0)]);
    let governed = answer
        .demands
        .iter()
        .find(|d| d.state == "governed")
        .unwrap();
    near(governed.mean_a.0, 5.0, 1e-12);
    near(governed.most_a.0, 11.0, 1e-12);
    assert!(governed.break_even_rpm < governed.most_break_even_rpm);
    let too_much = "\n  - {name: heater, draw: 60 A, duty: 100 %}";
    let answer = curve(&build(STATOR, too_much), &[], &[Volts(14.0)]);
    assert!(answer.demands.iter().all(|d| d.break_even_rpm.is_none()));
}

#[test]
fn frequency_emf_and_magnets_of_a_winding() {
    let lighting = |winding: &str| {
        let charging = format!(
            "  - winding: {{open_circuit: 28 V at 3600 rpm, resistance: 0.15 ohm, inductance: 0.35 mH, poles: 18, feeds: lights, {winding}}}\n    rectifier: none\n"
        );
        let answer = curve(
            &build(&charging, "[]"),
            &[Rpm(1800.0), Rpm(3600.0)],
            &[Volts(14.0)],
        );
        answer.windings.into_iter().next().unwrap()
    };
    let cold = lighting("working: 20 °C");
    // K085: 28 V at 3600 rpm are 14 V at 1800.
    near(cold.circuit[0].open_circuit_v.unwrap().0, 14.0, 1e-9);
    // K084: 18 poles at 3600 rpm are 540 Hz: shorted it carries E / |R + j 2π 540 L|.
    let z = 0.15_f64.hypot(2.0 * PI * 540.0 * 0.35e-3);
    near(cold.shorted[1].amps.0, 28.0 / z, 1e-9);
    near(
        cold.shorted[1].copper_loss_w.0,
        0.15 * (28.0 / z).powi(2),
        1e-9,
    );
    // K086, K087: magnets 60 K warmer leave 0.88 (ferrite) and 0.934 (neodymium): the winding at 140 °C.
    for (magnets, left) in [("ferrite", 0.88), ("rare-earth", 0.934)] {
        let hot = lighting(&format!("working: 140 °C, magnets: {magnets}"));
        near(hot.circuit[1].open_circuit_v.unwrap().0, 28.0 * left, 1e-9);
    }
    // Alternating current has no mean, and no bus.
    assert_eq!(cold.feeds, "lights");
    assert!(cold.points[0].dc_a.is_none() && cold.cut_in.is_empty() && cold.lines.is_empty());
}

#[test]
fn steady_current_of_three_phases_at_given_volts() {
    // K076 (overlap with constant current): 16 V between leads, 400 Hz, 0.05 mH and 0.03 ohm a phase, two drops of
    // 0.9 V: I = (1.35 VLL − V − 1.8) / (3X/π + 2R), 32.264 A at 14.0 V. It counts 2R all the time; while two phases
    // change over (u) it is 3R/2, and the coming one's current, I (1 − cos θ)/(1 − cos u), lags its straight line by
    // a third: exact volts lie above by (3/π) u R I (1/2 + 1/6), to first order in R.
    let text = format!(
        "build: three phases
engine: {{speeds: {{governed: 4000 rpm}}}}
charging:
  - winding: {{open_circuit: 16 V at 4000 rpm, resistance: 0.06 ohm, inductance: 0.1 mH, poles: 12, phases: 3, working: 20 °C, feeds: own}}
    rectifier: {{kind: full-wave, drop: 0.9 V}}
accessories:
  - {{name: coil, draw: {} ohm, coil: 500 mH, circuit: own}}
shift: [{{governed: 1 h}}]
",
        14.0 / 32.264
    );
    let answer = curve(&made(&text), &[Rpm(4000.0)], &[Volts(14.0)]);
    let volts = answer.windings[0].circuit[0].loaded_v.unwrap().0;
    let amps = volts / (14.0 / 32.264);
    let (x, r) = (2.0 * PI * 400.0 * 0.05e-3, 0.03);
    let formula = |i: f64| 3.0 * 2.0_f64.sqrt() / PI * 16.0 - 1.8 - i * (3.0 * x / PI + 2.0 * r);
    near(formula(32.264), 14.0, 0.001);
    let overlap = (1.0 - 2.0 * x * amps / (2.0_f64.sqrt() * 16.0)).acos();
    let above = 3.0 / PI * overlap * r * amps * (0.5 + 1.0 / 6.0);
    near(volts, formula(amps) + above, 0.02);
}

#[test]
fn an_alternator_by_its_curve_and_pulley() {
    let charging = "  - alternator: {curve: [0 A at 1200 rpm, 20 A at 2000 rpm, 40 A at 6000 rpm], ratio: 2.5, at: 14 V, tested: 25 °C, working: 25 °C}
    regulator: {holds: 14.2 V, per_degree: -18 mV}
";
    let loads = "\n  - {name: blower, draw: 30 A, duty: {governed: 100 %}}";
    let answer = curve(
        &build(charging, loads),
        &[Rpm(800.0), Rpm(1600.0)],
        &[Volts(14.2)],
    );
    let winding = &answer.windings[0];
    // Straight lines: 800 · 2.5 = 2000 rpm, 20 A; 1600 · 2.5 = 4000 rpm, 30 A. From 1200 / 2.5 = 480 rpm.
    let given: Vec<f64> = winding.points.iter().map(|p| p.dc_a.unwrap().0).collect();
    near(given[0], 20.0, 1e-9);
    near(given[1], 30.0, 1e-9);
    near(winding.cut_in[0].rpm.unwrap().0, 480.0, 1e-9);
    near(answer.demands[1].break_even_rpm.unwrap().0, 1600.0, 1e-3);
    let json = serde_json::to_value(&answer).unwrap();
    assert!(json["windings"][0]["points"][0]["winding_rms_a"].is_null());
}

#[test]
fn names_of_the_json() {
    let json = serde_json::to_value(curve(&build(STATOR, LOADS), &[], &[])).unwrap();
    assert_eq!(json["format"], 1);
    for key in [
        "rpm",
        "bus_v",
        "dc_a",
        "winding_rms_a",
        "copper_loss_w",
        "peak_inverse_v",
    ] {
        assert!(json["windings"][0]["points"][0][key].is_number(), "{key}");
    }
    assert!(json["windings"][0]["name"].is_string());
    assert!(json["windings"][0].get("lines").is_none());
}

#[test]
fn lists_where_none_are_asked_for() {
    let regulated = format!("{STATOR}    regulator: {{holds: 14.2 V, per_degree: -18 mV}}\n");
    let build = build(&regulated, LOADS);
    let volts = default_volts(&build);
    assert_eq!(volts, [Volts(12.0), Volts(13.5), Volts(14.2)]);
    let rpms = default_rpms(&build, &volts);
    // From below the first output into 12 V, (12 + 1.8)/√2 · 3600/28 = 1254.6 rpm, past 1.05 · 3400.
    assert!(
        rpms[0].0 < 1254.6 && rpms[rpms.len() - 1].0 >= 3570.0,
        "{rpms:?}"
    );
    assert!((8..=17).contains(&rpms.len()), "{rpms:?}");
    let step = rpms[1].0 - rpms[0].0;
    assert!(
        rpms.windows(2)
            .all(|w| (w[1].0 - w[0].0 - step).abs() < 1e-9)
    );
    assert!((rpms[0].0 / step).fract() == 0.0);
    let answer = curve(&build, &[], &[Volts(f64::NAN)]);
    assert_eq!(answer.headline_v, Some(Volts(14.2)));
    assert_eq!(answer.windings[0].points.len(), 3 * rpms.len());
}

#[test]
fn heat_under_a_regulator() {
    let with = |kind: &str| {
        let regulator =
            format!("{STATOR}    regulator: {{holds: 14.0 V, kind: {kind}, per_degree: 0 mV}}\n");
        let answer = curve(&build(&regulator, LOADS), &[Rpm(3600.0)], &[Volts(14.0)]);
        (
            answer.windings[0].regulated[0],
            answer.windings[0].points[0],
            answer.windings[0].shorted[0],
        )
    };
    // D = 10.8103 / 15.1036 = 0.7157 (K083, K094); series: between D² and D of the full heat.
    let (series, full, _) = with("series");
    let full_w = 0.15 * 17.0909 * 17.0909;
    near(full.copper_loss_w.unwrap().0, full_w, 0.01);
    near(series.low_w.0, 0.7157 * 0.7157 * full_w, 0.02);
    near(series.high_w.0, 0.7157 * full_w, 0.02);
    // Shunt: D of the full heat and 1 − D of the shorted, give or take what was found.
    let (shunt, _, shorted) = with("shunt");
    let heat = 0.7157 * full_w + 0.2843 * shorted.copper_loss_w.0;
    near(shunt.low_w.0, heat / 1.37, 0.02);
    near(shunt.high_w.0, heat / 0.95, 0.02);
    assert!(shunt.shorts && !series.shorts);
    // Where the demand takes all it gives the regulator never acts; under cut-in nothing flows.
    let regulator =
        format!("{STATOR}    regulator: {{holds: 14.0 V, kind: shunt, per_degree: 0 mV}}\n");
    let slow = curve(
        &build(&regulator, LOADS),
        &[Rpm(1000.0), Rpm(1800.0)],
        &[Volts(14.0)],
    );
    assert_eq!(slow.windings[0].regulated[0].high_w.0, 0.0);
    // K080: 2.5404 A rms at 1800 rpm.
    near(
        slow.windings[0].regulated[1].high_w.0,
        0.15 * 2.5404 * 2.5404,
        0.002,
    );
}

#[test]
fn two_sources_meet_the_demand_together() {
    // Two of the invented stator, 10.8103 A: each gives half; alone it takes 2847.7 rpm (K098).
    let two = format!(
        "{STATOR}    regulator: {{holds: 14.0 V, per_degree: 0 mV}}\n{STATOR}    regulator: {{holds: 14.4 V, per_degree: 0 mV}}\n"
    );
    let build = build(&two, LOADS);
    let answer = curve(
        &build,
        &[Rpm(2000.0), Rpm(3000.0)],
        &[Volts(14.0), Volts(14.2)],
    );
    let met = |v: f64| {
        let at = answer
            .demands
            .iter()
            .find(|d| d.state == "governed" && d.bus_v == Volts(v));
        at.and_then(|d| d.break_even_rpm).unwrap().0
    };
    let speed = met(14.0);
    let each = curve(&build, &[Rpm(speed)], &[Volts(14.0)]).windings[0].points[0].dc_a;
    near(each.unwrap().0, 10.8103 / 2.0, 0.001);
    // Above 14.0 V the first regulator has let go: the second alone must carry it.
    assert!(met(14.2) > 2847.7);
    assert_eq!(answer.headline_v, Some(Volts(14.0)));
    assert_eq!(answer.together.len(), 2);
}

fn shown(answer: &Curve) -> String {
    text::render(
        &view::curve(answer),
        &text::Style {
            charts: true,
            ..text::Style::default()
        },
    )
}

#[test]
fn the_report_fits_a_terminal_and_says_what_matters() {
    let regulated = format!(
        "{STATOR}    regulator: {{holds: 14.4 V, kind: shunt, per_degree: -18 mV}}\n  - winding: {{open_circuit: 20 V at 3600 rpm, resistance: 0.3 ohm, inductance: 0.8 mH, poles: 12, feeds: lights}}\n    rectifier: none\n"
    );
    let lamps = format!(
        "{LOADS}\n  - {{name: Headlamps, draw: 54 W, law: filament, at: 12.8 V, circuit: lights, duty: {{governed: 100 %}}}}"
    );
    let answer = curve(&build(&regulated, &lamps), &[], &[]);
    let shown = shown(&answer);
    for words in [
        "At 14.4 V",
        "gives from 1473 rpm",
        "met from 29",
        "Volts of lights",
        "Loaded",
    ] {
        assert!(shown.contains(words), "no `{words}` in\n{shown}");
    }
    for line in shown.lines() {
        assert!(line.chars().count() <= 80, "{line}");
    }
    let many: Vec<Volts> = (0..9).map(|k| Volts(11.0 + 0.5 * f64::from(k))).collect();
    let wide = curve(&build(&regulated, &lamps), &[], &many);
    for line in self::shown(&wide).lines() {
        assert!(line.chars().count() <= 80, "{line}");
    }
    let table = csv_report::render(
        &ampledger::report::Report::new("x").table(view::curve::points(&answer)),
    );
    let first = table.lines().next().unwrap();
    assert!(
        first.starts_with("Winding,Speed (rpm),Bus (V),Output (A)"),
        "{first}"
    );
    assert_eq!(
        table.lines().count(),
        1 + answer
            .windings
            .iter()
            .map(|w| w.points.len())
            .sum::<usize>()
    );
}
