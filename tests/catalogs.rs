//! The catalogs the program carries: each entry has its source, an id of its own, and figures within reason;
//! and what a user's folder of catalogs may and may not do.

use ampledger::catalog::{CatalogError, Catalogs, Certainty, Kind};
use std::collections::BTreeSet;
use std::fs;
use std::path::Path;

fn folder(files: &[(&str, &str)]) -> tempfile::TempDir {
    let dir = tempfile::tempdir().unwrap();
    for (name, text) in files {
        fs::write(dir.path().join(name), text).unwrap();
    }
    dir
}

#[test]
fn every_entry_has_source_and_certainty_and_a_title() {
    let mut count = 0;
    for kind in Kind::ALL {
        for entry in Catalogs::builtin().entries(kind) {
            assert!(entry.source.len() >= 8, "`{}` has no source", entry.id);
            assert_ne!(
                entry.certainty,
                Certainty::Unsaid,
                "`{}` says no certainty",
                entry.id
            );
            assert_ne!(entry.title, entry.id, "`{}` has no title", entry.id);
            if entry.body.contains("price:") {
                let says = entry.source.contains("price invented") || entry.source == "invented";
                assert!(
                    says,
                    "`{}` does not say that its price is invented",
                    entry.id
                );
            }
            count += 1;
        }
    }
    assert!(count > 100, "{count} entries");
}

#[test]
fn ids_are_used_once_and_spelled_plainly() {
    for kind in Kind::ALL {
        let mut seen = BTreeSet::new();
        for entry in Catalogs::builtin().entries(kind) {
            let plain = |c: char| c.is_ascii_lowercase() || c.is_ascii_digit() || c == '-';
            assert!(entry.id.chars().all(plain), "`{}`", entry.id);
            assert!(
                seen.insert(entry.id.clone()),
                "`{}` is used twice",
                entry.id
            );
        }
    }
}

/// The cheap scan that finds a built-in entry sees what the YAML parser sees.
#[test]
fn built_in_files_have_the_shape_that_the_scan_needs() {
    for file in fs::read_dir(Path::new(env!("CARGO_MANIFEST_DIR")).join("catalogs")).unwrap() {
        let path = file.unwrap().path();
        let text = fs::read_to_string(&path).unwrap();
        let whole: serde_yaml::Value = serde_yaml::from_str(&text).unwrap();
        let (key, list) = whole.as_mapping().unwrap().iter().next().unwrap();
        assert_eq!(whole.as_mapping().unwrap().len(), 1, "{}", path.display());
        let kind = Kind::ALL
            .into_iter()
            .find(|k| Some(k.key()) == key.as_str())
            .unwrap();
        for item in list.as_sequence().unwrap() {
            let id = item["id"].as_str().unwrap();
            let entry = Catalogs::builtin()
                .find(kind, id)
                .unwrap_or_else(|| panic!("`{id}` is not found"));
            assert_eq!(item["title"].as_str(), Some(entry.title.as_str()));
            assert_eq!(item["source"].as_str(), Some(entry.source.as_str()));
            let mut keys = item.as_mapping().unwrap().clone();
            for meta in ["id", "title", "source", "certainty"] {
                assert!(keys.remove(meta).is_some(), "`{id}` has no `{meta}`");
            }
            let body: serde_yaml::Mapping = serde_yaml::from_str(&entry.body).unwrap();
            assert_eq!(body, keys, "`{id}`");
        }
    }
}

#[test]
fn an_unknown_id_gets_the_nearest() {
    let catalogs = Catalogs::builtin();
    let near = |kind, id: &str| catalogs.nearest(kind, id);
    assert_eq!(
        near(Kind::Charging, "winding-16A").as_deref(),
        Some("winding-16a")
    );
    assert_eq!(
        near(Kind::Battery, "batery-agm-30ah").as_deref(),
        Some("battery-agm-30ah")
    );
    assert_eq!(near(Kind::Kit, "zzz"), None);
}

#[test]
fn search_finds_by_every_word() {
    let found = Catalogs::builtin().search("LED work 27");
    assert_eq!(
        found.iter().map(|e| e.id.as_str()).collect::<Vec<_>>(),
        ["work-light-led-27w", "work-light-led-27w-ac"]
    );
}

#[test]
fn a_users_folder_comes_first() {
    let dir = folder(&[(
        "ours.yaml",
        "accessories:\n  - {id: work-light-led-27w, title: Ours, draw: 26 W}\n  - {id: cool-box, draw: 4 A, source: our own measurement, certainty: common practice}\n",
    )]);
    let catalogs = Catalogs::with_folder(dir.path()).unwrap();
    let find = |id| catalogs.find(Kind::Accessory, id).unwrap();
    assert_eq!(find("work-light-led-27w").title, "Ours");
    assert_eq!(find("cool-box").source, "our own measurement");
    assert_eq!(find("seat-heater").title, "Seat heater");
    let all = catalogs.entries(Kind::Accessory);
    assert_eq!(
        all.iter().filter(|e| e.id == "work-light-led-27w").count(),
        1
    );
}

#[test]
fn a_folder_that_is_no_set_of_catalogs_is_refused() {
    let refused = |files: &[(&str, &str)]| Catalogs::with_folder(folder(files).path()).unwrap_err();
    let same = "accessories: [{id: a, draw: 1 A}, {id: a, draw: 2 A}]\n";
    assert!(
        matches!(refused(&[("a.yaml", same)]), CatalogError::Duplicate { id, .. } if id == "a")
    );
    let one = "accessories: [{id: a, draw: 1 A}]\n";
    let twice = refused(&[("a.yaml", one), ("b.yml", one)]);
    assert!(matches!(&twice, CatalogError::Duplicate { first, second, .. } if first != second));
    assert!(
        matches!(refused(&[("a.yaml", "lamps: []\n")]), CatalogError::UnknownKind { key, .. } if key == "lamps")
    );
    assert!(matches!(
        refused(&[("a.yaml", "kits: [{title: x}]\n")]),
        CatalogError::NoId { index: 0, .. }
    ));
    assert!(matches!(
        refused(&[("a.yaml", "- x\n")]),
        CatalogError::NotACatalog { .. }
    ));
    assert!(matches!(
        refused(&[("a.yaml", "kits: [x\n")]),
        CatalogError::NotACatalog { .. }
    ));
    let big = format!("# {}\n", "x".repeat(1 << 20));
    assert!(matches!(
        refused(&[("a.yaml", &big)]),
        CatalogError::TooLarge { .. }
    ));
    let absent = Catalogs::with_folder(Path::new("no such folder")).unwrap_err();
    assert!(matches!(absent, CatalogError::Unreadable { .. }));
}

#[cfg(unix)]
#[test]
fn a_link_out_of_the_folder_is_refused() {
    let elsewhere = folder(&[("a.yaml", "kits: []\n")]);
    let dir = folder(&[]);
    std::os::unix::fs::symlink(elsewhere.path().join("a.yaml"), dir.path().join("b.yaml")).unwrap();
    let error = Catalogs::with_folder(dir.path()).unwrap_err();
    assert!(
        matches!(error, CatalogError::LeavesFolder { .. }),
        "{error}"
    );
    let inside = folder(&[("a.yaml", "kits: []\n")]);
    std::os::unix::fs::symlink(inside.path().join("a.yaml"), inside.path().join("c.yml")).unwrap();
    assert!(Catalogs::with_folder(inside.path()).is_ok());
}
