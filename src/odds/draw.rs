//! One draw: its values put into the description, the build resolved and judged.

use super::sequence::Sequence;
use super::toleranced::{Purpose, Toleranced, Walk};
use super::walk::Ground;
use super::{Law, Wanted};
use crate::build::Build;
use crate::catalog::Catalogs;
use crate::check::answer::Verdict;
use crate::check::{Judged, judge};
use crate::description::Description;
use crate::outlook::Spread;
use crate::quantity::{AmpHours, Fraction};
use crate::resolve::resolve;

/// A description whose tolerances are drawn.
pub struct Drawing<'a> {
    description: &'a Description,
    catalogs: &'a Catalogs,
    ground: Ground<'a>,
    tolerances: Vec<Toleranced>,
    sequence: Sequence,
    start: Fraction,
}

/// Why a draw has no outcome.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Miss {
    /// Its values contradict each other.
    Contradictory,
    /// The solver found no answer.
    Unsolved,
}

/// What came of a draw.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Drawn {
    pub(super) verdict: Verdict,
    /// Charge lacking; none where no charging helps, and without a battery.
    pub(super) lacks: Option<AmpHours>,
    /// Whether no charging helps.
    pub(super) beyond: bool,
    /// Room above the reserve, or to the nearest limit of volts: ranks those that keep up.
    room: f64,
    /// Amps to spare above zero, lacking below; without a battery the room to the nearest limit.
    pub(super) margin: Option<f64>,
}

impl Drawn {
    /// Ranks draws: those that no charging helps above those that lack charge, these above those that keep up.
    pub(super) fn badness(&self) -> (u8, f64) {
        match (self.beyond, self.lacks) {
            (true, _) => (2, -self.room),
            (false, Some(lacks)) if lacks > AmpHours::ZERO => (1, lacks.0),
            _ => (0, -self.room),
        }
    }
}

impl<'a> Drawing<'a> {
    /// The tolerances of a description, whose build as stated is given.
    #[must_use]
    pub fn new(
        description: &'a Description,
        catalogs: &'a Catalogs,
        nominal: &'a Build,
        wanted: Wanted,
    ) -> Drawing<'a> {
        let ground = Ground::new(description, catalogs, nominal);
        let mut walk = Walk::new(Purpose::List(Vec::new()));
        ground.walk(&mut description.clone(), &mut walk);
        let tolerances = walk.listed();
        Drawing {
            description,
            catalogs,
            ground,
            sequence: Sequence::new(tolerances.len(), wanted.seed),
            tolerances,
            start: wanted.start,
        }
    }

    /// What is drawn.
    #[must_use]
    pub fn tolerances(&self) -> &[Toleranced] {
        &self.tolerances
    }

    /// The shares of their distributions at which a draw takes its values.
    #[must_use]
    pub fn point(&self, number: u64) -> Vec<f64> {
        self.sequence.point(number)
    }

    /// The description of a draw.
    #[must_use]
    pub fn description(&self, number: u64) -> Description {
        let point = self.point(number);
        let mut drawn = self.description.clone();
        let mut walk = Walk::new(Purpose::Draw(&point));
        self.ground.walk(&mut drawn, &mut walk);
        drawn
    }

    /// The values of a draw, as `--set` takes them.
    #[must_use]
    pub fn written(&self, number: u64) -> Vec<String> {
        let point = self.point(number);
        let mut walk = Walk::new(Purpose::Write(&point, Vec::new()));
        self.ground.walk(&mut self.description.clone(), &mut walk);
        walk.written()
    }

    /// The build of a draw; none where its values contradict each other.
    #[must_use]
    pub fn build(&self, number: u64) -> Option<Build> {
        let build = resolve(&self.description(number), self.catalogs).ok()?;
        Some(build.starting_at(self.start))
    }

    /// What comes of a draw.
    pub(super) fn outcome(&self, number: u64, margin: bool) -> Result<Drawn, Miss> {
        let build = self.build(number).ok_or(Miss::Contradictory)?;
        let judged = judge(&build).map_err(|_| Miss::Unsolved)?;
        Ok(match &judged {
            Judged::OnVolts(verdict, room) => {
                let room = room.map(|r| r.0);
                Drawn {
                    verdict: *verdict,
                    lacks: None,
                    beyond: false,
                    room: room.unwrap_or(f64::INFINITY),
                    margin: room,
                }
            }
            Judged::OnCharge(machine, ruling) => {
                let reserve = ruling.reserve.soc;
                let lowest = ruling.settles.map_or(Fraction::ZERO, |(_, lowest)| lowest);
                let edge = || match ruling.lacks_current {
                    Some(current) if !judged.keeps_up() => Some(current),
                    _ if reserve > Fraction::ONE => None,
                    _ => machine.edge(reserve, Spread::Everywhere),
                };
                Drawn {
                    verdict: ruling.verdict,
                    lacks: ruling.lacks,
                    beyond: judged.beyond_charging(),
                    room: (lowest - reserve).0,
                    margin: if margin { edge().map(|a| -a.0) } else { None },
                }
            }
        })
    }
}

impl std::fmt::Debug for Drawing<'_> {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        let laws: Vec<(&str, Law)> = self
            .tolerances
            .iter()
            .map(|t| (t.path.as_str(), t.law))
            .collect();
        f.debug_struct("Drawing")
            .field("tolerances", &laws)
            .finish_non_exhaustive()
    }
}
