//! Heat of a winding under its regulator.

use super::{demand, setpoint};
use crate::build::{Build, Source, SourceKind};
use crate::description::charging::RegulatorKind;
use crate::quantity::{Amps, Rpm, Watts};
use crate::source::{self, SHUNT_HEAT_SPREAD};
use serde::Serialize;

/// Heat in a winding's copper at one speed, its regulator at its setpoint, the battery full.
#[derive(Clone, Copy, Debug, Serialize)]
pub struct Heat {
    /// Engine speed.
    pub rpm: Rpm,
    /// Whether the regulator shorts the winding (shunt) or opens it (series).
    pub shorts: bool,
    /// What is drawn of it: the greatest mean demand of a running state at the setpoint, as if this
    /// source alone carried it, at most what it can give.
    pub needed_a: Amps,
    /// Least heat.
    pub low_w: Watts,
    /// Most heat.
    pub high_w: Watts,
}

/// By speed; where the demand takes all it gives the regulator never acts. Empty without a regulator or a rectified winding. A series regulator lies between whole
/// cycles skipped and late firing; a shunt regulator within the spread found against simulated cases.
pub(super) fn regulated(build: &Build, source: &Source, rpms: &[Rpm]) -> Vec<Heat> {
    let (Some(regulator), SourceKind::Winding(winding)) = (&source.regulator, &source.kind) else {
        return Vec::new();
    };
    let (Some(rectifier), Some(holds)) = (&winding.rectifier, setpoint(build, source)) else {
        return Vec::new();
    };
    if source.circuit.is_some() || build.battery.is_none() {
        return Vec::new();
    }
    let demands = demand::demands(build, &[holds]);
    let demand = demands.iter().map(|d| d.mean_a).fold(Amps::ZERO, Amps::max);
    let shorts = regulator.kind == RegulatorKind::Shunt;
    let at = |rpm: &Rpm| {
        let available = source::rectified(&winding.constants, rectifier, *rpm, holds);
        let needed_a = demand.min(available.dc);
        let idle = needed_a >= available.dc;
        let (low_w, high_w) = if idle {
            // All it gives is drawn: the regulator never acts.
            let all = source::copper_loss(&winding.constants, available.winding_rms);
            (all, all)
        } else if shorts {
            let shorted = source::short_circuit(&winding.constants, *rpm);
            let constants = &winding.constants;
            let heat = source::shunt_regulated_heat(constants, &available, shorted, needed_a);
            let spread = SHUNT_HEAT_SPREAD;
            (heat / spread.high.0, heat / spread.low.0)
        } else {
            let range = source::series_regulated_heat(&winding.constants, &available, needed_a);
            (range.low, range.high)
        };
        Heat {
            rpm: *rpm,
            shorts,
            needed_a,
            low_w,
            high_w,
        }
    };
    rpms.iter().map(at).collect()
}
