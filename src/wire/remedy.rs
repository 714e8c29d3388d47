//! Where no standard pair of wire and fuse will do: which constraint cannot be met, and what would.

use super::ampacity::Laid;
use super::answer::Unmet;
use super::conductor::Gauge;
use super::demand::Demand;
use super::size::{Miss, NoChoice, Settled, choose, settle};
use super::tables::Tables;
use crate::quantity::{Amps, Celsius, Fraction, Metres, format};

/// Most wires that a load is split over.
const MOST_WIRES: u32 = 8;
/// Halvings in the search for the longest run.
const HALVINGS: u32 = 20;

/// A demand without a choice, told.
pub(super) fn unmet(
    tables: &Tables,
    gauge: Gauge,
    demand: &Demand,
    laid: &Laid,
    why: &NoChoice,
) -> Unmet {
    let (impossible, amps) = match why {
        NoChoice::Insulation(class) => (vec![no_class(tables, *class)], None),
        NoChoice::NoSizes => (vec!["the tables hold no size of wire".to_owned()], None),
        NoChoice::Thickest(settled, misses) => {
            let all = misses.iter().map(|miss| told(miss, settled, demand));
            (all.collect(), Some(settled.amps))
        }
    };
    Unmet {
        name: demand.name.clone(),
        accessories: demand.members.iter().map(|m| m.name.clone()).collect(),
        amps,
        run_m: demand.run,
        impossible,
        would: would(tables, gauge, demand, laid, why),
    }
}

fn no_class(tables: &Tables, class: Celsius) -> String {
    let lowest = tables.ampacity.classes().next().unwrap_or(Celsius::ZERO);
    format!(
        "ampacity: the table begins at insulation of {}, this is {}",
        format::temperature(lowest),
        format::temperature(class)
    )
}

/// One constraint missed by the thickest wire.
fn told(miss: &Miss, thickest: &Settled, demand: &Demand) -> String {
    let wire = thickest.wire.name();
    match miss {
        Miss::NoFuse { amps, most } => format!(
            "fuse and load: the load is {}, the largest standard fuse carries {}",
            format::text(*amps),
            format::text(*most)
        ),
        Miss::Surge { accessory, peak } => format!(
            "fuse and load: no standard fuse is sure to hold the {} at which {accessory} starts",
            format::text(*peak)
        ),
        Miss::Ampacity { fuse, allows } => format!(
            "fuse and wire: the load needs a fuse of {}, {wire}, the thickest wire, may carry {}",
            format::text(*fuse),
            format::text(*allows)
        ),
        Miss::Drop { lost, allowed } => format!(
            "volts lost: {wire}, the thickest wire, loses {} over {}, {} are allowed",
            format::text(*lost),
            format::text(demand.length()),
            format::text(*allowed)
        ),
    }
}

/// Single changes with which a choice exists, each tried.
fn would(
    tables: &Tables,
    gauge: Gauge,
    demand: &Demand,
    laid: &Laid,
    why: &NoChoice,
) -> Vec<String> {
    let holds = |demand: &Demand, laid: &Laid| choose(tables, gauge, demand, laid).is_ok();
    let mut ways = laid_otherwise(tables, &holds, demand, laid);
    ways.extend(parted(&holds, demand, laid));
    if let Some(run) = longest_run(&holds, demand, laid) {
        ways.push(format!("a run of at most {} m", format::fixed(run, 1)));
    }
    let NoChoice::Thickest(settled, misses) = why else {
        return ways;
    };
    if matches!(misses.first(), Some(Miss::NoFuse { .. })) {
        ways.extend(beyond_fuses(tables, gauge, demand, laid));
    }
    if matches!(misses.as_slice(), [Miss::Drop { .. }]) {
        let share = round_up(Fraction(settled.lost / demand.system));
        ways.push(format!("`max_drop: {}`", format::text(share)));
    }
    ways
}

/// Better insulation, another way, no bundle.
fn laid_otherwise(
    tables: &Tables,
    holds: &impl Fn(&Demand, &Laid) -> bool,
    demand: &Demand,
    laid: &Laid,
) -> Vec<String> {
    let mut ways = Vec::new();
    let with = |insulation: Celsius| Laid {
        insulation,
        ..*laid
    };
    let better = tables
        .ampacity
        .classes()
        .filter(|class| *class > laid.insulation)
        .find(|class| holds(demand, &with(*class)));
    if let Some(class) = better {
        ways.push(format!("insulation of {}", format::temperature(class)));
    }
    let outside = Laid {
        engine_space: false,
        ..*laid
    };
    if laid.engine_space && holds(demand, &outside) {
        ways.push("a way outside the engine space".to_owned());
    }
    let single = Laid { bundle: 1, ..*laid };
    if laid.bundle > 2 && holds(demand, &single) {
        ways.push("the wire by itself, in no bundle".to_owned());
    }
    ways
}

/// The fewest wires over which the load would have to be split.
fn parted(holds: &impl Fn(&Demand, &Laid) -> bool, demand: &Demand, laid: &Laid) -> Option<String> {
    let wires = (2..=MOST_WIRES).find(|n| {
        let share = Fraction(1.0 / f64::from(*n));
        let part = Demand {
            share,
            ..demand.clone()
        };
        holds(&part, laid)
    })?;
    Some(format!(
        "the load, where it can be parted, split evenly over {wires} wires, each with its own fuse"
    ))
}

/// A fuse or breaker beyond the list, and the thinnest wire that it protects and that loses no more
/// volts than allowed.
fn beyond_fuses(tables: &Tables, gauge: Gauge, demand: &Demand, laid: &Laid) -> Option<String> {
    let place = tables.ampacity.place(laid)?;
    let (loading, _) = tables.fuses.loading()?;
    let mut sizes = tables.conductors.offered(gauge).into_iter();
    let settled = sizes.find_map(|wire| {
        let settled = settle(tables, demand, &place, wire)?;
        let carries = settled.amps.0 / loading.0 <= settled.allows.0;
        (carries && settled.lost <= demand.allowed()).then_some(settled)
    })?;
    Some(format!(
        "a bolted-down fuse or a breaker, neither in these tables, of {} to {} on {}",
        format::text(Amps(settled.amps.0 / loading.0)),
        format::text(settled.allows),
        settled.wire.name()
    ))
}

/// The longest run with a choice, in whole decimetres; none where even no length helps.
fn longest_run(
    holds: &impl Fn(&Demand, &Laid) -> bool,
    demand: &Demand,
    laid: &Laid,
) -> Option<Metres> {
    let with = |run: f64| Demand {
        run: Metres(run),
        ..demand.clone()
    };
    if !holds(&with(0.0), laid) {
        return None;
    }
    let (mut low, mut high) = (0.0, demand.run.0);
    for _ in 0..HALVINGS {
        let middle = 0.5 * (low + high);
        if holds(&with(middle), laid) {
            low = middle
        } else {
            high = middle
        }
    }
    let run = (low * 10.0 + 1e-6).floor() / 10.0;
    (run > 0.0).then_some(Metres(run))
}

/// A share as the next whole tenth of a per cent.
fn round_up(share: Fraction) -> Fraction {
    Fraction((share.0 * 1000.0).ceil() / 1000.0)
}
