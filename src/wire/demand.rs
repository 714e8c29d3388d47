//! What one supply wire carries: an accessory by itself, or several that share a feed.

use super::surge::Surge;
use super::volts::{PLANNING_CELL, Seen, Supplies};
use crate::build::{Accessory, Build, Draw, State};
use crate::description::accessory::LoadKind;
use crate::load::{LoadSum, coil_at};
use crate::quantity::{Amps, Celsius, Fraction, Metres, Volts};

/// Temperature at which a coil's resistance is stated.
const COIL_STATED_AT: Celsius = Celsius(20.0);

/// One supply wire to be chosen.
#[derive(Clone, Debug)]
pub(super) struct Demand {
    /// The accessory's name, or the feed's.
    pub(super) name: String,
    /// Whether it is a feed.
    pub(super) feed: bool,
    /// What hangs on it.
    pub(super) members: Vec<Member>,
    /// One way, the longest of them.
    pub(super) run: Metres,
    /// Whether the current returns by a second wire.
    pub(super) return_wire: bool,
    /// The least insulation asked for.
    pub(super) insulation: Celsius,
    /// Through the engine space.
    pub(super) engine_space: bool,
    /// Conductors bundled.
    pub(super) bundle: u32,
    /// Least of the losses allowed, as a share of the system's volts.
    pub(super) max_drop: Fraction,
    /// Nominal volts.
    pub(super) system: Volts,
    /// Share of the load that one of several wires carries.
    pub(super) share: Fraction,
}

/// One accessory on a wire, all alike of it together.
#[derive(Clone, Debug)]
pub(super) struct Member {
    /// Index into the build's accessories.
    pub(super) index: usize,
    /// Its name.
    pub(super) name: String,
    /// What it is to a switch.
    pub(super) kind: LoadKind,
    /// How many.
    pub(super) count: u32,
    /// What one draws, a coil as cold as the air.
    draw: Draw,
    /// Volts under which it drops out.
    low: Volts,
    /// Planning volts of what draws more as the volts fall.
    planning: Volts,
    /// Where it is on.
    pub(super) seen: Vec<Seen>,
    /// Surge at switch-on: multiple and time.
    surge: Option<(Fraction, crate::quantity::Hours)>,
    /// Rating of its switch.
    pub(super) switch: Amps,
    /// Never on with these (indices into the build's accessories).
    apart: Vec<usize>,
}

impl Member {
    pub(super) fn new(build: &Build, index: usize, seen: Vec<Seen>) -> Option<Member> {
        let accessory = build.accessories.get(index)?;
        Some(Member {
            index,
            name: accessory.name.clone(),
            kind: accessory.kind,
            count: accessory.count,
            draw: cold(accessory, build.air.value),
            low: accessory.works.low.unwrap_or(Volts::ZERO),
            planning: PLANNING_CELL * f64::from(build.cells()),
            seen,
            surge: accessory.inrush.map(|i| (i.times, i.time)),
            switch: accessory.wire.switch,
            apart: accessory.apart.clone(),
        })
    }

    /// Its most current in a state with so many volts lost on the wire, none where it is off.
    ///
    /// A constant power at the lowest bus volts less what is lost, never under the volts at which it
    /// drops out; everything else at the highest bus volts, as if nothing were lost.
    pub(super) fn most(&self, state: State, lost: Volts) -> Option<Amps> {
        let seen = self.seen.iter().find(|s| s.state == state)?;
        Some(match self.draw {
            Draw::Power(_) => {
                let low = seen.low.min(self.planning).max(self.low) - lost;
                self.at(low.max(self.low))
            }
            _ => self.at(seen.high),
        })
    }

    /// Its current at some volts at its terminals.
    pub(super) fn at(&self, volts: Volts) -> Amps {
        LoadSum::of(self.draw, self.count).current_at(volts.max(Volts(0.1)))
    }

    /// The state in which it draws most, and how much.
    pub(super) fn worst(&self, lost: Volts) -> (Option<State>, Amps) {
        most(
            self.seen
                .iter()
                .filter_map(|s| Some((s.state, self.most(s.state, lost)?))),
        )
    }
}

impl Demand {
    /// Length of wire: once the run, twice with a return wire.
    pub(super) fn length(&self) -> Metres {
        if self.return_wire {
            self.run * 2.0
        } else {
            self.run
        }
    }

    /// The most volts that may be lost.
    pub(super) fn allowed(&self) -> Volts {
        self.system * self.max_drop
    }

    /// The worst steady current with so many volts lost, and the state it is met in.
    pub(super) fn worst(&self, lost: Volts) -> (Option<State>, Amps) {
        let mut states: Vec<State> = self
            .members
            .iter()
            .flat_map(|m| m.seen.iter().map(|s| s.state))
            .collect();
        states.sort_unstable();
        states.dedup();
        let (state, amps) = most(
            states
                .into_iter()
                .map(|s| (s, self.together(|m| m.most(s, lost)))),
        );
        (state, amps * self.share)
    }

    /// Sum over what may be on at once in a state. Members never on together count by the greatest
    /// of them; where such groups are not whole the sum is on the safe side.
    pub(super) fn together(&self, amps: impl Fn(&Member) -> Option<Amps>) -> Amps {
        let mut groups: Vec<(Vec<usize>, Amps)> = Vec::new();
        for member in &self.members {
            let Some(own) = amps(member) else { continue };
            let fits = |others: &[usize]| others.iter().all(|o| member.apart.contains(o));
            match groups.iter_mut().find(|(others, _)| fits(others)) {
                Some((others, greatest)) => {
                    others.push(member.index);
                    *greatest = greatest.max(own);
                }
                None => groups.push((vec![member.index], own)),
            }
        }
        groups.into_iter().map(|(_, amps)| amps).sum()
    }

    /// The surges of its members, each onto the steady current of the whole wire.
    pub(super) fn surges(&self, steady: Amps, lost: Volts) -> Vec<(&str, Surge)> {
        let of = |m: &'_ Member| {
            let (times, time) = m.surge?;
            let own = m.worst(lost).1 * self.share;
            Some(Surge::new(steady.max(own), own, times, time))
        };
        self.members
            .iter()
            .filter_map(|m| Some((m.name.as_str(), of(m)?)))
            .collect()
    }
}

/// The first of the greatest.
fn most(all: impl Iterator<Item = (State, Amps)>) -> (Option<State>, Amps) {
    all.fold((None, Amps::ZERO), |(state, amps), (s, a)| {
        if state.is_none() || a > amps {
            (Some(s), a)
        } else {
            (state, amps)
        }
    })
}

/// The draw with a coil as cold as the air: in frost it draws more than its stated ohms say.
fn cold(accessory: &Accessory, air: Celsius) -> Draw {
    match accessory.draw.value {
        Draw::Resistance(ohms) if accessory.kind == LoadKind::Coil && air < COIL_STATED_AT => {
            Draw::Resistance(coil_at(ohms, air))
        }
        draw => draw,
    }
}

/// An accessory that gets no wire, and why.
pub(super) struct Unsized {
    /// Its name.
    pub(super) name: String,
    /// Why.
    pub(super) why: String,
}

/// The wires a build needs, in the order in which its accessories first ask for them, and the
/// accessories that get none.
pub(super) fn demands(build: &Build) -> (Vec<Demand>, Vec<Unsized>) {
    let supplies = Supplies::new(build);
    let mut demands: Vec<Demand> = Vec::new();
    let mut without = Vec::new();
    for (index, accessory) in build.accessories.iter().enumerate() {
        match member(build, &supplies, index) {
            Ok(member) => add(build, &mut demands, accessory, member),
            Err(why) => without.push(Unsized {
                name: accessory.name.clone(),
                why,
            }),
        }
    }
    (demands, without)
}

fn member(build: &Build, supplies: &Supplies, index: usize) -> Result<Member, String> {
    let accessory = &build.accessories[index];
    let feed_has_run = accessory.wire.feed.as_ref().is_some_and(|feed| {
        let shares = |a: &Accessory| a.wire.feed.as_ref() == Some(feed);
        let mut all = build.accessories.iter();
        all.any(|a| shares(a) && a.wire.run.is_some())
    });
    if accessory.wire.run.is_none() && !feed_has_run {
        return Err("no `run:` is given".to_owned());
    }
    let seen = supplies.seen(index)?;
    if seen.is_empty() {
        return Err("it is never on".to_owned());
    }
    Member::new(build, index, seen).ok_or_else(|| "it is not in the build".to_owned())
}

/// Puts a member on its feed, or on a wire of its own.
fn add(build: &Build, demands: &mut Vec<Demand>, accessory: &Accessory, member: Member) {
    let wire = &accessory.wire;
    let circuit = accessory.circuit.as_deref();
    let same_circuit = |m: &Member| build.accessories[m.index].circuit.as_deref() == circuit;
    let shared = demands.iter_mut().find(|d| {
        d.feed
            && Some(d.name.as_str()) == wire.feed.as_deref()
            && d.members.iter().all(same_circuit)
    });
    if let Some(demand) = shared {
        demand.run = demand.run.max(wire.run.unwrap_or(Metres::ZERO));
        demand.return_wire |= wire.return_wire;
        demand.insulation = demand.insulation.min(wire.insulation);
        demand.engine_space |= wire.engine_space;
        demand.bundle = demand.bundle.max(wire.bundle);
        demand.max_drop = demand.max_drop.min(wire.max_drop);
        demand.members.push(member);
        return;
    }
    demands.push(Demand {
        name: wire.feed.clone().unwrap_or_else(|| accessory.name.clone()),
        feed: wire.feed.is_some(),
        members: vec![member],
        run: wire.run.unwrap_or(Metres::ZERO),
        return_wire: wire.return_wire,
        insulation: wire.insulation,
        engine_space: wire.engine_space,
        bundle: wire.bundle,
        max_drop: wire.max_drop,
        system: PLANNING_CELL * f64::from(build.cells()),
        share: Fraction::ONE,
    });
}
