//! Named stretches of the x axis as SVG: shaded, those that are not in order hatched too, their names
//! above the plotted area.

use super::labels;
use super::svg::{Frame, LEFT, Size, n};
use super::{Plane, Span, svg_fill};
use crate::report::Tone;
use maud::{Markup, html};

/// Space above the plotted area: for names of spans in one or two lines, or for half a tick's text.
pub(super) fn space_above(plane: &Plane, size: Size) -> f64 {
    let long = |span: &Span| {
        let share = (span.to - span.from) / (plane.x.high - plane.x.low);
        lines(span, share * (size.width - LEFT - size.margin), size).len() > 1
    };
    match plane.spans.as_slice() {
        [] => 10.0,
        spans if spans.iter().any(long) => 32.0,
        _ => 20.0,
    }
}

/// A name and where it stands: its middle, its half width, its lines.
struct Name<'a> {
    label: &'a str,
    middle: f64,
    half: f64,
    lines: Vec<String>,
}

impl Frame<'_> {
    /// The stretches: every other plain one shaded, the others by what they mean.
    pub(super) fn spans(&self) -> Markup {
        html! {
            @for (index, span) in self.plane.spans.iter().enumerate() {
                @let (left, right) = (self.x.place(span.from), self.x.place(span.to));
                rect class=(class(index, span.tone)) x=(n(left)) y=(n(self.area.top))
                    width=(n(right - left)) height=(n(self.area.bottom - self.area.top)) {}
                @if span.tone == Tone::Bad {
                    @let rect = labels::Rect { left, right, ..self.area };
                    (svg_fill::fill(super::Role::Limit, &svg_fill::outline(rect), rect, &self.clip(super::Role::Limit, &format!("-{index}"))))
                }
            }
            @for name in self.names() {
                @for (line, text) in name.lines.iter().rev().enumerate() {
                    @let up = 6.0 + if line == 0 { 0.0 } else { self.size.text };
                    text class="quiet small" x=(n(name.middle)) y=(n(self.area.top - up))
                        text-anchor="middle" { (text) }
                }
            }
        }
    }

    /// The names that are written: one that would run into another is left
    /// out where the same name stands elsewhere, for the shading is the same.
    fn names(&self) -> Vec<Name<'_>> {
        let width = |span: &Span| self.x.place(span.to) - self.x.place(span.from);
        let mut spans: Vec<&Span> = self.plane.spans.iter().collect();
        spans.sort_by(|a, b| width(b).total_cmp(&width(a)));
        // the widest of each name before all others
        let again = |index: usize, span: &Span| {
            let mut wider = spans.iter().take(index);
            wider.any(|other| other.label == span.label)
        };
        let (rest, first): (Vec<_>, Vec<_>) =
            (spans.iter().copied().enumerate()).partition(|(index, span)| again(*index, span));
        let mut names: Vec<Name> = Vec::new();
        for (_, span) in first.into_iter().chain(rest) {
            let lines = lines(span, width(span), self.size);
            let widths = lines
                .iter()
                .map(|l| labels::text_width(l, self.size.text - 1.0));
            let name = Name {
                label: &span.label,
                middle: f64::midpoint(self.x.place(span.from), self.x.place(span.to)),
                half: widths.fold(0.0, f64::max) / 2.0,
                lines,
            };
            let runs_into =
                |other: &Name| (other.middle - name.middle).abs() < other.half + name.half + 2.0;
            let said = names.iter().any(|other| other.label == name.label);
            if !(name.lines.is_empty() || said && names.iter().any(runs_into)) {
                names.push(name);
            }
        }
        names
    }
}

/// The lines of a span's name: one where there is room. What has a meaning is never left to its
/// colour alone: it takes two lines or runs over its ends.
fn lines(span: &Span, width: f64, size: Size) -> Vec<String> {
    let text = size.text - 1.0;
    if labels::text_width(&span.label, text) <= width + 4.0 {
        return vec![span.label.clone()];
    }
    if matches!(span.tone, Tone::Plain | Tone::Dim) {
        return Vec::new();
    }
    let (first, rest) = span.label.split_once(' ').unwrap_or((&span.label, ""));
    [first, rest]
        .into_iter()
        .filter(|l| !l.is_empty())
        .map(str::to_owned)
        .collect()
}

/// Class of a span: by its tone, or shaded by turns.
fn class(index: usize, tone: Tone) -> &'static str {
    match tone {
        Tone::Good => "span good",
        Tone::Warn => "span warn",
        Tone::Bad => "span bad",
        Tone::Plain | Tone::Dim if index % 2 == 1 => "span turn",
        Tone::Plain | Tone::Dim => "span",
    }
}

#[cfg(test)]
mod tests {
    use crate::chart::svg::{NARROW, draw};
    use crate::chart::{Plot, Role};
    use crate::quantity::{Fraction, Hours};
    use crate::report::Tone;

    #[test]
    fn a_meaning_is_never_left_to_colour_alone() {
        let line = [(Hours(0.0), Fraction(0.5)), (Hours(100.0), Fraction(0.6))];
        let chart = Plot::<Hours, Fraction>::new("t")
            .span("falls short", Tone::Bad, Hours(0.0), Hours(10.0))
            .span("idle", Tone::Plain, Hours(10.0), Hours(11.0))
            .span("keeps up", Tone::Good, Hours(11.0), Hours(100.0))
            .line("", Role::Charge, line)
            .finish("d");
        let svg = draw(&chart, NARROW, "c").into_string();
        assert!(
            svg.contains(">falls</text>") && svg.contains(">short</text>"),
            "{svg}"
        );
        assert!(svg.contains(">keeps up</text>") && !svg.contains(">idle<"));
        assert_eq!(svg.matches("strokes limit").count(), 1, "hatched too");
    }

    #[test]
    fn narrow_stretches_do_not_run_into_each_other() {
        let line = [(Hours(0.0), Fraction(0.5)), (Hours(60.0), Fraction(0.6))];
        let mut plot = Plot::<Hours, Fraction>::new("t").line("", Role::Charge, line);
        for (name, tone, from, to) in [
            ("falls short", Tone::Bad, 0.0, 2.5),
            ("keeps up", Tone::Good, 2.5, 7.5),
            ("falls short", Tone::Bad, 7.5, 12.5),
            ("keeps up", Tone::Good, 12.5, 60.0),
        ] {
            plot = plot.span(name, tone, Hours(from), Hours(to));
        }
        let svg = draw(&plot.finish("d"), NARROW, "c").into_string();
        assert_eq!(svg.matches(">keeps up</text>").count(), 1, "{svg}");
        assert!(!svg.contains(">keeps</text>"), "{svg}");
        assert!(svg.contains(">falls</text>"), "{svg}");
    }
}
