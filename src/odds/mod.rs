//! How often builds within the tolerances keep up, and which tolerance matters most.
//!
//! Every value of a build that bears a tolerance is drawn from its own distribution ([`Law`]), all of
//! them anew for each draw, and the build judged in full: the share of draws that keeps up is the
//! share of such machines that will. The draws follow a sequence that fills the space of values evenly
//! ([`Sequence`]); a draw depends on the seed and its number only, so that the answer is the same on any number of
//! threads.

mod amount;
mod draw;
mod influence;
mod law;
mod sequence;
mod share;
mod toleranced;
mod walk;
mod walk_accessory;
mod walk_charging;

pub use draw::Drawing;
pub use law::Law;
pub use sequence::Sequence;
pub use toleranced::Toleranced;

use crate::build::Build;
use crate::catalog::Catalogs;
use crate::check::answer::Verdict;
use crate::check::{FORMAT, Judged, SolveError, judge};
use crate::description::Description;
use crate::problem::Problems;
use crate::quantity::{AmpHours, Fraction};
use draw::Drawn;
use rayon::prelude::*;
use serde::Serialize;
use std::fmt;

/// Draws whose margin is looked for beyond their verdict, to tell what matters.
const MARGINS: usize = 1024;
/// Points tried for each draw wanted, at most: values that contradict each other make no machine and are drawn again.
const TRIES: u64 = 4;
/// Draws a batch: between two, `stop` is asked.
const BATCH: u64 = 1024;

/// How the draws are made.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Wanted {
    /// How many.
    pub runs: u64,
    /// Which sequence.
    pub seed: u64,
    /// State of charge at the first shift's beginning.
    pub start: Fraction,
}

impl Default for Wanted {
    fn default() -> Wanted {
        Wanted {
            runs: 4096,
            seed: 1,
            start: Fraction::ONE,
        }
    }
}

/// The answer.
#[derive(Clone, Debug, Serialize)]
pub struct Odds {
    /// Version of these names.
    pub format: u32,
    /// Name of the build.
    pub build: String,
    /// The verdict on the build as stated.
    pub verdict: Verdict,
    /// Builds drawn and judged; 1 where nothing bears a tolerance.
    pub runs: u64,
    /// Which sequence of draws.
    pub seed: u64,
    /// Share of them that keeps up.
    pub keeps_up_share: Fraction,
    /// Where the share of all such builds lies, at 95 %.
    pub interval: [Fraction; 2],
    /// Spread of the charge lacking each shift.
    pub lacks_ah: Spread,
    /// Draws that no charging can help.
    pub beyond_charging: u64,
    /// Draws whose values contradict each other (a rating that no inductance gives, say): drawn again.
    pub contradictory: u64,
    /// Draws without an answer: drawn again.
    pub unsolved: u64,
    /// What matters most, first: shares of the variance of the current to spare or lacking.
    pub influence: Vec<Influence>,
    /// Share of that variance that no tolerance accounts for by itself; none where nothing differs.
    pub together: Option<Fraction>,
    /// The draw that lacks most, or has least to spare; none where nothing bears a tolerance.
    pub worst: Option<Worst>,
    /// What was drawn.
    pub tolerances: Vec<Toleranced>,
}

/// Charge lacking: 0 where it keeps up, none where no charging can help, and without a battery.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
pub struct Spread {
    /// No more than this in 5 of 100.
    pub p5: Option<AmpHours>,
    /// In half of them.
    pub p50: Option<AmpHours>,
    /// In 95 of 100.
    pub p95: Option<AmpHours>,
}

/// How much one tolerance matters.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Influence {
    /// Which.
    pub what: String,
    /// Its share of the variance.
    pub share: Fraction,
    /// Its path, as `--set` takes it.
    pub path: String,
}

/// The worst draw.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Worst {
    /// Its number in the sequence, from 0.
    pub draw: u64,
    /// Its verdict.
    pub verdict: Verdict,
    /// What it lacks.
    pub lacks_ah: Option<AmpHours>,
    /// Its values, as `--set` takes them.
    pub set: Vec<String>,
}

/// Why there are no odds.
#[derive(Clone, Debug, PartialEq)]
pub enum OddsError {
    /// The build as stated is none.
    Refused(Problems),
    /// The build as stated has no answer.
    Unsolved(SolveError),
    /// There is nothing to judge: no battery, and nothing that states the volts it works within.
    NothingJudged,
    /// No draw had an answer.
    NothingDrawn {
        /// Draws whose values contradict each other.
        contradictory: u64,
        /// Draws without an answer.
        unsolved: u64,
    },
}

impl fmt::Display for OddsError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            OddsError::Refused(problems) => match problems.iter().next() {
                Some(problem) => write!(f, "{}", problem.kind),
                None => f.write_str("the build is refused"),
            },
            OddsError::Unsolved(error) => error.fmt(f),
            OddsError::NothingJudged => f.write_str(
                "nothing to judge: there is no battery to keep charged, and no accessory states the volts it works within (`works: 10.5 V to 16 V`)",
            ),
            OddsError::NothingDrawn {
                contradictory,
                unsolved,
            } => write!(
                f,
                "no draw has an answer: in {contradictory} the values contradict each other, {unsolved} did not converge"
            ),
        }
    }
}

impl std::error::Error for OddsError {}

/// The odds of a description; `told` is called after each draw, on any thread.
///
/// # Errors
/// [`OddsError`]: the build as stated has no answer, or none of the draws has.
pub fn odds(
    description: &Description,
    catalogs: &Catalogs,
    wanted: Wanted,
    told: &(dyn Fn() + Sync),
) -> Result<Odds, OddsError> {
    let nominal = crate::resolve::resolve(description, catalogs).map_err(OddsError::Refused)?;
    let nominal = nominal.starting_at(wanted.start);
    let verdict = judge(&nominal).map_err(OddsError::Unsolved)?;
    if !verdict.is_judged() {
        return Err(OddsError::NothingJudged);
    }
    let drawing = Drawing::new(description, catalogs, &nominal, wanted);
    if drawing.tolerances().is_empty() {
        return Ok(without_tolerances(&nominal, &verdict, wanted));
    }
    let run = Run::new(&drawing, wanted.runs.max(1), told)?;
    Ok(run.odds(&nominal, verdict.verdict(), wanted))
}

/// The odds of a build in which nothing bears a tolerance: itself.
fn without_tolerances(build: &Build, judged: &Judged, wanted: Wanted) -> Odds {
    let share = if judged.keeps_up() {
        Fraction::ONE
    } else {
        Fraction::ZERO
    };
    let lacks = judged.lacks();
    Odds {
        format: FORMAT,
        build: build.name.clone(),
        verdict: judged.verdict(),
        runs: 1,
        seed: wanted.seed,
        keeps_up_share: share,
        interval: [share, share],
        lacks_ah: Spread {
            p5: lacks,
            p50: lacks,
            p95: lacks,
        },
        beyond_charging: u64::from(judged.beyond_charging()),
        contradictory: 0,
        unsolved: 0,
        influence: Vec::new(),
        together: None,
        worst: None,
        tolerances: Vec::new(),
    }
}

/// All draws.
struct Run<'a> {
    drawing: &'a Drawing<'a>,
    /// Number and outcome of each draw, in order.
    drawn: Vec<(u64, Drawn)>,
    contradictory: u64,
    unsolved: u64,
}

impl<'a> Run<'a> {
    fn new(
        drawing: &'a Drawing,
        runs: u64,
        told: &(dyn Fn() + Sync),
    ) -> Result<Run<'a>, OddsError> {
        let mut run = Run {
            drawing,
            drawn: Vec::new(),
            contradictory: 0,
            unsolved: 0,
        };
        let most = runs.saturating_mul(TRIES);
        let mut next = 0;
        while (run.drawn.len() as u64) < runs && next < most {
            let left = runs - run.drawn.len() as u64;
            let batch: Vec<(u64, Result<Drawn, draw::Miss>)> = (next..next + left.min(BATCH))
                .into_par_iter()
                .map(|number| {
                    let outcome = drawing.outcome(number, number < MARGINS as u64);
                    told();
                    (number, outcome)
                })
                .collect();
            next += batch.len() as u64;
            for (number, outcome) in batch {
                match outcome {
                    Ok(drawn) => run.drawn.push((number, drawn)),
                    Err(draw::Miss::Contradictory) => run.contradictory += 1,
                    Err(draw::Miss::Unsolved) => run.unsolved += 1,
                }
            }
        }
        if run.drawn.is_empty() {
            return Err(OddsError::NothingDrawn {
                contradictory: run.contradictory,
                unsolved: run.unsolved,
            });
        }
        Ok(run)
    }

    fn odds(&self, nominal: &Build, verdict: Verdict, wanted: Wanted) -> Odds {
        let runs = self.drawn.len() as u64;
        let keep = |d: &&(u64, Drawn)| d.1.verdict == Verdict::KeepsUp;
        let hits = self.drawn.iter().filter(keep).count() as u64;
        let (influence, together) = self.influence();
        Odds {
            format: FORMAT,
            build: nominal.name.clone(),
            verdict,
            runs,
            seed: wanted.seed,
            keeps_up_share: Fraction(hits as f64 / runs as f64),
            interval: share::interval(hits, runs),
            lacks_ah: self.lacks(),
            beyond_charging: self.drawn.iter().filter(|d| d.1.beyond).count() as u64,
            contradictory: self.contradictory,
            unsolved: self.unsolved,
            influence,
            together,
            worst: self.worst(),
            tolerances: self.drawing.tolerances().to_vec(),
        }
    }

    fn lacks(&self) -> Spread {
        let missing = |d: &(u64, Drawn)| d.1.lacks.map_or(f64::INFINITY, |l| l.0);
        let mut sorted: Vec<f64> = self.drawn.iter().map(missing).collect();
        sorted.sort_by(f64::total_cmp);
        Spread {
            p5: share::quantile(&sorted, 0.05),
            p50: share::quantile(&sorted, 0.5),
            p95: share::quantile(&sorted, 0.95),
        }
    }

    /// The first draw of those that lack most; of those that keep up, that with least to spare.
    fn worst(&self) -> Option<Worst> {
        let mut worst: Option<&(u64, Drawn)> = None;
        for draw in &self.drawn {
            if worst.is_none_or(|(_, w)| draw.1.badness() > w.badness()) {
                worst = Some(draw);
            }
        }
        worst.map(|(number, drawn)| Worst {
            draw: *number,
            verdict: drawn.verdict,
            lacks_ah: drawn.lacks,
            set: self.drawing.written(*number),
        })
    }

    /// Shares of the variance of the margin, the greatest first; where no draw has one, of whether it keeps up.
    fn influence(&self) -> (Vec<Influence>, Option<Fraction>) {
        let with_margin = |d: &&(u64, Drawn)| d.1.margin.is_some();
        let judged: Vec<&(u64, Drawn)> = self.drawn.iter().filter(with_margin).collect();
        let results: Vec<(u64, f64)> = if 2 * judged.len() >= self.drawn.len().min(MARGINS) {
            let margin = |d: &&(u64, Drawn)| (d.0, d.1.margin.unwrap_or_default());
            judged.iter().take(MARGINS).map(margin).collect()
        } else {
            let keeps = |d: &(u64, Drawn)| f64::from(u8::from(d.1.verdict == Verdict::KeepsUp));
            self.drawn.iter().map(|d| (d.0, keeps(d))).collect()
        };
        let points: Vec<Vec<f64>> = results
            .iter()
            .map(|(n, _)| self.drawing.point(*n))
            .collect();
        let results: Vec<f64> = results.iter().map(|(_, y)| *y).collect();
        let Some(shares) = influence::first_order(&points, &results) else {
            return (Vec::new(), None);
        };
        let together = Fraction((1.0 - shares.iter().map(|s| s.0).sum::<f64>()).max(0.0));
        let mut all: Vec<Influence> = self
            .drawing
            .tolerances()
            .iter()
            .zip(shares)
            .map(|(t, share)| Influence {
                what: t.what.clone(),
                share,
                path: t.path.clone(),
            })
            .collect();
        all.sort_by(|a, b| b.share.0.total_cmp(&a.share.0));
        (all, Some(together))
    }
}
