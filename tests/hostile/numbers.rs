//! Whether every number of an answer is one.

/// The first line of an answer, written as YAML, whose value is infinite or no number. (JSON would write `null`, as for
/// what is left out; text that only looks so is quoted.)
pub fn none_in(written: &str) -> Option<&str> {
    written.lines().find(|line| {
        let value = line.rsplit([' ', '[']).next().unwrap_or(line);
        let alone = line.ends_with(&format!(": {value}")) || line.ends_with(&format!("- {value}"));
        alone && matches!(value, ".nan" | ".inf" | "-.inf")
    })
}
