//! A report as text for a terminal or a pipe: rules only, no walls, no blanks at line ends.

use super::model::{Block, Fact, Item, Report, Verdict};
use super::table::{Align, Tone};
use super::text_table::{self, Layout};
use crate::chart::terminal;
use anstyle::{AnsiColor, Color, Style as Ansi};

/// How a report is written as text.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Style {
    /// Columns: no line is longer, except one that is kept as it is.
    pub width: usize,
    /// Only characters of ASCII.
    pub ascii: bool,
    /// With the colours of a terminal.
    pub colour: bool,
    /// With charts in characters.
    pub charts: bool,
}

impl Default for Style {
    /// For a pipe: 80 columns, no colour, no charts.
    fn default() -> Style {
        Style {
            width: 80,
            ascii: false,
            colour: false,
            charts: false,
        }
    }
}

/// Least width that is heeded; below it lines may be cut by the terminal.
pub const LEAST_WIDTH: usize = 30;

/// The report as text, ending with a line feed.
#[must_use]
pub fn render(report: &Report, style: &Style) -> String {
    let style = Style {
        width: style.width.max(LEAST_WIDTH),
        ..*style
    };
    let mut page = Page {
        style,
        lines: Vec::new(),
        after_heading: false,
    };
    page.head(report);
    for block in &report.blocks {
        page.block(block);
    }
    let mut text = String::new();
    for line in page.lines {
        text.push_str(line.trim_end());
        text.push('\n');
    }
    text
}

struct Page {
    style: Style,
    lines: Vec<String>,
    after_heading: bool,
}

impl Page {
    fn head(&mut self, report: &Report) {
        if !report.title.is_empty() {
            self.wrapped(&report.title, Ansi::new().bold());
        }
        if let Some(subtitle) = &report.subtitle {
            self.wrapped(subtitle, ansi(Tone::Dim));
        }
        if let Some(name) = &report.made_for {
            self.wrapped(&format!("For {name}"), ansi(Tone::Dim));
        }
        if let Some(date) = &report.date {
            self.wrapped(date, ansi(Tone::Dim));
        }
    }

    fn block(&mut self, block: &Block) {
        match block {
            Block::Chart(_) if !self.style.charts => return,
            _ => self.gap(),
        }
        match block {
            Block::Verdicts(verdicts) => verdicts.iter().for_each(|v| self.verdict(v)),
            Block::Heading(_, text) => {
                self.wrapped(text, Ansi::new().bold());
                self.after_heading = true;
            }
            Block::Paragraph(text) => self.wrapped(text, Ansi::new()),
            Block::Facts(facts) => self.facts(facts),
            Block::Table(table) => {
                if !table.title.is_empty() {
                    self.wrapped(&table.title, Ansi::new().bold());
                }
                self.lines.extend(text_table::render(table, &self.style));
                if let Some(note) = &table.note {
                    self.wrapped(note, ansi(Tone::Dim));
                }
            }
            Block::Chart(chart) => {
                self.wrapped(&chart.title, Ansi::new().bold());
                let style = terminal::Style {
                    width: self.style.width,
                    ascii: self.style.ascii,
                };
                let drawn = terminal::draw(chart, style);
                self.lines.extend(drawn);
                if let Some(note) = &chart.note {
                    self.wrapped(note, ansi(Tone::Dim));
                }
            }
            Block::List(items) => items.iter().for_each(|item| self.item(item)),
            Block::Cautions(cautions) => {
                self.wrapped("Cautions", Ansi::new().bold());
                cautions
                    .iter()
                    .for_each(|text| self.hanging("!", text, ansi(Tone::Warn)));
            }
            Block::Lines(lines) => {
                self.lines
                    .extend(lines.iter().map(|line| clean(line, self.style.ascii)));
            }
        }
    }

    /// One empty line between blocks, none after a heading.
    fn gap(&mut self) {
        if !std::mem::take(&mut self.after_heading) && !self.lines.is_empty() {
            self.lines.push(String::new());
        }
    }

    fn verdict(&mut self, verdict: &Verdict) {
        let caption = verdict
            .caption
            .as_ref()
            .map(|c| format!("{c}: "))
            .unwrap_or_default();
        let lead = format!("{caption}{}", verdict.lead);
        let separator = if lead.is_empty() || verdict.sentence.is_empty() {
            ""
        } else {
            ": "
        };
        let text = format!("{lead}{separator}{}", verdict.sentence);
        let lines = self.wrap(&text, self.style.width);
        self.paint(lines, ansi(verdict.tone).bold());
    }

    fn facts(&mut self, facts: &[Fact]) {
        let columns = [Layout::shrinking(Align::Left), Layout::fixed(Align::Left)];
        let rows = facts.iter().map(|fact| {
            vec![
                (fact.label.clone(), Tone::Dim),
                (fact.value.text.clone(), fact.value.tone),
            ]
        });
        self.lines
            .extend(text_table::lay_out(&columns, rows.collect(), &self.style));
    }

    fn item(&mut self, item: &Item) {
        let lead = item
            .lead
            .as_ref()
            .map(|lead| format!("{lead}: "))
            .unwrap_or_default();
        let source = item
            .source
            .as_ref()
            .map(|s| format!(" [{s}]"))
            .unwrap_or_default();
        self.hanging(
            "-",
            &format!("{lead}{}{source}", item.text),
            ansi(item.tone),
        );
        if let Some(code) = &item.code {
            self.lines
                .push(format!("    {}", clean(code, self.style.ascii)));
        }
    }

    /// A text with a sign before its first line and the others indented.
    fn hanging(&mut self, sign: &str, text: &str, ansi: Ansi) {
        let lines = self.wrap(text, self.style.width.saturating_sub(2));
        let lines = lines
            .into_iter()
            .enumerate()
            .map(|(index, line)| format!("{} {line}", if index == 0 { sign } else { " " }));
        let lines = lines.collect();
        self.paint(lines, ansi);
    }

    fn wrapped(&mut self, text: &str, ansi: Ansi) {
        let lines = self.wrap(text, self.style.width);
        self.paint(lines, ansi);
    }

    fn wrap(&self, text: &str, width: usize) -> Vec<String> {
        text_table::wrap(&clean(text, self.style.ascii), width)
    }

    fn paint(&mut self, lines: Vec<String>, ansi: Ansi) {
        let colour = self.style.colour && ansi != Ansi::new();
        self.lines.extend(lines.into_iter().map(|line| {
            if colour {
                format!("{}{line}{}", ansi.render(), ansi.render_reset())
            } else {
                line
            }
        }));
    }
}

/// The terminal's style of a tone.
fn ansi(tone: Tone) -> Ansi {
    let colour = |colour| Ansi::new().fg_color(Some(Color::Ansi(colour)));
    match tone {
        Tone::Plain => Ansi::new(),
        Tone::Dim => Ansi::new().dimmed(),
        Tone::Good => colour(AnsiColor::Green),
        Tone::Warn => colour(AnsiColor::Yellow),
        Tone::Bad => colour(AnsiColor::Red),
    }
}

/// A text without anything that could steer a terminal: control characters and marks of writing
/// direction become spaces. With `ascii`, other signs are spelled in ASCII.
#[must_use]
pub fn clean(text: &str, ascii: bool) -> String {
    let mut cleaned = String::with_capacity(text.len());
    for character in text.chars() {
        match character {
            c if c.is_control() => cleaned.push(' '),
            '\u{202A}'..='\u{202E}' | '\u{2066}'..='\u{2069}' | '\u{2028}' | '\u{2029}' => {
                cleaned.push(' ');
            }
            c if ascii && !c.is_ascii() => cleaned.push_str(spelled(c)),
            c => cleaned.push(c),
        }
    }
    cleaned
}

/// A sign spelled in ASCII.
fn spelled(character: char) -> &'static str {
    match character {
        '\u{2212}' | '–' | '—' | '─' => "-",
        'Ω' => "ohm",
        '²' => "2",
        '°' => "",
        '±' => "+-",
        '×' => "x",
        '·' | '•' => ".",
        '…' => "...",
        '‘' | '’' => "'",
        '“' | '”' => "\"",
        '→' => "->",
        '≥' => ">=",
        '≤' => "<=",
        '\u{a0}' => " ",
        'é' | 'è' | 'ê' => "e",
        'ä' | 'à' | 'á' => "a",
        'ö' | 'ó' => "o",
        'ü' => "u",
        'ß' => "ss",
        _ => "?",
    }
}
