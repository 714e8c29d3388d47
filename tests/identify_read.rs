//! Bench tables as text: YAML, CSV, and the block that comes back.

use ampledger::description::read_charging;
use ampledger::identify::{ReadError, identify, read_csv, readings_of};
use ampledger::quantity::{Amps, Celsius, Ohms, Rpm, Volts};
use ampledger::source::{Phases, Rectifier};

/// Invented: the rows of a 28 V, 0.15 ohm, 0.6 mH, 12-pole winding through 0.9 V diodes, to three digits.
const CSV: &str = "\
# winding:
#   poles: 12
#   resistance: 0.15 ohm
# rectifier: full-wave
rpm,volts,amps
1800,12.8,2.39
2400,13.2,6.66
3000,13.6,10.4
3600,14.0,13.1
";

const YAML: &str = "\
winding:
  poles: 12
  resistance: 0.15 ohm
  readings:
    - {rpm: 1800 rpm, volts: 12.8 V, amps: 2.39 A}
    - {rpm: 2400 rpm, volts: 13.2 V, amps: 6.66 A}
    - {rpm: 3000 rpm, volts: 13.6 V, amps: 10.4 A}
    - {rpm: 3600 rpm, volts: 14.0 V, amps: 13.1 A}
rectifier: full-wave
";

#[test]
fn both_forms_say_the_same() {
    let from_csv = read_csv("bench.csv", CSV).unwrap();
    let from_yaml = readings_of(&read_charging("bench.yaml", YAML).unwrap()).unwrap();
    assert_eq!(from_csv, from_yaml);
    assert_eq!(from_csv.rows.len(), 4);
    assert_eq!(from_csv.rows[1].rpm, Rpm(2400.0));
    assert_eq!(from_csv.rows[1].amps, Amps(6.66));
    assert_eq!(from_csv.resistance, Some(Ohms(0.15)));
    assert_eq!(from_csv.rectifier, Rectifier::FullWave { drop: Volts(0.9) });
    assert_eq!(from_csv.working.winding, Celsius(20.0));
    assert_eq!(from_csv.phases, Phases::One);
}

#[test]
fn the_block_goes_back_into_a_build() {
    let readings = read_csv("bench.csv", CSV).unwrap();
    let found = identify(&readings).unwrap();
    let text = format!("{}rectifier: full-wave\n", found.winding);
    let again = read_charging("pasted.yaml", &text).unwrap();
    let winding = again.winding.unwrap();
    let (volts, rpm) = winding.open_circuit.unwrap().value;
    let near = |got: f64, want: f64| {
        assert!(
            (got / want - 1.0).abs() < 1e-3,
            "{got} for {want} in {text}"
        )
    };
    near((volts / rpm).0, found.open_circuit_v_per_rpm.0);
    near(winding.resistance.unwrap().value.0, found.resistance_ohm.0);
    near(winding.inductance.unwrap().value.0, found.inductance_h.0);
    assert_eq!(winding.poles.unwrap().value, 12);
}

#[test]
fn units_may_be_written_in_the_table() {
    let text = CSV.replace("1800,12.8,2.39", "1800 rpm, 12.8 V, 2390 mA");
    assert_eq!(
        read_csv("bench.csv", &text).unwrap(),
        read_csv("bench.csv", CSV).unwrap()
    );
}

#[test]
fn errors_name_their_line() {
    let told = |text: &str| read_csv("bench.csv", text).unwrap_err();
    assert_eq!(
        told(&CSV.replace("6.66", "much")).to_string(),
        "line 7: `much` is no number for `amps`"
    );
    assert_eq!(
        told(&CSV.replace("6.66", "6.66 V")).to_string(),
        "line 7: `6.66 V` is no number for `amps`"
    );
    assert_eq!(
        told(&CSV.replace("6.66", "-6.66")).to_string(),
        "line 7: current of a reading may not be negative: `-6.66`"
    );
    assert_eq!(
        told(&CSV.replace("2400,", "2400e3 rpm,")).to_string(),
        "line 7: speed is above the limit of 30000 rpm: `2400e3 rpm`"
    );
    assert!(matches!(
        told(&CSV.replace("2400,13.2,6.66", "2400,13.2")),
        ReadError::Table { line: Some(7), .. }
    ));
    assert!(matches!(
        told(&CSV.replace("amps", "current")),
        ReadError::Column { name: "amps" }
    ));
    assert!(matches!(
        told(&CSV.replace("poles: 12", "resistence: 1 ohm")),
        ReadError::Keys(_)
    ));
    assert!(matches!(
        told(&CSV.replace("#   poles: 12\n", "")),
        ReadError::Missing { .. }
    ));
    assert!(matches!(
        told(&CSV.replace("full-wave", "none")),
        ReadError::NoRectifier
    ));
    for (text, says) in [
        (
            CSV.replace("2400,13.2,6.66", "2400,13.2"),
            "line 7: 2 cells under 3 columns",
        ),
        (
            CSV.replace("volts,amps", "volts,amps,amps"),
            "line 5: the table's header has the column `amps` twice",
        ),
        (
            CSV.replace("rpm,volts,amps", "rpm;volts;amps"),
            "line 5: separate the columns with commas: `rpm,volts,amps`",
        ),
        (
            CSV.replace("2400,13.2", "2400,\"13.2"),
            "line 7: a quotation mark begins a cell and none ends it",
        ),
        (
            CSV.replace('#', ""),
            "the readings need the winding's keys above the table",
        ),
        (
            CSV.lines()
                .filter(|l| !l.starts_with('#'))
                .map(|l| format!("{l}\n"))
                .collect(),
            "the readings need the winding's keys above the table",
        ),
    ] {
        let told = told(&text).to_string();
        assert!(told.starts_with(says), "{told}\n{text}");
    }
    let header = &CSV[..CSV.find("1800").unwrap()];
    assert!(matches!(told(header), ReadError::Empty));
    assert!(matches!(
        told(""),
        ReadError::Keys(_) | ReadError::Missing { .. }
    ));
}

#[test]
fn mistakes_in_the_keys_are_marked_where_they_stand() {
    let text = CSV.replace("0.15 ohm", "0.15");
    let ReadError::Keys(refusal) = read_csv("bench.csv", &text).unwrap_err() else {
        panic!("no refusal")
    };
    let shown = refusal.render(false);
    assert!(
        shown.contains("bench.csv:3:17") || shown.contains("bench.csv:3"),
        "{shown}"
    );
}
