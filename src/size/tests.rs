//! Knobs against reading the file again, nearest changes against the full verdict. The builds are
//! invented.

use super::knob::knobs;
use super::value::written;
use super::{keeps_up, nearest};
use crate::build::Build;
use crate::catalog::Catalogs;
use crate::check::answer::{Change, Verdict};
use crate::check::{Ruling, rule};
use crate::description::{Assignment, read_set};
use crate::ledger::Machine;
use crate::resolve::resolve;

/// A build file read with values set.
pub(super) fn build_of(text: &str, set: &[String]) -> Build {
    let set: Vec<Assignment> = set
        .iter()
        .map(|s| Assignment::parse(s).unwrap_or_else(|e| panic!("{s}: {e}")))
        .collect();
    let (description, _) =
        read_set("test", text.as_bytes(), &set).unwrap_or_else(|e| panic!("{set:?}: {e}"));
    resolve(&description, &Catalogs::builtin()).unwrap_or_else(|e| panic!("{set:?}: {e:?}"))
}

fn changes_of(build: &Build, ruling: &Ruling) -> Vec<Change> {
    nearest(build, &Machine::new(build).expect("a battery"), ruling)
}

/// An invented cart: lamps of some watts at work, a pump that cycles.
pub(super) fn cart(watts: f64) -> String {
    format!(
        "build: cart
air: 12 °C
engine: {{speeds: {{idle: 1700 rpm, governed: 3300 rpm}}, starter: {{draw: 130 A, time: 3 s}}}}
charging:
  - winding: {{rated: 15 A at 3600 rpm, open_circuit: 29 V at 3600 rpm, resistance: 0.16 ohm, poles: 16}}
    rectifier: full-wave
    regulator: {{holds: 14.3 V}}
battery: {{capacity: 32 Ah, cold_cranking: 290 A, type: flooded, reserve: 55 %}}
accessories:
  - {{name: work lamps, draw: {watts} W, law: filament, at: 13.2 V, duty: {{idle: 100 %, governed: 100 %, stopped: 50 %}}}}
  - {{name: pump, draw: 5 A, duty: {{governed: 20 %}}}}
  - {{name: fan, draw: 2.2 ohm, duty: 10 %}}
shift: [crank, {{idle: 25 min}}, {{governed: 140 min}}, {{stopped: 12 min}}, crank, {{governed: 70 min}}, {{idle: 10 min}}]
parked: 13 h
"
    )
}

#[test]
fn a_knob_is_what_set_makes_of_the_file() {
    let part = cart(150.0).replace(
        "capacity: 32 Ah, cold_cranking: 290 A, type: flooded",
        "part: battery-flooded-32ah",
    );
    let minutes = cart(150.0).replace("capacity: 32 Ah", "reserve_capacity: 40 min");
    let mut tried = 0;
    for text in [cart(150.0), part, minutes] {
        let build = build_of(&text, &[]);
        for knob in knobs(&build) {
            let Some(path) = knob.path(&build) else {
                continue;
            };
            let now = knob.now(&build).expect("it is there");
            let x = 0.8125 * now;
            let set = format!("{path}={}", written(x, knob.unit(&build)));
            let again = build_of(&text, std::slice::from_ref(&set));
            let (a, b) = (rule(&knob.apply(&build, x)), rule(&again));
            let (a, b) = (a.expect("an answer"), b.expect("an answer"));
            assert_eq!(a.verdict, b.verdict, "{set}");
            let close = |a: Option<f64>, b: Option<f64>| match (a, b) {
                (Some(a), Some(b)) => (a - b).abs() < 1e-6 * a.abs().max(1.0),
                (a, b) => a.is_none() && b.is_none(),
            };
            assert!(
                close(a.lacks.map(|l| l.0), b.lacks.map(|l| l.0)),
                "{set}: {a:?} {b:?}"
            );
            let settled = |r: &crate::check::Ruling| r.settles.map(|(c, _)| c.soc.0);
            assert!(close(settled(&a), settled(&b)), "{set}: {a:?} {b:?}");
            assert!((a.reserve.soc.0 - b.reserve.soc.0).abs() < 1e-9, "{set}");
            tried += 1;
        }
    }
    assert!(tried >= 45, "{tried}");
}

/// Every nearest change, set in the file, keeps up by the full verdict; and none of them is idle.
#[test]
fn nearest_changes_keep_up() {
    let mut listed = 0;
    for watts in [150.0, 165.0, 180.0, 230.0] {
        let text = cart(watts);
        let build = build_of(&text, &[]);
        let ruling = rule(&build).expect("an answer");
        let changes = changes_of(&build, &ruling);
        assert!(
            changes.len() >= 3 && changes.len() <= 6,
            "{watts} W: {changes:#?}"
        );
        for change in changes {
            let Some(set) = change.set else { continue };
            let again = rule(&build_of(&text, std::slice::from_ref(&set))).expect("an answer");
            assert_eq!(again.verdict, Verdict::KeepsUp, "{watts} W, {set}");
            listed += 1;
        }
    }
    assert!(listed >= 8, "{listed}");
}

/// The amounts are near the edge: seven tenths of the change do not do (amounts are rounded to three digits).
#[test]
fn nearest_changes_are_near() {
    let text = cart(152.0);
    let build = build_of(&text, &[]);
    let ruling = rule(&build).expect("an answer");
    assert_ne!(ruling.verdict, Verdict::KeepsUp);
    let mut tried = 0;
    for change in changes_of(&build, &ruling) {
        let Some(set) = change.set else { continue };
        let (path, value) = set.split_once('=').expect("an assignment");
        let knob = knobs(&build)
            .into_iter()
            .find(|k| k.path(&build).as_deref() == Some(path));
        let Some(knob) = knob else { continue };
        let to: f64 = value
            .split(' ')
            .next()
            .and_then(|n| n.parse().ok())
            .expect("a number");
        let now = knob.now(&build).expect("it is there");
        let less = now + 0.7 * (to - now);
        assert!(!keeps_up(&knob.apply(&build, less)), "{set}");
        tried += 1;
    }
    assert!(tried >= 3, "{tried}");
}

/// A battery that cannot be helped by charging: the battery or the time standing.
#[test]
fn beyond_charging_names_a_battery() {
    let text = cart(150.0)
        .replace("stopped: 12 min", "stopped: 160 min")
        .replace("stopped: 50 %", "stopped: 100 %");
    let build = build_of(&text, &[]);
    let ruling = rule(&build).expect("an answer");
    assert_eq!(ruling.lacks, None);
    let changes = changes_of(&build, &ruling);
    let all: Vec<&str> = changes.iter().map(|c| c.text.as_str()).collect();
    assert!(all.iter().any(|t| t.starts_with("Stopped for")), "{all:?}");
    for change in &changes {
        let Some(set) = &change.set else { continue };
        assert!(
            keeps_up(&build_of(&text, std::slice::from_ref(set))),
            "{set}"
        );
    }
}
