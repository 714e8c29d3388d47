//! What each part of an answer takes: `cargo bench --bench speed`.

mod forty;
mod many;

use ampledger::battery::Charge;
use ampledger::build::Build;
use ampledger::catalog::Catalogs;
use ampledger::check::{judge, reserve};
use ampledger::description::{Description, read};
use ampledger::fleet::{Plan, judge_all, read_sheet};
use ampledger::ledger::Machine;
use ampledger::odds::{Wanted, odds};
use ampledger::quantity::{Henries, Ohms, Rpm, Volts, VoltsPerRpm};
use ampledger::resolve::resolve;
use ampledger::source::{Phases, Rectifier, Winding, rectified_dc};
use divan::{Bencher, black_box};
use std::convert::Infallible;
use std::path::Path;

fn main() {
    divan::main();
}

fn described(text: &str) -> Description {
    read("bench", text.as_bytes()).expect("a build").0
}

fn built(text: &str) -> Build {
    resolve(&described(text), &Catalogs::builtin()).expect("complete")
}

fn winding() -> Winding {
    let volts = VoltsPerRpm(28.0 / 3600.0);
    Winding::new(volts, Ohms(0.14), Henries(0.4e-3), 12, Phases::One).expect("a winding")
}

#[divan::bench]
fn winding_current(bencher: Bencher) {
    let (winding, bridge) = (winding(), Rectifier::FullWave { drop: Volts(0.9) });
    bencher.bench_local(|| {
        rectified_dc(
            black_box(&winding),
            &bridge,
            black_box(Rpm(3400.0)),
            black_box(Volts(13.8)),
        )
    });
}

#[divan::bench]
fn bus_root(bencher: Bencher) {
    let machine = Machine::new(&built(&forty::forty())).expect("a battery");
    let running = machine
        .connected
        .iter()
        .find(|w| w.runs)
        .expect("a running state");
    let charge = Charge::rested(ampledger::quantity::Fraction(0.8));
    bencher.bench_local(|| {
        running
            .bus
            .worst(&machine.climate, black_box(charge), machine.cells)
    });
}

#[divan::bench]
fn one_shift(bencher: Bencher) {
    let build = built(&forty::forty());
    let machine = Machine::new(&build).expect("a battery");
    let floor = reserve(&build, &machine).soc;
    bencher.bench_local(|| machine.pass(black_box(Charge::rested(build.start)), floor));
}

/// With its Ah lacking: this build does not keep up.
#[divan::bench]
fn one_verdict(bencher: Bencher) {
    let build = built(&forty::forty());
    assert!(!judge(&build).expect("a verdict").keeps_up());
    bencher.bench_local(|| judge(black_box(&build)));
}

#[divan::bench]
fn reading_and_resolving(bencher: Bencher) {
    let (text, catalogs) = (forty::forty(), Catalogs::builtin());
    bencher.bench_local(|| {
        let (description, _) = read("bench", black_box(text.as_bytes())).expect("a build");
        resolve(&description, &catalogs).expect("complete")
    });
}

fn fleet_of(count: u32) -> (tempfile::TempDir, Plan) {
    let folder = tempfile::tempdir().expect("a folder");
    let mut sheet = "machine,build,count,kit\n".to_owned();
    for number in 0..count {
        let name = format!("{number}.yaml");
        std::fs::write(folder.path().join(&name), many::one_of_many(number)).expect("a file");
        sheet += &format!("m{number},{name},1,\n");
    }
    let at = folder.path().join("fleet.csv");
    let plan = read_sheet("fleet.csv", sheet.as_bytes(), Path::new(&at)).expect("a plan");
    (folder, plan)
}

#[divan::bench(args = [1_000, 10_000], sample_count = 3, sample_size = 1)]
fn fleet(bencher: Bencher, count: u32) {
    let (_folder, plan) = fleet_of(count);
    let catalogs = Catalogs::builtin();
    bencher.bench_local(|| {
        let totals = judge_all(&plan, &catalogs, None, &|_| (), &mut |row| {
            black_box(row);
            Ok::<(), Infallible>(())
        });
        let Ok(totals) = totals;
        assert_eq!((totals.rows, totals.errors), (u64::from(count), 0));
    });
}

#[divan::bench(sample_count = 3, sample_size = 1)]
fn odds_of_10000(bencher: Bencher) {
    let (description, catalogs) = (described(&many::with_tolerances()), Catalogs::builtin());
    let wanted = Wanted {
        runs: 10_000,
        ..Wanted::default()
    };
    bencher.bench_local(|| odds(&description, &catalogs, wanted, &|| ()).expect("odds"));
}
