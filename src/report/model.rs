//! The report: a title and blocks in reading order, built up by chained calls.

use super::table::{Cell, Table, Tone};
use crate::chart::Chart;

/// A report.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Report {
    /// Title: the build's name, most often.
    pub title: String,
    /// One line under it.
    pub subtitle: Option<String>,
    /// For whom it was made, if the user says.
    pub made_for: Option<String>,
    /// Its date, if the user gives one; written as given.
    pub date: Option<String>,
    /// Content in reading order.
    pub blocks: Vec<Block>,
}

/// One piece of a report.
#[derive(Clone, Debug, PartialEq)]
pub enum Block {
    /// The answer; several stand side by side where there is room.
    Verdicts(Vec<Verdict>),
    /// A heading: level 1 a section, level 2 a part of it.
    Heading(u8, String),
    /// Running text.
    Paragraph(String),
    /// A few figures that matter most, each with its label.
    Facts(Vec<Fact>),
    /// A table.
    Table(Table),
    /// A chart.
    Chart(Chart),
    /// A list: changes, findings, notes.
    List(Vec<Item>),
    /// Cautions: set apart so that they are not overlooked.
    Cautions(Vec<String>),
    /// Lines kept as they are: workings, commands.
    Lines(Vec<String>),
}

/// The answer in one sentence.
#[derive(Clone, Debug, PartialEq)]
pub struct Verdict {
    /// What it is the verdict of, where there are several: `Before`.
    pub caption: Option<String>,
    /// Good, warning or bad; the words say it too.
    pub tone: Tone,
    /// The verdict itself, two or three words: `Falls short`.
    pub lead: String,
    /// The sentence after it.
    pub sentence: String,
}

/// A labelled figure.
#[derive(Clone, Debug, PartialEq)]
pub struct Fact {
    /// Its label.
    pub label: String,
    /// The figure with its unit.
    pub value: Cell,
}

/// One entry of a list.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Item {
    /// How much it matters.
    pub tone: Tone,
    /// A word or two before it, set off: `fault`, `overcharge`.
    pub lead: Option<String>,
    /// What it says.
    pub text: String,
    /// A command or setting that belongs to it, kept as it is.
    pub code: Option<String>,
    /// What it rests on.
    pub source: Option<String>,
}

impl Item {
    /// An entry of plain text.
    pub fn new(text: impl Into<String>) -> Item {
        Item {
            text: text.into(),
            ..Item::default()
        }
    }
    /// With a word before it and a tone.
    #[must_use]
    pub fn lead(mut self, tone: Tone, lead: impl Into<String>) -> Item {
        self.tone = tone;
        self.lead = Some(lead.into());
        self
    }
    /// With a command or setting, shown as typed.
    #[must_use]
    pub fn code(mut self, code: impl Into<String>) -> Item {
        self.code = Some(code.into());
        self
    }
    /// With what it rests on.
    #[must_use]
    pub fn source(mut self, source: impl Into<String>) -> Item {
        self.source = Some(source.into());
        self
    }
}

impl Verdict {
    /// A verdict of a tone: the words that say it, and the sentence after them.
    pub fn new(tone: Tone, lead: impl Into<String>, sentence: impl Into<String>) -> Verdict {
        Verdict {
            caption: None,
            tone,
            lead: lead.into(),
            sentence: sentence.into(),
        }
    }
    /// With what it is the verdict of.
    #[must_use]
    pub fn caption(mut self, caption: impl Into<String>) -> Verdict {
        self.caption = Some(caption.into());
        self
    }
}

impl Report {
    /// An empty report.
    pub fn new(title: impl Into<String>) -> Report {
        Report {
            title: title.into(),
            ..Report::default()
        }
    }
    /// With a line under the title.
    #[must_use]
    pub fn subtitle(mut self, subtitle: impl Into<String>) -> Report {
        self.subtitle = Some(subtitle.into());
        self
    }
    /// With the name of whom it is for and a date, as far as the user gives them.
    #[must_use]
    pub fn made_for(mut self, name: Option<String>, date: Option<String>) -> Report {
        self.made_for = name;
        self.date = date;
        self
    }
    /// With any block.
    #[must_use]
    pub fn block(mut self, block: Block) -> Report {
        self.blocks.push(block);
        self
    }
    /// With one verdict.
    #[must_use]
    pub fn verdict(self, tone: Tone, lead: impl Into<String>, text: impl Into<String>) -> Report {
        self.block(Block::Verdicts(vec![Verdict::new(tone, lead, text)]))
    }
    /// With a section's heading.
    #[must_use]
    pub fn heading(self, text: impl Into<String>) -> Report {
        self.block(Block::Heading(1, text.into()))
    }
    /// With a heading inside a section.
    #[must_use]
    pub fn subheading(self, text: impl Into<String>) -> Report {
        self.block(Block::Heading(2, text.into()))
    }
    /// With running text.
    #[must_use]
    pub fn paragraph(self, text: impl Into<String>) -> Report {
        self.block(Block::Paragraph(text.into()))
    }
    /// With labelled figures; none leaves the report as it is.
    #[must_use]
    pub fn facts<L: Into<String>>(self, facts: impl IntoIterator<Item = (L, Cell)>) -> Report {
        let facts: Vec<Fact> = facts
            .into_iter()
            .map(|(label, value)| Fact {
                label: label.into(),
                value,
            })
            .collect();
        if facts.is_empty() {
            self
        } else {
            self.block(Block::Facts(facts))
        }
    }
    /// With a table. Its title, if it has one, becomes a heading above it.
    #[must_use]
    pub fn table(self, table: Table) -> Report {
        self.block(Block::Table(table))
    }
    /// With a chart.
    #[must_use]
    pub fn chart(self, chart: Chart) -> Report {
        self.block(Block::Chart(chart))
    }
    /// With a list under a heading; none leaves out the heading too.
    #[must_use]
    pub fn list(self, heading: &str, items: impl IntoIterator<Item = Item>) -> Report {
        let items: Vec<Item> = items.into_iter().collect();
        if items.is_empty() {
            return self;
        }
        let report = if heading.is_empty() {
            self
        } else {
            self.heading(heading)
        };
        report.block(Block::List(items))
    }
    /// With cautions under their own heading; none leaves the report as it is.
    #[must_use]
    pub fn cautions<T: Into<String>>(self, cautions: impl IntoIterator<Item = T>) -> Report {
        let cautions: Vec<String> = cautions.into_iter().map(Into::into).collect();
        if cautions.is_empty() {
            self
        } else {
            self.block(Block::Cautions(cautions))
        }
    }
    /// With lines kept as they are.
    #[must_use]
    pub fn lines<T: Into<String>>(self, lines: impl IntoIterator<Item = T>) -> Report {
        self.block(Block::Lines(lines.into_iter().map(Into::into).collect()))
    }
    /// With the blocks of another report after its own; the other's title becomes a heading.
    #[must_use]
    pub fn append(mut self, other: Report) -> Report {
        if !other.title.is_empty() {
            self.blocks.push(Block::Heading(1, other.title));
        }
        self.blocks.extend(other.subtitle.map(Block::Paragraph));
        self.blocks
            .extend(other.blocks.into_iter().map(|block| match block {
                Block::Heading(level, text) => Block::Heading(level.saturating_add(1), text),
                other => other,
            }));
        self
    }
    /// The tables, in order.
    pub fn tables(&self) -> impl Iterator<Item = &Table> {
        self.blocks.iter().filter_map(|block| match block {
            Block::Table(table) => Some(table),
            _ => None,
        })
    }
    /// The charts, in order.
    pub fn charts(&self) -> impl Iterator<Item = &Chart> {
        self.blocks.iter().filter_map(|block| match block {
            Block::Chart(chart) => Some(chart),
            _ => None,
        })
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn what_is_empty_leaves_no_heading() {
        let report = Report::new("t")
            .list("Changes", [])
            .cautions(Vec::<String>::new())
            .facts(Vec::<(String, Cell)>::new());
        assert!(report.blocks.is_empty());
    }

    #[test]
    fn an_appended_report_becomes_a_section() {
        let wire = Report::new("Wire")
            .subtitle("s")
            .heading("Totals")
            .table(Table::new("T"));
        let all = Report::new("Sheet").paragraph("p").append(wire);
        let headings: Vec<(u8, &str)> = all
            .blocks
            .iter()
            .filter_map(|block| match block {
                Block::Heading(level, text) => Some((*level, text.as_str())),
                _ => None,
            })
            .collect();
        assert_eq!(headings, [(1, "Wire"), (2, "Totals")]);
        assert_eq!(all.tables().count(), 1);
        assert_eq!(all.blocks.len(), 5);
    }
}
