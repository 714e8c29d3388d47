//! Odds within tolerances: against what follows without drawing, and against the slow path through text.

use ampledger::build::Build;
use ampledger::catalog::Catalogs;
use ampledger::check::judge;
use ampledger::description::{Assignment, Description, read_set};
use ampledger::odds::{Drawing, Law, Odds, Wanted, odds};
use ampledger::quantity::{AmpHours, Fraction};
use ampledger::resolve::resolve;

/// An invented cart on the edge of keeping up; only the lamps bear a tolerance.
const CART: &str = "\
build: cart on the edge # invented
air: 15 °C
engine: {speeds: {idle: 1800 rpm, governed: 3400 rpm}, starter: {draw: 140 A, time: 2.5 s}}
charging:
  - winding: {open_circuit: 28 V at 3600 rpm, resistance: 0.15 ohm, inductance: 0.35 mH, poles: 18, working: 20 °C}
    rectifier: full-wave
    regulator: {holds: 14.4 V}
battery: {capacity: 30 Ah, cold_cranking: 300 A, type: flooded, reserve: 60 %}
accessories:
  - {name: work lamps, draw: 172 W ± 15 %, duty: {idle: 100 %, governed: 100 %}} # as bought
  - {name: spray pump, draw: 4 A, duty: {governed: 10 %}}
shift: [crank, {idle: 30 min}, {governed: 150 min}, {stopped: 18 min}, {governed: 60 min}]
parked: 14 h
";

/// Tolerances of every kind: stated, of parts, assumed.
const MANY: &str = "\
build: all kinds # invented
air: -3 °C ± 5 K
engine: {speeds: {idle: 1750 rpm ± 4 %, governed: 3400 rpm ± 100 rpm}, starter: {part: starter-single, draw: 140 A ± 10 %}}
charging:
  - {winding: {rated: 16 A at 3600 rpm ± 8 %, poles: 12}, rectifier: {kind: full-wave, drop: 0.9 V ± 0.1 V}, regulator: {holds: 14.4 V ± 0.2 V, per_degree: -18 mV ± 3 mV}}
battery: {part: battery-flooded-28ah, reserve: 40 % ± 5 %, rest_volts: {full: 12.65 V ± 0.5 %}}
accessories:
  - {part: work-light-led-27w, count: 2, duty: {idle: 100 %, governed: 95 % ± 20 %}}
  - {name: seat, draw: 48 W ± 10 %, law: resistance, at: 13.5 V, duty: 60 % ± 25 %, parked: 8 mA ± 50 %}
  - {name: lamps, draw: 55 W ± 5 %, law: filament, at: 12.8 V ± 1 %, count: 2}
  - {name: clutch, draw: 3.1 ohm ± 8 %, duty: {governed: 85 %}}
shift: [crank, {idle: 12 min ± 3 min}, {governed: 1 h 35 min ± 10 %}, {stopped: 20 min}, crank, {governed: 110 min}, {idle: 18 min}]
parked: 15 h ± 2 h
";

fn described(text: &str, set: &[String]) -> Description {
    let set: Vec<Assignment> = set
        .iter()
        .map(|s| Assignment::parse(s).expect("an assignment"))
        .collect();
    read_set("test", text.as_bytes(), &set).expect("a build").0
}

fn built(text: &str, set: &[String]) -> Build {
    resolve(&described(text, set), &Catalogs::builtin()).expect("a complete build")
}

fn drawn(text: &str, wanted: Wanted) -> Odds {
    odds(&described(text, &[]), &Catalogs::builtin(), wanted, &|| ()).expect("odds")
}

fn runs(runs: u64) -> Wanted {
    Wanted {
        runs,
        ..Wanted::default()
    }
}

/// With one value drawn evenly between its limits, the share that keeps up is the part of the range below the
/// value at the edge, found here by halving; the median lacks what the build as stated lacks.
#[test]
fn one_tolerance_against_its_edge() {
    let keeps = |watts: f64| {
        let set = [format!("accessories[0].draw={watts} W")];
        judge(&built(CART, &set)).expect("a verdict").keeps_up()
    };
    let (low, high) = (172.0 * 0.85, 172.0 * 1.15);
    let (mut a, mut b) = (low, high);
    assert!(keeps(a) && !keeps(b));
    for _ in 0..30 {
        let middle = 0.5 * (a + b);
        if keeps(middle) {
            a = middle
        } else {
            b = middle
        }
    }
    let expected = (a - low) / (high - low);
    let n = 64;
    let answer = drawn(CART, runs(n));
    // Each of n equal parts of the range holds one draw: the share is off by one draw at most.
    let off = (answer.keeps_up_share.0 - expected).abs();
    assert!(
        off <= 1.0 / n as f64,
        "{} for {expected}",
        answer.keeps_up_share.0
    );
    assert!(
        answer.interval[0] < answer.keeps_up_share && answer.keeps_up_share < answer.interval[1]
    );
    let nominal = judge(&built(CART, &[]))
        .expect("a verdict")
        .lacks()
        .expect("a charge");
    let median = answer.lacks_ah.p50.expect("a charge");
    // Half a part of the range (0.4 W) is worth under 0.15 Ah.
    assert!(
        (median - nominal).abs() < AmpHours(0.15),
        "{median:?} for {nominal:?}"
    );
    assert!(answer.lacks_ah.p95 > answer.lacks_ah.p50);
    assert_eq!(answer.influence.len(), 1);
    assert!((answer.influence[0].share - Fraction::ONE).abs() < Fraction(0.01));
    assert_eq!(answer.influence[0].what, "draw, work lamps");
}

/// A draw is what its values make of the file: written into the text, read and resolved, the verdict is the same.
#[test]
fn a_draw_is_its_values_written_into_the_file() {
    let catalogs = Catalogs::builtin();
    for text in [CART, MANY] {
        let description = described(text, &[]);
        let nominal = built(text, &[]);
        let drawing = Drawing::new(&description, &catalogs, &nominal, Wanted::default());
        let mut judged = 0;
        for number in 0..12 {
            let written = built_or_none(text, &drawing.written(number));
            let cheap = drawing.build(number);
            assert_eq!(written.is_some(), cheap.is_some(), "draw {number}");
            let (Some(slow), Some(cheap)) = (written, cheap) else {
                continue;
            };
            let (slow, cheap) = (judge(&slow).expect("one"), judge(&cheap).expect("another"));
            assert_eq!(slow.verdict(), cheap.verdict(), "draw {number}");
            let (a, b) = (slow.lacks().map(|l| l.0), cheap.lacks().map(|l| l.0));
            let off = a.zip(b).map_or(0.0, |(a, b)| (a - b).abs());
            assert!(
                a.is_some() == b.is_some() && off < 1e-9,
                "draw {number}: {a:?}, {b:?}"
            );
            judged += 1;
        }
        assert!(judged >= 10, "{judged}");
    }
}

fn built_or_none(text: &str, set: &[String]) -> Option<Build> {
    resolve(&described(text, set), &Catalogs::builtin()).ok()
}

/// Every tolerance of the file is drawn, once: those stated, those of parts, and those of what is assumed.
#[test]
fn every_tolerance_is_drawn() {
    let catalogs = Catalogs::builtin();
    let (description, nominal) = (described(MANY, &[]), built(MANY, &[]));
    let drawing = Drawing::new(&description, &catalogs, &nominal, Wanted::default());
    let law = |path: &str| {
        let mut found = drawing.tolerances().iter().filter(|t| t.path == path);
        let law = found.next().map(|t| t.law);
        assert!(found.next().is_none(), "{path} twice");
        law
    };
    for (path, expected) in [
        ("air", Law::Uniform),
        ("engine.speeds.idle", Law::Uniform),
        ("engine.speeds.governed", Law::Uniform),
        ("engine.starter.draw", Law::Uniform),
        ("charging[0].winding.rated", Law::Uniform),
        ("charging[0].winding.open_circuit", Law::Uniform), // assumed
        ("charging[0].winding.resistance", Law::Uniform),   // assumed
        ("charging[0].rectifier.drop", Law::Uniform),
        ("charging[0].regulator.holds", Law::Uniform),
        ("charging[0].regulator.per_degree", Law::Uniform),
        ("battery.capacity", Law::Normal),
        ("battery.reserve_capacity", Law::Normal),
        ("battery.cold_cranking", Law::Normal),
        ("battery.rest_volts.full", Law::Uniform),
        ("battery.reserve", Law::Uniform),
        ("accessories[0].draw", Law::Normal),
        ("accessories[0].duty.governed", Law::Uniform),
        ("accessories[1].draw", Law::Uniform),
        ("accessories[1].duty", Law::Uniform),
        ("accessories[1].parked", Law::Uniform),
        ("accessories[2].draw", Law::Uniform),
        ("accessories[2].at", Law::Uniform),
        ("accessories[3].draw", Law::Uniform),
        ("shift[1].idle", Law::Uniform),
        ("shift[2].governed", Law::Uniform),
        ("parked", Law::Uniform),
    ] {
        assert_eq!(law(path), Some(expected), "{path}");
    }
    let written = MANY.matches('±').count();
    let stated = drawing
        .tolerances()
        .iter()
        .filter(|t| t.law == Law::Uniform)
        .count();
    assert_eq!(stated, written + 2, "those written, and two assumed");
}

/// The values of a draw lie within their limits, and over the draws reach them.
#[test]
fn values_fill_their_limits() {
    let catalogs = Catalogs::builtin();
    let (description, nominal) = (described(CART, &[]), built(CART, &[]));
    let drawing = Drawing::new(&description, &catalogs, &nominal, Wanted::default());
    let watts: Vec<f64> = (0..64)
        .map(|n| {
            let set = drawing.written(n);
            let text = set[0]
                .strip_prefix("accessories[0].draw=")
                .expect("its path");
            text.strip_suffix(" W")
                .expect("watts")
                .parse()
                .expect("a number")
        })
        .collect();
    assert!(watts.iter().all(|w| (146.2..=197.8).contains(w)));
    // Sixty-four equal parts of 0.806 W hold one draw each.
    let least = watts.iter().copied().fold(f64::INFINITY, f64::min);
    let most = watts.iter().copied().fold(0.0, f64::max);
    assert!(
        least < 146.2 + 0.81 && most > 197.8 - 0.81,
        "{least} to {most}"
    );
}

#[test]
fn a_seed_is_an_answer() {
    let answer = |seed| {
        let wanted = Wanted {
            runs: 40,
            seed,
            ..Wanted::default()
        };
        serde_json::to_string(&drawn(MANY, wanted)).expect("JSON")
    };
    let one = |threads| {
        let pool = rayon::ThreadPoolBuilder::new()
            .num_threads(threads)
            .build()
            .expect("threads");
        pool.install(|| answer(9))
    };
    assert_eq!(one(1), one(3));
    assert_ne!(answer(9), answer(10));
}

#[test]
fn without_tolerances_there_is_one_answer() {
    let answer = drawn(&CART.replace(" ± 15 %", ""), runs(500));
    let nominal = judge(&built(CART, &[])).expect("a verdict");
    let share = if nominal.keeps_up() { 1.0 } else { 0.0 };
    assert_eq!((answer.runs, answer.keeps_up_share), (1, Fraction(share)));
    assert_eq!(answer.lacks_ah.p50, nominal.lacks());
    assert!(answer.worst.is_none() && answer.influence.is_empty());
}

/// A rating that lower open-circuit volts cannot give is no machine: such draws are made again.
#[test]
fn contradictions_are_drawn_again() {
    let text = CART.replace(
        "open_circuit: 28 V at 3600 rpm, resistance: 0.15 ohm, inductance: 0.35 mH",
        "open_circuit: 24 V at 3600 rpm ± 30 %, resistance: 0.15 ohm, rated: 18 A at 3600 rpm ± 20 %",
    );
    let answer = drawn(&text, runs(64));
    assert_eq!(answer.runs, 64);
    assert!(answer.contradictory > 0, "{answer:?}");
}

/// What a dealer adds is drawn as well; its worst draw is no file, and that is said before anything is drawn.
#[test]
fn a_kit_is_drawn_too() {
    let folder = tempfile::tempdir().expect("a folder");
    let file = folder.path().join("cart.yaml");
    std::fs::write(&file, CART.replace("172 W", "60 W")).expect("a file");
    let run = |more: &[&str]| {
        let mut command = std::process::Command::new(env!("CARGO_BIN_EXE_ampledger"));
        command.arg("odds").arg(&file).args(more);
        command.args(["--runs", "64", "--format", "json"]);
        command.output().expect("the program")
    };
    let answer = |more: &[&str]| -> serde_json::Value {
        serde_json::from_slice(&run(more).stdout).expect("JSON")
    };
    let (bare, fitted) = (answer(&[]), answer(&["--with", "night-work"]));
    assert_eq!(bare["keeps_up_share"], 1.0);
    assert!(fitted["keeps_up_share"].as_f64() < bare["keeps_up_share"].as_f64());
    let drawn = |answer: &serde_json::Value| answer["tolerances"].as_array().map_or(0, Vec::len);
    assert!(drawn(&fitted) > drawn(&bare), "{fitted}");
    let worst = folder.path().join("worst.yaml");
    let refused = run(&[
        "--with",
        "night-work",
        "--worst",
        &worst.display().to_string(),
    ]);
    assert_eq!(refused.status.code(), Some(2));
    assert!(!worst.exists());
}

/// The worst draw, written as a build file, reads back and lacks what the answer says of it.
#[test]
fn the_worst_draw_reads_back() {
    let folder = tempfile::tempdir().expect("a folder");
    let (file, worst) = (
        folder.path().join("cart.yaml"),
        folder.path().join("worst.yaml"),
    );
    std::fs::write(&file, CART).expect("a file");
    let mut command = std::process::Command::new(env!("CARGO_BIN_EXE_ampledger"));
    command.arg("odds").arg(&file).arg("--worst").arg(&worst);
    let output = command.args(["--runs", "64", "--format", "json"]).output();
    let answer: serde_json::Value =
        serde_json::from_slice(&output.expect("the program").stdout).expect("JSON");
    let text = std::fs::read_to_string(&worst).expect("the worst draw");
    let judged = judge(&built(&text, &[])).expect("a verdict");
    let lacks = judged.lacks().expect("a charge").0;
    let told = answer["worst"]["lacks_ah"].as_f64().expect("a charge");
    // Values are written to six digits.
    assert!((lacks - told).abs() < 1e-3 * told, "{lacks} for {told}");
    assert!(told >= answer["lacks_ah"]["p95"].as_f64().expect("a charge"));
    assert!(
        text.contains("# as bought"),
        "what was written stays: {text}"
    );
}
