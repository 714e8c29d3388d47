//! Three phases through a bridge with no battery, up to a short circuit.
//!
//! What the bridge sees lies between two limits that are both exact: a coil keeps its current steady,
//! a plain load under a heavy, inductive winding keeps its volts steady.

use super::point::{OPEN, Point, ohms};
use crate::quantity::{Amps, Rpm, Volts};
use crate::root;
use crate::source::{self, CircuitError, CircuitLoad, Rectifier, Winding};
use std::cell::OnceCell;
use std::f64::consts::SQRT_2;

/// A three-phase winding behind a bridge at one speed.
#[derive(Clone, Copy, Debug)]
pub(super) struct Bridge<'a> {
    pub(super) winding: &'a Winding,
    pub(super) rectifier: &'a Rectifier,
    pub(super) rpm: Rpm,
    /// Found once for all loads.
    pub(super) edge: &'a OnceCell<Edge>,
}

/// The point at which the currents of three phases overlap by exactly a sixth of a cycle.
#[derive(Clone, Copy, Debug)]
pub(super) struct Edge {
    amps: f64,
    volts: f64,
    winding: f64,
}

impl Bridge<'_> {
    /// With coils and plain loads of these conductances, A/V.
    ///
    /// ```text
    /// V = Vi + w (Vu − Vi),   w = (G/(G + Gc)) min(1, 4 X I / √3 E)
    /// ```
    /// where Vi the volts at a steady current, Vu at steady volts (its mean current (G + Gc) Vu), G, Gc
    /// the conductances of plain loads and of coils; X, E reactance and peak EMF of a phase, I the
    /// current: 4XI/√3E is one where the currents overlap by a sixth of a cycle. Valid within 0.4 % of
    /// a circuit simulator's volts for plain loads and 1 % for coils, up to a short circuit. Source:
    /// interpolation between two exact limits, checked against the simulator.
    pub(super) fn solve(&self, coil: f64, plain: f64) -> Result<Point, CircuitError> {
        let all = coil + plain;
        let steady = self.steady_current(all)?;
        if plain <= 0.0 || all <= 1.0 / OPEN || steady.volts <= Volts::ZERO {
            return Ok(steady);
        }
        let held = self.steady_volts(all)?;
        let line = 3.0_f64.sqrt() * SQRT_2 * self.winding.emf(self.rpm).0;
        let reactance = self.winding.reactance(self.rpm).0;
        let overlap = (4.0 * reactance * all * steady.volts.0 / line).min(1.0);
        let weight = plain / all * overlap;
        let mixed = |a: f64, b: f64| a + weight * (b - a);
        let volts = Volts(mixed(steady.volts.0, held.volts.0));
        Ok(Point {
            volts,
            heating: volts,
            winding: Amps(mixed(steady.winding.0, held.winding.0)),
        })
    }

    /// At steady volts: the mean current into them is what the load draws of them.
    fn steady_volts(&self, siemens: f64) -> Result<Point, CircuitError> {
        let into = |v: f64| source::rectified(self.winding, self.rectifier, self.rpm, Volts(v));
        let most = 3.0_f64.sqrt() * SQRT_2 * self.winding.emf(self.rpm).0;
        let excess = |v: f64| into(v).dc.0 - siemens * v;
        let volts = root::bracketed(excess, 0.0, most, 1e-12 * most)?;
        Ok(Point {
            volts: Volts(volts),
            heating: Volts(volts),
            winding: into(volts).winding_rms,
        })
    }

    /// At a steady current.
    fn steady_current(&self, siemens: f64) -> Result<Point, CircuitError> {
        match self.coil(siemens) {
            Err(CircuitError::Overlap { .. }) => self.beyond(siemens),
            other => other,
        }
    }

    fn coil(&self, siemens: f64) -> Result<Point, CircuitError> {
        let load = CircuitLoad {
            coil: Some(ohms(siemens)),
            resistive: None,
        };
        let out = source::without_battery(self.winding, self.rectifier, self.rpm, &load, true)?;
        let volts = out.volts.max(Volts::ZERO);
        Ok(Point {
            volts,
            heating: volts,
            winding: out.winding_rms,
        })
    }

    /// Where the overlap reaches a sixth of a cycle, between nothing and a conductance beyond it.
    fn find_edge(&self, beyond: f64) -> Edge {
        let (mut low, mut high) = (1.0 / OPEN, beyond);
        let mut at = Point::default();
        for _ in 0..60 {
            let middle = (low * high).sqrt();
            match self.coil(middle) {
                Ok(point) => (low, at) = (middle, point),
                Err(_) => high = middle,
            }
        }
        Edge {
            amps: low * at.volts.0,
            volts: at.volts.0,
            winding: at.winding.0,
        }
    }

    /// At a steady current so great that the currents overlap by more than a sixth of a cycle.
    ///
    /// ```text
    /// s = I / 2 I₁,   (V + 2 Vf) / (V₁ + 2 Vf) = (2/√3) √(1 − s²)    1/2 ≤ s ≤ √3/2
    ///                                          = (4/3)(√3 − 3s/2)     beyond, to 2/√3
    /// ```
    /// where V₁, I₁ volts and current at an overlap of a sixth of a cycle; the winding's rms current is
    /// taken in proportion. Exact without resistance; with it within 1 % of a circuit simulator at
    /// R/X = 0.1. Source: the regulation curve of a bridge rectifier, Witzke, Kresser and Dillard 1953
    /// (from memory).
    fn beyond(&self, siemens: f64) -> Result<Point, CircuitError> {
        let edge = self.edge.get_or_init(|| self.find_edge(siemens));
        let drops = self.rectifier.drops().0;
        let volts = |amps: f64| {
            let s = 0.5 * amps / edge.amps;
            let share = if s <= 0.75_f64.sqrt() {
                2.0 * ((1.0 - s * s) / 3.0).max(0.0).sqrt()
            } else {
                4.0 / 3.0 * (3.0_f64.sqrt() - 1.5 * s)
            };
            share * (edge.volts + drops) - drops
        };
        let shorted = 4.0 / 3.0_f64.sqrt() * edge.amps;
        let excess = |i: f64| volts(i) - i / siemens;
        let amps = root::bracketed(excess, edge.amps, shorted, 1e-12 * shorted)?;
        let volts = Volts((amps / siemens).max(0.0));
        Ok(Point {
            volts,
            heating: volts,
            winding: Amps(edge.winding * amps / edge.amps),
        })
    }
}
