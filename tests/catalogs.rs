//! The catalogs the program carries: each entry has its source, an id of its own, and figures within reason;
//! and what a user's folder of catalogs may and may not do.

use ampledger::build::{Build, Draw};
use ampledger::catalog::{CatalogError, Catalogs, Certainty, Entry, Kind};
use ampledger::description::AccessoryText;
use ampledger::resolve::{KitError, find_kit, resolve, with_kit};
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
        if path.extension().is_none_or(|x| x != "yaml") {
            continue;
        }
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

/// A plain machine with one entry of a catalog in it; the reader's bounds hold every figure within reason.
fn with(entry: &Entry) -> Result<Build, String> {
    let (mut charging, mut battery) = (
        "[{part: winding-16a}]".to_owned(),
        "{part: battery-agm-30ah}".to_owned(),
    );
    let (mut starter, mut accessories) = ("{part: starter-single}".to_owned(), "[]".to_owned());
    let this = format!("{{part: {}}}", entry.id);
    let mut kit = None;
    match entry.kind {
        Kind::Charging => charging = format!("[{{part: winding-16a}}, {this}]"),
        Kind::Battery => {
            battery = this; // of any voltage, so without the 12 V winding
            charging = "[]".to_owned();
        }
        Kind::Starter => starter = this,
        Kind::Accessory => accessories = format!("[{this}]"),
        Kind::Kit => {
            kit = Some(find_kit(&Catalogs::builtin(), &entry.id).map_err(|e| e.to_string())?)
        }
    }
    let text = format!(
        "build: plain\nengine: {{speeds: {{governed: 3400 rpm}}, starter: {starter}}}\ncharging: {charging}\nbattery: {battery}\naccessories: {accessories}\nshift: [crank, {{governed: 1 h}}]\n"
    );
    let (description, _) =
        ampledger::description::read("plain", text.as_bytes()).map_err(|e| e.to_string())?;
    let description = match &kit {
        Some(kit) => with_kit(&description, kit),
        None => description,
    };
    resolve(&description, &Catalogs::builtin()).map_err(|e| format!("{e:?}"))
}

#[test]
fn every_entry_is_a_part_that_a_build_can_have() {
    for kind in Kind::ALL {
        for entry in Catalogs::builtin().entries(kind) {
            let build = with(&entry).unwrap_or_else(|e| panic!("`{}`: {e}", entry.id));
            // What a figure of a lamp, a coil or a winding rests on is in its entry, not assumed.
            for what in [
                "volts at which the draw",
                "open-circuit volts",
                "winding resistance",
                "cold cranking",
            ] {
                let assumed = build.assumed.iter().find(|a| a.what.starts_with(what));
                assert!(assumed.is_none(), "`{}`: {assumed:?}", entry.id);
            }
            assert_eq!(build.notes, [""; 0], "`{}`", entry.id);
        }
    }
}

/// UN Regulation 37 prints the greatest objective watts no more than 26 % above a lamp's rated watts at these test
/// volts (H1 68 for 55, P21W 26.5 for 21; 24 V lamps up to 54 %), and its lumens: a slip of a digit would show.
#[test]
fn lamps_lie_by_their_rated_watts() {
    let mut seen = 0;
    for entry in Catalogs::builtin().entries(Kind::Accessory) {
        if !entry.id.starts_with("lamp-") {
            continue;
        }
        let title = entry.title.strip_suffix(" (amber)").unwrap_or(&entry.title);
        let rated = title
            .split(", ")
            .find_map(|t| t.strip_suffix(" W"))
            .and_then(|w| w.parse::<f64>().ok());
        let rated = rated.unwrap_or_else(|| panic!("`{}` names no watts", entry.id));
        let build = with(&entry).unwrap();
        let lamp = &build.accessories[0];
        let Draw::Filament { power, at } = lamp.draw.value else {
            panic!("`{}`", entry.id)
        };
        let most = if at.0 > 20.0 { 2.25 } else { 1.42 };
        assert!(
            (1.0..most).contains(&(power.0 / rated)),
            "`{}`: {power:?} for {rated}",
            entry.id
        );
        let efficacy = lamp.lumens.unwrap().0 / power.0;
        assert!(
            (3.0..30.0).contains(&efficacy),
            "`{}`: {efficacy} lm/W",
            entry.id
        );
        seen += 1;
    }
    assert!(seen > 45, "{seen}");
}

/// Minutes at 25 A follow from the capacity by the usual exponent of the type: printed within 3 %.
#[test]
fn invented_labels_hold_together() {
    for entry in Catalogs::builtin().entries(Kind::Battery) {
        let build = with(&entry).unwrap();
        let label = build.battery.unwrap().label;
        let minutes = label.reserve_capacity.unwrap();
        let back = label
            .chemistry
            .capacity_from_reserve(minutes, label.reserve_amps);
        assert!(
            (back / label.capacity - 1.0).abs() < 0.03,
            "`{}`: {back:?}",
            entry.id
        );
        let ratio = label.cold_cranking.unwrap().0 / label.capacity.0;
        assert!((5.0..13.0).contains(&ratio), "`{}`: {ratio}", entry.id);
    }
}

#[test]
fn a_kit_adds_its_accessories_and_its_names_stay_apart() {
    let catalogs = Catalogs::builtin();
    let text = "build: plain\nengine: {speeds: {governed: 3400 rpm}}\ncharging: []\nbattery: {capacity: 30 Ah}\naccessories: [{name: Turn lamps, draw: 21 W, duty: 5 %}]\nshift: [{governed: 1 h}]\n";
    let (description, _) = ampledger::description::read("plain", text.as_bytes()).unwrap();
    let kit = find_kit(&catalogs, "road-legal").unwrap();
    assert_eq!((kit.accessories.len(), kit.price.unwrap().0), (3, 180.0));
    let build = resolve(&with_kit(&description, &kit), &catalogs).unwrap();
    let names: Vec<_> = build
        .accessories
        .iter()
        .map(|a| (a.path.as_str(), a.name.as_str()))
        .collect();
    assert_eq!(names[0], ("accessories[0]", "Turn lamps"));
    assert_eq!(names[3], ("accessories[3]", "Turn lamps (2)"));
    assert_eq!(build.accessories[3].count, 2);
    let unknown = find_kit(&catalogs, "road-leagl").unwrap_err();
    assert!(
        matches!(&unknown, KitError::Unknown { nearest: Some(id), .. } if id == "road-legal"),
        "{unknown}"
    );
}

#[test]
fn a_kit_may_be_a_file() {
    let dir = folder(&[
        (
            "cool.yaml",
            "accessories:\n  - {name: Cool box, draw: 4 A, duty: 40 %, apart: [Kettle]}\n  - {name: Kettle, draw: 10 A, duty: 5 %}\nprice: 90\n",
        ),
        (
            "bad.yaml",
            "accessories:\n  - {name: Cool box, draw: 4 V}\n",
        ),
    ]);
    let catalogs = Catalogs::builtin();
    let kit = find_kit(&catalogs, dir.path().join("cool.yaml").to_str().unwrap()).unwrap();
    assert_eq!((kit.title.as_str(), kit.price.unwrap().0), ("cool", 90.0));
    let text = "build: plain\nengine: {speeds: {governed: 3400 rpm}}\ncharging: []\nbattery: {capacity: 30 Ah}\naccessories: [{name: Kettle, draw: 8 A, duty: 5 %}]\nshift: [{governed: 1 h}]\n";
    let (description, _) = ampledger::description::read("plain", text.as_bytes()).unwrap();
    let build = resolve(&with_kit(&description, &kit), &catalogs).unwrap();
    let kettle = &build.accessories[2];
    assert_eq!(
        (kettle.name.as_str(), kettle.apart.as_slice()),
        ("Kettle (2)", [1].as_slice())
    );
    let bad = find_kit(&catalogs, dir.path().join("bad.yaml").to_str().unwrap()).unwrap_err();
    assert!(
        matches!(&bad, KitError::Refused(_)) && bad.to_string().contains("bad.yaml"),
        "{bad}"
    );
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
    let one = "accessories: [{id: a, draw: 1 A}]\n";
    let twice = refused(&[("a.yaml", one), ("b.yml", one)]);
    assert!(matches!(&twice, CatalogError::Duplicate { first, second, .. } if first != second));
    // what is wrong with one file is told at its place, all at once
    let says = |text: &str, told: &[(usize, usize, &str)]| {
        let error = refused(&[("a.yaml", text)]);
        let CatalogError::Refused(refusal) = &error else {
            panic!("{error}")
        };
        let found: Vec<_> = refusal.problems().iter().collect();
        assert_eq!(found.len(), told.len(), "{refusal}");
        for (problem, (line, column, kind)) in found.iter().zip(told) {
            assert_eq!(
                refusal.source().place(problem),
                Some((*line, *column)),
                "{refusal}"
            );
            assert!(problem.kind.to_string().starts_with(kind), "{refusal}");
        }
    };
    says(
        "accessories: [{id: a, draw: 1 A}, {id: a, draw: 2 A}]\n",
        &[(1, 40, "the name `a` is given twice")],
    );
    says(
        "lamps: []\nkits:\n  - {title: x}\n  - x\nbatteries: 3\n",
        &[
            (1, 1, "unknown key `lamps`"),
            (3, 5, "missing key `id`"),
            (4, 5, "a single value where a mapping of keys is needed"),
            (5, 12, "a single value where a list of parts is needed"),
        ],
    );
    says(
        "- x\n",
        &[(
            1,
            1,
            "a list where a list of parts under the name of their kind is needed",
        )],
    );
    says("kits: [x\n", &[(1, 7, "not valid YAML")]);
    says("kits:\n\t- x\n", &[(2, 1, "tab used for indentation")]);
    says("a: &a [x]\nb: [*a, *c]\n", &[(2, 9, "")]);
    let big = format!("# {}\n", "x".repeat(1 << 20));
    let CatalogError::Refused(refusal) = refused(&[("a.yaml", &big)]) else {
        panic!("too large")
    };
    assert!(refusal.to_string().contains("1 MiB"), "{refusal}");
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

#[test]
fn a_part_is_read_once() {
    let catalogs = Catalogs::builtin();
    let heater = || {
        catalogs
            .part::<AccessoryText>("seat-heater")
            .unwrap()
            .unwrap()
    };
    let (first, again) = (heater(), heater());
    assert!(std::sync::Arc::ptr_eq(&first, &again));
    assert_eq!(first.entry.title, "Seat heater");
    assert!(
        catalogs.part::<AccessoryText>("winding-16a").is_none(),
        "of another kind"
    );
}
