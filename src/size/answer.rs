//! What size would do: the answers, each proved by the full verdict.

use super::crowd::{Crowd, InShare, Share};
use super::guideline::{Guideline, guideline};
use super::influence::{Influence, influence};
use super::knob::{self, Knob, knobs};
use super::margin::Margin;
use super::nearest::largest;
use super::parts::{self, Fitted};
use super::reason::{reserve_of, why_not};
use super::rebuild::{self, WindingRow};
use super::search::{Bound, Found, Search};
use super::value::written;
use super::yardstick::Yardstick;
use crate::build::{Build, State};
use crate::check::{FORMAT, SolveError, solvable};
use crate::ledger::Machine;
use crate::remedy::Asked;
use serde::Serialize;

/// Always-on accessories that are looked at: those that take most.
const ALWAYS_ON: usize = 4;

/// The answers.
#[derive(Clone, Debug, Serialize)]
pub struct Size {
    /// Version of these names.
    pub format: u32,
    /// Name of the build.
    pub build: String,
    /// Whether it keeps up as it is; with a share, whether that share does.
    pub keeps_up: bool,
    /// The share of builds that is to keep up, where one was asked; none for the build as stated.
    pub share: Option<InShare>,
    /// Why not, where it does not.
    pub binds: Option<String>,
    /// One answer a number that may be varied.
    pub answers: Vec<Answer>,
    /// The 80 % guideline at each running speed: a rule of thumb, not the verdict.
    pub guideline: Vec<Guideline>,
    /// Catalog windings in place of the first that feeds the battery: those that keep up first.
    pub windings: Vec<WindingRow>,
    /// Inputs ranked by how much they move the charge lacking.
    pub influence: Vec<Influence>,
}

/// One number of the build, alone, others held.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Answer {
    /// What it is, in words.
    pub what: String,
    /// Whether this much or more, or this much or less, keeps up.
    pub bound: Bound,
    /// The amount on the edge, on the side that holds; none where there is no edge.
    pub amount: Option<f64>,
    /// Its unit.
    pub unit: String,
    /// As it is now, in the same unit.
    pub now: Option<f64>,
    /// Path that `--set` takes; none where the file has no such value, or may hold nothing beyond.
    pub set: Option<String>,
    /// The amount as `--set` takes it.
    pub value: Option<String>,
    /// What binds just beyond, or why there is no edge.
    pub binds: String,
    /// Catalog parts that qualify, in order of size.
    pub parts: Vec<String>,
}

/// Solves each number alone: with which the build as stated keeps up or, with a `share`, that share of the builds
/// within its tolerances. `progress` is told how many of how many steps are done.
///
/// # Errors
/// [`SolveError`]: no battery to keep charged, or no time in the shift.
pub fn size(
    asked: &Asked<'_>,
    share: Option<Share>,
    progress: &mut dyn FnMut(usize, usize),
) -> Result<Size, SolveError> {
    let build = asked.build;
    let machine = Machine::new(build).ok_or(SolveError::NoBattery)?;
    solvable(build)?;
    let knobs = asked_knobs(build);
    let all = knobs.len() + 3;
    let mut done = 0;
    let mut step = || {
        done += 1;
        progress(done, all);
    };
    let yardstick = match share {
        None => Yardstick::Stated(build),
        Some(share) => Yardstick::Share(Crowd::new(*asked, share)),
    };
    let fitted = Offers::new(asked, &yardstick);
    step();
    let now_keeps = yardstick.now();
    let mut margin = Margin::new(build, machine);
    let mut answers = Vec::with_capacity(knobs.len());
    for knob in &knobs {
        let mut search = Search {
            build,
            knob,
            yardstick: &yardstick,
            margin: &mut margin,
            now_keeps,
        };
        let found = search.run();
        answers.extend(found.map(|found| {
            let mut answer = answer(build, knob, found, &fitted, &yardstick);
            answer.set = answer.set.filter(|path| asked.in_file(path));
            answer
        }));
        step();
    }
    let ranked = influence(build);
    step();
    let first = fitted.windings.first();
    let windings = first.map_or_else(Vec::new, |(index, fitted)| rebuild::rows(fitted, *index));
    step();
    Ok(Size {
        format: FORMAT,
        build: build.name.clone(),
        keeps_up: now_keeps,
        share: yardstick.summary(),
        binds: (!now_keeps).then(|| why_not(&yardstick.failing_now())),
        answers,
        guideline: guideline(build),
        windings,
        influence: ranked,
    })
}

/// Catalog parts tried.
struct Offers {
    batteries: Vec<Fitted>,
    windings: Vec<(usize, Vec<Fitted>)>,
}

impl Offers {
    /// Every catalog battery, and every winding in place of each that feeds the battery.
    fn new(asked: &Asked<'_>, yardstick: &Yardstick<'_>) -> Offers {
        Offers {
            batteries: parts::batteries(asked, yardstick),
            windings: knob::windings(asked.build)
                .map(|(index, _, _)| (index, parts::windings(asked, index, yardstick)))
                .collect(),
        }
    }

    /// Those that keep up in place of what a knob varies, in order of size.
    fn that_qualify(&self, knob: &Knob) -> Vec<String> {
        match knob {
            Knob::Winding(index) => self
                .windings
                .iter()
                .find(|(i, _)| i == index)
                .map_or_else(Vec::new, |(_, fitted)| parts::in_order(fitted, knob)),
            Knob::Capacity | Knob::ColdCranking => parts::in_order(&self.batteries, knob),
            _ => Vec::new(),
        }
    }
}

/// The knobs that are asked: of always-on accessories only the largest.
fn asked_knobs(build: &Build) -> Vec<Knob> {
    let large: Vec<usize> = largest(build)
        .into_iter()
        .map(|(index, _)| index)
        .take(ALWAYS_ON)
        .collect();
    let cycles = |index: usize| {
        build.accessories.get(index).is_some_and(|a| {
            let shares = a.duty.running.iter().chain([&a.duty.stopped]);
            shares
                .into_iter()
                .any(|f| f.value.0 > 0.0 && f.value.0 < 1.0)
        })
    };
    let wanted = |knob: &Knob| match knob {
        Knob::Duty { accessory, .. } => large.contains(accessory) || cycles(*accessory),
        Knob::Draw(accessory) => large.contains(accessory),
        _ => true,
    };
    knobs(build).into_iter().filter(wanted).collect()
}

fn answer(
    build: &Build,
    knob: &Knob,
    found: Found,
    offers: &Offers,
    yardstick: &Yardstick<'_>,
) -> Answer {
    let unit = knob.stated(build, 1.0).1;
    let mut answer = Answer {
        what: knob.what(build),
        bound: Bound::Least,
        amount: None,
        unit: unit.to_owned(),
        now: knob.now(build).map(|now| knob.stated(build, now).0),
        set: knob.path(build),
        value: None,
        binds: String::new(),
        parts: offers.that_qualify(knob),
    };
    match found {
        Found::Edge {
            bound,
            amount,
            beyond,
        } => {
            answer.bound = bound;
            answer.amount = Some(knob.stated(build, amount).0);
            answer.value = Some(written(amount, knob.unit(build)));
            let beyond_it = yardstick.failing(knob, beyond.min(knob.range(build).1));
            answer.binds = match knob {
                Knob::Capacity | Knob::ColdCranking => reserve_of(&beyond_it),
                Knob::Reserve => "the lowest charge of the shift it settles at".to_owned(),
                _ => why_not(&beyond_it),
            };
            // Where the file may hold nothing beyond the amount, no `--set` can show the edge.
            answer.set = answer.set.filter(|_| beyond <= knob.limit(build));
        }
        Found::Always(bound) => {
            answer.bound = bound;
            answer.binds = always(build, knob, bound);
        }
        Found::Never { bound, best } => {
            answer.bound = bound;
            answer.binds = format!("not by this: {}", why_not(&yardstick.failing(knob, best)));
        }
        Found::Ragged(bound) => {
            answer.bound = bound;
            answer.binds =
                "no one edge: it keeps up here and there, more does not always help".to_owned();
        }
    }
    answer
}

/// Why there is no edge where it keeps up at any amount.
fn always(build: &Build, knob: &Knob, bound: Bound) -> String {
    let (low, high) = knob.range(build);
    match (knob, bound) {
        (Knob::Reserve, _) => "nothing: the battery stays full".to_owned(),
        (Knob::Duty { .. }, _) if high >= 100.0 => "nothing: keeps up even always on".to_owned(),
        (Knob::Duty { .. }, _) => "nothing: keeps up in all the time the others leave".to_owned(),
        (Knob::Time(index), _) => {
            let stopped = build
                .shift
                .get(*index)
                .is_some_and(|s| s.state == State::Stopped);
            let day = if stopped {
                "a whole day standing"
            } else {
                "a whole day of it"
            };
            format!("nothing: keeps up through {day}")
        }
        (_, Bound::Least) => {
            format!("nothing: keeps up even with {}", stated(build, knob, low))
        }
        (_, Bound::Most) => {
            format!("nothing: keeps up even with {}", stated(build, knob, high))
        }
    }
}

fn stated(build: &Build, knob: &Knob, x: f64) -> String {
    let (amount, unit) = knob.stated(build, x);
    written((amount * 100.0).round() / 100.0, unit)
}
