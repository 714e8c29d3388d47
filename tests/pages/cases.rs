//! The pages that a user gets, by the program itself from the examples.
#![allow(dead_code)] // each test file uses its own part

use std::collections::BTreeMap;
use std::process::Command;
use std::sync::{Mutex, PoisonError};

const DEALER: &str = "examples/dealer-mower-quote.yaml";
const SHUNT: &str = "examples/shunt-regulated.yaml";
const VERGE: &str = "examples/fleet-verge-mower.yaml";
const LAMPS: &str = "examples/lighting-winding.yaml";

/// A call, and on how many sheets of paper its page may stand.
pub struct Case {
    /// What it shows.
    pub name: &'static str,
    /// Arguments without the format.
    pub call: &'static [&'static str],
    /// Sheets at most.
    pub sheets: usize,
}

const fn case(name: &'static str, sheets: usize, call: &'static [&'static str]) -> Case {
    Case { name, call, sheets }
}

/// Every kind of page: keeping up, not, without a battery, before and after, a fleet.
pub const CASES: [Case; 17] = [
    case("check short", 2, &["check", DEALER]),
    case("check keeps up", 2, &["check", SHUNT]),
    case("check no battery", 1, &["check", LAMPS]),
    case(
        "check before and after",
        2,
        &["check", VERGE, "--with", "night-work"],
    ),
    case("check season", 1, &["check", DEALER, "--season"]),
    case("size short", 2, &["size", DEALER]),
    case("size keeps up", 2, &["size", SHUNT]),
    case("remedy short", 1, &["remedy", DEALER]),
    case("remedy keeps up", 1, &["remedy", SHUNT]),
    case("fleet", 1, &["fleet", "examples/fleets/quillhaven.yaml"]),
    case("wire", 2, &["wire", DEALER]),
    case("wire nothing", 1, &["wire", "examples/three-phase.yaml"]),
    case(
        "sheet short",
        3,
        &["sheet", DEALER, "--for", "Hill Farm", "--date", "4 March"],
    ),
    case("sheet keeps up", 2, &["sheet", SHUNT]),
    case(
        "sheet no battery",
        2,
        &["sheet", "examples/clutch-without-battery.yaml"],
    ),
    case(
        "sheet before and after",
        3,
        &["sheet", VERGE, "--with", "night-work"],
    ),
    case(
        "sheet beyond charging",
        3,
        &["sheet", "examples/belt-alternator-loader.yaml"],
    ),
];

/// What the program writes in a format; the same call runs once.
pub fn written(call: &[&str], format: &str) -> String {
    static DONE: Mutex<BTreeMap<String, String>> = Mutex::new(BTreeMap::new());
    let key = format!("{call:?} {format}");
    let done = || DONE.lock().unwrap_or_else(PoisonError::into_inner);
    if let Some(text) = done().get(&key) {
        return text.clone();
    }
    let text = run(call, format);
    done().insert(key, text.clone());
    text
}

fn run(call: &[&str], format: &str) -> String {
    let output = Command::new(env!("CARGO_BIN_EXE_ampledger"))
        .args(call)
        .args(["--format", format])
        .current_dir(env!("CARGO_MANIFEST_DIR"))
        .output()
        .expect("it runs");
    let code = output.status.code();
    assert!(
        code == Some(0) || code == Some(1),
        "{call:?}: {code:?} {}",
        String::from_utf8_lossy(&output.stderr)
    );
    String::from_utf8(output.stdout).expect("UTF-8")
}
