//! A hand-made answer: invented figures that need not follow from any build, for the layout alone.

use ampledger::build::Assumed;
use ampledger::check::answer::{
    AccessoryRow, ByState, Change, Check, CircuitRow, Finding, StateRow, StepRow, TraceRow,
    Verdict, Weight,
};
use ampledger::quantity::{AmpHours, Amps, Celsius, Fraction, Minutes, Rpm, Volts, Watts};

/// A name that would be markup if it were not escaped.
pub const MARKUP: &str = "Cart <b>7</b> & \"friends\"";

fn by_state<T: Copy>(values: &[(&str, T)]) -> ByState<T> {
    ByState(values.iter().map(|(s, v)| ((*s).to_owned(), *v)).collect())
}

fn state(name: &str, rpm: f64, minutes: f64, amps: [f64; 4], volts: [f64; 2], ah: f64) -> StateRow {
    StateRow {
        state: name.to_owned(),
        rpm: Rpm(rpm),
        minutes: Minutes(minutes),
        available_a: Amps(amps[0]),
        source_a: Amps(amps[0].min(amps[1] + amps[2])),
        loads_a: Amps(amps[1]),
        battery_a: Amps(amps[2]),
        bus_v: Volts(volts[0]),
        worst_battery_a: Amps(amps[3]),
        worst_bus_v: Volts(volts[1]),
        ah: AmpHours(ah),
        winding_w: Watts(31.5),
    }
}

fn step(state: &str, starts: f64, minutes: f64, from: f64, to: f64) -> StepRow {
    StepRow {
        state: state.to_owned(),
        starts_min: Minutes(starts),
        minutes: Minutes(minutes),
        soc_start: Fraction(from),
        soc_end: Fraction(to),
        bus_v_end: Volts(12.4),
    }
}

fn accessory(
    name: &str,
    count: u32,
    ah: f64,
    share: f64,
    amps: [f64; 3],
    duty: [f64; 3],
) -> AccessoryRow {
    let states = ["idle", "governed", "stopped"];
    let pairs = |v: [f64; 3]| [0, 1, 2].map(|i| (states[i], v[i]));
    AccessoryRow {
        name: name.to_owned(),
        count,
        circuit: "battery".to_owned(),
        ah: AmpHours(ah),
        share: Fraction(share),
        missed_ah: AmpHours(0.0),
        amps: by_state(&pairs(amps).map(|(s, a)| (s, Amps(a)))),
        volts: by_state(&pairs([12.4, 13.1, 12.2]).map(|(s, v)| (s, Volts(v)))),
        duty: by_state(&pairs(duty).map(|(s, d)| (s, Fraction(d)))),
    }
}

/// The answer of a build that falls short.
pub fn falls_short(name: &str) -> Check {
    Check {
        format: 1,
        build: name.to_owned(),
        air_c: Celsius(2.0),
        system_v: Volts(12.0),
        verdict: Verdict::FallsShort,
        judged: true,
        sentence:
            "falls short: lacks 6.31 Ah each shift (1.6 A at every running speed); the first \
                   shift takes the battery to 52 % against a reserve of 60 %"
                .to_owned(),
        shifts_carried: Some(0),
        lacks_ah: Some(AmpHours(6.312_345_678_901)),
        lacks_a: Some(Amps(1.615_7)),
        beyond_charging: None,
        fails: None,
        storage: None,
        rundown: None,
        balance_ah: Some(AmpHours(-9.123_456_789)),
        settles_soc: None,
        lowest_soc: Some(Fraction(0.5189)),
        reserve_soc: Some(Fraction(0.6)),
        reserve_from: Some("cold start".to_owned()),
        states: states(),
        steps: steps(),
        accessories: accessories(),
        circuits: Vec::new(),
        spare_a: None,
        changes: changes(),
        findings: findings(),
        assumed: assumed(),
        cautions: vec![
            "A fuse protects the wire: fit it within 175 mm of the battery's terminal.".to_owned(),
        ],
        notes: vec!["Parts marked invented are for the example only.".to_owned()],
    }
}

fn states() -> Vec<StateRow> {
    vec![
        state(
            "crank",
            0.0,
            0.083_333,
            [0.0, 151.2, -151.2, -151.2],
            [10.1, 10.1],
            -0.21,
        ),
        state(
            "idle",
            1800.0,
            30.0,
            [6.21, 11.43, -5.22, -14.9],
            [12.43, 12.05],
            -2.61,
        ),
        state(
            "governed",
            3400.0,
            205.0,
            [15.84, 16.62, -0.78, -6.31],
            [13.12, 12.5],
            -2.665,
        ),
        state(
            "stopped",
            0.0,
            20.0,
            [0.0, 10.91, -10.91, -10.91],
            [12.21, 12.21],
            -3.6367,
        ),
    ]
}

fn steps() -> Vec<StepRow> {
    vec![
        step("crank", 0.0, 0.041_667, 1.0, 0.9965),
        step("idle", 0.041_667, 12.0, 0.9965, 0.962),
        step("governed", 12.041_667, 95.0, 0.962, 0.755),
        step("stopped", 107.041_667, 20.0, 0.755, 0.634),
        step("crank", 127.041_667, 0.041_667, 0.634, 0.63),
        step("governed", 127.083_333, 110.0, 0.63, 0.5689),
        step("idle", 237.083_333, 18.0, 0.5689, 0.5189),
        step("parked", 255.083_333, 900.0, 0.5189, 0.5150),
    ]
}

fn accessories() -> Vec<AccessoryRow> {
    vec![
        accessory(
            "Work light, LED 27 W",
            4,
            34.2,
            0.562,
            [8.71, 8.24, 0.0],
            [1.0, 1.0, 0.0],
        ),
        accessory(
            "PTO clutch",
            1,
            12.1,
            0.199,
            [0.0, 4.23, 0.0],
            [0.0, 0.85, 0.0],
        ),
        accessory(
            "Seat heater with a rather long descriptive name",
            1,
            8.9,
            0.146,
            [3.27, 3.45, 0.0],
            [0.6, 0.6, 0.0],
        ),
        accessory(
            "=SUM(A1:A9) sprayer",
            1,
            3.6367,
            0.06,
            [0.0, 0.0, 10.91],
            [0.0, 0.0, 1.0],
        ),
        accessory("Radio", 1, 2.02, 0.033, [0.51, 0.49, 0.0], [0.4, 1.0, 0.0]),
    ]
}

fn changes() -> Vec<Change> {
    let change = |text: &str, set: Option<&str>| Change {
        text: text.to_owned(),
        set: set.map(str::to_owned),
        settles_soc: Some(Fraction(0.83)),
    };
    vec![
        change(
            "Idle at 2240 rpm instead of 1800 rpm",
            Some("engine.speeds.idle=2240 rpm"),
        ),
        change(
            "A winding of 19.5 A at 3600 rpm instead of 16 A",
            Some("charging[0].winding.scale=1.22"),
        ),
        change(
            "Seat heater on 22 % of the time instead of 60 %",
            Some("accessories[2].duty=22 %"),
        ),
    ]
}

fn findings() -> Vec<Finding> {
    let finding = |what: &str, weight: Weight, text: &str, source: &str| Finding {
        what: what.to_owned(),
        weight,
        text: text.to_owned(),
        source: source.to_owned(),
    };
    vec![
        finding(
            "dim lamp",
            Weight::Note,
            "Head lamps give 71 % of their light at idle (12.4 V).",
            "common practice, no source",
        ),
        finding(
            "cold start",
            Weight::Fault,
            "At 52 % charge and 2 °C the battery gives 118 A; the starter needs 150 A.",
            "",
        ),
        finding(
            "overcharge",
            Weight::Warning,
            "15.3 V at governed speed with the lights off.",
            "2.40 V a cell, common practice, no source",
        ),
    ]
}

fn assumed() -> Vec<Assumed> {
    let assumed = |what: &str, value: &str, origin: &str| Assumed {
        what: what.to_owned(),
        value: value.to_owned(),
        origin: origin.to_owned(),
    };
    vec![
        assumed(
            "winding temperature at work",
            "100 °C",
            "common practice, no source",
        ),
        assumed(
            "forward drop of one diode",
            "0.9 V",
            "common practice, no source",
        ),
        assumed(
            "self-discharge at 25 °C",
            "4 % a month",
            "flooded battery, handbook range 3 to 6 %",
        ),
    ]
}

/// The answer after a change: keeps up.
pub fn keeps_up(name: &str) -> Check {
    Check {
        verdict: Verdict::KeepsUp,
        sentence: "keeps up: settles at 91 % against a reserve of 60 %, 1.4 A to spare at idle"
            .to_owned(),
        shifts_carried: None,
        lacks_ah: Some(AmpHours(0.0)),
        lacks_a: Some(Amps(0.0)),
        fails: None,
        storage: None,
        rundown: None,
        balance_ah: Some(AmpHours(1.25)),
        settles_soc: Some(Fraction(0.912)),
        lowest_soc: Some(Fraction(0.7211)),
        states: vec![
            state(
                "crank",
                0.0,
                0.083_333,
                [0.0, 151.2, -151.2, -151.2],
                [10.3, 10.3],
                -0.21,
            ),
            state(
                "idle",
                2240.0,
                30.0,
                [10.4, 9.0, 1.4, -3.1],
                [13.43, 12.55],
                0.7,
            ),
            state(
                "governed",
                3400.0,
                205.0,
                [17.9, 16.1, 1.3, -2.2],
                [14.4, 12.6],
                4.44,
            ),
            state(
                "stopped",
                0.0,
                20.0,
                [0.0, 10.91, -10.91, -10.91],
                [12.31, 12.31],
                -3.6367,
            ),
        ],
        spare_a: Some(by_state(&[("idle", Amps(1.4)), ("governed", Amps(1.8))])),
        changes: vec![Change {
            text: "One more work light of 27 W, all the time".to_owned(),
            set: None,
            settles_soc: None,
        }],
        findings: Vec::new(),
        ..falls_short(name)
    }
}

/// No battery: a coil on a rectified circuit, lamps on an alternating one.
pub fn no_battery() -> Check {
    Check {
        lacks_ah: None,
        lacks_a: None,
        fails: None,
        storage: None,
        rundown: None,
        balance_ah: None,
        lowest_soc: None,
        reserve_soc: None,
        reserve_from: None,
        sentence: "falls short: the clutch gets 8.9 V at idle and needs 9.5 V".to_owned(),
        circuits: vec![
            CircuitRow {
                name: "lighting".to_owned(),
                alternating: true,
                volts: by_state(&[("idle", Volts(8.4)), ("governed", Volts(13.9))]),
            },
            CircuitRow {
                name: "clutch".to_owned(),
                alternating: false,
                volts: by_state(&[("idle", Volts(8.9)), ("governed", Volts(15.1))]),
            },
        ],
        ..falls_short("No battery")
    }
}

/// A trace over some days, falling and recovering.
pub fn trace() -> Vec<TraceRow> {
    let row = |minutes: f64, soc: f64| TraceRow {
        minutes: Minutes(minutes),
        state: "idle".to_owned(),
        rpm: Rpm(1800.0),
        bus_v: Volts(12.4),
        source_a: Amps(6.2),
        loads_a: Amps(11.4),
        battery_a: Amps(-5.2),
        soc: Fraction(soc),
    };
    let mut rows = Vec::new();
    let mut begins = 1.0;
    for day in 0..6 {
        let start = f64::from(day) * 1155.0;
        for (minutes, fall) in [
            (0.0, 0.0),
            (12.0, 0.035),
            (107.0, 0.242),
            (127.0, 0.363),
            (237.0, 0.301),
            (255.0, 0.251),
            (1155.0, 0.255),
        ] {
            rows.push(row(start + minutes, begins - fall));
        }
        begins -= 0.255 / f64::from(1 << day);
        begins = begins.max(0.8);
    }
    rows
}
