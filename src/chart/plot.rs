//! Building a chart of lines and areas from typed quantities.

use super::{Axis, Body, Chart, Layer, Mark, Plane, Reference, Role, Shape, Span};
use crate::quantity::format::Written;
use crate::report::Tone;
use std::marker::PhantomData;

/// A chart being built: `X` across, `Y` up. The range of each axis follows from what is drawn;
/// the y axis begins at zero unless told otherwise.
#[derive(Clone, Debug)]
pub struct Plot<X, Y> {
    title: String,
    plane: Plane,
    x_range: Option<(f64, f64)>,
    y_range: Option<(f64, f64)>,
    quantities: PhantomData<(X, Y)>,
}

impl<X: Written, Y: Written> Plot<X, Y> {
    /// An empty chart.
    pub fn new(title: impl Into<String>) -> Plot<X, Y> {
        let axis = |unit| Axis {
            unit,
            low: 0.0,
            high: 0.0,
        };
        Plot {
            title: title.into(),
            plane: Plane {
                x: axis(X::UNIT),
                y: axis(Y::UNIT),
                spans: Vec::new(),
                layers: Vec::new(),
                references: Vec::new(),
                marks: Vec::new(),
            },
            x_range: None,
            y_range: None,
            quantities: PhantomData,
        }
    }

    /// A line through points in order of x.
    #[must_use]
    pub fn line(
        self,
        label: impl Into<String>,
        role: Role,
        points: impl IntoIterator<Item = (X, Y)>,
    ) -> Self {
        let points = points.into_iter().map(|(x, y)| (x.number(), y.number()));
        let pieces = pieces(points, |(x, y)| x.is_finite() && y.is_finite());
        self.layer(label, role, Shape::Line(pieces))
    }

    /// A line of steps: each from an x to an x at one height, with true corners.
    #[must_use]
    pub fn steps(
        self,
        label: impl Into<String>,
        role: Role,
        steps: impl IntoIterator<Item = (X, X, Y)>,
    ) -> Self {
        let points = steps
            .into_iter()
            .flat_map(|(from, to, y)| [(from.number(), y.number()), (to.number(), y.number())]);
        let pieces = pieces(points, |(x, y)| x.is_finite() && y.is_finite());
        self.layer(label, role, Shape::Line(pieces))
    }

    /// An area between two lines: (x, low, high) in order of x.
    #[must_use]
    pub fn area(
        self,
        label: impl Into<String>,
        role: Role,
        points: impl IntoIterator<Item = (X, Y, Y)>,
    ) -> Self {
        let points = points
            .into_iter()
            .map(|(x, low, high)| (x.number(), low.number(), high.number()));
        let pieces = pieces(points, |(x, a, b)| {
            x.is_finite() && a.is_finite() && b.is_finite()
        });
        self.layer(label, role, Shape::Area(pieces))
    }

    /// An area of steps: each (from, to, low, high); a step without height is left out.
    #[must_use]
    pub fn step_area(
        self,
        label: impl Into<String>,
        role: Role,
        steps: impl IntoIterator<Item = (X, X, Y, Y)>,
    ) -> Self {
        let pieces: Vec<Vec<(f64, f64, f64)>> = steps
            .into_iter()
            .map(|(from, to, low, high)| (from.number(), to.number(), low.number(), high.number()))
            .filter(|(a, b, low, high)| {
                a.is_finite() && b.is_finite() && (high - low).is_finite() && high > low && b > a
            })
            .map(|(from, to, low, high)| vec![(from, low, high), (to, low, high)])
            .collect();
        self.layer(label, role, Shape::Area(pieces))
    }

    /// A named stretch of the x axis.
    #[must_use]
    pub fn span(mut self, label: impl Into<String>, tone: Tone, from: X, to: X) -> Self {
        let (from, to) = (from.number(), to.number());
        if from.is_finite() && to.is_finite() && to > from {
            self.plane.spans.push(Span {
                from,
                to,
                label: label.into(),
                tone,
            });
        }
        self
    }

    /// A level line across.
    #[must_use]
    pub fn level(self, label: impl Into<String>, role: Role, at: Y) -> Self {
        self.reference(label.into(), role, at.number(), false)
    }

    /// An upright line.
    #[must_use]
    pub fn at(self, label: impl Into<String>, role: Role, at: X) -> Self {
        self.reference(label.into(), role, at.number(), true)
    }

    /// A labelled point.
    #[must_use]
    pub fn mark(mut self, label: impl Into<String>, x: X, y: Y) -> Self {
        let (x, y) = (x.number(), y.number());
        if x.is_finite() && y.is_finite() {
            self.plane.marks.push(Mark {
                x,
                y,
                label: label.into(),
            });
        }
        self
    }

    /// The x axis from and to these, whatever is drawn.
    #[must_use]
    pub fn x_between(mut self, low: X, high: X) -> Self {
        self.x_range = Some((low.number(), high.number()));
        self
    }

    /// The y axis from and to these, whatever is drawn.
    #[must_use]
    pub fn y_between(mut self, low: Y, high: Y) -> Self {
        self.y_range = Some((low.number(), high.number()));
        self
    }

    /// The chart, with what it shows in words.
    pub fn finish(mut self, description: impl Into<String>) -> Chart {
        let (xs, ys) = self.extent();
        (self.plane.x.low, self.plane.x.high) = self.x_range.unwrap_or_else(|| range(&xs, None));
        (self.plane.y.low, self.plane.y.high) =
            self.y_range.unwrap_or_else(|| range(&ys, Some(0.0)));
        Chart {
            title: self.title,
            description: description.into(),
            note: None,
            body: Body::Plane(self.plane),
        }
    }

    fn layer(mut self, label: impl Into<String>, role: Role, shape: Shape) -> Self {
        self.plane.layers.push(Layer {
            label: label.into(),
            role,
            shape,
        });
        self
    }

    fn reference(mut self, label: String, role: Role, at: f64, upright: bool) -> Self {
        if at.is_finite() {
            self.plane.references.push(Reference {
                label,
                role,
                at,
                upright,
            });
        }
        self
    }

    /// Every x and every y that is drawn.
    fn extent(&self) -> (Vec<f64>, Vec<f64>) {
        let (mut xs, mut ys) = (Vec::new(), Vec::new());
        for layer in &self.plane.layers {
            match &layer.shape {
                Shape::Line(pieces) => pieces.iter().flatten().for_each(|(x, y)| {
                    xs.push(*x);
                    ys.push(*y);
                }),
                Shape::Area(pieces) => pieces.iter().flatten().for_each(|(x, low, high)| {
                    xs.push(*x);
                    ys.extend([*low, *high]);
                }),
            }
        }
        for reference in &self.plane.references {
            if reference.upright { &mut xs } else { &mut ys }.push(reference.at);
        }
        xs.extend(self.plane.marks.iter().map(|m| m.x));
        ys.extend(self.plane.marks.iter().map(|m| m.y));
        xs.extend(self.plane.spans.iter().flat_map(|s| [s.from, s.to]));
        (xs, ys)
    }
}

/// Cuts points into pieces of those that hold, a piece ending at each that does not.
fn pieces<P: Copy>(points: impl IntoIterator<Item = P>, holds: impl Fn(P) -> bool) -> Vec<Vec<P>> {
    let mut pieces = vec![Vec::new()];
    for point in points {
        if holds(point) {
            if let Some(piece) = pieces.last_mut() {
                piece.push(point);
            }
        } else if pieces.last().is_some_and(|piece| !piece.is_empty()) {
            pieces.push(Vec::new());
        }
    }
    pieces.retain(|piece| !piece.is_empty());
    pieces
}

/// Lowest and highest of the values and of a further one; a range of one where all are the same.
fn range(values: &[f64], with: Option<f64>) -> (f64, f64) {
    let low = values
        .iter()
        .copied()
        .chain(with)
        .fold(f64::INFINITY, f64::min);
    let high = values
        .iter()
        .copied()
        .chain(with)
        .fold(f64::NEG_INFINITY, f64::max);
    if !low.is_finite() || !high.is_finite() {
        (0.0, 1.0)
    } else if high > low {
        (low, high)
    } else {
        (low, low + 1.0)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::quantity::{Amps, Hours};

    fn plane(chart: Chart) -> Plane {
        match chart.body {
            Body::Plane(plane) => plane,
            Body::Bars(_) => unreachable!("a plot makes a plane"),
        }
    }

    #[test]
    fn a_point_that_is_no_number_breaks_the_line_and_hides_nothing_else() {
        let points = [
            (0.0, 1.0),
            (1.0, 2.0),
            (2.0, f64::NAN),
            (3.0, 4.0),
            (4.0, f64::INFINITY),
        ];
        let chart = Plot::<Hours, Amps>::new("t")
            .line("l", Role::Supply, points.map(|(x, y)| (Hours(x), Amps(y))))
            .level("never", Role::Limit, Amps(f64::NAN))
            .finish("d");
        let plane = plane(chart);
        assert_eq!(
            plane.layers[0].shape,
            Shape::Line(vec![vec![(0.0, 1.0), (1.0, 2.0)], vec![(3.0, 4.0)]])
        );
        assert!(plane.references.is_empty());
        assert_eq!((plane.y.low, plane.y.high), (0.0, 4.0));
        assert_eq!((plane.x.low, plane.x.high), (0.0, 3.0));
    }

    #[test]
    fn steps_have_upright_corners_and_flat_areas_vanish() {
        let plane = plane(
            Plot::<Hours, Amps>::new("t")
                .steps(
                    "s",
                    Role::Supply,
                    [
                        (Hours(0.0), Hours(1.0), Amps(5.0)),
                        (Hours(1.0), Hours(2.0), Amps(-2.0)),
                    ],
                )
                .step_area(
                    "a",
                    Role::Pays,
                    [
                        (Hours(0.0), Hours(1.0), Amps(5.0), Amps(5.0)),
                        (Hours(1.0), Hours(2.0), Amps(1.0), Amps(4.0)),
                    ],
                )
                .finish("d"),
        );
        let corners = vec![vec![(0.0, 5.0), (1.0, 5.0), (1.0, -2.0), (2.0, -2.0)]];
        assert_eq!(plane.layers[0].shape, Shape::Line(corners));
        assert_eq!(
            plane.layers[1].shape,
            Shape::Area(vec![vec![(1.0, 1.0, 4.0), (2.0, 1.0, 4.0)]])
        );
        assert_eq!((plane.y.low, plane.y.high), (-2.0, 5.0));
    }

    #[test]
    fn an_empty_chart_has_axes_all_the_same() {
        let chart = Plot::<Hours, Amps>::new("t").finish("d");
        assert!(chart.is_empty());
        let plane = plane(chart);
        assert_eq!(
            (plane.x.low, plane.x.high, plane.y.low, plane.y.high),
            (0.0, 1.0, 0.0, 1.0)
        );
    }
}
