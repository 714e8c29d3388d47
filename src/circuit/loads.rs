//! What hangs on a circuit, as the conductance it is at given volts.

use crate::build::{Accessory, Build, Draw};
use crate::description::accessory::LoadKind;
use crate::load::{self, FILAMENT_EXPONENT};
use crate::quantity::{Amps, Celsius, Henries, Ohms, Volts};

/// Temperature of a coil after hours of work. Common practice, no source.
pub const HOT_COIL: Celsius = Celsius(100.0);
/// A filament's resistance no longer falls under this share of its stated volts: by then it is a
/// thirteenth of that at its stated volts, which is what a cold filament has (an inrush of ten to
/// fifteen times: common practice, no source).
const COLD_FILAMENT: f64 = 0.0033;
/// A constant current or power without a lower limit becomes a resistance under these volts.
const LEAST_VOLTS: f64 = 1.0;

/// Temperature of the coils.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Coils {
    /// At 20 °C, as their resistance is stated.
    Cold,
    /// At [`HOT_COIL`].
    Hot,
}

/// Whether an accessory is a copper coil: a resistance with an inductance, or of the kind `coil`.
#[must_use]
pub fn is_coil(accessory: &Accessory) -> bool {
    matches!(accessory.draw.value, Draw::Resistance(_))
        && (accessory.coil.is_some() || accessory.kind == LoadKind::Coil)
}

/// One kind of accessory on a circuit.
#[derive(Clone, Copy, Debug)]
pub(super) struct Load {
    /// Index into the build's accessories.
    pub accessory: usize,
    /// How many are on.
    pub count: f64,
    draw: Draw,
    /// Volts under which a constant current or power is a resistance.
    floor: f64,
    coil: bool,
    inductance: Option<Henries>,
}

/// Everything that is on.
#[derive(Clone, Debug, Default)]
pub(super) struct Loads(pub Vec<Load>);

/// Coils in parallel.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Coil {
    /// Their resistance.
    pub resistance: Ohms,
    /// Their inductance, where every one states it.
    pub inductance: Option<Henries>,
}

impl Load {
    fn of(accessory: usize, of: &Accessory, coils: Coils) -> Load {
        let coil = is_coil(of);
        let draw = match (of.draw.value, coils) {
            (Draw::Resistance(cold), Coils::Hot) if coil => {
                Draw::Resistance(load::coil_at(cold, HOT_COIL))
            }
            (draw, _) => draw,
        };
        Load {
            accessory,
            count: f64::from(of.count),
            draw,
            floor: of
                .works
                .low
                .map_or(LEAST_VOLTS, |low| low.0.max(LEAST_VOLTS)),
            coil,
            inductance: of.coil,
        }
    }

    /// Conductance at circuit volts `v` and heating (rms) volts `rms`, A/V, all of it together.
    ///
    /// ```text
    /// G = n/R;  n I/V, n P/V² down to the lower limit and as there below;  n (P/at) (Vrms/at)^0.55 / Vrms
    /// ```
    /// where n how many, R ohms, I constant amps, P watts, at the stated volts. A filament's
    /// resistance follows the rms volts, which heat it. Valid for V > 0. Source: the laws of
    /// [`crate::load`].
    pub(super) fn conductance(&self, v: f64, rms: f64) -> f64 {
        let v = v.max(self.floor);
        self.count
            * match self.draw {
                Draw::Resistance(r) => 1.0 / r.0,
                Draw::Current(i) => i.0 / v,
                Draw::Power(p) => p.0 / (v * v),
                Draw::Filament { power, at } => {
                    let x = (rms / at.0).max(COLD_FILAMENT);
                    power.0 / (at.0 * at.0) * x.powf(FILAMENT_EXPONENT - 1.0)
                }
            }
    }

    fn is_steady(&self) -> bool {
        matches!(self.draw, Draw::Resistance(_))
    }
}

impl Loads {
    /// Those of a build with these indices.
    pub(super) fn of(build: &Build, on: &[usize], coils: Coils) -> Loads {
        let on = on
            .iter()
            .filter_map(|k| build.accessories.get(*k).map(|a| (*k, a)));
        Loads(on.map(|(k, a)| Load::of(k, a, coils)).collect())
    }

    /// The same with one of an accessory taken away.
    pub(super) fn without_one(&self, accessory: usize) -> Loads {
        let mut left = self.clone();
        for load in left.0.iter_mut().filter(|l| l.accessory == accessory) {
            load.count -= 1.0;
        }
        left.0.retain(|l| l.count > 0.0);
        left
    }

    /// The load of an accessory.
    pub(super) fn find(&self, accessory: usize) -> Option<&Load> {
        self.0.iter().find(|l| l.accessory == accessory)
    }

    /// The coils in parallel; `known` leaves out, as plain resistances, those without a stated
    /// inductance.
    pub(super) fn coil(&self, known: bool) -> Option<Coil> {
        let coils = || self.0.iter().filter(|l| l.counts_as_coil(known));
        let siemens: f64 = coils().map(|l| l.conductance(0.0, 0.0)).sum();
        let inverse: Option<f64> = coils()
            .map(|l| l.inductance.filter(|h| h.0 > 0.0).map(|h| l.count / h.0))
            .sum();
        (siemens > 0.0).then(|| Coil {
            resistance: Ohms(1.0 / siemens),
            inductance: inverse.map(|i| Henries(1.0 / i)),
        })
    }

    /// Conductance of all but the coils.
    pub(super) fn conductance(&self, known: bool, v: f64, rms: f64) -> f64 {
        let others = self.0.iter().filter(|l| !l.counts_as_coil(known));
        others.map(|l| l.conductance(v, rms)).sum()
    }

    /// Whether the conductance is the same at any volts.
    pub(super) fn is_steady(&self) -> bool {
        self.0.iter().all(Load::is_steady)
    }

    /// Admittance of the coils on alternating current at ω rad/s, S: (in phase, lagging); with
    /// `known` those without an inductance are left out.
    pub(super) fn coil_admittance(&self, omega: f64) -> (f64, f64) {
        let coils = self.0.iter().filter(|l| l.counts_as_coil(true));
        coils.fold((0.0, 0.0), |(g, b), load| {
            let (dg, db) = load.admittance(omega);
            (g + dg, b + db)
        })
    }
}

impl Load {
    /// Whether its current is a coil's; with `known` only where its inductance is stated.
    pub(super) fn counts_as_coil(&self, known: bool) -> bool {
        self.coil && (!known || self.inductance.is_some_and(|h| h.0 > 0.0))
    }

    /// Of a coil on alternating current: 1 / (R + jωL), (in phase, lagging), S.
    pub(super) fn admittance(&self, omega: f64) -> (f64, f64) {
        let r = 1.0 / self.conductance(0.0, 0.0);
        let x = omega * self.inductance.map_or(0.0, |h| h.0) / self.count;
        let square = r * r + x * x;
        (r / square, x / square)
    }
}

/// Amps of an accessory's load at a solved point.
pub(super) fn amps(load: &Load, omega: Option<f64>, volts: Volts, heating: Volts) -> Amps {
    match omega {
        Some(omega) if load.counts_as_coil(true) => {
            let (g, b) = load.admittance(omega);
            Amps(volts.0 * g.hypot(b))
        }
        _ => Amps(volts.0 * load.conductance(volts.0, heating.0)),
    }
}
