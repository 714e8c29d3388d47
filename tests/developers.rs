//! `DEVELOPERS.md` against the tree: what it names is there, and what is there it names.

use std::fs;
use std::path::{Path, PathBuf};

fn root() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).to_path_buf()
}

fn page() -> String {
    fs::read_to_string(root().join("DEVELOPERS.md")).unwrap()
}

/// What stands in backticks in a line.
fn ticked(line: &str) -> impl Iterator<Item = &str> {
    line.split('`').skip(1).step_by(2)
}

/// The lines below a heading, up to the next.
fn section<'a>(page: &'a str, heading: &str) -> Vec<&'a str> {
    let from = page.lines().skip_while(move |line| *line != heading);
    let lines: Vec<_> = from
        .skip(1)
        .take_while(|line| !line.starts_with("## "))
        .collect();
    assert!(!lines.is_empty(), "no section `{heading}`");
    lines
}

#[test]
fn every_path_named_is_there() {
    let page = page();
    let folders = [
        "src/",
        "tests/",
        "catalogs/",
        "examples/",
        "benches/",
        ".ci/",
    ];
    let named: Vec<_> = page
        .lines()
        .flat_map(ticked)
        .filter(|name| folders.iter().any(|folder| name.starts_with(folder)))
        .collect();
    assert!(named.len() > 80, "{} paths", named.len());
    for name in named {
        assert!(root().join(name).exists(), "`{name}` is not there");
    }
}

/// The file of each row has the name of the row as a word of its own.
#[test]
fn every_symbol_is_in_its_file() {
    let page = page();
    let rows = section(&page, "## Symbols").into_iter();
    let rows: Vec<_> = rows.filter(|line| line.starts_with("| `")).collect();
    assert!(rows.len() > 30, "{} rows", rows.len());
    for row in rows {
        assert_eq!(row.matches('|').count(), 6, "{row}");
        let (code, file) = (ticked(row).next().unwrap(), ticked(row).last().unwrap());
        let text = fs::read_to_string(root().join(file)).unwrap();
        let mut words = text.split(|c: char| !(c.is_alphanumeric() || c == '_'));
        assert!(words.any(|word| word == code), "`{code}` is not in {file}");
    }
}

#[test]
fn every_module_and_every_test_is_named() {
    let page = page();
    let map = section(&page, "## Map of the code").join("\n");
    for entry in fs::read_dir(root().join("src")).unwrap() {
        let name = entry.unwrap().file_name().into_string().unwrap();
        if name != "lib.rs" {
            assert!(map.contains(&format!("`src/{name}`")), "src/{name}");
        }
    }
    let rests = section(&page, "## What the tests rest on").join("\n");
    for entry in fs::read_dir(root().join("tests")).unwrap() {
        let name = entry.unwrap().file_name().into_string().unwrap();
        if name.ends_with(".rs") {
            assert!(rests.contains(&format!("`tests/{name}`")), "tests/{name}");
        }
    }
}
