//! What a size is held against: the build as stated, or a share of the builds within its tolerances.

use super::crowd::{Crowd, InShare};
use super::knob::Knob;
use super::{keeps_up, proves};
use crate::build::Build;
use crate::description::Description;

/// Judges a build with one number of it at an amount.
pub(super) enum Yardstick<'a> {
    /// The build as stated keeps up.
    Stated(&'a Build),
    /// So many of the builds drawn within the tolerances do.
    Share(Crowd<'a>),
}

impl Yardstick<'_> {
    /// Whether the build as it is is good enough.
    pub(super) fn now(&self) -> bool {
        match self {
            Yardstick::Stated(build) => keeps_up(build),
            Yardstick::Share(crowd) => crowd.enough_now(),
        }
    }

    /// Whether it is good enough with a knob at an amount, found fast.
    pub(super) fn keeps(&self, knob: &Knob, x: f64) -> bool {
        match self {
            Yardstick::Stated(build) => keeps_up(&knob.apply(build, x)),
            Yardstick::Share(crowd) => crowd.likely(knob, x),
        }
    }

    /// The same by the full verdict: what answers are proved with.
    pub(super) fn proves(&self, knob: &Knob, x: f64) -> bool {
        match self {
            Yardstick::Stated(build) => proves(&knob.apply(build, x)),
            Yardstick::Share(crowd) => crowd.enough(knob, x),
        }
    }

    /// Whether a changed description, resolved to `build`, is good enough.
    pub(super) fn fits(&self, description: &Description, build: &Build) -> bool {
        match self {
            Yardstick::Stated(_) => keeps_up(build),
            Yardstick::Share(crowd) => crowd.enough_of(description, build),
        }
    }

    /// A build that does not keep up with a knob at an amount, to tell what binds.
    pub(super) fn failing(&self, knob: &Knob, x: f64) -> Build {
        match self {
            Yardstick::Stated(build) => knob.apply(build, x),
            Yardstick::Share(crowd) => crowd.failing(knob, x),
        }
    }

    /// The build as it is, or a draw of it that does not keep up.
    pub(super) fn failing_now(&self) -> Build {
        match self {
            Yardstick::Stated(build) => (*build).clone(),
            Yardstick::Share(crowd) => crowd.weakest(),
        }
    }

    /// What was drawn; none for the build as stated.
    pub(super) fn summary(&self) -> Option<InShare> {
        match self {
            Yardstick::Stated(_) => None,
            Yardstick::Share(crowd) => Some(crowd.summary()),
        }
    }

    /// Whether the margin of the build as stated leads to the edge.
    pub(super) fn follows_margin(&self) -> bool {
        matches!(self, Yardstick::Stated(_))
    }
}
