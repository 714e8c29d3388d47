//! Worked numbers of every equation, computed by hand from the blocks above
//! each function, for one 45 Ah flooded battery.

use super::cell::Cell;
use super::{Battery, Binds, Charge, Chemistry, Label, StartFloor, Starter};
use crate::quantity::{AmpHours, Amps, Celsius, Fraction, Hours, Ohms, Volts};

/// 45 Ah, 70 min reserve capacity, 400 A cold cranking, 12 V, flooded.
pub(super) fn battery() -> Battery {
    Battery::from_label(&Label {
        reserve_capacity: Some(Hours::from_minutes(70.0)),
        cold_cranking: Some(Amps(400.0)),
        ..Label::new(Chemistry::Flooded, AmpHours(45.0))
    })
}

/// Equal within 1e-5 of the worked number.
#[track_caller]
pub(super) fn close(got: f64, worked: f64) {
    assert!(
        (got - worked).abs() <= 1e-5 * worked.abs(),
        "{got} for {worked}"
    );
}

fn charge(soc: f64, depletion: f64) -> Charge {
    Charge {
        soc: Fraction(soc),
        depletion: Fraction(depletion),
    }
}

#[test]
fn label_to_constants() {
    let b = battery();
    close(b.cell.kappa_less_one + 1.0, 1.075_496_33);
    close(b.cmax().0, 48.397_335);
    close(b.peukert().0, 1.180_085);
    close(b.c_floor().0, 0.137_748_63);
    close(b.cell.resistance, 7.717_865e-4);
    close(b.cell.rest_full, 2.1083);
    close(b.cell.rest_empty, 1.9817);
    assert_eq!(b.notes(), []);
}

#[test]
fn discharge_state() {
    let b = battery();
    let climate = b.climate(Celsius(10.0));
    // E(0.55) at 10 °C, knee, emf.
    close(b.cell.open_circuit(0.55) - 15.0 * 2e-4, 2.044_193_98);
    close(
        b.cell.open_circuit(0.55) - b.cell.emf(0.60, 0.05),
        2.528_49e-9,
    );
    let t = climate.at(charge(0.60, 0.05));
    close(t.resistance[0], 1.375_179_7e-3);
    close(t.polarisation[0], 0.055_535_53);
    close(t.half, 6.75);
    let v = t.volts(Amps(-10.0));
    close(v.0, 11.983_715);
    let i = t.current(v);
    close(i.gas.0, 2.8291e-4);
    close(i.main.0, -10.000_282_91);
    close(climate.capacity_at(Amps(10.0)) / b.cmax(), 0.674_444_65);
    close(climate.depletion_target(Amps(-10.0)).0, 0.326_031_86);
    let rates = climate.rates(i.main, i.total, charge(0.60, 0.05));
    close(rates.soc_per_hour.0, -0.206_628_79);
    close(rates.depletion_per_hour.0, 0.552_063_72);
    // Half of the gap closes in 0.5 h × ln 2.
    let half = climate.depletion_after(Fraction(0.1), Fraction(0.3), Hours(0.5 * 2f64.ln()));
    close(half.0, 0.2);
}

#[test]
fn charge_state() {
    let b = battery();
    let climate = b.climate(Celsius(25.0));
    let t = climate.at(charge(0.75, 0.0));
    close(t.emf, 2.073_516_65);
    close(t.resistance[0], 9.261_438e-4);
    close(t.resistance[1] - t.resistance[0], 0.033_709_803_9);
    close(Cell::acceptance_rise(0.75) * 0.42 / 45.0, 0.033_709_803_9);
    close(t.polarisation[1], 0.08);
    let i = t.current(Volts(14.2));
    close(i.main.0, 7.266_337_51);
    close(i.gas.0, 0.040_469_88);
    close(i.total.0, 7.306_807_39);
    close(i.main / i.total, 0.994_461);
    close(
        climate
            .rates(i.main, i.total, charge(0.75, 0.0))
            .soc_per_hour
            .0,
        0.150_139_21,
    );
}

#[test]
fn slope_is_the_derivative() {
    let b = battery();
    let t = b.at(charge(0.6, 0.1), Celsius(-5.0));
    for volts in [9.0, 11.0, 12.3, 13.0, 14.4, 16.0] {
        let (h, current) = (1e-5, |v: f64| t.current(Volts(v)).total.0);
        let numeric = (current(volts + h) - current(volts - h)) / (2.0 * h);
        let (_, resistance) = t.current_and_resistance(Volts(volts));
        assert!((resistance.0 * numeric - 1.0).abs() < 1e-6, "{volts} V");
    }
}

#[test]
fn capacity_from_other_ratings() {
    // 60 min at 25 A, k 1.25: (25 · 1 · 500^0.25)^(1/1.25) = 45.5141 Ah.
    let found = Chemistry::Flooded.capacity_from_reserve(Hours(1.0), Amps(25.0));
    close(found.0, 45.514_106);
    // Back: Peukert's law from 20 h at C/20 to 25 A gives 1 h.
    close(20.0 * (found.0 / 20.0 / 25.0).powf(1.25), 1.0);
    // 400 A over 8 A/Ah.
    close(
        Chemistry::Flooded.capacity_from_cranking(Amps(400.0)).0,
        50.0,
    );
}

/// 120 A at 27 °C, three attempts of 5 s, 10 s apart, 4 mohm of cable.
fn starter() -> Starter {
    Starter {
        cable: Ohms(0.004),
        ..Starter::new(Amps(120.0))
    }
}

#[test]
fn cold_start() {
    let b = battery();
    let air = Celsius(0.0);
    close(starter().draw_at(air).0, 186.0);
    let end = b.crank(charge(0.7, 0.0), &starter(), air);
    close(end.starter.0, 9.413_22);
    close(end.charge.soc.0, 0.683_987);
    close(end.charge.depletion.0, 0.097_784);
    close(end.battery.0 - end.starter.0, 186.0 * 0.004);
    let StartFloor::Down {
        to,
        binds: Binds::Cranking,
    } = b.start_floor(&starter(), air)
    else {
        panic!("cranking must bind")
    };
    close(to.0, 0.481_485_09);
    let margin = b.start_margin(charge(0.7, 0.0), &starter(), air);
    close(margin.volts.0 + 9.0, 9.413_22);
    close(
        margin.charge.map_or(0.0, |q| q.0),
        48.397_335 * (0.7 - 0.481_485_09),
    );
}

#[test]
fn days_until_it_does_not_crank() {
    let b = battery();
    let floor = Fraction(0.481_485_09);
    let days = |parasitic| {
        b.storage_time(Fraction::ONE, floor, Amps(parasitic), Celsius(0.0))
            .map(|t| t.0 / 24.0)
    };
    close(days(0.020).unwrap_or(0.0), 51.395);
    // A maintaining charger outweighs the self-discharge: never.
    assert_eq!(days(-0.020), None);
    assert_eq!(
        b.storage_time(floor, floor, Amps(0.02), Celsius(0.0)),
        Some(Hours::ZERO)
    );
    // Without self-discharge it would be 48.397 Ah · 0.3 / 1 A; 1 A dwarfs it.
    let soon = b.recharge_after(Fraction::ONE, floor, Amps(1.0), Celsius(0.0));
    let hours = soon.map_or(0.0, |t| t.0);
    assert!(
        hours < 48.397_335 * 0.3 && hours > 48.397_335 * 0.3 * 0.995,
        "{hours}"
    );
}

#[test]
fn overcharge_splits_water() {
    let b = battery();
    // K055: 6 · 3600/(2 · 96485) · 24.465 L, Faraday's law.
    close(b.hydrogen_freed(AmpHours(1.0)).0, 2.738_47);
    // 18.015 g · 3600/(2 · 96485) a cell.
    close(b.water_lost(AmpHours(1.0)).0, 6.0 * 0.336_083);
    let mat = Battery::from_label(&Label::new(Chemistry::Agm, AmpHours(45.0)));
    close(mat.water_lost(AmpHours(1.0)).0, 0.05 * 6.0 * 0.336_083);
}

#[test]
fn rundown_ends_where_the_capacity_law_says() {
    let b = battery();
    let air = Celsius(25.0);
    // Sooner by what the ohmic drop adds to the knee: more at the higher current.
    for (amps, tolerance) in [(2.25, 0.005), (10.0, 0.01), (25.0, 0.015)] {
        let end = b.rundown(Charge::FULL, Amps(amps), b.end_of_discharge(), air);
        let taken = end.map_or(0.0, |end| end.taken.0);
        let law = b.capacity_at(Amps(amps), air).0;
        assert!(
            (taken / law - 1.0).abs() < tolerance,
            "{amps} A: {taken} for {law}"
        );
    }
    assert_eq!(b.rundown(Charge::FULL, Amps(0.0), Volts(10.5), air), None);
    let dead = b.rundown(charge(0.0, 0.0), Amps(5.0), Volts(10.5), air);
    assert_eq!(dead.map(|end| end.taken), Some(AmpHours(0.0)));
}
