//! Rectified windings against figures of an independent circuit simulator: `reference/rectifier.csv`.

use ampledger::quantity::{Henries, Ohms, Rpm, Volts, VoltsPerRpm};
use ampledger::source::{Phases, Rectifier, Winding, rectified, rectified_dc};

/// One row of the file.
#[derive(serde::Deserialize)]
struct Row {
    topology: String,
    open_circuit_v: f64,
    rpm: f64,
    poles: u32,
    resistance_ohm: f64,
    inductance_h: f64,
    bus_v: f64,
    drop_v: f64,
    dc_a: f64,
    winding_rms_a: f64,
    peak_inverse_v: f64,
}

fn rows() -> Vec<Row> {
    let text = include_str!("reference/rectifier.csv");
    csv::Reader::from_reader(text.as_bytes())
        .deserialize()
        .map(|row| row.unwrap())
        .collect()
}

impl Row {
    fn winding(&self) -> Winding {
        let phases = if self.topology == "three-phase" {
            Phases::Three
        } else {
            Phases::One
        };
        Winding::new(
            VoltsPerRpm(self.open_circuit_v / self.rpm),
            Ohms(self.resistance_ohm),
            Henries(self.inductance_h),
            self.poles,
            phases,
        )
        .unwrap()
    }

    fn rectifier(&self) -> Rectifier {
        let drop = Volts(self.drop_v);
        match self.topology.as_str() {
            "half-wave" => Rectifier::HalfWave { drop },
            _ => Rectifier::FullWave { drop },
        }
    }

    /// 0.5 % of the reading and 0.1 % of E/Z: the second for the simulator's own diode, whose drop falls a millivolt
    /// a decade, and its damping resistors.
    fn bound(&self, reading: f64) -> f64 {
        let w = self.winding();
        let z = w.resistance().0.hypot(w.reactance(Rpm(self.rpm)).0);
        0.005 * reading + 0.001 * self.open_circuit_v * 2.0_f64.sqrt() / z
    }
}

#[test]
fn every_row_agrees() {
    let rows = rows();
    assert_eq!(rows.len(), 81);
    for row in &rows {
        let out = rectified(
            &row.winding(),
            &row.rectifier(),
            Rpm(row.rpm),
            Volts(row.bus_v),
        );
        let name = format!(
            "{} {} V {} rpm: {out:?}",
            row.topology, row.open_circuit_v, row.rpm
        );
        assert!(
            (out.dc.0 - row.dc_a).abs() <= row.bound(row.dc_a),
            "{name} for {}",
            row.dc_a
        );
        assert!(
            (out.winding_rms.0 - row.winding_rms_a).abs() <= row.bound(row.winding_rms_a),
            "{name} for {}",
            row.winding_rms_a
        );
        // The simulator's diodes carry up to 30 mV more than the stated drop.
        assert!(
            (out.peak_inverse.0 - row.peak_inverse_v).abs() <= 0.005 * row.peak_inverse_v + 0.02,
            "{name} for {}",
            row.peak_inverse_v
        );
        let fast = rectified_dc(
            &row.winding(),
            &row.rectifier(),
            Rpm(row.rpm),
            Volts(row.bus_v),
        );
        assert_eq!(fast, out.dc);
    }
}

#[test]
fn every_mode_is_met() {
    let mut seen: Vec<String> = rows()
        .iter()
        .map(|row| {
            rectified(
                &row.winding(),
                &row.rectifier(),
                Rpm(row.rpm),
                Volts(row.bus_v),
            )
        })
        .map(|out| format!("{:?}", out.mode))
        .collect();
    seen.sort();
    seen.dedup();
    assert!(seen.len() >= 4, "{seen:?}");
}
