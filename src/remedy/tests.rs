//! The search against trying every combination, on catalogs small enough for it; assignments against
//! the builds they stand for. Builds and catalogs are invented.

use super::change::{Change, Effort, What, made};
use super::offer::{Slot, offers};
use super::search::{Candidate, Enough, candidates, changed, chosen, search};
use super::{Asked, Prices, first_remedy, remedy};
use crate::build::Build;
use crate::catalog::Catalogs;
use crate::check::answer::Verdict;
use crate::check::rule;
use crate::description::{Assignment, Description, read_set};
use crate::resolve::resolve;

/// A small catalog: two windings, two batteries, two LED lamps.
const CATALOG: &str = "charging:
  - {id: w-mid, title: middle winding, winding: {rated: 19 A at 3600 rpm, open_circuit: 30 V at 3600 rpm, resistance: 0.14 ohm, poles: 16}, rectifier: full-wave, regulator: {holds: 14.3 V}, price: 120}
  - {id: w-big, title: big winding, winding: {rated: 26 A at 3600 rpm, open_circuit: 31 V at 3600 rpm, resistance: 0.11 ohm, poles: 16}, rectifier: full-wave, regulator: {holds: 14.3 V}, price: 210}
batteries:
  - {id: b-mid, title: middle battery, capacity: 45 Ah, cold_cranking: 400 A, type: flooded, price: 90}
  - {id: b-big, title: big battery, capacity: 75 Ah, cold_cranking: 600 A, type: agm, price: 190}
accessories:
  - {id: led-a, title: lamp a, draw: 30 W, works: 9 V to 30 V, lumens: 2500, price: 35}
  - {id: led-b, title: lamp b, draw: 14 W, works: 9 V to 30 V, lumens: 1250, price: 22}
";

fn text(work: f64, head: f64, minutes: f64) -> String {
    format!(
        "build: hauler
air: 8 °C
engine: {{speeds: {{idle: 1700 rpm, governed: 3300 rpm}}, starter: {{draw: 120 A, time: 3 s}}}}
charging:
  - winding: {{rated: 14 A at 3600 rpm, open_circuit: 29 V at 3600 rpm, resistance: 0.17 ohm, poles: 16}}
    rectifier: full-wave
    regulator: {{holds: 14.3 V}}
battery: {{capacity: 30 Ah, cold_cranking: 280 A, type: flooded, reserve: 50 %}}
accessories:
  - {{name: \"Lamps: work\", draw: {work} W, law: filament, at: 13.2 V, duty: {{idle: 100 %, governed: 90 %}}, run: 2 m}}
  - {{name: Head, draw: {head} W, law: filament, at: 13.2 V, duty: 60 %}}
  - {{name: pump, draw: 5 A, duty: {{governed: 30 %, idle: 10 %}}}}
shift: [crank, {{idle: {minutes} min}}, {{governed: 120 min}}, {{stopped: 10 min}}, {{governed: 60 min}}]
parked: 13 h
"
    )
}

fn read(text: &str, set: &[String], catalogs: &Catalogs) -> (Description, Build) {
    let set: Vec<Assignment> = set
        .iter()
        .map(|s| Assignment::parse(s).unwrap_or_else(|e| panic!("{s}: {e}")))
        .collect();
    let (description, _) =
        read_set("test", text.as_bytes(), &set).unwrap_or_else(|e| panic!("{set:?}: {e}"));
    let build = resolve(&description, catalogs);
    let build = build.unwrap_or_else(|e| panic!("{set:?}: {e:?}"));
    (description, build)
}

/// The small catalog alone: the built-in entries are left out of its offers by their ids.
fn small(folder: &tempfile::TempDir) -> Catalogs {
    std::fs::write(folder.path().join("small.yaml"), CATALOG).expect("a file");
    Catalogs::with_folder(folder.path()).expect("a catalog")
}

fn own(slots: Vec<Slot>) -> Vec<Slot> {
    let ours = |change: &Change| match &change.what {
        What::Winding { id, .. } | What::Battery { id } | What::Lamp { id, .. } => {
            CATALOG.contains(&format!("id: {id},"))
        }
        _ => true,
    };
    slots
        .into_iter()
        .map(|mut slot| {
            slot.ways.retain(ours);
            slot
        })
        .filter(|slot| !slot.ways.is_empty())
        .collect()
}

/// Every combination tried by the full verdict, then what is dominated struck out: by one that asks
/// no more and changes no thing that the other leaves.
fn by_force(asked: &Asked<'_>, slots: &[Slot]) -> Vec<Candidate> {
    let all = candidates(slots);
    let holds = |c: &Candidate| {
        let build = changed(asked, chosen(slots, &c.choice)).expect("it fits");
        rule(&build).expect("an answer").verdict == Verdict::KeepsUp
    };
    let good: Vec<Candidate> = all.into_iter().filter(holds).collect();
    let dominated = |(at, this): (usize, &Candidate)| {
        good.iter().enumerate().any(|(k, other)| {
            let within = other.choice.iter().zip(&this.choice);
            let within = within.into_iter().all(|(o, t)| o.is_none() || t.is_some());
            k < at && within && other.effort.cmp(&this.effort).is_le()
        })
    };
    let kept = good.iter().enumerate().filter(|pair| !dominated(*pair));
    kept.map(|(_, c)| c.clone()).collect()
}

#[test]
fn the_search_equals_trying_everything() {
    let folder = tempfile::tempdir().expect("a folder");
    let catalogs = small(&folder);
    let (mut answers, mut tried, mut combinations) = (0, 0, 0);
    for (work, head, minutes) in [
        (120.0, 40.0, 20.0),
        (150.0, 55.0, 30.0),
        (210.0, 60.0, 25.0),
        (170.0, 110.0, 45.0),
    ] {
        let text = text(work, head, minutes);
        let (description, build) = read(&text, &[], &catalogs);
        let asked = Asked::new(&description, &build, &catalogs);
        let slots = own(offers(&asked, &Prices::default(), false));
        assert!(slots.len() >= 4, "{slots:?}");
        let want = by_force(&asked, &slots);
        let (found, count) = search(&asked, &slots, Enough::Of(usize::MAX), &mut |_, _| {});
        let choices =
            |list: &[Candidate]| -> Vec<_> { list.iter().map(|c| c.choice.clone()).collect() };
        assert_eq!(choices(&found), choices(&want), "{work} {head} {minutes}");
        answers += found.len();
        tried += count;
        combinations += candidates(&slots).len();
    }
    assert!(answers >= 8, "{answers}");
    assert!(3 * tried < 2 * combinations, "{tried} of {combinations}");
}

#[test]
fn assignments_make_the_same_builds() {
    let folder = tempfile::tempdir().expect("a folder");
    let catalogs = small(&folder);
    let text = text(150.0, 55.0, 30.0);
    let (description, build) = read(&text, &[], &catalogs);
    let asked = Asked::new(&description, &build, &catalogs);
    let slots = own(offers(&asked, &Prices::default(), true));
    let mut kinds = 0;
    for slot in &slots {
        for way in &slot.ways {
            let (_, set) = made(&description, [way]).expect("it fits");
            let built = way.alone(&asked).expect("it fits");
            let (_, again) = read(&text, &set, &catalogs);
            let (a, b) = (
                rule(&built).expect("an answer"),
                rule(&again).expect("an answer"),
            );
            assert_eq!(a, b, "{set:?}");
            kinds += 1;
        }
    }
    assert!(kinds >= 9, "{slots:?}");
}

/// What a fleet is told is what `remedy` lists first.
#[test]
fn the_first_alone_is_the_first_of_the_list() {
    let catalogs = Catalogs::builtin();
    let mut found = 0;
    for (work, head, minutes) in [
        (120.0, 40.0, 20.0),
        (150.0, 55.0, 30.0),
        (170.0, 110.0, 45.0),
        (400.0, 110.0, 90.0),
    ] {
        let text = text(work, head, minutes);
        let (description, build) = read(&text, &[], &catalogs);
        let asked = Asked::new(&description, &build, &catalogs);
        let prices = Prices::default();
        let all = remedy(&asked, &prices, &mut |_, _| {}).expect("answers");
        let first = first_remedy(&asked, &prices).expect("answers");
        assert_eq!(first.answers.first(), all.answers.first(), "{text}");
        assert!(first.tried <= all.tried);
        found += first.answers.len();
    }
    assert!(found >= 3, "{found}");
}

#[test]
fn answers_are_priced_and_in_order() {
    let catalogs = Catalogs::builtin();
    let text = text(150.0, 55.0, 30.0);
    let (description, build) = read(&text, &[], &catalogs);
    let asked = Asked::new(&description, &build, &catalogs);
    let found = remedy(&asked, &Prices::default(), &mut |_, _| {}).expect("answers");
    assert!(
        !found.keeps_up && (2..=super::MOST).contains(&found.answers.len()),
        "{found:?}"
    );
    let costs: Vec<f64> = found
        .answers
        .iter()
        .filter_map(|a| Some(a.cost?.0))
        .collect();
    assert!(costs.windows(2).all(|w| w[0] <= w[1]), "{costs:?}");
    for answer in &found.answers {
        let (_, again) = read(&text, &answer.set, &catalogs);
        let ruling = rule(&again).expect("an answer");
        assert_eq!(ruling.verdict, Verdict::KeepsUp, "{answer:?}");
        assert_eq!(
            ruling.settles.map(|(c, _)| c.soc),
            answer.settles_soc,
            "{answer:?}"
        );
    }
    // A price list goes before the catalog's prices.
    let dear = found
        .answers
        .iter()
        .find(|a| a.cost.is_some_and(|c| c.0 > 0.0));
    let dear = dear.expect("one with parts").clone();
    let mut prices = Prices {
        currency: "EUR".to_owned(),
        ..Prices::default()
    };
    for entry in catalogs.entries(crate::catalog::Kind::Charging) {
        prices.by_id.insert(entry.id, crate::quantity::Money(1e4));
    }
    prices
        .by_id
        .insert("no-such-part".to_owned(), crate::quantity::Money(1.0));
    let again = remedy(&asked, &prices, &mut |_, _| {}).expect("answers");
    assert_eq!(again.currency, "EUR");
    assert!(
        again.notes.iter().any(|n| n.contains("no-such-part")),
        "{:?}",
        again.notes
    );
    let changed = again
        .answers
        .iter()
        .all(|a| a.cost != dear.cost || a.set != dear.set);
    let winding = dear.set.iter().any(|s| s.starts_with("charging"));
    assert!(changed || !winding, "{again:?}");
}

#[test]
fn may_limits_what_is_offered() {
    let catalogs = Catalogs::builtin();
    let limited = format!(
        "{}may: {{speeds: {{idle: 2600 rpm}}, duty: {{pump: 10 %}}, lamps: true}}\n",
        text(170.0, 110.0, 45.0)
    );
    let (description, build) = read(&limited, &[], &catalogs);
    let asked = Asked::new(&description, &build, &catalogs);
    let found = remedy(&asked, &Prices::default(), &mut |_, _| {}).expect("answers");
    assert!(!found.answers.is_empty(), "{found:?}");
    for set in found.answers.iter().flat_map(|a| &a.set) {
        let allowed = set.starts_with("engine.speeds.idle=")
            || set.starts_with("accessories[2].duty")
            || (set.starts_with("accessories[") && set.contains("{part: "));
        assert!(allowed, "{set}");
    }
}

/// Speeds and duties go no further than they need: ten rpm or one per cent less does not do.
#[test]
fn changes_of_degree_are_tight() {
    let catalogs = Catalogs::builtin();
    // The first of ever more watts that falls short.
    let short = (10..40).map(f64::from).find_map(|tens| {
        let limited = format!(
            "{}may: {{speeds: {{idle: 3000 rpm}}}}\n",
            text(10.0 * tens, 40.0, 20.0)
        );
        let (description, build) = read(&limited, &[], &catalogs);
        let verdict = rule(&build).expect("an answer").verdict;
        (verdict != Verdict::KeepsUp).then_some((limited, description, build))
    });
    let (limited, description, build) = short.expect("one falls short");
    let asked = Asked::new(&description, &build, &catalogs);
    let found = remedy(&asked, &Prices::default(), &mut |_, _| {}).expect("answers");
    let set = &found.answers.first().expect("an answer").set;
    assert_eq!(set.len(), 1, "{set:?}");
    let rpm: f64 = set[0]
        .trim_start_matches("engine.speeds.idle=")
        .trim_end_matches(" rpm")
        .parse()
        .expect("a speed");
    let less = format!("engine.speeds.idle={} rpm", rpm - 10.0);
    let (_, short) = read(&limited, &[less], &catalogs);
    assert_ne!(
        rule(&short).expect("an answer").verdict,
        Verdict::KeepsUp,
        "{rpm}"
    );
}

#[test]
fn effort_orders_unknown_prices_last() {
    let change = |cost: Option<f64>, much: f64| Change {
        words: String::new(),
        cost: cost.map(crate::quantity::Money),
        much,
        what: What::Battery { id: String::new() },
    };
    let of = |list: &[Change]| Effort::of(list);
    let (cheap, dear) = (change(Some(10.0), 3.0), change(Some(20.0), 0.1));
    let unknown = change(None, 0.0);
    assert!(
        of(std::slice::from_ref(&cheap))
            .cmp(&of(std::slice::from_ref(&dear)))
            .is_lt()
    );
    assert!(
        of(std::slice::from_ref(&dear))
            .cmp(&of(std::slice::from_ref(&unknown)))
            .is_lt()
    );
    assert!(
        of(&[cheap.clone(), change(Some(0.0), 0.0)])
            .cmp(&of(std::slice::from_ref(&cheap)))
            .is_gt()
    );
    assert_eq!(of(&[cheap, unknown]).cost(), None);
}

#[test]
fn price_lists_are_read_and_refused() {
    let folder = tempfile::tempdir().expect("a folder");
    let path = folder.path().join("prices.yaml");
    let list = |text: &str| {
        std::fs::write(&path, text).expect("a file");
        super::read_prices(&path)
    };
    let good = list("currency: EUR\nprices: {winding-20a: 199, charger: 45.5}\n").expect("a list");
    assert_eq!(good.currency, "EUR");
    assert_eq!(good.of("charger", None), Some(crate::quantity::Money(45.5)));
    let catalog = Some(crate::quantity::Money(7.0));
    assert_eq!(good.of("winding-16a", catalog), catalog);
    for (text, at) in [
        ("currency: EUR\nprices: {winding-20a: -1}\n", ":2:"),
        ("prices:\n  winding-20a: 12 V\n", ":2:"),
        ("currency: EUR\nprice: {winding-20a: 1}\n", ":2:"),
        ("currency: EUR\n", ""),
        ("prices: {a: .nan}\n", ":1:"),
        ("[1, 2]\n", ""),
    ] {
        let refusal = list(text).expect_err(text).to_string();
        assert!(refusal.contains(at), "{text}: {refusal}");
    }
}
