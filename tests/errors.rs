//! Errors that no file of `tests/broken` can show, as they come from builds and tables made wrong by hand, and what they
//! say.

use ampledger::build::{Build, SourceKind};
use ampledger::catalog::Catalogs;
use ampledger::check::{SolveError, Wanted, check, judge, rule};
use ampledger::circuit::{CircuitError, circuits};
use ampledger::description::{Description, read};
use ampledger::identify::{IdentifyError, ReadError, identify, read_csv};
use ampledger::odds::{self, OddsError};
use ampledger::quantity::{Hours, Ohms};
use ampledger::resolve::resolve;
use ampledger::root::RootError;
use ampledger::source::{ConstantsError, WindingError};

/// An invented machine whose clutch hangs on a winding of its own.
const CLUTCH: &str = "\
build: walk-behind mower
engine: {speeds: {governed: 3400 rpm}}
charging:
  - {name: clutch winding, winding: {open_circuit: 28 V at 3600 rpm, resistance: 0.3 ohm, inductance: 0.8 mH, poles: 12, feeds: clutch}, rectifier: full-wave}
accessories: [{name: clutch, draw: 4 ohm, circuit: clutch}]
shift: [{governed: 1 h}]
";

fn described(text: &str) -> Description {
    read("made.yaml", text.as_bytes())
        .unwrap_or_else(|e| panic!("{e}"))
        .0
}

fn built(text: &str) -> Build {
    resolve(&described(text), &Catalogs::builtin()).unwrap_or_else(|e| panic!("{e:?}"))
}

#[test]
fn circuits_that_are_none() {
    let good = built(CLUTCH);
    assert_eq!(circuits(&good).map(|all| all.len()), Ok(1));
    let mut twice = good.clone();
    twice.sources.push(good.sources[0].clone());
    let error = circuits(&twice).expect_err("two windings");
    assert!(
        matches!(error, CircuitError::SeveralWindings { .. }),
        "{error}"
    );
    assert_eq!(error.to_string(), "two windings feed the circuit `clutch`");
    // and the solver passes it on
    let told = check(&twice, Wanted::default()).map(|checked| checked.check);
    assert_eq!(told.err(), Some(SolveError::Circuit(error.clone())));
    assert_eq!(judge(&twice).err(), Some(SolveError::Circuit(error)));

    let three = CLUTCH.replace("poles: 12", "poles: 12, phases: 3");
    let mut bare = built(&three);
    let SourceKind::Winding(winding) = &mut bare.sources[0].kind else {
        panic!("a winding")
    };
    winding.rectifier = None;
    let error = circuits(&bare).expect_err("no rectifier");
    assert!(
        matches!(error, CircuitError::AlternatingThreePhase { .. }),
        "{error}"
    );

    let none = CircuitError::NoPoint {
        circuit: "clutch".into(),
        state: "governed".into(),
        cause: ampledger::source::CircuitError::Load,
    };
    let said = "circuit `clutch` at governed: the circuit's load has no lawful resistance";
    assert_eq!(none.to_string(), said);
}

#[test]
fn builds_without_what_is_asked_for() {
    let good = built(CLUTCH);
    let error = rule(&good).expect_err("no battery");
    assert_eq!(error, SolveError::NoBattery);
    assert_eq!(
        error.to_string(),
        "the build has no battery to keep charged"
    );
    let mut idle = good;
    idle.shift[0].time.value = Hours::ZERO;
    assert_eq!(judge(&idle).err(), Some(SolveError::EmptyShift));
}

#[test]
fn odds_that_are_none() {
    let text = ampledger::starter_build::Kind::SeriesRegulated.text();
    let odds = |text: &str| {
        let wanted = odds::Wanted {
            runs: 4,
            ..Default::default()
        };
        odds::odds(&described(text), &Catalogs::builtin(), wanted, &|| ())
    };
    assert!(odds(text).is_ok());
    let unknown = CLUTCH.replace("draw: 4 ohm", "part: no-such-clutch");
    let error = odds(&unknown).expect_err("an unknown part");
    assert!(matches!(error, OddsError::Refused(_)), "{error}");
    assert!(error.to_string().contains("no-such-clutch"), "{error}");
    let still = CLUTCH.replace("governed: 1 h", "governed: 0 h");
    let error = odds(&still).expect_err("no time");
    assert_eq!(error, OddsError::Unsolved(SolveError::EmptyShift));
    let error = odds(CLUTCH).expect_err("nothing to judge");
    assert_eq!(error, OddsError::NothingJudged);
    assert!(
        error.to_string().starts_with("nothing to judge: "),
        "{error}"
    );
    let none = OddsError::NothingDrawn {
        contradictory: 3,
        unsolved: 1,
    };
    assert_eq!(
        none.to_string(),
        "no draw has an answer: in 3 the values contradict each other, 1 did not converge"
    );
}

#[test]
fn windings_that_are_none() {
    let mut build = built(CLUTCH);
    let SourceKind::Winding(winding) = &mut build.sources[0].kind else {
        panic!("a winding")
    };
    winding.resistance.value = Ohms(-1.0);
    let error = winding.solve().expect_err("a resistance below zero");
    let ConstantsError::Winding(cause) = error else {
        panic!("{error}")
    };
    assert!(matches!(cause, WindingError::OutOfRange { .. }), "{cause}");
    let root = ConstantsError::from(RootError::NotFinite { at: 1.0 });
    assert!(matches!(root, ConstantsError::Root(_)));
    assert!(!root.to_string().is_empty());
}

#[test]
fn tables_that_are_none() {
    let table = |row: &str| {
        format!(
            "# winding: {{poles: 12}}\n# rectifier: full-wave\nrpm,volts,amps\n1800,12.8,2\n2400,13,{row}\n"
        )
    };
    let error = read_csv("bench.csv", &table("six")).expect_err("a word");
    assert!(
        matches!(
            error,
            ReadError::Cell {
                line: 5,
                column: "amps",
                ..
            }
        ),
        "{error}"
    );
    let error = read_csv("bench.csv", &table("900")).expect_err("beyond all windings");
    assert!(
        matches!(error, ReadError::OutOfBounds { line: 5, .. }),
        "{error}"
    );
    let mut readings = read_csv("bench.csv", &(table("6") + "3000,13.2,9\n")).expect("a table");
    readings.working.winding.0 = -300.0;
    assert_eq!(identify(&readings), Err(IdentifyError::Temperature));
}
