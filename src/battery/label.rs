//! What is printed on a battery, and what its chemistry adds where the label is silent.

use crate::quantity::{AmpHours, Amps, Celsius, Fraction, Hours, Ohms, Volts};
use serde::Serialize;

/// How the acid is held in a lead-acid battery.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize)]
pub enum Chemistry {
    /// Liquid acid, vented.
    Flooded,
    /// Acid in a glass mat, valve-regulated.
    Agm,
    /// Acid in a gel, valve-regulated.
    Gel,
}

/// What a label states of one battery. Everything but chemistry, cells and
/// 20 h capacity may be missing.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
pub struct Label {
    /// Capacity at the 20 h rate to 1.75 V per cell at 25 °C.
    pub capacity: AmpHours,
    /// Cells in series: 3 for 6 V, 6 for 12 V, 12 for 24 V.
    pub cells: u32,
    /// How the acid is held.
    pub chemistry: Chemistry,
    /// Time the battery gives [`reserve_amps`](Label::reserve_amps) to 1.75 V
    /// per cell: "reserve capacity".
    pub reserve_capacity: Option<Hours>,
    /// Current of the reserve rating: 25 A in SAE J537.
    pub reserve_amps: Amps,
    /// Current the battery gives for 30 s with at least 1.2 V per cell left.
    pub cold_cranking: Option<Amps>,
    /// Temperature of the cranking rating: -18 °C for cold-cranking amperes;
    /// 0 °C where the label says "cranking amperes".
    pub cranking_at: Celsius,
    /// Resistance of the whole battery as it is, measured, full at 25 °C.
    /// Overrides the one the cranking rating gives.
    pub resistance: Option<Ohms>,
    /// Rested volts of the whole battery, full, at 25 °C.
    pub rest_full: Option<Volts>,
    /// Rested volts of the whole battery, empty, at 25 °C.
    pub rest_empty: Option<Volts>,
    /// How many times the gassing current of a new battery it has: 1 new to 5 aged.
    pub gassing: Fraction,
    /// Capacity left of the label's: 1 = new. Also raises the resistance by its
    /// reciprocal, unless that was measured.
    pub health: Fraction,
}

impl Label {
    /// A new 12 V battery of which only chemistry and 20 h capacity are known.
    #[must_use]
    pub fn new(chemistry: Chemistry, capacity: AmpHours) -> Label {
        Label {
            capacity,
            cells: 6,
            chemistry,
            reserve_capacity: None,
            reserve_amps: Amps(25.0),
            cold_cranking: None,
            cranking_at: Celsius(-18.0),
            resistance: None,
            rest_full: None,
            rest_empty: None,
            gassing: Fraction::ONE,
            health: Fraction::ONE,
        }
    }
}

/// Constants of one chemistry, per cell.
#[derive(Clone, Copy, Debug)]
pub(super) struct Defaults {
    /// Rested volts, full, 25 °C. Common practice: printed tables differ by ±10 mV.
    pub rest_full: f64,
    /// Rested volts, empty, 25 °C. Common practice: ±30 mV.
    pub rest_empty: f64,
    /// Charge-acceptance resistance, ohm·Ah. Flooded and gel: Schiffer 2007
    /// through transcriptions; AGM own choice. Published charge laws differ twofold.
    pub acceptance: f64,
    /// Gassing current at 2.23 V, A per Ah of 20 h capacity. Schiffer 2007
    /// through transcriptions; five times as much when aged.
    pub gassing: f64,
    /// Peukert exponent without a reserve rating. Common practice: ±0.08.
    pub peukert: f64,
    /// Cold-cranking amperes per Ah without a rating. Own choice: deep-cycle
    /// batteries have half of it.
    pub cranking: f64,
}

impl Chemistry {
    /// The constants of this chemistry.
    pub(super) const fn defaults(self) -> Defaults {
        match self {
            Chemistry::Flooded => Defaults {
                rest_full: 2.1083,
                rest_empty: 1.9817,
                acceptance: 0.42,
                gassing: 2.0e-4,
                peukert: 1.25,
                cranking: 8.0,
            },
            Chemistry::Agm => Defaults {
                rest_full: 2.1417,
                rest_empty: 1.9667,
                acceptance: 0.30,
                gassing: 1.0e-4,
                peukert: 1.10,
                cranking: 9.0,
            },
            Chemistry::Gel => Defaults {
                rest_full: 2.1417,
                rest_empty: 1.9667,
                acceptance: 0.42,
                gassing: 1.0e-4,
                peukert: 1.15,
                cranking: 5.5,
            },
        }
    }

    /// The 20 h capacity of a battery of which only the reserve rating is known.
    ///
    /// ```text
    /// C = (I t (20 I)^(k-1))^(1/k)
    /// ```
    /// where C the 20 h capacity (Ah), I the reserve current (A), t the reserve
    /// time (h), k the chemistry's usual Peukert exponent.
    /// Valid for: I above C/20. Source: Peukert's law through the two points
    /// (C/20, 20 h) and (I, t).
    #[must_use]
    pub fn capacity_from_reserve(self, reserve: Hours, amps: Amps) -> AmpHours {
        let k = self.defaults().peukert;
        AmpHours((amps.0 * reserve.0 * (20.0 * amps.0).powf(k - 1.0)).powf(1.0 / k))
    }

    /// The 20 h capacity of a battery of which only the cold-cranking rating is
    /// known: that rating over the chemistry's usual amperes per ampere-hour
    /// (8 flooded, 9 absorbed mat, 5.5 gel; own choice, to be warned about).
    #[must_use]
    pub fn capacity_from_cranking(self, cold_cranking: Amps) -> AmpHours {
        AmpHours(cold_cranking.0 / self.defaults().cranking)
    }

    /// The cold-cranking rating of a battery of which only the 20 h capacity is known: the same
    /// ratio the other way round.
    #[must_use]
    pub fn cranking_from_capacity(self, capacity: AmpHours) -> Amps {
        Amps(capacity.0 * self.defaults().cranking)
    }
}
