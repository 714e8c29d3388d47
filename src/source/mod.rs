//! The source side: windings, rectifiers, regulators' effect on a winding, and circuits without a battery.
//!
//! A winding is a sine EMF behind a resistance and an inductance. Through a rectifier into a bus of steady volts it
//! is a piecewise-linear circuit, solved here exactly over one electrical cycle: no time stepping. The equations
//! stand above the code that computes them; the building block of all is a segment of conduction.
//!
//! ```
//! use ampledger::quantity::{Henries, Ohms, Rpm, Volts, VoltsPerRpm};
//! use ampledger::source::{rectified, Phases, Rectifier, Winding};
//! // An invented stator: 28 V rms open-circuit at 3600 rpm, 0.15 ohm, 0.35 mH, 18 poles.
//! let k = VoltsPerRpm(28.0 / 3600.0);
//! let winding = Winding::new(k, Ohms(0.15), Henries(0.35e-3), 18, Phases::One)?;
//! let bridge = Rectifier::FullWave { drop: Volts(0.9) };
//! let output = rectified(&winding, &bridge, Rpm(3600.0), Volts(14.0));
//! assert!((output.dc.0 - 15.10).abs() < 0.01);
//! # Ok::<(), ampledger::source::WindingError>(())
//! ```

mod alternator;
mod bridge;
mod coil_bridge;
mod coil_half_wave;
mod coil_three_phase;
mod constants;
mod half_wave;
mod inductance;
mod lamps;
mod no_battery;
mod rectifier;
mod regulator;
mod segment;
mod short_circuit;
mod temperature;
mod three_phase;
mod winding;

pub use alternator::{CurveError, HOT_DERATING_PER_KELVIN, OutputCurve};
pub use constants::{
    Constants, ConstantsError, Known, Rating, TYPICAL_RESISTIVE_SHARE, Typical,
    typical_open_circuit,
};
pub use lamps::{AcOutput, lamps_on_ac};
pub use no_battery::{
    CircuitError, CircuitLoad, CircuitOutput, coil_on_bridge, half_wave_coil, without_battery,
    without_battery_loaded,
};
pub use rectifier::{Conduction, Output, Rectifier, cut_in_speed, rectified, rectified_dc};
pub use regulator::{
    Range, SHUNT_HEAT_SPREAD, series_regulated_heat, series_regulated_rms, share_needed,
    shunt_regulated_heat,
};
pub use short_circuit::{copper_loss, short_circuit, short_circuit_through};
pub use temperature::{COPPER_PER_KELVIN, MEASURED_AT, Magnets, Working, copper_at, copper_factor};
pub use winding::{Phases, Winding, WindingError};
