//! A case as a netlist. The negative rail is ground, the winding floats.

use super::case::{Case, Load};

/// Resistance of a diode, ohms: the simulator finds its steps only with some. It is taken out of the winding's.
const IN_DIODE: f64 = 1e-3;

/// A junction so sharp that its drop moves by 0.3 mV a decade, in series with what is left of the stated drop.
fn diode(name: &str, from: &str, to: &str, drop: f64) -> String {
    // n Vt ln(1 + 3 A/1 uA) with n = 0.005 at 27 °C.
    let rest = drop - 0.005 * 0.025_865 * (3e6_f64).ln();
    format!(
        "D{name} {from} {name}m dx\nVd{name} {name}m {to} {rest}\nRd{name} {from} {name}m 1e7\n"
    )
}

/// A coil whose current starts where this program puts it: it then has to stay there.
fn coil(resistance: f64, inductance: f64, start: f64) -> String {
    format!("Vcoil p k1 0\nRcoil k1 k2 {resistance}\nLcoil k2 0 {inductance} ic={start}\n")
}

/// A damped tenth of a microfarad lets the simulator find its steps while a coil's current changes over between diodes;
/// it moves the figures by a ten-thousandth.
const SNUBBER: &str = "Cs p ps 1e-7\nRs ps 0 30\n";

struct Span {
    settle: f64,
    measure: f64,
    steps: f64,
}

impl Case {
    /// Cycles to settle and to measure: memory dies with L/R of the winding, and of the coil or the lamp's heat.
    fn span(&self) -> Span {
        let winding = 12.0_f64
            .max((14.0 * self.reactance() / self.resistance / std::f64::consts::TAU + 4.0).ceil());
        match self.load {
            Load::Bus {
                half_wave: true, ..
            } => Span {
                settle: 3.0,
                measure: 10.0,
                steps: 2000.0,
            },
            Load::Bus { .. } | Load::Short => Span {
                settle: winding,
                measure: 10.0,
                steps: 2000.0,
            },
            Load::Lamps { .. } => Span {
                settle: (10.0 * LAMP_SECONDS * self.hertz()).ceil() + winding,
                measure: 10.0,
                steps: 1000.0,
            },
            Load::Coil {
                coil, inductance, ..
            } => Span {
                settle: (5.0 * inductance / coil * self.hertz()).ceil() + winding,
                measure: 20.0,
                steps: 2000.0,
            },
            Load::CoilAlone {
                coil, inductance, ..
            } => Span {
                settle: (10.0 * inductance / coil * self.hertz()).ceil() + winding,
                measure: 10.0,
                steps: 2000.0,
            },
        }
    }

    /// The whole deck, for a relative tolerance of the simulator's steps.
    pub fn netlist(&self, tolerance: f64) -> String {
        let (body, measures) = self.circuit();
        let span = self.span();
        let period = 1.0 / self.hertz();
        let (step, from, to) = (
            period / span.steps,
            span.settle * period,
            (span.settle + span.measure) * period,
        );
        let mut text = format!("* case\n.model dx d(is=1e-6 n=0.005 rs={IN_DIODE})\n{body}");
        text += &format!(
            ".options reltol={tolerance} abstol=1e-8 vntol=1e-6 method=gear maxord=2 itl4=200\n"
        );
        text += &format!(".tran {step:.9e} {to:.9e} 0 {step:.9e} uic\n");
        for (name, what) in measures {
            text += &format!(".meas tran {name} {what} from={from:.9e} to={to:.9e}\n");
        }
        text + ".end\n"
    }

    /// Diodes in series with a phase while it conducts.
    fn diodes_in_series(&self) -> f64 {
        match self.load {
            Load::Short | Load::Lamps { .. } => 0.0,
            Load::Bus { half_wave, .. } | Load::Coil { half_wave, .. } => {
                if half_wave || self.three_phase {
                    1.0
                } else {
                    2.0
                }
            }
            Load::CoilAlone { .. } => 1.0,
        }
    }

    fn winding_branch(&self, name: &str, from: &str, to: &str, degrees: f64) -> String {
        let (peak, hertz) = (2.0_f64.sqrt() * self.emf, self.hertz());
        let resistance = self.resistance - IN_DIODE * self.diodes_in_series();
        format!(
            "V{name} {name}1 {from} sin(0 {peak} {hertz} 0 0 {degrees})\nR{name} {name}1 {name}2 {resistance}\n\
             L{name} {name}2 {name}3 {}\nVw{name} {name}3 {to} 0\n",
            self.inductance
        )
    }

    fn circuit(&self) -> (String, Vec<(&'static str, &'static str)>) {
        let rms = ("rms", "rms i(Vwa)");
        match self.load {
            Load::Bus {
                bus,
                drop,
                half_wave,
            } => {
                let feed = self.feed(drop, half_wave);
                (
                    feed + &format!("Vbus p 0 {bus}\n"),
                    vec![("dc", "avg i(Vbus)"), rms],
                )
            }
            Load::Short => (self.winding_branch("a", "0", "0", 0.0), vec![rms]),
            Load::Lamps { watts, at, heater } => {
                let body = self.winding_branch("a", "0", "l", 0.0)
                    + &lamp(watts, at)
                    + &format!("Rh l 0 {heater}\n");
                (body, vec![rms, ("volts", "rms v(l)")])
            }
            Load::Coil {
                coil: r,
                inductance,
                resistor,
                drop,
                half_wave,
            } => {
                let mut body = self.feed(drop, half_wave) + &coil(r, inductance, self.ours().dc);
                if half_wave {
                    body += &diode("f", "0", "p", drop);
                }
                body += &format!("Rp p 0 {}\n{SNUBBER}", resistor.unwrap_or(1e6));
                (
                    body,
                    vec![("dc", "avg i(Vcoil)"), rms, ("volts", "avg v(p)")],
                )
            }
            Load::CoilAlone {
                coil: r,
                inductance,
                drop,
            } => {
                let body = self.feed(drop, true) + &coil(r, inductance, 0.0) + "Rp p 0 1e6\n";
                (
                    body,
                    vec![("dc", "avg i(Vcoil)"), rms, ("volts", "avg v(p)")],
                )
            }
        }
    }

    /// Winding and rectifier, to the positive rail `p`. Large resistors give floating nodes a place to rest.
    fn feed(&self, drop: f64, half_wave: bool) -> String {
        if half_wave {
            return self.winding_branch("a", "0", "c", 0.0)
                + &diode("1", "c", "p", drop)
                + "Rc c 0 1e5\n";
        }
        if !self.three_phase {
            return self.winding_branch("a", "d", "c", 0.0)
                + &diode("1", "c", "p", drop)
                + &diode("2", "d", "p", drop)
                + &diode("3", "0", "c", drop)
                + &diode("4", "0", "d", drop)
                + "Rg d 0 1e6\nRc c d 1e5\n";
        }
        let mut text = String::new();
        for (k, phase) in ["a", "b", "c"].into_iter().enumerate() {
            let terminal = format!("t{phase}");
            text += &self.winding_branch(phase, "s", &terminal, -120.0 * k as f64);
            text += &diode(&format!("u{phase}"), &terminal, "p", drop);
            text += &diode(&format!("l{phase}"), "0", &terminal, drop);
        }
        text + "Rs s 0 1e6\n"
    }
}

/// Time constant of the lamp's heat, s: long against a cycle, so that it is a plain resistance within one.
const LAMP_SECONDS: f64 = 0.03;

/// A filament: conductance falls with its mean square volts, which a resistor and a capacitor average.
fn lamp(watts: f64, at: f64) -> String {
    let conductance = watts / (at * at);
    format!(
        "Bs 0 q i=v(l)*v(l)\nRq q 0 1\nCq q 0 {LAMP_SECONDS} ic={square}\n\
         Bl l 0 i=v(l)*{conductance}*pow(max(v(q),1e-3)/{square},-0.225)\n",
        square = at * at
    )
}
