//! Live comparison with an independent circuit simulator, on cases drawn afresh each time.
//!
//! `cargo test --features live --test live_ngspice -- --nocapture` (needs `ngspice` on the path, and fails without).
//! The seed is printed; `AMPLEDGER_LIVE_SEED` fixes it.

#[path = "live/case.rs"]
mod case;
#[path = "live/draw.rs"]
mod draw;
#[path = "live/netlist.rs"]
mod netlist;
#[path = "live/simulator.rs"]
mod simulator;

use case::{Case, Figures};
use rayon::prelude::*;
use std::time::{Duration, Instant};

/// How many times faster than a simulator's run one call has to be.
const WANTED_RATIO: f64 = 1e5;

/// What came of one case.
struct Outcome {
    name: String,
    ours: Figures,
    theirs: Figures,
    worst_share: f64,
    simulated_in: Duration,
    call_seconds: f64,
}

fn seed() -> u64 {
    if let Ok(text) = std::env::var("AMPLEDGER_LIVE_SEED") {
        return text.parse().expect("AMPLEDGER_LIVE_SEED is a whole number");
    }
    let since = std::time::SystemTime::now().duration_since(std::time::UNIX_EPOCH);
    since.map_or(1, |d| d.as_secs())
}

/// Seconds of one call, over enough calls to measure.
fn time_call(case: &Case) -> f64 {
    let calls = 2000;
    let begun = Instant::now();
    for _ in 0..calls {
        std::hint::black_box(std::hint::black_box(case).ours());
    }
    begun.elapsed().as_secs_f64() / f64::from(calls)
}

fn run(case: &Case) -> Outcome {
    let ours = case.ours();
    let (theirs, simulated_in) = simulator::run(case);
    let share = |got: f64, want: f64, bound: f64| (got - want).abs() / bound.max(f64::MIN_POSITIVE);
    let worst_share = [
        share(ours.dc, theirs.dc, case.bound(theirs.dc)),
        share(ours.rms, theirs.rms, case.bound(theirs.rms)),
        share(ours.volts, theirs.volts, case.volts_bound(theirs.volts)),
    ]
    .into_iter()
    .fold(0.0, f64::max);
    Outcome {
        name: case.name(),
        ours,
        theirs,
        worst_share,
        simulated_in,
        call_seconds: time_call(case),
    }
}

#[test]
fn fresh_cases_agree() {
    simulator::must_be_there();
    let seed = seed();
    println!("AMPLEDGER_LIVE_SEED={seed}");
    let cases = draw::cases(seed);
    assert!(cases.len() >= 20);
    let outcomes: Vec<Outcome> = cases.par_iter().map(run).collect();
    let mut least_ratio = f64::INFINITY;
    for (outcome, case) in outcomes.iter().zip(&cases) {
        let ratio = outcome.simulated_in.as_secs_f64() / outcome.call_seconds;
        if case.is_plain_rectifier() {
            least_ratio = least_ratio.min(ratio);
        }
        println!(
            "{}\n    ours {:?}\n    ngspice {:?}\n    {:.2} of the bound; {:.2} s against {:.2} us, {:.0} times",
            outcome.name,
            outcome.ours,
            outcome.theirs,
            outcome.worst_share,
            outcome.simulated_in.as_secs_f64(),
            1e6 * outcome.call_seconds,
            ratio
        );
    }
    println!(
        "{} cases; into a bus at least {least_ratio:.0} times faster",
        outcomes.len()
    );
    for outcome in &outcomes {
        assert!(
            outcome.worst_share <= 1.0,
            "seed {seed}: {} is off",
            outcome.name
        );
    }
    // Debug builds are several times slower, and their ratio is of no interest.
    let fast = cfg!(debug_assertions) || least_ratio >= WANTED_RATIO;
    assert!(fast, "only {least_ratio:.0} times faster");
}
