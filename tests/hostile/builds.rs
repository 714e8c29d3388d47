//! Random builds as text: every charging kind, law, chemistry and spelling, within what a machine may be.

use proptest::prelude::*;

/// A build drawn at random, as data, so that one figure can be changed and the rest kept.
#[derive(Clone, Debug)]
pub struct Draft {
    pub air: f64,
    pub idle: f64,
    pub governed: f64,
    pub charging: Charging,
    pub battery: Battery,
    pub loads: Vec<Load>,
    pub steps: Vec<(Step, f64)>,
    pub parked: f64,
    pub starter: f64,
}

/// What charges.
#[derive(Clone, Debug)]
pub struct Charging {
    pub alternator: bool,
    pub rated: f64,
    pub open: f64,
    pub resistance: f64,
    pub poles: u32,
    pub phases: u32,
    pub half_wave: bool,
    pub holds: Option<f64>,
    pub shunt: bool,
}

/// The battery.
#[derive(Clone, Debug)]
pub struct Battery {
    pub capacity: f64,
    pub cranking: f64,
    pub chemistry: &'static str,
    pub reserve: Option<f64>,
    pub gassing: f64,
}

/// A load: its draw in amps at 13 V, how it is written, its duties.
#[derive(Clone, Debug)]
pub struct Load {
    pub amps: f64,
    pub law: &'static str,
    pub idle: f64,
    pub governed: f64,
    pub stopped: f64,
    pub parked: f64,
}

/// A step of the shift.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Step {
    Idle,
    Governed,
    Stopped,
    Crank,
}

fn charging() -> impl Strategy<Value = Charging> {
    (
        any::<bool>(),
        2.0..40.0f64,
        22.0..45.0f64,
        0.01..0.08f64,
        3u32..12,
        prop_oneof![Just(1u32), Just(3)],
        any::<bool>(),
        prop::option::of(13.6..14.8f64),
        any::<bool>(),
    )
        .prop_map(
            |(belt, rated, open, loss, pairs, phases, half_wave, holds, shunt)| Charging {
                alternator: belt && phases == 3,
                rated,
                open,
                // a part of what the rated current would drop
                resistance: loss * open / rated,
                poles: 2 * pairs,
                phases,
                half_wave: half_wave && phases == 1,
                holds,
                shunt,
            },
        )
}

fn battery() -> impl Strategy<Value = Battery> {
    let chemistry = prop_oneof![Just("flooded"), Just("agm"), Just("gel")];
    (
        8.0..120.0f64,
        4.0..15.0f64,
        chemistry,
        prop::option::of(0.2..0.9f64),
        1.0..5.0f64,
    )
        .prop_map(|(capacity, rate, chemistry, reserve, gassing)| Battery {
            capacity,
            cranking: capacity * rate,
            chemistry,
            reserve,
            gassing,
        })
}

fn load() -> impl Strategy<Value = Load> {
    let law = prop_oneof![
        Just("current"),
        Just("power"),
        Just("resistance"),
        Just("filament")
    ];
    let duty = || prop_oneof![Just(0.0), Just(1.0), 0.0..1.0f64];
    let parked = prop_oneof![4 => Just(0.0), 1 => 0.001..0.05f64];
    (0.1..15.0f64, law, duty(), duty(), duty(), parked).prop_map(
        |(amps, law, idle, governed, stopped, parked)| Load {
            amps,
            law,
            idle,
            governed,
            stopped: 0.3 * stopped,
            parked,
        },
    )
}

fn steps() -> impl Strategy<Value = Vec<(Step, f64)>> {
    let step = prop_oneof![
        3 => Just(Step::Idle), 4 => Just(Step::Governed), 1 => Just(Step::Stopped), 1 => Just(Step::Crank)
    ];
    prop::collection::vec((step, 1.0..180.0f64), 1..8).prop_filter("the engine runs", |steps| {
        steps
            .iter()
            .any(|(step, _)| matches!(step, Step::Idle | Step::Governed))
    })
}

/// Any build.
pub fn draft() -> impl Strategy<Value = Draft> {
    let speeds = (900.0..2200.0f64, 1.1..2.2f64);
    let loads = prop::collection::vec(load(), 0..12);
    (
        -30.0..45.0f64,
        speeds,
        charging(),
        battery(),
        loads,
        steps(),
        0.0..72.0f64,
        40.0..250.0f64,
    )
        .prop_map(
            |(air, (idle, ratio), charging, battery, loads, steps, parked, starter)| Draft {
                air,
                idle,
                governed: idle * ratio,
                charging,
                battery,
                loads,
                steps,
                parked,
                starter,
            },
        )
}

impl Load {
    fn yaml(&self, name: &str) -> String {
        let draw = match self.law {
            "current" => format!("{:.3} A", self.amps),
            "power" => format!("{:.4} kW", self.amps * 13.0 / 1000.0),
            "resistance" => format!("{:.4} ohm", 13.0 / self.amps),
            law => format!("{:.2} W, law: {law}, at: 13 V", self.amps * 13.0),
        };
        let parked = match self.parked {
            0.0 => String::new(),
            amps => format!(", parked: {:.2} mA", 1000.0 * amps),
        };
        let share = |x: f64| format!("{:.2} %", 100.0 * x);
        format!(
            "  - {{name: {name}, draw: {draw}{parked}, duty: {{idle: {}, governed: {}, stopped: {}}}}}\n",
            share(self.idle),
            share(self.governed),
            share(self.stopped)
        )
    }
}

impl Charging {
    fn yaml(&self) -> String {
        let regulator = match self.holds {
            None => String::new(),
            Some(volts) => {
                let kind = if self.shunt { "shunt" } else { "series" };
                format!("    regulator: {{holds: {volts:.3} V, kind: {kind}}}\n")
            }
        };
        if self.alternator {
            let at = |share: f64, rpm: u32| format!("{:.2} A at {rpm} rpm", share * self.rated);
            let curve = [at(0.0, 1300), at(0.5, 2200), at(0.8, 3600), at(1.0, 6000)];
            return format!(
                "  - alternator: {{curve: [{}], ratio: 2.1}}\n{regulator}",
                curve.join(", ")
            );
        }
        let Charging {
            rated,
            open,
            resistance,
            poles,
            phases,
            ..
        } = self;
        let rectifier = if self.half_wave {
            "half-wave"
        } else {
            "full-wave"
        };
        // one diode rectifies too little to be rated by: its winding is given by its inductance
        let limit = if self.half_wave {
            let speed = std::f64::consts::PI * f64::from(*poles) * 60.0;
            format!("inductance: {:.5} mH", 1000.0 * open / (rated * speed))
        } else {
            format!("rated: {rated:.3} A at 3600 rpm")
        };
        format!(
            "  - winding: {{{limit}, open_circuit: {open:.3} V at 3600 rpm, \
             resistance: {:.3} mΩ, poles: {poles}, phases: {phases}}}\n    rectifier: {rectifier}\n{regulator}",
            1000.0 * resistance
        )
    }
}

impl Draft {
    /// As a user writes it.
    pub fn yaml(&self) -> String {
        let mut text = format!(
            "build: Drawn at random\nair: {:.1} °C\nengine:\n  speeds: {{idle: {:.1} rpm, governed: {:.1} rpm}}\n  \
             starter: {{draw: {:.1} A, time: 2 s}}\ncharging:\n{}",
            self.air,
            self.idle,
            self.governed,
            self.starter,
            self.charging.yaml()
        );
        let Battery {
            capacity,
            cranking,
            chemistry,
            reserve,
            gassing,
        } = &self.battery;
        let reserve = reserve.map_or(String::new(), |r| format!(", reserve: {:.1} %", 100.0 * r));
        text += &format!(
            "battery: {{capacity: {capacity:.2} Ah, cold_cranking: {cranking:.1} A, type: {chemistry}, \
             gassing: {gassing:.2}{reserve}}}\n"
        );
        text += if self.loads.is_empty() {
            "accessories: []\n"
        } else {
            "accessories:\n"
        };
        for (i, load) in self.loads.iter().enumerate() {
            text += &load.yaml(&format!("load {i}"));
        }
        text += "shift:\n";
        for (step, minutes) in &self.steps {
            text += &match step {
                Step::Crank => "  - crank\n".to_owned(),
                Step::Idle => format!("  - idle: {minutes:.1} min\n"),
                Step::Governed => format!("  - governed: {:.4} h\n", minutes / 60.0),
                Step::Stopped => format!("  - stopped: {:.0} s\n", 20.0 * minutes),
            };
        }
        text + &format!("parked: {:.2} h\n", self.parked)
    }
}
