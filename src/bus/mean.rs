//! Means over the coincidences of cycling loads at one instant.
//!
//! Bus volts as a function of the load have kinks: where a regulator lets go, and where the
//! battery turns from charging to discharging. Between kinks they are smooth. So the cases are
//! sorted into the regions between kinks; a region with a regulator holding has one voltage, and
//! a smooth one is integrated at two loads that keep the first three moments of its cases, or at
//! two on either side of its mean where they spread. Up to [`FEW`] cases in a region are each
//! solved for themselves.

use super::Cuts;
use super::point::{Bus, Drawn};
use crate::battery::{Climate, Terminals};
use crate::load::{Coincidences, LoadSum};
use crate::quantity::{Amps, Fraction, Volts};
use std::ops::Range;

/// Cases of a region that are solved one by one.
const FEW: usize = 3;
/// Spread of a region's currents, against the current at which half of the battery's polarisation
/// acts, from which its halves are integrated apart.
const NARROW: f64 = 0.1;

/// Means over the coincidences.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Flow {
    /// Into the battery at its terminals.
    pub battery: Amps,
    /// Through its main branch: what changes the charge.
    pub main: Amps,
    /// Gas and self-discharge.
    pub gas: Amps,
    /// What the accessories draw.
    pub loads: Amps,
    /// Bus volts.
    pub bus: Volts,
    /// Target of the battery's depletion.
    pub depletion: Fraction,
    /// Change of bus volts for one ampere more drawn, from the cases themselves, V/A; none
    /// without cycling loads.
    pub give_way: crate::quantity::Ohms,
}

/// Sums on the way to a [`Flow`].
#[derive(Clone, Copy, Debug, Default)]
struct Sums {
    share: f64,
    battery: f64,
    main: f64,
    gas: f64,
    loads: f64,
    bus: f64,
    depletion: f64,
    loads2: f64,
    bus_loads: f64,
}

impl Sums {
    fn add(
        &mut self,
        share: f64,
        volts: f64,
        loads: f64,
        terminals: &Terminals,
        climate: &Climate,
    ) {
        let battery = terminals.current(Volts(volts));
        self.share += share;
        self.battery += share * battery.total.0;
        self.main += share * battery.main.0;
        self.gas += share * battery.gas.0;
        self.loads += share * loads;
        self.bus += share * volts;
        self.depletion += share * climate.depletion_target(battery.total).0;
        self.loads2 += share * loads * loads;
        self.bus_loads += share * loads * volts;
    }

    fn flow(&self) -> Flow {
        let w = 1.0 / self.share.max(f64::MIN_POSITIVE);
        let (loads, bus) = (w * self.loads, w * self.bus);
        let spread = w * self.loads2 - loads * loads;
        let gives = if spread > 1e-9 {
            (w * self.bus_loads - loads * bus) / spread
        } else {
            0.0
        };
        Flow {
            battery: Amps(w * self.battery),
            main: Amps(w * self.main),
            gas: Amps(w * self.gas),
            loads: Amps(loads),
            bus: Volts(bus),
            depletion: Fraction(w * self.depletion),
            give_way: crate::quantity::Ohms(gives),
        }
    }
}

/// The mean flow over all coincidences.
#[must_use]
pub fn flow(bus: &Bus<'_>, cases: &Coincidences, cuts: &Cuts, climate: &Climate) -> Flow {
    let mut sums = Sums::default();
    if cuts_may_act(bus, cases, cuts) {
        with_cuts(bus, cases, cuts, climate, &mut sums);
    } else {
        by_region(bus, cases, climate, &mut sums);
    }
    sums.flow()
}

/// Whether the heaviest case takes the bus under the highest of the lower working limits.
pub(super) fn cuts_may_act(bus: &Bus<'_>, cases: &Coincidences, cuts: &Cuts) -> bool {
    cuts.highest()
        .is_some_and(|limit| !bus.holds(&cases.heaviest_total(), limit))
}

/// Every case by itself: below their limits accessories ask for what they take there.
fn with_cuts(bus: &Bus<'_>, cases: &Coincidences, cuts: &Cuts, climate: &Climate, sums: &mut Sums) {
    for (case, (share, _)) in cases.cases().enumerate() {
        let draw = cuts.asked(cases.by_class(case));
        let volts = bus.operating_point(&draw);
        sums.add(
            share.0,
            volts,
            draw.drawn(volts, bus.filaments).0,
            bus.terminals,
            climate,
        );
    }
}

/// Cases in the order of what they draw, cut into the regions between boundaries. Their order at
/// a boundary's volts is all but that at the reference volts; one that falls on the wrong side is
/// solved at the boundary itself, where it is all but right.
fn by_region(bus: &Bus<'_>, cases: &Coincidences, climate: &Climate, sums: &mut Sums) {
    let mut from = 0;
    let mut high = bus.high;
    for boundary in bus.boundaries() {
        let to = cases.first_from(from, |sum| sum.current(boundary.at).0 > boundary.above);
        integrate(bus, cases, from..to, (boundary.volts, high), climate, sums);
        from = to;
        if boundary.below > boundary.above {
            let to = cases.first_from(from, |sum| sum.current(boundary.at).0 > boundary.below);
            let held = cases.tally(from..to);
            if held.share > 0.0 {
                let drawn = held.mean().current(boundary.at).0;
                sums.add(held.share, boundary.volts, drawn, bus.terminals, climate);
            }
            from = to;
        }
        if from == cases.len() {
            return;
        }
        high = boundary.volts;
    }
    integrate(
        bus,
        cases,
        from..cases.len(),
        (bus.low, high),
        climate,
        sums,
    );
}

/// Adds the cases of one smooth region of bus volts.
fn integrate(
    bus: &Bus<'_>,
    cases: &Coincidences,
    range: Range<usize>,
    volts: (f64, f64),
    climate: &Climate,
    sums: &mut Sums,
) {
    let mut solve = |share: f64, sum: &LoadSum| {
        let solved = bus.balance(sum, volts.0, volts.1, bus.guess(sum));
        sums.add(
            share,
            solved,
            sum.drawn(solved, bus.filaments).0,
            bus.terminals,
            climate,
        );
    };
    if range.len() <= FEW {
        for case in range {
            solve(cases.share(case), cases.total(case));
        }
        return;
    }
    let all = cases.tally(range.clone());
    let halves = if all.deviation() < NARROW * climate.half_current().0 {
        [range, 0..0]
    } else {
        let middle = cases.first_above(range.clone(), all.mean_current());
        [range.start..middle, middle..range.end]
    };
    for half in halves {
        for (share, sum) in cases.tally(half).nodes() {
            if share > 0.0 {
                solve(share, &sum);
            }
        }
    }
}
