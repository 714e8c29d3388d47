//! Charts as inline SVG: classes for colour, so that one drawing serves light, dark and print.
//!
//! A page holds each chart twice, for wide and for narrow windows, and shows
//! one: scaling one drawing down would make its text too small to read.

use super::labels::{self, Obstacles, Rect};
use super::scale::Scale;
use super::{Body, Chart, Layer, Plane, Role, Shape, svg_bars, svg_fill, svg_spans};
use maud::{Markup, html};

/// The size of a drawing in its own units, one to a pixel.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Size {
    /// Width.
    pub width: f64,
    /// Height of the plotted area.
    pub plot: f64,
    /// Text size.
    pub text: f64,
    /// Most ticks across.
    pub ticks: usize,
    /// Room for direct labels, at most.
    pub margin: f64,
}

/// For windows of 600 pixels and more, and for print.
pub const WIDE: Size = Size {
    width: 720.0,
    plot: 170.0,
    text: 12.0,
    ticks: 9,
    margin: 130.0,
};
/// For telephones.
pub const NARROW: Size = Size {
    width: 360.0,
    plot: 145.0,
    text: 12.0,
    ticks: 5,
    margin: 76.0,
};

/// Space below it, for the ticks.
pub(super) const BELOW: f64 = 24.0;
/// Space to its left, for the ticks.
pub(super) const LEFT: f64 = 46.0;
/// A bold text is about so much wider.
pub(super) const BOLD: f64 = 1.08;

/// Draws a chart. `id` distinguishes it from the others on the page.
#[must_use]
pub fn draw(chart: &Chart, size: Size, id: &str) -> Markup {
    let (height, drawn) = match &chart.body {
        Body::Plane(plane) => draw_plane(plane, size, id),
        Body::Bars(bars) => svg_bars::draw(bars, size),
    };
    html! {
        svg xmlns="http://www.w3.org/2000/svg" class="chart" role="img"
            viewBox=(format!("0 0 {} {}", n(size.width), n(height)))
            width=(n(size.width)) height=(n(height)) font-size=(n(size.text))
            aria-labelledby=(format!("{id}-title {id}-desc")) {
            title id=(format!("{id}-title")) { (chart.title) }
            desc id=(format!("{id}-desc")) { (chart.description) }
            (drawn)
        }
    }
}

/// A number in a drawing: at most one decimal; nothing that is not a number.
pub(super) fn n(number: f64) -> String {
    if !number.is_finite() {
        return "0".to_owned();
    }
    let text = format!("{number:.1}");
    text.strip_suffix(".0").unwrap_or(&text).to_owned()
}

/// Name of a role in class names.
pub(super) fn class(role: Role) -> &'static str {
    match role {
        Role::Supply => "supply",
        Role::Draw => "draw",
        Role::Pays => "pays",
        Role::Band => "band",
        Role::Charge => "charge",
        Role::Limit => "limit",
        Role::Other => "other",
    }
}

/// A plane laid out.
pub(super) struct Frame<'a> {
    pub(super) plane: &'a Plane,
    pub(super) size: Size,
    id: &'a str,
    pub(super) x: Scale,
    pub(super) y: Scale,
    pub(super) area: Rect,
}

/// Draws lines and areas; gives the height too.
fn draw_plane(plane: &Plane, size: Size, id: &str) -> (f64, Markup) {
    let margin = label_margin(plane, size);
    let above = svg_spans::space_above(plane, size);
    let area = Rect {
        left: LEFT,
        top: above,
        right: size.width - margin,
        bottom: above + size.plot,
    };
    let frame = Frame {
        plane,
        size,
        id,
        x: Scale::new(&plane.x, area.left, area.right, size.ticks, false),
        y: Scale::new(&plane.y, area.bottom, area.top, 6, true),
        area,
    };
    let mut obstacles = frame.obstacles();
    let (keys_height, keys) = frame.keys();
    let drawn = html! {
        (frame.spans())
        (frame.grid())
        @for layer in &plane.layers { (frame.layer(layer)) }
        (frame.references(&mut obstacles))
        (frame.marks(&mut obstacles))
        (frame.direct_labels())
        (keys)
    };
    (area.bottom + BELOW + keys_height, drawn)
}

/// Room for the labels at the right end: as wide as the widest needs it, but no more than the size
/// lets them have, for they wrap; yet never less than the longest word.
fn label_margin(plane: &Plane, size: Size) -> f64 {
    let layers = plane.layers.iter().filter(|l| is_direct(l));
    let level = plane.references.iter().filter(|r| !r.upright);
    let labels = layers.map(|l| &l.label).chain(level.map(|r| &r.label));
    let width = |text: &str| labels::text_width(text, size.text) * BOLD + 12.0;
    let (mut widest, mut longest) = (14.0, 14.0);
    for label in labels {
        widest = width(label).max(widest);
        for word in labels::wrap(label, 0.0, size.text) {
            longest = width(&word).max(longest);
        }
    }
    widest.min(size.margin).max(longest)
}

/// Whether a layer is labelled at its right end; areas without an edge have a key below instead.
pub(super) fn is_direct(layer: &Layer) -> bool {
    !layer.label.is_empty() && !matches!(layer.role, Role::Pays | Role::Band)
}

impl Frame<'_> {
    fn point(&self, x: f64, y: f64) -> (f64, f64) {
        (self.x.place(x), self.y.place(y))
    }

    /// Ticks of both axes with their lines.
    fn grid(&self) -> Markup {
        html! {
            @for (at, text) in &self.y.ticks {
                @let y = self.y.place(*at);
                line class="grid" x1=(n(self.area.left)) x2=(n(self.area.right)) y1=(n(y)) y2=(n(y)) {}
                text class="quiet" x=(n(self.area.left - 6.0)) y=(n(y + 4.0)) text-anchor="end" { (text) }
            }
            @let zero = self.y.place(0.0f64.clamp(self.y.low, self.y.high));
            line class="axis" x1=(n(self.area.left)) x2=(n(self.area.right)) y1=(n(zero)) y2=(n(zero)) {}
            @for (at, text) in &self.x.ticks {
                @let x = self.x.place(*at);
                line class="axis" x1=(n(x)) x2=(n(x)) y1=(n(self.area.bottom)) y2=(n(self.area.bottom + 4.0)) {}
                @let (number, unit) = text.split_once(' ').unwrap_or((text, ""));
                @let (y, half) = (self.area.bottom + 17.0, labels::text_width(number, self.size.text) / 2.0);
                text class="quiet" x=(n(x)) y=(n(y)) text-anchor="middle" { (number) }
                @if !unit.is_empty() { text class="quiet" x=(n(x + half + 4.0)) y=(n(y)) { (unit) } }
            }
        }
    }

    /// A line or an area. The area of what is drawn has its upper edge as a dashed line.
    fn layer(&self, layer: &Layer) -> Markup {
        let class = class(layer.role);
        match &layer.shape {
            Shape::Line(pieces) => html! {
                @for piece in pieces {
                    path class=(format!("line {class}"))
                        d=(self.path(piece.iter().map(|(x, y)| (*x, *y)), false)) {}
                }
            },
            Shape::Area(pieces) => html! {
                @if !pieces.is_empty() {
                    (svg_fill::fill(layer.role, &self.outline(pieces), self.bounds(pieces), &self.clip(layer.role, "")))
                }
                @if layer.role == Role::Draw {
                    @for edge in upper_edges(pieces) {
                        path class="line draw" d=(self.path(edge.into_iter(), false)) {}
                    }
                }
            },
        }
    }

    /// The id of a filling's clip.
    pub(super) fn clip(&self, role: Role, what: &str) -> String {
        format!("{}-{}{what}", self.id, class(role))
    }

    /// The outline of an area's pieces.
    fn outline(&self, pieces: &[Vec<(f64, f64, f64)>]) -> String {
        let piece = |piece: &Vec<(f64, f64, f64)>| {
            let there = piece.iter().map(|(x, _, high)| (*x, *high));
            let back = piece.iter().rev().map(|(x, low, _)| (*x, *low));
            self.path(there.chain(back), true)
        };
        pieces.iter().map(piece).collect()
    }

    /// The rectangle about an area's pieces.
    fn bounds(&self, pieces: &[Vec<(f64, f64, f64)>]) -> Rect {
        let corners = pieces
            .iter()
            .flatten()
            .flat_map(|(x, low, high)| [self.point(*x, *low), self.point(*x, *high)]);
        let none = Rect {
            left: f64::MAX,
            top: f64::MAX,
            right: f64::MIN,
            bottom: f64::MIN,
        };
        corners.fold(none, |r, (x, y)| Rect {
            left: r.left.min(x),
            top: r.top.min(y),
            right: r.right.max(x),
            bottom: r.bottom.max(y),
        })
    }

    fn path(&self, points: impl Iterator<Item = (f64, f64)>, close: bool) -> String {
        let mut path = String::new();
        for (x, y) in points {
            let (x, y) = self.point(x, y);
            let command = if path.is_empty() { 'M' } else { 'L' };
            path.push_str(&format!("{command}{} {}", n(x), n(y)));
        }
        if close {
            path.push('Z');
        }
        path
    }

    /// Every line drawn, for labels to keep away from.
    fn obstacles(&self) -> Obstacles {
        let mut obstacles = Obstacles::default();
        let mut add = |points: Vec<(f64, f64)>| {
            let places: Vec<(f64, f64)> = points.iter().map(|(x, y)| self.point(*x, *y)).collect();
            obstacles
                .lines
                .extend(places.windows(2).map(|pair| (pair[0], pair[1])));
        };
        for layer in &self.plane.layers {
            match &layer.shape {
                Shape::Line(pieces) => pieces.iter().for_each(|piece| add(piece.clone())),
                Shape::Area(pieces) => {
                    for piece in pieces {
                        add(piece.iter().map(|(x, low, _)| (*x, *low)).collect());
                        add(piece.iter().map(|(x, _, high)| (*x, *high)).collect());
                    }
                }
            }
        }
        for reference in &self.plane.references {
            let at = reference.at;
            add(if reference.upright {
                vec![(at, self.y.low), (at, self.y.high)]
            } else {
                vec![(self.x.low, at), (self.x.high, at)]
            });
        }
        obstacles
    }

    /// Straight lines across; upright ones with their label beside them.
    fn references(&self, obstacles: &mut Obstacles) -> Markup {
        html! {
            @for reference in &self.plane.references {
                @let class = class(reference.role);
                @if reference.upright {
                    @let x = self.x.place(reference.at);
                    line class=(format!("line {class}")) x1=(n(x)) x2=(n(x))
                        y1=(n(self.area.top)) y2=(n(self.area.bottom)) {}
                    (self.label_near(x, self.area.top - 2.0, &reference.label, class, obstacles))
                } @else {
                    @let y = self.y.place(reference.at);
                    line class=(format!("line {class}")) x1=(n(self.area.left))
                        x2=(n(self.area.right)) y1=(n(y)) y2=(n(y)) {}
                }
            }
        }
    }

    /// Labelled points.
    fn marks(&self, obstacles: &mut Obstacles) -> Markup {
        html! {
            @for mark in &self.plane.marks {
                @let (x, y) = self.point(mark.x, mark.y);
                circle class="mark" cx=(n(x)) cy=(n(y)) r="4" {}
                (self.label_near(x, y, &mark.label, "mark", obstacles))
            }
        }
    }
}

/// The upper edges of an area's pieces: one line for those that meet.
fn upper_edges(pieces: &[Vec<(f64, f64, f64)>]) -> Vec<Vec<(f64, f64)>> {
    let mut edges: Vec<Vec<(f64, f64)>> = Vec::new();
    for piece in pieces {
        let edge = piece.iter().map(|(x, _, high)| (*x, *high));
        let meets = |line: &&mut Vec<(f64, f64)>| {
            let end = line.last().map(|(x, _)| *x);
            end.zip(piece.first().map(|(x, _, _)| *x))
                .is_some_and(|(end, begin)| begin - end <= 1e-9)
        };
        match edges.last_mut().filter(meets) {
            Some(line) => line.extend(edge),
            None => edges.push(edge.collect()),
        }
    }
    edges
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::chart::Plot;
    use crate::quantity::{Amps, Hours};

    fn drawn(chart: &Chart, size: Size) -> String {
        draw(chart, size, "c").into_string()
    }

    #[test]
    fn true_steps_stand_upright() {
        let steps =
            [(0.0, 1.0, 8.0), (1.0, 2.0, 2.0)].map(|(a, b, y)| (Hours(a), Hours(b), Amps(y)));
        let chart = Plot::<Hours, Amps>::new("t")
            .steps("", Role::Supply, steps)
            .finish("d");
        let svg = drawn(&chart, WIDE);
        // Plotted from 46 to 706 across, 180 to 10 up: 8 A is the top, 2 A a quarter of it.
        assert!(
            svg.contains("class=\"line supply\" d=\"M46 10L376 10L376 137.5L706 137.5\""),
            "{svg}"
        );
    }

    #[test]
    fn nothing_drawn_leaves_a_gap_in_the_edge() {
        let step = |from: f64, to: f64, high: f64| (Hours(from), Hours(to), Amps(0.0), Amps(high));
        let steps = [
            step(0.0, 1.0, 5.0),
            step(1.0, 2.0, 8.0),
            step(2.0, 3.0, 0.0),
            step(3.0, 4.0, 8.0),
        ];
        let chart = Plot::<Hours, Amps>::new("t")
            .step_area("", Role::Draw, steps)
            .finish("d");
        let svg = drawn(&chart, WIDE);
        assert_eq!(svg.matches("class=\"line draw\"").count(), 2, "{svg}");
    }

    #[test]
    fn names_are_escaped_and_ids_carry_the_charts_own() {
        let chart = Plot::<Hours, Amps>::new("<t>")
            .line(
                "a<b",
                Role::Charge,
                [(Hours(0.0), Amps(1.0)), (Hours(1.0), Amps(2.0))],
            )
            .finish("d & e");
        let svg = drawn(&chart, WIDE);
        assert!(svg.contains("&lt;t&gt;") && svg.contains("a&lt;b") && svg.contains("d &amp; e"));
        assert!(svg.contains("aria-labelledby=\"c-title c-desc\""));
    }

    #[test]
    fn hatching_comes_with_its_key_and_only_where_there_is_any() {
        let with = |high: f64| {
            Plot::<Hours, Amps>::new("t")
                .step_area(
                    "pays",
                    Role::Pays,
                    [(Hours(0.0), Hours(1.0), Amps(2.0), Amps(high))],
                )
                .steps("s", Role::Supply, [(Hours(0.0), Hours(1.0), Amps(2.0))])
                .finish("d")
        };
        let svg = drawn(&with(5.0), WIDE);
        assert!(svg.contains("clip-path=\"url(#c-pays)\"") && svg.contains(">pays</text>"));
        let svg = drawn(&with(2.0), WIDE);
        assert!(!svg.contains("pays"), "{svg}");
    }

    #[test]
    fn direct_labels_keep_apart() {
        let line = |y: f64| [(Hours(0.0), Amps(y)), (Hours(1.0), Amps(y))];
        let chart = Plot::<Hours, Amps>::new("t")
            .line("one", Role::Supply, line(5.0))
            .line("two", Role::Other, line(5.0))
            .level("three", Role::Limit, Amps(5.0))
            .finish("d");
        let svg = drawn(&chart, WIDE);
        let mut places: Vec<f64> = svg
            .split("<text class=\"label ")
            .skip(1)
            .filter_map(|t| t.split(" y=\"").nth(1)?.split('"').next()?.parse().ok())
            .collect();
        places.sort_by(f64::total_cmp);
        assert_eq!(places.len(), 3);
        assert!(
            places.windows(2).all(|p| p[1] - p[0] >= WIDE.text),
            "{places:?}"
        );
    }
}
