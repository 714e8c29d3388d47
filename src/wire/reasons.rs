//! The reason for each choice, in words, each with its figures.

use super::answer::SwitchRow;
use super::demand::Demand;
use super::fuse::PASSES;
use super::size::{Choice, Fused, Miss, Settled};
use super::tables::Tables;
use crate::build::{Build, Draw};
use crate::quantity::{Celsius, Fraction, Hours, format};

/// What decided on the wire.
pub(super) fn binds(choice: &Choice, tables: &Tables, gauge: super::Gauge) -> String {
    let Some((thinner, misses)) = &choice.thinner else {
        let least = tables.conductors.least(gauge);
        return least.map_or_else(
            || "least size: the thinnest of the list".to_owned(),
            |least| {
                let wire = choice.settled.wire.name();
                format!(
                    "least size: {wire} is the thinnest laid ({})",
                    least.ground.source
                )
            },
        );
    };
    let all: Vec<String> = misses.iter().map(|miss| missed(miss, thinner)).collect();
    all.join("; ")
}

fn missed(miss: &Miss, thinner: &Settled) -> String {
    let wire = thinner.wire.name();
    match miss {
        Miss::Drop { lost, allowed } => format!(
            "volts lost: {wire} would lose {} of at most {}",
            format::text(*lost),
            format::text(*allowed)
        ),
        Miss::Ampacity { fuse, allows } => format!(
            "fuse and wire: {wire} may carry {}, its fuse is {}",
            format::text(*allows),
            format::text(*fuse)
        ),
        Miss::NoFuse { amps, .. } => {
            format!("fuse and load: {wire} would carry {}", format::text(*amps))
        }
        Miss::Surge { peak, .. } => format!("fuse and load: a surge of {}", format::text(*peak)),
    }
}

/// All reasons, in the order in which the choices fall.
pub(super) fn reasons(
    build: &Build,
    demand: &Demand,
    choice: &Choice,
    switches: &[SwitchRow],
    loading: Fraction,
) -> Vec<String> {
    let mut all = vec![load(build, demand, choice), fuse(&choice.fused, loading)];
    all.extend(surge(&choice.fused));
    all.push(ampacity(demand, choice));
    all.push(drop(demand, &choice.settled));
    all.push(overload(choice));
    all.extend(switches.iter().map(switch));
    all
}

fn load(build: &Build, demand: &Demand, choice: &Choice) -> String {
    let settled = &choice.settled;
    let state = settled.state.map_or("no state", |s| build.state_name(s));
    let amps = format::text(settled.amps);
    if let [member] = demand.members.as_slice() {
        let seen = member.seen.iter().find(|s| Some(s.state) == settled.state);
        let high = seen.map_or_else(String::new, |s| format::text(s.high));
        let how = match build.accessories.get(member.index).map(|a| a.draw.value) {
            Some(Draw::Power(_)) => format!(
                "a constant power at {} less what the wire loses",
                format::text(demand.system.min(seen.map_or(demand.system, |s| s.low)))
            ),
            Some(Draw::Current(_)) => "a constant current".to_owned(),
            _ => format!("at {high}, the most its supply holds"),
        };
        return format!("load: {amps} in {state}, {how}");
    }
    let names: Vec<&str> = demand.members.iter().map(|m| m.name.as_str()).collect();
    format!(
        "load: {amps} in {state}, {} together; the feed is as long as the longest run",
        names.join(", ")
    )
}

fn fuse(fused: &Fused, loading: Fraction) -> String {
    let rating = format::text(fused.fuse.rating);
    match &fused.steady {
        Some(steady) => format!(
            "fuse {rating}: {} would carry the load but may open at the surge",
            format::text(steady.rating)
        ),
        None => format!(
            "fuse {rating}: the smallest whose {}, {}, carry the load",
            format::percent(loading),
            format::text(fused.fuse.rating * loading)
        ),
    }
}

fn surge(fused: &Fused) -> Option<String> {
    let held = fused.held.as_ref()?;
    let peak = format::text(held.surge.peak());
    let name = &held.accessory;
    Some(match held.opens {
        None => format!("surge: {name} starts at {peak}, which the fuse passes for hours"),
        Some(opens) => format!(
            "surge: {name} starts at {peak} and heats a fuse like {} of that; the fuse holds it for {} at least",
            short(held.surge.lasts()),
            short(opens)
        ),
    })
}

fn ampacity(demand: &Demand, choice: &Choice) -> String {
    let (settled, place) = (&choice.settled, &choice.place);
    let mut text = format!(
        "wire {}: may carry {}, {} by the table at {}",
        settled.wire.name(),
        format::text(settled.allows),
        format::text(settled.table),
        format::temperature(place.class)
    );
    if place.heat < Fraction::ONE {
        let where_ = if demand.engine_space {
            "in the engine space"
        } else {
            "in hot air"
        };
        text += &format!(
            ", × {} {where_} ({})",
            two(place.heat),
            format::temperature(place.ambient)
        );
    }
    if place.bundle < Fraction::ONE {
        text += &format!(", × {} in a bundle of {}", two(place.bundle), demand.bundle);
    }
    text
}

fn drop(demand: &Demand, settled: &Settled) -> String {
    format!(
        "volts lost: {} ({} of {}) over {} of wire at {}, {} allowed",
        format::text(settled.lost),
        format::text(Fraction(settled.lost / demand.system)),
        format::text(demand.system),
        format::text(demand.length()),
        format::temperature(Celsius(settled.copper.0.round())),
        format::text(demand.allowed())
    )
}

fn overload(choice: &Choice) -> String {
    let reached = Celsius(overloaded(choice).0.round());
    let over = match reached > choice.place.class {
        true => format!(
            ", over the {} that its insulation bears for long",
            format::temperature(choice.place.class)
        ),
        false => String::new(),
    };
    format!(
        "overload: passing 135 % of its rating, as it may for ten minutes, the fuse lets the copper reach {}{over}",
        format::temperature(reached)
    )
}

/// The copper's temperature when the fuse passes 135 % of its rating.
pub(super) fn overloaded(choice: &Choice) -> Celsius {
    let passes = choice.fused.fuse.rating * PASSES;
    choice
        .place
        .copper(Fraction(passes / choice.settled.allows))
}

fn switch(row: &SwitchRow) -> String {
    let needs = format!(
        "switch of {}: {} × {} = {} asked of it, rated {}",
        row.accessory,
        two(row.factor),
        format::text(row.amps),
        format::text(row.needs_a),
        format::text(row.switch_a)
    );
    match (row.relay, row.relay_a.zip(row.relay_carries_a)) {
        (false, _) => needs,
        (true, Some((contacts, carries))) => format!(
            "{needs}: relay with contacts of {}, which carry {} in the heat",
            format::text(contacts),
            format::text(carries)
        ),
        (true, None) => {
            format!("{needs}: a contactor for continuous duty, above the relays of the list")
        }
    }
}

/// A pure number with at most two decimals.
fn two(number: Fraction) -> String {
    let text = format!("{:.2}", number.0);
    text.trim_end_matches('0').trim_end_matches('.').to_owned()
}

/// A time under a second in milliseconds.
pub(super) fn short(time: Hours) -> String {
    let seconds = time.seconds();
    if seconds >= 1.0 {
        return format::duration(time);
    }
    let milliseconds = seconds * 1e3;
    if milliseconds >= 9.95 {
        format!("{milliseconds:.0} ms")
    } else {
        format!("{milliseconds:.1} ms")
    }
}
