//! Brackets that nothing closes.

use super::Slip;
use crate::description::scan::quoted_length;

/// A bracket that is open at some place.
pub(super) struct Open {
    pub(super) at: usize,
    pub(super) bracket: u8,
    pub(super) closed_later: bool,
}

impl Open {
    /// The bracket as a slip of its own, where nothing closes it.
    pub(super) fn slip(&self) -> Slip {
        let (name, bracket, end) = self.names();
        Slip {
            at: self.at..self.at + 1,
            what: format!("the {name} \"{bracket}\" is not closed"),
            hint: format!("close it with `{end}`"),
        }
    }

    /// What it is called, itself, and what closes it.
    fn names(&self) -> (&'static str, char, char) {
        match self.bracket {
            b'[' => ("bracket", '[', ']'),
            _ => ("brace", '{', '}'),
        }
    }
}

/// The innermost bracket that is open at `at`.
pub(super) fn open_at(text: &str, at: usize) -> Option<Open> {
    let bytes = text.as_bytes();
    let mut open: Vec<Open> = Vec::new();
    let mut there: Option<Open> = None;
    let (mut i, mut token) = (0, true);
    while let Some(&byte) = bytes.get(i) {
        if i >= at && there.is_none() {
            let inner = open.last()?;
            there = Some(Open { ..*inner });
        }
        let in_brackets = !open.is_empty();
        let mut next = i + 1;
        match byte {
            b'[' | b'{' if token || in_brackets => open.push(Open {
                at: i,
                bracket: byte,
                closed_later: false,
            }),
            b']' | b'}' => {
                let closes = open.pop_if(|o| o.names().2 == char::from(byte));
                if let (Some(there), Some(closed)) = (&mut there, closes)
                    && closed.at == there.at
                {
                    there.closed_later = true;
                    break;
                }
            }
            b'"' | b'\'' if token => {
                next = i + quoted_length(&text[i..], char::from(byte)).unwrap_or(1);
            }
            b'#' if i == 0 || b" \n".contains(&bytes[i - 1]) => {
                next = text[i..].find('\n').map_or(text.len(), |n| i + n)
            }
            _ => {}
        }
        // where a value may begin: at the start of a line, after a dash, a colon, a comma, a bracket
        token = match byte {
            b' ' => token || i.checked_sub(1).is_some_and(|p| b":-".contains(&bytes[p])),
            b'\n' => true,
            b',' | b'[' | b'{' => in_brackets || token,
            _ => false,
        };
        i = next;
    }
    there.or_else(|| open.pop())
}
