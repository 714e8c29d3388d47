use super::*;
use crate::quantity::*;

fn value<T: Unit>(text: &str) -> f64 {
    parse::<T>(text)
        .map(|m| m.value.amount())
        .unwrap_or_else(|e| panic!("{text}: {e}"))
}

#[track_caller]
fn near(found: f64, wanted: f64) {
    assert!(
        (found - wanted).abs() <= 1e-12 * wanted.abs().max(1e-6),
        "{found} for {wanted}"
    );
}

/// Range and kind of an error, and that range as text.
fn wrong<T: Unit + std::fmt::Debug>(text: &str) -> (&str, ParseErrorKind) {
    let e = parse::<T>(text).expect_err(text);
    (&text[e.range.clone()], e.kind)
}

#[test]
fn every_spelling_of_the_description() {
    near(value::<Watts>("55 W"), 55.0);
    near(value::<Watts>("55W"), 55.0);
    near(value::<Watts>("1.2 kW"), 1200.0);
    near(value::<Volts>("14.2 V"), 14.2);
    near(value::<Ohms>("0.35 ohm"), 0.35);
    near(value::<Ohms>("0.35 \u{3a9}"), 0.35);
    near(value::<Ohms>("0.35 \u{2126}"), 0.35);
    near(value::<Ohms>("350 mΩ"), 0.35);
    near(value::<Henries>("0.4 mH"), 0.4e-3);
    near(value::<Henries>("60 uH"), 60e-6);
    near(value::<Henries>("60 \u{b5}H"), 60e-6);
    near(value::<Henries>("60 \u{3bc}H"), 60e-6);
    near(value::<Amps>("8 mA"), 0.008);
    near(value::<AmpHours>("28 Ah"), 28.0);
    near(value::<Rpm>("3350 rpm"), 3350.0);
    near(value::<Fraction>("85 %"), 0.85);
    near(value::<Fraction>("85%"), 0.85);
    near(value::<Metres>("2.5 m"), 2.5);
    near(value::<Metres>("250 cm"), 2.5);
    near(value::<Metres>("10 ft"), 3.048);
    near(value::<Metres>("12 in"), 0.3048);
    near(value::<SquareMm>("2.5 mm2"), 2.5);
    near(value::<SquareMm>("2.5 mm²"), 2.5);
    near(value::<VoltsPerKelvin>("-18 mV"), -0.018);
    near(value::<VoltsPerKelvin>("-18 mV/°C"), -0.018);
    near(value::<Watts>(" \u{2212}55 W "), -55.0);
    near(value::<Watts>("5.5e1 W"), 55.0);
    near(value::<Watts>("+.5 W"), 0.5);
}

#[test]
fn temperatures() {
    near(value::<Celsius>("-10 °C"), -10.0);
    near(value::<Celsius>("14 F"), -10.0);
    near(value::<Celsius>("14 °F"), -10.0);
    near(value::<Celsius>("-10 C"), -10.0);
    // a difference has no offset: 9 °F are 5 K
    near(value::<Kelvins>("9 F"), 5.0);
    let air = parse::<Celsius>("-10 °C ± 9 F").expect("a tolerance in degrees");
    near(air.tolerance.expect("written").relative.0, 0.5);
    assert!(matches!(
        wrong::<Celsius>("20 °C ± 5 %"),
        ("%", ParseErrorKind::WrongUnit { .. })
    ));
}

#[test]
fn durations_add_up() {
    near(value::<Hours>("1 h 20 min"), 4.0 / 3.0);
    near(value::<Hours>("1h20min"), 4.0 / 3.0);
    near(value::<Hours>("2 d 3 h 6 min 36 s"), 51.11);
    near(value::<Hours>("90 min"), 1.5);
    near(value::<Hours>("2.5 s"), 2.5 / 3600.0);
    assert_eq!(
        wrong::<Hours>("20 min 1 h"),
        ("h", ParseErrorKind::Order { found: "h".into() })
    );
    assert_eq!(
        wrong::<Hours>("1 h 20"),
        ("20", ParseErrorKind::UnitMissing { found: "20".into() })
    );
}

#[test]
fn wire_gauges() {
    // ASTM B258: 14 AWG is 2.081 mm², 2/0 AWG 67.43 mm².
    for text in ["14 AWG", "AWG 14"] {
        assert!((value::<SquareMm>(text) - 2.081).abs() < 1e-3);
    }
    assert!((value::<SquareMm>("2/0 AWG") - 67.43).abs() < 0.01);
}

#[test]
fn tolerances() {
    for text in [
        "55 W ± 8 %",
        "55 W +- 8 %",
        "55 W +-8%",
        "55W+/-8 %",
        "55 W +/- 4.4 W",
        "55 W ± 0.0044 kW",
    ] {
        let m = parse::<Watts>(text).unwrap_or_else(|e| panic!("{text}: {e}"));
        near(m.value.0, 55.0);
        near(m.tolerance.expect(text).relative.0, 0.08);
    }
    // about a share, too, per cent means a share of the value
    near(
        parse::<Fraction>("50 % ± 10 %")
            .expect("read")
            .tolerance
            .expect("written")
            .relative
            .0,
        0.1,
    );
    assert_eq!(
        wrong::<Watts>("55 W ± 8"),
        ("8", ParseErrorKind::UnitMissing { found: "8".into() })
    );
    assert!(matches!(
        wrong::<Watts>("55 W ± 8 V"),
        ("V", ParseErrorKind::WrongUnit { .. })
    ));
    assert!(matches!(
        wrong::<Watts>("55 W ± 120 %"),
        ("± 120 %", ParseErrorKind::ToleranceTooWide { .. })
    ));
    assert!(matches!(
        wrong::<Watts>("55 W ± -1 %"),
        ("± -1 %", ParseErrorKind::ToleranceTooWide { .. })
    ));
    assert_eq!(
        wrong::<Watts>("0 W ± 1 W"),
        ("± 1 W", ParseErrorKind::ToleranceOfZero)
    );
}

#[test]
fn phrases() {
    assert_eq!(
        rated("16 A at 3600 rpm into 14 V").map(|m| m.value),
        Ok((Amps(16.0), Rpm(3600.0), Some(Volts(14.0))))
    );
    assert_eq!(
        rated("16 A at 3600 rpm").map(|m| m.value),
        Ok((Amps(16.0), Rpm(3600.0), None))
    );
    for text in [
        "28 V at 3600 rpm ± 6 %",
        "28 V ± 6 % at 3600 rpm",
        "28 V at 3600 rpm +- 1.68 V",
    ] {
        let m = at_speed::<Volts>(text).unwrap_or_else(|e| panic!("{text}: {e}"));
        assert_eq!(m.value, (Volts(28.0), Rpm(3600.0)));
        near(m.tolerance.expect(text).relative.0, 0.06);
    }
    assert_eq!(between("10.5 V to 16 V"), Ok((Volts(10.5), Volts(16.0))));
    assert_eq!(
        surge("8 x for 0.2 s").map(|(x, t)| (x, t.seconds())),
        Ok((Fraction(8.0), 0.2))
    );
    assert_eq!(surge("8× for 0.2 s").map(|(x, _)| x), Ok(Fraction(8.0)));
    assert_eq!(factor("2.4").map(|m| m.value), Ok(Fraction(2.4)));
    assert_eq!(whole("12"), Ok(12));
}

#[test]
fn phrases_point_at_their_own_part() {
    let text = "16 A at 3600 V into 14 V";
    let e = rated(text).expect_err("a voltage for a speed");
    assert_eq!(
        (&text[e.range.clone()], e.to_string().as_str()),
        (
            "V",
            "wrong unit: `V` is a voltage where a speed of rotation is needed"
        )
    );
    let text = "28 V at 3600 rpm ± 6";
    let e = at_speed::<Volts>(text).expect_err("no unit");
    assert_eq!(
        (&text[e.range.clone()], e.to_string().as_str()),
        ("6", "unit missing: `6` must be a voltage")
    );
    let text = "28 V ± 6 % at 3600 rpm ± 1 %";
    assert_eq!(
        at_speed::<Volts>(text).expect_err("two tolerances").kind,
        ParseErrorKind::ToleranceHere
    );
    assert!(matches!(
        at_speed::<Volts>("28 V").expect_err("no speed").kind,
        ParseErrorKind::Phrase { word: "at", .. }
    ));
    let text = "28 V @ 3600 rpm";
    let e = at_speed::<Volts>(text).expect_err("no word");
    assert_eq!(
        (&text[e.range.clone()], e.to_string(), e.help()),
        (
            "@ 3600 rpm",
            "`at` is missing".into(),
            "write it like `28 V at 3600 rpm`".into()
        )
    );
    assert!(matches!(
        at_speed::<Volts>("28 A").expect_err("unit first").kind,
        ParseErrorKind::WrongUnit { .. }
    ));
    assert!(matches!(
        between("10.5 to 16 V").expect_err("bare").kind,
        ParseErrorKind::UnitMissing { .. }
    ));
    assert!(matches!(
        surge("8 for 1 s").expect_err("bare").kind,
        ParseErrorKind::UnitMissing { .. }
    ));
    assert_eq!(
        surge("8 x ± 1 % for 1 s").expect_err("tolerance").kind,
        ParseErrorKind::ToleranceHere
    );
}

#[test]
fn what_is_no_number_is_told() {
    use ParseErrorKind as K;
    let is = |text: &str, mark: &str, kind: fn(String) -> K| {
        assert_eq!(wrong::<Watts>(text), (mark, kind(mark.into())), "{text}");
    };
    assert_eq!(wrong::<Watts>(""), ("", K::Empty));
    is("bright", "bright", |found| K::NotNumber { found });
    is("1.2.3 W", "1.2.3 W", |found| K::NotNumber { found });
    is(".nan", ".nan", |found| K::NotFinite { found });
    is("-.inf W", "-.inf", |found| K::NotFinite { found });
    is("1e400 W", "1e400", |found| K::TooLarge { found });
    is("1e306 kW", "1e306 kW", |found| K::TooLarge { found });
    is("55 W 3", "3", |found| K::Trailing { found });
}

#[test]
fn units_are_told() {
    use ParseErrorKind as K;
    let unknown = |found: &str, near| K::UnknownUnit {
        found: found.into(),
        near,
    };
    assert_eq!(
        wrong::<Watts>("55"),
        ("55", K::UnitMissing { found: "55".into() })
    );
    assert_eq!(wrong::<Watts>("55 w"), ("w", unknown("w", Some("W"))));
    assert_eq!(wrong::<Rpm>("55 rpn"), ("rpn", unknown("rpn", Some("rpm"))));
    assert_eq!(wrong::<Watts>("55 lux"), ("lux", unknown("lux", None)));
    assert_eq!(wrong::<Hours>("12:30"), (":", unknown(":", None)));
    let (measures, near) = (Dimension::Length, Some("min"));
    let metres = K::WrongUnit {
        found: "m".into(),
        measures,
        near,
    };
    assert_eq!(wrong::<Hours>("20 m"), ("m", metres));
    assert!(matches!(
        factor("2 V").expect_err("a unit").kind,
        K::WrongUnit { .. }
    ));
}

#[test]
fn commas_and_spaces_in_numbers_are_told() {
    for (text, mark, plain) in [
        ("5,5 rpm", "5,5", "5.5"),
        ("0,125 rpm", "0,125", "0.125"),
        ("3,600 rpm", "3,600", "3600"),
        ("3 600 rpm", "3 600", "3600"),
        ("1_000 rpm", "1_000", "1000"),
    ] {
        let (found, plain) = (mark.into(), plain.into());
        assert_eq!(
            wrong::<Rpm>(text),
            (mark, ParseErrorKind::Grouping { found, plain })
        );
    }
}

#[test]
fn whole_numbers_are_digits() {
    for text in ["", "-3", "1.5", "three", "3 x"] {
        let kind = whole(text).expect_err(text).kind;
        assert!(matches!(kind, ParseErrorKind::NotWhole { .. }), "{text}");
    }
    let kind = whole("99999999999").expect_err("beyond u32").kind;
    assert!(matches!(kind, ParseErrorKind::TooLarge { .. }));
}

#[test]
fn a_draw_is_told_by_its_unit() {
    assert_eq!(draw("55 W").map(|m| m.value), Ok(Draw::Power(Watts(55.0))));
    assert_eq!(
        draw("350 mA").map(|m| m.value),
        Ok(Draw::Current(Amps(0.35)))
    );
    assert_eq!(
        draw("3.1 ohm ± 8 %").map(|m| m.value),
        Ok(Draw::Resistance(Ohms(3.1)))
    );
    let say = |text: &str| {
        draw(text).map_err(|e| (text[e.range.clone()].to_string(), e.to_string(), e.label()))
    };
    let same = |a: &str, b: &str, c: &str| Err((a.to_string(), b.to_string(), c.to_string()));
    assert_eq!(
        say("55 V").map(|_| ()),
        same(
            "V",
            "wrong unit: `V` is a voltage where a power, a current or a resistance is needed",
            "a voltage"
        )
    );
    assert_eq!(
        say("55").map(|_| ()),
        same(
            "55",
            "unit missing: `55` must be a power, a current or a resistance",
            "a number without a unit: `A`, `mA`, `W`, `kW`, `ohm` or `mΩ`"
        )
    );
    assert_eq!(
        say("5 a").map(|_| ()),
        same(
            "a",
            "unknown unit `a` where a power, a current or a resistance is needed",
            "did you mean `A`?"
        )
    );
    // the tolerance is held against the law that was written
    assert_eq!(
        say("5 A ± 3 W").map(|_| ()),
        same(
            "W",
            "wrong unit: `W` is a power where a current is needed",
            "a power"
        )
    );
    assert_eq!(
        say("55 W ± 3 A").map(|_| ()),
        same(
            "A",
            "wrong unit: `A` is a current where a power, a current or a resistance is needed",
            "a current"
        )
    );
}

#[test]
fn messages_are_sentences() {
    let say = |text: &str| parse::<Watts>(text).map_err(|e| (e.to_string(), e.label(), e.help()));
    let same = |a: &str, b: &str, c: &str| Err((a.to_string(), b.to_string(), c.to_string()));
    assert_eq!(
        say("55 V").map(|_| ()),
        same(
            "wrong unit: `V` is a voltage where a power is needed",
            "a voltage",
            "write it like `55 W`"
        )
    );
    assert_eq!(
        say("55").map(|_| ()),
        same(
            "unit missing: `55` must be a power",
            "a number without a unit: `W` or `kW`",
            "write it like `55 W`"
        )
    );
    assert_eq!(
        say("55 w").map(|_| ()),
        same(
            "unknown unit `w` where a power is needed",
            "did you mean `W`?",
            "write it like `55 W`"
        )
    );
}

/// Cut and mangled texts never panic, and an error's range always lies within the text.
#[test]
fn any_text_is_answered() {
    let seeds = [
        "16 A at 3600 rpm into 14 V ± 8 %",
        "1 h 20 min",
        "−10 °C ± 5 F",
        "2/0 AWG",
        "8 × for 0.2 s",
        "5,5e+400±nan%",
    ];
    for seed in seeds {
        for (at, _) in seed.char_indices() {
            for end in seed[at..]
                .char_indices()
                .map(|(i, _)| at + i)
                .chain([seed.len()])
            {
                let text = &seed[at..end];
                let results = [
                    parse::<Watts>(text).err(),
                    parse::<Hours>(text).err(),
                    parse::<SquareMm>(text).err(),
                    parse::<Celsius>(text).err(),
                    rated(text).err(),
                    at_speed::<Volts>(text).err(),
                    between(text).err(),
                    surge(text).err(),
                    whole(text).err(),
                    factor(text).err(),
                ];
                for e in results.into_iter().flatten() {
                    assert!(text.get(e.range.clone()).is_some(), "{text:?}: {e:?}");
                }
            }
        }
    }
}

proptest::proptest! {
    /// Whatever is written, an error marks bytes of it, and a value is finite.
    #[test]
    fn any_characters_are_answered(text in "[0-9 .,+±%−eEnaihWVArpmΩµ°/x-]{0,24}") {
        match draw(&text) {
            Ok(measured) => {
                let value = match measured.value {
                    Draw::Current(Amps(x)) | Draw::Resistance(Ohms(x)) | Draw::Power(Watts(x)) => x,
                };
                proptest::prop_assert!(value.is_finite());
            }
            Err(e) => proptest::prop_assert!(text.get(e.range.clone()).is_some(), "{e:?}"),
        }
        for e in [parse::<Hours>(&text).err(), rated(&text).err(), parse::<SquareMm>(&text).err()].into_iter().flatten() {
            proptest::prop_assert!(text.get(e.range.clone()).is_some(), "{e:?}");
        }
    }

    /// A number and a unit come back as written.
    #[test]
    fn numbers_come_back(x in -1e9f64..1e9, unit in "(V|mV)") {
        let read = parse::<Volts>(&format!("{x} {unit}")).map(|m| m.value.0);
        let wanted = if unit == "V" { x } else { x / 1e3 };
        proptest::prop_assert_eq!(read, Ok(wanted));
    }
}
