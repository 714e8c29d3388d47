//! One input tried: what must hold of any, whoever wrote it. Used by the fuzzing targets, and by the test that holds
//! what they once found.

use super::numbers;
use ampledger::catalog::{Catalogs, Kind};
use ampledger::check::{Wanted, check};
use ampledger::description::{AccessoryText, BatteryText, ChargingText, StarterText, read};
use ampledger::fleet::read_sheet;
use ampledger::identify::{identify, read_csv};
use ampledger::problem::Refusal;
use ampledger::resolve::resolve;
use std::path::Path;
use std::sync::LazyLock;

/// Read once; a clone shares what was read.
static CATALOGS: LazyLock<Catalogs> = LazyLock::new(Catalogs::builtin);

/// Something is said, in plain text, and every place lies in the file.
fn told(refusal: &Refusal) {
    assert!(!refusal.problems().is_empty());
    let text = refusal.render(false);
    assert!(
        text.starts_with("error: ") && !text.contains('\u{1b}'),
        "{text}"
    );
    let lines = refusal.source().text.split('\n').count().max(1);
    for problem in refusal.problems().iter() {
        if let Some((line, column)) = refusal.source().place(problem) {
            assert!(
                (1..=lines).contains(&line) && column >= 1,
                "{line}:{column} of {lines} lines"
            );
        }
    }
}

/// Any bytes as a build file: accepted, or refused in a message that points into the text.
pub fn build_file(bytes: &[u8]) {
    match read("fuzz.yaml", bytes) {
        Err(refusal) => told(&refusal),
        Ok((description, source)) => {
            if let Err(problems) = resolve(&description, &CATALOGS) {
                told(&Refusal::new(source, problems));
            }
        }
    }
}

/// Any bytes as a build file through the whole chain: an answer in numbers, or a refusal.
pub fn chain(bytes: &[u8]) {
    let Ok((description, _)) = read("fuzz.yaml", bytes) else {
        return;
    };
    let Ok(build) = resolve(&description, &CATALOGS) else {
        return;
    };
    if let Ok(checked) = check(&build, Wanted::default()) {
        let answer = serde_yaml::to_string(&checked.check).expect("an answer can be written");
        let text = String::from_utf8_lossy(bytes);
        assert_eq!(numbers::none_in(&answer), None, "{text}\n{answer}");
    }
}

/// Any bytes as a file of a catalog, and every entry of it taken as a part.
pub fn catalog(bytes: &[u8]) {
    let catalogs = match Catalogs::with_file("fuzz.yaml", bytes) {
        Ok(catalogs) => catalogs,
        Err(refusal) => return told(&refusal),
    };
    for entry in catalogs.own() {
        match entry.in_full() {
            Ok(listed) => assert_eq!(listed.id, entry.id),
            Err(refusal) => assert!(refusal.render(false).starts_with("error: ")),
        }
        let found = match entry.kind {
            Kind::Charging => catalogs.part::<ChargingText>(&entry.id).is_some(),
            Kind::Battery => catalogs.part::<BatteryText>(&entry.id).is_some(),
            Kind::Starter => catalogs.part::<StarterText>(&entry.id).is_some(),
            Kind::Accessory => catalogs.part::<AccessoryText>(&entry.id).is_some(),
            Kind::Kit => true,
        };
        assert!(found, "{}", entry.id);
    }
}

/// Any text as a bench table; a table that reads is solved.
pub fn readings(bytes: &[u8]) {
    let Ok(text) = std::str::from_utf8(bytes) else {
        return;
    };
    let Ok(readings) = read_csv("fuzz.csv", text) else {
        return;
    };
    if let Ok(found) = identify(&readings) {
        let text = serde_yaml::to_string(&found).expect("an answer can be written");
        assert_eq!(numbers::none_in(&text), None, "{text}");
    }
}

/// Any bytes as a fleet in CSV: a plan with a row for each record, its faults in it, or a refusal.
pub fn fleet_csv(bytes: &[u8]) {
    // patterns look into folders, which is no part of reading
    if bytes.iter().any(|b| matches!(b, b'*' | b'?' | b'[' | b'/')) {
        return;
    }
    match read_sheet("fuzz.csv", bytes, Path::new("fuzz.csv")) {
        Ok(plan) => {
            for entry in &plan.entries {
                let whole = entry.fault.is_none() && !entry.build.is_empty() && entry.count > 0;
                assert!(entry.fault.is_some() || whole, "{entry:?}");
            }
        }
        Err(refusal) => told(&refusal),
    }
}
