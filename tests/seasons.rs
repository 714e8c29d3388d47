//! The battery over days: repetition, week patterns, the shop charger, the day on which it does not crank.

mod seasons_bench;

use ampledger::battery::Charge;
use ampledger::build::State;
use ampledger::check::answer::Verdict;
use ampledger::check::{ordinal, rule};
use ampledger::outlook::Outlook;
use ampledger::quantity::{Amps, Fraction, Volts};
use seasons_bench::*;

/// Cycles that the search is held against: a year of days.
const YEAR: u32 = 365;

/// Plain repetition for a year and, where it still moves then, on until it comes to rest.
fn plainly(machine: &ampledger::ledger::Machine, reserve: Fraction, least: u32) -> (Outlook, u32) {
    let mut cycles = 0;
    let mut charge = Charge::FULL;
    loop {
        match machine.repeat(charge, reserve, YEAR) {
            Outlook::Breaks { shifts, begins } => {
                let shifts = cycles * machine.shifts + shifts;
                return (Outlook::Breaks { shifts, begins }, cycles + YEAR);
            }
            Outlook::Settles { charge: at, lowest } => {
                let moved = after_a_cycle(machine, at).soc - at.soc;
                cycles += YEAR;
                charge = at;
                if (moved.abs() < Fraction(1e-8) && cycles >= least) || cycles >= 20 * YEAR {
                    return (Outlook::Settles { charge, lowest }, cycles);
                }
            }
        }
    }
}

/// Plain repetition is the definition; the search must come to the same in every build.
#[test]
fn the_search_agrees_with_plain_repetition() {
    let (mut settled, mut broke) = (0, 0);
    for seed in 0..20 {
        let build = made(&random(seed));
        let machine = machine(&build);
        let reserve = reserve(&build, &machine);
        let found = machine.outlook(Charge::FULL, reserve);
        let least = match found {
            Outlook::Breaks { shifts, .. } => shifts / machine.shifts + 1,
            Outlook::Settles { .. } => 0,
        };
        let (plain, cycles) = plainly(&machine, reserve, least);
        match (found, plain) {
            (
                Outlook::Settles { charge, lowest },
                Outlook::Settles {
                    charge: at,
                    lowest: low,
                },
            ) => {
                settled += 1;
                assert!(
                    (charge.soc - at.soc).abs() < Fraction(1e-4)
                        && (lowest - low).abs() < Fraction(1e-4),
                    "seed {seed}, {cycles} cycles: {charge:?} for {at:?}, lowest {lowest:?} for {low:?}"
                );
            }
            (Outlook::Breaks { shifts, .. }, Outlook::Breaks { shifts: plain, .. }) => {
                broke += 1;
                assert_eq!(shifts, plain, "seed {seed}");
            }
            _ => panic!("seed {seed}: {found:?} for {plain:?} after {cycles} cycles"),
        }
    }
    assert!(
        settled >= 6 && broke >= 6,
        "{settled} settle, {broke} break"
    );
}

/// A machine whose shift is short against its parking. The parked draw is that of an accessory which is also on with
/// the key on, so that parking can be written as steps `stopped`.
const WEEK: &str = "build: week
air: 15 °C
engine:
  speeds: {idle: 1800 rpm, governed: 3400 rpm}
charging:
  - winding: {open_circuit: 28 V at 3600 rpm, resistance: 0.14 ohm, inductance: 0.4 mH, poles: 12, working: 20 °C}
    rectifier: full-wave
    regulator: {holds: 14.3 V}
battery: {capacity: 30 Ah, cold_cranking: 300 A, type: flooded, reserve: 50 %}
accessories:
  - {name: pump, draw: 9 A, duty: {idle: 100 %, governed: 60 %}}
  - {name: drain, draw: 30 mA, parked: 30 mA, duty: {idle: 0 %, governed: 0 %, stopped: 100 %}}
shift:
  - idle: 20 min
  - governed: 30 min
parked: 23 h
";

/// The cycle of five shifts and two days parked, written out as one shift of five days of work.
fn written_out(week: &str) -> String {
    let shift = "  - idle: 20 min\n  - governed: 30 min\n";
    let day = format!("{shift}  - stopped: 23 h\n");
    let four = day.repeat(4);
    let text = swap(week, shift, &format!("{four}{shift}"));
    swap(&text, "parked: 23 h", "parked: 71 h")
}

#[test]
fn five_shifts_and_two_days_parked() {
    let with = |extra: &str, pump: &str| {
        let week = swap(WEEK, "draw: 9 A", pump);
        let days = made(&format!("{week}{extra}"));
        let out = made(&written_out(&week));
        (rule(&days).unwrap(), rule(&out).unwrap())
    };
    let (days, out) = with("days: {shifts: 5, parked: 2}\n", "draw: 9 A");
    assert_eq!(
        (days.verdict, out.verdict),
        (Verdict::KeepsUp, Verdict::KeepsUp)
    );
    let (a, b) = (days.settles.unwrap(), out.settles.unwrap());
    // The steps of a key-on rest are ten minutes, those of parking eight hours.
    assert!((a.0.soc - b.0.soc).abs() < Fraction(1e-4), "{a:?} {b:?}");
    assert!((a.1 - b.1).abs() < Fraction(1e-4), "{a:?} {b:?}");
    // And less than five shifts in a row without the two days.
    let daily = rule(&made(WEEK)).unwrap().settles.unwrap();
    assert!(a.1 < daily.1 - Fraction(0.005), "{a:?} {daily:?}");

    let (days, out) = with("days: {shifts: 5, parked: 2}\n", "draw: 12.5 A");
    assert_eq!(
        (days.verdict, out.verdict),
        (Verdict::Carries, Verdict::Carries),
        "{days:?} {out:?}"
    );
    assert_eq!(
        days.shifts_carried.unwrap() / 5,
        out.shifts_carried.unwrap()
    );
}

#[test]
fn a_shop_charger_between_shifts() {
    let bare = made(WEEK);
    let charged = made(&format!(
        "{WEEK}charger: {{amps: 4 A, holds: 14.2 V, after: 30 min, time: 8 h}}\n"
    ));
    let settles = |build| rule(build).unwrap().settles.unwrap();
    let (without, with) = (settles(&bare), settles(&charged));
    assert!(
        with.0.soc > without.0.soc + Fraction(0.01),
        "{with:?} {without:?}"
    );

    let machine = machine(&charged);
    let hours: f64 = machine
        .cycle
        .iter()
        .filter(|leg| machine.connected[leg.wired].charging)
        .map(|leg| leg.time.0)
        .sum();
    assert!((hours - 8.0).abs() < 1e-9);
    for start in [0.3, 0.7, 0.95, 1.0] {
        let (mut most, mut highest) = (Amps(-1.0), Volts(0.0));
        machine.walk(Charge::rested(Fraction(start)), None, |leg, _, stride| {
            if machine.connected[machine.cycle[leg].wired].charging {
                for flow in [&stride.first, &stride.second] {
                    most = most.max(flow.battery + flow.loads);
                    highest = highest.max(flow.bus);
                }
            }
        });
        assert!(most <= Amps(4.0 + 1e-6), "{most:?} from {start}");
        assert!(highest <= Volts(14.2 + 1e-6), "{highest:?} from {start}");
        // Low, it gives all it has; in the end it reaches its volts and tapers.
        assert!(start > 0.5 || most > Amps(3.99), "{most:?} from {start}");
        assert!(
            start < 0.9 || highest > Volts(14.19),
            "{highest:?} from {start}"
        );
    }
}

/// A frosty week of short shifts with lights on: a start, ten minutes of idling, a long wait with the key on.
const FROST: &str = "build: frosty week
air: -8 °C
engine:
  speeds: {idle: 1700 rpm, governed: 3300 rpm}
  starter: {draw: 85 A, time: 3 s, cable: 4 mohm}
charging:
  - winding: {open_circuit: 26 V at 3600 rpm, resistance: 0.2 ohm, inductance: 0.5 mH, poles: 12}
    rectifier: full-wave
    regulator: {holds: 14.4 V}
battery: {capacity: 32 Ah, cold_cranking: 300 A, type: flooded}
accessories:
  - {name: lights, draw: 7 A, duty: {idle: 100 %, governed: 100 %, stopped: 40 %}}
  - {name: clock, draw: 0.05 A, parked: 15 mA, duty: 100 %}
shift:
  - crank
  - idle: 10 min
  - governed: 15 min
  - stopped: 25 min
parked: 23 h
";

/// The morning on which one start leaves the starter too few volts, stepped day by day.
fn morning(text: &str) -> Option<u32> {
    let build = made(text);
    let machine = machine(&build);
    let mut asks = build.starter.as_ref().unwrap().asks();
    asks.attempts = 1;
    let air = build.air.value;
    let mut charge = Charge::rested(build.start);
    for day in 1..=30 {
        let volts = machine.battery.crank(charge, &asks, air).starter;
        // The starter needs 1.5 V a cell, 9.0 V.
        if volts < Volts(9.0) {
            return Some(day);
        }
        for leg in &machine.cycle {
            let steps = (leg.time / leg.step).ceil().max(1.0);
            for _ in 0..steps as u32 {
                charge = machine.stride(leg, charge, leg.time / steps).after;
            }
        }
    }
    None
}

#[test]
fn the_morning_on_which_it_does_not_crank() {
    let mut mornings = Vec::new();
    for lights in ["7 A", "5 A", "9 A"] {
        let text = swap(FROST, "draw: 7 A", &format!("draw: {lights}"));
        let answer = checked(&made(&text)).check;
        let day =
            morning(&text).unwrap_or_else(|| panic!("it cranks all month: {}", answer.sentence));
        let words = format!("the engine will not crank on the {} morning", ordinal(day));
        assert_eq!(
            answer.fails.as_deref(),
            Some(words.as_str()),
            "{}",
            answer.sentence
        );
        assert!(answer.sentence.contains(&words), "{}", answer.sentence);
        assert_ne!(answer.verdict, Verdict::KeepsUp);
        // The reserve is for three starts in a row: it is broken no later than one start fails.
        assert!(answer.shifts_carried.unwrap() < day, "{}", answer.sentence);
        mornings.push(day);
    }
    assert!(
        mornings[1] > mornings[0] && mornings[0] >= mornings[2],
        "{mornings:?}"
    );
    // Without the wait with the key on it keeps up, and nothing fails.
    let well = swap(FROST, "stopped: 40 %", "stopped: 0 %");
    let well = swap(&well, "draw: 7 A", "draw: 2 A");
    let well = checked(&made(&well)).check;
    assert_eq!(
        (well.verdict, well.fails),
        (Verdict::KeepsUp, None),
        "{}",
        well.sentence
    );
}

/// The cranks of a shift are in its ledger: one more start a shift takes its charge, and no more.
#[test]
fn a_start_takes_its_charge() {
    let build = made(FROST);
    let machine = machine(&build);
    let crank = machine
        .cycle
        .iter()
        .find(|leg| leg.state == State::Crank)
        .unwrap();
    let mut taken = None;
    machine.walk(Charge::FULL, None, |leg, _, stride| {
        if machine.cycle[leg].state == State::Crank {
            taken = Some((
                stride.first.loads,
                (stride.before.soc - stride.after.soc).0 * machine.battery.cmax().0,
            ));
        }
    });
    let (amps, ah) = taken.unwrap();
    // 85 A at 27 °C; 1.55 times at 0 °C, 2.10 times at -18 °C (printed table of the power to crank): at -8 °C
    // 1.55 + 0.55·8/18 = 1.79444 times, 152.528 A, for 3 s: 0.12711 Ah.
    assert!((amps.0 - 152.528).abs() < 0.01, "{amps:?}");
    assert!((crank.time.0 * 3600.0 - 3.0).abs() < 1e-9);
    assert!((ah - 0.12711).abs() < 2e-4, "{ah}");
}
