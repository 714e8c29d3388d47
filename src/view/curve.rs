//! The study of the windings as a report: a chart and a table for each, what the bus asks of them.

use super::charts;
use crate::chart::{Chart, Plot, Role};
use crate::curve::{Curve, CurvePoint, Demand, Heat, Line, OwnPoint, WindingCurve};
use crate::quantity::format::{self, Written};
use crate::quantity::{Amps, Rpm, Volts, Watts};
use crate::report::{Block, Cell, Column, Report, Table};

/// The report: in words where each source begins to give and where it meets the demand, then a chart
/// and a table for each, then the demand by state.
#[must_use]
pub fn curve(answer: &Curve) -> Report {
    let mut report = Report::new(&answer.build).subtitle("Output of its windings");
    for text in headline(answer) {
        report = report.paragraph(text);
    }
    let several = answer.windings.len() > 1;
    for winding in &answer.windings {
        if several {
            report = report.block(Block::Heading(1, winding.name.clone()));
        }
        report = of_winding(report, answer, winding);
    }
    if !answer.together.is_empty() {
        let lines = charted(&answer.together, answer);
        report = report.chart(chart(answer, "All sources on the bus", lines, None, true));
    }
    match demands(answer) {
        Some(table) => report.table(table),
        None => report,
    }
}

/// Every point of every winding, one row each: what CSV writes.
#[must_use]
pub fn points(answer: &Curve) -> Table {
    let own = answer.windings.iter().any(|w| !w.circuit.is_empty());
    let mut table = Table::new("Points").columns([
        Column::name("Winding"),
        Column::number::<Rpm>("Speed"),
        Column::number::<Volts>("Bus"),
        Column::number::<Amps>("Output"),
        Column::number::<Amps>("Winding rms"),
        Column::number::<Watts>("Copper loss"),
        Column::number::<Volts>("Peak inverse"),
    ]);
    if own {
        table = table.columns([
            Column::number::<Volts>("Own circuit open"),
            Column::number::<Volts>("Own circuit loaded"),
        ]);
    }
    for winding in &answer.windings {
        table = table.rows(winding.points.iter().map(|p| point_row(winding, p)));
    }
    table.main()
}

fn point_row(winding: &WindingCurve, p: &CurvePoint) -> Vec<Cell> {
    let own = winding.circuit.iter().find(|own| own.rpm == p.rpm);
    vec![
        Cell::name(&winding.name),
        Cell::fixed(p.rpm, 0),
        Cell::fixed(p.bus_v, 2),
        maybe(p.dc_a, 2),
        maybe(p.winding_rms_a, 2),
        maybe(p.copper_loss_w, 1),
        maybe(p.peak_inverse_v, 1),
        maybe(own.and_then(|o| o.open_circuit_v), 2),
        maybe(own.and_then(|o| o.loaded_v), 2),
    ]
}

fn maybe<Q: Written>(quantity: Option<Q>, decimals: usize) -> Cell {
    Cell::maybe(quantity, |q| Cell::fixed(q, decimals))
}

/// The state that draws most at the headline volts.
fn greatest(answer: &Curve) -> Option<&Demand> {
    let at = answer.headline_v?;
    let here = answer.demands.iter().filter(|d| d.bus_v == at);
    here.max_by(|a, b| a.mean_a.0.total_cmp(&b.mean_a.0))
}

/// The findings in words, a paragraph for each source and one for the demand.
fn headline(answer: &Curve) -> Vec<String> {
    let Some(at) = answer.headline_v else {
        return Vec::new();
    };
    let mut all = Vec::new();
    for winding in answer.windings.iter().filter(|w| w.feeds == "battery") {
        let cut_in = winding.cut_in.iter().find(|c| c.bus_v == at);
        let begins = match cut_in.and_then(|c| c.rpm) {
            Some(rpm) => format!("gives from {}", format::text(rpm)),
            None => "gives nothing".to_owned(),
        };
        let rated = winding.rated.map(|r| {
            format!(
                "; as a rating, {} at {} into {}",
                format::text(r.amps),
                format::text(r.rpm),
                format::text(r.bus_v)
            )
        });
        all.push(format!(
            "At {} {} {begins}{}.",
            format::text(at),
            winding.name,
            rated.unwrap_or_default()
        ));
    }
    if let Some(demand) = greatest(answer).filter(|d| d.mean_a > Amps::ZERO) {
        let met = match demand.break_even_rpm {
            Some(rpm) => format!("met from {}", format::text(rpm)),
            None => "met at no speed".to_owned(),
        };
        all.push(format!(
            "The greatest mean draw, {} at {}, is {met}, the battery's own current left out.",
            format::text(demand.mean_a),
            demand.state
        ));
    }
    all
}

/// The headline volts' line first: it is drawn strongest.
fn charted(lines: &[Line], answer: &Curve) -> Vec<(String, Vec<(Rpm, Amps)>)> {
    let first = lines.iter().filter(|l| Some(l.0) == answer.headline_v);
    let rest = lines.iter().filter(|l| Some(l.0) != answer.headline_v);
    first
        .chain(rest)
        .map(|(volts, points)| (format!("at {}", format::text(*volts)), points.clone()))
        .collect()
}

/// A chart of lines, with the demand on the bus where they feed it; the break-even speed where these
/// lines are all that feeds it.
fn chart(
    answer: &Curve,
    title: &str,
    lines: Vec<(String, Vec<(Rpm, Amps)>)>,
    cut_in: Option<Rpm>,
    all_of_bus: bool,
) -> Chart {
    let speeds: Vec<(String, Rpm)> = answer
        .speeds
        .iter()
        .map(|s| (s.name.clone(), s.rpm))
        .collect();
    let demand = greatest(answer).filter(|d| all_of_bus && d.mean_a > Amps::ZERO);
    let output = charts::Output {
        lines,
        demand: demand.map(|d| d.mean_a),
        cut_in,
        break_even: demand.and_then(|d| d.break_even_rpm),
        speeds: &speeds,
    };
    charts::output(title, &output)
}

fn of_winding(mut report: Report, answer: &Curve, winding: &WindingCurve) -> Report {
    let at = answer.headline_v;
    if !winding.lines.is_empty() {
        let cut_in = winding.cut_in.iter().find(|c| Some(c.bus_v) == at);
        let alone = winding.feeds == "battery" && answer.together.is_empty();
        let lines = charted(&winding.lines, answer);
        let title = format!("Output of {}", winding.name);
        let cut_in = cut_in.and_then(|c| c.rpm);
        report = report.chart(chart(answer, &title, lines, cut_in, alone));
    }
    if winding.points.iter().any(|p| p.dc_a.is_some()) {
        report = report.table(outputs(answer, winding));
    }
    if !winding.circuit.is_empty() {
        report = report.chart(own_chart(answer, winding));
        report = report.table(own_circuit(winding));
    }
    report
}

/// Output by speed, one column a bus volts, with the winding's current and heat.
fn outputs(answer: &Curve, winding: &WindingCurve) -> Table {
    let mut volts: Vec<Volts> = Vec::new();
    let mut rpms: Vec<Rpm> = Vec::new();
    for point in &winding.points {
        if !volts.contains(&point.bus_v) {
            volts.push(point.bus_v);
        }
        if !rpms.contains(&point.rpm) {
            rpms.push(point.rpm);
        }
    }
    let mut table = Table::new("By speed").column(Column::number::<Rpm>("Speed"));
    let names = volts.iter().map(|v| format!("At {}", format::text(*v)));
    table = table.columns(names.map(Column::number::<Amps>));
    if !winding.alternator {
        table = table.columns([
            Column::number::<Amps>("Winding"),
            Column::number::<Watts>("Copper"),
            Column::number::<Amps>("Shorted"),
            Column::number::<Watts>("Copper then"),
        ]);
    }
    if !winding.regulated.is_empty() {
        table = table.column(Column::number::<Watts>("Held"));
    }
    let rows = rpms.iter().map(|rpm| output_row(answer, winding, *rpm));
    table.rows(rows).note(note(answer, winding))
}

fn output_row(answer: &Curve, winding: &WindingCurve, rpm: Rpm) -> Vec<Cell> {
    let mut cells = vec![Cell::fixed(rpm, 0)];
    let here = || winding.points.iter().filter(move |p| p.rpm == rpm);
    cells.extend(here().map(|p| maybe(p.dc_a, 1)));
    if !winding.alternator {
        let headline = here().find(|p| Some(p.bus_v) == answer.headline_v);
        cells.push(maybe(headline.and_then(|p| p.winding_rms_a), 1));
        cells.push(maybe(headline.and_then(|p| p.copper_loss_w), 0));
        let shorted = winding.shorted.iter().find(|s| s.rpm == rpm);
        cells.push(maybe(shorted.map(|s| s.amps), 1));
        cells.push(maybe(shorted.map(|s| s.copper_loss_w), 0));
    }
    let held = winding.regulated.iter().find(|h| h.rpm == rpm);
    cells.push(maybe(held.map(|h| h.high_w), 0));
    cells
}

/// What the columns mean.
fn note(answer: &Curve, winding: &WindingCurve) -> String {
    let mut text = "Mean amps into the bus, the regulator left out.".to_owned();
    if winding.alternator {
        text.push_str(" An alternator's output is taken as the same at any bus volts.");
        return text;
    }
    if let Some(at) = answer.headline_v {
        text.push_str(&format!(
            " Winding: its rms amps, a phase, and its heat at {}. Shorted: the same when it is shorted.",
            format::text(at)
        ));
    }
    if let Some(Heat { shorts, .. }) = winding.regulated.first() {
        let kind = if *shorts { "shorting" } else { "opening" };
        text.push_str(&format!(
            " Held: most heat with the {kind} regulator at its setpoint, the mean draw on it and the battery full."
        ));
    }
    text
}

/// Volts of a winding's own circuit against speed, with nothing on and with everything on.
fn own_chart(answer: &Curve, winding: &WindingCurve) -> Chart {
    let line = |figure: fn(&OwnPoint) -> Option<Volts>| {
        let points = winding.circuit.iter();
        points.map(move |p| (p.rpm, figure(p).unwrap_or(Volts(f64::NAN))))
    };
    let title = format!("Volts of {}", winding.feeds);
    let mut plot = Plot::<Rpm, Volts>::new(title)
        .line("everything on", Role::Supply, line(|p| p.loaded_v))
        .line("nothing on", Role::Other, line(|p| p.open_circuit_v));
    for speed in &answer.speeds {
        plot = plot.at(&speed.name, Role::Draw, speed.rpm);
    }
    let words = winding.circuit.last().map(|p| {
        let volts = |v: Option<Volts>| v.map_or(format::NO_NUMBER.to_owned(), format::text);
        format!(
            "At {} {} with everything on, {} with nothing on.",
            format::text(p.rpm),
            volts(p.loaded_v),
            volts(p.open_circuit_v)
        )
    });
    plot.finish(words.unwrap_or_default())
}

fn own_circuit(winding: &WindingCurve) -> Table {
    let rows = winding.circuit.iter().map(|p| {
        [
            Cell::fixed(p.rpm, 0),
            maybe(p.open_circuit_v, 1),
            maybe(p.loaded_v, 1),
            maybe(p.winding_rms_a, 1),
            maybe(p.copper_loss_w, 0),
        ]
    });
    Table::new(format!("Volts of {}", winding.feeds))
        .columns([
            Column::number::<Rpm>("Speed"),
            Column::number::<Volts>("Open"),
            Column::number::<Volts>("Loaded"),
            Column::number::<Amps>("Winding"),
            Column::number::<Watts>("Copper"),
        ])
        .rows(rows)
        .note("Loaded: with everything on that may be on at once. Rms volts without a rectifier, mean volts behind one.")
}

/// What the bus asks at the headline volts, by state; none without a battery or running states.
fn demands(answer: &Curve) -> Option<Table> {
    let at = answer.headline_v?;
    let here: Vec<&Demand> = answer.demands.iter().filter(|d| d.bus_v == at).collect();
    if here.is_empty() {
        return None;
    }
    let speed = |rpm: Option<Rpm>, amps: Amps| match rpm {
        Some(rpm) => Cell::fixed(rpm, 0),
        None if amps > Amps::ZERO => Cell::text("never").warn(),
        None => Cell::empty(),
    };
    let rows = here.iter().map(|d| {
        [
            Cell::name(&d.state),
            Cell::fixed(d.mean_a, 1),
            speed(d.break_even_rpm, d.mean_a),
            Cell::fixed(d.most_a, 1),
            speed(d.most_break_even_rpm, d.most_a),
        ]
    });
    let table = Table::new("What is drawn, and the speed that meets it")
        .columns([
            Column::name("State"),
            Column::number::<Amps>("Mean"),
            Column::number::<Rpm>("Met from"),
            Column::number::<Amps>("All on"),
            Column::number::<Rpm>("Met from"),
        ])
        .rows(rows)
        .note(format!(
            "At {}, each state's draw held at any speed; the battery's own current left out.",
            format::text(at)
        ));
    Some(table)
}
