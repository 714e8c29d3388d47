//! The lines around the place where a reader gave up, and the slips between them.

use super::Slip;
use super::line::Line;

/// The lines around the place where a reader gave up.
pub(super) struct Near<'a> {
    pub(super) line: Line<'a>,
    /// The last line above it that is not blank nor a remark.
    above: Option<Line<'a>>,
    /// The first such line below it.
    below: Option<Line<'a>>,
    /// The first of the lines right above it that have no colon.
    bare: Option<Line<'a>>,
    /// What stands on the line before the place.
    before: &'a str,
}

impl<'a> Near<'a> {
    pub(super) fn new(text: &'a str, at: usize) -> Self {
        let start = text[..at].rfind('\n').map_or(0, |n| n + 1);
        let mut down = start;
        let mut below = text[start..].split('\n').map(|whole| {
            let start = down;
            down += whole.len() + 1;
            Line { start, whole }
        });
        let line = below.next();
        let without = |line: &Line<'_>| !line.content().1.contains(':');
        Near {
            line: line.unwrap_or(Line { start, whole: "" }),
            above: written_above(text, start).next(),
            below: below.take(MOST_FAR).find(|line| line.is_written()),
            bare: written_above(text, start).take_while(without).last(),
            before: &text[start..at],
        }
    }

    /// A slip within one line.
    pub(super) fn slip(&self, what: &str) -> Option<Slip> {
        let both = || self.above.into_iter().chain([self.line]);
        both()
            .find_map(Line::joined)
            .or_else(|| both().find_map(Line::stuck))
            .or_else(|| match what {
                // the reader took whole lines above for a key
                w if w.contains("simple key") || w.contains("could not find expected") => {
                    self.without_mark()
                }
                w if w.contains("intercepting") => self.line.without_colon(),
                _ => None,
            })
    }

    /// A line above that lacks its colon or its dash, and so runs into those below it.
    fn without_mark(&self) -> Option<Slip> {
        let entry = |line: &Line<'_>| self.line.has_dash() && self.line.indent() == line.indent();
        let brace = self.above.filter(|above| above.is_bare_brace());
        match self.bare.filter(|line| !line.has_dash()) {
            Some(line) if entry(&line) => Some(line.without_dash()),
            Some(line) => line.without_colon(),
            None => brace.map(Line::without_dash),
        }
    }

    /// A slip of lines that are not in brackets: indentation, dashes, and a second colon.
    pub(super) fn of_lines(&self, what: &str) -> Option<Slip> {
        let colon = what.contains("mapping values");
        if what.contains("intercepting") {
            return self.below?.too_deep(self.line);
        }
        let place = self.line.start + self.before.len();
        let (at, content) = self.line.content();
        let key = content.split(':').next().unwrap_or_default();
        if colon && place > at.start + key.len() {
            return self.line.second_colon(place);
        }
        if !colon && (place > at.start || !what.contains("did not find expected")) {
            return None;
        }
        let above = self.above?;
        self.without_mark()
            .or_else(|| self.line.too_deep(above))
            .or_else(|| Some(self.line.out_of_line(above)))
    }
}

/// The lines above a place that are not blank nor a remark, from there up.
fn written_above(text: &str, start: usize) -> impl Iterator<Item = Line<'_>> {
    let mut up = start;
    let lines = std::iter::from_fn(move || {
        let whole = text[..up.checked_sub(1)?].rsplit('\n').next()?;
        up -= whole.len() + 1;
        Some(Line { start: up, whole })
    });
    lines.take(MOST_FAR).filter(|line| line.is_written())
}

/// Lines that are looked at for one that is not blank.
const MOST_FAR: usize = 100;
