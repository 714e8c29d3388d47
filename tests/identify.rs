//! A winding's constants from bench tables made by the winding itself: exact, and with noise.

use ampledger::identify::{Identified, IdentifyError, Note, Reading, Readings, identify, read_csv};
use ampledger::quantity::{Amps, Celsius, Henries, Ohms, Rpm, Volts, VoltsPerRpm};
use ampledger::source::{Magnets, Phases, Rectifier, Winding, Working, rectified_dc};

const BRIDGE: Rectifier = Rectifier::FullWave { drop: Volts(0.9) };

/// An invented winding between its leads at 20 °C.
struct Bench {
    k: f64,
    r: f64,
    l: f64,
    poles: u32,
    phases: Phases,
    rectifier: Rectifier,
    working: Working,
}

fn single() -> Bench {
    let (k, r, l) = (28.0 / 3600.0, 0.15, 0.6e-3);
    Bench {
        k,
        r,
        l,
        poles: 12,
        phases: Phases::One,
        rectifier: BRIDGE,
        working: Working::AS_MEASURED,
    }
}

fn three() -> Bench {
    Bench {
        k: 26.0 / 3600.0,
        r: 0.16,
        l: 0.7e-3,
        phases: Phases::Three,
        ..single()
    }
}

fn half() -> Bench {
    let rectifier = Rectifier::HalfWave { drop: Volts(0.9) };
    Bench {
        k: 28.0 / 3600.0,
        r: 0.4,
        l: 1.7e-3,
        rectifier,
        ..single()
    }
}

impl Bench {
    /// Ten rows from just above cut-in to 3600 rpm into 12.4 to 14.2 V, each reading times a factor.
    fn table(&self, rows: usize, factor: &mut dyn FnMut() -> f64) -> Readings {
        let (k, r) = (VoltsPerRpm(self.k), Ohms(self.r));
        let cold = Winding::between_leads(k, r, Henries(self.l), self.poles, self.phases).unwrap();
        let winding = self.working.heat(&cold).unwrap();
        let row = |n: usize| {
            let share = n as f64 / (rows - 1) as f64;
            let (rpm, bus) = (Rpm(1650.0 + 1950.0 * share), Volts(12.4 + 1.8 * share));
            let amps = rectified_dc(&winding, &self.rectifier, rpm, bus);
            (rpm, bus, amps)
        };
        let rows = (0..rows).map(row).map(|(rpm, bus, amps)| Reading {
            rpm,
            bus,
            amps: amps * factor(),
        });
        Readings {
            rows: rows.collect(),
            open_circuit: None,
            resistance: None,
            poles: self.poles,
            phases: self.phases,
            rectifier: self.rectifier,
            setpoint: None,
            working: self.working,
        }
    }

    fn exact(&self) -> Readings {
        self.table(10, &mut || 1.0)
    }

    #[track_caller]
    fn assert_within(&self, found: &Identified, share: f64) {
        let near = |got: f64, want: f64| {
            assert!(
                (got / want - 1.0).abs() < share,
                "{got} for {want}; {found:?}"
            );
        };
        near(found.open_circuit_v_per_rpm.0, self.k);
        near(found.resistance_ohm.0, self.r);
        near(found.inductance_h.0, self.l);
    }
}

/// SplitMix64 (Steele, Lea and Flood, 2014; from memory), and a normal deviate as a sum of twelve uniform ones.
struct Draw(u64);

impl Draw {
    fn unit(&mut self) -> f64 {
        self.0 = self.0.wrapping_add(0x9e37_79b9_7f4a_7c15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
        ((z ^ (z >> 31)) >> 11) as f64 / (1_u64 << 53) as f64
    }
    fn normal(&mut self) -> f64 {
        (0..12).map(|_| self.unit()).sum::<f64>() - 6.0
    }
}

#[test]
fn exact_readings_give_the_constants_back() {
    for bench in [single(), three(), half()] {
        let found = identify(&bench.exact()).unwrap();
        bench.assert_within(&found, 0.01);
        assert!(found.residual_a_rms < Amps(1e-3), "{found:?}");
        assert!(found.notes.is_empty(), "{:?}", found.notes);
    }
}

/// How many of `tables` noisy tables state intervals that hold the true k, R and L. `noise` is one sigma: of each
/// reading, or where `even` of the greatest.
fn inside(bench: &Bench, tables: u64, noise: f64, even: bool) -> [usize; 3] {
    let mut inside = [0; 3];
    let exact = bench.exact();
    let greatest = exact
        .rows
        .iter()
        .fold(Amps::ZERO, |most, row| most.max(row.amps));
    for seed in 0..tables {
        let mut draw = Draw(seed);
        let mut table = exact.clone();
        for row in &mut table.rows {
            let scale = if even { greatest } else { row.amps };
            row.amps = (row.amps + scale * (noise * draw.normal())).max(Amps::ZERO);
        }
        let found = identify(&table).unwrap();
        let (k, r, l) = (
            &found.open_circuit_spread,
            &found.resistance_spread,
            &found.inductance_spread,
        );
        inside[0] +=
            usize::from(k.low_95.0 < bench.k && k.high_95.is_none_or(|high| bench.k < high.0));
        inside[1] +=
            usize::from(r.low_95.0 < bench.r && r.high_95.is_none_or(|high| bench.r < high.0));
        inside[2] +=
            usize::from(l.low_95.0 < bench.l && l.high_95.is_none_or(|high| bench.l < high.0));
    }
    inside
}

#[test]
fn stated_uncertainty_holds_in_nine_of_ten_tables() {
    let [k, r, l] = inside(&single(), 100, 0.02, false);
    assert!(k >= 90 && r >= 90 && l >= 90, "k {k}, R {r}, L {l} of 100");
}

#[test]
fn stated_uncertainty_holds_for_other_windings_and_noise() {
    for (bench, even) in [(single(), true), (three(), false), (half(), false)] {
        let [k, r, l] = inside(&bench, 40, 0.02, even);
        assert!(k >= 36 && r >= 36 && l >= 36, "k {k}, R {r}, L {l} of 40");
    }
}

#[test]
fn open_circuit_volts_and_resistance_sharpen_the_answer() {
    let mut draw = Draw(7);
    let plain = single().table(10, &mut || 1.0 + 0.02 * draw.normal());
    let measured = Readings {
        open_circuit: Some(VoltsPerRpm(single().k)),
        resistance: Some(Ohms(single().r)),
        ..plain.clone()
    };
    let (without, with) = (identify(&plain).unwrap(), identify(&measured).unwrap());
    single().assert_within(&with, 0.06);
    assert!(with.resistance_spread.one_sigma < without.resistance_spread.one_sigma * 0.5);
    let not_pinned = |found: &Identified| {
        found
            .notes
            .iter()
            .any(|n| matches!(n, Note::NotPinned { .. }))
    };
    assert!(not_pinned(&without), "{:?}", without.notes);
    assert!(!not_pinned(&with), "{:?}", with.notes);
    let words = without.notes[0].to_string();
    assert!(
        words.contains("do not pin down the resistance") && words.contains("ohmmeter"),
        "{words}"
    );
}

#[test]
fn one_reading_does_with_volts_and_ohms() {
    let bench = single();
    let mut table = bench.exact();
    table.rows.drain(..9);
    table.open_circuit = Some(VoltsPerRpm(bench.k));
    table.resistance = Some(Ohms(bench.r));
    bench.assert_within(&identify(&table).unwrap(), 0.01);
}

#[test]
fn rows_held_by_a_regulator_are_left_out() {
    let bench = single();
    let mut table = bench.exact();
    table.setpoint = Some(Volts(14.4));
    // The regulator passes only what a light load asks for.
    for rpm in [3000.0, 3300.0] {
        table.rows.push(Reading {
            rpm: Rpm(rpm),
            bus: Volts(14.38),
            amps: Amps(4.0),
        });
    }
    let found = identify(&table).unwrap();
    bench.assert_within(&found, 0.01);
    assert_eq!(found.rows.iter().filter(|row| !row.used).count(), 2);
    assert!(
        found.notes[0]
            .to_string()
            .starts_with("2 readings at the regulator's 14.4 V left out")
    );
    // Had they been used, the table would not fit.
    table.setpoint = None;
    let spoilt = identify(&table).unwrap();
    assert!(spoilt.residual_a_rms > Amps(1.0));
    assert!(
        spoilt
            .notes
            .iter()
            .any(|n| matches!(n, Note::Scatter { .. })),
        "{:?}",
        spoilt.notes
    );
}

#[test]
fn a_wrong_ohmmeter_is_told() {
    let table = Readings {
        resistance: Some(Ohms(0.6)),
        ..single().exact()
    };
    let found = identify(&table).unwrap();
    let told = found
        .notes
        .iter()
        .find(|n| matches!(n, Note::Disagrees { .. }));
    let words = told.expect("a note").to_string();
    assert_eq!(
        words,
        "the measured resistance of 0.6 Ω does not go with the readings, which alone lead to 0.15 Ω; check both"
    );
    // A volt meter that reads a fifth low, too.
    let low = Readings {
        open_circuit: Some(VoltsPerRpm(0.8 * single().k)),
        ..single().exact()
    };
    let notes = identify(&low).unwrap().notes;
    let volts = notes
        .iter()
        .any(|n| n.to_string().starts_with("the measured open-circuit volts"));
    assert!(volts, "{notes:?}");
}

#[test]
fn hot_readings_are_brought_to_20_degrees() {
    let working = Working {
        winding: Celsius(90.0),
        magnets: Magnets::RareEarth,
    };
    let bench = Bench {
        working,
        ..single()
    };
    let found = identify(&bench.exact()).unwrap();
    bench.assert_within(&found, 0.01);
    assert!(
        found.winding.contains("working: 90 °C") && found.winding.contains("magnets: rare-earth")
    );
}

#[test]
fn refusals() {
    let good = single().exact();
    let few = Readings {
        rows: good.rows[..2].to_vec(),
        ..good.clone()
    };
    assert_eq!(
        identify(&few),
        Err(IdentifyError::TooFew {
            figures: 2,
            held: 0
        })
    );
    let held = Readings {
        setpoint: Some(Volts(12.0)),
        ..good.clone()
    };
    assert_eq!(
        identify(&held),
        Err(IdentifyError::TooFew {
            figures: 0,
            held: 10
        })
    );
    let mut odd = good.clone();
    odd.rows[3].amps = Amps(f64::NAN);
    assert_eq!(identify(&odd), Err(IdentifyError::Row { row: 3 }));
    let dead = single().table(10, &mut || 0.0);
    assert_eq!(identify(&dead), Err(IdentifyError::NoCurrent));
    assert_eq!(
        identify(&Readings {
            poles: 7,
            ..good.clone()
        }),
        Err(IdentifyError::Poles { poles: 7 })
    );
    let none = Readings {
        resistance: Some(Ohms(0.0)),
        ..good.clone()
    };
    assert_eq!(
        identify(&none),
        Err(IdentifyError::Stated { what: "resistance" })
    );
    // Currents that fall with speed are no winding's.
    let mut falling = good;
    let amps: Vec<Amps> = falling.rows.iter().rev().map(|row| row.amps).collect();
    for (row, amps) in falling.rows.iter_mut().zip(amps) {
        row.amps = amps;
    }
    assert!(
        matches!(identify(&falling), Err(IdentifyError::NotConverged { .. })),
        "{:?}",
        identify(&falling)
    );
}

#[test]
fn json_names_stay() {
    let found = identify(&single().exact()).unwrap();
    let json = serde_json::to_value(&found).unwrap();
    for name in [
        "open_circuit_v_per_rpm",
        "resistance_ohm",
        "inductance_h",
        "residual_a_rms",
    ] {
        assert!(json[name].is_number(), "{name} in {json}");
    }
    assert!(json["inductance_spread"]["low_95"].is_number());
}

/// Two rows at nearly one speed, both far beyond where the current has stopped to rise: they set no upper limit to the
/// EMF, and the answer says so rather than a number beyond all.
#[test]
fn where_there_is_no_upper_limit_it_says_so() {
    let table = include_str!("hostile/found/readings/no-upper-limit.csv");
    let found = identify(&read_csv("bench.csv", table).unwrap()).unwrap();
    assert_eq!(found.open_circuit_spread.high_95, None, "{found:?}");
    let notes: Vec<String> = found.notes.iter().map(ToString::to_string).collect();
    let said = "do not pin down the open-circuit volts: anything from 0 V per 1000 rpm up fits";
    assert!(notes.iter().any(|note| note.contains(said)), "{notes:?}");
}
