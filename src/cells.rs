//! A table of comma-separated cells, before it is taken apart.

/// What is wrong with a quotation mark.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum StrayMark {
    /// The mark at this byte begins a cell that nothing ends.
    NotClosed(usize),
    /// At this byte stands text between a cell's last mark and the next comma.
    TextAfter(usize),
}

impl StrayMark {
    /// The byte to point at.
    #[must_use]
    pub fn byte(self) -> usize {
        match self {
            StrayMark::NotClosed(at) | StrayMark::TextAfter(at) => at,
        }
    }

    /// What it is, and what would do.
    #[must_use]
    pub fn told(self) -> (&'static str, &'static str) {
        match self {
            StrayMark::NotClosed(_) => (
                "a quotation mark begins a cell and none ends it",
                "end the cell with a quotation mark, or write this one twice within a quoted cell",
            ),
            StrayMark::TextAfter(_) => (
                "text between a closing quotation mark and the comma",
                "put the whole cell between the marks, and a mark within it twice",
            ),
        }
    }
}

/// The first stray quotation mark of a table; lines that begin with `#` are remarks.
///
/// A cell whose first character is `"` goes on to the next `"` that is not doubled, over commas and line ends; then comes
/// a comma, the line's end or blanks. Source: RFC 4180, section 2, rules 5 to 7 (from memory).
#[must_use]
pub fn stray_mark(text: &str) -> Option<StrayMark> {
    let mut at = 0;
    let mut begins_line = true;
    while at < text.len() {
        // a cell begins here
        let rest = &text[at..];
        let mut length = 0;
        if begins_line && rest.starts_with('#') {
            length = rest.find('\n').unwrap_or(rest.len());
        } else if rest.starts_with('"') {
            let Some(quoted) = quoted(rest) else {
                return Some(StrayMark::NotClosed(at));
            };
            let after = rest[quoted..].trim_start_matches([' ', '\t', '\r']);
            if !(after.is_empty() || after.starts_with([',', '\n'])) {
                return Some(StrayMark::TextAfter(text.len() - after.len()));
            }
            length = quoted;
        }
        let end = rest[length..].find([',', '\n']).map(|n| at + length + n);
        let Some(end) = end else { break };
        begins_line = text[end..].starts_with('\n');
        at = end + 1;
    }
    None
}

/// Bytes of a cell from its first quotation mark to its last.
fn quoted(cell: &str) -> Option<usize> {
    let mut marks = cell.match_indices('"').map(|(at, _)| at).skip(1).peekable();
    while let Some(at) = marks.next() {
        match marks.peek() {
            Some(next) if *next == at + 1 => _ = marks.next(),
            _ => return Some(at + 1),
        }
    }
    None
}

/// Whether a header was written with another separator than a comma: semicolons or tabs.
#[must_use]
pub fn otherwise_separated(header: &str) -> bool {
    !header.contains(',') && header.contains([';', '\t'])
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn marks_that_stand_as_they_should_pass() {
        for text in [
            "",
            "a,b\n",
            "\"a\",\"b\"\n",
            "\"a, \"\"b\"\"\nc\",d\r\n\"e\"\r\n",
            "5\" pipe,a\"b\n",
            "# \"a remark\nx,\"y\" ,z\n",
            "\"\",\"\"",
        ] {
            assert_eq!(stray_mark(text), None, "{text:?}");
        }
    }

    #[test]
    fn stray_marks_are_found_where_they_stand() {
        for (text, found) in [
            ("a,\"b\nc,d\n", StrayMark::NotClosed(2)),
            ("a,\"b\n\"c\",d\n", StrayMark::TextAfter(6)),
            ("a,\"b\"x\n", StrayMark::TextAfter(5)),
            ("\"", StrayMark::NotClosed(0)),
            ("\"a\"\"", StrayMark::NotClosed(0)),
            ("a\n# \"\n\"é", StrayMark::NotClosed(6)),
        ] {
            assert_eq!(stray_mark(text), Some(found), "{text:?}");
        }
    }

    #[test]
    fn other_separators_are_seen() {
        assert!(otherwise_separated("machine;build"));
        assert!(otherwise_separated("machine\tbuild"));
        assert!(!otherwise_separated("machine,build;x"));
        assert!(!otherwise_separated("machine"));
    }
}
