//! Constants of the battery equations: unit, source and spread of each.
//!
//! *Published* marks a constant taken from a paper through public
//! transcriptions of it, *practice* common practice without one source, *own
//! choice* a value picked between a bounded fit to simulated discharges and
//! plausibility. The spread says how far the constant may be from the truth of
//! one real battery.

/// Temperature at which every constant holds, °C.
pub(super) const REFERENCE_AIR: f64 = 25.0;

/// Air temperatures outside this range are taken as its ends, °C: no lead-acid
/// battery works beyond it and the exponentials stay small.
pub(super) const AIR_RANGE: (f64, f64) = (-60.0, 90.0);

/// End of discharge of every capacity rating, volts per cell.
/// Source: SAE J537 reserve capacity, EN 50342-1 20 h capacity (10.5 V per 12 V).
pub const END_OF_DISCHARGE_PER_CELL: f64 = 1.75;

/// End of a cold-cranking test, volts per cell.
/// Source: SAE J537 (7.2 V per 12 V after 30 s).
pub(super) const CRANKED_PER_CELL: f64 = 1.2;

/// Length of the cold-cranking test, hours. Source: SAE J537 (30 s).
pub(super) const CRANKED_HOURS: f64 = 30.0 / 3600.0;

/// Share of the open-circuit curve that is linear in the state of charge.
/// Fitted to the common printed table 12.65/12.45/12.24/12.06/11.89 V, which it
/// meets within 9 mV. Spread: ±0.05 between printed tables.
pub(super) const OCV_LINEAR: f64 = 0.868;

/// Rise of the open-circuit voltage with temperature, V/K per cell.
/// Source: lead-acid thermodynamics, 0.2 mV/K near 1.25 specific gravity (from
/// memory). Spread: 0.15 to 0.3 mV/K over the useful acid range.
pub(super) const OCV_PER_KELVIN: f64 = 2.0e-4;

/// Width of the knee at the end of discharge, in state of charge.
/// Own choice. Spread: 0.02 to 0.05.
pub(super) const KNEE_WIDTH: f64 = 0.03;

/// Least state of charge the knee is evaluated at: keeps it finite.
pub(super) const KNEE_LEAST: f64 = -0.06;

/// Saturating polarisation on discharge, V per cell at 25 °C.
/// Own choice. Spread: 0.03 to 0.08.
pub(super) const POLARISATION_DISCHARGE: f64 = 0.050;

/// Saturating polarisation on charge, V per cell at 25 °C; includes the acid
/// excess in the plates. Own choice. Spread: 0.05 to 0.12.
pub(super) const POLARISATION_CHARGE: f64 = 0.080;

/// Current at which half of the polarisation acts, amperes per ampere-hour of
/// 20 h capacity. Own choice. Spread: 0.05 to 0.3.
pub(super) const POLARISATION_HALF: f64 = 0.150;

/// Rise of the ohmic resistance from full to empty, as a share of the full
/// value. Own choice; real batteries show 1.5 to 3 times when empty.
pub(super) const RESISTANCE_RISE: f64 = 0.80;

/// Fall of the ohmic resistance with temperature, per kelvin, exponential.
/// Own choice: gives cold-cranking amperes of 100/71/51 % at 27/0/-18 °C.
/// Spread: 0.015 to 0.03.
pub(super) const RESISTANCE_PER_KELVIN: f64 = 0.020;

/// Fall of the polarisation with temperature, per kelvin, exponential.
/// Published: Copetti, Lorenzo and Chenlo, Progress in Photovoltaics 1 (1993)
/// 283, linear there; exponential here so that it cannot change sign.
pub(super) const POLARISATION_PER_KELVIN: f64 = 0.007;

/// Fall of the charge-acceptance resistance with temperature, per kelvin.
/// Published: Copetti 1993, as above.
pub(super) const ACCEPTANCE_PER_KELVIN: f64 = 0.025;

/// Weight of the pole of the charge-acceptance resistance.
/// Published: Schiffer, Sauer, Bindner, Cronin, Lundsager and Kaiser, Journal of
/// Power Sources 168 (2007) 66.
pub(super) const ACCEPTANCE_WEIGHT: f64 = 0.888;

/// State of charge at which the acceptance resistance would be infinite: just
/// above full, so that a finite tail current is left at full. Published value
/// (Schiffer 2007) 1.001; 1.005 is own choice.
pub(super) const ACCEPTANCE_POLE: f64 = 1.005;

/// Steepness of the gassing current in the cell voltage, per volt.
/// Published: Schiffer 2007. Spread: 9 to 13.
pub(super) const GASSING_PER_VOLT: f64 = 11.0;

/// Growth of the gassing current with temperature, per kelvin (doubles in
/// 11.6 K). Published: Schiffer 2007; general pages print a doubling per 10 K.
pub(super) const GASSING_PER_KELVIN: f64 = 0.06;

/// Cell voltage the gassing current is stated at, volts. Published: Schiffer 2007.
pub(super) const GASSING_REFERENCE: f64 = 2.23;

/// Cell voltage above which the gassing current grows no more, volts: keeps the
/// exponential finite where no battery is ever held.
pub(super) const GASSING_CEILING: f64 = 3.0;

/// Exponent of the rate in the capacity law.
/// Published: Copetti 1993; the same form as Ceraolo, IEEE Transactions on Power
/// Systems 15 (2000) 1184.
pub(super) const CAPACITY_EXPONENT: f64 = 0.9;

/// Rate, in 20 h currents, at which half of the cold capacity loss acts.
/// Own choice.
pub(super) const COLD_HALF_RATE: f64 = 1.0;

/// Relaxation time of the depletion, hours. Own choice; measured rests show 0.2
/// to 2 h depending on plate thickness.
pub(super) const DEPLETION_HOURS: f64 = 0.5;

/// A battery that meets its cold-cranking rating is not empty after 30 s: the
/// capacity at any current is at least this many hours of the rated current.
/// Own choice: twice the rating's 30 s.
pub(super) const CAPACITY_FLOOR_HOURS: f64 = 60.0 / 3600.0;

/// ... but not more than this share of the greatest capacity. Own choice.
pub(super) const CAPACITY_FLOOR_MOST: f64 = 0.20;

/// Most depletion assumed when the resistance is found from the cold-cranking
/// rating. Own choice; costs up to 0.03 V per 12 V in giving the test back.
pub(super) const CRANKED_DEPLETION_MOST: f64 = 0.40;

/// Least ohmic resistance, ohm·Ah per cell of 20 h capacity. Own choice: a
/// third of the best published starting batteries.
pub(super) const RESISTANCE_LEAST: f64 = 1e-4;

/// Volts per cell less specific gravity. Source: DOE-HDBK-1084-95.
pub(super) const VOLTS_LESS_GRAVITY: f64 = 0.845;

/// Greatest ratio of the greatest to the 20 h capacity that is believed. Own
/// choice: a Peukert exponent of about 1.5, beyond every published one.
pub(super) const KAPPA_MOST: f64 = 1.5;

/// Least ratio of the reserve current to the 20 h current at which the two
/// ratings lie far enough apart to give a capacity law. Own choice.
pub(super) const RESERVE_RATE_LEAST: f64 = 2.0;

/// Cranking rating over 20 h capacity, A/Ah, above which the label is doubted.
/// Own choice: common starting batteries have 6 to 13.
pub(super) const CRANKING_MOST: f64 = 15.0;

/// Most attempts to start that are reckoned one by one. Own choice.
pub(super) const ATTEMPTS_MOST: u32 = 1000;
