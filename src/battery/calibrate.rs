//! From a label to the constants of a cell.

use super::cell::Cell;
use super::constants as k;
use super::label::Label;
use super::note::Note;
use super::tables::capacity_factor;
use crate::quantity::{Amps, Celsius, Fraction, Hours, Ohms, Volts};

/// The cell of a label, and what was assumed on the way.
pub(super) fn calibrate(label: &Label) -> (Cell, Vec<Note>) {
    let mut notes = Vec::new();
    let usual = label.chemistry.defaults();
    let c20 = in_range("capacity", label.capacity.0, (0.01, 1e5), &mut notes);
    let cells = f64::from(label.cells.max(1));
    let gassing = in_range("gassing", label.gassing.0, (1.0, 5.0), &mut notes);
    let health = in_range("health", label.health.0, (0.05, 1.0), &mut notes);
    let (rest_full, rest_empty) = rest_volts(label, cells, &mut notes);
    let (kappa, peukert) = capacity_law(label, c20, &mut notes);
    let c_max = kappa * c20;
    let cranking = cranking_amps(label, c20, &mut notes);
    let mut cell = Cell {
        cells,
        c20,
        rest_full,
        rest_empty,
        kappa_less_one: kappa - 1.0,
        c_max,
        c_floor: (cranking * k::CAPACITY_FLOOR_HOURS / c_max).min(k::CAPACITY_FLOOR_MOST),
        peukert,
        resistance: 0.0,
        acceptance: usual.acceptance / c20,
        gassing: usual.gassing * c20 * gassing,
    };
    cell.resistance = match label.resistance.filter(|r| r.is_finite() && r.0 > 0.0) {
        Some(measured) => measured.0 / cells,
        None => cranking_resistance(&cell, cranking, label.cranking_at, &mut notes) / health,
    };
    cell.c20 *= health;
    cell.c_max *= health;
    cell.acceptance /= health;
    (cell, notes)
}

/// A number held to its range; said so when it was not in it.
fn in_range(
    what: &'static str,
    stated: f64,
    (low, high): (f64, f64),
    notes: &mut Vec<Note>,
) -> f64 {
    if (low..=high).contains(&stated) {
        return stated;
    }
    notes.push(Note::OutOfRange { what });
    // `max` first: a not-a-number becomes the low end.
    stated.max(low).min(high)
}

/// Rested volts per cell, full and empty.
fn rest_volts(label: &Label, cells: f64, notes: &mut Vec<Note>) -> (f64, f64) {
    let usual = label.chemistry.defaults();
    let full = label.rest_full.map_or(usual.rest_full, |v| v.0 / cells);
    let empty = label.rest_empty.map_or(usual.rest_empty, |v| v.0 / cells);
    let lawful = empty > k::END_OF_DISCHARGE_PER_CELL + 0.01 && full > empty + 0.01 && full < 2.4;
    if lawful {
        return (full, empty);
    }
    notes.push(Note::RestVoltsUnusable {
        full: Volts(full * cells),
        empty: Volts(empty * cells),
    });
    (usual.rest_full, usual.rest_empty)
}

/// Greatest over 20 h capacity, and the Peukert exponent shown to the user.
///
/// ```text
/// ρ = I t / C20,  r = I / (C20/20),  q = r^0.9,  ρ held to 1.5/(0.5 q + 1) .. 0.995
/// κ = ρ (q − 1) / (ρ q − 1)
/// k = ln(r/ρ) / ln r
/// ```
/// where I reserve current (A), t reserve time (h), C20 20 h capacity (Ah), κ
/// greatest over 20 h capacity, k Peukert exponent. Without a reserve rating the
/// chemistry's k gives the point r = 20^(1/k), ρ = r/20 (the 1 h rate).
/// Valid for: r from 2; the bounds of ρ keep κ between 1 and 1.5.
/// Source: the capacity law of `Cell::capacity_share` through the label's two points.
fn capacity_law(label: &Label, c20: f64, notes: &mut Vec<Note>) -> (f64, f64) {
    let stated = usable_reserve(label, c20, notes);
    let amps = label.reserve_amps.0;
    let (r, stated_rho) = match stated {
        Some(reserve) => (20.0 * amps / c20, amps * reserve.0 / c20),
        None => {
            let exponent = label.chemistry.defaults().peukert;
            notes.push(Note::ReserveAssumed {
                exponent: Fraction(exponent),
            });
            let r = 20f64.powf(1.0 / exponent);
            (r, r / 20.0)
        }
    };
    let q = r.powf(k::CAPACITY_EXPONENT);
    let least = k::KAPPA_MOST / ((k::KAPPA_MOST - 1.0) * q + 1.0);
    let rho = stated_rho.max(least).min(0.995);
    if let Some(stated) = stated.filter(|_| rho != stated_rho) {
        notes.push(Note::ReserveInconsistent {
            stated,
            used: Hours(rho * c20 / amps),
        });
    }
    (rho * (q - 1.0) / (rho * q - 1.0), (r / rho).ln() / r.ln())
}

/// The reserve time of the label, if it is a number and its current lies far
/// enough above the 20 h current.
fn usable_reserve(label: &Label, c20: f64, notes: &mut Vec<Note>) -> Option<Hours> {
    let reserve = label.reserve_capacity?;
    let amps = label.reserve_amps;
    if !(reserve.is_finite() && reserve.0 > 0.0 && amps.is_finite() && amps.0 > 0.0) {
        notes.push(Note::OutOfRange {
            what: "reserve_capacity",
        });
        return None;
    }
    if amps.0 < k::RESERVE_RATE_LEAST * c20 / 20.0 {
        notes.push(Note::ReserveTooSlow { amps });
        return None;
    }
    Some(reserve)
}

/// Cranking amperes of the label, or the chemistry's usual.
fn cranking_amps(label: &Label, c20: f64, notes: &mut Vec<Note>) -> f64 {
    match label.cold_cranking.filter(|a| a.is_finite() && a.0 > 0.0) {
        Some(amps) => {
            if amps.0 > k::CRANKING_MOST * c20 {
                notes.push(Note::CrankingHigh { amps });
            }
            amps.0
        }
        None => {
            let amps = label.chemistry.defaults().cranking * c20;
            notes.push(Note::CrankingAssumed { amps: Amps(amps) });
            amps
        }
    }
}

/// Ohmic resistance, full at 25 °C, with which the cranking test ends at 1.2 V.
///
/// ```text
/// s   = 1 − I·30 s / C_max
/// d   = min(d∞(I, T) (1 − exp(−30 s/τ)), 0.4)
/// e   = emf(s, d, T) − p(T) I / (Ik + I)
/// R25 = (e − 1.2) / I / (1 + 0.8 (1 − s)) · exp(0.020 (T − 25)),  at least 1e-4/C20
/// ```
/// where I cranking rating (A), T its temperature (°C), τ 0.5 h, p and Ik the
/// polarisation and its half current.
/// Valid for: ratings up to 15 A/Ah; beyond, the test and the capacity do not
/// go together and the resistance comes out too small.
/// Source: SAE J537 (30 s, -18 °C, 1.2 V per cell), solved for R25.
fn cranking_resistance(cell: &Cell, amps: f64, air: Celsius, notes: &mut Vec<Note>) -> f64 {
    let dt = air.0.max(k::AIR_RANGE.0).min(k::AIR_RANGE.1) - k::REFERENCE_AIR;
    let soc = 1.0 - amps * k::CRANKED_HOURS / cell.c_max;
    let full_lag = cell.depletion_target(amps, capacity_factor(air).0)
        * -(-k::CRANKED_HOURS / k::DEPLETION_HOURS).exp_m1();
    let depletion = full_lag.min(k::CRANKED_DEPLETION_MOST);
    let polarisation = k::POLARISATION_DISCHARGE * (-k::POLARISATION_PER_KELVIN * dt).exp() * amps
        / (k::POLARISATION_HALF * cell.c20 + amps);
    let e = cell.emf(soc, depletion) + k::OCV_PER_KELVIN * dt - polarisation;
    let resistance = (e - k::CRANKED_PER_CELL) / amps / Cell::resistance_rise(soc)
        * (k::RESISTANCE_PER_KELVIN * dt).exp();
    let least = k::RESISTANCE_LEAST / cell.c20;
    if resistance < least {
        notes.push(Note::ResistanceFloored {
            used: Ohms(least * cell.cells),
        });
    }
    resistance.max(least)
}
