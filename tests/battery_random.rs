//! The battery's terminals over twenty thousand random labels, states and
//! temperatures: finite, strictly increasing, and inverted to rounding; and
//! labels no battery ever had.

use ampledger::battery::{Battery, Charge, Chemistry, Label, Note, Starter};
use ampledger::quantity::{AmpHours, Amps, Celsius, Fraction, Hours, Ohms, Volts};

/// A small linear congruential generator (constants of Knuth's MMIX): the same
/// draws everywhere.
struct Draw(u64);

impl Draw {
    /// Uniform in 0..1.
    fn unit(&mut self) -> f64 {
        self.0 = self
            .0
            .wrapping_mul(6_364_136_223_846_793_005)
            .wrapping_add(1_442_695_040_888_963_407);
        (self.0 >> 11) as f64 / (1u64 << 53) as f64
    }
    fn between(&mut self, low: f64, high: f64) -> f64 {
        low + (high - low) * self.unit()
    }
    fn sometimes<T>(&mut self, value: T) -> Option<T> {
        (self.unit() < 0.6).then_some(value)
    }
    /// 0..1, one time in five exactly at an end.
    fn share(&mut self) -> Fraction {
        let x = self.between(-0.1, 1.1);
        Fraction(x.clamp(0.0, 1.0))
    }
    fn label(&mut self) -> Label {
        let capacity = self.between(4.0, 200.0);
        let chemistry =
            [Chemistry::Flooded, Chemistry::Agm, Chemistry::Gel][(3.0 * self.unit()) as usize % 3];
        let reserve = Hours::from_minutes(capacity * self.between(0.3, 3.0));
        let cranking = Amps(capacity * self.between(1.0, 20.0));
        let resistance = Ohms(self.between(0.05, 2.0) / capacity);
        Label {
            cells: [3, 6, 12][(3.0 * self.unit()) as usize % 3],
            reserve_capacity: self.sometimes(reserve),
            cold_cranking: self.sometimes(cranking),
            resistance: self.sometimes(resistance),
            gassing: Fraction(self.between(1.0, 5.0)),
            health: Fraction(self.between(0.3, 1.0)),
            ..Label::new(chemistry, AmpHours(capacity))
        }
    }
}

#[test]
fn finite_increasing_and_inverted() {
    let mut draw = Draw(20);
    for _ in 0..20_000 {
        let label = draw.label();
        let battery = Battery::from_label(&label);
        let climate = battery.climate(Celsius(draw.between(-40.0, 60.0)));
        let charge = Charge {
            soc: draw.share(),
            depletion: draw.share(),
        };
        let terminals = climate.at(charge);
        let cells = f64::from(label.cells);

        let mut below = f64::NEG_INFINITY;
        for step in 0..=18 {
            let volts = Volts(cells * (f64::from(step) / 6.0 + draw.between(0.0, 0.1)));
            let now = terminals.current(volts);
            assert!(
                now.total.is_finite() && now.gas > Amps::ZERO,
                "{label:?} {volts:?}"
            );
            assert!(now.total.0 > below, "{label:?} {charge:?} {volts:?}");
            assert_eq!(now.total, now.main + now.gas);
            below = now.total.0;
        }
        // Across the electromotive force, where discharge turns into charge.
        let emf = terminals.emf();
        let (under, over) = (emf - Volts(1e-9), emf + Volts(1e-9));
        assert!(
            terminals.current(under).total < terminals.current(over).total,
            "{label:?}"
        );

        for amps in [
            0.0,
            draw.between(-20.0, 1.0) * label.capacity.0,
            draw.between(-1.0, 1.0),
        ] {
            let back = terminals.current(terminals.volts(Amps(amps))).total.0;
            let size = amps.abs().max(1.0);
            assert!(
                (back - amps).abs() <= 1e-9 * size,
                "{label:?} {charge:?} {amps} A: {back}"
            );
        }

        let amps = Amps(draw.between(-30.0, 5.0) * label.capacity.0);
        let rates = climate.rates(amps, amps, charge);
        assert!(rates.soc_per_hour.is_finite() && rates.depletion_per_hour.is_finite());
        assert!(charge.soc.0 < 1.0 || rates.soc_per_hour.0 <= 0.0);
        assert!(charge.soc.0 > 0.0 || rates.soc_per_hour.0 >= 0.0);
        let target = climate.depletion_target(amps);
        assert!(target.is_finite() && target.0 >= 0.0);
        let after = climate.depletion_after(charge.depletion, target, Hours(draw.unit()));
        assert!((0.0..=1.0).contains(&after.0));
    }
}

#[test]
fn continuous_at_no_current() {
    let mut draw = Draw(21);
    for _ in 0..500 {
        let battery = Battery::from_label(&draw.label());
        let terminals = battery.at(
            Charge {
                soc: draw.share(),
                depletion: draw.share(),
            },
            Celsius(25.0),
        );
        let jump = terminals.volts(Amps(1e-9)) - terminals.volts(Amps(-1e-9));
        assert!(jump >= Volts::ZERO && jump < Volts(1e-6), "{jump:?}");
    }
}

#[test]
fn three_and_twelve_cells_are_half_and_twice_six() {
    let six = Label {
        reserve_capacity: Some(Hours::from_minutes(70.0)),
        cold_cranking: Some(Amps(400.0)),
        ..Label::new(Chemistry::Flooded, AmpHours(45.0))
    };
    for (cells, scale) in [(3, 0.5), (12, 2.0)] {
        let other = Battery::from_label(&Label { cells, ..six });
        let six = Battery::from_label(&six);
        let charge = Charge {
            soc: Fraction(0.7),
            depletion: Fraction(0.1),
        };
        let (a, b) = (six.at(charge, Celsius(5.0)), other.at(charge, Celsius(5.0)));
        for amps in [-400.0, -20.0, -0.5, 0.0, 3.0, 9.0] {
            assert_eq!(
                b.volts(Amps(amps)),
                scale * a.volts(Amps(amps)),
                "{cells} cells"
            );
        }
        assert_eq!(other.cmax(), six.cmax());
        assert_eq!(other.resistance(), scale * six.resistance());
        let starter = Starter::new(Amps(120.0));
        assert_eq!(
            other.start_floor(&starter, Celsius(0.0)),
            six.start_floor(&starter, Celsius(0.0))
        );
    }
}

#[test]
fn health_scales_capacity_and_resistance() {
    let new = Label {
        cold_cranking: Some(Amps(400.0)),
        ..Label::new(Chemistry::Flooded, AmpHours(45.0))
    };
    let old = Battery::from_label(&Label {
        health: Fraction(0.8),
        ..new
    });
    let new = Battery::from_label(&new);
    assert!((old.cmax() / new.cmax() - 0.8).abs() < 1e-12);
    assert!((old.c20() / new.c20() - 0.8).abs() < 1e-12);
    assert!((old.resistance() / new.resistance() - 1.25).abs() < 1e-12);
    let cold = |b: &Battery| b.crank(Charge::FULL, &Starter::new(Amps(120.0)), Celsius(-10.0));
    assert!(cold(&old).starter < cold(&new).starter);
    // A measured resistance is that of the battery as it is.
    let measured = Label {
        resistance: Some(Ohms(0.006)),
        health: Fraction(0.8),
        ..Label::new(Chemistry::Flooded, AmpHours(45.0))
    };
    assert!((Battery::from_label(&measured).resistance().0 - 0.006).abs() < 1e-15);
}

/// Makes a label one that no battery has.
type Spoil = fn(&mut Label);

#[test]
fn impossible_labels_are_mended_and_told() {
    let plain = Label {
        cold_cranking: Some(Amps(300.0)),
        reserve_capacity: Some(Hours(0.8)),
        ..Label::new(Chemistry::Flooded, AmpHours(30.0))
    };
    assert_eq!(Battery::from_label(&plain).notes(), []);
    let bad: [(Spoil, &str); 11] = [
        (
            |l| l.capacity = AmpHours(f64::NAN),
            "`capacity` is out of range",
        ),
        (
            |l| l.capacity = AmpHours(-3.0),
            "`capacity` is out of range",
        ),
        (|l| l.health = Fraction(0.0), "`health` is out of range"),
        (|l| l.gassing = Fraction(50.0), "`gassing` is out of range"),
        (
            |l| l.reserve_capacity = Some(Hours(9.0)),
            "reserve_capacity` of 540 min",
        ),
        (
            |l| l.reserve_capacity = Some(Hours(0.1)),
            "does not go with the 20 h",
        ),
        (|l| l.reserve_amps = Amps(1.6), "too near the 20 h current"),
        (
            |l| l.reserve_capacity = None,
            "Peukert exponent 1.25 assumed",
        ),
        (
            |l| l.cold_cranking = None,
            "no cold-cranking rating stated, 240 A",
        ),
        (|l| l.cold_cranking = Some(Amps(9000.0)), "implausibly high"),
        (
            |l| l.rest_full = Some(Volts(11.0)),
            "no lead-acid battery's",
        ),
    ];
    for (spoil, told) in bad {
        let mut label = plain;
        spoil(&mut label);
        let battery = Battery::from_label(&label);
        let said: Vec<String> = battery.notes().iter().map(Note::to_string).collect();
        assert!(said.iter().any(|s| s.contains(told)), "{told}: {said:?}");
        let ratio = battery.cmax() / battery.c20();
        assert!((1.0..=1.51).contains(&ratio), "{told}: {ratio}");
        let terminals = battery.at(Charge::rested(Fraction(0.5)), Celsius(f64::NAN));
        let current = terminals.current(Volts(13.8)).total;
        assert!(
            current.is_finite() && current > Amps::ZERO,
            "{told}: {current:?}"
        );
        assert!(terminals.volts(Amps(-10.0)).is_finite(), "{told}");
    }
}
