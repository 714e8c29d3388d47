//! The pages of every command, as the program writes them: no error for an HTML parser, text that
//! stays text, and the same figures in JSON, CSV, Markdown and on the page.

#![allow(missing_docs)]

#[path = "pages/cases.rs"]
mod cases;
#[path = "pages/parsed.rs"]
mod parsed;
#[path = "support/records.rs"]
mod records;

use cases::{CASES, Case, written};
use parsed::{attribute, elements, errors, parse, rows, text};
use records::records;
use serde_json::Value;

/// Every page.
fn pages() -> impl Iterator<Item = (&'static Case, String)> {
    CASES.iter().map(|case| (case, written(case.call, "html")))
}

#[test]
fn a_parser_finds_no_error_in_any_page() {
    assert!(!errors("<!DOCTYPE html><title>t</title><p><b>x</p>").is_empty());
    for (case, page) in pages() {
        assert_eq!(errors(&page), Vec::<String>::new(), "{}", case.name);
    }
}

#[test]
fn a_page_speaks_to_those_who_do_not_see_it() {
    for (case, page) in pages() {
        let dom = parse(&page);
        let root = &dom.document;
        let title = elements(root, "h1");
        assert_eq!(title.len(), 1, "{}", case.name);
        for heading in elements(root, "th") {
            let scope = attribute(&heading, "scope");
            assert!(
                matches!(scope.as_deref(), Some("col" | "row")),
                "{}",
                case.name
            );
            assert!(
                !text(&heading).trim().is_empty(),
                "{}: an empty heading",
                case.name
            );
        }
        for chart in elements(root, "svg") {
            assert_eq!(attribute(&chart, "role").as_deref(), Some("img"));
            for part in ["title", "desc"] {
                let words = elements(&chart, part);
                assert!(
                    words.len() == 1 && text(&words[0]).len() > 3,
                    "{}",
                    case.name
                );
            }
        }
        assert!(elements(root, "script").is_empty() && elements(root, "link").is_empty());
    }
}

/// Every kind of figure of a command: where its rows are in the JSON, the keys that name a row, and
/// the keys of its figures; those of shares are in per cent on the page.
struct Figures {
    call: &'static [&'static str],
    rows: &'static [&'static str],
    named: &'static [&'static str],
    keys: &'static [&'static str],
    percent: &'static [&'static str],
}

const DEALER: &str = "examples/dealer-mower-quote.yaml";
const STATE: [&str; 8] = [
    "minutes",
    "available_a",
    "loads_a",
    "battery_a",
    "worst_battery_a",
    "bus_v",
    "ah",
    "rpm",
];

const fn figures(
    call: &'static [&'static str],
    rows: &'static [&'static str],
    named: &'static [&'static str],
    keys: &'static [&'static str],
    percent: &'static [&'static str],
) -> Figures {
    Figures {
        call,
        rows,
        named,
        keys,
        percent,
    }
}

const SAME: [Figures; 12] = [
    figures(&["check", DEALER], &["states"], &["state"], &STATE, &[]),
    figures(
        &["check", DEALER],
        &["accessories"],
        &["name"],
        &["ah"],
        &["share"],
    ),
    figures(
        &[
            "check",
            "examples/fleet-verge-mower.yaml",
            "--with",
            "night-work",
        ],
        &["after", "accessories"],
        &["name"],
        &["ah"],
        &["share"],
    ),
    figures(
        &["size", DEALER],
        &["answers"],
        &["what"],
        &["amount", "now"],
        &[],
    ),
    figures(
        &["size", DEALER],
        &["windings"],
        &["id"],
        &[
            "rated_a",
            "idle_open_v",
            "idle_a",
            "top_a",
            "heat_w",
            "carries_a",
        ],
        &[],
    ),
    figures(
        &["size", DEALER],
        &["guideline"],
        &["state"],
        &["load_a", "supply_a", "meets_rpm"],
        &["share"],
    ),
    figures(
        &["remedy", DEALER],
        &["answers"],
        &["changes"],
        &["cost"],
        &["settles_soc"],
    ),
    figures(
        &["wire", DEALER],
        &["wires"],
        &["name"],
        &["amps", "length_m", "ampacity_a", "fuse_a", "drop_v"],
        &["drop_fraction"],
    ),
    figures(
        &["fleet", "examples/fleets/quillhaven.yaml"],
        &["rows"],
        &["machine"],
        &["count"],
        &[],
    ),
    figures(
        &["sheet", DEALER],
        &["check", "states"],
        &["state"],
        &STATE,
        &[],
    ),
    figures(
        &["sheet", DEALER],
        &["remedy", "answers"],
        &["changes"],
        &["cost"],
        &["settles_soc"],
    ),
    figures(
        &["sheet", DEALER],
        &["quote"],
        &["name"],
        &["count", "each"],
        &[],
    ),
];

/// The words by which a row is known: a text, or the texts of a list.
fn words(value: &Value) -> String {
    match value {
        Value::Array(all) => all.iter().map(words).collect::<Vec<_>>().join("; "),
        other => other.as_str().unwrap_or_default().to_owned(),
    }
}

/// Whether numbers are the same but for the last bit of a conversion.
fn same(a: f64, b: f64) -> bool {
    (a - b).abs() <= 1e-12 * a.abs().max(b.abs())
}

#[test]
fn json_csv_and_page_hold_the_same_figures() {
    for figures in &SAME {
        let json: Value = serde_json::from_str(&written(figures.call, "json")).expect("JSON");
        let csv = records(&written(figures.call, "csv"));
        let page = rows(&written(figures.call, "html"));
        let list = figures.rows.iter().fold(&json, |value, key| &value[*key]);
        let list = list
            .as_array()
            .unwrap_or_else(|| panic!("{:?}", figures.rows));
        let mut compared = 0;
        for row in list {
            let named: Vec<String> = figures.named.iter().map(|key| words(&row[*key])).collect();
            let plain = figures.keys.iter().map(|key| (row[*key].as_f64(), 1.0));
            let shares = figures
                .percent
                .iter()
                .map(|key| (row[*key].as_f64(), 100.0));
            let wanted: Vec<f64> = plain
                .chain(shares)
                .filter_map(|(number, scale)| Some(number? * scale))
                // a speed of nothing is a word; what has no edge is in no table
                .filter(|number| *number != 0.0)
                .collect();
            if row.get("amount").is_some_and(Value::is_null) {
                continue;
            }
            let told = |cells: &[String]| {
                named
                    .iter()
                    .all(|name| cells.iter().any(|cell| cell.ends_with(name.as_str())))
            };
            let holds =
                |numbers: &[f64]| wanted.iter().all(|w| numbers.iter().any(|n| same(*w, *n)));
            let in_csv = csv.iter().filter(|record| told(record)).any(|record| {
                let numbers: Vec<f64> = record.iter().filter_map(|f| number(f)).collect();
                holds(&numbers)
            });
            let on_page = page
                .iter()
                .filter(|row| told(&row.cells))
                .any(|row| holds(&row.numbers));
            assert!(
                in_csv,
                "{:?} {named:?}: {wanted:?} not in CSV",
                figures.call
            );
            assert!(
                on_page,
                "{:?} {named:?}: {wanted:?} not on the page",
                figures.call
            );
            compared += wanted.len();
        }
        assert!(
            compared > 2,
            "{:?} {:?}: nothing compared",
            figures.call,
            figures.rows
        );
    }
}

/// A field's number: alone, or before its unit where a column holds several units.
fn number(field: &str) -> Option<f64> {
    field.parse().ok()
}

/// The fleet's own CSV has a row a machine; its page crosses machines with kits.
#[test]
fn a_fleet_lacks_the_same_in_json_csv_and_on_the_page() {
    let call = &["fleet", "examples/fleets/quillhaven.yaml"];
    let json: Value = serde_json::from_str(&written(call, "json")).expect("JSON");
    let csv = records(&written(call, "csv"));
    let page = rows(&written(call, "html"));
    let mut lacking = 0;
    for (row, record) in json["rows"].as_array().expect("rows").iter().zip(&csv[1..]) {
        assert_eq!(row["machine"].as_str(), Some(record[0].as_str()));
        let (lacks, written) = (row["lacks_ah"].as_f64(), number(&record[6]));
        assert!(
            lacks
                .zip(written)
                .map_or(lacks == written, |(a, b)| same(a, b))
        );
        let lacks = lacks.filter(|l| *l > 0.0);
        if let Some(lacks) = lacks {
            let shown = page
                .iter()
                .any(|r| r.cells[0] == record[0] && r.numbers.iter().any(|n| same(*n, lacks)));
            assert!(shown, "{record:?}");
            lacking += 1;
        }
    }
    assert!(lacking > 2);
    for group in json["totals"]["groups"].as_array().expect("groups") {
        for key in ["machines", "keeps_up", "carries", "falls_short", "cost"] {
            let wanted = group[key].as_f64().expect(key);
            let kit = group["kit"].as_str().unwrap_or("as it is");
            let shown = page
                .iter()
                .any(|r| r.cells[0] == kit && r.numbers.contains(&wanted));
            assert!(shown, "{kit} {key}");
        }
    }
}

/// What Markdown shows in a row is what the page shows in it.
#[test]
fn markdown_says_what_the_page_says() {
    for (case, page) in pages() {
        let markdown = written(case.call, "markdown").replace('\\', "");
        let lines: Vec<&str> = markdown.lines().filter(|l| l.starts_with("| ")).collect();
        let page = rows(&page);
        let known = |cells: &[String]| {
            lines.iter().any(|line| {
                cells
                    .iter()
                    .all(|cell| line.contains(cell.trim().trim_matches('*')))
            })
        };
        // A wire page lists in short what Markdown has in tables; its rows are there all the same.
        let (mut seen, mut of) = (0, 0);
        for row in page.iter().filter(|row| !row.numbers.is_empty()) {
            of += 1;
            seen += usize::from(known(&row.cells));
        }
        assert_eq!(seen, of, "{}", case.name);
    }
}

const HOSTILE: &str = "\
build: '=1+1 <b>x</b> & \"y\"'
engine:
  speeds: {idle: 1800 rpm, governed: 3400 rpm}
charging:
  - winding: {open_circuit: 28 V at 3600 rpm, resistance: 0.14 ohm, inductance: 0.4 mH, poles: 12}
    rectifier: full-wave
    regulator: {holds: 14.4 V}
battery: {capacity: 30 Ah, cold_cranking: 300 A, type: flooded}
accessories:
  - {name: '=SUM(A1:A9)', draw: 140 W, duty: {governed: 100 %}, run: 2 m, price: 12}
  - {name: '@cmd <script>alert(1)</script>', draw: 60 W, duty: {governed: 100 %}, run: 2 m, price: 3}
  - {name: '+1 & <img src=x>', draw: 20 W, duty: {governed: 50 %}, run: 1 m}
shift:
  - idle: 1 h
  - governed: 1 h
parked: 12 h
";

#[test]
fn names_stay_names_on_every_page_and_in_every_cell() {
    let folder = tempfile::tempdir().expect("a folder");
    let build = folder.path().join("hostile.yaml");
    std::fs::write(&build, HOSTILE).expect("written");
    let fleet = folder.path().join("fleet.csv");
    let rows =
        "machine,build,count,kit\n\"=cmd|' /C calc'!A0\",hostile.yaml,2,\n<i>m</i>,none.yaml,1,\n";
    std::fs::write(&fleet, rows).expect("written");
    let (build, fleet) = (build.display().to_string(), fleet.display().to_string());
    for command in ["check", "size", "remedy", "wire", "sheet"] {
        let page = written(&[command, &build, "--for", "<u>me</u>"], "html");
        safe_page(command, &page, &["=1+1 <b>x</b> & \"y\"", "<u>me</u>"]);
        safe_cells(command, &written(&[command, &build], "csv"));
    }
    let whole = |format| {
        let output = std::process::Command::new(env!("CARGO_BIN_EXE_ampledger"))
            .args(["fleet", &fleet, "--format", format])
            .output()
            .expect("it runs");
        assert_eq!(output.status.code(), Some(2), "a row cannot be judged");
        String::from_utf8(output.stdout).expect("UTF-8")
    };
    safe_page("fleet", &whole("html"), &["=cmd|' /C calc'!A0", "<i>m</i>"]);
    safe_cells("fleet", &whole("csv"));
}

/// Text shows as text: the parser sees it whole, and no element that it would have made.
fn safe_page(command: &str, page: &str, texts: &[&str]) {
    assert_eq!(errors(page), Vec::<String>::new(), "{command}");
    let dom = parse(page);
    let all = text(&dom.document);
    for shown in texts {
        assert!(all.contains(shown), "{command}: {shown} is not shown");
    }
    for made in ["b", "i", "u", "script", "img"] {
        assert!(
            elements(&dom.document, made).is_empty(),
            "{command}: <{made}>"
        );
    }
}

/// No cell that a spreadsheet takes for a formula.
fn safe_cells(command: &str, csv: &str) {
    let cells: Vec<String> = records(csv).into_iter().flatten().collect();
    assert!(
        cells.iter().any(|c| c.starts_with("'=")),
        "{command}: the name is not there"
    );
    for cell in &cells {
        let number = cell.parse::<f64>().is_ok();
        let formula = cell.trim_start().starts_with(['=', '+', '-', '@']);
        assert!(number || !formula, "{command}: {cell}");
    }
}
