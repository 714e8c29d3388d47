//! The grammar of messages: lists in words, and what was meant.

/// How alike two words must be for one to be offered for the other (Jaro-Winkler, 1 is equal).
const ALIKE: f64 = 0.78;

/// Most names that a word is held against: no hand writes more, and a message is not to be waited for.
const MOST_COMPARED: usize = 500;

/// The name most like a word, where one is.
#[must_use]
pub fn nearest<'a>(word: &str, names: impl IntoIterator<Item = &'a str>) -> Option<&'a str> {
    let lower = word.to_lowercase();
    let mut best: Option<(&str, f64)> = None;
    for name in names.into_iter().take(MOST_COMPARED) {
        let alike = strsim::jaro_winkler(&lower, &name.to_lowercase());
        if alike > ALIKE && best.is_none_or(|(_, most)| alike > most) {
            best = Some((name, alike));
        }
    }
    best.map(|(name, _)| name)
}

/// `` `a`, `b` or `c` ``.
#[must_use]
pub fn any_of<S: AsRef<str>>(names: &[S]) -> String {
    let quoted: Vec<String> = names.iter().map(|n| format!("`{}`", n.as_ref())).collect();
    match quoted.split_last() {
        None => "none".into(),
        Some((last, [])) => last.clone(),
        Some((last, rest)) => format!("{} or {last}", rest.join(", ")),
    }
}

/// Most names that a message lists.
const MOST_LISTED: usize = 60;

/// `a, b, c`, plain; of very many the first, and how many more there are.
#[must_use]
pub fn list<S: AsRef<str>>(names: &[S]) -> String {
    let shown: Vec<&str> = names.iter().take(MOST_LISTED).map(AsRef::as_ref).collect();
    let shown = shown.join(", ");
    match names.len().saturating_sub(MOST_LISTED) {
        0 => shown,
        more => format!("{shown} and {more} more"),
    }
}

/// What would do for `key:value`, which YAML reads as one word.
#[must_use]
pub fn space_after_colon(text: &str) -> Option<String> {
    let (key, value) = text.split_once(':')?;
    let joined = value.starts_with(|c: char| !c.is_whitespace());
    joined.then(|| format!("put a space after the colon: `{}: {value}`", key.trim()))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_nearest_name_is_offered_and_no_far_one() {
        assert_eq!(nearest("drw", ["name", "draw", "duty"]), Some("draw"));
        assert_eq!(nearest("Draw", ["name", "draw", "duty"]), Some("draw"));
        assert_eq!(
            nearest("half", ["half-wave", "full-wave", "none"]),
            Some("half-wave")
        );
        assert_eq!(nearest("colour", ["name", "draw", "duty"]), None);
        assert_eq!(any_of(&["a", "b", "c"]), "`a`, `b` or `c`");
        assert_eq!(any_of(&["a"]), "`a`");
        assert_eq!(list(&["a", "b"]), "a, b");
        let many = list(&["a"; 8_000]);
        assert!(many.ends_with("a, a and 7940 more"), "{many}");
    }
}
