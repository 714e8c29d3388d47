//! The working of one state: each equation with its numbers and its source, to be checked by hand.

use super::answer::StateRow;
use super::{by_state, first_shift};
use crate::battery::Charge;
use crate::build::{Build, Draw, Source, SourceKind, State, WindingSource};
use crate::bus::Flow;
use crate::ledger::Machine;
use crate::load::LoadSum;
use crate::quantity::format::{duration, fixed_unit, percent, temperature, text};
use crate::quantity::{Amps, Fraction, Rpm, Volts};
use crate::source::{Conduction, Phases, Rectifier, Winding, rectified};
use serde::Serialize;
use std::f64::consts::SQRT_2;

/// One equation worked.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Line {
    /// What it gives.
    pub what: String,
    /// The equation in symbols.
    pub equation: String,
    /// The same with its numbers, and the result.
    pub numbers: String,
    /// What it rests on.
    pub source: String,
}

/// The working of one state.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Why {
    /// Version of these names.
    pub format: u32,
    /// Name of the build.
    pub build: String,
    /// The state.
    pub state: String,
    /// The charge it is worked at: that at the beginning of its first step in the first shift.
    pub soc: Fraction,
    /// Bus volts there, the mean over the coincidences of cycling loads.
    pub bus_v: Volts,
    /// The equations in order.
    pub lines: Vec<Line>,
}

fn line(what: impl Into<String>, equation: &str, numbers: String, source: &str) -> Line {
    Line {
        what: what.into(),
        equation: equation.to_owned(),
        numbers,
        source: source.to_owned(),
    }
}

/// Works one state at the beginning of its first step; none if the shift has no such state.
#[must_use]
pub fn why(build: &Build, machine: &Machine, state: State) -> Option<Why> {
    let shift = first_shift(build, machine, Charge::rested(build.start), false);
    let leg = shift.legs.iter().find(|leg| leg.state == state)?;
    let rows = by_state(build, machine, &shift);
    let row = rows.iter().find(|row| row.state == build.state_name(state));
    let charge = leg.before;
    let flow = machine.flow(leg.wired, charge);
    let bus = flow.bus;
    let rpm = build.rpm(state);
    let mut lines = Vec::new();
    if rpm > Rpm::ZERO {
        for source in build
            .sources
            .iter()
            .filter(|s| s.circuit.is_none() && !s.braking)
        {
            source_lines(build, source, rpm, bus, &mut lines);
        }
    }
    for accessory in build.accessories.iter().filter(|a| a.circuit.is_none()) {
        let duty = accessory.duty.share(state);
        if duty > Fraction::ZERO {
            lines.push(load_line(
                &accessory.name,
                accessory.draw.value,
                accessory.count,
                duty,
                bus,
            ));
        }
    }
    if let (State::Crank, Some(starter)) = (state, &build.starter) {
        lines.push(starter_line(build, starter));
    }
    battery_lines(machine, charge, bus, &mut lines);
    balance_lines(&flow, row, &mut lines);
    Some(Why {
        format: super::FORMAT,
        build: build.name.clone(),
        state: build.state_name(state).to_owned(),
        soc: charge.soc,
        bus_v: bus,
        lines,
    })
}

fn source_lines(build: &Build, source: &Source, rpm: Rpm, bus: Volts, lines: &mut Vec<Line>) {
    match &source.kind {
        SourceKind::Winding(winding) => winding_lines(source, winding, rpm, bus, lines),
        SourceKind::Alternator(alternator) => lines.push(line(
            format!("{}: output", source.name),
            "I = I_curve(ratio · n) (1 − 0.002 ΔT)",
            format!(
                "curve at {} × {}, {} K hotter: {}",
                alternator.ratio.value.0,
                text(rpm),
                alternator.hotter.0,
                text(alternator.output(rpm))
            ),
            "its output curve; derating common practice, no source",
        )),
    }
    if let Some(regulator) = &source.regulator {
        lines.push(line(
            format!("{}: setpoint", source.name),
            "V_set = V_25 + k (T − 25 °C)",
            format!(
                "{} + {} × ({} − 25 °C) = {}",
                text(regulator.holds.value),
                text(regulator.per_degree),
                temperature(build.air.value),
                text(regulator.setpoint(build.air.value))
            ),
            "the regulator's figures",
        ));
    }
}

fn winding_lines(
    source: &Source,
    winding: &WindingSource,
    rpm: Rpm,
    bus: Volts,
    lines: &mut Vec<Line>,
) {
    let Some(rectifier) = &winding.rectifier else {
        return;
    };
    let constants = &winding.constants;
    let name = &source.name;
    let three = constants.phases() == Phases::Three;
    let emf = constants.emf(rpm);
    lines.push(line(
        format!("{name}: peak EMF{}", if three { " of a phase" } else { "" }),
        "E = √2 k n",
        format!(
            "√2 × {:.6} V/rpm × {} = {} ({} rms; at {})",
            constants.open_circuit().0,
            text(rpm),
            text(emf),
            text(Volts(emf.0 / SQRT_2)),
            temperature(winding.working.value)
        ),
        "Faraday's law; magnets and copper at working temperature",
    ));
    lines.push(line(
        format!("{name}: reactance"),
        "X = 2π (n p / 120) L",
        format!(
            "2π × {} × {} = {}; R = {}",
            text(constants.frequency(rpm)),
            text(constants.inductance()),
            text(constants.reactance(rpm)),
            text(constants.resistance())
        ),
        "textbook; L as measured, or found from the rating",
    ));
    rectified_lines(name, constants, rectifier, (rpm, bus), lines);
}

fn rectified_lines(
    name: &str,
    constants: &Winding,
    rectifier: &Rectifier,
    (rpm, bus): (Rpm, Volts),
    lines: &mut Vec<Line>,
) {
    let (drops, drop) = match rectifier {
        Rectifier::HalfWave { drop } => (1, *drop),
        Rectifier::FullWave { drop } => (2, *drop),
    };
    let opposed = bus + f64::from(drops) * drop;
    lines.push(line(
        format!("{name}: volts it works against"),
        "U = V + m Vf",
        format!(
            "{} + {drops} × {} = {}",
            fixed_unit(bus, 3),
            text(drop),
            fixed_unit(opposed, 3)
        ),
        "one diode in a half wave, two in a bridge",
    ));
    let output = rectified(constants, rectifier, rpm, bus);
    let mode = match output.mode {
        Conduction::Off => "no current: E stays under U",
        Conduction::Pulses => "in pulses: the current stops each half cycle",
        Conduction::OverlappingPulses => "in pulses that overlap from phase to phase",
        Conduction::Commutating => "two phases at a time, three while the current changes over",
        Conduction::Continuous => "without a break",
    };
    lines.push(line(
        format!("{name}: what it can give"),
        "X di/dθ + R i = E sin θ − U, averaged over a cycle",
        format!(
            "{mode}; mean {}, winding {} rms",
            fixed_unit(output.dc, 3),
            fixed_unit(output.winding_rms, 3)
        ),
        "Kirchhoff's laws, solved exactly over one electrical cycle",
    ));
}

fn load_line(name: &str, draw: Draw, count: u32, duty: Fraction, bus: Volts) -> Line {
    let amps = LoadSum::of(draw, count).current_at(bus);
    let times = if count > 1 {
        format!("{count} × ")
    } else {
        String::new()
    };
    let volts = fixed_unit(bus, 3);
    let (equation, numbers) = match draw {
        Draw::Current(each) => ("I = constant", format!("{times}{}", text(each))),
        Draw::Resistance(ohms) => ("I = V / R", format!("{times}{volts} / {}", text(ohms))),
        Draw::Power(watts) => ("I = P / V", format!("{times}{} / {volts}", text(watts))),
        Draw::Filament { power, at } => (
            "I = (P / V₀) (V / V₀)^0.55",
            format!(
                "{times}{} / {} × ({volts} / {})^0.55",
                text(power),
                text(at),
                text(at)
            ),
        ),
    };
    let share = if duty < Fraction::ONE {
        format!(", on {} of the time", percent(duty))
    } else {
        String::new()
    };
    line(
        name,
        equation,
        format!("{numbers} = {}{share}", fixed_unit(amps, 3)),
        "Ohm's law, or the filament law (encyclopaedia, 0.55)",
    )
}

fn starter_line(build: &Build, starter: &crate::build::Starter) -> Line {
    let air = build.air.value;
    line(
        "starter",
        "I(T) = I(27 °C) × rise in the cold",
        format!(
            "{} at 27 °C, {} at {}",
            text(starter.draw.value),
            text(starter.asks().draw_at(air)),
            temperature(air)
        ),
        "printed table of the power an engine needs to be cranked, used as a ratio of currents",
    )
}

fn battery_lines(machine: &Machine, charge: Charge, bus: Volts, lines: &mut Vec<Line>) {
    let terminals = machine.climate.at(charge);
    let current = terminals.current(bus);
    lines.push(line(
        "battery: electromotive force",
        "e = N (E(s − d) − K(s − d))",
        format!(
            "{} cells at charge {} and depletion {}: {}",
            machine.cells,
            percent(charge.soc),
            percent(charge.depletion),
            fixed_unit(terminals.emf(), 3)
        ),
        "rest volts scaled from the label; knee at the end of discharge",
    ));
    lines.push(line(
        "battery: current at the bus",
        "V/N = e/N + R I + p I / (Ik + |I|), and gas",
        format!(
            "at {}: {} into the charge and {} of gas",
            fixed_unit(bus, 3),
            fixed_unit(current.main, 3),
            fixed_unit(current.gas, 4)
        ),
        "charge branch Schiffer et al. 2007 (transcribed); discharge calibrated to the label (SAE J537)",
    ));
}

fn balance_lines(flow: &Flow, row: Option<&StateRow>, lines: &mut Vec<Line>) {
    let mean = |amps: Amps| fixed_unit(amps, 3);
    lines.push(line(
        "mean over the coincidences of cycling loads",
        "I_source = I_loads + I_battery",
        format!(
            "{} = {} + ({})",
            mean(flow.loads + flow.battery),
            mean(flow.loads),
            mean(flow.battery)
        ),
        "Kirchhoff's current law; cycling loads by chance, each with its duty",
    ));
    let Some(row) = row else { return };
    lines.push(line(
        "charge over the state in the first shift",
        "Q = I_battery t",
        format!(
            "{} × {} = {}",
            mean(row.battery_a),
            duration(crate::quantity::Hours(row.minutes.0 / 60.0)),
            fixed_unit(row.ah, 3)
        ),
        "definition",
    ));
}
