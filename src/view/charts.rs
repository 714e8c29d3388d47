//! The charts of the answers, from typed figures to what is drawn and its words.

use super::{accessories, check};
use crate::chart::{Chart, Days, Plot, Role};
use crate::check::answer::{AccessoryRow, Check, StateRow, StepRow, TraceRow};
use crate::quantity::{Amps, Celsius, Fraction, Hours, Minutes, Rpm, format};
use crate::report::Tone;

/// The charts of a check: amps over the shift, charge over the shift, charge over the days as far
/// as the trace goes on after the first shift. Those with nothing to show are left out.
#[must_use]
pub fn of_check(answer: &Check, trace: &[TraceRow]) -> Vec<Chart> {
    let mut charts = vec![amps(answer)];
    if answer.settles_soc.is_some() || answer.reserve_soc.is_some() {
        charts.push(charge(answer, trace));
        charts.extend(days(answer, trace));
    }
    charts.retain(|chart| !chart.is_empty());
    charts
}

fn hours(minutes: Minutes) -> Hours {
    Hours::from_minutes(minutes.0)
}

/// A step's beginning and end.
fn stretch(step: &StepRow) -> (Hours, Hours) {
    (
        hours(step.starts_min),
        hours(Minutes(step.starts_min.0 + step.minutes.0)),
    )
}

/// The steps of the shift itself, without the parking after it.
fn shift(answer: &Check) -> impl Iterator<Item = &StepRow> {
    answer.steps.iter().filter(|step| step.state != "parked")
}

/// The steps that are long enough to draw, each with the means of its state. Starts are left out:
/// seconds at ten times the amps.
fn drawn(answer: &Check) -> Vec<(Hours, Hours, &StateRow)> {
    shift(answer)
        .filter(|step| step.state != "crank")
        .filter_map(|step| {
            let state = answer.states.iter().find(|s| s.state == step.state)?;
            let (from, to) = stretch(step);
            Some((from, to, state))
        })
        .collect()
}

/// Names the steps of the shift along the x axis.
fn spans<Y: format::Written>(plot: Plot<Hours, Y>, answer: &Check) -> Plot<Hours, Y> {
    shift(answer)
        .filter(|step| step.state != "crank")
        .fold(plot, |plot, step| {
            let (from, to) = stretch(step);
            plot.span(&step.state, Tone::Plain, from, to)
        })
}

/// Amps the source can give against amps drawn through the shift: hatched where the battery pays,
/// dotted what more it pays with all that cycles on at once.
#[must_use]
pub fn amps(answer: &Check) -> Chart {
    let steps = drawn(answer);
    let pays = |s: &StateRow| (-s.battery_a).max(Amps::ZERO);
    let more = |s: &StateRow| (s.battery_a - s.worst_battery_a).max(Amps::ZERO);
    let battery = answer.reserve_soc.is_some();
    let end = steps.last().map_or(Hours(1.0), |step| step.1);
    let mut plot = spans(Plot::<Hours, Amps>::new("Amps over the shift"), answer).step_area(
        "drawn",
        Role::Draw,
        steps
            .iter()
            .map(|(a, b, s)| (*a, *b, Amps::ZERO, s.loads_a)),
    );
    if battery {
        plot = plot
            .step_area(
                "the battery pays",
                Role::Pays,
                steps
                    .iter()
                    .map(|(a, b, s)| (*a, *b, s.loads_a - pays(s), s.loads_a)),
            )
            .step_area(
                "it pays more with all on at once",
                Role::Band,
                steps
                    .iter()
                    .map(|(a, b, s)| (*a, *b, s.loads_a, s.loads_a + more(s))),
            );
    }
    let gives = steps.iter().map(|(a, b, s)| (*a, *b, s.available_a));
    plot.steps("can give", Role::Supply, gives)
        .x_between(Hours::ZERO, end)
        .finish(amps_words(&steps))
}

fn amps_words(steps: &[(Hours, Hours, &StateRow)]) -> String {
    let mut seen: Vec<&str> = Vec::new();
    let mut parts = Vec::new();
    for (_, _, state) in steps {
        if !seen.contains(&state.state.as_str()) {
            seen.push(&state.state);
            parts.push(format!(
                "{}: the source can give {}, the accessories draw {}, battery {}",
                state.state,
                format::text(state.available_a),
                format::text(state.loads_a),
                format::text_signed(state.battery_a)
            ));
        }
    }
    format!("{}.", parts.join("; "))
}

/// Charge through the first shift against the reserve, its low point labelled.
#[must_use]
pub fn charge(answer: &Check, trace: &[TraceRow]) -> Chart {
    let end = shift(answer)
        .last()
        .map_or(Hours::ZERO, |step| stretch(step).1);
    let mut points: Vec<(Hours, Fraction)> = trace
        .iter()
        .map(|row| (hours(row.minutes), row.soc))
        .filter(|(at, _)| at.0 <= end.0 + 1e-6)
        .collect();
    if points.len() < 2 {
        points = shift(answer)
            .flat_map(|step| {
                let (from, to) = stretch(step);
                [(from, step.soc_start), (to, step.soc_end)]
            })
            .collect();
    }
    let plot = spans(
        Plot::<Hours, Fraction>::new("Battery charge, first shift"),
        answer,
    )
    .line("charge", Role::Charge, points.iter().copied());
    let low = lowest(&points);
    let plot = match low {
        Some((at, soc)) => plot.mark(
            format!("low {} at {}", format::percent(soc), clock(at)),
            at,
            soc,
        ),
        None => plot,
    };
    let words = charge_words(
        "Over the first shift",
        points.first(),
        points.last(),
        low,
        answer,
    );
    reserve(plot, answer)
        .y_between(foot(answer, low), Fraction::ONE)
        .finish(words)
}

/// Charge from shift to shift, where the trace goes on after the first.
fn days(answer: &Check, trace: &[TraceRow]) -> Option<Chart> {
    let end = shift(answer).last().map(|step| stretch(step).1)?;
    let last = hours(trace.last()?.minutes);
    if last.0 < end.0 + 24.0 {
        return None;
    }
    let points: Vec<(Days, Fraction)> = trace
        .iter()
        .map(|row| (Days(row.minutes.0 / 1440.0), row.soc))
        .collect();
    let low = lowest(&points);
    let plot = Plot::<Days, Fraction>::new("Battery charge over the days").line(
        "charge",
        Role::Charge,
        points.iter().copied(),
    );
    let plot = match low {
        Some((at, soc)) => plot.mark(format!("low {}", format::percent(soc)), at, soc),
        None => plot,
    };
    let over = format!(
        "Over {} days",
        format::fixed(Days((last.0 / 24.0).ceil()), 0)
    );
    let words = charge_words(&over, points.first(), points.last(), low, answer);
    Some(
        reserve(plot, answer)
            .y_between(foot(answer, low), Fraction::ONE)
            .finish(words),
    )
}

fn reserve<X: format::Written>(plot: Plot<X, Fraction>, answer: &Check) -> Plot<X, Fraction> {
    match check::reserve(answer) {
        Some(reserve) => plot.level(
            format!("reserve {}", format::percent(reserve)),
            Role::Limit,
            reserve,
        ),
        None => plot,
    }
}

/// Where the axis of charge begins: a round figure under the reserve and the lowest charge, so
/// that a small margin shows.
fn foot<X>(answer: &Check, low: Option<(X, Fraction)>) -> Fraction {
    let low = low.map_or(Fraction::ZERO, |(_, soc)| soc);
    let least = check::reserve(answer).map_or(low, |reserve| reserve.min(low));
    Fraction((((least.0 - 0.05) * 5.0).floor() / 5.0).clamp(0.0, 0.8))
}

/// The point of least charge.
fn lowest<X: Copy>(points: &[(X, Fraction)]) -> Option<(X, Fraction)> {
    points
        .iter()
        .filter(|(_, soc)| soc.is_finite())
        .min_by(|a, b| a.1.0.total_cmp(&b.1.0))
        .copied()
}

fn charge_words<X>(
    over: &str,
    first: Option<&(X, Fraction)>,
    last: Option<&(X, Fraction)>,
    low: Option<(X, Fraction)>,
    answer: &Check,
) -> String {
    let percent = |point: Option<&(X, Fraction)>| {
        point.map_or(format::NO_NUMBER.to_owned(), |(_, soc)| {
            format::percent(*soc)
        })
    };
    let reserve = match (answer.reserve_soc, check::reserve(answer)) {
        (_, Some(reserve)) => format!(", against a reserve of {}", format::percent(reserve)),
        (Some(_), None) => ", and not even a full battery would do".to_owned(),
        (None, None) => String::new(),
    };
    format!(
        "{over} the charge goes from {} to {}; its lowest is {}{}.",
        percent(first),
        percent(last),
        percent(low.as_ref()),
        reserve
    )
}

/// Time in a shift as hours and minutes: `1:59`.
fn clock(at: Hours) -> String {
    let minutes = at.minutes().max(0.0).round();
    format!("{}:{:02}", (minutes / 60.0).floor(), minutes % 60.0)
}

/// Ah of a shift by accessory, the largest twelve.
#[must_use]
pub fn by_accessory(rows: &[AccessoryRow]) -> Chart {
    const MOST: usize = 12;
    let shown = rows
        .iter()
        .take(MOST)
        .map(|row| (accessories::name(row), row.ah));
    let words = rows.iter().take(MOST).map(|row| {
        format!(
            "{} {} ({})",
            accessories::name(row),
            format::text(row.ah),
            format::percent(row.share)
        )
    });
    let words = format!("In a shift: {}.", words.collect::<Vec<_>>().join(", "));
    let chart = Chart::bars("Ampere-hours by accessory", shown, words);
    if rows.len() > MOST {
        chart.note(format!(
            "The largest {MOST} of {}; all are in the table.",
            rows.len()
        ))
    } else {
        chart
    }
}

/// What a chart of a winding's output shows.
#[derive(Clone, Debug, Default)]
pub struct Output<'a> {
    /// Lines: each a label, `at 14.4 V`, and its points.
    pub lines: Vec<(String, Vec<(Rpm, Amps)>)>,
    /// What the accessories draw, where it is known.
    pub demand: Option<Amps>,
    /// Speed at which the source begins to give.
    pub cut_in: Option<Rpm>,
    /// Speed at which it gives what is drawn.
    pub break_even: Option<Rpm>,
    /// The build's own speeds, named.
    pub speeds: &'a [(String, Rpm)],
}

/// Output of a winding against speed, with the demand, the cut-in and the break-even speed.
#[must_use]
pub fn output(title: &str, output: &Output) -> Chart {
    let mut plot = Plot::<Rpm, Amps>::new(title);
    let mut words = Vec::new();
    for (index, (label, points)) in output.lines.iter().enumerate() {
        let role = if index == 0 {
            Role::Supply
        } else {
            Role::Other
        };
        plot = plot.line(label, role, points.iter().copied());
        if let Some((rpm, amps)) = points.last() {
            words.push(format!(
                "{label}: {} at {}",
                format::text(*amps),
                format::text(*rpm)
            ));
        }
    }
    if let Some(demand) = output.demand {
        plot = plot.level(
            format!("drawn {}", format::text(demand)),
            Role::Limit,
            demand,
        );
        words.push(format!("the accessories draw {}", format::text(demand)));
    }
    for (name, speed) in [("cut-in", output.cut_in), ("break-even", output.break_even)] {
        if let Some(speed) = speed {
            let label = format!("{name} {}", format::text(speed));
            words.push(label.clone());
            plot = plot.at(
                label,
                if name == "cut-in" {
                    Role::Other
                } else {
                    Role::Limit
                },
                speed,
            );
        }
    }
    for (name, speed) in output.speeds {
        plot = plot.at(name, Role::Draw, *speed);
    }
    plot.finish(format!("{}.", words.join("; ")))
}

/// One temperature of a season.
#[derive(Clone, Debug)]
pub struct SeasonPoint {
    /// Air temperature.
    pub air: Celsius,
    /// Charge it settles at; none where it breaks the reserve.
    pub settles: Option<Fraction>,
    /// The reserve there.
    pub reserve: Fraction,
    /// Whether it keeps up.
    pub keeps_up: bool,
}

/// Settled charge and reserve against air temperature; shaded by verdict, and named.
#[must_use]
pub fn season(points: &[SeasonPoint]) -> Chart {
    let mut plot = Plot::<Celsius, Fraction>::new("Charge over the season");
    let mut runs: Vec<(bool, Celsius, Celsius)> = Vec::new();
    for (index, point) in points.iter().enumerate() {
        // The verdict changes half way between two temperatures.
        let middle = |other: Option<&SeasonPoint>| {
            other.map_or(point.air, |o| Celsius(f64::midpoint(o.air.0, point.air.0)))
        };
        let from = middle(index.checked_sub(1).and_then(|i| points.get(i)));
        let to = middle(points.get(index + 1));
        match runs.last_mut() {
            Some(run) if run.0 == point.keeps_up => run.2 = to,
            _ => runs.push((point.keeps_up, from, to)),
        }
    }
    let mut words = Vec::new();
    for (keeps_up, from, to) in runs {
        let (name, tone) = if keeps_up {
            ("keeps up", Tone::Good)
        } else {
            ("falls short", Tone::Bad)
        };
        plot = plot.span(name, tone, from, to);
        words.push(format!(
            "{name} from {} to {}",
            format::temperature(from),
            format::temperature(to)
        ));
    }
    let settled = points
        .iter()
        .map(|p| (p.air, p.settles.unwrap_or(Fraction(f64::NAN))));
    plot.line(
        "reserve",
        Role::Limit,
        points.iter().map(|p| (p.air, p.reserve)),
    )
    .line("settles at", Role::Charge, settled)
    .y_between(Fraction::ZERO, Fraction::ONE)
    .finish(format!("By air temperature: {}.", words.join("; ")))
}

/// How much each tolerance matters: share of the spread, largest first.
#[must_use]
pub fn influence(shares: &[(String, Fraction)]) -> Chart {
    let words = shares
        .iter()
        .map(|(what, share)| format!("{what} {}", format::percent(*share)));
    let words = format!(
        "Share of the spread: {}.",
        words.collect::<Vec<_>>().join(", ")
    );
    Chart::bars(
        "Which tolerance matters most",
        shares.iter().cloned(),
        words,
    )
}
