//! A rectified winding that feeds a clutch coil, a resistive load or both, with no battery to hold the volts.
//!
//! The coil's time constant is long against a cycle, so its current is taken as steady; the resistive load's follows
//! the volts at every instant.

use super::rectifier::Rectifier;
use super::segment::Circuit;
use super::winding::{Phases, Winding};
use super::{coil_bridge, coil_half_wave, coil_three_phase};
use crate::quantity::{Amps, Henries, Ohms, Rpm, Volts, Watts};
use crate::root::{self, RootError};
use serde::Serialize;
use std::f64::consts::{FRAC_PI_3, PI};
use std::fmt;

/// What hangs on a rectified circuit without a battery. At least one of the two.
#[derive(Clone, Copy, Debug, Default, PartialEq, Serialize)]
pub struct CircuitLoad {
    /// Resistance of the coils, all in parallel; their current is smoothed by their own inductance.
    pub coil: Option<Ohms>,
    /// Resistance of what has no inductance, all in parallel.
    pub resistive: Option<Ohms>,
}

/// A rectified circuit's operating point, averaged over a cycle.
#[derive(Clone, Copy, Debug, Default, PartialEq, Serialize)]
pub struct CircuitOutput {
    /// Mean volts across the load: what a direct-current meter shows, and what a coil's pull depends on.
    pub volts: Volts,
    /// Mean current of the coils.
    pub coil: Amps,
    /// Mean current of the resistive load.
    pub resistive: Amps,
    /// Mean power of the resistive load; more than volts times amps, for the volts pulsate.
    pub resistive_power: Watts,
    /// Root-mean-square current of the winding.
    pub winding_rms: Amps,
}

/// Why a circuit without a battery has no answer.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum CircuitError {
    /// Nothing hangs on it, or a resistance or inductance is zero, negative or not finite.
    Load,
    /// On three phases only a bridge feeding coils alone is computed.
    ThreePhase,
    /// The currents of three phases overlap by more than a sixth of a cycle, beyond which the equations do not hold.
    Overlap {
        /// The volts would be less than this.
        under: Volts,
    },
    /// The search for the operating point failed.
    Root(RootError),
}

impl fmt::Display for CircuitError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            CircuitError::Load => write!(f, "the circuit's load has no lawful resistance"),
            CircuitError::ThreePhase => {
                write!(
                    f,
                    "without a battery a three-phase winding can only feed coils through a bridge"
                )
            }
            CircuitError::Overlap { under } => write!(
                f,
                "the load is too heavy for the three-phase winding: under {:.1} V its currents overlap without end",
                under.0
            ),
            CircuitError::Root(error) => write!(f, "the circuit has no operating point: {error}"),
        }
    }
}

impl std::error::Error for CircuitError {}

impl From<RootError> for CircuitError {
    fn from(error: RootError) -> CircuitError {
        CircuitError::Root(error)
    }
}

/// Means over a cycle at a given steady coil current, before that current is known to be the right one.
#[derive(Clone, Copy, Debug, Default)]
pub(super) struct Means {
    /// Mean volts across the load.
    pub volts: f64,
    /// Mean power of the resistive load, watts.
    pub power: f64,
    /// Mean of the winding's squared current.
    pub winding_square: f64,
}

/// A winding, its rectifier and the resistive load of one circuit, in the symbols of the equations.
#[derive(Clone, Copy, Debug)]
pub(super) struct Driver {
    /// E, R and X of the winding.
    pub c: Circuit,
    /// D, forward drops in series, V.
    pub drops: f64,
    /// Rp of the resistive load, ohms; infinite when there is none.
    pub beside: f64,
}

impl Driver {
    fn new(winding: &Winding, rectifier: &Rectifier, rpm: Rpm) -> Result<Driver, CircuitError> {
        let c = winding.at(rpm);
        let drops = rectifier.drops().0.max(0.0);
        if !(c.e.is_finite() && c.x.is_finite() && drops.is_finite()) {
            return Err(RootError::NotFinite { at: rpm.0 }.into());
        }
        Ok(Driver {
            c,
            drops,
            beside: f64::INFINITY,
        })
    }

    /// The winding's loop with the resistive load in it.
    pub(super) fn with_load(&self) -> Circuit {
        Circuit::new(self.c.e, self.c.r + self.beside, self.c.x)
    }

    /// Power of the resistive load over a stretch `d` in which it carries `i − steady`, times the cycle's length:
    /// `charge` and `square` are the integrals of i and i².
    pub(super) fn heat(&self, steady: f64, d: f64, charge: f64, square: f64) -> f64 {
        if self.beside.is_finite() {
            self.beside * (square - 2.0 * steady * charge + steady * steady * d)
        } else {
            0.0
        }
    }
}

/// The rectifiers that can feed a coil's steady current.
#[derive(Clone, Copy, Debug)]
enum Kind {
    Bridge,
    ThreePhaseBridge,
    HalfWave,
    HalfWaveFreewheel,
}

impl Kind {
    fn of(winding: &Winding, rectifier: &Rectifier, freewheel: bool) -> Result<Kind, CircuitError> {
        match (rectifier, winding.phases()) {
            (Rectifier::FullWave { .. }, Phases::One) => Ok(Kind::Bridge),
            (Rectifier::FullWave { .. }, Phases::Three) => Ok(Kind::ThreePhaseBridge),
            (Rectifier::HalfWave { .. }, Phases::Three) => Err(CircuitError::ThreePhase),
            (Rectifier::HalfWave { .. }, Phases::One) if freewheel => Ok(Kind::HalfWaveFreewheel),
            (Rectifier::HalfWave { .. }, Phases::One) => Ok(Kind::HalfWave),
        }
    }

    fn means(self, driver: &Driver, coil: f64) -> Means {
        match self {
            Kind::Bridge => coil_bridge::means(driver, coil),
            Kind::ThreePhaseBridge => coil_three_phase::means(driver, coil).0,
            Kind::HalfWave => coil_half_wave::means(driver, coil),
            Kind::HalfWaveFreewheel => coil_half_wave::means_freewheel(driver, coil),
        }
    }

    /// Volts the mean never exceeds.
    fn most_volts(self, driver: &Driver) -> f64 {
        match self {
            Kind::Bridge => 2.0 * driver.c.e / PI,
            Kind::ThreePhaseBridge => 3.0 * 3.0_f64.sqrt() * driver.c.e / PI,
            Kind::HalfWave => driver.c.e,
            Kind::HalfWaveFreewheel => driver.c.e / PI,
        }
    }

    /// The coil's steady current: mean volts fall as it rises, so V(I) = R_coil I has one root.
    fn settle(self, driver: &Driver, coil: Option<Ohms>) -> Result<CircuitOutput, CircuitError> {
        let nothing = self.means(driver, 0.0);
        if nothing.volts <= 0.0 {
            return Ok(CircuitOutput::default());
        }
        let (amps, found) = match coil {
            None => (0.0, nothing),
            Some(Ohms(r)) => {
                let most = self.most_volts(driver) / r;
                let excess = |i: f64| self.means(driver, i).volts - r * i;
                let amps = root::bracketed(excess, 0.0, most, 1e-13 * most)?;
                (amps, self.means(driver, amps))
            }
        };
        if matches!(self, Kind::ThreePhaseBridge)
            && coil_three_phase::means(driver, amps).1 > FRAC_PI_3
        {
            return Err(CircuitError::Overlap {
                under: Volts(found.volts),
            });
        }
        Ok(CircuitOutput {
            volts: Volts(found.volts),
            coil: Amps(amps),
            resistive: Amps(found.volts / driver.beside),
            resistive_power: Watts(found.power),
            winding_rms: Amps(found.winding_square.max(0.0).sqrt()),
        })
    }
}

fn lawful(resistance: Option<Ohms>) -> bool {
    resistance.is_none_or(|r| r.is_finite() && r > Ohms::ZERO)
}

/// A rectified winding feeding coils, a resistive load or both, with no battery.
///
/// `freewheel` tells whether a diode lies across the load of a half-wave circuit; a bridge freewheels by itself.
/// The equations are with each rectifier. The coils' current is taken as free of ripple: exact as the coil's
/// inductance grows; with a coil of 50 mH the current reads 0.1 to 0.7 % high (against a circuit simulator).
///
/// # Errors
/// [`CircuitError`]: no lawful load, three phases feeding more than coils, no operating point. What one diode gives a coil alone,
/// with no freewheel diode, depends on the coil's inductance and is [`half_wave_coil`]'s.
pub fn without_battery(
    winding: &Winding,
    rectifier: &Rectifier,
    rpm: Rpm,
    load: &CircuitLoad,
    freewheel: bool,
) -> Result<CircuitOutput, CircuitError> {
    let kind = Kind::of(winding, rectifier, freewheel)?;
    let coil_counts = load.coil.is_some() && !matches!(kind, Kind::HalfWave);
    if !(coil_counts || load.resistive.is_some()) || !lawful(load.coil) || !lawful(load.resistive) {
        return Err(CircuitError::Load);
    }
    if load.resistive.is_some() && matches!(kind, Kind::ThreePhaseBridge) {
        return Err(CircuitError::ThreePhase);
    }
    let mut driver = Driver::new(winding, rectifier, rpm)?;
    driver.beside = load.resistive.map_or(f64::INFINITY, |r| r.0);
    kind.settle(&driver, load.coil)
}

/// Ohms that a load of no current counts as.
const NEXT_TO_OPEN: f64 = 1e9;

/// As [`without_battery`], with a resistive load that is not a plain resistance: `current` gives its mean current at
/// given mean volts (lamps, electronics). At its operating point it acts as the resistance volts / current; where
/// several volts would do, the highest is taken.
///
/// # Errors
/// As [`without_battery`]; [`CircuitError::Root`] also when the winding cannot carry the load at any volts.
pub fn without_battery_loaded(
    winding: &Winding,
    rectifier: &Rectifier,
    rpm: Rpm,
    coil: Option<Ohms>,
    current: impl Fn(Volts) -> Amps,
    freewheel: bool,
) -> Result<CircuitOutput, CircuitError> {
    if !lawful(coil) {
        return Err(CircuitError::Load);
    }
    let kind = Kind::of(winding, rectifier, freewheel)?;
    if matches!(kind, Kind::ThreePhaseBridge) {
        return Err(CircuitError::ThreePhase);
    }
    let driver = Driver::new(winding, rectifier, rpm)?;
    let at = |v: f64| {
        let beside = (v / current(Volts(v)).0).min(NEXT_TO_OPEN);
        kind.settle(&Driver { beside, ..driver }, coil)
    };
    let excess = |v: f64| at(v).map_or(f64::NAN, |out| out.volts.0 - v);
    let mut high = kind.most_volts(&driver);
    if high <= driver.drops / PI
        || kind
            .means(
                &Driver {
                    beside: 1e12,
                    ..driver
                },
                0.0,
            )
            .volts
            <= 0.0
    {
        return Ok(CircuitOutput::default());
    }
    let top = high;
    let mut low = 0.95 * high;
    while excess(low) < 0.0 {
        if low < 1e-6 * top {
            let residual = excess(low);
            return Err(RootError::NotBracketed {
                low,
                high: top,
                at_low: residual,
                at_high: excess(top),
            }
            .into());
        }
        (high, low) = (low, 0.9 * low);
    }
    let volts = root::bracketed(excess, low, high, 1e-12 * top)?;
    at(volts)
}

/// A bridge feeding a coil alone: [`without_battery`] for the usual clutch circuit. `drop` is one diode's.
///
/// # Errors
/// As [`without_battery`].
pub fn coil_on_bridge(
    winding: &Winding,
    drop: Volts,
    rpm: Rpm,
    coil: Ohms,
) -> Result<CircuitOutput, CircuitError> {
    let load = CircuitLoad {
        coil: Some(coil),
        resistive: None,
    };
    without_battery(winding, &Rectifier::FullWave { drop }, rpm, &load, true)
}

/// One diode feeding a coil with no freewheel diode: exact for any coil.
///
/// Equation: the half-wave rectifier with R + R_coil, X + ω L_coil and U = Vf; V = R_coil I_dc. Valid for any coil.
/// Source: the coil is in series with the winding.
///
/// # Errors
/// As [`without_battery`].
pub fn half_wave_coil(
    winding: &Winding,
    drop: Volts,
    rpm: Rpm,
    coil: Ohms,
    inductance: Henries,
) -> Result<CircuitOutput, CircuitError> {
    if !(lawful(Some(coil)) && inductance.is_finite() && inductance.0 >= 0.0) {
        return Err(CircuitError::Load);
    }
    if winding.phases() == Phases::Three {
        return Err(CircuitError::ThreePhase);
    }
    let driver = Driver::new(winding, &Rectifier::HalfWave { drop }, rpm)?;
    let reactance = 2.0 * PI * winding.frequency(rpm).0.max(0.0) * inductance.0;
    let (mean, square) = coil_half_wave::in_series(&driver, coil.0, reactance);
    Ok(CircuitOutput {
        volts: coil * Amps(mean),
        coil: Amps(mean),
        winding_rms: Amps(square.max(0.0).sqrt()),
        ..CircuitOutput::default()
    })
}
