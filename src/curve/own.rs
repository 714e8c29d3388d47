//! Volts of a winding's own circuit against speed.

use crate::build::{Build, SourceKind};
use crate::circuit::at_speed;
use crate::quantity::{Amps, Rpm, Volts, Watts};
use crate::source;
use serde::Serialize;

/// A winding's own circuit at one speed: rms volts where alternating, mean volts where rectified.
/// Loaded is with everything on that may be on at once in any running state of the shift, coils at
/// 20 °C; none where the equations do not cover the load.
#[derive(Clone, Copy, Debug, Serialize)]
pub struct OwnPoint {
    /// Engine speed.
    pub rpm: Rpm,
    /// Volts with nothing on.
    pub open_circuit_v: Option<Volts>,
    /// Volts with everything on.
    pub loaded_v: Option<Volts>,
    /// Rms current of the winding then.
    pub winding_rms_a: Option<Amps>,
    /// Heat in its copper then.
    pub copper_loss_w: Option<Watts>,
}

/// By speed.
pub(super) fn points(build: &Build, index: usize, rpms: &[Rpm]) -> Vec<OwnPoint> {
    let loss = |amps: Amps| match build.sources.get(index).map(|s| &s.kind) {
        Some(SourceKind::Winding(w)) => Some(source::copper_loss(&w.constants, amps)),
        _ => None,
    };
    let at = |rpm: &Rpm| {
        let found = at_speed(build, index, *rpm).ok();
        let amps = found.map(|(_, point)| point.winding);
        OwnPoint {
            rpm: *rpm,
            open_circuit_v: found.map(|(open, _)| open),
            loaded_v: found.map(|(_, point)| point.volts),
            winding_rms_a: amps,
            copper_loss_w: amps.and_then(loss),
        }
    };
    rpms.iter().map(at).collect()
}
