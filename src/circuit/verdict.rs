//! The verdict of a build without a battery: every accessory within its volts in every state.

use super::Circuit;
use crate::build::{Accessory, Build, State};
use crate::check::answer::Verdict;
use crate::quantity::{Fraction, Volts, format};

/// A build without a battery judged on volts.
#[derive(Clone, Debug)]
pub struct VoltsVerdict {
    /// [`Verdict::KeepsUp`] or [`Verdict::FallsShort`]. The former where nothing is judged, for
    /// nothing is known to fall short; the sentence then says that nothing is judged.
    pub verdict: Verdict,
    /// The verdict in one sentence, its own words first.
    pub sentence: String,
    /// The accessory nearest to a limit, or furthest beyond one; none where nothing is judged.
    pub tightest: Option<Tightest>,
}

/// An accessory, a state and the limit it is nearest to.
#[derive(Clone, Debug, PartialEq)]
pub struct Tightest {
    /// Index of the accessory.
    pub accessory: usize,
    /// The state.
    pub state: String,
    /// Volts at it there.
    pub volts: Volts,
    /// The limit.
    pub limit: Volts,
    /// Whether the limit is the lower one.
    pub lower: bool,
    /// Room to the limit as a share of it; below zero beyond it.
    pub margin: Fraction,
}

/// Judges a build without a battery: every accessory that states the volts it works within must see
/// them in every state it runs in, with everything on and with as little on as can be, coils cold and
/// hot. With the engine off nothing feeds it: there it sees no volts.
#[must_use]
pub fn verdict_on_volts(build: &Build, circuits: &[Circuit]) -> VoltsVerdict {
    let mut all: Vec<Tightest> = Vec::new();
    for on in circuits.iter().flat_map(|c| &c.accessories) {
        let Some(accessory) = build
            .accessories
            .get(on.accessory)
            .filter(|a| a.works.stated)
        else {
            continue;
        };
        for s in &on.states {
            let (least, most) = (s.between.lowest, s.between.highest);
            all.extend(margins(on.accessory, accessory, &s.state, least, most));
        }
        if runs_stopped(build, accessory) {
            let name = build.state_name(State::Stopped);
            all.extend(margins(
                on.accessory,
                accessory,
                name,
                Volts::ZERO,
                Volts::ZERO,
            ));
        }
    }
    let tightest = all
        .into_iter()
        .min_by(|a, b| a.margin.0.total_cmp(&b.margin.0));
    let short = tightest.as_ref().is_some_and(|t| t.margin < Fraction::ZERO);
    VoltsVerdict {
        verdict: if short {
            Verdict::FallsShort
        } else {
            Verdict::KeepsUp
        },
        sentence: sentence(build, tightest.as_ref()),
        tightest,
    }
}

fn runs_stopped(build: &Build, accessory: &Accessory) -> bool {
    accessory.duty.share(State::Stopped) > Fraction::ZERO
        && build.shift.iter().any(|step| step.state == State::Stopped)
}

/// Room to the lower and the upper limit.
fn margins(
    index: usize,
    accessory: &Accessory,
    state: &str,
    least: Volts,
    most: Volts,
) -> impl Iterator<Item = Tightest> {
    let tightest = |limit: Option<Volts>, volts: Volts, lower: bool| {
        let limit = limit.filter(|l| l.0 > 0.0)?;
        let above = volts / limit - 1.0;
        Some(Tightest {
            accessory: index,
            state: state.to_owned(),
            volts,
            limit,
            lower,
            margin: Fraction(if lower { above } else { -above }),
        })
    };
    let works = accessory.works;
    [
        tightest(works.low, least, true),
        tightest(works.high, most, false),
    ]
    .into_iter()
    .flatten()
}

fn sentence(build: &Build, tightest: Option<&Tightest>) -> String {
    let unjudged = build.accessories.iter().filter(|a| !a.works.stated).count();
    let unjudged = u32::try_from(unjudged).unwrap_or(u32::MAX);
    let Some(t) = tightest else {
        return "Not judged: there is no battery to keep charged, and nothing states the volts it works within."
            .to_owned();
    };
    let name = build
        .accessories
        .get(t.accessory)
        .map_or("", |a| a.name.as_str());
    let (volts, limit) = (format::text(t.volts), format::text(t.limit));
    let mut text = match (t.margin < Fraction::ZERO, t.lower) {
        (true, true) => {
            format!(
                "Falls short: {name} gets {volts} at {} and needs {limit}.",
                t.state
            )
        }
        (true, false) => {
            format!(
                "Falls short: {name} gets {volts} at {}, above its {limit}.",
                t.state
            )
        }
        (false, lower) => {
            let side = if lower { "at least" } else { "at most" };
            format!(
                "Keeps up: everything works within its volts; closest is {name}, {volts} at {} for {side} {limit}.",
                t.state
            )
        }
    };
    if unjudged > 0 {
        let who = format::count(unjudged, "accessory states", "accessories state");
        text.push_str(&format!(
            " {who} no range and {} not judged.",
            if unjudged == 1 { "is" } else { "are" }
        ));
    }
    text
}
