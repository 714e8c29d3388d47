//! What the reports of the answers say: wording, order and choice of figures.

#![allow(missing_docs)]

#[path = "reports/sample.rs"]
mod sample;

use ampledger::chart::{Body, Chart, Plane, Role, Shape};
use ampledger::check::answer::Verdict;
use ampledger::quantity::{Amps, Celsius, Fraction, Minutes, Money, Rpm};
use ampledger::report::{Block, Report, Table, Tone, text};
use ampledger::view::{self, Options, charts, quote};

fn plane(chart: &Chart) -> &Plane {
    match &chart.body {
        Body::Plane(plane) => plane,
        Body::Bars(_) => panic!("{} is of bars", chart.title),
    }
}

fn table<'a>(report: &'a Report, title: &str) -> &'a Table {
    report
        .tables()
        .find(|t| t.title == title)
        .expect("the table")
}

fn column(table: &Table, name: &str) -> Vec<String> {
    let index = table
        .columns
        .iter()
        .position(|c| c.name == name)
        .expect("the column");
    table
        .rows
        .iter()
        .map(|row| row.cells[index].text.clone())
        .collect()
}

fn short(report: &Report) -> String {
    text::render(report, &text::Style::default())
}

#[test]
fn the_verdict_stands_once() {
    let mut answer = sample::falls_short("x");
    let verdict = view::check::verdict(&answer);
    assert_eq!(
        (verdict.tone, verdict.lead.as_str()),
        (Tone::Bad, "Falls short")
    );
    assert!(verdict.sentence.starts_with("lacks 6.31 Ah"));
    answer.verdict = Verdict::Carries;
    answer.shifts_carried = Some(1);
    answer.sentence = "the second shift breaks the reserve".to_owned();
    let verdict = view::check::verdict(&answer);
    assert_eq!(
        (verdict.tone, verdict.lead.as_str()),
        (Tone::Warn, "Carries 1 shift")
    );
    assert_eq!(verdict.sentence, answer.sentence);
    assert_eq!(
        view::check::verdict(&sample::keeps_up("x")).tone,
        Tone::Good
    );
}

/// A lighting winding without a battery, with nothing that states its volts: no praise, with or
/// without warnings.
#[test]
fn what_is_not_judged_is_not_praised() {
    let mut answer = sample::keeps_up("lamps");
    answer.judged = false;
    answer.sentence = "Not judged: nothing states its volts.".to_owned();
    let verdict = view::check::verdict(&answer);
    assert_eq!(
        (
            verdict.tone,
            verdict.lead.as_str(),
            verdict.sentence.as_str()
        ),
        (Tone::Plain, "Not judged", "nothing states its volts.")
    );
}

#[test]
fn parts_come_in_their_order() {
    let written = short(&view::check(
        &sample::falls_short(sample::MARKUP),
        &Options::default(),
    ));
    assert!(written.starts_with(sample::MARKUP));
    let parts = [
        "Falls short:",
        "By state",
        "By accessory",
        "What would make it keep up",
        "Assumed",
        "Findings",
        "Notes",
        "Cautions",
    ];
    let places: Vec<usize> = parts.iter().map(|p| written.find(p).expect(p)).collect();
    assert!(places.is_sorted(), "{places:?}");
    let faults = ["- Fault,", "- Warning,", "- Note,"].map(|p| written.find(p).expect(p));
    assert!(faults.is_sorted(), "the gravest first");
}

#[test]
fn a_build_that_keeps_up_says_what_is_to_spare() {
    let written = short(&view::check(&sample::keeps_up("x"), &Options::default()));
    assert!(
        written.contains("To spare\nat idle      1.4 A\nat governed  1.8 A\n"),
        "{written}"
    );
    assert!(written.contains("What could still be added"));
}

#[test]
fn states_show_the_worst_beside_the_mean_and_the_sum() {
    let report = view::check(&sample::falls_short("x"), &Options::default());
    let states = table(&report, "By state");
    assert_eq!(
        column(states, "Battery"),
        ["−151.2", "−5.2", "−0.8", "−10.9", ""]
    );
    assert_eq!(
        column(states, "At worst"),
        ["−151.2", "−14.9", "−6.3", "−10.9", ""]
    );
    assert_eq!(
        column(states, "Charge"),
        ["−0.21", "−2.61", "−2.67", "−3.64", "−9.12"]
    );
    assert_eq!(column(states, "Time")[4], "4 h 15 min");
    assert!(states.rows[4].total);
}

#[test]
fn without_a_battery_there_are_volts_in_place_of_charge() {
    let report = view::check(
        &sample::no_battery(),
        &Options {
            page: true,
            ..Options::default()
        },
    );
    let states = table(&report, "By state");
    assert!(
        !states
            .columns
            .iter()
            .any(|c| ["Battery", "Charge"].contains(&c.name.as_str()))
    );
    let circuits = table(&report, "Circuits without the battery");
    assert_eq!(column(circuits, "governed"), ["13.9", "15.1"]);
    assert!(report.charts().all(|c| !c.title.contains("Battery")));
}

#[test]
fn accessories_show_amps_only_where_they_are_on() {
    let report = view::check(&sample::falls_short("x"), &Options::default());
    let rows = table(&report, "By accessory");
    assert_eq!(column(rows, "idle"), ["8.7", "", "3.3", "", "0.5", ""]);
    assert_eq!(
        column(rows, "Duty"),
        ["100 %", "85 %", "60 %", "100 %", "40–100 %", ""]
    );
    assert_eq!(column(rows, "Accessory")[0], "4 × Work light, LED 27 W");
    assert!(
        !rows
            .columns
            .iter()
            .any(|c| c.name == "crank" || c.name == "Circuit")
    );
    let mut answer = sample::falls_short("x");
    answer.accessories[1].circuit = "lighting".to_owned();
    let report = view::check(&answer, &Options::default());
    assert_eq!(
        column(table(&report, "By accessory"), "Circuit")[1],
        "lighting"
    );
}

#[test]
fn the_amps_chart_hatches_what_the_battery_pays() {
    let chart = charts::amps(&sample::keeps_up("x"));
    let plane = plane(&chart);
    let area = |role: Role| {
        let layer = plane
            .layers
            .iter()
            .find(|l| l.role == role)
            .expect("the layer");
        match &layer.shape {
            Shape::Area(pieces) => pieces.clone(),
            Shape::Line(_) => panic!("a line"),
        }
    };
    // Only the engine-off time is paid by the battery: from 1 h 47 min, all that is drawn.
    let pays = area(Role::Pays);
    assert_eq!(pays.len(), 1);
    assert!((pays[0][0].0 - 107.041_667 / 60.0).abs() < 1e-9);
    assert!(pays[0][0].1.abs() < 1e-9 && (pays[0][0].2 - 10.91).abs() < 1e-9);
    // At idle the battery gains 1.4 A and at worst loses 3.1 A: 4.5 A more than the 9.0 A drawn.
    let band = area(Role::Band);
    assert!((band[0][0].1 - 9.0).abs() < 1e-9 && (band[0][0].2 - 13.5).abs() < 1e-9);
    // Starts and parking are not drawn.
    assert!(plane.y.high < 25.0 && plane.x.high < 4.3);
}

#[test]
fn the_charge_chart_labels_its_low_point() {
    let answer = sample::falls_short("x");
    let chart = charts::charge(&answer, &[]);
    let plane = plane(&chart);
    assert_eq!(plane.marks[0].label, "low 52 % at 4:15");
    assert_eq!(plane.references[0].label, "reserve 60 %");
    assert!(
        chart
            .description
            .contains("from 100 % to 52 %; its lowest is 52 %, against a reserve of 60 %")
    );
    let mut answer = answer;
    answer.reserve_soc = Some(Fraction(2.0));
    let chart = charts::charge(&answer, &[]);
    assert!(self::plane(&chart).references.is_empty());
    assert!(
        chart
            .description
            .contains("not even a full battery would do")
    );
}

#[test]
fn days_are_drawn_where_the_trace_goes_on() {
    let answer = sample::falls_short("x");
    let trace = sample::trace();
    assert_eq!(charts::of_check(&answer, &trace).len(), 3);
    let first: Vec<_> = trace
        .iter()
        .filter(|r| r.minutes <= Minutes(300.0))
        .cloned()
        .collect();
    assert_eq!(charts::of_check(&answer, &first).len(), 2);
}

#[test]
fn the_season_is_shaded_and_named_by_verdict() {
    let point = |air: f64, keeps_up: bool| charts::SeasonPoint {
        air: Celsius(air),
        settles: keeps_up.then_some(Fraction(0.8)),
        reserve: Fraction(0.6),
        keeps_up,
    };
    let chart = charts::season(&[
        point(-20.0, false),
        point(-10.0, false),
        point(0.0, true),
        point(10.0, true),
    ]);
    let spans: Vec<(f64, f64, &str)> = plane(&chart)
        .spans
        .iter()
        .map(|s| (s.from, s.to, s.label.as_str()))
        .collect();
    assert_eq!(
        spans,
        [(-20.0, -5.0, "falls short"), (-5.0, 10.0, "keeps up")]
    );
    assert!(
        chart
            .description
            .contains("falls short from −20 °C to −5 °C")
    );
}

#[test]
fn the_output_chart_marks_cut_in_and_break_even() {
    let output = charts::Output {
        lines: vec![(
            "at 14.4 V".to_owned(),
            vec![(Rpm(900.0), Amps(0.0)), (Rpm(3600.0), Amps(16.0))],
        )],
        demand: Some(Amps(11.4)),
        cut_in: Some(Rpm(900.0)),
        break_even: None,
        speeds: &[],
    };
    let chart = charts::output("Output", &output);
    let labels: Vec<&str> = plane(&chart)
        .references
        .iter()
        .map(|r| r.label.as_str())
        .collect();
    assert_eq!(labels, ["drawn 11.4 A", "cut-in 900 rpm"]);
    assert!(chart.description.starts_with("at 14.4 V: 16 A at 3600 rpm"));
}

#[test]
fn a_comparison_subtracts_before_from_after() {
    let (before, after) = (sample::falls_short("x"), sample::keeps_up("x"));
    let report = view::compare(&before, &after, &Options::default());
    let changes = table(&report, "What changes");
    let rows: Vec<Vec<&str>> = changes
        .rows
        .iter()
        .map(|r| r.cells.iter().map(|c| c.text.as_str()).collect())
        .collect();
    assert!(
        rows.contains(&vec!["Lacks each shift", "6.31 Ah", "0 Ah", "−6.31 Ah"]),
        "{rows:?}"
    );
    assert!(
        rows.contains(&vec!["Lowest charge", "52 %", "72 %", "+20 points"]),
        "{rows:?}"
    );
    assert!(
        rows.contains(&vec!["Charge settles at", "", "91 %", ""]),
        "{rows:?}"
    );
    let Some(Block::Verdicts(verdicts)) = report.blocks.first() else {
        panic!("no verdicts")
    };
    assert_eq!(
        verdicts
            .iter()
            .filter_map(|v| v.caption.as_deref())
            .collect::<Vec<_>>(),
        ["Before", "After"]
    );
}

#[test]
fn a_quote_sums_what_has_a_price_and_names_what_has_none() {
    let line = |name: &str, count: u32, each: Option<f64>| quote::Line {
        name: name.to_owned(),
        count,
        each: each.map(Money),
    };
    let lines = [
        line("Work light", 4, Some(31.5)),
        line("Relay", 1, None),
        line("Fuse", 2, Some(0.4)),
    ];
    let table = quote::table("Quote", &lines, "EUR");
    assert_eq!(column(&table, "Together"), ["126.00", "", "0.80", "126.80"]);
    assert!(table.note.as_deref().is_some_and(|n| n.contains("Relay")));
}
