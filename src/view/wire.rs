//! Wires, fuses and relays as a list to take to the bench.

use super::assumed::{self, by_ground};
use super::quote::Bought;
use crate::quantity::{AmpHours, Amps, Fraction, Metres, Volts, format};
use crate::report::{Cell, Column, Item, Report, Table, Tone};
use crate::wire::{Arrives, Buy, Effect, Gauge, Unmet, Wire, Wires};

/// The report of an answer: the list of wires, what to buy, what arrives, and why.
#[must_use]
pub fn wire(answer: &Wires) -> Report {
    closing(why(lists(answer), answer), answer)
}

/// What decided on each wire, and the reason for each choice.
fn why(report: Report, answer: &Wires) -> Report {
    if answer.wires.is_empty() {
        return report;
    }
    answer
        .wires
        .iter()
        .fold(report.heading("Why"), |report, row| {
            let binds = Item::new(&row.binds).lead(Tone::Plain, "decides");
            let reasons = row.reasons.iter().map(Item::new);
            report
                .subheading(&row.name)
                .list("", std::iter::once(binds).chain(reasons))
        })
}

/// The verdict, the list of wires, what to buy, what arrives.
fn lists(answer: &Wires) -> Report {
    let (tone, lead, sentence) = verdict(answer);
    let mut report = Report::new(&answer.build)
        .subtitle(format!(
            "Wire, fuse and relay: {} system",
            format::text(answer.system_v)
        ))
        .verdict(tone, lead, sentence);
    if !answer.wires.is_empty() {
        report = report
            .table(wires(answer).main())
            .table(to_buy(&answer.buy, answer.gauge))
            .table(arrives(answer));
    }
    report = report.list("No standard pair", answer.unmet.iter().flat_map(unmet));
    report = report.list(
        "Not sized",
        answer
            .not_sized
            .iter()
            .map(|n| Item::new(&n.why).lead(Tone::Dim, &n.name)),
    );
    match &answer.effect {
        Some(effect) => report
            .heading("What the wires do to the charge")
            .paragraph(charge(effect)),
        None => report,
    }
}

/// The same as a page: what the figures rest on in short.
#[must_use]
pub fn page(answer: &Wires) -> Report {
    let mut report = why(lists(answer), answer);
    if !answer.wires.is_empty() {
        report = assumed::short(report, &answer.assumed);
    }
    let sources = answer.sources.iter();
    let sources = sources.map(|s| (s.certainty.as_str(), format!("{}: {}", s.what, s.source)));
    let listed = |note: &str| {
        let mut certainties = answer.sources.iter().map(|s| s.certainty.as_str());
        certainties.any(|certainty| {
            note.strip_prefix(certainty)
                .is_some_and(|n| n.starts_with(':'))
        })
    };
    let notes = answer.notes.iter().filter(|note| !listed(note));
    report
        .list("Tables used", by_ground(sources))
        .list("Notes", notes.map(Item::new))
        .cautions(answer.cautions.iter().cloned())
}

/// The wires alone, for a page that holds more, and what no standard pair can do.
#[must_use]
pub fn short(report: Report, answer: &Wires) -> Report {
    let mut report = report;
    if !answer.wires.is_empty() {
        let mut table = wires(answer);
        table.title = "Wire, fuse and relay".to_owned();
        report = report.table(table);
    }
    report.list("No standard pair", answer.unmet.iter().flat_map(unmet))
}

fn verdict(answer: &Wires) -> (Tone, String, String) {
    let count = |n: usize| format::count(u32::try_from(n).unwrap_or(u32::MAX), "wire", "wires");
    let (sized, open) = (answer.wires.len(), answer.unmet.len());
    match (sized, open) {
        (0, 0) => (
            Tone::Warn,
            "Nothing to size".to_owned(),
            "give an accessory its one-way length, `run: 3.2 m`.".to_owned(),
        ),
        (_, 0) => (
            Tone::Good,
            count(sized),
            "each carries its load, is protected by its fuse and loses no more volts than allowed."
                .to_owned(),
        ),
        _ => (
            Tone::Bad,
            format!("{} without a standard pair", count(open)),
            format!(
                "of {} in all; what would do is told below.",
                count(sized + open)
            ),
        ),
    }
}

/// The wires: one row each.
fn wires(answer: &Wires) -> Table {
    let amps = format::decimals(answer.wires.iter().map(|w| w.amps));
    let rows = answer.wires.iter().map(|w| {
        [
            Cell::name(&w.name),
            Cell::fixed(w.amps, amps),
            Cell::fixed(w.length_m, 1),
            Cell::text(size(w, answer.gauge)),
            Cell::fixed(w.ampacity_a, 1),
            Cell::measured(w.fuse_a),
            Cell::fixed(w.drop_v, 2),
            Cell::fixed(w.drop_fraction, 1),
            relay(w),
        ]
    });
    Table::new("Wires")
        .columns([
            Column::name("Wire"),
            Column::number::<Amps>("Load"),
            Column::number::<Metres>("Length"),
            Column::text("Size"),
            Column::number::<Amps>("May carry"),
            Column::measured::<Amps>("Fuse"),
            Column::number::<Volts>("Lost"),
            Column::number::<Fraction>("Share"),
            Column::text("Relay"),
        ])
        .rows(rows)
        .note("Load: worst steady current, all of a kind on. Lost: then, copper warm.")
}

fn size(wire: &Wire, gauge: Gauge) -> String {
    match (gauge, &wire.gauge_awg) {
        (Gauge::Awg, Some(awg)) => format!("{awg} AWG"),
        _ => format::text(wire.section_mm2),
    }
}

fn relay(wire: &Wire) -> Cell {
    let relays: Vec<String> = wire
        .switches
        .iter()
        .filter(|s| s.relay)
        .map(|s| {
            s.relay_a
                .map_or_else(|| "contactor".to_owned(), format::text)
        })
        .collect();
    if relays.is_empty() {
        return Cell::text("no").dim();
    }
    Cell::text(relays.join(", "))
}

/// What to buy, with its number.
pub(super) fn to_buy(buy: &Buy, gauge: Gauge) -> Table {
    let rows = bought(buy, gauge)
        .into_iter()
        .map(|b| [Cell::name(b.what), Cell::text(b.size), b.amount]);
    Table::new("To buy")
        .columns([
            Column::name("What"),
            Column::text("Size"),
            Column::figures("How much"),
        ])
        .rows(rows)
        .note("Wire as it runs: add for cutting, ends and the relays' own control wires.")
}

/// Wire by size, fuses and relays by rating, with how much of each.
pub(super) fn bought(buy: &Buy, gauge: Gauge) -> Vec<Bought> {
    let wire = buy.wire.iter().map(|row| {
        let metric = format::text(row.section_mm2);
        let awg = row.gauge_awg.as_ref().map(|awg| format!("{awg} AWG"));
        let size = match (gauge, awg) {
            (Gauge::Awg, Some(awg)) => awg,
            (Gauge::Metric, Some(awg)) => format!("{metric} (or {awg})"),
            (_, None) => metric,
        };
        let insulation = format::temperature(row.insulation_c);
        Bought {
            what: format!("copper wire, stranded, insulation {insulation}"),
            size,
            amount: Cell::measured(row.metres),
        }
    });
    let fuses = buy.fuses.iter().map(|row| {
        let colour = row.colour.as_ref().map(|c| format!(", {c}"));
        Bought {
            what: format!("{} fuse and holder{}", row.kind, colour.unwrap_or_default()),
            size: format::text(row.fuse_a),
            amount: Cell::count(u64::from(row.count)),
        }
    });
    let relays = buy.relays.iter().filter_map(|row| {
        let (what, size) = match (row.relay_a, row.carries_a) {
            (Some(contacts), _) => (
                "relay and socket",
                format!("{} contacts", format::text(contacts)),
            ),
            (None, Some(amps)) => ("contactor, continuous, hot", format::text(amps)),
            (None, None) => return None,
        };
        Some(Bought {
            what: what.to_owned(),
            size,
            amount: Cell::count(u64::from(row.count)),
        })
    });
    wire.chain(fuses).chain(relays).collect()
}

/// What arrives at each accessory.
fn arrives(answer: &Wires) -> Table {
    let all: Vec<&Arrives> = answer.wires.iter().flat_map(|w| &w.arrives).collect();
    let lamps = all.iter().any(|a| a.light.is_some());
    let mut table = Table::new("At the accessory, in the state in which it sees least").columns([
        Column::name("Accessory"),
        Column::text("State"),
        Column::number::<Volts>("Bus"),
        Column::number::<Volts>("At it"),
        Column::number::<Volts>("Works from"),
    ]);
    if lamps {
        table = table.columns([Column::percent("Light"), Column::percent("At the bus")]);
    }
    table = table.column(Column::text("Outcome"));
    table.rows(all.iter().map(|a| {
        let mut cells = vec![
            Cell::name(&a.accessory),
            Cell::text(&a.state),
            Cell::fixed(a.bus_v, 2),
            Cell::fixed(a.volts, 2),
            Cell::maybe(a.works_low_v, |v| Cell::fixed(v, 2)),
        ];
        if lamps {
            cells.push(Cell::maybe(a.light, Cell::percent));
            cells.push(Cell::maybe(a.light_at_bus, Cell::percent));
        }
        cells.push(state(a));
        cells
    }))
}

fn state(row: &Arrives) -> Cell {
    if !row.works {
        return Cell::text("drops out").bad();
    }
    match row.pull_in {
        Some(pull) if !pull.pulls_in => Cell::text("try it hot").warn(),
        Some(_) => Cell::text("pulls in hot").good(),
        None => Cell::text("works").good(),
    }
}

fn unmet(row: &Unmet) -> Vec<Item> {
    let mut items: Vec<Item> = row
        .impossible
        .iter()
        .map(|why| Item::new(why).lead(Tone::Bad, &row.name))
        .collect();
    if row.would.is_empty() {
        items.push(Item::new("no single change would do").lead(Tone::Dim, &row.name));
    } else {
        let would = format!("would do: {}", row.would.join("; or "));
        items.push(Item::new(would).lead(Tone::Plain, &row.name));
    }
    items
}

fn charge(effect: &Effect) -> String {
    let ah = |amount: AmpHours| format::text(amount);
    format!(
        "With the wires' resistance the accessories take {} in the first shift, {} without; \
         the battery's balance is {}, {} without.",
        ah(effect.loads_with_wires_ah),
        ah(effect.loads_ah),
        format::text_signed(effect.balance_with_wires_ah),
        format::text_signed(effect.balance_ah)
    )
}

/// Assumed values, tables used, notes and cautions.
fn closing(report: Report, answer: &Wires) -> Report {
    let mut report = report;
    if !answer.wires.is_empty() {
        report = assumed::table(report, &answer.assumed);
    }
    if !answer.sources.is_empty() {
        report = report.table(
            Table::new("Tables used")
                .columns([
                    Column::name("What"),
                    Column::text("Source"),
                    Column::text("Certainty"),
                ])
                .rows(answer.sources.iter().map(|s| {
                    [
                        Cell::name(&s.what),
                        Cell::text(&s.source),
                        Cell::text(&s.certainty).dim(),
                    ]
                })),
        );
    }
    report
        .list("Notes", answer.notes.iter().map(Item::new))
        .cautions(answer.cautions.iter().cloned())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn nothing_to_size_says_what_to_give() {
        let answer = Wires {
            format: 1,
            build: "bare".into(),
            gauge: Gauge::Metric,
            system_v: Volts(12.0),
            wires: Vec::new(),
            unmet: Vec::new(),
            not_sized: Vec::new(),
            buy: Buy::default(),
            effect: None,
            assumed: Vec::new(),
            sources: Vec::new(),
            notes: Vec::new(),
            cautions: Vec::new(),
        };
        let text = crate::report::text::render(&wire(&answer), &Default::default());
        assert!(
            text.contains("Nothing to size") && text.contains("run:"),
            "{text}"
        );
    }
}
