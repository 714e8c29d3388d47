//! Where labels go: away from lines, from each other and from the edge.

use crate::report::flow::flowing;

/// Estimated width of a text in a proportional sans-serif of this size: 0.6 of the size a
/// character (common practice; a wide fallback font takes about that).
#[must_use]
pub fn text_width(text: &str, size: f64) -> f64 {
    let characters = text.chars().count() as f64;
    characters * size * 0.6
}

/// Words in lines of at most this width; a longer word stands alone, and a number keeps its unit.
#[must_use]
pub fn wrap(text: &str, width: f64, size: f64) -> Vec<String> {
    let mut lines: Vec<String> = Vec::new();
    let text = flowing(text);
    for word in text.split(' ').filter(|word| !word.is_empty()) {
        match lines.last_mut() {
            Some(line) if text_width(&format!("{line} {word}"), size) <= width => {
                line.push(' ');
                line.push_str(word);
            }
            _ => lines.push(word.to_owned()),
        }
    }
    lines
}

/// Moves places apart, each taking a height about its middle, within two ends; the order stays.
/// Where the ends are too close for all, the last ones overlap the end.
#[must_use]
pub fn spread(wanted: &[(f64, f64)], low: f64, high: f64) -> Vec<f64> {
    let mut order: Vec<usize> = (0..wanted.len()).collect();
    order.sort_by(|a, b| wanted[*a].0.total_cmp(&wanted[*b].0));
    let mut places = vec![0.0; wanted.len()];
    let mut free = low;
    for index in &order {
        let (middle, height) = wanted[*index];
        places[*index] = middle.max(free + height / 2.0);
        free = places[*index] + height / 2.0;
    }
    let mut free = high;
    for index in order.iter().rev() {
        let height = wanted[*index].1;
        places[*index] = places[*index].min(free - height / 2.0);
        free = places[*index] - height / 2.0;
    }
    places
}

/// A rectangle: left, top, right, bottom.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Rect {
    /// Left edge.
    pub left: f64,
    /// Upper edge.
    pub top: f64,
    /// Right edge.
    pub right: f64,
    /// Lower edge.
    pub bottom: f64,
}

impl Rect {
    /// Whether two overlap.
    #[must_use]
    pub fn overlaps(&self, other: &Rect) -> bool {
        self.left < other.right
            && other.left < self.right
            && self.top < other.bottom
            && other.top < self.bottom
    }
    /// Whether it lies within another.
    #[must_use]
    pub fn within(&self, other: &Rect) -> bool {
        self.left >= other.left
            && self.right <= other.right
            && self.top >= other.top
            && self.bottom <= other.bottom
    }
    /// Whether a straight line from a point to a point touches it.
    #[must_use]
    pub fn touches(&self, from: (f64, f64), to: (f64, f64)) -> bool {
        // Clip the line to the rectangle, edge by edge: what is left of it, from `enter` to `leave`.
        let (dx, dy) = (to.0 - from.0, to.1 - from.1);
        let (mut enter, mut leave) = (0.0f64, 1.0f64);
        let edges = [
            (-dx, from.0 - self.left),
            (dx, self.right - from.0),
            (-dy, from.1 - self.top),
            (dy, self.bottom - from.1),
        ];
        for (along, distance) in edges {
            if along == 0.0 {
                if distance < 0.0 {
                    return false;
                }
            } else if along < 0.0 {
                enter = enter.max(distance / along);
            } else {
                leave = leave.min(distance / along);
            }
        }
        enter <= leave
    }
}

/// What labels keep away from.
#[derive(Clone, Debug, Default)]
pub struct Obstacles {
    /// Straight lines.
    pub lines: Vec<((f64, f64), (f64, f64))>,
    /// Labels already placed.
    pub labels: Vec<Rect>,
}

impl Obstacles {
    /// The candidate with the least in its way, the first of equals; it becomes an obstacle.
    pub fn place(&mut self, candidates: &[Rect], inside: &Rect) -> Option<Rect> {
        let cost = |rect: &Rect| {
            let lines = self
                .lines
                .iter()
                .filter(|(a, b)| rect.touches(*a, *b))
                .count();
            let labels = self
                .labels
                .iter()
                .filter(|other| rect.overlaps(other))
                .count();
            lines + 8 * labels + if rect.within(inside) { 0 } else { 20 }
        };
        let best = candidates.iter().min_by_key(|rect| cost(rect)).copied()?;
        self.labels.push(best);
        Some(best)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    const BOX: Rect = Rect {
        left: 10.0,
        top: 10.0,
        right: 20.0,
        bottom: 20.0,
    };

    #[test]
    fn a_line_touches_what_it_crosses_only() {
        assert!(BOX.touches((0.0, 15.0), (30.0, 15.0)));
        assert!(BOX.touches((0.0, 0.0), (30.0, 30.0)));
        assert!(!BOX.touches((0.0, 5.0), (30.0, 5.0)));
        assert!(!BOX.touches((0.0, 15.0), (9.0, 15.0)));
        assert!(!BOX.touches((0.0, 25.0), (15.0, 21.0)));
        assert!(BOX.touches((15.0, 15.0), (15.0, 15.0)));
    }

    #[test]
    fn a_label_takes_the_free_place() {
        let page = Rect {
            left: 0.0,
            top: 0.0,
            right: 100.0,
            bottom: 100.0,
        };
        let free = Rect {
            top: 40.0,
            bottom: 50.0,
            ..BOX
        };
        let outside = Rect {
            left: 95.0,
            right: 105.0,
            ..BOX
        };
        let mut obstacles = Obstacles::default();
        obstacles.lines.push(((0.0, 15.0), (30.0, 15.0)));
        assert_eq!(obstacles.place(&[BOX, outside, free], &page), Some(free));
        assert_eq!(obstacles.place(&[free, BOX], &page), Some(BOX));
    }

    #[test]
    fn labels_spread_and_stay_within() {
        let places = spread(
            &[(50.0, 12.0), (52.0, 12.0), (10.0, 12.0), (99.0, 12.0)],
            0.0,
            100.0,
        );
        assert_eq!(places, [50.0, 62.0, 10.0, 94.0]);
        assert_eq!(
            spread(&[(98.0, 12.0), (99.0, 12.0)], 0.0, 100.0),
            [82.0, 94.0]
        );
    }

    #[test]
    fn words_wrap() {
        assert_eq!(
            wrap("reserve for the next start", 66.0, 11.0),
            ["reserve", "for the", "next start"]
        );
        assert_eq!(
            wrap("cut-in 1601 rpm", 70.0, 11.0),
            ["cut-in", "1601\u{a0}rpm"]
        );
        assert_eq!(wrap("", 66.0, 11.0), Vec::<String>::new());
    }
}
