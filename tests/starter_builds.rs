//! Every starter build reads, resolves and is answered, and says nothing that it does not mean.

mod support;

use ampledger::catalog::Catalogs;
use ampledger::description::read;
use ampledger::resolve::resolve;
use ampledger::starter_build::Kind;
use support::Folder;

#[test]
fn each_reads_and_resolves() {
    let catalogs = Catalogs::builtin();
    for kind in Kind::ALL {
        let (description, source) = read(kind.name(), kind.text().as_bytes())
            .unwrap_or_else(|refusal| panic!("{}: {refusal}", kind.name()));
        resolve(&description, &catalogs).unwrap_or_else(|problems| {
            panic!("{}", ampledger::problem::Refusal::new(source, problems))
        });
    }
}

/// The charging system of each is the one it is named for.
#[test]
fn each_is_of_its_kind() {
    let says = |kind: Kind, words: &[&str], not: &[&str]| {
        let text = kind.text();
        for word in words {
            assert!(text.contains(word), "{}: {word}", kind.name());
        }
        for word in not {
            assert!(!text.contains(word), "{}: {word}", kind.name());
        }
    };
    says(Kind::HalfWave, &["rectifier: half-wave"], &["regulator: {"]);
    says(Kind::FullWave, &["rectifier: full-wave"], &["regulator: {"]);
    says(Kind::SeriesRegulated, &["kind: series"], &["phases"]);
    says(Kind::ShuntRegulated, &["kind: shunt"], &[]);
    says(Kind::Lighting, &["rectifier: none"], &["battery:", "crank"]);
    says(
        Kind::ChargingAndLighting,
        &["rectifier: none", "battery:"],
        &[],
    );
    says(
        Kind::ClutchOnly,
        &["coil:", "rectifier: full-wave"],
        &["battery:", "crank"],
    );
    says(Kind::ThreePhase, &["phases: 3"], &[]);
    says(Kind::Alternator, &["alternator:", "ratio:"], &["winding:"]);
    says(Kind::Braking, &["braking: true"], &[]);
}

/// `new` writes it, `check` answers it: a newcomer's first two commands.
#[test]
fn each_is_answered() {
    let folder = Folder::new();
    for kind in Kind::ALL {
        let file = format!("{}.yaml", kind.name());
        folder
            .run(&["new", "--kind", kind.name(), "-o", &file])
            .assert()
            .success()
            .stdout_eq("")
            .stderr_eq("");
        assert_eq!(folder.read(&file), kind.text());
        let output = folder.run(&["check", &file]).output().expect("it runs");
        let told = String::from_utf8_lossy(&output.stderr);
        assert!(
            matches!(output.status.code(), Some(0 | 1)),
            "{file}: {told}"
        );
        assert_eq!(told, "", "{file}");
        let answer = String::from_utf8_lossy(&output.stdout);
        assert!(answer.starts_with("My machine\n"), "{file}: {answer}");
    }
}

/// Lines fit an editor's window, and are free of tabs and blanks at their ends.
#[test]
fn each_is_tidy() {
    for kind in Kind::ALL {
        for line in kind.text().lines() {
            assert!(line.chars().count() <= 110, "{}: {line}", kind.name());
            assert!(
                !line.contains('\t') && line.trim_end() == line,
                "{}: {line:?}",
                kind.name()
            );
        }
    }
}
