//! One cell: its constants and the equations that need no temperature.

use super::constants as k;

/// Everything known of one battery, per cell, at 25 °C. Volts, amperes, ohms,
/// ampere-hours and hours throughout.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Cell {
    /// Cells in series.
    pub cells: f64,
    /// 20 h capacity left, Ah.
    pub c20: f64,
    /// Rested volts, full.
    pub rest_full: f64,
    /// Rested volts, empty.
    pub rest_empty: f64,
    /// Greatest capacity over 20 h capacity, less one.
    pub kappa_less_one: f64,
    /// Greatest capacity, Ah: what is left at vanishing current.
    pub c_max: f64,
    /// Least share of the greatest capacity given at any current.
    pub c_floor: f64,
    /// Peukert exponent through the 20 h and reserve points.
    pub peukert: f64,
    /// Ohmic resistance, full, ohms.
    pub resistance: f64,
    /// Charge-acceptance resistance, empty, ohms.
    pub acceptance: f64,
    /// Gassing current at 2.23 V, A.
    pub gassing: f64,
}

impl Cell {
    /// Rested volts.
    ///
    /// ```text
    /// E(s) = Ee + (Ef − Ee) (0.868 s + 0.132 s²)        at 25 °C
    /// ```
    /// where s state of charge, held to 0..1; Ef, Ee rested volts full and empty.
    /// Valid for: rested cells; within 9 mV per 12 V of the common printed table.
    /// Source: fitted to that table; linear in acid strength by DOE-HDBK-1084-95.
    pub fn open_circuit(&self, soc: f64) -> f64 {
        let s = soc.clamp(0.0, 1.0);
        self.rest_empty
            + (self.rest_full - self.rest_empty) * s * (k::OCV_LINEAR + (1.0 - k::OCV_LINEAR) * s)
    }

    /// Electromotive force behind the plates' own acid.
    ///
    /// ```text
    /// K(x) = (Ee − 1.75) exp(−max(x, −0.06) / 0.03)
    /// e    = E(s − d) − K(s − d)                        at 25 °C
    /// ```
    /// where s state of charge, d depletion, K the knee at the end of discharge.
    /// Valid for: all s, d in 0..1.
    /// Source: own choice; the delayed acid follows the idea of Manwell and
    /// McGowan, Solar Energy 50 (1993) 399.
    pub fn emf(&self, soc: f64, depletion: f64) -> f64 {
        let x = soc - depletion;
        let knee = (self.rest_empty - k::END_OF_DISCHARGE_PER_CELL)
            * (-x.max(k::KNEE_LEAST) / k::KNEE_WIDTH).exp();
        self.open_circuit(x) - knee
    }

    /// Rise of the ohmic resistance over that of the full cell.
    ///
    /// ```text
    /// R/R25 = 1 + 0.8 (1 − s)
    /// ```
    /// where s state of charge, held to 0..1.
    /// Valid for: down to half charge well; real cells rise more when empty.
    /// Source: own choice.
    pub fn resistance_rise(soc: f64) -> f64 {
        1.0 + k::RESISTANCE_RISE * (1.0 - soc.clamp(0.0, 1.0))
    }

    /// Rise of the charge-acceptance resistance over that of the empty cell.
    ///
    /// ```text
    /// Kc/Kc0 = 1 + 0.888 s / (1.005 − s)
    /// ```
    /// where s state of charge, held to 0..1.
    /// Valid for: charging. Source: Schiffer et al., Journal of Power Sources 168
    /// (2007) 66, with the pole moved from 1.001.
    pub fn acceptance_rise(soc: f64) -> f64 {
        let s = soc.clamp(0.0, 1.0);
        1.0 + k::ACCEPTANCE_WEIGHT * s / (k::ACCEPTANCE_POLE - s)
    }

    /// Share of the greatest capacity given at a constant current.
    ///
    /// ```text
    /// c = (1 − (1 − f) r/(r + 1)) / (1 + (κ − 1) r^0.9)     held to c_floor..1
    /// r = I / (C20/20)
    /// ```
    /// where I discharge current (A), f capacity factor of the temperature, κ
    /// greatest over 20 h capacity.
    /// Valid for: r from 0 to cranking; below the 20 h rate it saturates at κ,
    /// where Peukert's law would grow without end.
    /// Source: form of Ceraolo, IEEE Transactions on Power Systems 15 (2000)
    /// 1184, and Copetti 1993; the cold term's dependence on r is own choice.
    pub fn capacity_share(&self, discharge: f64, f: f64) -> f64 {
        let r = discharge / (self.c20 / 20.0);
        let cold = 1.0 - (1.0 - f) * r / (r + k::COLD_HALF_RATE);
        (cold / (1.0 + self.kappa_less_one * r.powf(k::CAPACITY_EXPONENT))).clamp(self.c_floor, 1.0)
    }

    /// Depletion a constant discharge current tends to.
    ///
    /// ```text
    /// d∞ = (1 − c) / (1 − exp(−t/τ)),   t = c C_max / I,   τ = 0.5 h
    /// d∞ = 0                            when the current is not a discharge
    /// ```
    /// where c the share of [`capacity_share`](Self::capacity_share), C_max the
    /// greatest capacity (Ah), I discharge current (A). A constant current from
    /// rest then empties the cell at exactly c C_max. May exceed 1 where the
    /// current empties the cell much sooner than τ.
    /// Valid for: any current. Source: derived from the capacity law and a first
    /// order lag of the acid.
    pub fn depletion_target(&self, discharge: f64, f: f64) -> f64 {
        if discharge <= 0.0 {
            return 0.0;
        }
        let c = self.capacity_share(discharge, f);
        let hours = c * self.c_max / discharge;
        (1.0 - c) / -(-hours / k::DEPLETION_HOURS).exp_m1()
    }
}
