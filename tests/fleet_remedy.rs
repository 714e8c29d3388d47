//! The bill of a fleet: each row's remedy is the one that `remedy` lists first, proved by the verdict; parts and sums.

use ampledger::catalog::Catalogs;
use ampledger::check::judge;
use ampledger::description::{Assignment, read_fleet, read_set};
use ampledger::fleet::{Plan, Row, Totals, judge_all};
use ampledger::quantity::Money;
use ampledger::remedy::{Asked, Part, Prices, remedy};
use ampledger::resolve::{find_kit, resolve, with_kit};
use std::convert::Infallible;
use std::path::Path;

/// An invented cart that lacks charge with its lamps on.
const CART: &str = "\
build: cart # invented
air: 12 °C
engine: {speeds: {idle: 1700 rpm, governed: 3300 rpm}, starter: {draw: 120 A, time: 2 s}}
charging:
  - winding: {rated: 14 A at 3600 rpm, open_circuit: 29 V at 3600 rpm, resistance: 0.17 ohm, poles: 16}
    rectifier: full-wave
    regulator: {holds: 14.3 V}
battery: {capacity: 32 Ah, cold_cranking: 330 A, type: flooded, reserve: 50 %}
accessories:
  - {name: work lamps, draw: 165 W, law: filament, at: 13.2 V, duty: {idle: 100 %, governed: 90 %}}
  - {name: pump, draw: 5 A, duty: {governed: 30 %, idle: 10 %}}
shift: [crank, {idle: 30 min}, {governed: 120 min}, {stopped: 10 min}, {governed: 60 min}]
parked: 13 h
";

const FLEET: &str = "\
kits: [none, night-work]
machines:
  - {machine: A, build: cart.yaml, count: 3}
  - {machine: B, build: cart.yaml, count: 2, set: [\"accessories[0].draw=170 W\"]}
  - {machine: C, build: cart.yaml, set: [\"accessories[0].draw=20 W\"], kit: none}
  - {machine: D, build: hopeless.yaml, kit: none, count: 7}
";

/// Stands with all on for days: nothing in the catalogs helps.
fn hopeless() -> String {
    CART.replace("parked: 13 h", "parked: 13 h\nmay: {charger: false}")
        .replace("{stopped: 10 min}", "{stopped: 70 h}")
        .replace("governed: 90 %}", "governed: 90 %, stopped: 100 %}")
}

fn judged(folder: &Path, prices: &Prices) -> (Vec<Row>, Totals) {
    std::fs::write(folder.join("cart.yaml"), CART).expect("a file");
    std::fs::write(folder.join("hopeless.yaml"), hopeless()).expect("a file");
    let (text, _) = read_fleet("fleet.yaml", FLEET.as_bytes()).unwrap_or_else(|e| panic!("{e}"));
    let plan = Plan::of_text(&text, &folder.join("fleet.yaml"));
    let mut rows = Vec::new();
    let catalogs = Catalogs::builtin();
    let totals = judge_all(&plan, &catalogs, Some(prices), &|_| (), &mut |row| {
        rows.push(row);
        Ok::<(), Infallible>(())
    });
    let Ok(totals) = totals;
    (rows, totals)
}

#[test]
fn each_remedy_is_the_first_of_its_build() {
    let (folder, catalogs) = (tempfile::tempdir().expect("a folder"), Catalogs::builtin());
    let (rows, _) = judged(folder.path(), &Prices::default());
    let mut mended = 0;
    for row in &rows {
        let outcome = &row.outcome;
        assert!(outcome.error.is_none(), "{row:?}");
        let text = match &*row.build {
            "cart.yaml" => CART.to_owned(),
            _ => hopeless(),
        };
        let set: Vec<Assignment> = match &*row.machine {
            "B" => vec![Assignment::parse("accessories[0].draw=170 W").expect("one")],
            "C" => vec![Assignment::parse("accessories[0].draw=20 W").expect("one")],
            _ => Vec::new(),
        };
        let (mut description, _) = read_set("cart", text.as_bytes(), &set).expect("a build");
        let own = description.accessories.len();
        if let Some(kit) = &row.kit {
            description = with_kit(&description, &find_kit(&catalogs, kit).expect("a kit"));
        }
        let build = resolve(&description, &catalogs).expect("complete");
        assert_eq!(
            outcome.verdict,
            Some(judge(&build).expect("one").verdict()),
            "{row:?}"
        );
        let asked = Asked {
            own,
            ..Asked::new(&description, &build, &catalogs)
        };
        let found = remedy(&asked, &Prices::default(), &mut |_, _| {}).expect("answers");
        let first = found.answers.first();
        assert_eq!(
            outcome.remedy,
            first.map(|a| a.changes.join("; ")),
            "{row:?}"
        );
        assert_eq!(outcome.cost, first.and_then(|a| a.cost), "{row:?}");
        assert_eq!(
            outcome.set,
            first.map_or(Vec::new(), |a| a.set.clone()),
            "{row:?}"
        );
        assert_eq!(outcome.binds, found.binds, "{row:?}");
        mended += usize::from(first.is_some());
    }
    assert!(mended >= 4, "{rows:?}");
    let of = |machine: &str| rows.iter().find(|r| &*r.machine == machine).expect("a row");
    assert!(of("C").outcome.remedy.is_none() && of("C").outcome.binds.is_none());
    assert!(of("D").outcome.remedy.is_none() && of("D").outcome.binds.is_some());
}

/// Sums by hand from the rows; what is to be bought costs what the bill says.
#[test]
fn the_bill_adds_up() {
    let folder = tempfile::tempdir().expect("a folder");
    let (rows, totals) = judged(folder.path(), &Prices::default());
    for group in &totals.groups {
        let mine = || rows.iter().filter(|r| r.kit == group.kit);
        let cost = |r: &Row| r.outcome.cost.map_or(0.0, |c| c.0 * f64::from(r.count));
        let remedies: f64 = mine().map(cost).sum();
        assert!((group.remedies_cost.0 - remedies).abs() < 1e-9, "{group:?}");
        let kits = group.kits_cost.map_or(0.0, |k| k.0);
        assert!(
            (group.cost.0 - kits - remedies).abs() < 1e-9 && group.unpriced == 0,
            "{group:?}"
        );
        let short = mine().filter(|r| r.outcome.remedy.is_none() && r.outcome.binds.is_some());
        let short: u32 = short.map(|r| r.count).sum();
        assert_eq!(group.unmended, u64::from(short));
        // The remedies' parts at their prices are the remedies' cost: a row's parts, counted.
        let lines = mine().flat_map(|r| {
            let count = u64::from(r.count);
            let line = move |p: &Part| p.each.expect("a price").0 * (p.count * count) as f64;
            r.outcome.parts.iter().map(line)
        });
        assert!((lines.sum::<f64>() - remedies).abs() < 1e-9, "{group:?}");
        let bought = |id: &str| -> u64 {
            let mine = group.parts.iter().filter(|p| p.part.as_deref() == Some(id));
            mine.map(|p| p.count).sum()
        };
        for part in mine().flat_map(|r| &r.outcome.parts) {
            let id = part.part.as_deref().expect("an id");
            let wanted = mine().map(|r| {
                let parts = r.outcome.parts.iter();
                let same = parts.filter(|p| p.part.as_deref() == Some(id));
                same.map(|p| p.count).sum::<u64>() * u64::from(r.count)
            });
            assert!(bought(id) >= wanted.sum(), "{id}: {group:?}");
        }
    }
    let as_it_is = totals.groups.iter().find(|g| g.kit.is_none());
    assert_eq!(as_it_is.expect("a group").unmended, 7);
}

/// A price list of the owner's goes before the catalogs', for the remedies and for the kits.
#[test]
fn prices_of_the_owner() {
    let folder = tempfile::tempdir().expect("a folder");
    let (rows, _) = judged(folder.path(), &Prices::default());
    let part = rows.iter().flat_map(|r| &r.outcome.parts).next();
    let id = part.and_then(|p| p.part.clone()).expect("a part to buy");
    let mut prices = Prices {
        currency: "EUR".to_owned(),
        ..Prices::default()
    };
    prices.by_id.insert(id.clone(), Money(0.5));
    prices.by_id.insert("night-work".to_owned(), Money(1000.0));
    let (rows, totals) = judged(folder.path(), &prices);
    let mut parts = rows.iter().flat_map(|r| &r.outcome.parts);
    let same = parts.find(|p| p.part.as_ref() == Some(&id));
    assert_eq!(same.and_then(|p| p.each), Some(Money(0.5)));
    let night = totals.groups.iter().find(|g| g.kit.is_some());
    let night = night.expect("a group");
    assert_eq!(night.kits_cost, Some(Money(1000.0 * night.machines as f64)));
}
