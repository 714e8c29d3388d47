//! One hand-made answer rendered to every format: snapshots side by side in `tests/reports/`, and
//! what must hold of any report. Renew the snapshots with `SNAPSHOTS=overwrite cargo test --test reports`.

#![allow(missing_docs)]

#[path = "reports/answers.rs"]
mod answers;
#[path = "reports/gallery.rs"]
mod gallery;
#[path = "support/records.rs"]
mod records;
#[path = "reports/sample.rs"]
mod sample;

use ampledger::quantity::Amps;
use ampledger::report::{Block, Cell, Column, Report, Table, Tone, csv, html, markdown, text};
use ampledger::view::{self, Options};
use gallery::{check_page, gallery, page, reports};
use records::records;
use snapbox::{assert_data_eq, file};
use std::path::Path;

#[test]
fn snapshots_side_by_side() {
    let report = view::check(&sample::falls_short(sample::MARKUP), &Options::default());
    assert_data_eq!(
        text::render(&report, &text::Style::default()),
        file!["reports/check.txt"].raw()
    );
    let narrow = text::Style {
        width: 60,
        ascii: true,
        colour: false,
        charts: true,
    };
    assert_data_eq!(
        text::render(&check_page(), &narrow),
        file!["reports/check-narrow.txt"].raw()
    );
    assert_data_eq!(
        markdown::render(&check_page()),
        file!["reports/check.md"].raw()
    );
    assert_data_eq!(csv::render(&check_page()), file!["reports/check.csv"].raw());
    assert_data_eq!(
        html::render(&check_page()),
        file!["reports/check.html"].raw()
    );
    let (before, after) = (
        sample::falls_short("Orchard mower"),
        sample::keeps_up("Orchard mower"),
    );
    let compared = view::compare(&before, &after, &Options::default());
    assert_data_eq!(
        text::render(&compared, &text::Style::default()),
        file!["reports/compare.txt"].raw()
    );
    let charts = text::Style {
        charts: true,
        ..text::Style::default()
    };
    assert_data_eq!(
        text::render(&gallery(), &charts),
        file!["reports/gallery.txt"].raw()
    );
}

/// What a page shows, without the style that every page has.
fn body(page: &str) -> &str {
    page.split_once("<body>").map_or(page, |(_, body)| body)
}

#[test]
fn each_command_in_every_format_side_by_side() {
    let named = ["sheet", "size", "remedy", "fleet", "wire"];
    for (name, report) in reports()
        .into_iter()
        .filter(|(name, _)| named.contains(name))
    {
        let file = |ending: &str| {
            let path = format!("tests/reports/{name}.{ending}");
            snapbox::Data::read_from(&Path::new(env!("CARGO_MANIFEST_DIR")).join(path), None).raw()
        };
        assert_data_eq!(text::render(&report, &text::Style::default()), file("txt"));
        assert_data_eq!(markdown::render(&report), file("md"));
        assert_data_eq!(csv::render(&report), file("csv"));
        assert_data_eq!(body(&html::render(&report)).to_owned(), file("html"));
    }
}

#[test]
fn text_keeps_its_width_and_has_no_blanks_at_line_ends() {
    for (name, report) in reports() {
        for width in [40, 60, 80, 120] {
            for ascii in [false, true] {
                let style = text::Style {
                    width,
                    ascii,
                    colour: false,
                    charts: true,
                };
                let written = text::render(&report, &style);
                for line in written.lines() {
                    let long = line.chars().count();
                    // A `--set` line is kept whole, so that it can be copied.
                    assert!(
                        long <= width || line.contains("--set"),
                        "{name} at {width}: {line}"
                    );
                    assert_eq!(line, line.trim_end(), "{name} at {width}");
                    assert!(!ascii || line.is_ascii(), "{name} at {width}: {line}");
                }
            }
        }
    }
}

#[test]
fn colour_changes_nothing_but_colour() {
    for (name, report) in reports() {
        let style = text::Style {
            charts: true,
            ..text::Style::default()
        };
        let plain = text::render(&report, &style);
        let coloured = text::render(
            &report,
            &text::Style {
                colour: true,
                ..style
            },
        );
        assert!(name == "empty" || coloured.contains('\u{1b}'), "{name}");
        assert_eq!(without_escapes(&coloured), plain, "{name}");
    }
}

/// A text without its ANSI escapes, which here all end in `m`.
fn without_escapes(text: &str) -> String {
    let mut parts = text.split('\u{1b}');
    let first = parts.next().unwrap_or_default().to_owned();
    let rest = parts
        .filter_map(|p| p.split_once('m'))
        .map(|(_, rest)| rest);
    let joined = rest.fold(first, |text, rest| text + rest);
    joined
        .lines()
        .map(|line| line.trim_end().to_owned() + "\n")
        .collect()
}

#[test]
fn a_name_cannot_steer_the_terminal() {
    let report = Report::new("a\u{1b}[31mb\u{202E}c\u{7}\nd").cautions(["x\u{9b}31my"]);
    let written = text::render(&report, &text::Style::default());
    assert_eq!(written, "a [31mb c d\n\nCautions\n! x 31my\n");
}

#[test]
fn names_with_markup_show_as_text() {
    let page = html::render(&check_page());
    assert!(page.contains("Cart &lt;b&gt;7&lt;/b&gt; &amp; "), "escaped");
    assert!(!page.contains("<b>7"));
    let written = markdown::render(&check_page());
    assert!(written.contains("# Cart &lt;b&gt;7&lt;/b&gt; &amp; \"friends\""));
    let table = Table::new("")
        .column(Column::name("a|b"))
        .row([Cell::name("x | `y` *z* [l](u)\nq")]);
    let written = markdown::render(&Report::new("").table(table));
    assert_eq!(
        written,
        "| a\\|b |\n| --- |\n| x \\| \\`y\\` \\*z\\* \\[l\\](u) q |\n"
    );
}

#[test]
fn csv_holds_no_formula() {
    for (text, wanted) in [
        ("=SUM(A1)", "'=SUM(A1)"),
        ("+1", "'+1"),
        ("-1", "'-1"),
        ("\u{2212}1", "'-1"),
        ("@x", "'@x"),
        ("\tx", "'\tx"),
        ("\rx", "'\rx"),
        ("  =x", "'  =x"),
        ("＝x", "'＝x"),
        ("4 = 2 + 2", "4 = 2 + 2"),
    ] {
        assert_eq!(csv::harmless(text), wanted);
    }
    let written = csv::render(&check_page());
    for record in records(&written) {
        for field in record {
            let number = field.parse::<f64>().is_ok();
            assert!(
                number || !field.starts_with(['=', '+', '-', '@', '\t', '\r']),
                "{field}"
            );
        }
    }
    assert!(written.contains("\n'=SUM(A1:A9) sprayer,"));
}

#[test]
fn a_main_table_stands_alone_in_csv() {
    let table = Table::new("Rows")
        .column(Column::name("Machine"))
        .column(Column::number::<Amps>("Draw"))
        .row([Cell::name("a"), Cell::fixed(Amps(-1.25), 1)])
        .main();
    let report = Report::new("t").paragraph("p").table(table);
    assert_eq!(csv::render(&report), "Machine,Draw (A)\na,-1.25\n");
}

/// Columns of the table by state, and the names of the same figures in JSON.
const STATE_COLUMNS: [(&str, &str); 7] = [
    ("Time (min)", "minutes"),
    ("Can give (A)", "available_a"),
    ("Draw (A)", "loads_a"),
    ("Battery (A)", "battery_a"),
    ("At worst (A)", "worst_battery_a"),
    ("Bus (V)", "bus_v"),
    ("Charge (Ah)", "ah"),
];

#[test]
fn json_csv_and_page_hold_the_same_figures() {
    let answer = sample::falls_short("Orchard mower");
    let report = view::check(&answer, &page(&[]));
    let json: serde_json::Value = serde_json::to_value(&answer).expect("JSON");
    let written = records(&csv::render(&report));
    let shown = html::render(&report);
    let header = written
        .iter()
        .position(|r| r.first().is_some_and(|f| f == "State"))
        .expect("states");
    for (index, state) in json["states"]
        .as_array()
        .expect("states")
        .iter()
        .enumerate()
    {
        let record = &written[header + 1 + index];
        assert_eq!(state["state"], record[0].as_str());
        for (column, key) in STATE_COLUMNS {
            let at = written[header]
                .iter()
                .position(|h| h == column)
                .expect("the column");
            let number: f64 = record[at].parse().expect("a number");
            assert_eq!(Some(number), state[key].as_f64(), "{key}");
            assert!(
                shown.contains(&format!("<data value=\"{number}\">")),
                "{key} {number}"
            );
        }
    }
    for key in ["lacks_ah", "balance_ah"] {
        let number = json[key].as_f64().expect("a figure");
        assert!(
            shown.contains(&format!("<data value=\"{number}\">")),
            "{key} {number}"
        );
        assert!(
            written.iter().flatten().any(|f| f.parse() == Ok(number)),
            "{key} {number}"
        );
    }
    for accessory in json["accessories"].as_array().expect("accessories") {
        let number = accessory["ah"].as_f64().expect("a figure");
        assert!(
            shown.contains(&format!("<data value=\"{number}\">")),
            "{number}"
        );
        assert!(
            written.iter().flatten().any(|f| f.parse() == Ok(number)),
            "{number}"
        );
    }
}

#[test]
fn pages_are_whole_and_need_nothing_else() {
    for (name, report) in reports() {
        let page = html::render(&report);
        balanced(&page).unwrap_or_else(|why| panic!("{name}: {why}"));
        for needless in [
            "<script",
            "http:",
            "https:",
            "src=",
            "@import",
            "url(h",
            "javascript",
        ] {
            let page = page.replace("http://www.w3.org/2000/svg", "");
            assert!(!page.contains(needless), "{name}: {needless}");
        }
        assert!(
            page.starts_with("<!DOCTYPE html><html lang=\"en\">"),
            "{name}"
        );
        assert_eq!(page.matches("<h1>").count(), 1, "{name}");
        ids_are_unique(&page, name);
    }
}

/// Every tag closes the one opened last; attributes are quoted; no stray `<` or `&`.
fn balanced(page: &str) -> Result<(), String> {
    const VOID: [&str; 2] = ["meta", "br"];
    let (before, rest) = page.split_once("<style>").ok_or("no style")?;
    let (_, after) = rest.split_once("</style>").ok_or("style not closed")?;
    let page = before.replace("<!DOCTYPE html>", "") + after;
    let mut open: Vec<String> = Vec::new();
    let mut pieces = page.split('<');
    pieces.next();
    for piece in pieces {
        let (tag, text) = piece.split_once('>').ok_or("a tag is not closed")?;
        if text.contains('>') || tag.matches('"').count() % 2 != 0 {
            return Err(format!("stray sign in `{piece}`"));
        }
        for entity in text.split('&').skip(1) {
            if !["amp;", "lt;", "gt;", "quot;"]
                .iter()
                .any(|e| entity.starts_with(e))
            {
                return Err(format!("stray & in `{text}`"));
            }
        }
        let name = tag
            .trim_start_matches('/')
            .split_whitespace()
            .next()
            .unwrap_or_default();
        if tag.starts_with('/') {
            if open.pop().as_deref() != Some(name) {
                return Err(format!("</{name}> closes another"));
            }
        } else if !VOID.contains(&name) {
            open.push(name.to_owned());
        }
    }
    if open.is_empty() {
        Ok(())
    } else {
        Err(format!("open: {open:?}"))
    }
}

fn ids_are_unique(page: &str, name: &str) {
    let mut ids: Vec<&str> = page
        .split(" id=\"")
        .skip(1)
        .filter_map(|p| p.split('"').next())
        .collect();
    let count = ids.len();
    ids.sort_unstable();
    ids.dedup();
    assert_eq!(ids.len(), count, "{name}: an id twice");
    for referred in page
        .split("labelledby=\"")
        .skip(1)
        .filter_map(|p| p.split('"').next())
    {
        for id in referred.split(' ') {
            assert!(ids.binary_search(&id).is_ok(), "{name}: no id `{id}`");
        }
    }
    for referred in page
        .split("url(#")
        .skip(1)
        .filter_map(|p| p.split(')').next())
    {
        assert!(
            ids.binary_search(&referred).is_ok(),
            "{name}: no id `{referred}`"
        );
    }
}

#[test]
fn every_chart_has_its_words_and_its_lines() {
    for (name, report) in reports() {
        let page = html::render(&report);
        let charts = report.charts().count();
        assert_eq!(page.matches("<svg ").count(), 2 * charts, "{name}");
        assert_eq!(page.matches("role=\"img\"").count(), 2 * charts, "{name}");
        for chart in report.charts() {
            assert!(
                !chart.title.is_empty() && chart.description.len() > 20,
                "{name}"
            );
            assert!(
                !chart.description.contains("NaN"),
                "{name}: {}",
                chart.description
            );
        }
        for svg in page.split("<svg ").skip(1) {
            let svg = svg.split("</svg>").next().unwrap_or_default();
            assert!(
                svg.contains("<title id=") && svg.contains("<desc id="),
                "{name}"
            );
            assert!(!svg.contains("NaN") && !svg.contains("inf"), "{name}");
            let shapes = svg.matches("d=\"M").count() + svg.matches("class=\"bar\"").count();
            assert!(
                shapes > 0 && !svg.contains("d=\"\""),
                "{name}: nothing drawn"
            );
        }
    }
    assert!(check_page().charts().count() >= 4);
}

#[test]
fn headings_do_not_skip_a_level() {
    for (name, report) in reports() {
        let mut last = 1;
        for block in &report.blocks {
            if let Block::Heading(level, text) = block {
                let level = u32::from(*level) + 1;
                assert!(level <= last + 1, "{name}: {text}");
                last = level;
            } else if matches!(block, Block::Table(t) if !t.title.is_empty()) {
                last = 2;
            }
        }
    }
}

#[test]
fn a_table_too_wide_is_cut_into_parts_with_its_names() {
    let mut table = Table::new("Wide").column(Column::name("Name"));
    for index in 0..12 {
        table = table.column(Column::number::<Amps>(format!("Number {index}")));
    }
    let cells = (0..12).map(|i| Cell::fixed(Amps(1000.0 + f64::from(i)), 2).tone(Tone::Plain));
    let table = table.row(std::iter::once(Cell::name("the row")).chain(cells));
    let style = text::Style {
        width: 40,
        ..text::Style::default()
    };
    let written = text::render(&Report::new("").table(table), &style);
    assert!(written.matches("the row").count() > 2, "{written}");
    for index in 0..12 {
        assert!(
            written.contains(&format!("{}.00", 1000 + index)),
            "{written}"
        );
    }
}
