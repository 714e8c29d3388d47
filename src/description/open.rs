//! Bytes to text: size, encoding, line ends, unprintable characters.

use crate::problem::{Problem, Problems, TextProblem, text::MOST_BYTES};

/// The text of a file, with plain line ends and without a byte order mark.
///
/// On a problem, the text as far as it can be shown comes with it.
pub(super) fn text(bytes: &[u8]) -> Result<String, (String, Problems)> {
    if bytes.len() as u64 > MOST_BYTES {
        let problem = TextProblem::TooLarge { most: MOST_BYTES };
        return Err((String::new(), Problem::whole(problem).into()));
    }
    let bytes = bytes.strip_prefix(b"\xef\xbb\xbf").unwrap_or(bytes);
    let text = match std::str::from_utf8(bytes) {
        Ok(text) => text,
        Err(e) => {
            let at = e.valid_up_to();
            let byte = bytes.get(at).copied().unwrap_or_default();
            let shown = String::from_utf8_lossy(bytes).replace("\r\n", "\n");
            // the part before the byte is valid: its length with plain line ends is where the mark goes
            let before = String::from_utf8_lossy(&bytes[..at])
                .replace("\r\n", "\n")
                .len();
            let problem = Problem::text(
                TextProblem::NotUtf8 { byte },
                before..before + '\u{fffd}'.len_utf8(),
            );
            return Err((shown, problem.into()));
        }
    };
    let text = if text.contains('\r') {
        text.replace("\r\n", "\n").replace('\r', "\n")
    } else {
        text.to_owned()
    };
    if let Some((at, found)) = text.char_indices().find(|(_, c)| unprintable(*c)) {
        let problem = Problem::text(
            TextProblem::Unprintable { found },
            at..at + found.len_utf8(),
        );
        return Err((text, problem.into()));
    }
    Ok(text)
}

/// Whether no text may hold a character, written out or as an escape.
pub(crate) fn unprintable(c: char) -> bool {
    (c.is_control() && c != '\n' && c != '\t') || matches!(c, '\u{2028}' | '\u{2029}' | '\u{feff}')
}
