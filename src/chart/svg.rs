//! Charts as inline SVG: classes for colour, so that one drawing serves light, dark and print.
//!
//! A page holds each chart twice, for wide and for narrow windows, and shows
//! one: scaling one drawing down would make its text too small to read.

use super::labels::{self, Obstacles, Rect};
use super::scale::Scale;
use super::{Body, Chart, Layer, Plane, Role, Shape, svg_bars};
use crate::report::Tone;
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
    plot: 170.0,
    text: 12.0,
    ticks: 5,
    margin: 76.0,
};

/// Space above the plotted area, for the names of spans.
const ABOVE: f64 = 20.0;
/// Space below it, for the ticks.
const BELOW: f64 = 24.0;
/// Space to its left, for the ticks.
const LEFT: f64 = 46.0;

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
fn class(role: Role) -> &'static str {
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
struct Frame<'a> {
    plane: &'a Plane,
    size: Size,
    id: &'a str,
    x: Scale,
    y: Scale,
    area: Rect,
}

/// Draws lines and areas; gives the height too.
fn draw_plane(plane: &Plane, size: Size, id: &str) -> (f64, Markup) {
    let widest = plane
        .layers
        .iter()
        .filter(|l| is_direct(l))
        .map(|l| l.label.as_str())
        .chain(
            plane
                .references
                .iter()
                .filter(|r| !r.upright)
                .map(|r| r.label.as_str()),
        )
        .map(|label| labels::text_width(label, size.text) + 12.0)
        .fold(14.0, f64::max);
    let area = Rect {
        left: LEFT,
        top: ABOVE,
        right: size.width - widest.min(size.margin),
        bottom: ABOVE + size.plot,
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
        (frame.patterns())
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

/// Whether a layer is labelled at its right end; areas without an edge have a key below instead.
fn is_direct(layer: &Layer) -> bool {
    !layer.label.is_empty() && !matches!(layer.role, Role::Pays | Role::Band)
}

impl Frame<'_> {
    fn point(&self, x: f64, y: f64) -> (f64, f64) {
        (self.x.place(x), self.y.place(y))
    }

    /// Hatching and dots, in the colours of their classes.
    fn patterns(&self) -> Markup {
        html! {
            defs {
                pattern id=(format!("{}-pays", self.id)) width="6" height="6"
                    patternUnits="userSpaceOnUse" patternTransform="rotate(45)" {
                    line x1="0" y1="0" x2="0" y2="6" class="hatch" {}
                }
                pattern id=(format!("{}-band", self.id)) width="5" height="5"
                    patternUnits="userSpaceOnUse" {
                    circle cx="2" cy="2" r="1" class="dot" {}
                }
            }
        }
    }

    /// Named stretches: every other one shaded, its name above where there is room for it.
    fn spans(&self) -> Markup {
        html! {
            @for (index, span) in self.plane.spans.iter().enumerate() {
                @let (left, right) = (self.x.place(span.from), self.x.place(span.to));
                rect class=(span_class(index, span.tone)) x=(n(left)) y=(n(self.area.top))
                    width=(n(right - left)) height=(n(self.area.bottom - self.area.top)) {}
                @if labels::text_width(&span.label, self.size.text - 1.0) <= right - left + 4.0 {
                    text class="quiet small" x=(n(f64::midpoint(left, right))) y=(n(self.area.top - 6.0))
                        text-anchor="middle" { (span.label) }
                }
            }
        }
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
                text class="quiet" x=(n(x)) y=(n(self.area.bottom + 17.0)) text-anchor="middle" { (text) }
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
                @for piece in pieces {
                    @let there = piece.iter().map(|(x, _, high)| (*x, *high));
                    @let back = piece.iter().rev().map(|(x, low, _)| (*x, *low));
                    path class=(format!("area {class}")) fill=[self.fill(layer.role)]
                        d=(self.path(there.chain(back), true)) {}
                }
                @if layer.role == Role::Draw {
                    path class="line draw" d=(self.path(upper_edge(pieces), false)) {}
                }
            },
        }
    }

    /// The pattern of roles that have one.
    fn fill(&self, role: Role) -> Option<String> {
        match role {
            Role::Pays => Some(format!("url(#{}-pays)", self.id)),
            Role::Band => Some(format!("url(#{}-band)", self.id)),
            _ => None,
        }
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

    /// A label in the freest place about a point.
    fn label_near(
        &self,
        x: f64,
        y: f64,
        text: &str,
        class: &str,
        obstacles: &mut Obstacles,
    ) -> Markup {
        let width = labels::text_width(text, self.size.text) + 2.0;
        let height = self.size.text + 3.0;
        let mut candidates = Vec::new();
        for row in 0..5 {
            let step = 7.0 + f64::from(row) * (height + 2.0);
            for top in [y + step, y - step - height] {
                for left in [x + 8.0, x - 8.0 - width, x - width / 2.0] {
                    candidates.push(Rect {
                        left,
                        top,
                        right: left + width,
                        bottom: top + height,
                    });
                }
            }
        }
        match obstacles.place(&candidates, &self.area) {
            Some(place) => html! {
                text class=(format!("label {class}")) x=(n(place.left + 1.0)) y=(n(place.bottom - 4.0)) {
                    (text)
                }
            },
            None => html! {},
        }
    }

    /// Labels at the right end of lines, moved apart.
    fn direct_labels(&self) -> Markup {
        let left = self.area.right + 8.0;
        let width = self.size.width - left;
        let line_height = self.size.text + 2.0;
        let mut entries: Vec<(f64, Vec<String>, &'static str)> = Vec::new();
        for layer in self.plane.layers.iter().filter(|l| is_direct(l)) {
            if let Some(y) = last_height(&layer.shape) {
                let lines = labels::wrap(&layer.label, width, self.size.text);
                entries.push((self.y.place(y), lines, class(layer.role)));
            }
        }
        for reference in self
            .plane
            .references
            .iter()
            .filter(|r| !r.upright && !r.label.is_empty())
        {
            let lines = labels::wrap(&reference.label, width, self.size.text);
            entries.push((self.y.place(reference.at), lines, class(reference.role)));
        }
        #[allow(clippy::cast_precision_loss)]
        let wanted: Vec<(f64, f64)> = entries
            .iter()
            .map(|(y, lines, _)| (*y, lines.len() as f64 * line_height))
            .collect();
        let places = labels::spread(&wanted, self.area.top - 8.0, self.area.bottom + 8.0);
        html! {
            @for ((_, lines, class), (middle, (_, height))) in
                entries.iter().zip(places.iter().zip(wanted.iter())) {
                @let first = middle - height / 2.0 + self.size.text - 1.0;
                text class=(format!("label {class}")) x=(n(left)) y=(n(first)) {
                    @for (index, line) in lines.iter().enumerate() {
                        tspan x=(n(left)) dy=(if index == 0 { "0".to_owned() } else { n(line_height) }) {
                            (line)
                        }
                    }
                }
            }
        }
    }

    /// Keys of hatched and dotted areas, below.
    fn keys(&self) -> (f64, Markup) {
        let mut keys: Vec<(f64, f64, &Layer)> = Vec::new();
        let (mut x, mut y) = (self.area.left, self.area.bottom + BELOW + 6.0);
        let shown = |layer: &&Layer| {
            let empty = matches!(&layer.shape, Shape::Area(pieces) if pieces.is_empty());
            !layer.label.is_empty() && !is_direct(layer) && !empty
        };
        for layer in self.plane.layers.iter().filter(shown) {
            let width = 26.0 + labels::text_width(&layer.label, self.size.text) + 18.0;
            if x > self.area.left && x + width > self.size.width + 18.0 {
                (x, y) = (self.area.left, y + 18.0);
            }
            keys.push((x, y, layer));
            x += width;
        }
        let height = if keys.is_empty() {
            0.0
        } else {
            y + 14.0 - self.area.bottom - BELOW
        };
        let drawn = html! {
            @for (x, y, layer) in keys {
                rect class=(format!("area key {}", class(layer.role))) fill=[self.fill(layer.role)]
                    x=(n(x)) y=(n(y - 1.0)) width="20" height="12" {}
                text class="quiet" x=(n(x + 26.0)) y=(n(y + 9.0)) { (layer.label) }
            }
        };
        (height, drawn)
    }
}

/// Class of a span: by its tone, or shaded by turns.
fn span_class(index: usize, tone: Tone) -> &'static str {
    match tone {
        Tone::Good => "span good",
        Tone::Warn => "span warn",
        Tone::Bad => "span bad",
        Tone::Plain | Tone::Dim if index % 2 == 1 => "span turn",
        Tone::Plain | Tone::Dim => "span",
    }
}

/// Height of a shape at its right end.
fn last_height(shape: &Shape) -> Option<f64> {
    match shape {
        Shape::Line(pieces) => pieces.last()?.last().map(|(_, y)| *y),
        Shape::Area(pieces) => pieces.last()?.last().map(|(_, _, high)| *high),
    }
}

/// The upper edge of an area's pieces as one line.
fn upper_edge(pieces: &[Vec<(f64, f64, f64)>]) -> impl Iterator<Item = (f64, f64)> {
    pieces.iter().flatten().map(|(x, _, high)| (*x, *high))
}
