//! Every size is proved by the full verdict at it and just beyond it, on fifty invented builds of a
//! seeded generator; parts by fitting them; influence by solving again; K097 and K098.

mod size_builds;

use ampledger::build::Build;
use ampledger::catalog::Catalogs;
use ampledger::check::answer::Verdict;
use ampledger::check::rule;
use ampledger::description::{Assignment, Description, read_set};
use ampledger::odds::{Toleranced, Wanted, odds};
use ampledger::quantity::Fraction;
use ampledger::remedy::Asked;
use ampledger::resolve::resolve;
use ampledger::size::{Answer, Bound, Share, Size, guideline, influence, size};
use rayon::prelude::*;
use size_builds::{Draws, build_text};

fn read(text: &str, set: &[String]) -> (Description, Build) {
    let set: Vec<Assignment> = set
        .iter()
        .map(|s| Assignment::parse(s).unwrap_or_else(|e| panic!("{s}: {e}")))
        .collect();
    let (description, _) =
        read_set("test", text.as_bytes(), &set).unwrap_or_else(|e| panic!("{set:?}: {e}"));
    let build = resolve(&description, &Catalogs::builtin());
    let build = build.unwrap_or_else(|e| panic!("{set:?}: {e:?}"));
    (description, build)
}

fn sizes(text: &str) -> Size {
    let (description, build) = read(text, &[]);
    let catalogs = Catalogs::builtin();
    let asked = Asked::new(&description, &build, &catalogs);
    size(&asked, None, &mut |_, _| {}).expect("an answer")
}

fn keeps_up(text: &str, set: String) -> bool {
    let (_, build) = read(text, &[set]);
    rule(&build).expect("an answer").verdict == Verdict::KeepsUp
}

/// The number of an answer's value times a factor, as `--set` takes it.
fn scaled(answer: &Answer, factor: f64) -> Option<String> {
    let (path, value) = (answer.set.as_ref()?, answer.value.as_ref()?);
    let (number, unit) = value.split_once(' ').unwrap_or((value, ""));
    let number: f64 = number.parse().expect("one number");
    Some(
        format!("{path}={:.8} {unit}", number * factor)
            .trim_end()
            .to_owned(),
    )
}

/// What the proofs of one build came to.
#[derive(Clone, Copy, Default)]
struct Proved {
    edges: u32,
    edgeless: u32,
    short: u32,
}

/// Proves every size of a build from both sides, as reading the file again with the value set.
fn prove(number: usize, text: &str) -> Proved {
    let answers = sizes(text);
    let mut proved = Proved {
        short: u32::from(!answers.keeps_up),
        ..Proved::default()
    };
    let holds = |set: &String| keeps_up(text, set.clone());
    for answer in &answers.answers {
        assert!(!answer.binds.is_empty(), "{number}: {}", answer.what);
        if answer.amount.is_none() {
            proved.edgeless += 1;
            assert_eq!(answer.value, None, "{number}: {}", answer.what);
            continue;
        }
        let Some(at) = scaled(answer, 1.0) else {
            continue;
        };
        let beyond = match answer.bound {
            Bound::Least => 0.96,
            Bound::Most => 1.04,
        };
        let set = |factor| scaled(answer, factor).expect("a path");
        assert!(holds(&at), "{number}: {at} falls short\n{text}");
        let beyond = set(beyond);
        assert!(!holds(&beyond), "{number}: {beyond} holds\n{text}");
        proved.edges += 1;
    }
    proved
}

#[test]
fn every_size_is_proved_from_both_sides() {
    let mut draws = Draws::new(20_260_801);
    let texts: Vec<String> = (0..50).map(|_| build_text(&mut draws)).collect();
    let proved: Vec<Proved> = texts
        .par_iter()
        .enumerate()
        .map(|(number, text)| prove(number, text))
        .collect();
    let sum = |of: fn(&Proved) -> u32| proved.iter().map(of).sum::<u32>();
    let (edges, edgeless) = (sum(|p| p.edges), sum(|p| p.edgeless));
    assert!(
        edges >= 300 && edgeless >= 50,
        "{edges} proved, {edgeless} without an edge"
    );
    let short = sum(|p| p.short);
    assert!((10..=40).contains(&short), "{short} of 50 fall short");
}

/// Sizes for a share of builds, against the odds of the file with the value set: at the amount that share keeps up,
/// just beyond it does not.
#[test]
fn a_share_of_builds_keeps_up_at_its_sizes() {
    let text = "build: cart
engine: {speeds: {idle: 1700 rpm, governed: 3300 rpm}}
charging:
  - winding: {open_circuit: 29 V at 3600 rpm ± 6 %, resistance: 0.16 ohm, inductance: 0.33 mH, poles: 16}
    rectifier: full-wave
    regulator: {holds: 14.3 V}
battery: {capacity: 32 Ah, cold_cranking: 290 A, type: flooded, reserve: 55 %}
accessories:
  - {name: lamps, draw: 13 A ± 8 %, duty: {governed: 100 %, idle: 100 %}}
shift: [{idle: 30 min}, {governed: 2 h}]
parked: 13 h
";
    let (description, build) = read(text, &[]);
    let catalogs = Catalogs::builtin();
    let asked = Asked::new(&description, &build, &catalogs);
    let share = Share {
        of_builds: Fraction(0.7),
        runs: 40,
        seed: 3,
    };
    let answer = size(&asked, Some(share), &mut |_, _| {}).expect("an answer");
    let wanted = Wanted {
        runs: share.runs,
        seed: share.seed,
        ..Wanted::default()
    };
    let odds_of = |set: &[String]| {
        let (description, _) = read(text, set);
        odds(&description, &catalogs, wanted, &|| ()).expect("odds")
    };
    let stated = odds_of(&[]);
    let summary = answer.share.expect("a share");
    assert_eq!(summary.keeps_up_share, stated.keeps_up_share);
    assert_eq!(answer.keeps_up, stated.keeps_up_share >= share.of_builds);
    let mut proved = 0;
    for answer in answer.answers.iter().filter(|a| a.amount.is_some()) {
        let drawn = |t: &Toleranced| answer.set.as_deref() == Some(t.path.as_str());
        if answer.set.is_none() || stated.tolerances.iter().any(drawn) {
            continue; // with the value set its tolerance goes
        }
        let beyond = match answer.bound {
            Bound::Least => 0.96,
            Bound::Most => 1.04,
        };
        let share_at = |factor| {
            let set = scaled(answer, factor).expect("a path");
            (odds_of(std::slice::from_ref(&set)).keeps_up_share, set)
        };
        let (at, beyond) = (share_at(1.0), share_at(beyond));
        assert!(at.0 >= share.of_builds, "{at:?}");
        assert!(beyond.0 < share.of_builds, "{beyond:?}");
        proved += 1;
    }
    assert!(proved >= 5, "{proved} proved");
    // more builds ask for more
    let winding = |size: &Size| size.answers[0].amount.expect("a least winding");
    assert!(winding(&answer) > winding(&sizes(text)));
}

/// Parts that are listed keep up when fitted, parts that are not do not, in order of size.
#[test]
fn parts_are_those_that_qualify() {
    let text = size_builds::MOWER;
    let answers = sizes(text);
    let winding = &answers.answers[0];
    assert_eq!(winding.set.as_deref(), Some("charging[0].winding.scale"));
    let listed = |id: &str| winding.parts.iter().any(|p| p == id);
    let mut fitted = 0;
    for row in &answers.windings {
        let holds = keeps_up(text, format!("charging[0]={{part: {}}}", row.id));
        assert_eq!(listed(&row.id), holds, "{}", row.id);
        assert_eq!(row.keeps_up, holds, "{}", row.id);
        fitted += 1;
    }
    assert!(fitted >= 8 && !winding.parts.is_empty() && winding.parts.len() < fitted);
    let rated = |id: &String| {
        let row = answers.windings.iter().find(|r| r.id == *id);
        row.expect("a row").rated_a.0
    };
    assert!(
        winding
            .parts
            .windows(2)
            .all(|w| rated(&w[0]) <= rated(&w[1]))
    );
    let battery = answers
        .answers
        .iter()
        .find(|a| a.what == "battery capacity");
    let battery = battery.expect("a battery");
    for id in &battery.parts {
        // The reserve that the build states stays with it.
        assert!(
            keeps_up(text, format!("battery={{part: {id}, reserve: 55 %}}")),
            "{id}"
        );
    }
}

/// Impossible requests say what binds: no winding makes up for hours with the engine off, none
/// starts a battery that does not crank.
#[test]
fn impossible_requests_say_why() {
    let standing = size_builds::MOWER.replace("stopped: 12 min", "stopped: 9 h");
    let answers = sizes(&standing);
    let winding = &answers.answers[0];
    assert_eq!(winding.amount, None);
    assert!(winding.binds.contains("engine off"), "{}", winding.binds);
    let cold = size_builds::MOWER
        .replace("air: 12 °C", "air: -25 °C")
        .replace("cold_cranking: 290 A", "cold_cranking: 120 A");
    let answers = sizes(&cold);
    let winding = &answers.answers[0];
    assert_eq!(winding.amount, None);
    assert!(winding.binds.contains("cold start"), "{}", winding.binds);
}

/// The influence of an input against solving the build again with it 1 % either way.
#[test]
fn influence_is_what_solving_again_gives() {
    let (_, build) = read(size_builds::MOWER, &[]);
    let ranked = influence(&build);
    assert!(ranked.len() >= 12, "{ranked:?}");
    let found = |what: &str| {
        let row = ranked.iter().find(|i| i.what == what);
        row.unwrap_or_else(|| panic!("{what}: {ranked:?}"))
            .ah_per_percent
            .0
    };
    let lacks = |set: String| {
        let ruling = rule(&read(size_builds::MOWER, &[set]).1).expect("an answer");
        ruling.lacks.expect("charging helps").0
    };
    let two = |low: &str, high: &str| (lacks(high.to_owned()) - lacks(low.to_owned())) / 2.0;
    for (what, again) in [
        (
            "draw of work lamps",
            two("accessories[0].draw=198 W", "accessories[0].draw=202 W"),
        ),
        (
            "governed speed",
            two(
                "engine.speeds.governed=3267 rpm",
                "engine.speeds.governed=3333 rpm",
            ),
        ),
        (
            "idle speed",
            two("engine.speeds.idle=1683 rpm", "engine.speeds.idle=1717 rpm"),
        ),
        (
            "current of charging winding",
            two(
                "charging[0].winding.scale=0.99",
                "charging[0].winding.scale=1.01",
            ),
        ),
        (
            "reserve",
            two("battery.reserve=54.45 %", "battery.reserve=55.55 %"),
        ),
    ] {
        let influence = found(what);
        assert!(
            (influence - again).abs() < 0.05 * again.abs() + 1e-3,
            "{what}: {influence} for {again}"
        );
    }
}

/// K097: the load of K094 (10.8103 A at 14.0 V) is 71.57 % of what the stator of the inductance
/// checks gives at 3600 rpm, within the 80 % of AC 43.13-1B §11-35a. K098: supply meets load at
/// 2847.7 rpm. (Derived; the machine is invented.)
#[test]
fn the_guideline_of_eighty_per_cent() {
    let (_, build) = read(size_builds::STATOR_OF_THE_FACTS, &[]);
    let rows = guideline(&build);
    let at = &rows[0];
    assert!((at.load_a.0 - 10.8103).abs() < 0.001, "{at:?}");
    assert!((at.share.percent() - 71.57).abs() < 0.02, "{at:?}");
    assert!(at.within);
    let meets = at.meets_rpm.expect("a speed").0;
    assert!((meets - 2847.7).abs() < 2.0, "{meets}");
}

/// Progress counts every step once, up to the number it says.
#[test]
fn progress_counts_to_its_end() {
    let (description, build) = read(size_builds::MOWER, &[]);
    let catalogs = Catalogs::builtin();
    let asked = Asked::new(&description, &build, &catalogs);
    let mut steps = Vec::new();
    size(&asked, None, &mut |done, all| steps.push((done, all))).expect("an answer");
    let all = steps.len();
    assert!(
        steps
            .iter()
            .enumerate()
            .all(|(k, step)| *step == (k + 1, all))
    );
}
