//! One line of a text that is no YAML, and the slips within it.

use super::Slip;
use crate::problem::words::space_after_colon;
use std::ops::Range;

/// A line with something on it.
#[derive(Clone, Copy)]
pub(super) struct Line<'a> {
    /// Byte of its first character.
    pub(super) start: usize,
    /// All of it.
    pub(super) whole: &'a str,
}

impl<'a> Line<'a> {
    pub(super) fn indent(self) -> usize {
        self.whole.len() - self.whole.trim_start_matches(' ').len()
    }

    /// What is written, without indentation, the dashes of a list, and a remark; and its bytes.
    pub(super) fn content(self) -> (Range<usize>, &'a str) {
        let from = self.whole.trim_start_matches([' ', '-']);
        let at = self.start + self.whole.len() - from.len();
        let content = from.split(" #").next().unwrap_or(from).trim_end();
        (at..at + content.len(), content)
    }

    pub(super) fn is_written(self) -> bool {
        let written = self.whole.trim_start();
        !written.is_empty() && !written.starts_with('#')
    }

    pub(super) fn has_dash(self) -> bool {
        self.whole.trim_start().starts_with('-')
    }

    /// `key:value`, no space after the colon.
    pub(super) fn joined(self) -> Option<Slip> {
        let (at, content) = self.content();
        let (key, _) = content.split_once(':').filter(|(key, _)| is_name(key))?;
        let hint = space_after_colon(content)?;
        let what = "no space after the colon";
        Some(Slip::new(at.start..at.start + key.len() + 1, what, hint))
    }

    /// `-entry`, no space after the dash.
    pub(super) fn stuck(self) -> Option<Slip> {
        let entry = self.whole.trim_start().strip_prefix('-')?;
        let dash = self.start + self.indent();
        let stuck = entry.starts_with(|c: char| c.is_alphabetic() || "{[\"'".contains(c));
        stuck.then(|| {
            let hint = "put a space after it: `- entry`".to_owned();
            Slip::new(dash..dash + 1, "no space after the dash", hint)
        })
    }

    /// A key without a colon.
    pub(super) fn without_colon(self) -> Option<Slip> {
        let (at, content) = self.content();
        let (key, value) = content.split_once([' ', '=', ';']).unwrap_or((content, ""));
        if !is_name(key) || value.contains(": ") || value.ends_with(':') {
            return None;
        }
        let written = format!("{key}: {}", value.trim_start_matches([' ', '=', ';']));
        let hint = format!("write `{}`", written.trim_end());
        Some(Slip::new(at, "no colon after the key", hint))
    }

    /// An entry of a list without its dash.
    pub(super) fn without_dash(self) -> Slip {
        let hint = "put `- ` before it, as before each entry of a list".to_owned();
        Slip::new(self.content().0, "no dash before the entry", hint)
    }

    /// Whether it is a mapping in braces, and no entry of a list.
    pub(super) fn is_bare_brace(self) -> bool {
        self.content().1.starts_with('{') && !self.has_dash()
    }

    /// A line that stands deeper than the one above it, which has a value.
    pub(super) fn too_deep(self, above: Line<'_>) -> Option<Slip> {
        let (at, over) = above.content();
        let column = match self.has_dash() {
            true => above.indent(),
            false => at.start - above.start,
        };
        let deeper = self.indent() > column && !over.is_empty() && !over.ends_with(':');
        deeper.then(|| {
            let what = "this line stands deeper than the one above, which has a value already";
            let hint = format!("{}, or take that value off", self.align());
            Slip::new(self.content().0, what, hint)
        })
    }

    /// A line that begins where none above it does.
    pub(super) fn out_of_line(self, above: Line<'_>) -> Slip {
        let list = above.has_dash() && self.indent() == above.indent();
        let (what, hint) = match self.has_dash() {
            true if !above.has_dash() => (
                "a list entry where a key should be",
                "put it below the key of its list".into(),
            ),
            false if list => (
                "a key where a list entry should be",
                format!("put `- ` before it, or {}", self.align()),
            ),
            _ => (
                "the indentation of this line fits none of the lines above",
                self.align(),
            ),
        };
        Slip::new(self.content().0, what, hint)
    }

    /// `key: text: more`, or `key {more: text`, and the reader gave up at the second colon.
    pub(super) fn second_colon(self, place: usize) -> Option<Slip> {
        let (at, content) = self.content();
        let (key, value) = content.split_once(": ")?;
        let from = at.start + key.len() + 2;
        if place <= from {
            return None;
        }
        if let Some(bracket) = key.find(['{', '[']) {
            let name = key[..bracket].trim_end();
            let hint = format!("write `{name}: {}`", &content[bracket..]);
            let at = at.start..at.start + name.len();
            return Some(Slip::new(at, "no colon after the key", hint));
        }
        let inner = value.split(':').next().unwrap_or_default();
        let hint = match is_name(inner) && !inner.contains(' ') {
            true => format!("put keys into braces, `{key}: {{{value}}}`, a text into quotes"),
            false => format!("put a text that holds `: ` into quotes: `{key}: \"{value}\"`"),
        };
        Some(Slip::new(from..at.end, "a second colon after a key", hint))
    }

    /// What would put an indentation right.
    pub(super) fn align(self) -> String {
        let key = self.content().1.split(':').next().unwrap_or_default();
        match self.has_dash() {
            true => "align its dash with those of its list".into(),
            false if is_name(key) => format!("align `{key}` with the keys it belongs with"),
            false => "align it with the lines it belongs with".into(),
        }
    }
}

/// Whether a text could be a key or a name.
fn is_name(text: &str) -> bool {
    text.starts_with(char::is_alphanumeric)
        && text
            .chars()
            .all(|c| c.is_alphanumeric() || " _-".contains(c))
}
