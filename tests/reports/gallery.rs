//! Reports of the hand-made answers, and a chart of each kind.

use super::answers;
use super::sample::{MARKUP, falls_short, keeps_up, no_battery, trace};
use ampledger::check::answer::TraceRow;
use ampledger::curve::Curve;
use ampledger::quantity::{Amps, Celsius, Fraction, Money, Rpm};
use ampledger::report::Report;
use ampledger::view::sheet::Sheet;
use ampledger::view::{self, Options, charts, quote};

/// Options of a page, with the trace of the sample.
pub fn page<'a>(trace: &'a [TraceRow]) -> Options<'a> {
    Options { page: true, trace }
}

pub fn check_page() -> Report {
    view::check(&falls_short(MARKUP), &page(&trace()))
        .made_for(Some("Hill Farm".to_owned()), Some("4 March".to_owned()))
}

/// Every report that the tests go through.
pub fn reports() -> Vec<(&'static str, Report)> {
    let (before, after) = (falls_short("Orchard mower"), keeps_up("Orchard mower"));
    vec![
        ("check", view::check(&before, &Options::default())),
        ("page", check_page()),
        ("after", view::check(&after, &page(&[]))),
        ("compare", view::compare(&before, &after, &page(&[]))),
        ("no battery", view::check(&no_battery(), &page(&[]))),
        ("sheet", sheet()),
        ("size", view::size(&answers::size(), true)),
        ("remedy", view::remedy(&answers::remedy())),
        ("fleet", view::fleet(&answers::fleet())),
        ("wire", view::wire(&answers::wires())),
        ("wire page", view::wire::page(&answers::wires())),
        ("gallery", gallery()),
        ("empty", Report::new("")),
    ]
}

/// A sheet of them.
pub fn sheet() -> Report {
    let (before, after) = (falls_short("Orchard mower"), keeps_up("Orchard mower"));
    let curve = Curve {
        format: 1,
        build: "Orchard mower".to_owned(),
        speeds: Vec::new(),
        windings: Vec::new(),
        demands: Vec::new(),
        headline_v: None,
        together: Vec::new(),
    };
    let parts = [quote::Line {
        name: "=1+1 & <i>light</i>".to_owned(),
        count: 4,
        each: Some(Money(38.0)),
    }];
    view::sheet(&Sheet {
        before: &before,
        after: Some(&after),
        trace: &trace(),
        remedies: Some(&answers::remedy()),
        wires: &answers::wires(),
        curve: &curve,
        season: None,
        parts: &parts,
        currency: "EUR",
    })
}

/// A chart of each kind that a check does not have.
pub fn gallery() -> Report {
    let curve = |scale: f64| {
        let points = (0..=40).map(|i| f64::from(i) * 100.0);
        points
            .map(move |rpm| {
                (
                    Rpm(rpm),
                    Amps((scale * (1.0 - 900.0 / rpm.max(1.0))).max(0.0)),
                )
            })
            .collect()
    };
    let output = charts::Output {
        lines: vec![
            ("at 14.4 V".to_owned(), curve(17.0)),
            ("at 12.6 V".to_owned(), curve(19.0)),
        ],
        demand: Some(Amps(11.4)),
        cut_in: Some(Rpm(900.0)),
        break_even: Some(Rpm(2732.0)),
        speeds: &[],
    };
    let season: Vec<charts::SeasonPoint> = (-4..=6)
        .map(|i| f64::from(i) * 5.0)
        .map(|air| charts::SeasonPoint {
            air: Celsius(air),
            settles: (air > -8.0).then_some(Fraction(0.7 + air * 0.006)),
            reserve: Fraction(0.62 - air * 0.008),
            keeps_up: air > -8.0,
        })
        .collect();
    let shares = [
        ("winding resistance", 0.52),
        ("battery capacity", 0.31),
        ("idle speed", 0.004),
    ];
    Report::new("Charts")
        .chart(charts::output("Output of the charging winding", &output))
        .chart(charts::season(&season))
        .chart(charts::influence(
            &shares.map(|(n, s)| (n.to_owned(), Fraction(s))),
        ))
}
