//! What was assumed: a table, or for a page in short, by the ground it stands on.

use crate::build::Assumed;
use crate::report::{Cell, Column, Item, Report, Table, Tone};

/// One row a value; none leaves the report as it is.
#[must_use]
pub fn table(report: Report, assumed: &[Assumed]) -> Report {
    if assumed.is_empty() {
        return report;
    }
    let rows = assumed.iter().map(|a| {
        [
            Cell::name(&a.what),
            Cell::text(&a.value),
            Cell::text(&a.origin).dim(),
        ]
    });
    report.table(
        Table::new("Assumed")
            .columns([
                Column::name("What"),
                Column::text("Value"),
                Column::text("Ground"),
            ])
            .rows(rows),
    )
}

/// One entry a ground, with every value that stands on it.
#[must_use]
pub fn short(report: Report, assumed: &[Assumed]) -> Report {
    let values = assumed
        .iter()
        .map(|a| (a.origin.as_str(), format!("{} {}", a.what, a.value)));
    report.list("Assumed", by_ground(values))
}

/// Texts under the ground that they share, in the order in which the grounds first occur.
pub(super) fn by_ground<'a>(pairs: impl Iterator<Item = (&'a str, String)>) -> Vec<Item> {
    let mut groups: Vec<(&str, Vec<String>)> = Vec::new();
    for (ground, text) in pairs {
        match groups.iter_mut().find(|(other, _)| *other == ground) {
            Some((_, texts)) => texts.push(text),
            None => groups.push((ground, vec![text])),
        }
    }
    let items = groups.into_iter();
    items
        .map(|(ground, texts)| Item::new(texts.join("; ")).lead(Tone::Plain, ground))
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn values_of_one_ground_stand_together() {
        let pairs = [("practice", "a 1"), ("label", "b 2"), ("practice", "c 3")];
        let items = by_ground(pairs.into_iter().map(|(g, t)| (g, t.to_owned())));
        assert_eq!(items.len(), 2);
        assert_eq!(
            (items[0].lead.as_deref(), items[0].text.as_str()),
            (Some("practice"), "a 1; c 3")
        );
    }
}
