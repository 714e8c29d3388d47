//! Means over the coincidences of cycling loads at one instant.
//!
//! Bus volts as a function of the load have kinks: where a regulator lets go, and where the
//! battery turns from charging to discharging. Between kinks they are smooth. So the cases are
//! sorted into the regions between kinks; a region with a regulator holding has one voltage, and
//! a smooth one is integrated at [`NODES`] loads that keep the first three moments of its cases
//! on either side of its mean. Up to [`FEW`] cases in a region are each solved for themselves.

use super::Cuts;
use super::point::{Boundary, Bus, Drawn};
use crate::battery::{Climate, Terminals};
use crate::load::{At, Coincidences, LoadSum};
use crate::quantity::{Amps, Fraction, Volts};

/// Cases of a region that are solved one by one.
const FEW: usize = 3;
/// Loads that stand for half a region's cases.
const NODES: usize = 2;

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
    let boundaries = bus.boundaries();
    let mut sums = Sums::default();
    let lightest_first = cases.len();
    if lightest_first > 1 || !cuts.is_none() {
        let lowest = bus.operating_point(&cases.heaviest_total(), &boundaries);
        if cuts.reach(lowest) {
            with_cuts(bus, cases, cuts, climate, &boundaries, &mut sums);
            return sums.flow();
        }
    }
    by_region(bus, cases, climate, &boundaries, &mut sums);
    sums.flow()
}

/// Every case by itself, accessories dropping out below their limits.
fn with_cuts(
    bus: &Bus<'_>,
    cases: &Coincidences,
    cuts: &Cuts,
    climate: &Climate,
    boundaries: &[Boundary],
    sums: &mut Sums,
) {
    for (case, (share, _)) in cases.cases().enumerate() {
        let draw = cuts.gated(cases.by_class(case));
        let volts = bus.operating_point(&draw, boundaries);
        sums.add(
            share.0,
            volts,
            draw.drawn(volts, bus.filaments).0,
            bus.terminals,
            climate,
        );
    }
}

/// One stretch of bus volts between two boundaries, and the cases that fall into it.
#[derive(Default)]
struct Region<'c> {
    low: f64,
    high: f64,
    cases: Vec<(f64, &'c LoadSum)>,
}

fn by_region(
    bus: &Bus<'_>,
    cases: &Coincidences,
    climate: &Climate,
    boundaries: &[Boundary],
    sums: &mut Sums,
) {
    let mut regions: Vec<Region<'_>> = Vec::with_capacity(boundaries.len() + 1);
    let mut high = bus.high;
    for boundary in boundaries {
        regions.push(Region {
            low: boundary.volts,
            high,
            cases: Vec::new(),
        });
        high = boundary.volts;
    }
    regions.push(Region {
        low: bus.low,
        high,
        cases: Vec::new(),
    });
    let mut held: Vec<(f64, f64)> = vec![(0.0, 0.0); boundaries.len()];
    'cases: for (share, sum) in cases.cases() {
        for (k, boundary) in boundaries.iter().enumerate() {
            let drawn = sum.current(boundary.at).0;
            if drawn <= boundary.above {
                regions[k].cases.push((share.0, sum));
                continue 'cases;
            }
            if drawn <= boundary.below {
                held[k].0 += share.0;
                held[k].1 += share.0 * drawn;
                continue 'cases;
            }
        }
        if let Some(last) = regions.last_mut() {
            last.cases.push((share.0, sum));
        }
    }
    for (boundary, (share, drawn)) in boundaries.iter().zip(&held) {
        if *share > 0.0 {
            sums.add(
                *share,
                boundary.volts,
                drawn / share,
                bus.terminals,
                climate,
            );
        }
    }
    for region in &regions {
        region.integrate(bus, climate, sums);
    }
}

impl Region<'_> {
    fn integrate(&self, bus: &Bus<'_>, climate: &Climate, sums: &mut Sums) {
        if self.cases.len() <= FEW {
            for (share, sum) in &self.cases {
                self.solve(bus, climate, *share, *sum, sums);
            }
            return;
        }
        let at = At::new(Volts(bus.terminals.emf().0), bus.filaments);
        let loads: Vec<f64> = self
            .cases
            .iter()
            .map(|(_, sum)| sum.current(at).0)
            .collect();
        let share: f64 = self.cases.iter().map(|c| c.0).sum();
        let mean = self
            .cases
            .iter()
            .zip(&loads)
            .map(|(c, i)| c.0 * i)
            .sum::<f64>()
            / share;
        for heavy in [false, true] {
            let half: Vec<(f64, f64, &LoadSum)> = self
                .cases
                .iter()
                .zip(&loads)
                .filter(|(_, load)| (**load >= mean) == heavy)
                .map(|((p, sum), load)| (*p, *load, *sum))
                .collect();
            for (share, sum) in nodes(&half) {
                self.solve(bus, climate, share, &sum, sums);
            }
        }
    }

    fn solve(&self, bus: &Bus<'_>, climate: &Climate, share: f64, sum: &LoadSum, sums: &mut Sums) {
        let volts = bus.balance(sum, self.low, self.high, bus.guess(sum));
        sums.add(
            share,
            volts,
            sum.drawn(volts, bus.filaments).0,
            bus.terminals,
            climate,
        );
    }
}

/// Two loads with shares that keep the cases' share, mean, variance and third moment of current:
/// the two-point Gauss rule of their distribution. Each load is composed as the cases near it
/// are, by the regression of every law's share on the current.
///
/// ```text
/// x± = μ + σ (γ/2 ± √(1 + γ²/4)),   w± = ½ (1 ∓ (γ/2) / √(1 + γ²/4))
/// ```
/// where μ mean, σ² variance, γ skewness of the currents. Source: derived (moment matching).
fn nodes(cases: &[(f64, f64, &LoadSum)]) -> Vec<(f64, LoadSum)> {
    let share: f64 = cases.iter().map(|c| c.0).sum();
    if share <= 0.0 {
        return Vec::new();
    }
    if cases.len() <= NODES {
        return cases.iter().map(|(p, _, sum)| (*p, **sum)).collect();
    }
    let mean = cases.iter().map(|(p, i, _)| p * i).sum::<f64>() / share;
    let moment = |n: i32| {
        cases
            .iter()
            .map(|(p, i, _)| p * (i - mean).powi(n))
            .sum::<f64>()
            / share
    };
    let centre: LoadSum = cases
        .iter()
        .map(|(p, _, sum)| sum.share(Fraction(p / share)))
        .sum();
    let variance = moment(2);
    if variance < 1e-12 {
        return vec![(share, centre)];
    }
    let tilt: LoadSum = cases
        .iter()
        .map(|(p, i, sum)| sum.share(Fraction(p * (i - mean) / (share * variance))))
        .sum();
    let sigma = variance.sqrt();
    let half_skew = 0.5 * moment(3) / (variance * sigma);
    let root = (1.0 + half_skew * half_skew).sqrt();
    [1.0, -1.0]
        .iter()
        .map(|sign| {
            let away = sigma * (half_skew + sign * root);
            let weight = 0.5 * (1.0 - sign * half_skew / root);
            (share * weight, centre + tilt.share(Fraction(away)))
        })
        .collect()
}
