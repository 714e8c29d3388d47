//! A build of 5,000 accessories is answered, whatever they do, in a time that grows with their number only.

use ampledger::build::{Build, State};
use ampledger::catalog::Catalogs;
use ampledger::check::{Wanted, check};
use ampledger::description::read;
use ampledger::resolve::resolve;
use std::time::{Duration, Instant};

const MANY: usize = 5_000;
/// Far above what it takes unoptimised (a few seconds) on a machine that is busy, and far below what it took
/// when work grew with the square of the accessories (many minutes).
const LONG: Duration = Duration::from_secs(120);

/// An invented machine with an unregulated winding and the entries of as many accessories.
fn machine(entry: impl Fn(usize) -> String) -> Build {
    let entries: String = (0..MANY)
        .map(|k| format!("  - {{{}}}\n", entry(k)))
        .collect();
    let text = format!(
        "\
build: very many loads
air: 15 °C
engine: {{speeds: {{idle: 1800 rpm, governed: 3400 rpm}}, starter: {{draw: 150 A, time: 2.5 s}}}}
charging:
  - winding: {{rated: 16 A at 3600 rpm, open_circuit: 28 V at 3600 rpm, resistance: 0.14 ohm, poles: 12}}
    rectifier: full-wave
battery: {{capacity: 30 Ah, cold_cranking: 300 A, type: flooded}}
accessories:
{entries}shift: [crank, {{idle: 12 min}}, {{governed: 95 min}}]
parked: 15 h
"
    );
    let (description, _) = read("many", text.as_bytes()).expect("a build");
    resolve(&description, &Catalogs::builtin()).expect("complete")
}

/// Checks it in time, and holds the mean draw at governed speed against amperes.
fn draws(build: &Build, amps: f64) {
    let begun = Instant::now();
    let answer = check(build, Wanted::default()).expect("an answer").check;
    assert!(begun.elapsed() < LONG, "{:?}", begun.elapsed());
    assert_eq!(answer.accessories.len(), MANY);
    let row = answer.states.iter().find(|s| s.state == "governed");
    let drawn = row.expect("its row").loads_a.0;
    assert!((drawn - amps).abs() < 1e-6 * amps, "{drawn} for {amps}");
    let told = |f: &&ampledger::check::answer::Finding| {
        f.what == "overcharge" && f.text.contains("at governed")
    };
    let told = answer.findings.iter().find(told).expect("unregulated");
    assert!(told.text.contains("with all of them off"), "{}", told.text);
}

/// Sum of duty times current: the mean of a sum is the sum of the means, however they coincide.
fn mean(build: &Build, amps: impl Fn(usize) -> f64) -> f64 {
    let governed = build.speeds.iter().position(|s| s.name == "governed");
    let state = State::Running(governed.expect("its speed"));
    let shares = build.accessories.iter().map(|a| a.duty.share(state).0);
    shares.enumerate().map(|(k, share)| share * amps(k)).sum()
}

/// No two alike, each with a duty of its own.
#[test]
fn each_cycles_for_itself() {
    let amps = |k: usize| 0.001 + 1e-6 * k as f64;
    let build = machine(|k| {
        let duty = 1.0 + 0.01 * k as f64;
        format!(
            "name: load {k}, draw: {:.6} A, duty: {{governed: {duty:.2} %}}",
            amps(k)
        )
    });
    draws(&build, mean(&build, amps));
}

/// In groups of two that are on together, and of two that never are.
#[test]
fn in_groups() {
    let build = machine(|k| {
        let with = ["together", "apart"][k / 2 % 2];
        let group = if k % 2 == 1 {
            format!(", {with}: load {}", k - 1)
        } else {
            String::new()
        };
        format!(
            "name: load {k}, draw: 0.002 A, duty: {{governed: {} %}}{group}",
            5 + k % 40
        )
    });
    draws(&build, mean(&build, |_| 0.002));
}

/// All of them in one group.
#[test]
fn in_one_group() {
    let build = machine(|k| {
        let group = if k > 0 { ", together: load 0" } else { "" };
        format!(
            "name: load {k}, draw: 0.002 A, duty: {{governed: {:.2} %}}{group}",
            1.0 + 0.01 * k as f64
        )
    });
    draws(&build, mean(&build, |_| 0.002));
}
