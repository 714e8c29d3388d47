//! Every example build runs; its answer is a snapshot beside it (`SNAPSHOTS=overwrite` renews them).

use std::path::{Path, PathBuf};
use std::process::{Command, Output};

fn examples() -> Vec<PathBuf> {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("examples");
    let mut all: Vec<PathBuf> = std::fs::read_dir(folder)
        .expect("examples")
        .map(|entry| entry.expect("an entry").path())
        .filter(|path| path.extension().is_some_and(|e| e == "yaml"))
        .filter(|path| {
            std::fs::read_to_string(path)
                .expect("text")
                .lines()
                .any(|l| l.starts_with("build:"))
        })
        .collect();
    all.sort();
    all
}

fn run(arguments: &[&str]) -> Output {
    Command::new(env!("CARGO_BIN_EXE_ampledger"))
        .args(arguments)
        .current_dir(env!("CARGO_MANIFEST_DIR"))
        .output()
        .expect("it runs")
}

fn relative(path: &Path) -> String {
    format!(
        "examples/{}",
        path.file_name().expect("a name").to_string_lossy()
    )
}

#[test]
fn answers_are_the_snapshots() {
    let renew = std::env::var("SNAPSHOTS").is_ok_and(|v| v == "overwrite");
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/examples");
    if renew {
        std::fs::create_dir_all(&folder).expect("a folder");
    }
    for path in examples() {
        let output = run(&["check", &relative(&path)]);
        let printed = String::from_utf8(output.stdout).expect("UTF-8");
        let stored = folder
            .join(path.file_name().expect("a name"))
            .with_extension("txt");
        if renew {
            std::fs::write(&stored, &printed).expect("written");
        }
        let want = std::fs::read_to_string(&stored).unwrap_or_default();
        assert_eq!(
            printed,
            want,
            "{}: renew with SNAPSHOTS=overwrite if meant",
            path.display()
        );
    }
}

#[test]
fn every_verdict_occurs_and_sets_the_exit_code() {
    let mut seen = Vec::new();
    for path in examples() {
        let output = run(&["check", &relative(&path), "--format", "json"]);
        let answer: serde_json::Value = serde_json::from_slice(&output.stdout).expect("JSON");
        let verdict = answer["verdict"].as_str().expect("a verdict").to_owned();
        assert_eq!(
            output.status.code(),
            Some(i32::from(verdict != "keeps up")),
            "{}",
            path.display()
        );
        assert_eq!(answer["format"], 1);
        seen.push(verdict);
    }
    for verdict in ["keeps up", "carries", "falls short"] {
        assert!(seen.iter().any(|v| v == verdict), "no example {verdict}");
    }
}

#[test]
fn every_kind_of_output_is_written_and_tables_keep_to_80_columns() {
    for path in examples() {
        let file = relative(&path);
        for format in ["csv", "markdown", "html"] {
            let output = run(&["check", &file, "--format", format]);
            assert!(
                output.stderr.is_empty() && output.stdout.len() > 400,
                "{file} as {format}"
            );
        }
        for command in ["check", "curve", "wire"] {
            let output = run(&[command, &file]);
            let text = String::from_utf8(output.stdout).expect("UTF-8");
            let widest = text
                .lines()
                .map(|line| line.chars().count())
                .max()
                .unwrap_or(0);
            assert!(widest <= 80, "{command} {file}: {widest} columns");
            assert!(
                !text.contains('\u{1b}'),
                "{command} {file}: colour in a pipe"
            );
        }
    }
}
