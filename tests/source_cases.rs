//! Every kind of source against figures of an independent circuit simulator: `reference/source_cases.csv`.

use ampledger::quantity::{Amps, Fraction, Henries, Ohms, Rpm, Volts, VoltsPerRpm, Watts};
use ampledger::source::{
    CircuitLoad, CircuitOutput, Output, Phases, Rectifier, SHUNT_HEAT_SPREAD, Winding,
    coil_on_bridge, copper_loss, half_wave_coil, lamps_on_ac, rectified, series_regulated_heat,
    short_circuit, shunt_regulated_heat, without_battery,
};

/// One row; empty where it does not apply. Three-phase volts and constants are per phase to neutral.
#[derive(Clone, Debug, serde::Deserialize)]
#[allow(non_snake_case, reason = "names of the file's columns")]
struct Row {
    id: String,
    topology: String,
    E_rms_open: f64,
    rpm: f64,
    poles: u32,
    R: f64,
    L: f64,
    V: f64,
    Vf: f64,
    R_load: Option<f64>,
    lamp_W: Option<f64>,
    lamp_Vr: Option<f64>,
    coil_R: Option<f64>,
    coil_L: Option<f64>,
    I_load: Option<f64>,
    V_set: Option<f64>,
    batt_R: Option<f64>,
    batt_C: Option<f64>,
    V0: Option<f64>,
    I_dc: Option<f64>,
    I_rms: f64,
    PIV: Option<f64>,
    V_out: Option<f64>,
}

fn rows(topologies: &[&str], least: usize) -> Vec<Row> {
    let text = include_str!("reference/source_cases.csv");
    let all = csv::Reader::from_reader(text.as_bytes()).into_deserialize();
    let rows: Vec<Row> = all
        .map(|row: Result<Row, csv::Error>| row.unwrap())
        .filter(|row| topologies.contains(&row.topology.as_str()))
        .collect();
    assert!(rows.len() >= least, "{} rows of {topologies:?}", rows.len());
    rows
}

impl Row {
    fn winding_with(&self, more_resistance: f64) -> Winding {
        let phases = if self.topology == "bridge3" {
            Phases::Three
        } else {
            Phases::One
        };
        let k = VoltsPerRpm(self.E_rms_open / self.rpm);
        Winding::new(
            k,
            Ohms(self.R + more_resistance),
            Henries(self.L),
            self.poles,
            phases,
        )
        .unwrap()
    }

    fn winding(&self) -> Winding {
        self.winding_with(0.0)
    }

    fn rectifier(&self) -> Rectifier {
        let drop = Volts(self.Vf);
        if self.topology.starts_with("half") {
            Rectifier::HalfWave { drop }
        } else {
            Rectifier::FullWave { drop }
        }
    }

    fn output(&self, bus: f64) -> Output {
        rectified(
            &self.winding(),
            &self.rectifier(),
            Rpm(self.rpm),
            Volts(bus),
        )
    }

    /// E/Z.
    fn scale(&self) -> f64 {
        let w = self.winding();
        2.0_f64.sqrt() * self.E_rms_open / w.resistance().0.hypot(w.reactance(Rpm(self.rpm)).0)
    }

    fn near(&self, what: &str, got: f64, want: f64, relative: f64, absolute: f64) {
        let off = (got - want).abs();
        assert!(
            off <= relative * want.abs() + absolute,
            "{}: {what} {got} for {want}",
            self.id
        );
    }
}

#[test]
fn rectifiers() {
    for row in rows(&["half", "bridge", "bridge3"], 50) {
        let out = row.output(row.V);
        row.near(
            "mean",
            out.dc.0,
            row.I_dc.unwrap(),
            0.005,
            0.001 * row.scale(),
        );
        row.near(
            "rms",
            out.winding_rms.0,
            row.I_rms,
            0.005,
            0.001 * row.scale(),
        );
        if let Some(peak) = row.PIV {
            row.near("peak inverse", out.peak_inverse.0, peak, 0.001, 0.0);
        }
    }
}

#[test]
fn shorted_windings() {
    for row in rows(&["short"], 3) {
        row.near(
            "rms",
            short_circuit(&row.winding(), Rpm(row.rpm)).0,
            row.I_rms,
            0.01,
            0.0,
        );
    }
}

#[test]
fn lamps_straight_across_a_winding() {
    for row in rows(&["lamps"], 5) {
        let (watts, rated) = (Watts(row.lamp_W.unwrap()), Volts(row.lamp_Vr.unwrap()));
        let heater = Ohms(row.R_load.unwrap());
        // A filament's current goes as volts to the 0.55 (encyclopaedia, citing an electrical handbook).
        let current = |v: Volts| v / heater + watts / rated * (v / rated).powf(0.55);
        let out = lamps_on_ac(&row.winding(), Rpm(row.rpm), current).unwrap();
        row.near("volts", out.volts.0, row.V_out.unwrap(), 0.01, 0.0);
        row.near("rms", out.amps.0, row.I_rms, 0.01, 0.0);
    }
}

fn check_coil(row: &Row, out: &CircuitOutput) {
    row.near("mean", out.coil.0, row.I_dc.unwrap(), 0.01, 0.0);
    row.near("rms", out.winding_rms.0, row.I_rms, 0.01, 0.0);
    row.near("volts", out.volts.0, row.V_out.unwrap(), 0.01, 0.0);
}

#[test]
fn clutch_coils_without_a_battery() {
    for row in rows(&["bridge_coil"], 5) {
        let coil = Ohms(row.coil_R.unwrap());
        check_coil(
            &row,
            &coil_on_bridge(&row.winding(), Volts(row.Vf), Rpm(row.rpm), coil).unwrap(),
        );
    }
    for row in rows(&["half_coil"], 3) {
        let (coil, inductance) = (Ohms(row.coil_R.unwrap()), Henries(row.coil_L.unwrap()));
        let out = half_wave_coil(
            &row.winding(),
            Volts(row.Vf),
            Rpm(row.rpm),
            coil,
            inductance,
        );
        check_coil(&row, &out.unwrap());
    }
    for row in rows(&["half_fw_coil"], 3) {
        let load = CircuitLoad {
            coil: row.coil_R.map(Ohms),
            resistive: None,
        };
        let out = without_battery(&row.winding(), &row.rectifier(), Rpm(row.rpm), &load, true);
        check_coil(&row, &out.unwrap());
    }
}

#[test]
fn a_series_regulator_overloaded_is_the_plain_rectifier() {
    let overloaded = |row: &Row| row.batt_C.unwrap() > 100.0;
    for row in rows(&["half_scr", "bridge_scr"], 6)
        .into_iter()
        .filter(overloaded)
    {
        // The battery's resistance carries the winding's current less the load's: R in series, volts behind it.
        let behind = row.V0.unwrap() - row.batt_R.unwrap() * row.I_load.unwrap();
        let winding = row.winding_with(row.batt_R.unwrap());
        let out = rectified(&winding, &row.rectifier(), Rpm(row.rpm), Volts(behind));
        row.near("mean", out.dc.0, row.I_dc.unwrap(), 0.005, 0.0);
        row.near("rms", out.winding_rms.0, row.I_rms, 0.005, 0.0);
    }
}

#[test]
fn heat_under_a_series_regulator_is_inside_its_range() {
    let holding = |row: &Row| row.batt_C.unwrap() < 100.0;
    for row in rows(&["half_scr", "bridge_scr"], 6)
        .into_iter()
        .filter(holding)
    {
        let available = row.output(row.V_set.unwrap());
        let range = series_regulated_heat(&row.winding(), &available, Amps(row.I_dc.unwrap()));
        let heat = copper_loss(&row.winding(), Amps(row.I_rms));
        assert!(
            range.low < heat && heat < range.high,
            "{}: {heat:?} in {range:?}",
            row.id
        );
    }
}

#[test]
fn heat_under_a_shunt_regulator_is_inside_its_spread() {
    for row in rows(&["bridge_shunt"], 2) {
        let available = row.output(row.V_set.unwrap());
        let shorted = short_circuit(&row.winding(), Rpm(row.rpm));
        let heat =
            shunt_regulated_heat(&row.winding(), &available, shorted, Amps(row.I_dc.unwrap()));
        let ratio = Fraction(heat / copper_loss(&row.winding(), Amps(row.I_rms)));
        assert!(
            SHUNT_HEAT_SPREAD.low < ratio && ratio < SHUNT_HEAT_SPREAD.high,
            "{}: {ratio:?}",
            row.id
        );
    }
}
