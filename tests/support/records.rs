//! Reading back what was written as CSV.

/// The records of a CSV text, parsed by the general library.
pub fn records(written: &str) -> Vec<Vec<String>> {
    let mut reader = csv::ReaderBuilder::new()
        .has_headers(false)
        .flexible(true)
        .from_reader(written.as_bytes());
    reader
        .records()
        .map(|r| r.expect("a record").iter().map(str::to_owned).collect())
        .collect()
}
