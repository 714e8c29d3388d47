//! One case: a winding and what hangs on it, with this program's figures for it.

use ampledger::quantity::{Amps, Henries, Ohms, Rpm, Volts, VoltsPerRpm};
use ampledger::source::{
    CircuitLoad, CircuitOutput, Phases, Rectifier, Winding, half_wave_coil, lamps_on_ac, rectified,
    short_circuit, without_battery,
};

/// What hangs on the winding. Volts, ohms, henries, watts.
#[derive(Clone, Copy, Debug)]
pub enum Load {
    /// One diode or a bridge into a stiff bus.
    Bus {
        bus: f64,
        drop: f64,
        half_wave: bool,
    },
    /// Nothing but a wire.
    Short,
    /// Filament lamps and a heater on alternating current.
    Lamps { watts: f64, at: f64, heater: f64 },
    /// A coil, and perhaps a resistor, behind a bridge or one diode with a freewheel diode.
    Coil {
        coil: f64,
        inductance: f64,
        resistor: Option<f64>,
        drop: f64,
        half_wave: bool,
    },
    /// A coil behind one diode, no freewheel diode.
    CoilAlone {
        coil: f64,
        inductance: f64,
        drop: f64,
    },
}

/// A winding (per phase) at a speed, and its load.
#[derive(Clone, Copy, Debug)]
pub struct Case {
    pub emf: f64,
    pub rpm: f64,
    pub poles: u32,
    pub resistance: f64,
    pub inductance: f64,
    pub three_phase: bool,
    pub load: Load,
}

/// What is compared: mean current of the load, rms current of the winding, volts of the load (0 where it is stiff).
#[derive(Clone, Copy, Debug)]
pub struct Figures {
    pub dc: f64,
    pub rms: f64,
    pub volts: f64,
}

impl Case {
    pub fn hertz(&self) -> f64 {
        self.rpm * f64::from(self.poles) / 120.0
    }

    pub fn reactance(&self) -> f64 {
        2.0 * std::f64::consts::PI * self.hertz() * self.inductance
    }

    pub fn is_plain_rectifier(&self) -> bool {
        matches!(self.load, Load::Bus { .. })
    }

    pub fn name(&self) -> String {
        let phases = if self.three_phase {
            "three phases"
        } else {
            "one phase"
        };
        format!(
            "{phases}: {:.3} V rms, {:.0} rpm, {} poles, {:.4} ohm, {:.4} mH, X/R {:.2}, {:?}",
            self.emf,
            self.rpm,
            self.poles,
            self.resistance,
            1e3 * self.inductance,
            self.reactance() / self.resistance,
            self.load
        )
    }

    /// 0.5 % of the reading and 0.1 % of E/Z for rectifiers into a bus (the second for the simulator's own diode), 1 %
    /// elsewhere, with the 0.1 % of E/Z where a coil chokes the current.
    pub fn bound(&self, reading: f64) -> f64 {
        let floor = 0.001 * 2.0_f64.sqrt() * self.emf / self.resistance.hypot(self.reactance());
        match self.load {
            Load::Bus { .. } => 0.005 * reading.abs() + floor,
            _ => 0.01 * reading.abs(),
        }
    }

    pub fn volts_bound(&self, reading: f64) -> f64 {
        0.01 * reading.abs()
    }

    fn winding(&self) -> Winding {
        let phases = if self.three_phase {
            Phases::Three
        } else {
            Phases::One
        };
        let k = VoltsPerRpm(self.emf / self.rpm);
        Winding::new(
            k,
            Ohms(self.resistance),
            Henries(self.inductance),
            self.poles,
            phases,
        )
        .expect("a lawful winding")
    }

    /// This program's figures.
    pub fn ours(&self) -> Figures {
        let (w, rpm) = (self.winding(), Rpm(self.rpm));
        match self.load {
            Load::Bus {
                bus,
                drop,
                half_wave,
            } => {
                let out = rectified(&w, &rectifier(drop, half_wave), rpm, Volts(bus));
                figures(out.dc, out.winding_rms, Volts::ZERO)
            }
            Load::Short => figures(Amps::ZERO, short_circuit(&w, rpm), Volts::ZERO),
            Load::Lamps { watts, at, heater } => {
                let current =
                    |v: Volts| Amps(watts / at * (v.0 / at).powf(0.55)) + v / Ohms(heater);
                let out = lamps_on_ac(&w, rpm, current).expect("an operating point");
                figures(Amps::ZERO, out.amps, out.volts)
            }
            Load::Coil {
                coil,
                resistor,
                drop,
                half_wave,
                ..
            } => {
                let load = CircuitLoad {
                    coil: Some(Ohms(coil)),
                    resistive: resistor.map(Ohms),
                };
                let out = without_battery(&w, &rectifier(drop, half_wave), rpm, &load, true);
                of_circuit(&out.expect("an operating point"))
            }
            Load::CoilAlone {
                coil,
                inductance,
                drop,
            } => {
                let out = half_wave_coil(&w, Volts(drop), rpm, Ohms(coil), Henries(inductance));
                of_circuit(&out.expect("an operating point"))
            }
        }
    }
}

fn figures(dc: Amps, rms: Amps, volts: Volts) -> Figures {
    Figures {
        dc: dc.0,
        rms: rms.0,
        volts: volts.0,
    }
}

fn of_circuit(out: &CircuitOutput) -> Figures {
    figures(out.coil, out.winding_rms, out.volts)
}

fn rectifier(drop: f64, half_wave: bool) -> Rectifier {
    let drop = Volts(drop);
    if half_wave {
        Rectifier::HalfWave { drop }
    } else {
        Rectifier::FullWave { drop }
    }
}
