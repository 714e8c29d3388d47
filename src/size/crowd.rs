//! Builds drawn within the tolerances of one, and how many of them keep up.

use super::knob::Knob;
use super::{keeps_up, proves};
use crate::build::Build;
use crate::description::Description;
use crate::odds::{Drawing, Wanted};
use crate::quantity::Fraction;
use crate::remedy::Asked;
use rayon::prelude::*;
use serde::Serialize;

/// Times the number that may fail that searches look at: the weakest draws of the build as it is.
const WEAKEST: usize = 4;
/// And so many more.
const AND_MORE: usize = 16;

/// In which share of builds a size is to keep up.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Share {
    /// The share, between 0 and 1.
    pub of_builds: Fraction,
    /// Builds drawn.
    pub runs: u64,
    /// Which sequence of draws.
    pub seed: u64,
}

/// What was drawn for sizes that are to hold in a share of builds.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
pub struct InShare {
    /// The share that is to keep up.
    pub wanted: Fraction,
    /// Builds drawn; 1 where nothing bears a tolerance.
    pub runs: u64,
    /// Which sequence of draws.
    pub seed: u64,
    /// The share that keeps up as it is.
    pub keeps_up_share: Fraction,
}

/// The builds drawn.
pub(super) struct Crowd<'a> {
    asked: Asked<'a>,
    share: Share,
    /// The weakest first: by what they lack or have to spare as they are.
    draws: Vec<Build>,
    /// Of these, the ones that do not keep up as they are.
    short: usize,
    /// How many may fail.
    may_fail: usize,
}

impl<'a> Crowd<'a> {
    /// Draws builds; those whose values contradict each other are left out.
    pub(super) fn new(asked: Asked<'a>, share: Share) -> Crowd<'a> {
        let draws = drawn(&asked, asked.description, asked.build, share);
        let mut ranked: Vec<(bool, f64, Build)> = draws
            .into_par_iter()
            .map(|build| (keeps_up(&build), room(&build), build))
            .collect();
        ranked.sort_by(|a, b| a.0.cmp(&b.0).then(a.1.total_cmp(&b.1)));
        let short = ranked.iter().filter(|(keeps, _, _)| !keeps).count();
        let draws: Vec<Build> = ranked.into_iter().map(|(_, _, build)| build).collect();
        Crowd {
            asked,
            share,
            may_fail: may_fail(draws.len(), share.of_builds),
            draws,
            short,
        }
    }

    /// What was drawn, and what came of it.
    pub(super) fn summary(&self) -> InShare {
        let runs = self.draws.len().max(1);
        InShare {
            wanted: self.share.of_builds,
            runs: runs as u64,
            seed: self.share.seed,
            keeps_up_share: Fraction((runs - self.short) as f64 / runs as f64),
        }
    }

    /// Whether enough keep up as they are.
    pub(super) fn enough_now(&self) -> bool {
        self.short <= self.may_fail
    }

    /// Whether enough are likely to keep up with a knob at an amount: by the weakest alone.
    pub(super) fn likely(&self, knob: &Knob, x: f64) -> bool {
        let looked_at = (WEAKEST * self.may_fail + AND_MORE).min(self.draws.len());
        self.count(&self.draws[..looked_at], keeps_up, knob, x)
    }

    /// Whether enough of all do, by the full verdict.
    pub(super) fn enough(&self, knob: &Knob, x: f64) -> bool {
        self.count(&self.draws, proves, knob, x)
    }

    /// Whether enough draws of a changed description keep up.
    pub(super) fn enough_of(&self, description: &Description, build: &Build) -> bool {
        let draws = drawn(&self.asked, description, build, self.share);
        let most = may_fail(draws.len(), self.share.of_builds);
        fewer(&draws, most, keeps_up)
    }

    /// A draw that does not keep up with a knob at an amount; where all do, the build as stated.
    pub(super) fn failing(&self, knob: &Knob, x: f64) -> Build {
        let at = |draw: &Build| self.turned(draw, knob, x);
        let mut builds = self.draws.iter().map(at);
        let failing = builds.find(|build| !keeps_up(build));
        failing.unwrap_or_else(|| knob.apply(self.asked.build, x))
    }

    /// The weakest draw.
    pub(super) fn weakest(&self) -> Build {
        self.draws.first().unwrap_or(self.asked.build).clone()
    }

    fn count(&self, draws: &[Build], holds: fn(&Build) -> bool, knob: &Knob, x: f64) -> bool {
        fewer(draws, self.may_fail, |draw| {
            holds(&self.turned(draw, knob, x))
        })
    }

    /// A draw with a knob at an amount, as far off it as the draw was off the amount there is.
    fn turned(&self, draw: &Build, knob: &Knob, x: f64) -> Build {
        let off = match (knob.now(self.asked.build), knob.now(draw)) {
            (Some(stated), Some(drawn)) if stated > 0.0 => drawn / stated,
            _ => 1.0,
        };
        knob.apply(draw, (x * off).min(knob.limit(draw)))
    }
}

/// The builds drawn of a description, in the air and from the start that is asked.
fn drawn(asked: &Asked<'_>, description: &Description, stated: &Build, share: Share) -> Vec<Build> {
    let wanted = Wanted {
        runs: share.runs,
        seed: share.seed,
        start: asked.build.start,
    };
    let drawing = Drawing::new(description, asked.catalogs, stated, wanted);
    if drawing.tolerances().is_empty() {
        return vec![stated.clone()];
    }
    (0..share.runs)
        .into_par_iter()
        .filter_map(|number| drawing.build(number))
        .collect()
}

/// How many of so many may fail.
fn may_fail(draws: usize, share: Fraction) -> usize {
    let wanted = (share.0 * draws as f64 - 1e-9).ceil().max(0.0);
    draws.saturating_sub(wanted as usize)
}

/// Whether no more than `most` fail, told as soon as it is known. A batch is tried on all cores at once.
fn fewer(draws: &[Build], most: usize, holds: impl Fn(&Build) -> bool + Sync) -> bool {
    let mut failed = 0;
    for batch in draws.chunks(most.max(4) + 4) {
        failed += batch.par_iter().filter(|draw| !holds(draw)).count();
        if failed > most {
            return false;
        }
    }
    true
}

/// How far a draw is from the edge, to rank it: charge gained at the reserve, as a share of full.
fn room(build: &Build) -> f64 {
    crate::ledger::Machine::new(build).map_or(-1.0, |machine| {
        super::margin::Margin::new(build, machine).now
    })
}
