//! Builds to measure on, invented.

/// Forty accessories, ten of them cycling, each with a duty of its own.
#[must_use]
pub fn forty() -> String {
    let loads: String = (0..40)
        .map(|k| {
            let duty = if k < 10 { 37 + 5 * k } else { 100 };
            format!(
                "  - {{name: load {k}, draw: {:.2} A, duty: {{governed: {duty} %, idle: 100 %}}}}\n",
                0.2 + 0.01 * f64::from(k)
            )
        })
        .collect();
    format!(
        "\
build: forty loads
air: 15 °C
engine: {{speeds: {{idle: 1800 rpm, governed: 3400 rpm}}, starter: {{draw: 150 A, time: 2.5 s}}}}
charging:
  - winding: {{rated: 16 A at 3600 rpm, open_circuit: 28 V at 3600 rpm, resistance: 0.14 ohm, poles: 12}}
    rectifier: full-wave
    regulator: {{holds: 14.4 V}}
battery: {{capacity: 30 Ah, cold_cranking: 300 A, type: flooded}}
accessories:
{loads}shift: [crank, {{idle: 12 min}}, {{governed: 95 min}}, {{stopped: 20 min}}, crank, {{governed: 110 min}}, {{idle: 18 min}}]
parked: 15 h
"
    )
}
