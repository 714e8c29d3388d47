//! Paths: how error messages and `--set` name a value, `accessories[2].duty.governed`.

use std::fmt::Write as _;

/// One step of a path.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Step {
    /// A key of a mapping.
    Key(String),
    /// An entry of a list, counted from 0.
    Index(usize),
    /// An entry of a list by its name, its part or its id.
    Named(String),
}

/// The path of a key below a path.
#[must_use]
pub fn key(path: &str, key: &str) -> String {
    let plain = !key.is_empty() && key.trim() == key && !key.contains(['.', '[', ']', '=', '"']);
    let mut out = String::with_capacity(path.len() + key.len() + 3);
    out.push_str(path);
    if !path.is_empty() {
        out.push('.');
    }
    if plain {
        out.push_str(key);
    } else {
        let _ = write!(
            out,
            "\"{}\"",
            key.replace('\\', "\\\\").replace('"', "\\\"")
        );
    }
    out
}

/// The path of a list's entry below a path.
#[must_use]
pub fn index(path: &str, index: usize) -> String {
    format!("{path}[{index}]")
}

/// Takes a path apart. The empty path is the file itself.
///
/// # Errors
/// The byte at which it is no path.
pub fn steps(path: &str) -> Result<Vec<Step>, usize> {
    let mut out = Vec::new();
    let mut rest = path;
    while !rest.is_empty() {
        let at = path.len() - rest.len();
        if let Some(inner) = rest.strip_prefix('[') {
            let end = inner.find(']').ok_or(at)?;
            let name = inner[..end].trim();
            out.push(match name.parse() {
                Ok(number) => Step::Index(number),
                Err(_) if name.is_empty() => return Err(at),
                Err(_) => Step::Named(name.to_string()),
            });
            rest = &inner[end + 1..];
            continue;
        }
        let begins = match rest.strip_prefix('.') {
            Some(after) if at > 0 => after,
            None if at == 0 => rest,
            _ => return Err(at),
        };
        let (key, after) = one_key(begins).ok_or(path.len() - begins.len())?;
        out.push(Step::Key(key));
        rest = after;
    }
    Ok(out)
}

/// The key at the beginning of a text, and what follows it.
fn one_key(text: &str) -> Option<(String, &str)> {
    let Some(quoted) = text.strip_prefix('"') else {
        let end = text.find(['.', '[']).unwrap_or(text.len());
        let key = text[..end].trim();
        return (!key.is_empty()).then(|| (key.to_string(), &text[end..]));
    };
    let mut key = String::new();
    let mut chars = quoted.char_indices();
    while let Some((at, c)) = chars.next() {
        match c {
            '"' => return Some((key, &quoted[at + 1..])),
            '\\' => key.push(chars.next()?.1),
            other => key.push(other),
        }
    }
    None
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn paths_are_read_as_they_are_written() {
        let path = key(&index(&key("", "accessories"), 2), "duty");
        assert_eq!(path, "accessories[2].duty");
        for odd in ["a.b", "", " x", "say \"hi\" \\", "c[0]", "d=e", "plain"] {
            let path = key(&path, odd);
            let read = steps(&path).expect("its own path");
            assert_eq!(read.last(), Some(&Step::Key(odd.to_string())), "{path}");
            assert_eq!(read.len(), 4, "{path}");
        }
        let named = steps("accessories[Seat heater].duty").expect("by name");
        assert_eq!(named[1], Step::Named("Seat heater".into()));
        assert_eq!(steps(""), Ok(vec![]));
    }

    #[test]
    fn what_is_no_path_says_where() {
        for (text, at) in [
            (".a", 0),
            ("a..b", 2),
            ("a.", 2),
            ("a[", 1),
            ("a[]", 1),
            ("a[0]b", 4),
            ("a.\"b", 2),
        ] {
            assert_eq!(steps(text), Err(at), "{text}");
        }
    }
}
