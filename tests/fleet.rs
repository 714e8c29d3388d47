//! Fleets: rows in the order of the file, each what the build alone would come to; no bad row hides another.

use ampledger::catalog::Catalogs;
use ampledger::check::{Judged, judge};
use ampledger::description::{Assignment, read_file, read_fleet};
use ampledger::fleet::{Fleet, Plan, Row, judge_all, read_sheet};
use ampledger::resolve::{find_kit, resolve, with_kit};
use std::convert::Infallible;
use std::path::{Path, PathBuf};

/// An invented cart that keeps up as it is.
const CART: &str = "\
build: cart # invented
air: 15 °C
engine: {speeds: {idle: 1800 rpm, governed: 3400 rpm}, starter: {draw: 140 A, time: 2.5 s}}
charging:
  - {winding: {open_circuit: 28 V at 3600 rpm, resistance: 0.15 ohm, inductance: 0.35 mH, poles: 18}, rectifier: full-wave, regulator: {holds: 14.4 V}}
battery: {capacity: 30 Ah, cold_cranking: 300 A, type: flooded}
accessories: [{name: lamps, draw: 60 W}]
shift: [crank, {idle: 30 min}, {governed: 150 min}, {stopped: 18 min}, {governed: 60 min}]
parked: 14 h
";

const KIT: &str = "accessories: [{name: heater, draw: 160 W, price: 40}, {part: beacon-led, count: 2, duty: 100 %}]\n";

/// A folder with `cart.yaml`, `lamps.yaml` (more load), `bad.yaml` (line 9 misspelt), `heat.yaml` (a kit).
fn folder() -> tempfile::TempDir {
    let folder = tempfile::tempdir().expect("a folder");
    let write =
        |name: &str, text: &str| std::fs::write(folder.path().join(name), text).expect("a file");
    write("cart.yaml", CART);
    write("lamps.yaml", &CART.replace("60 W", "250 W"));
    write("bad.yaml", &CART.replace("parked:", "perked:"));
    write("heat.yaml", KIT);
    folder
}

fn judged(plan: &Plan) -> Fleet {
    let mut rows = Vec::new();
    let totals = judge_all(plan, &Catalogs::builtin(), None, &|_| (), &mut |row| {
        rows.push(row);
        Ok::<(), Infallible>(())
    });
    let Ok(totals) = totals;
    Fleet {
        format: 1,
        fleet: plan.name.clone(),
        currency: String::new(),
        rows,
        totals,
        notes: Vec::new(),
    }
}

fn yaml(folder: &Path, text: &str) -> Fleet {
    let (read, _) = read_fleet("fleet.yaml", text.as_bytes()).unwrap_or_else(|e| panic!("{e}"));
    judged(&Plan::of_text(&read, &folder.join("fleet.yaml")))
}

fn sheet(folder: &Path, bytes: &[u8]) -> Fleet {
    let plan = read_sheet("fleet.csv", bytes, &folder.join("fleet.csv"));
    judged(&plan.unwrap_or_else(|e| panic!("{e}")))
}

/// What one build comes to by itself.
fn alone(file: PathBuf, kit: Option<&str>, set: &[&str]) -> Judged {
    let catalogs = Catalogs::builtin();
    let set: Vec<Assignment> = set
        .iter()
        .map(|s| Assignment::parse(s).expect("one"))
        .collect();
    let (mut description, _) = read_file(&file, &set).unwrap_or_else(|e| panic!("{e}"));
    if let Some(kit) = kit {
        description = with_kit(&description, &find_kit(&catalogs, kit).expect("a kit"));
    }
    judge(&resolve(&description, &catalogs).expect("a build")).expect("a verdict")
}

fn named(row: &Row) -> (&str, &str, Option<&str>, u32) {
    (&row.machine, &row.build, row.kit.as_deref(), row.count)
}

#[test]
fn machines_by_kits_in_the_order_of_the_file() {
    let folder = folder();
    let at = folder.path();
    let text = "\
fleet: two kits
kits: [none, heat.yaml, night-work]
machines:
  - {machine: A, build: cart.yaml, count: 4}
  - {build: lamps.yaml, kit: none}
  - {machine: C, build: cart.yaml, count: 2, set: [\"accessories[0].draw=90 W\", 'parked=2 h']}
";
    let answer = yaml(at, text);
    let rows: Vec<_> = answer.rows.iter().map(named).collect();
    let expected = [
        ("A", "cart.yaml", None, 4),
        ("A", "cart.yaml", Some("heat.yaml"), 4),
        ("A", "cart.yaml", Some("night-work"), 4),
        ("lamps", "lamps.yaml", None, 1), // its own word on kits stands
        ("C", "cart.yaml", None, 2),
        ("C", "cart.yaml", Some("heat.yaml"), 2),
        ("C", "cart.yaml", Some("night-work"), 2),
    ];
    assert_eq!(rows, expected);
    for row in &answer.rows {
        let kit = row.kit.as_deref().map(|kit| match kit {
            "heat.yaml" => at.join(kit).display().to_string(),
            id => id.to_owned(),
        });
        let set: &[&str] = if &*row.machine == "C" {
            &["accessories[0].draw=90 W", "parked=2 h"]
        } else {
            &[]
        };
        let alone = alone(at.join(&*row.build), kit.as_deref(), set);
        assert_eq!(row.outcome.verdict, Some(alone.verdict()), "{row:?}");
        assert_eq!(row.outcome.lacks_ah, alone.lacks(), "{row:?}");
        assert!(row.outcome.error.is_none());
    }
    let totals = &answer.totals;
    assert_eq!(
        totals.keeps_up + totals.carries + totals.falls_short,
        3 * 4 + 1 + 3 * 2
    );
    assert!(totals.keeps_up >= 6, "{totals:?}");
    kits_are_priced_and_listed(&answer);
}

/// Six machines take each kit: its parts are counted, its own price or that of its parts summed.
fn kits_are_priced_and_listed(answer: &Fleet) {
    let group = |kit: &str| {
        let mut groups = answer.totals.groups.iter();
        groups
            .find(|g| g.kit.as_deref() == Some(kit))
            .expect("the kit")
    };
    let heat = group("heat.yaml");
    assert_eq!(heat.machines, 6);
    let parts: Vec<_> = heat
        .parts
        .iter()
        .map(|p| (p.name.as_str(), p.count))
        .collect();
    assert_eq!(parts[0], ("heater", 6));
    assert_eq!(
        (heat.parts[1].part.as_deref(), parts[1].1),
        (Some("beacon-led"), 12)
    );
    // A heater at 40 and two beacons at their catalog's price, six times.
    let catalogs = Catalogs::builtin();
    let beacon = catalogs.part::<ampledger::description::AccessoryText>("beacon-led");
    let beacon = beacon
        .and_then(Result::ok)
        .and_then(|read| read.text.price.clone());
    let expected = beacon.map(|price| (40.0 + 2.0 * price.value.0) * 6.0);
    assert_eq!(heat.kits_cost.map(|m| m.0), expected);
    let own_price = group("night-work").kits_cost.map(|m| m.0);
    assert_eq!(own_price, Some(260.0 * 6.0));
}

#[test]
fn seasons_are_crossed_with_kits() {
    let folder = folder();
    let text = "\
seasons: {winter: -12 °C, summer: 30 °C}
machines:
  - {machine: A, build: cart.yaml}
  - {machine: B, build: cart.yaml, air: 3 °C}
";
    let answer = yaml(folder.path(), text);
    let rows: Vec<_> = answer
        .rows
        .iter()
        .map(|r| (&*r.machine, r.season.as_deref(), r.air_c.map(|c| c.0)))
        .collect();
    let expected = [
        ("A", Some("winter"), Some(-12.0)),
        ("A", Some("summer"), Some(30.0)),
        ("B", None, Some(3.0)),
    ];
    assert_eq!(rows, expected);
    let winter = alone(folder.path().join("cart.yaml"), None, &["air=-12 °C"]);
    assert_eq!(answer.rows[0].outcome.lacks_ah, winter.lacks());
}

/// Marks before the text, line ends of two bytes, quotation marks, blanks, empty lines, overrides, a column left out.
#[test]
fn a_sheet_as_spreadsheets_write_it() {
    let folder = folder();
    let bytes = "\u{feff}Machine,build , count,kit,set\r\n\
                 \"mower, old\", cart.yaml ,3,night-work,\"engine.speeds.idle=2000 rpm; accessories[0].draw=20 W\"\r\n\
                 ,,,,\r\n\
                 ,lamps.yaml,,\r\n\
                 plain,cart.yaml\r\n";
    let answer = sheet(folder.path(), bytes.as_bytes());
    let rows: Vec<_> = answer.rows.iter().map(named).collect();
    let expected = [
        ("mower, old", "cart.yaml", Some("night-work"), 3),
        ("lamps", "lamps.yaml", None, 1),
        ("plain", "cart.yaml", None, 1),
    ];
    assert_eq!(rows, expected);
    let set = ["engine.speeds.idle=2000 rpm", "accessories[0].draw=20 W"];
    let first = alone(folder.path().join("cart.yaml"), Some("night-work"), &set);
    assert_eq!(answer.rows[0].outcome.lacks_ah, first.lacks());
    assert_eq!(answer.rows[0].outcome.verdict, Some(first.verdict()));
    assert!(
        answer.rows.iter().all(|r| r.outcome.error.is_none()),
        "{answer:?}"
    );
}

#[test]
fn what_is_wrong_with_one_row_hides_no_other() {
    let folder = folder();
    let csv = "\
machine,build,count,kit,set
good,cart.yaml,1,,
bad,bad.yaml,1,,
gone,gone.yaml,1,,
many,cart.yaml,-3,,
kit,cart.yaml,1,night-wrk,
set,cart.yaml,1,,parked=14
path,cart.yaml,1,,parked
comma,cart.yaml,1,,,,
nothing,,1,,
last,cart.yaml,1,,
";
    let answer = sheet(folder.path(), csv.as_bytes());
    let error = |machine: &str| {
        let row = answer
            .rows
            .iter()
            .find(|r| &*r.machine == machine)
            .expect("its row");
        row.outcome.error.clone().unwrap_or_default()
    };
    assert_eq!(answer.rows.len(), 10);
    assert_eq!(
        (error("good"), error("last")),
        (String::new(), String::new())
    );
    assert_eq!(
        answer.rows[0].outcome.verdict,
        answer.rows[9].outcome.verdict
    );
    let place = format!("{}:9:1: ", folder.path().join("bad.yaml").display());
    assert!(error("bad").starts_with(&place), "{}", error("bad"));
    let told = [
        ("bad", "unknown key `perked`"),
        ("gone", "no such file"),
        ("many", "fleet.csv:5: "),
        ("many", "`-3`"),
        ("kit", "did you mean `night-work`"),
        ("set", "cart.yaml:9:"),
        ("path", "fleet.csv:8: "),
        ("comma", "fleet.csv:9: "),
        ("comma", "quotation"),
        ("nothing", "no `build`"),
    ];
    for (machine, words) in told {
        assert!(error(machine).contains(words), "{}", error(machine));
    }
    assert_eq!(
        (
            answer.totals.rows,
            answer.totals.errors,
            answer.totals.keeps_up
        ),
        (10, 8, 2)
    );
}

#[test]
fn patterns_find_build_files_in_the_order_of_their_names() {
    let folder = folder();
    std::fs::create_dir(folder.path().join("yard [1]")).expect("a folder");
    for name in ["b.yaml", "a.yaml", "c.txt"] {
        std::fs::write(folder.path().join("yard [1]").join(name), CART).expect("a file");
    }
    let text = "\
machines:
  - {machine: mower, build: 'yard [[]1]/*.yaml', count: 2}
  - {build: 'yard [[]1]/a*.yaml'}
  - {build: 'yard [1]/b.yaml'}
  - {machine: none, build: 'elsewhere/*.yaml'}
";
    let answer = yaml(folder.path(), text);
    let rows: Vec<_> = answer
        .rows
        .iter()
        .map(|r| (&*r.machine, &*r.build))
        .collect();
    let expected = [
        ("mower, a", "yard [1]/a.yaml"),
        ("mower, b", "yard [1]/b.yaml"),
        ("a", "yard [1]/a.yaml"),
        ("b", "yard [1]/b.yaml"),
        ("none", "elsewhere/*.yaml"),
    ];
    assert_eq!(rows, expected);
    assert!(
        answer.rows[..4].iter().all(|r| r.outcome.error.is_none()),
        "{answer:?}"
    );
    assert!(
        answer.rows[4]
            .outcome
            .error
            .as_ref()
            .is_some_and(|e| e.contains("no file is found"))
    );
}

/// More builds than are judged at a time, some of them the same: rows in order, each its own answer, told once each.
#[test]
fn batches_keep_the_order() {
    let folder = folder();
    let mut csv = "machine,build,count,kit,set\n".to_owned();
    for k in 0..700 {
        let amps = 1.0 + 0.05 * f64::from(k % 290);
        csv += &format!(
            "m{k},cart.yaml,{},,accessories[0].draw={amps:.2} A\n",
            k + 1
        );
    }
    let plan = read_sheet("f.csv", csv.as_bytes(), &folder.path().join("f.csv")).expect("a plan");
    let told = std::sync::atomic::AtomicU64::new(0);
    let mut rows: Vec<Row> = Vec::new();
    let count = |n| {
        told.fetch_add(n, std::sync::atomic::Ordering::Relaxed);
    };
    let totals = judge_all(&plan, &Catalogs::builtin(), None, &count, &mut |row| {
        rows.push(row);
        Ok::<(), Infallible>(())
    });
    let Ok(totals) = totals;
    assert_eq!((totals.rows, told.into_inner()), (700, 700));
    for (k, row) in rows.iter().enumerate() {
        assert_eq!(
            (&*row.machine, row.count as usize),
            (format!("m{k}").as_str(), k + 1)
        );
        assert_eq!(row.outcome.lacks_ah, rows[k % 290].outcome.lacks_ah);
    }
    // More load never lacks less; the current is found to 2e-5 of itself.
    let lacks = |k: usize| rows[k].outcome.lacks_ah.map_or(f64::INFINITY, |l| l.0);
    assert!((1..290).all(|k| lacks(k) >= lacks(k - 1) * (1.0 - 5e-5)));
    assert!(lacks(0) == 0.0 && lacks(289) > 1.0);
}

#[test]
fn headers_that_are_not_understood() {
    for (text, problem) in [
        ("machine,biuld,count,kit\na,b,1,\n", "unknown key `biuld`"),
        ("machine,count\na,1\n", "missing key `build`"),
        ("machine,build,build\na,b,c\n", "build"),
        ("", "empty"),
        ("machine,build\n", "missing key `row`"),
        (
            "machine;build;count\na;b;1\n",
            "separate the columns with commas",
        ),
        ("machine,build\na\u{1b}[31m,m.yaml\n", "f.csv:2:2"),
        ("sep=;\nmachine;build\n", "separate the columns with commas"),
        ("build,machine\nm.yaml,\"a\nn.yaml,b\n", "f.csv:2:8"),
        (
            "machine,build\na,\"m.yaml\"x\n",
            "not valid CSV: text between a closing quotation mark and the comma",
        ),
    ] {
        let error = read_sheet("f.csv", text.as_bytes(), Path::new("f.csv")).expect_err(text);
        let told = error.render(false);
        assert!(told.contains(problem), "{told}");
    }
    let latin = read_sheet(
        "f.csv",
        b"machine,build\nM\xfcller,a.yaml\n",
        Path::new("f.csv"),
    );
    assert!(
        latin
            .expect_err("not UTF-8")
            .render(false)
            .contains("f.csv:2:2")
    );
    let none = read_fleet("fleet.yaml", b"machines: []\n").expect_err("no machine");
    assert!(none.render(false).contains("fleet.yaml:1:11"));
}

/// A machine with no battery and nothing that states its volts neither keeps up nor falls short; one row is told of.
#[test]
fn nothing_to_judge_is_no_verdict() {
    let folder = folder();
    let build = "build: lamp alone # invented
engine: {speeds: {governed: 3400 rpm}}
charging:
  - winding: {open_circuit: 28 V at 3600 rpm, resistance: 0.14 ohm, inductance: 0.4 mH, poles: 12, feeds: lighting}
    rectifier: none
accessories: [{name: lamp, draw: 20 W, law: resistance, circuit: lighting, duty: 100 %}]
shift: [{governed: 2 h}]
";
    std::fs::write(folder.path().join("lamp.yaml"), build).expect("a file");
    let alone = sheet(folder.path(), b"machine,build,count\nl,lamp.yaml,3\n");
    assert_eq!(
        (alone.rows[0].outcome.verdict, alone.totals.unjudged),
        (None, 3)
    );
    assert_eq!(alone.rows[0].outcome.error, None);
    let report = ampledger::view::fleet(&alone);
    let text = ampledger::report::text::render(&report, &ampledger::report::text::Style::default());
    let text = text.replace('\n', " ");
    let said = "Not judged: 3 machines have no battery and nothing that states its volts.";
    assert!(text.contains(said), "{text}");
    let both = sheet(folder.path(), b"machine,build\nl,lamp.yaml\nc,cart.yaml\n");
    assert_eq!((both.totals.keeps_up, both.totals.unjudged), (1, 1));
}
