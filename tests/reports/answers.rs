//! Hand-made answers of the other commands: invented figures that need not follow from any build,
//! for the layout alone.

use ampledger::build::Assumed;
use ampledger::check::answer::Verdict;
use ampledger::fleet::{Fleet, Group, Outcome, Row, Totals};
use ampledger::quantity::{
    AmpHours, Amps, Celsius, Fraction, Metres, Money, Ohms, Rpm, SquareMm, Volts, Watts,
};
use ampledger::remedy::{Answer, Part, Remedy};
use ampledger::size::{Bound, Guideline, Influence, Size, WindingRow};
use ampledger::wire::{
    Arrives, Buy, BuyFuse, BuyRelay, BuyWire, Effect, Gauge, NotSized, SourceRow, SwitchRow, Unmet,
    Wire, Wires,
};
use std::sync::Arc;

/// Two ways out of a build that does not keep up.
pub fn remedy() -> Remedy {
    let answer = |changes: &[&str], set: &[&str], cost: f64, settles: f64| Answer {
        changes: changes.iter().map(|c| (*c).to_owned()).collect(),
        set: set.iter().map(|s| (*s).to_owned()).collect(),
        parts: Vec::new(),
        cost: Some(Money(cost)),
        verdict: Verdict::KeepsUp,
        settles_soc: Some(Fraction(settles)),
        lacks_ah: Some(AmpHours(0.0)),
    };
    Remedy {
        format: 1,
        build: "Orchard mower".to_owned(),
        keeps_up: false,
        lacks_ah: Some(AmpHours(6.312_345_678_901)),
        currency: "EUR".to_owned(),
        answers: vec![
            answer(
                &["idle at 2120 rpm instead of 1800 rpm", "=1+1 <b>lamp</b>"],
                &["engine.speeds.idle=2120 rpm", "accessories[3]={part: lamp}"],
                95.5,
                0.754_321,
            ),
            answer(
                &["20 A winding"],
                &["charging[0]={part: winding-20a}"],
                195.0,
                0.92,
            ),
        ],
        tried: 12,
        offered: 3,
        binds: None,
        notes: vec!["the price list's `lamp-x` is in no catalog".to_owned()],
    }
}

/// Sizes: one with an edge, one without.
pub fn size() -> Size {
    let number =
        |what: &str, bound, amount: Option<f64>, unit: &str, binds: &str| ampledger::size::Answer {
            what: what.to_owned(),
            bound,
            amount,
            unit: unit.to_owned(),
            now: Some(16.0),
            set: None,
            value: None,
            binds: binds.to_owned(),
            parts: vec!["winding-20a".to_owned(), "winding-25a".to_owned()],
        };
    Size {
        format: 1,
        build: "Orchard mower".to_owned(),
        keeps_up: false,
        share: None,
        binds: Some("charge at idle: takes 4.5 Ah".to_owned()),
        answers: vec![
            number(
                "rated output",
                Bound::Least,
                Some(16.934_2),
                "A",
                "charge at idle",
            ),
            number(
                "duty of lamps",
                Bound::Most,
                Some(85.6),
                "%",
                "charge at idle",
            ),
            number("time parked", Bound::Most, None, "min", "not by this"),
        ],
        guideline: vec![Guideline {
            state: "idle".to_owned(),
            rpm: Rpm(1800.0),
            load_a: Amps(10.6),
            supply_a: Amps(0.83),
            share: Fraction(12.76),
            within: false,
            meets_rpm: Some(Rpm(2929.0)),
        }],
        windings: vec![WindingRow {
            id: "winding-20a".to_owned(),
            title: "20 A winding".to_owned(),
            rated_a: Amps(20.0),
            keeps_up: true,
            idle_rpm: Rpm(1800.0),
            idle_open_v: Some(Volts(14.7)),
            idle_a: Amps(4.81),
            top_a: Amps(20.3),
            heat_w: Some(Watts(76.2)),
            carries_a: Amps(20.3),
            peak_inverse_v: Some(Volts(28.0)),
        }],
        influence: vec![Influence {
            what: "open-circuit volts".to_owned(),
            ah_per_percent: AmpHours(-1.2),
        }],
    }
}

/// Three machines, one of which cannot be judged.
pub fn fleet() -> Fleet {
    let row = |machine: &str, kit: &str, outcome: Outcome| Row {
        machine: machine.into(),
        build: "mower.yaml".into(),
        count: 4,
        kit: Some(kit.into()),
        season: None,
        air_c: None,
        outcome: Arc::new(outcome),
    };
    let lacks = |verdict, lacks: f64, remedy: Option<&str>| Outcome {
        verdict: Some(verdict),
        lacks_ah: Some(AmpHours(lacks)),
        remedy: remedy.map(str::to_owned),
        cost: remedy.map(|_| Money(95.0)),
        ..Outcome::default()
    };
    Fleet {
        format: 1,
        fleet: "Quillhaven & sons".to_owned(),
        currency: "EUR".to_owned(),
        notes: Vec::new(),
        rows: vec![
            row(
                "verge <mower>",
                "night-work",
                lacks(Verdict::KeepsUp, 0.0, None),
            ),
            row(
                "=cart",
                "night-work",
                lacks(Verdict::Carries, 7.66, Some("45 Ah battery")),
            ),
            row(
                "sweeper",
                "night-work",
                Outcome::failed("mower.yaml:3:1: unknown key `drw`"),
            ),
        ],
        totals: Totals {
            rows: 3,
            errors: 1,
            keeps_up: 4,
            carries: 4,
            groups: vec![Group {
                kit: Some("night-work".into()),
                machines: 8,
                keeps_up: 4,
                carries: 4,
                errors: 1,
                kits_cost: Some(Money(2080.0)),
                remedies_cost: Money(380.0),
                cost: Money(2460.0),
                parts: vec![Part {
                    name: "LED work light".to_owned(),
                    part: Some("work-light-led-27w".to_owned()),
                    count: 32,
                    each: Some(Money(38.0)),
                }],
                ..Group::default()
            }],
            ..Totals::default()
        },
    }
}

fn sized() -> Wire {
    Wire {
        name: "Work lights".to_owned(),
        accessories: vec!["Work lights".to_owned()],
        amps: Amps(9.263),
        worst_state: "idle".to_owned(),
        run_m: Metres(2.4),
        return_wire: false,
        length_m: Metres(2.4),
        section_mm2: SquareMm(1.5),
        gauge_awg: Some("14".to_owned()),
        ampacity_a: Amps(15.6),
        table_a: Amps(20.0),
        derating: Fraction(0.78),
        insulation_c: Celsius(80.0),
        ambient_c: Celsius(50.0),
        copper_c: Celsius(61.0),
        overload_c: Celsius(101.0),
        resistance_ohm: Ohms(0.037),
        drop_v: Volts(0.343),
        drop_fraction: Fraction(0.028_6),
        max_drop: Fraction(0.03),
        fuse_a: Amps(15.0),
        fuse_kind: "blade".to_owned(),
        fuse_colour: Some("blue".to_owned()),
        surge: None,
        relay: true,
        switches: vec![SwitchRow {
            accessory: "Work lights".to_owned(),
            amps: Amps(9.263),
            factor: Fraction(2.0),
            needs_a: Amps(18.5),
            switch_a: Amps(10.0),
            relay: true,
            relay_a: Some(Amps(20.0)),
            relay_carries_a: Some(Amps(14.0)),
        }],
        binds: "fuse and wire".to_owned(),
        reasons: vec!["load: 9.26 A in idle".to_owned(), "fuse 15 A".to_owned()],
        arrives: vec![Arrives {
            accessory: "Work lights".to_owned(),
            state: "idle".to_owned(),
            bus_v: Volts(12.02),
            volts: Volts(11.68),
            amps: Amps(9.26),
            works_low_v: Some(Volts(10.0)),
            works: true,
            light: None,
            light_at_bus: None,
            pull_in: None,
        }],
    }
}

/// One wire, one that cannot be sized, one that need not.
pub fn wires() -> Wires {
    let source = |what: &str, certainty: &str| SourceRow {
        what: what.to_owned(),
        source: "a printed table".to_owned(),
        certainty: certainty.to_owned(),
    };
    Wires {
        format: 1,
        build: "Orchard mower".to_owned(),
        gauge: Gauge::Metric,
        system_v: Volts(12.0),
        wires: vec![sized()],
        unmet: vec![Unmet {
            name: "Winch".to_owned(),
            accessories: vec!["Winch".to_owned()],
            amps: Some(Amps(180.0)),
            run_m: Metres(3.0),
            impossible: vec!["no fuse of the list is that large".to_owned()],
            would: vec!["a run of at most 0.8 m".to_owned()],
        }],
        not_sized: vec![NotSized {
            name: "Hour meter".to_owned(),
            why: "no `run:` is given".to_owned(),
        }],
        buy: Buy {
            wire: vec![BuyWire {
                section_mm2: SquareMm(1.5),
                gauge_awg: Some("14".to_owned()),
                insulation_c: Celsius(80.0),
                metres: Metres(2.4),
            }],
            fuses: vec![BuyFuse {
                fuse_a: Amps(15.0),
                kind: "blade".to_owned(),
                colour: Some("blue".to_owned()),
                count: 1,
            }],
            relays: vec![BuyRelay {
                relay_a: Some(Amps(20.0)),
                carries_a: None,
                count: 1,
            }],
        },
        effect: Some(Effect {
            loads_ah: AmpHours(56.3),
            loads_with_wires_ah: AmpHours(56.7),
            balance_ah: AmpHours(-4.16),
            balance_with_wires_ah: AmpHours(-4.35),
        }),
        assumed: vec![Assumed {
            what: "insulation of the wires".to_owned(),
            value: "80 °C".to_owned(),
            origin: "common practice, no source".to_owned(),
        }],
        sources: vec![
            source("ampacity", "standard"),
            source("fuse times", "from memory"),
        ],
        notes: vec![
            "from memory: fuse times (a printed table)".to_owned(),
            "constant powers are taken at 12 V".to_owned(),
        ],
        cautions: vec![
            ampledger::wire::cautions::FIT_FUSES.to_owned(),
            ampledger::wire::cautions::MEASURE.to_owned(),
        ],
    }
}
