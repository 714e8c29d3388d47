//! What the sources on the battery bus can give at one engine speed.

use crate::build::{Source, SourceKind};
use crate::quantity::{Amps, Celsius, Rpm, Volts};
use crate::source::{self, Rectifier, Winding};

/// Cells' volts below which the exact rectifier is asked instead of the table.
const TABLE_FROM_CELL: f64 = 1.6;
/// Highest bus volts looked at, a cell. Nothing on the bus survives above.
pub const MOST_CELL_VOLTS: f64 = 17.9 / 6.0;
/// Volts a cell between the table's points.
const TABLE_STEP_CELL: f64 = 0.02;

/// All sources at one speed.
#[derive(Clone, Debug, Default)]
pub struct Supply {
    feeds: Vec<Feed>,
    /// Setpoints, highest first, each once.
    setpoints: Vec<f64>,
    /// The voltage that added current never lifts the bus above.
    ceiling: f64,
    extra: f64,
}

/// Which side of a setpoint is meant.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Side {
    /// Just below: a regulator at its setpoint still gives.
    Below,
    /// Just above: it gives nothing.
    Above,
}

/// One source at one speed, its mean current tabulated against bus volts.
#[derive(Clone, Debug)]
struct Feed {
    holds: Option<f64>,
    from: f64,
    step: f64,
    /// Amps and slope at each point.
    points: Vec<(f64, f64)>,
    exact: Exact,
}

#[derive(Clone, Copy, Debug)]
enum Exact {
    Winding(Winding, Rectifier, Rpm),
    Constant(f64),
}

impl Exact {
    fn amps(&self, volts: f64) -> f64 {
        match self {
            Exact::Winding(winding, rectifier, rpm) => {
                source::rectified_dc(winding, rectifier, *rpm, Volts(volts)).0
            }
            Exact::Constant(amps) => *amps,
        }
    }
}

impl Supply {
    /// Nothing: engine off.
    #[must_use]
    pub fn none(cells: u32) -> Supply {
        Supply {
            ceiling: MOST_CELL_VOLTS * f64::from(cells),
            ..Supply::default()
        }
    }

    /// The sources that feed the battery bus, at a speed.
    #[must_use]
    pub fn at(sources: &[Source], rpm: Rpm, air: Celsius, cells: u32) -> Supply {
        let most = MOST_CELL_VOLTS * f64::from(cells);
        let feeds: Vec<Feed> = sources
            .iter()
            .filter(|s| s.circuit.is_none() && !s.braking)
            .filter_map(|s| Feed::new(s, rpm, air, cells))
            .collect();
        let mut setpoints: Vec<f64> = feeds.iter().filter_map(|f| f.holds).collect();
        setpoints.sort_by(|a, b| b.total_cmp(a));
        setpoints.dedup();
        let ceiling = setpoints.first().copied().unwrap_or(most);
        Supply {
            feeds,
            setpoints,
            ceiling,
            extra: 0.0,
        }
    }

    /// A charger of constant current that tapers at its volts.
    #[must_use]
    pub fn charger(amps: Amps, holds: Volts) -> Supply {
        let feed = Feed {
            holds: Some(holds.0),
            from: 0.0,
            step: 1.0,
            points: Vec::new(),
            exact: Exact::Constant(amps.0),
        };
        Supply {
            feeds: vec![feed],
            setpoints: vec![holds.0],
            ceiling: holds.0,
            extra: 0.0,
        }
    }

    /// The same with a constant current added that never lifts the bus above the highest
    /// setpoint; below zero it is a constant draw.
    pub fn set_extra(&mut self, extra: Amps) {
        self.extra = extra.0;
    }

    /// Whether nothing can flow from here.
    #[must_use]
    pub fn is_none(&self) -> bool {
        self.feeds.is_empty() && self.extra == 0.0
    }

    /// Setpoints, highest first.
    pub(super) fn setpoints(&self) -> &[f64] {
        &self.setpoints
    }

    /// The highest volts the bus is looked for at.
    pub(super) fn ceiling_with_extra(&self) -> f64 {
        self.ceiling
    }

    /// Whether the extra current can hold the bus at the ceiling by itself.
    pub(super) fn extra_holds(&self) -> bool {
        self.extra > 0.0
    }

    /// Amps and their change a volt at bus volts; `side` matters at a setpoint only.
    pub(super) fn give(&self, volts: f64, side: Side) -> (f64, f64) {
        let mut amps = 0.0;
        let mut slope = 0.0;
        for feed in &self.feeds {
            if feed.gives(volts, side) {
                let (i, di) = feed.amps(volts);
                amps += i;
                slope += di;
            }
        }
        if self.extra < 0.0
            || volts < self.ceiling
            || (volts <= self.ceiling && side == Side::Below)
        {
            amps += self.extra;
        }
        (amps, slope)
    }

    /// What the sources could give at bus volts, regulators at their setpoints counted in full
    /// and the extra current left out.
    #[must_use]
    pub fn available(&self, bus: Volts) -> Amps {
        Amps(
            self.feeds
                .iter()
                .filter(|f| f.gives(bus.0, Side::Below))
                .map(|f| f.amps(bus.0).0)
                .sum(),
        )
    }
}

impl Feed {
    fn new(source: &Source, rpm: Rpm, air: Celsius, cells: u32) -> Option<Feed> {
        let holds = source.regulator.as_ref().map(|r| r.setpoint(air).0);
        let cells = f64::from(cells);
        let exact = match &source.kind {
            SourceKind::Winding(w) => Exact::Winding(w.constants, w.rectifier?, rpm),
            SourceKind::Alternator(a) => Exact::Constant(a.output(rpm).0),
        };
        let mut feed = Feed {
            holds,
            from: TABLE_FROM_CELL * cells,
            step: TABLE_STEP_CELL * cells,
            points: Vec::new(),
            exact,
        };
        if let Exact::Winding(..) = exact {
            feed.tabulate(holds.unwrap_or(MOST_CELL_VOLTS * cells));
        }
        Some(feed)
    }

    /// Fills the table up to the highest volts asked for, with slopes from neighbours.
    fn tabulate(&mut self, to: f64) {
        let count = ((to - self.from) / self.step).ceil().max(1.0) as usize + 1;
        self.step = (to - self.from) / (count - 1) as f64;
        let amps: Vec<f64> = (0..count)
            .map(|k| self.exact.amps(self.from + self.step * k as f64))
            .collect();
        let slope = |k: usize| -> f64 {
            let (a, b, c) = (k.saturating_sub(1), k, (k + 1).min(count - 1));
            if a == b {
                (-3.0 * amps[0] + 4.0 * amps[1] - amps[(2).min(count - 1)]) / (2.0 * self.step)
            } else if b == c {
                (3.0 * amps[b] - 4.0 * amps[a] + amps[a.saturating_sub(1)]) / (2.0 * self.step)
            } else {
                (amps[c] - amps[a]) / (2.0 * self.step)
            }
        };
        // Fritsch and Carlson 1980: no steeper than three times either neighbour's chord, or the cubic
        // swings past the points, below zero where the current ends.
        let chord = |k: usize| (amps[k + 1] - amps[k]) / self.step;
        let limit = |k: usize| {
            let left = chord(k.saturating_sub(1));
            let right = chord(k.min(count - 2));
            if left * right <= 0.0 {
                0.0
            } else {
                3.0 * left.abs().min(right.abs())
            }
        };
        self.points = (0..count)
            .map(|k| match count {
                ..3 => (amps[k], 0.0),
                _ => (amps[k], slope(k).min(limit(k)).max(-limit(k))),
            })
            .collect();
    }

    fn gives(&self, volts: f64, side: Side) -> bool {
        match self.holds {
            None => true,
            Some(holds) => volts < holds || (volts <= holds && side == Side::Below),
        }
    }

    /// Amps and slope: cubic through the table, exact below it.
    fn amps(&self, volts: f64) -> (f64, f64) {
        if self.points.is_empty() {
            return (self.exact.amps(volts), 0.0);
        }
        let x = (volts - self.from) / self.step;
        if x < 0.0 {
            let h = self.step;
            let here = self.exact.amps(volts);
            return (
                here,
                (self.exact.amps(volts + 0.01 * h) - here) / (0.01 * h),
            );
        }
        let k = (x as usize).min(self.points.len() - 2);
        let t = x - k as f64;
        let ((a, da), (b, db)) = (self.points[k], self.points[k + 1]);
        let (da, db) = (da * self.step, db * self.step);
        let (c2, c3) = (3.0 * (b - a) - 2.0 * da - db, 2.0 * (a - b) + da + db);
        (
            a + t * (da + t * (c2 + t * c3)),
            (da + t * (2.0 * c2 + 3.0 * t * c3)) / self.step,
        )
    }
}
