//! The bad inputs that a careless person or a hostile file gives, entry by entry: each refused with exit code 2, a
//! sentence on standard error, and nothing on standard output.
//!
//! Those that can lie in a file lie in `tests/broken`, with their exact message; the others are made here.

mod support;

use std::path::{Path, PathBuf};
use std::time::Instant;
use support::{Folder, GOOD, project};

/// The kinds of bad input, and the file of `tests/broken` that shows each.
const SHOWN: &[(&str, &str)] = &[
    ("unknown key", "shape-unknown-key"),
    ("duplicate key", "text-duplicate-key"),
    ("missing field", "shape-missing-keys"),
    ("missing unit", "value-unit-missing"),
    ("wrong unit", "value-unit-wrong"),
    ("unknown unit", "value-unit-unknown"),
    ("negative", "value-negative"),
    ("zero", "value-zero"),
    ("no number, infinite", "value-not-finite"),
    ("1e400", "value-too-large"),
    ("below the least", "value-below"),
    ("above the most; duty over 100 %", "value-above"),
    ("unknown part", "part-unknown"),
    ("unknown state", "sense-state-unknown"),
    ("unknown circuit", "fault-circuit-unknown"),
    (
        "contradictory winding figures",
        "fault-winding-contradiction",
    ),
    ("empty shift", "sense-shift-empty"),
    ("tab", "text-tab"),
    ("a list for a value", "shape-list-for-a-value"),
    ("a value for a mapping", "shape-value-for-a-mapping"),
    ("a mapping for a list", "shape-mapping-for-a-list"),
    ("not UTF-8", "text-not-utf8"),
    ("empty file", "text-empty"),
    ("two documents", "text-two-documents"),
    ("merge key", "text-merge-key"),
    ("alias bomb", "text-too-many"),
    ("alias of itself", "text-alias-loop"),
    ("nested too deep", "text-too-deep"),
    ("folder for a file", "broken"),
    ("unreadable file", "file-within-a-file"),
    ("missing file", "file-missing"),
    ("catalog parts in a circle", "part-cycle"),
    ("duplicate names", "sense-name-twice"),
    ("many at once", "many-at-once"),
];

/// Each message names its kind, and its place in the file and the line itself where there is one.
#[test]
fn every_kind_is_shown() {
    for (kind, name) in SHOWN {
        let path = project("tests/broken").join(format!("{name}.txt"));
        let text = std::fs::read_to_string(&path).unwrap_or_else(|e| panic!("{kind}: {e}"));
        assert!(text.starts_with("error: "), "{kind}: {text}");
        let file = path.with_extension("yaml");
        let lines = std::fs::read(&file).map_or(0, |b| b.split(|c| *c == b'\n').count());
        let placed = text.contains(&format!("--> {name}.yaml:"));
        // a file without a line has no place in it
        assert!(placed || lines <= 1, "{kind}: {text}");
        assert!(
            !placed || lines <= 1 || text.contains('^'),
            "{kind}: {text}"
        );
    }
}

/// Refused: exit code 2, nothing on standard output; what is said, and how long it took.
fn refused(folder: &Folder, args: &[&str]) -> (String, f64) {
    let begun = Instant::now();
    let output = folder.run(args).output().expect("it runs");
    let took = begun.elapsed().as_secs_f64();
    let told = String::from_utf8_lossy(&output.stderr).into_owned();
    assert_eq!(output.status.code(), Some(2), "{told}");
    assert!(output.stdout.is_empty(), "{args:?}");
    assert!(told.starts_with("error: "), "{told}");
    (told, took)
}

/// Ten thousand levels in each way of nesting, and bombs of aliases, are refused as soon as a limit is passed.
#[test]
fn depth_and_aliases_have_their_limits() {
    let deep = 10_000;
    let ladder: String = (0..1_000).map(|n| " ".repeat(n) + "a:\n").collect();
    let bomb = |width: usize| {
        let mut text = format!("a0: &a0 [{}]\n", vec!["x"; width].join(","));
        for n in 1..30 {
            let uses = vec![format!("*a{}", n - 1); width].join(",");
            text += &format!("a{n}: &a{n} [{uses}]\n");
        }
        text
    };
    let inputs = [
        (
            "[".repeat(deep) + &"]".repeat(deep),
            "nested deeper than 64 levels",
        ),
        ("[".repeat(deep), "nested deeper than 64 levels"),
        (
            "{a: ".repeat(deep) + &"}".repeat(deep),
            "nested deeper than 64 levels",
        ),
        ("- ".repeat(deep) + "x", "nested deeper than 64 levels"),
        (ladder, "nested deeper than 64 levels"),
        (
            "? ".repeat(deep) + "x",
            "a key must be a single word or text",
        ),
        (
            bomb(2),
            "more than 60000 values, aliases counted at each use",
        ),
        (
            bomb(50),
            "more than 60000 values, aliases counted at each use",
        ),
    ];
    for (text, said) in inputs {
        let folder = Folder::new();
        folder.write("deep.yaml", &text);
        let (told, took) = refused(&folder, &["check", "deep.yaml"]);
        let start: String = text.chars().take(20).collect();
        assert!(told.contains(said), "{start}: {told}");
        // far from the time that what it stands for would take; exact times are in `tests/bench/refusals.py`
        assert!(took < 5.0, "{start}: {took} s");
    }
}

/// A file of 1 MiB is read, a byte more is refused, and so is a device that never ends.
#[test]
fn a_mebibyte_is_the_limit() {
    let folder = Folder::new();
    let padded = |bytes: usize| format!("{GOOD}#{}\n", "x".repeat(bytes - GOOD.len() - 2));
    folder.write("most.yaml", padded(1 << 20));
    folder
        .run(&["check", "most.yaml"])
        .assert()
        .code(0)
        .stderr_eq("");
    folder.write("more.yaml", padded((1 << 20) + 1));
    let (told, _) = refused(&folder, &["check", "more.yaml"]);
    let said = "error: the file is too large: the limit is 1 MiB\n";
    assert!(told.starts_with(said), "{told}");
    if cfg!(unix) {
        let (told, _) = refused(&folder, &["check", "/dev/zero"]);
        assert!(told.starts_with("error: the file is too large: "), "{told}");
    }
}

/// A byte order mark, carriage returns and both change nothing; another encoding is told as what it is.
#[test]
fn line_ends_and_marks_of_other_systems() {
    let folder = Folder::with_good();
    let plain = folder
        .run(&["check", "good.yaml"])
        .output()
        .expect("it runs");
    let crlf = GOOD.replace('\n', "\r\n");
    for text in [
        crlf.clone(),
        format!("\u{feff}{GOOD}"),
        format!("\u{feff}{crlf}"),
    ] {
        folder.write("good.yaml", text);
        let other = folder
            .run(&["check", "good.yaml"])
            .output()
            .expect("it runs");
        assert_eq!(other.stdout, plain.stdout);
        assert_eq!(other.status.code(), Some(0));
    }
    let wide: Vec<u8> = "\u{feff}build: x\n"
        .encode_utf16()
        .flat_map(u16::to_le_bytes)
        .collect();
    folder.write("wide.yaml", wide);
    let (told, _) = refused(&folder, &["check", "wide.yaml"]);
    assert!(told.contains("UTF-8"), "{told}");
}

/// What stands in the place of a file, whoever asks: root is held by none of the usual permissions.
#[test]
fn what_is_no_file() {
    let folder = Folder::with_good();
    folder.write("folder/in.yaml", GOOD);
    let cases = [
        ("folder", "this is a folder, a file is needed"),
        ("none.yaml", "no such file"),
        ("good.yaml/in.yaml", "the file cannot be read: "),
    ];
    for (name, said) in cases {
        let (told, _) = refused(&folder, &["check", name]);
        assert!(
            told.starts_with(&format!("error: {said}")),
            "{name}: {told}"
        );
        assert!(told.contains(name), "{name}: {told}");
    }
    #[cfg(unix)]
    {
        std::os::unix::fs::symlink("loop.yaml", folder.path("loop.yaml")).expect("a link");
        let (told, _) = refused(&folder, &["check", "loop.yaml"]);
        assert!(
            told.starts_with("error: the file cannot be read: "),
            "{told}"
        );
        std::os::unix::fs::symlink("gone.yaml", folder.path("dangling.yaml")).expect("a link");
        let (told, _) = refused(&folder, &["check", "dangling.yaml"]);
        assert!(told.starts_with("error: no such file"), "{told}");
    }
}

/// A user's folder of catalogs: missing, no folder, a link that leaves it, one id in two files, a file that is none.
#[test]
fn catalogs_that_are_none() {
    let with = |files: &[(&str, &str)]| {
        let folder = Folder::with_good();
        for (name, text) in files {
            folder.write(name, text);
        }
        folder
    };
    let told = |folder: &Folder| refused(folder, &["check", "good.yaml", "--catalogs", "own"]).0;
    let one = "accessories: [{id: a, draw: 1 A}]\n";
    let said = told(&with(&[]));
    assert!(said.contains("catalog `own` cannot be read"), "{said}");
    let said = told(&with(&[("own", one)]));
    assert!(said.contains("catalog `own` cannot be read"), "{said}");
    let said = told(&with(&[("own/a.yaml", one), ("own/b.yaml", one)]));
    assert!(said.contains("id `a` is in both"), "{said}");
    let said = told(&with(&[("own/a.yaml", "kits: [x\n")]));
    assert!(
        said.contains("not valid YAML") && said.contains("a.yaml:"),
        "{said}"
    );
    #[cfg(unix)]
    {
        let folder = with(&[("elsewhere/a.yaml", one), ("own/b.yaml", "kits: []\n")]);
        std::os::unix::fs::symlink("../elsewhere/a.yaml", folder.path("own/a.yaml"))
            .expect("a link");
        let said = told(&folder);
        assert!(said.contains("is a link that leaves its folder"), "{said}");
    }
}

/// Every file below a folder.
fn files(folder: &Path, found: &mut Vec<PathBuf>) {
    for entry in std::fs::read_dir(folder).expect("a folder") {
        let path = entry.expect("an entry").path();
        if path.is_dir() && !path.ends_with("target") {
            files(&path, found);
        } else if path.extension().is_some_and(|e| e == "rs") {
            found.push(path);
        }
    }
}

/// The variants of each `pub enum …Error` in a source text.
fn variants(text: &str) -> Vec<(String, String)> {
    let mut found = Vec::new();
    let mut name: Option<&str> = None;
    for line in text.lines() {
        if let Some(rest) = line.strip_prefix("pub enum ") {
            name = rest
                .split([' ', '<'])
                .next()
                .filter(|n| n.ends_with("Error"));
        } else if line == "}" {
            name = None;
        } else if let (Some(name), Some(rest)) = (name, line.strip_prefix("    "))
            && rest.starts_with(|c: char| c.is_ascii_uppercase())
        {
            let end = rest
                .find(|c: char| !c.is_alphanumeric())
                .unwrap_or(rest.len());
            found.push((name.to_owned(), rest[..end].to_owned()));
        }
    }
    found
}

/// Every variant of every error has a test that names it. (Kinds of problems of a file are held to more, in
/// `tests/broken.rs`.)
#[test]
fn every_error_has_a_test() {
    let (mut sources, mut tests) = (Vec::new(), Vec::new());
    files(&project("src"), &mut sources);
    files(&project("tests"), &mut tests);
    let read = |path: &PathBuf| std::fs::read_to_string(path).expect("its text");
    let mut tested: String = tests.iter().map(read).collect();
    let mut errors = Vec::new();
    for text in sources.iter().map(read) {
        let (code, tests) = text.split_once("#[cfg(test)]").unwrap_or((&text, ""));
        errors.extend(variants(code));
        tested += tests;
    }
    assert!(errors.len() > 30, "{} variants found", errors.len());
    let named =
        |(error, variant): &&(String, String)| !tested.contains(&format!("{error}::{variant}"));
    let without: Vec<_> = errors.iter().filter(named).collect();
    assert!(without.is_empty(), "no test for {without:?}");
}
