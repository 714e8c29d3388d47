//! Draws cases: every topology, from just above cut-in to far above, reactance from a fifth to eight times resistance.

use super::case::{Case, Load};

/// SplitMix64 (Steele, Lea and Flood, 2014; from memory): enough to draw cases.
struct Draw(u64);

impl Draw {
    fn unit(&mut self) -> f64 {
        self.0 = self.0.wrapping_add(0x9e37_79b9_7f4a_7c15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
        ((z ^ (z >> 31)) >> 11) as f64 / (1_u64 << 53) as f64
    }
    fn between(&mut self, low: f64, high: f64) -> f64 {
        low + (high - low) * self.unit()
    }
    /// Even in the logarithm.
    fn scaled(&mut self, low: f64, high: f64) -> f64 {
        low * (high / low).powf(self.unit())
    }
    fn one_of<T: Copy>(&mut self, choices: &[T]) -> T {
        choices[((self.unit() * choices.len() as f64) as usize).min(choices.len() - 1)]
    }

    /// A winding of `emf` volts whose reactance is 0.2 to 8 times its resistance.
    fn winding(&mut self, emf: f64, three_phase: bool, load: Load) -> Case {
        let (rpm, poles) = (
            self.between(1200.0, 4200.0).round(),
            self.one_of(&[6, 8, 10, 12, 14, 16, 18]),
        );
        let resistance = self.scaled(0.05, 1.0);
        let omega = 2.0 * std::f64::consts::PI * rpm * f64::from(poles) / 120.0;
        let inductance = resistance * self.scaled(0.2, 8.0) / omega;
        Case {
            emf,
            rpm,
            poles,
            resistance,
            inductance,
            three_phase,
            load,
        }
    }

    /// Into a bus; `over` is the peak EMF as a multiple of bus and drops.
    fn stiff(&mut self, half_wave: bool, three_phase: bool, over: f64) -> Case {
        let (bus, drop) = (
            self.one_of(&[12.0, 12.6, 13.2, 13.8, 14.4, 27.6]),
            self.between(0.6, 1.05),
        );
        let opposing = bus + if half_wave { drop } else { 2.0 * drop };
        let peaks = if three_phase {
            6.0_f64.sqrt()
        } else {
            2.0_f64.sqrt()
        };
        self.winding(
            over * opposing / peaks,
            three_phase,
            Load::Bus {
                bus,
                drop,
                half_wave,
            },
        )
    }

    fn coil(&mut self, half_wave: bool, resistor: Option<f64>) -> Case {
        let (coil, drop) = (self.between(2.4, 4.0), self.between(0.6, 1.05));
        let load = Load::Coil {
            coil,
            inductance: if half_wave { 0.3 } else { 0.15 },
            resistor,
            drop,
            half_wave,
        };
        // A light winding: a heavy one would need a longer coil to keep its current steady.
        let mut case = self.winding(0.0, false, load);
        case.emf = self.between(12.0, 26.0) * if half_wave { 1.6 } else { 1.0 };
        case.inductance =
            coil * self.scaled(0.02, 0.25) / (2.0 * std::f64::consts::PI * case.hertz());
        case.resistance = coil * self.scaled(0.02, 0.2);
        case
    }
}

/// All cases of one seed.
pub fn cases(seed: u64) -> Vec<Case> {
    let mut draw = Draw(seed);
    let d = &mut draw;
    let mut cases = Vec::new();
    for over in [1.15, 1.5, 2.2, 3.5] {
        let over = over * d.between(0.9, 1.1);
        cases.push(d.stiff(true, false, over));
        cases.push(d.stiff(false, false, over));
        cases.push(d.stiff(false, true, over));
    }
    // Three phases once more where the modes change, between cut-in and 1.3 times it.
    for over in [1.05, 1.1, 1.25] {
        cases.push(d.stiff(false, true, over));
    }
    let emf = d.between(14.0, 40.0);
    cases.push(d.winding(emf, false, Load::Short));
    for heater in [1e9, 8.0] {
        let (watts, at, emf) = (d.between(25.0, 80.0), 12.8, d.between(14.0, 26.0));
        let mut case = d.winding(emf, false, Load::Lamps { watts, at, heater });
        case.resistance = d.between(0.1, 0.5);
        case.inductance = d.between(0.2e-3, 1.0e-3);
        cases.push(case);
    }
    cases.push(d.coil(false, None));
    let resistor = d.between(10.0, 40.0);
    cases.push(d.coil(false, Some(resistor)));
    cases.push(d.coil(true, None));
    let (emf, inductance) = (d.between(20.0, 40.0), d.scaled(1e-3, 2e-2));
    let (coil, drop) = (d.between(2.4, 6.0), d.between(0.6, 1.05));
    cases.push(d.winding(
        emf,
        false,
        Load::CoilAlone {
            coil,
            inductance,
            drop,
        },
    ));
    cases
}
