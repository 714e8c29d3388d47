//! Fillings of areas: plain, hatched (what the battery pays, what is not in order) or dotted, drawn
//! as strokes within a clip. A pattern would do the same on a screen, but makes a printed page some
//! megabytes larger.

use super::Role;
use super::labels::Rect;
use super::svg::{class, n};
use maud::{Markup, html};

/// Distance of two strokes of a hatching.
const HATCH: f64 = 7.0;
/// Distance of two rows of dots; the style sheet sets them apart by as much.
const DOTS: f64 = 5.0;

/// Fills an outline by its role. `clip` is an id that nothing else on the page has.
pub(super) fn fill(role: Role, outline: &str, bounds: Rect, clip: &str) -> Markup {
    let strokes = match role {
        Role::Pays | Role::Limit => hatching(bounds),
        Role::Band => dots(bounds),
        _ => {
            return html! { path class=(format!("area {}", class(role))) d=(outline) {} };
        }
    };
    html! {
        clipPath id=(clip) { path d=(outline) {} }
        path class=(format!("strokes {}", class(role))) clip-path=(format!("url(#{clip})")) d=(strokes) {}
    }
}

/// The outline of a rectangle.
pub(super) fn outline(rect: Rect) -> String {
    format!(
        "M{} {}H{}V{}H{}Z",
        n(rect.left),
        n(rect.top),
        n(rect.right),
        n(rect.bottom),
        n(rect.left)
    )
}

/// Strokes rising to the right, all over a rectangle.
fn hatching(bounds: Rect) -> String {
    let height = bounds.bottom - bounds.top;
    let mut path = String::new();
    let mut x = bounds.left - height;
    while x < bounds.right {
        path.push_str(&format!(
            "M{} {}l{} {}",
            n(x),
            n(bounds.bottom),
            n(height),
            n(-height)
        ));
        x += HATCH;
    }
    path
}

/// Level strokes, which the style sheet dashes to dots, every other row set off by half.
fn dots(bounds: Rect) -> String {
    let mut path = String::new();
    let mut y = bounds.top + DOTS / 2.0;
    let mut turn = false;
    while y < bounds.bottom {
        let left = bounds.left + if turn { DOTS / 2.0 } else { 0.0 };
        path.push_str(&format!("M{} {}H{}", n(left), n(y), n(bounds.right)));
        (y, turn) = (y + DOTS, !turn);
    }
    path
}
