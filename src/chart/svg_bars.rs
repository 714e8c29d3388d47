//! Horizontal bars as SVG: the name before or above its bar, the value at its end.

use super::Bars;
use super::labels;
use super::svg::{Size, n};
use maud::{Markup, html};

/// Draws bars; gives the height too. In a narrow drawing each name stands above its bar.
pub(super) fn draw(bars: &Bars, size: Size) -> (f64, Markup) {
    let narrow = size.width < 500.0;
    let longest = |texts: &mut dyn Iterator<Item = &str>| {
        texts
            .map(|t| labels::text_width(t, size.text))
            .fold(0.0, f64::max)
    };
    let names = longest(&mut bars.bars.iter().map(|b| b.label.as_str()));
    let values = longest(&mut bars.bars.iter().map(|b| b.value.as_str())) + 10.0;
    let left = if narrow {
        0.0
    } else {
        (names + 12.0).min(size.width * 0.55)
    };
    let room = (size.width - left - values).max(20.0);
    let row = if narrow { 38.0 } else { 26.0 };
    let top = |index: usize| {
        let rows = index as f64;
        4.0 + rows * row
    };
    let drawn = html! {
        @for (index, bar) in bars.bars.iter().enumerate() {
            @let y = top(index);
            @let (bar_y, length) = (if narrow { y + 16.0 } else { y }, (room * bar.length).max(1.0));
            @if narrow {
                text x="0" y=(n(y + 11.0)) { (shorten(&bar.label, size.width, size.text)) }
            } @else {
                text x=(n(left - 10.0)) y=(n(y + 13.5)) text-anchor="end" {
                    (shorten(&bar.label, left - 10.0, size.text))
                }
            }
            rect class="bar" x=(n(left)) y=(n(bar_y)) width=(n(length)) height="18" {}
            text class="label" x=(n(left + length + 6.0)) y=(n(bar_y + 13.5)) { (bar.value) }
        }
        line class="axis" x1=(n(left)) x2=(n(left)) y1="0" y2=(n(top(bars.bars.len()))) {}
    };
    (top(bars.bars.len()) + 2.0, drawn)
}

/// A text cut to a width, an ellipsis at the cut. The full name stands in the table.
fn shorten(text: &str, width: f64, size: f64) -> String {
    if labels::text_width(text, size) <= width {
        return text.to_owned();
    }
    let mut kept = String::new();
    for character in text.chars() {
        kept.push(character);
        if labels::text_width(&kept, size) + size > width {
            break;
        }
    }
    format!("{}…", kept.trim_end())
}

#[cfg(test)]
mod tests {
    use crate::chart::{Chart, svg};
    use crate::quantity::AmpHours;

    fn lengths(svg: &str) -> Vec<f64> {
        let bars = svg.split("class=\"bar\"").skip(1);
        bars.filter_map(|b| b.split("width=\"").nth(1)?.split('"').next()?.parse().ok())
            .collect()
    }

    #[test]
    fn bars_are_as_long_as_their_values() {
        let values = [
            ("a", AmpHours(40.0)),
            ("b", AmpHours(10.0)),
            ("c", AmpHours(f64::NAN)),
        ];
        let chart = Chart::bars("t", values, "d");
        for size in [svg::WIDE, svg::NARROW] {
            let drawn = svg::draw(&chart, size, "c").into_string();
            let lengths = lengths(&drawn);
            assert!((lengths[0] / lengths[1] - 4.0).abs() < 0.01, "{lengths:?}");
            assert_eq!(lengths[2], 1.0);
            assert!(drawn.contains(">40.0 Ah</text>") && drawn.contains(">— Ah</text>"));
        }
    }

    #[test]
    fn a_long_name_is_cut() {
        let text = super::shorten("a name that is too long for its place", 100.0, 12.0);
        assert!(text.ends_with('…') && text.chars().count() < 15, "{text}");
        assert_eq!(super::shorten("short", 100.0, 12.0), "short");
    }
}
