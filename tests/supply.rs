//! What the program is built of: licences, the oldest compiler, the release profile, no unsafe code.

use serde_json::Value;
use std::collections::BTreeSet;
use std::process::Command;

/// A file of the project.
fn file(name: &str) -> String {
    let path = std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join(name);
    std::fs::read_to_string(&path).unwrap_or_else(|e| panic!("{name}: {e}"))
}

/// Every package that is built here, as cargo tells of it.
fn packages() -> Vec<Value> {
    let rustc = Command::new("rustc").arg("-vV").output().expect("rustc");
    let text = String::from_utf8(rustc.stdout).expect("text");
    let host = text
        .lines()
        .find_map(|l| l.strip_prefix("host: "))
        .expect("a host");
    let told = Command::new(env!("CARGO"))
        .args(["metadata", "--format-version", "1", "--locked", "--offline"])
        .args(["--filter-platform", host])
        .current_dir(env!("CARGO_MANIFEST_DIR"))
        .output()
        .expect("cargo");
    assert!(
        told.status.success(),
        "{}",
        String::from_utf8_lossy(&told.stderr)
    );
    let all: Value = serde_json::from_slice(&told.stdout).expect("JSON");
    all["packages"].as_array().expect("packages").clone()
}

/// Licences that ask for no more than their text to be kept.
const FREE: [&str; 5] = ["MIT", "Apache-2.0", "Unlicense", "BSL-1.0", "Unicode-3.0"];

/// Each dependency may be had under a licence that asks for no more than its text to be kept, and its terms stand in
/// `DEVELOPERS.md`.
#[test]
fn every_licence_is_free_and_listed() {
    let page = file("DEVELOPERS.md");
    let mut unlisted = BTreeSet::new();
    let packages = packages();
    assert!(packages.len() > 50, "{} packages", packages.len());
    for package in &packages {
        let name = package["name"].as_str().expect("a name");
        let terms = package["license"]
            .as_str()
            .unwrap_or_else(|| panic!("{name} has no licence"));
        // all that are joined by AND are needed, one of those joined by OR
        for part in terms.split(" AND ") {
            let mut choices = part.split([' ', '/', '(', ')']);
            assert!(choices.any(|c| FREE.contains(&c)), "{name}: {terms}");
        }
        if !page.contains(&format!("`{terms}`")) {
            unlisted.insert(terms.to_owned());
        }
    }
    assert!(unlisted.is_empty(), "not in DEVELOPERS.md: {unlisted:?}");
}

/// No dependency asks for a newer compiler than `Cargo.toml` states, and one asks for that one.
#[test]
fn the_oldest_compiler_is_stated() {
    let version = |text: &str| -> Vec<u32> {
        let mut parts: Vec<u32> = text
            .split('.')
            .map(|n| n.parse().expect("a number"))
            .collect();
        parts.resize(3, 0);
        parts
    };
    let packages = packages();
    let own = packages
        .iter()
        .find(|p| p["name"] == "ampledger")
        .expect("itself");
    let stated = version(own["rust_version"].as_str().expect("a version"));
    let others = packages.iter().filter(|p| p["name"] != "ampledger");
    let newest = others
        .filter_map(|p| p["rust_version"].as_str())
        .map(version)
        .max();
    assert_eq!(newest, Some(stated));
}

/// Unsafe code is forbidden, counts may not wrap in a release, and its program carries no symbols.
#[test]
fn the_manifest_keeps_its_word() {
    let manifest = file("Cargo.toml");
    for line in [
        "unsafe_code = \"forbid\"",
        "overflow-checks = true",
        "strip = true",
    ] {
        assert!(manifest.contains(line), "{line}");
    }
    let lock = file("Cargo.lock");
    let foreign: Vec<_> = lock
        .lines()
        .filter(|l| l.starts_with("source = ") && !l.contains("registry+"))
        .collect();
    assert!(foreign.is_empty(), "{foreign:?}");
    assert!(lock.matches("checksum = ").count() > 50);
}
