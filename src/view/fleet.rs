//! A fleet as a report: which machine takes which kit, what must change on the others, the bill.

use super::quote;
use crate::check::answer::Verdict;
use crate::fleet::{Fleet, Group, Row};
use crate::quantity::{Money, format};
use crate::remedy::Part;
use crate::report::{Cell, Column, Item, Report, Table, Tone};

/// Kits and seasons that stand side by side; more stand below each other.
const SIDE_BY_SIDE: usize = 4;

/// The report: the count, the matrix or the list, what must change, errors, the bill by kit.
#[must_use]
pub fn fleet(answer: &Fleet) -> Report {
    let totals = &answer.totals;
    let judged = totals.keeps_up + totals.carries + totals.falls_short;
    let tone = if totals.errors > 0 || 2 * totals.keeps_up < judged {
        Tone::Bad
    } else if totals.keeps_up < judged {
        Tone::Warn
    } else if judged == 0 {
        Tone::Plain
    } else {
        Tone::Good
    };
    let columns = totals.groups.len();
    let crossed = columns > 1 && columns <= SIDE_BY_SIDE && is_crossed(&answer.rows);
    let mut report = Report::new(&answer.fleet)
        .subtitle(subtitle(answer))
        .verdict(
            tone,
            lead(totals.keeps_up, judged, totals.errors == 0),
            sentence(answer, crossed),
        );
    if crossed {
        report = report.table(matrix(answer));
        let short: Vec<&Row> = answer.rows.iter().filter(|r| falls(r)).collect();
        if short.iter().any(|r| looked_for(r)) {
            report = report.table(list("What must change", &short, true, &answer.currency));
        }
    } else {
        let all: Vec<&Row> = answer.rows.iter().collect();
        report = report.table(list("Machines", &all, false, &answer.currency));
    }
    let failed = answer.rows.iter().filter(|r| r.outcome.error.is_some());
    let item = |row: &Row| {
        let why = row.outcome.error.clone().unwrap_or_default();
        Item::new(why).lead(Tone::Bad, row.machine.to_string())
    };
    report = report.list("Not judged", failed.map(item));
    if !totals.groups.is_empty() {
        report = report.table(sums(&totals.groups, &answer.currency));
    }
    for group in totals.groups.iter().filter(|g| !g.parts.is_empty()) {
        report = report.table(shopping(group, &answer.currency));
    }
    report.list("Notes", answer.notes.iter().map(Item::new))
}

fn subtitle(answer: &Fleet) -> String {
    let rows = u32::try_from(answer.rows.len()).unwrap_or(u32::MAX);
    format!("Fleet: {}", format::count(rows, "row", "rows"))
}

fn lead(keeps_up: u64, judged: u64, whole: bool) -> String {
    if judged == 0 {
        "Not judged".to_owned()
    } else if keeps_up == judged && whole {
        "All keep up".to_owned()
    } else if keeps_up == judged {
        format!("All {judged} judged keep up")
    } else {
        format!("{keeps_up} of {judged} keep up")
    }
}

fn sentence(answer: &Fleet, crossed: bool) -> String {
    let totals = &answer.totals;
    if crossed {
        let group = |g: &Group| {
            let words = words(g.kit.as_deref(), g.season.as_deref());
            format!("{words} {} of {}", g.keeps_up, g.machines)
        };
        let groups: Vec<String> = totals.groups.iter().map(group).collect();
        return format!("{}.", groups.join("; "));
    }
    let mut said = Vec::new();
    if totals.carries > 0 {
        said.push(format!(
            "{} carr{} some shifts",
            machines(totals.carries),
            ending(totals.carries, "ies", "y")
        ));
    }
    if totals.falls_short > 0 {
        said.push(format!(
            "{} fall{} short in the first",
            machines(totals.falls_short),
            ending(totals.falls_short, "s", "")
        ));
    }
    if totals.unjudged > 0 {
        said.push(format!(
            "{} ha{} no battery and nothing that states its volts",
            machines(totals.unjudged),
            ending(totals.unjudged, "s", "ve")
        ));
    }
    if totals.errors > 0 {
        let rows = format::count(
            u32::try_from(totals.errors).unwrap_or(u32::MAX),
            "row",
            "rows",
        );
        said.push(format!("{rows} could not be judged"));
    }
    if said.is_empty() {
        "Every machine keeps its battery charged.".to_owned()
    } else {
        format!("{}.", said.join(", "))
    }
}

/// A count of machines.
fn machines(n: u64) -> String {
    format::count(u32::try_from(n).unwrap_or(u32::MAX), "machine", "machines")
}

fn ending(n: u64, one: &'static str, many: &'static str) -> &'static str {
    if n == 1 { one } else { many }
}

fn falls(row: &Row) -> bool {
    row.outcome.verdict.is_some_and(|v| v != Verdict::KeepsUp)
}

/// Whether any machine stands in more than one row.
fn is_crossed(rows: &[Row]) -> bool {
    rows.windows(2)
        .any(|two| two[0].machine == two[1].machine && two[0].build == two[1].build)
}

/// A kit and a season in words: `night-work, winter`.
fn words(kit: Option<&str>, season: Option<&str>) -> String {
    match (kit, season) {
        (kit, None) => kit.unwrap_or("as it is").to_owned(),
        (None, Some(season)) => season.to_owned(),
        (Some(kit), Some(season)) => format!("{kit}, {season}"),
    }
}

/// One line a machine, one column a kit and season.
fn matrix(answer: &Fleet) -> Table {
    let groups = &answer.totals.groups;
    let place = |row: &Row| {
        let same = |g: &Group| g.kit == row.kit && g.season == row.season;
        groups.iter().position(same).unwrap_or_default()
    };
    let mut lines: Vec<(&Row, Vec<Cell>)> = Vec::new();
    for row in &answer.rows {
        let same =
            |line: &(&Row, Vec<Cell>)| line.0.machine == row.machine && line.0.build == row.build;
        if !lines.last().is_some_and(same) {
            lines.push((row, vec![Cell::empty(); groups.len()]));
        }
        if let Some((_, cells)) = lines.last_mut() {
            cells[place(row)] = verdict(row);
        }
    }
    let heads = groups
        .iter()
        .map(|g| Column::text(words(g.kit.as_deref(), g.season.as_deref())));
    Table::new("Which machine takes which kit")
        .columns([Column::name("Machine"), Column::figures("Count")])
        .columns(heads)
        .rows(lines.into_iter().map(|(row, cells)| {
            [Cell::name(&*row.machine), Cell::count(u64::from(row.count))]
                .into_iter()
                .chain(cells)
        }))
        .note("Charge lacking each shift where one does not keep up.")
}

/// The verdict of a row in a few words.
fn verdict(row: &Row) -> Cell {
    let outcome = &row.outcome;
    let Some(verdict) = outcome.verdict else {
        let cell = Cell::text("not judged");
        return match outcome.error {
            Some(_) => cell.bad(),
            None => cell,
        };
    };
    let lacks = || match outcome.lacks_ah {
        Some(lacks) => Cell {
            text: format!("lacks {}", format::text(lacks)),
            ..Cell::measured(lacks)
        },
        None => Cell::text("no charging helps"),
    };
    match verdict {
        Verdict::KeepsUp => Cell::text("keeps up").good(),
        Verdict::Carries => lacks().warn(),
        Verdict::FallsShort
            if outcome.settles_soc.is_none()
                && outcome.lacks_ah.is_none()
                && outcome.shifts_carried.is_none() =>
        {
            Cell::text("volts out of range").bad() // judged on volts: no battery
        }
        Verdict::FallsShort => lacks().bad(),
    }
}

/// One line a row, with its remedy.
fn list(title: &str, rows: &[&Row], crossed: bool, currency: &str) -> Table {
    let kits = rows.iter().any(|r| r.kit.is_some() || r.season.is_some());
    let remedies = rows.iter().any(|r| looked_for(r));
    let costs = rows.iter().any(|r| r.outcome.cost.is_some());
    let mut table = Table::new(title).columns([Column::name("Machine"), Column::figures("Count")]);
    if kits {
        table = table.column(Column::text("Kit"));
    }
    if !crossed {
        table = table.column(Column::text("Verdict"));
    }
    if remedies {
        table = table.column(Column::text("Remedy"));
    }
    if costs {
        table = table.column(Column::money("Cost each", currency));
    }
    let row = |row: &&Row| {
        let mut cells = vec![Cell::name(&*row.machine), Cell::count(u64::from(row.count))];
        if kits {
            cells.push(Cell::text(words(row.kit.as_deref(), row.season.as_deref())));
        }
        if !crossed {
            cells.push(verdict(row));
        }
        if remedies {
            cells.push(remedy(row));
        }
        if costs {
            cells.push(Cell::maybe(row.outcome.cost, |cost| {
                Cell::money(cost, currency)
            }));
        }
        cells
    };
    table.rows(rows.iter().map(row))
}

/// Whether a remedy was looked for, found or not.
fn looked_for(row: &Row) -> bool {
    row.outcome.remedy.is_some() || row.outcome.binds.is_some()
}

/// The remedy of a row; that none was found is said, and nothing where none is needed.
fn remedy(row: &Row) -> Cell {
    match &row.outcome.remedy {
        Some(remedy) => Cell::text(remedy),
        None if falls(row) => Cell::text(match &row.outcome.binds {
            Some(binds) => format!("none found: {binds}"),
            None => "none found".to_owned(),
        })
        .dim(),
        None => Cell::empty(),
    }
}

/// Sums by kit and season.
fn sums(groups: &[Group], currency: &str) -> Table {
    let money = |cost: Money| Cell::money(cost, currency);
    let row = |g: &Group| {
        [
            Cell::name(words(g.kit.as_deref(), g.season.as_deref())),
            Cell::count(g.machines),
            Cell::count(g.keeps_up),
            Cell::count(g.carries),
            Cell::count(g.falls_short),
            Cell::maybe(g.kits_cost, money),
            money(g.remedies_cost),
            money(g.cost),
        ]
    };
    let table = Table::new("By kit")
        .columns([
            Column::name("Kit"),
            Column::figures("Machines"),
            Column::figures("Keep up"),
            Column::figures("Carry"),
            Column::figures("Short"),
            Column::money("Kits", currency),
            Column::money("Remedies", currency),
            Column::money("Sum", currency),
        ])
        .rows(groups.iter().map(row));
    let sum = |of: fn(&Group) -> u64| groups.iter().map(of).sum::<u64>();
    let unpriced = match sum(|g| g.unpriced) {
        0 => None,
        n => Some(format!(
            "Without the remedies of {}, which have a part without a price.",
            machines(n)
        )),
    };
    let unmended = match sum(|g| g.unmended) {
        0 => None,
        n => Some(format!("For {} there is no remedy in it.", machines(n))),
    };
    let with_kits = groups.iter().any(|g| g.kit.is_some());
    let fitting = with_kits.then(|| {
        "Kits at their own price where they have one, which may include fitting; lists to buy are parts alone."
            .to_owned()
    });
    let notes: Vec<String> = fitting
        .into_iter()
        .chain(unpriced)
        .chain(unmended)
        .collect();
    if notes.is_empty() {
        table
    } else {
        table.note(notes.join(" "))
    }
}

/// What to buy for a kit on all machines.
fn shopping(group: &Group, currency: &str) -> Table {
    let line = |part: &Part| quote::Line {
        name: part.name.clone(),
        count: u32::try_from(part.count).unwrap_or(u32::MAX),
        each: part.each,
    };
    let lines: Vec<quote::Line> = group.parts.iter().map(line).collect();
    let title = format!(
        "To buy: {}",
        words(group.kit.as_deref(), group.season.as_deref())
    );
    quote::table(&title, &lines, currency)
}
