//! Charts: what is drawn, apart from how.
//!
//! A chart is made with [`Plot`] (lines, steps, areas over two axes) or
//! [`Chart::bars`], from typed quantities; [`svg`] and [`terminal`] draw it. Points
//! that are not finite are left out and break the line there. Every chart
//! carries a description, its alternative for those who do not see it.
//!
//! ```
//! use ampledger::chart::{svg, Plot, Role};
//! use ampledger::quantity::{Amps, Rpm};
//! let output = [(Rpm(900.0), Amps(0.0)), (Rpm(1800.0), Amps(6.2)), (Rpm(3400.0), Amps(11.5))];
//! let chart = Plot::<Rpm, Amps>::new("Output of the winding")
//!     .line("output", Role::Supply, output)
//!     .level("demand 8 A", Role::Limit, Amps(8.0))
//!     .at("cut-in", Role::Limit, Rpm(900.0))
//!     .finish("Output rises from nothing at 900 rpm to 11.5 A at 3400 rpm.");
//! let drawn = svg::draw(&chart, svg::WIDE, "c1").into_string();
//! assert!(drawn.contains("<desc") && drawn.contains("cut-in"));
//! ```

pub mod labels;
mod plot;
pub mod scale;
pub mod svg;
mod svg_bars;
mod svg_fill;
mod svg_labels;
mod svg_spans;
pub mod terminal;

pub use plot::Plot;

use crate::quantity::format::{self, Written};
use crate::report::Tone;

/// A chart.
#[derive(Clone, Debug, PartialEq)]
pub struct Chart {
    /// Its title.
    pub title: String,
    /// What it shows, in words with the figures that matter.
    pub description: String,
    /// A line under it for everyone.
    pub note: Option<String>,
    /// What is drawn.
    pub body: Body,
}

/// What is drawn.
#[derive(Clone, Debug, PartialEq)]
pub enum Body {
    /// Lines and areas over two axes.
    Plane(Plane),
    /// Horizontal bars.
    Bars(Bars),
}

/// What a line, area or bar stands for; the renderers give it colour, dash and pattern.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Role {
    /// What the source can give: the strong line.
    Supply,
    /// What is drawn: the filled area, its edge dashed.
    Draw,
    /// What the battery pays: hatched.
    Pays,
    /// A spread, such as of coincidences: dotted.
    Band,
    /// Battery charge.
    Charge,
    /// A limit: dashed.
    Limit,
    /// A second line to compare with: dash and dot.
    Other,
}

/// An axis: range of its numbers and their unit.
#[derive(Clone, Debug, PartialEq)]
pub struct Axis {
    /// Unit of its numbers.
    pub unit: &'static str,
    /// Lowest.
    pub low: f64,
    /// Highest.
    pub high: f64,
}

/// A stretch of the x axis with a name: a state of the shift, a verdict of the season.
#[derive(Clone, Debug, PartialEq)]
pub struct Span {
    /// Where it begins.
    pub from: f64,
    /// Where it ends.
    pub to: f64,
    /// Its name.
    pub label: String,
    /// What it means.
    pub tone: Tone,
}

/// One line or area.
#[derive(Clone, Debug, PartialEq)]
pub struct Layer {
    /// Its label; empty for none.
    pub label: String,
    /// What it stands for.
    pub role: Role,
    /// Its shape.
    pub shape: Shape,
}

/// The shape of a layer, in pieces where it is broken.
#[derive(Clone, Debug, PartialEq)]
pub enum Shape {
    /// Points (x, y) joined by straight lines; a step repeats its x.
    Line(Vec<Vec<(f64, f64)>>),
    /// Between a lower and an upper line: (x, low, high).
    Area(Vec<Vec<(f64, f64, f64)>>),
}

/// A straight line across the chart.
#[derive(Clone, Debug, PartialEq)]
pub struct Reference {
    /// Its label.
    pub label: String,
    /// What it stands for.
    pub role: Role,
    /// Where it stands: a y for a level line, an x for an upright one.
    pub at: f64,
    /// Upright (at an x), else level (at a y).
    pub upright: bool,
}

/// A point with its label.
#[derive(Clone, Debug, PartialEq)]
pub struct Mark {
    /// Its x.
    pub x: f64,
    /// Its y.
    pub y: f64,
    /// Its label.
    pub label: String,
}

/// Lines and areas over two axes.
#[derive(Clone, Debug, PartialEq)]
pub struct Plane {
    /// The axis across.
    pub x: Axis,
    /// The axis up.
    pub y: Axis,
    /// Named stretches of the x axis.
    pub spans: Vec<Span>,
    /// Lines and areas, the first at the back.
    pub layers: Vec<Layer>,
    /// Straight lines across.
    pub references: Vec<Reference>,
    /// Labelled points.
    pub marks: Vec<Mark>,
}

/// One horizontal bar.
#[derive(Clone, Debug, PartialEq)]
pub struct Bar {
    /// Its name.
    pub label: String,
    /// Its length as a share of the longest.
    pub length: f64,
    /// Its value in words, with the unit.
    pub value: String,
}

/// Horizontal bars, in the order given.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Bars {
    /// The bars.
    pub bars: Vec<Bar>,
    /// What they stand for.
    pub role: Option<Role>,
}

impl Chart {
    /// A chart of bars, each a label and a quantity that is not below zero, shown with its unit.
    pub fn bars<Q: Written, L: Into<String>>(
        title: impl Into<String>,
        bars: impl IntoIterator<Item = (L, Q)>,
        description: impl Into<String>,
    ) -> Chart {
        let pairs: Vec<(String, Q)> = bars.into_iter().map(|(l, q)| (l.into(), q)).collect();
        let longest = pairs
            .iter()
            .map(|(_, q)| finite(q.number()))
            .fold(0.0, f64::max);
        let decimals = format::decimals(pairs.iter().map(|(_, q)| *q));
        let bars = pairs
            .into_iter()
            .map(|(label, quantity)| Bar {
                label,
                length: if longest > 0.0 {
                    finite(quantity.number()).max(0.0) / longest
                } else {
                    0.0
                },
                value: format::fixed_unit(quantity, decimals),
            })
            .collect();
        Chart {
            title: title.into(),
            description: description.into(),
            note: None,
            body: Body::Bars(Bars { bars, role: None }),
        }
    }
    /// With a line under it.
    #[must_use]
    pub fn note(mut self, note: impl Into<String>) -> Chart {
        self.note = Some(note.into());
        self
    }
    /// Whether there is anything to draw.
    #[must_use]
    pub fn is_empty(&self) -> bool {
        match &self.body {
            Body::Plane(plane) => plane.layers.iter().all(|layer| match &layer.shape {
                Shape::Line(pieces) => pieces.is_empty(),
                Shape::Area(pieces) => pieces.is_empty(),
            }),
            Body::Bars(bars) => bars.bars.is_empty(),
        }
    }
}

/// Nothing for a number that is not finite.
fn finite(number: f64) -> f64 {
    if number.is_finite() { number } else { 0.0 }
}

/// A time axis in days.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Days(pub f64);

impl Written for Days {
    const UNIT: &'static str = "d";
    const TYPED: &'static str = "d";
    const DIGITS: i32 = 3;
    fn number(self) -> f64 {
        self.0
    }
    fn of(number: f64) -> Self {
        Days(number)
    }
}
