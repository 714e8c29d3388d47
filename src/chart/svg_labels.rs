//! The labels of a plane: near points and upright lines, at the right end of lines, keys below.

use super::labels::{self, Obstacles, Rect};
use super::svg::{BELOW, BOLD, Frame, class, is_direct, n};
use super::{Layer, Shape, svg_fill};
use maud::{Markup, html};

impl Frame<'_> {
    /// A label in the freest place about a point, on two lines where it is long.
    pub(super) fn label_near(
        &self,
        x: f64,
        y: f64,
        text: &str,
        class: &str,
        obstacles: &mut Obstacles,
    ) -> Markup {
        let widest = (self.area.right - self.area.left) * 0.35;
        let lines = labels::wrap(text, widest.max(90.0), self.size.text);
        let width = lines
            .iter()
            .map(|l| labels::text_width(l, self.size.text))
            .fold(0.0, f64::max);
        let width = width * BOLD + 2.0;
        let line_height = self.size.text + 3.0;
        let height = line_height * lines.len() as f64;
        let mut candidates = Vec::new();
        for row in 0..14 {
            let step = 7.0 + f64::from(row) * 10.0;
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
        let place = obstacles.place(&candidates, &self.area);
        html! {
            @if let Some(place) = place {
                (text_lines(&lines, &format!("over {class}"), place.left + 1.0, place.top + self.size.text, line_height))
            }
        }
    }

    /// Labels at the right end of lines, moved apart.
    pub(super) fn direct_labels(&self) -> Markup {
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
        let wanted: Vec<(f64, f64)> = entries
            .iter()
            .map(|(y, lines, _)| (*y, lines.len() as f64 * line_height))
            .collect();
        let places = labels::spread(&wanted, self.area.top - 8.0, self.area.bottom + 8.0);
        html! {
            @for ((_, lines, class), (middle, (_, height))) in
                entries.iter().zip(places.iter().zip(wanted.iter())) {
                @let first = middle - height / 2.0 + self.size.text - 1.0;
                (text_lines(lines, class, left, first, line_height))
            }
        }
    }

    /// Keys of hatched and dotted areas, below.
    pub(super) fn keys(&self) -> (f64, Markup) {
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
                @let key = Rect { left: x, top: y - 1.0, right: x + 20.0, bottom: y + 11.0 };
                (svg_fill::fill(layer.role, &svg_fill::outline(key), key, &self.clip(layer.role, "-key")))
                path class="key" d=(svg_fill::outline(key)) {}
                text class="quiet" x=(n(x + 26.0)) y=(n(y + 9.0)) { (layer.label) }
            }
        };
        (height, drawn)
    }
}

/// Lines of a label, one under the other, the first on this base line.
fn text_lines(lines: &[String], class: &str, x: f64, base: f64, line_height: f64) -> Markup {
    html! {
        text class=(format!("label {class}")) x=(n(x)) y=(n(base)) {
            @for (index, line) in lines.iter().enumerate() {
                tspan x=(n(x)) dy=(if index == 0 { "0".to_owned() } else { n(line_height) }) { (line) }
            }
        }
    }
}

/// Height of a shape at its right end.
fn last_height(shape: &Shape) -> Option<f64> {
    match shape {
        Shape::Line(pieces) => pieces.last()?.last().map(|(_, y)| *y),
        Shape::Area(pieces) => pieces.last()?.last().map(|(_, _, high)| *high),
    }
}
