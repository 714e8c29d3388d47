//! One small broken file for each kind of problem, with its exact message beside it.
//!
//! `SNAPSHOTS=overwrite cargo test --test broken` writes the messages anew; read them before they go in.

use ampledger::catalog::Catalogs;
use ampledger::description::{Assignment, read_file};
use ampledger::problem::{
    FileProblem, Problem, ProblemKind, Refusal, SenseProblem, SetKind, SetProblem, ShapeProblem,
    TextProblem, ValueProblem,
};
use ampledger::quantity::bounds::Side;
use ampledger::quantity::parse::ParseErrorKind;
use ampledger::resolve::{Fault, more_problems, resolve};
use std::collections::BTreeSet;
use std::path::{Path, PathBuf};

/// One name for each kind of problem: the match is exhaustive, so a new kind does not build until it has a name here, and the test fails until it has a file.
macro_rules! kinds {
    ($($pattern:pat $(if $guard:expr)? => $name:literal,)*) => {
        fn name(kind: &ProblemKind) -> &'static str {
            match kind { $($pattern $(if $guard)? => $name,)* }
        }
        const NAMES: &[&str] = &[$($name),*];
    };
}

use ProblemKind as K;
use ValueProblem as V;

kinds! {
    K::Fault(_) => "fault",
    K::File(FileProblem::Missing) => "file missing",
    K::File(FileProblem::Folder) => "folder for a file",
    K::File(FileProblem::Unreadable { .. }) => "file unreadable",
    K::Text(TextProblem::TooLarge { .. }) => "over 1 MiB",
    K::Text(TextProblem::NotUtf8 { .. }) => "not UTF-8",
    K::Text(TextProblem::Unprintable { .. }) => "unprintable",
    K::Text(TextProblem::Empty) => "empty",
    K::Text(TextProblem::Tab) => "tab",
    K::Text(TextProblem::Syntax { .. }) => "syntax",
    K::Text(TextProblem::TooDeep) => "too deep",
    K::Text(TextProblem::TooMany) => "too many",
    K::Text(TextProblem::TooManyAnchors) => "too many anchors",
    K::Text(TextProblem::DuplicateKey { .. }) => "duplicate key",
    K::Text(TextProblem::MergeKey) => "merge key",
    K::Text(TextProblem::KeyNotText) => "key not text",
    K::Text(TextProblem::SecondDocument) => "second document",
    K::Text(TextProblem::Tag) => "tag",
    K::Text(TextProblem::AliasLoop) => "alias loop",
    K::Shape(ShapeProblem::UnknownKey { .. }) => "unknown key",
    K::Shape(ShapeProblem::Missing { .. }) => "missing key",
    K::Shape(ShapeProblem::NoValue { .. }) => "no value",
    K::Shape(ShapeProblem::WrongShape { .. }) => "wrong shape",
    K::Value(V::Quantity(e)) if matches!(e.kind, ParseErrorKind::Empty) => "quantity empty",
    K::Value(V::OutOfBounds { bounds, .. }) if bounds.side == Side::Zero => "zero",
    K::Value(V::OutOfBounds { bounds, .. }) if bounds.side == Side::Negative => "negative",
    K::Value(V::OutOfBounds { bounds, .. }) if bounds.side == Side::Below => "below",
    K::Value(V::OutOfBounds { .. }) => "above",
    K::Value(V::Quantity(e)) if matches!(e.kind, ParseErrorKind::NotNumber { .. }) => "not a number",
    K::Value(V::Quantity(_)) => "quantity otherwise",
    K::Value(V::Word { .. }) => "word",
    K::Value(V::Count { .. }) => "count",
    K::Value(V::EmptyName) => "name empty",
    K::Sense(SenseProblem::EmptyShift) => "shift empty",
    K::Sense(SenseProblem::UnknownState { .. }) => "state unknown",
    K::Sense(SenseProblem::ReservedName { .. }) => "name reserved",
    K::Sense(SenseProblem::StepWithoutTime { .. }) => "step without time",
    K::Sense(SenseProblem::StepOfSeveral) => "step of several",
    K::Sense(SenseProblem::DuplicateName { .. }) => "name twice",
    K::Sense(SenseProblem::UnknownAccessory { .. }) => "accessory unknown",
    K::Sense(SenseProblem::WithItself { .. }) => "with itself",
    K::Sense(SenseProblem::TogetherAndApart { .. }) => "together and apart",
    K::Sense(SenseProblem::Both { .. }) => "both",
    K::Sense(SenseProblem::NoneOf { .. }) => "none of",
    K::Sense(SenseProblem::Reversed { .. }) => "reversed",
    K::Sense(SenseProblem::NotRising { .. }) => "not rising",
    K::Set(SetProblem { kind: SetKind::NoEquals, .. }) => "set without equals",
    K::Set(SetProblem { kind: SetKind::NotAPath { .. }, .. }) => "set without path",
    K::Set(SetProblem { kind: SetKind::NotAValue { .. }, .. }) => "set without value",
    K::Set(SetProblem { kind: SetKind::NoEntry { .. }, .. }) => "set no entry",
    K::Set(SetProblem { kind: SetKind::NoWay { .. }, .. }) => "set no way",
    K::Set(SetProblem { kind: SetKind::Shared { .. }, .. }) => "set shared",
    K::Set(SetProblem { kind: SetKind::Unplaced { .. }, .. }) => "set unplaced",
}

/// The same for what resolving finds; none where reading tells of it before.
fn fault(fault: &Fault) -> Option<usize> {
    Some(match fault {
        Fault::EmptyShift
        | Fault::NoTime { .. }
        | Fault::ReservedName { .. }
        | Fault::NameTwice { .. }
        | Fault::Curve(_)
        | Fault::WindingOrAlternator { .. } => return None,
        Fault::Missing { .. } => 0,
        Fault::UnknownPart { .. } => 1,
        Fault::PartCycle { .. } => 2,
        Fault::BadPart { .. } => 3,
        Fault::UnknownName { .. } => 4,
        Fault::CannotCrank { .. } => 5,
        Fault::Winding(_) => 7,
        Fault::Readings(_) => 19,
        Fault::AcIntoBattery => 9,
        Fault::RegulatorOnAc => 10,
        Fault::ThreePhaseNeedsBridge => 11,
        Fault::FeedsNoBattery => 12,
        Fault::CircuitTwice { .. } => 13,
        Fault::NoBus => 14,
        Fault::OnBrakingWinding { .. } => 15,
        Fault::BrakingFeedsBattery => 16,
        Fault::NeedsDc { .. } => 17,
        Fault::WithItself => 6,
        Fault::TogetherAndApart { .. } => 8,
        Fault::ApartOverfull { .. } => 18,
    })
}
const FAULTS: std::ops::Range<usize> = 0..20;

/// The same for the kinds of a quantity's error.
fn quantity(kind: &ParseErrorKind) -> usize {
    match kind {
        ParseErrorKind::Empty => 0,
        ParseErrorKind::NotNumber { .. } => 1,
        ParseErrorKind::NotFinite { .. } => 2,
        ParseErrorKind::TooLarge { .. } => 3,
        ParseErrorKind::Grouping { .. } => 4,
        ParseErrorKind::NotWhole { .. } => 5,
        ParseErrorKind::UnitMissing { .. } => 6,
        ParseErrorKind::UnknownUnit { .. } => 7,
        ParseErrorKind::WrongUnit { .. } => 8,
        ParseErrorKind::Trailing { .. } => 9,
        ParseErrorKind::Order { .. } => 10,
        ParseErrorKind::ToleranceTooWide { .. } => 11,
        ParseErrorKind::ToleranceOfZero => 12,
        ParseErrorKind::ToleranceHere => 13,
        ParseErrorKind::Phrase { .. } => 14,
    }
}
const QUANTITIES: usize = 15;

fn folder() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/broken")
}

/// The refusal of a file, its `--set` lines applied where it has some.
fn refusal(path: &Path) -> Refusal {
    let lines = std::fs::read_to_string(path.with_extension("set")).unwrap_or_default();
    let mut assignments = Vec::new();
    for line in lines.lines() {
        match Assignment::parse(line) {
            Ok(assignment) => assignments.push(assignment),
            Err(problem) => return Refusal::new(Default::default(), Problem::whole(problem)),
        }
    }
    let folder = path.with_extension("catalogs");
    let catalogs = match folder.is_dir() {
        true => Catalogs::with_folder(&folder).expect("a folder of catalogs"),
        false => Catalogs::builtin(),
    };
    match read_file(path, &assignments) {
        Ok((description, source)) => match resolve(&description, &catalogs) {
            Ok(_) => panic!("{} was accepted", path.display()),
            Err(problems) => Refusal::new(source, problems),
        },
        Err(refusal) => {
            let more = refusal.partial().map(|p| more_problems(p, &catalogs));
            refusal.and(more.unwrap_or_default())
        }
    }
}

/// Every broken file, and the inputs that cannot lie in a folder of files.
fn cases() -> Vec<PathBuf> {
    let mut cases: Vec<PathBuf> = std::fs::read_dir(folder())
        .expect("the folder of broken files")
        .map(|entry| entry.expect("an entry of it").path())
        .filter(|path| path.extension().is_some_and(|e| e == "yaml"))
        .collect();
    cases.sort();
    cases.push(folder().join("file-missing.yml"));
    cases.push(folder());
    cases.push(folder().join("text-empty.yaml/file-within-a-file.yml"));
    cases
}

#[test]
fn each_file_has_its_message() {
    for path in cases() {
        let text = refusal(&path)
            .render(false)
            .replace(&format!("{}/", folder().display()), "");
        let text = text.replace(&folder().display().to_string(), "broken");
        let name = path
            .file_stem()
            .expect("a name")
            .to_string_lossy()
            .into_owned();
        let snapshot = folder().join(format!("{name}.txt"));
        snapbox::assert_data_eq!(text, snapbox::Data::read_from(&snapshot, None).raw());
    }
}

#[test]
fn each_kind_has_a_file() {
    let mut found: BTreeSet<&str> = BTreeSet::new();
    let mut quantities = BTreeSet::new();
    let mut faults = BTreeSet::new();
    let big = tempfile::NamedTempFile::new().expect("a temporary file");
    std::fs::write(
        big.path(),
        format!("build: small\n# {}\n", "x".repeat(1 << 20)),
    )
    .expect("written");
    for path in cases().iter().map(PathBuf::as_path).chain([big.path()]) {
        for problem in refusal(path).problems().iter() {
            found.insert(name(&problem.kind));
            match &problem.kind {
                K::Value(V::Quantity(e)) => _ = quantities.insert(quantity(&e.kind)),
                K::Fault(found) => faults.extend(fault(found)),
                _ => {}
            }
        }
    }
    let without: Vec<_> = NAMES.iter().filter(|n| !found.contains(**n)).collect();
    assert!(without.is_empty(), "no file for {without:?}");
    assert_eq!(
        quantities.len(),
        QUANTITIES,
        "kinds of quantity errors with a file: {quantities:?}"
    );
    let without: Vec<_> = FAULTS.filter(|n| !faults.contains(n)).collect();
    assert!(without.is_empty(), "no file for the faults {without:?}");
}
