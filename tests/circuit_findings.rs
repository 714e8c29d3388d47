//! Circuits without a battery: verdict on volts and findings.

mod circuit_machine;

use ampledger::check::answer::{ByState, Finding, Verdict, Weight};
use ampledger::circuit::{circuits, findings, lamp_findings, verdict_on_volts};
use ampledger::quantity::Volts;
use circuit_machine::{CLUTCH, TWO_LAMPS, WINDING, at, machine, near, only};

fn find<'a>(all: &'a [Finding], what: &str) -> &'a Finding {
    let named = all.iter().find(|f| f.what == what);
    named.unwrap_or_else(|| panic!("no {what} in {all:#?}"))
}

#[test]
fn dim_at_idle_short_lived_at_governed_and_the_rest_when_one_burns_out() {
    let build = machine(WINDING, "none", TWO_LAMPS);
    let all = findings(&build, &circuits(&build).unwrap());
    // 8.41 V of 12.8 V: 0.657^3.4 = 24 % of the light; 16.51 V: 1.290^-13 = 3.6 % of the life.
    let dim = find(&all, "dim lamp");
    assert_eq!(dim.weight, Weight::Warning);
    assert!(
        dim.text.contains("at idle give") && dim.text.contains("of its light at 12.8 V"),
        "{}",
        dim.text
    );
    assert!(!dim.text.contains("governed"), "{}", dim.text);
    let short = find(&all, "short-lived lamp");
    assert_eq!(short.weight, Weight::Fault);
    assert!(
        short
            .text
            .contains("16.51 V at governed give 4 % of its life at 12.8 V"),
        "{}",
        short.text
    );
    let burnt = find(&all, "burnt-out lamp");
    assert!(
        burnt
            .text
            .contains("if one of Headlamps burns out at governed, the rest of them"),
        "{}",
        burnt.text
    );
    assert!(
        burnt.text.contains("from 16.51 V to 18.66 V"),
        "{}",
        burnt.text
    );
    assert_eq!(all.len(), 3, "{all:#?}");
}

#[test]
fn lamps_on_a_bus_by_the_same_rule() {
    // 12.8 V bulbs at 14.4 V live 1.125^-13 = 21.6 % of their life; at 12.9 V 90 %: nothing to say.
    // Half the light is at 0.5^(1/3.4) = 0.8156 of the volts: 10.44 V.
    let build = machine(WINDING, "none", TWO_LAMPS);
    let lamp = &build.accessories[0];
    let seen = |idle: f64, governed: f64| {
        let volts = [
            ("idle", idle),
            ("governed", governed),
            ("stopped", 5.0),
            ("crank", 5.0),
        ];
        let volts = volts.map(|(s, v)| (s.to_owned(), Volts(v))).to_vec();
        lamp_findings(&build, lamp, &ByState(volts))
    };
    assert!(seen(12.0, 12.9).is_empty());
    assert!(seen(10.45, 12.0).is_empty());
    assert_eq!(seen(10.43, 12.0)[0].what, "dim lamp");
    assert!(!seen(10.43, 12.0)[0].text.contains("rough"));
    assert!(seen(9.0, 12.0)[0].text.contains("rough"));
    let hot = seen(12.0, 14.4);
    assert_eq!(hot.len(), 1);
    assert!(
        hot[0]
            .text
            .contains("14.4 V at governed give 22 % of its life"),
        "{}",
        hot[0].text
    );
    assert_eq!(hot[0].weight, Weight::Warning);
}

#[test]
fn verdict_on_volts_and_its_worst() {
    let judged = |winding: &str, extra: &[&str]| {
        let mut hung = vec![CLUTCH];
        hung.extend(extra);
        let build = machine(winding, "{kind: full-wave, drop: 0.9 V}", &hung);
        let all = circuits(&build).unwrap();
        (verdict_on_volts(&build, &all), findings(&build, &all))
    };
    let (short, all) = judged(&WINDING.replace("20 V", "18 V"), &[]);
    assert_eq!(short.verdict, Verdict::FallsShort);
    assert!(
        short
            .sentence
            .starts_with("Falls short: PTO clutch gets 10."),
        "{}",
        short.sentence
    );
    assert!(
        short.sentence.contains("at governed and needs 10.5 V"),
        "{}",
        short.sentence
    );
    let missed = find(&all, "pull-in missed");
    assert!(missed.text.contains("with a cold coil"), "{}", missed.text);
    assert_eq!(missed.weight, Weight::Fault);
    let (fine, all) = judged(WINDING, &[]);
    assert_eq!(fine.verdict, Verdict::KeepsUp, "{}", fine.sentence);
    // Hot it gets more volts and fewer amps: 10.5 V through 3.1 ohm are 3.39 A.
    assert!(
        find(&all, "pull-in hot").text.contains("10.5 V are 3.39 A"),
        "{all:#?}"
    );
    let (over, all) = judged(
        &WINDING.replace("20 V", "34 V"),
        &["name: lamp, draw: 27 W, law: filament, at: 24 V"],
    );
    assert_eq!(over.verdict, Verdict::FallsShort);
    assert!(over.tightest.is_some_and(|t| !t.lower && t.margin.0 < 0.0));
    assert!(
        over.sentence
            .ends_with("1 accessory states no range and is not judged."),
        "{}",
        over.sentence
    );
    assert!(
        find(&all, "over its range").text.contains("above 16 V"),
        "{all:#?}"
    );
}

#[test]
fn nothing_is_fed_with_the_engine_off() {
    let lamp = "name: lamp, draw: 27 W, law: filament, at: 12.8 V, works: 6 V to 30 V, duty: {governed: 100 %, stopped: 100 %}";
    let build = machine(WINDING, "none", &[lamp]);
    let verdict = verdict_on_volts(&build, &circuits(&build).unwrap());
    assert_eq!(verdict.verdict, Verdict::FallsShort);
    assert!(
        verdict.sentence.contains("0 V at stopped"),
        "{}",
        verdict.sentence
    );
    let unjudged = machine(WINDING, "none", TWO_LAMPS);
    let verdict = verdict_on_volts(&unjudged, &circuits(&unjudged).unwrap());
    assert_eq!(verdict.verdict, Verdict::KeepsUp);
    assert!(verdict.tightest.is_none());
}

#[test]
fn a_regulator_holds_the_clutch() {
    let winding = WINDING.replace("20 V", "34 V");
    let bridge = "full-wave\n    regulator: {holds: 14.4 V, per_degree: -18 mV}";
    let build = machine(&winding, bridge, &[CLUTCH]);
    let circuit = only(&build);
    near(at(&circuit.volts(), "governed"), 14.4, 1e-12);
    assert_eq!(circuit.holds, Some(Volts(14.4)));
    near(circuit.accessories[0].states[0].amps.0, 14.4 / 3.1, 1e-12);
    assert_eq!(
        verdict_on_volts(&build, &[circuit]).verdict,
        Verdict::KeepsUp
    );
}

#[test]
fn electronics_on_an_unregulated_winding_are_held_against_16_volts() {
    let build = machine(
        &WINDING.replace("20 V", "34 V"),
        "{kind: full-wave, drop: 0.9 V}",
        &["name: meter, draw: 0.3 A"],
    );
    let all = findings(&build, &circuits(&build).unwrap());
    let over = find(&all, "over its range");
    assert!(
        over.text.contains("above 16 V") && over.source.contains("ISO 16750-2"),
        "{over:?}"
    );
}
