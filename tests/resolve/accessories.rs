//! Draws, duties, names and groups.

use crate::support::{BARE, assumed, fault, made, swap};
use ampledger::build::Draw;
use ampledger::description::accessory::LoadKind;
use ampledger::quantity::{Amps, Fraction, Ohms, Volts, Watts};
use ampledger::resolve::Fault;

#[test]
fn laws_of_a_draw() {
    let draw = |entry: &str| {
        let build = made(&swap(
            BARE,
            "{name: lamp, draw: 40 W}",
            &format!("{{name: x, {entry}}}"),
        ));
        (build.accessories[0].draw.value, build.accessories[0].kind)
    };
    assert_eq!(
        draw("draw: 4 A"),
        (Draw::Current(Amps(4.0)), LoadKind::Motor)
    );
    assert_eq!(
        draw("draw: 15 mA"),
        (Draw::Current(Amps(0.015)), LoadKind::Electronics)
    );
    assert_eq!(
        draw("draw: 3 ohm"),
        (Draw::Resistance(Ohms(3.0)), LoadKind::Heater)
    );
    assert_eq!(draw("draw: 3 ohm, coil: 60 mH").1, LoadKind::Coil);
    assert_eq!(
        draw("draw: 27 W"),
        (Draw::Power(Watts(27.0)), LoadKind::Electronics)
    );
    // R = V² / P = 13.5² / 48 (Ohm's law).
    let (heater, _) = draw("draw: 48 W, law: resistance, at: 13.5 V");
    assert!(matches!(heater, Draw::Resistance(r) if (r - Ohms(3.796_875)).abs() < Ohms(1e-12)));
    assert_eq!(
        draw("draw: 4 A, law: resistance, at: 12 V").0,
        Draw::Resistance(Ohms(3.0))
    );
    let lamp = Draw::Filament {
        power: Watts(55.0),
        at: Volts(13.2),
    };
    assert_eq!(
        draw("draw: 55 W, law: filament, at: 13.2 V"),
        (lamp, LoadKind::Lamp)
    );
}

#[test]
fn volts_of_a_draw_that_are_not_stated_are_nominal() {
    let build = made(&swap(BARE, "draw: 40 W", "draw: 55 W, law: filament"));
    let lamp = Draw::Filament {
        power: Watts(55.0),
        at: Volts(12.0),
    };
    assert_eq!(build.accessories[0].draw.value, lamp);
    assert_eq!(
        assumed(&build, "volts at which the draw is stated, lamp")
            .unwrap()
            .0,
        "12 V"
    );
}

#[test]
fn only_electronics_and_constant_currents_drop_out_by_default() {
    let low = |entry: &str| {
        let build = made(&swap(BARE, "draw: 40 W", entry));
        (
            build.accessories[0].works.low,
            build.accessories[0].works.stated,
        )
    };
    assert_eq!(low("draw: 40 W"), (Some(Volts(10.5)), false));
    assert_eq!(low("draw: 4 A"), (Some(Volts(10.5)), false));
    assert_eq!(low("draw: 3 ohm"), (None, false));
    assert_eq!(low("draw: 40 W, law: filament, at: 12 V"), (None, false));
    assert_eq!(
        low("draw: 3 ohm, works: 11 V to 16 V"),
        (Some(Volts(11.0)), true)
    );
}

#[test]
fn assumptions_alike_share_a_row() {
    let text = swap(
        BARE,
        "  - {name: lamp, draw: 40 W}\n",
        "  - {name: a, draw: 1 A, duty: 100 %}\n  - {name: b, draw: 1 A, duty: 100 %}\n  - {name: c, draw: 1 W, duty: 100 %}\n  - {name: d, draw: 1 W, duty: 100 %}\n  - {name: e, draw: 1 W, duty: 100 %}\n",
    );
    let build = made(&text);
    let rows: Vec<_> = build
        .assumed
        .iter()
        .filter(|a| a.what.contains("drops out"))
        .collect();
    assert_eq!(rows.len(), 1);
    assert_eq!(
        rows[0].what,
        "volts under which it drops out, a, b, c and 2 more"
    );
}

#[test]
fn groups_are_symmetric_and_closed() {
    let text = swap(
        BARE,
        "  - {name: lamp, draw: 40 W}\n",
        "  - {name: a, draw: 1 A, duty: 50 %, together: [b]}\n  - {name: b, draw: 1 A, duty: 50 %, together: [c]}\n  - {name: c, draw: 1 A, duty: 50 %}\n  - {name: d, draw: 1 A, duty: 40 %}\n  - {name: e, draw: 1 A, duty: 60 %, apart: [d]}\n",
    );
    let build = made(&text);
    let groups: Vec<_> = build
        .accessories
        .iter()
        .map(|a| (a.together.clone(), a.apart.clone()))
        .collect();
    assert_eq!(
        groups,
        [
            (vec![1, 2], vec![]),
            (vec![0, 2], vec![]),
            (vec![0, 1], vec![]),
            (vec![], vec![4]),
            (vec![], vec![3])
        ]
    );
}

#[test]
fn faults_of_shift_and_accessories() {
    let (path, wrong) = fault(&swap(BARE, ", starter: {draw: 150 A, time: 2.5 s}", ""));
    assert_eq!(
        (path.as_str(), wrong),
        (
            "shift[0]",
            Fault::CannotCrank {
                lacks: "engine.starter"
            }
        )
    );
    let two = "  - {name: a, draw: 1 A, duty: 70 %, apart: [b]}\n  - {name: b, draw: 1 A, duty: {governed: 40 %}}\n";
    let (path, wrong) = fault(&swap(BARE, "  - {name: lamp, draw: 40 W}\n", two));
    assert_eq!(path, "accessories[0].apart");
    assert!(
        matches!(wrong, Fault::ApartOverfull { state, sum, .. } if state == "governed" && (sum - Fraction(1.1)).abs() < Fraction(1e-12))
    );
    let both = "  - {name: a, draw: 1 A, duty: 20 %, apart: [b]}\n  - {name: b, draw: 1 A, duty: 20 %}\n  - {name: c, draw: 1 A, duty: 20 %, together: [a]}\n";
    let (_, wrong) = fault(&swap(BARE, "  - {name: lamp, draw: 40 W}\n", both));
    assert_eq!(
        wrong,
        Fault::TogetherAndApart {
            name: "a".to_owned()
        }
    );
}
