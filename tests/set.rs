//! `--set PATH=VALUE`: the text with the value in its place reads as if it were written there.

use ampledger::description::{Assignment, Description, DutyText, read, read_set};
use ampledger::problem::{Refusal, SetKind, Source};
use ampledger::quantity::{AmpHours, Amps, Fraction, Rpm, Volts};

const FULL: &str = include_str!("reading/full.yaml");

/// A build in block style, with remarks in awkward places.
const BLOCK: &str = "\
build: small   # remark
engine:
  speeds:
    idle: 1800 rpm
    governed: 3400 rpm
charging:
- winding:
    open_circuit: 28 V at 3600 rpm
    resistance: 0.14 ohm
    poles: 12
  rectifier: full-wave
battery:
  capacity: 30 Ah
accessories:
  - name: lamp
    draw: 40 W
    # remark
    duty:
      idle: 50 %
      governed: 100 %
  - name: pump
    draw: 4 A
shift:
- idle: 10 min
- governed: 2 h
";

fn set(text: &str, assignments: &[&str]) -> Result<(Description, Source), Refusal> {
    let parsed = assignments
        .iter()
        .map(|a| Assignment::parse(a).unwrap_or_else(|e| panic!("{a}: {e}")));
    read_set("small.yaml", text.as_bytes(), &parsed.collect::<Vec<_>>())
}

#[track_caller]
fn done(text: &str, assignments: &[&str]) -> (Description, Source) {
    set(text, assignments).unwrap_or_else(|refusal| panic!("{refusal}"))
}

#[test]
fn values_are_replaced() {
    let (d, source) = done(
        BLOCK,
        &[
            "engine.speeds.idle=1900 rpm",
            "build=Mower: \"evening\" # 2",
            "accessories[0].duty.idle=40 %",
        ],
    );
    assert_eq!(d.engine.speeds[0].1.value, Rpm(1900.0));
    assert_eq!(d.build.value, "Mower: \"evening\" # 2");
    match &d.accessories[0].duty {
        Some(DutyText::ByState { shares, .. }) => assert_eq!(shares[0].1.value, Fraction(0.4)),
        other => panic!("{other:?}"),
    }
    assert!(
        source.text.contains("    idle: 1900 rpm\n"),
        "{}",
        source.text
    );
    assert!(
        source.text.contains("  # remark\n"),
        "remarks stay: {}",
        source.text
    );
}

#[test]
fn blocks_are_replaced_whole() {
    let (d, _) = done(
        BLOCK,
        &[
            "accessories[0].duty=60 %",
            "shift=[crank, {idle: 1 h}]",
            "charging=[]",
        ],
    );
    assert!(
        matches!(&d.accessories[0].duty, Some(DutyText::Everywhere(share)) if share.value == Fraction(0.6))
    );
    assert_eq!(d.shift.len(), 2);
    assert!(d.charging.is_empty());
    let (d, _) = done(
        BLOCK,
        &[
            "accessories[0]={name: horn, draw: 5 A}",
            "accessories[1].draw=2 A",
        ],
    );
    assert_eq!(
        d.accessories[0].name.as_ref().map(|n| n.value.as_str()),
        Some("horn")
    );
    assert_eq!(
        d.accessories[1].name.as_ref().map(|n| n.value.as_str()),
        Some("pump")
    );
}

#[test]
fn missing_keys_are_put_in() {
    let (d, _) = done(
        BLOCK,
        &[
            "parked=9 h",
            "battery.reserve=60 %",
            "engine.starter.draw=150 A",
            "charging[0].regulator.holds=14.4 V",
            "accessories[1].duty.governed=25 %",
            "accessories[0].duty.stopped=5 %",
            "may.duty.lamp=10 %",
        ],
    );
    assert_eq!(d.parked.map(|p| p.value.0), Some(9.0));
    assert_eq!(
        d.battery.and_then(|b| b.reserve).map(|r| r.value),
        Some(Fraction(0.6))
    );
    assert_eq!(
        d.engine.starter.and_then(|s| s.draw).map(|a| a.value),
        Some(Amps(150.0))
    );
    let holds = d.charging[0]
        .regulator
        .as_ref()
        .and_then(|r| r.holds.as_ref())
        .map(|v| v.value);
    assert_eq!(holds, Some(Volts(14.4)));
    assert_eq!(d.may.map(|m| m.duty[0].1.value), Some(Fraction(0.1)));
    match &d.accessories[0].duty {
        Some(DutyText::ByState { shares, .. }) => assert_eq!(shares.len(), 3),
        other => panic!("{other:?}"),
    }
}

#[test]
fn lists_grow_by_one_and_entries_go_by_name() {
    let (d, _) = done(
        BLOCK,
        &[
            "accessories[2]={name: horn, draw: 5 A}",
            "accessories[3].draw=1 A",
            "accessories[3].name=bell",
        ],
    );
    assert_eq!(d.accessories.len(), 4);
    let (d, _) = done(
        BLOCK,
        &[
            "accessories[pump].draw=2 A",
            "shift[2]=crank",
            "shift[0]=idle: 1 h",
        ],
    );
    assert_eq!(d.shift[0].time.as_ref().map(|t| t.value.0), Some(1.0));
    assert!(format!("{:?}", d.accessories[1].draw).contains("Amps(2.0)"));
    assert_eq!(d.shift.len(), 3);
    let flow = BLOCK.replace(
        "shift:\n- idle: 10 min\n- governed: 2 h\n",
        "shift: [{idle: 10 min}, {governed: 2 h},]\n",
    );
    assert_eq!(done(&flow, &["shift[2]={idle: 1 h}"]).0.shift.len(), 3);
    let none = BLOCK.replace("shift:\n- idle: 10 min\n- governed: 2 h\n", "shift: []\n");
    assert_eq!(done(&none, &["shift[0].idle=1 h"]).0.shift.len(), 1);
}

/// Setting any value to what it is already changes nothing, in either style.
#[test]
fn a_value_set_to_itself_changes_nothing() {
    for text in [FULL, BLOCK] {
        let (plain, source) = read("small.yaml", text.as_bytes()).unwrap_or_else(|r| panic!("{r}"));
        let debug = format!("{plain:?}");
        let mut count = 0;
        for after in debug.split("path: \"").skip(1) {
            let path = after.split('"').next().unwrap_or_default();
            let found = source.places.find(path).unwrap_or_else(|| panic!("{path}"));
            let value = &source.text[found.value];
            // a block has no form in one line
            if value.contains('\n') || value.contains('#') || path.is_empty() {
                continue;
            }
            let same = set(text, &[&format!("{path}={value}")]);
            let (same, _) = same.unwrap_or_else(|r| panic!("{path}={value}: {r}"));
            assert_eq!(format!("{same:?}"), debug, "{path}={value}");
            count += 1;
        }
        assert!(count > 10, "{count} paths");
    }
}

/// Setting what is not in the file equals writing it there: read again from its own text.
#[test]
fn the_text_that_set_makes_reads_the_same() {
    let assignments = [
        "parked=9 h",
        "battery.capacity=40 Ah",
        "wiring.bundle=3",
        "accessories[2]={name: a, draw: 1 A}",
    ];
    let (one, source) = done(BLOCK, &assignments);
    let (other, _) = read("small.yaml", source.text.as_bytes()).unwrap_or_else(|r| panic!("{r}"));
    assert_eq!(format!("{one:?}"), format!("{other:?}"));
    assert_eq!(
        one.battery.and_then(|b| b.capacity).map(|c| c.value),
        Some(AmpHours(40.0))
    );
}

/// Lines are told as the file has them, and the splice is named, whatever was put in above.
#[test]
fn lines_stay_those_of_the_file() {
    let wrong = BLOCK.replace("governed: 2 h", "governed: 2 V");
    let refusal = set(
        &wrong,
        &[
            "accessories[2]={name: horn, draw: 1 A}",
            "battery.reserve=60 %",
        ],
    )
    .expect_err("2 V");
    let problem = refusal.problems().iter().next().expect("one");
    assert_eq!(refusal.source().place(problem), Some((25, 15)), "{refusal}");
    let shown = refusal.to_string();
    assert!(shown.contains("25 | - governed: 2 V"), "{shown}");
    let refusal = set(BLOCK, &["battery.reserve=160 %"]).expect_err("160 %");
    assert!(
        refusal
            .to_string()
            .contains("from `--set battery.reserve=160 %`"),
        "{refusal}"
    );
}

#[test]
fn anchors_are_not_changed_behind_their_aliases() {
    let text = BLOCK
        .replace("draw: 40 W", "draw: &d 40 W")
        .replace("draw: 4 A", "draw: *d");
    let kind = |assignment: &str| match set(&text, &[assignment]) {
        Ok((d, _)) => Ok(d),
        Err(refusal) => Err(refusal
            .problems()
            .iter()
            .map(|p| p.kind.clone())
            .collect::<Vec<_>>()),
    };
    // the alias itself may give way to a value; its anchor may not
    let d = kind("accessories[1].draw=5 A").expect("in place of the alias");
    assert!(format!("{:?}", d.accessories[1].draw).contains("Amps(5.0)"));
    assert!(format!("{:?}", d.accessories[0].draw).contains("Watts(40.0)"));
    let refused = kind("accessories[0].draw=5 A").expect_err("shared");
    assert!(
        matches!(&refused[0], ampledger::problem::ProblemKind::Set(p) if matches!(p.kind, SetKind::Shared { .. }))
    );
}

#[test]
fn what_is_no_assignment_is_said() {
    let kind = |text: &str| Assignment::parse(text).map_err(|e| e.kind);
    assert_eq!(kind("parked"), Err(SetKind::NoEquals));
    assert_eq!(
        kind("=3"),
        Err(SetKind::NotAPath {
            path: String::new()
        })
    );
    assert_eq!(
        kind("a..b=3"),
        Err(SetKind::NotAPath {
            path: "a..b".into()
        })
    );
    for value in ["[a", "{a: b", "\"a", "[a] b", "a\nb", "[a]]"] {
        let refused = kind(&format!("a={value}"));
        assert_eq!(
            refused,
            Err(SetKind::NotAValue {
                value: value.into()
            }),
            "{value}"
        );
    }
}

/// `null` leaves a key out: what need not be there is gone, what must be is missed.
#[test]
fn null_leaves_a_key_out() {
    let (d, _) = done(BLOCK, &["battery=null", "accessories[0].duty=~"]);
    assert!(d.battery.is_none() && d.accessories[0].duty.is_none());
    let (plain, _) = done(FULL, &[]);
    let debug = format!("{plain:?}");
    for after in debug.split("path: \"").skip(1) {
        let path = after.split('"').next().unwrap_or_default();
        if let Err(refusal) = set(FULL, &[&format!("{path}=null")]) {
            assert!(!refusal.problems().is_empty(), "{path}");
        }
    }
    for key in [
        "build",
        "engine",
        "engine.speeds",
        "charging",
        "accessories",
        "shift",
        "charger.amps",
        "days.shifts",
    ] {
        let refusal = set(FULL, &[&format!("{key}=null")])
            .err()
            .unwrap_or_else(|| panic!("{key} was not missed"));
        assert!(
            refusal.to_string().contains("missing key"),
            "{key}: {refusal}"
        );
    }
}

/// Any text as a name comes back as it was given.
#[test]
fn names_survive() {
    for name in [
        "a",
        "a: b",
        "- a",
        "# a",
        "*a",
        "&a",
        "a, b",
        "a]",
        "null",
        "1",
        "!a",
        "a \\ b",
        "say \"hi\"",
        "'",
        "% 5",
        "@",
        "a\tb",
        "yes",
        "ä",
    ] {
        // a lone quotation mark begins a text in quotes that never ends
        if name == "'" {
            assert!(Assignment::parse(&format!("build={name}")).is_err());
            continue;
        }
        let built = set(BLOCK, &[&format!("build={name}")]);
        match built {
            Ok((d, _)) => assert_eq!(d.build.value, name),
            // what leaves the key out is no name
            Err(refusal) => assert_eq!(name, "null", "{refusal}"),
        }
    }
}

/// Paths and values cut and joined at random are set or refused, and never panic.
#[test]
fn any_assignment_is_answered() {
    let paths = [
        "accessories[2]",
        ".duty",
        ".governed",
        "[pump]",
        "shift[0]",
        "battery",
        ".\"a.b\"",
        "",
        "[",
        "engine.speeds",
        "[1]",
        "may",
    ];
    let values = [
        "40 %", "{a: 1}", "[", "*heat", "&a 3", "# x", "- a", "!!str 5", "\"", "null", "a: b: c",
        "'x'", "|", "é", "{", "a, b",
    ];
    let mut refused = 0;
    for (i, one) in paths.iter().enumerate() {
        for (j, other) in paths.iter().enumerate() {
            for text in [FULL, BLOCK] {
                let value = values[(i * 7 + j * 3) % values.len()];
                let Ok(assignment) = Assignment::parse(&format!("{one}{other}={value}")) else {
                    continue;
                };
                if let Err(refusal) = read_set("small.yaml", text.as_bytes(), &[assignment]) {
                    assert!(
                        refusal.to_string().contains("error"),
                        "{one}{other}={value}"
                    );
                    refused += 1;
                }
            }
        }
    }
    assert!(refused > 50, "{refused}");
}
