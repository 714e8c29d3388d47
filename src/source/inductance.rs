//! The inductance that a rated point implies, and the resistance where that is not known either.

use super::constants::{ConstantsError, Rating, TYPICAL_RESISTIVE_SHARE};
use super::rectifier::{Rectifier, rectified, rectified_dc};
use super::winding::{Phases, Winding, WindingError};
use crate::quantity::{Amps, Henries, Ohms, Volts};
use crate::root;
use std::f64::consts::{PI, SQRT_2};

/// A rated point of a winding at work whose inductance, perhaps resistance, is sought.
#[derive(Clone, Copy, Debug)]
pub(super) struct RatedPoint {
    /// One phase at work; its resistance or inductance may stand in for one that is sought.
    pub hot: Winding,
    /// The rated point.
    pub rated: Rating,
    /// What it is rated through; none for alternating current.
    pub rectifier: Option<Rectifier>,
}

/// An inductance with this share of the resistance as reactance counts as none.
const NEXT_TO_NOTHING: f64 = 1e-7;

/// Doublings allowed on the way to an inductance that gives less than the rating.
const MOST_DOUBLINGS: u32 = 200;

impl RatedPoint {
    fn winding(&self, r: Ohms, l: Henries) -> Result<Winding, WindingError> {
        Winding::new(
            self.hot.open_circuit(),
            r,
            l,
            self.hot.poles(),
            self.hot.phases(),
        )
    }

    /// Current at the rated speed and volts: mean through the rectifier, rms without.
    fn given(&self, winding: &Winding) -> Amps {
        match &self.rectifier {
            Some(rectifier) => rectified_dc(winding, rectifier, self.rated.rpm, self.rated.bus),
            None => self.alternating(winding),
        }
    }

    /// Rms current of the winding at the rated point.
    fn winding_rms(&self, winding: &Winding) -> Amps {
        match &self.rectifier {
            Some(rectifier) => {
                rectified(winding, rectifier, self.rated.rpm, self.rated.bus).winding_rms
            }
            None => self.alternating(winding),
        }
    }

    /// Rms current into an in-phase load that leaves the rated rms volts across itself.
    ///
    /// Equation: E² = (V + R I)² + (X I)², so I = (√(V²R² + Z²(E² − V²)) − V R)/Z², where E open-circuit rms volts,
    /// V rms volts, R, X, Z ohms. Valid for E > V. Source: Kirchhoff's voltage law, phasors.
    fn alternating(&self, winding: &Winding) -> Amps {
        let (e, v) = (winding.emf(self.rated.rpm).0, self.rated.bus.0);
        let (r, x) = (winding.resistance().0, winding.reactance(self.rated.rpm).0);
        let z2 = r * r + x * x;
        let under = v * v * r * r + z2 * (e * e - v * v);
        if e <= v {
            Amps::ZERO
        } else {
            Amps((under.max(0.0).sqrt() - v * r) / z2)
        }
    }

    /// Peak volts at the rated speed, and what they have to exceed.
    fn peak_and_needed(&self) -> (Volts, Volts) {
        let phase = SQRT_2 * self.hot.emf(self.rated.rpm);
        match (&self.rectifier, self.hot.phases()) {
            (None, _) => (phase, SQRT_2 * self.rated.bus),
            (Some(r @ Rectifier::FullWave { .. }), Phases::Three) => {
                (3.0_f64.sqrt() * phase, self.rated.bus + r.drops())
            }
            (Some(r), _) => (phase, self.rated.bus + r.drops()),
        }
    }

    fn check_volts(&self) -> Result<(), ConstantsError> {
        let (peak, needed) = self.peak_and_needed();
        if peak > needed {
            Ok(())
        } else {
            Err(ConstantsError::UnderBus {
                peak,
                needed,
                rpm: self.rated.rpm,
            })
        }
    }

    /// The winding with resistance `r` that gives the rating.
    ///
    /// Equation: the root of I_dc(L) = rated, on a bracket doubled until it holds the root. I_dc falls as L rises.
    /// Valid where L = 0 gives no less than the rating. Source: the rectifier's equations.
    pub(super) fn with_inductance(&self, r: Ohms) -> Result<Winding, ConstantsError> {
        self.check_volts()?;
        let omega = 2.0 * PI * self.hot.frequency(self.rated.rpm).0;
        let scale = self.hot.emf(self.rated.rpm).0 / (omega * self.rated.amps.0);
        let least = (NEXT_TO_NOTHING * r.0 / omega).max(1e-9 * scale);
        let excess = |l: f64| match self.winding(r, Henries(l)) {
            Ok(winding) => (self.given(&winding) - self.rated.amps).0,
            Err(_) => f64::NAN,
        };
        let at_least = excess(least);
        if at_least < 0.0 {
            return Err(ConstantsError::Contradiction {
                ceiling: Amps(at_least) + self.rated.amps,
                rated: self.rated.amps,
                rpm: self.rated.rpm,
            });
        }
        let mut most = (0.1 * scale).max(2.0 * least);
        let mut doublings = 0;
        while excess(most) > 0.0 && doublings < MOST_DOUBLINGS {
            most *= 2.0;
            doublings += 1;
        }
        let l = root::bracketed(excess, least, most, 1e-14 * most)?;
        Ok(self.winding(r, Henries(l))?)
    }

    /// The winding whose resistance takes the usual share of the EMF and which gives the rating.
    ///
    /// Equation: R I_rms = 0.08 E_rms at the rated point, with L from the rating for each R.
    /// Valid where that resistance leaves the rating within reach. Source: common practice.
    pub(super) fn with_typical_resistance(&self) -> Result<Winding, ConstantsError> {
        self.check_volts()?;
        // Without inductance the current goes as 1/R: the greatest resistance that still gives the rating.
        let one_ohm = self.given(&self.winding(Ohms(1.0), Henries::ZERO)?);
        let most = one_ohm / self.rated.amps * (1.0 - 1e-6);
        let wanted = TYPICAL_RESISTIVE_SHARE.0 * self.hot.emf(self.rated.rpm).0;
        let excess = |r: f64| match self.with_inductance(Ohms(r)) {
            Ok(winding) => r * self.winding_rms(&winding).0 - wanted,
            Err(_) => f64::NAN,
        };
        if excess(most) <= 0.0 {
            return Err(ConstantsError::NeedsResistance);
        }
        let r = root::bracketed(excess, 1e-6 * most, most, 1e-13 * most)?;
        self.with_inductance(Ohms(r))
    }

    /// The winding of known inductance whose resistance takes the usual share of the EMF at the rated speed and volts.
    pub(super) fn with_typical_resistance_beside_inductance(
        &self,
    ) -> Result<Winding, ConstantsError> {
        self.check_volts()?;
        let wanted = TYPICAL_RESISTIVE_SHARE.0 * self.hot.emf(self.rated.rpm).0;
        let l = self.hot.inductance();
        let excess = |r: f64| match self.winding(Ohms(r), l) {
            Ok(winding) => r * self.winding_rms(&winding).0 - wanted,
            Err(_) => f64::NAN,
        };
        // The drop grows with R, the more slowly the more R itself limits the current.
        let most = 10.0 * self.hot.emf(self.rated.rpm).0 / self.rated.amps.0;
        if excess(most) <= 0.0 {
            return Err(ConstantsError::NeedsResistance);
        }
        let r = root::bracketed(excess, 1e-9 * most, most, 1e-13 * most)?;
        Ok(self.winding(Ohms(r), l)?)
    }
}
