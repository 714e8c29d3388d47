//! The page's style sheet: colours as variables for light and dark, rules for screen and paper.
//!
//! Every text colour reads on every ground it may stand on: at least 4.5 : 1
//! (WCAG 2.2, success criterion 1.4.3), which a test computes from [`COLOURS`].

/// A colour: its variable, its value in light and in dark.
#[derive(Clone, Copy, Debug)]
pub struct Colour {
    /// Name of the variable.
    pub name: &'static str,
    /// Value on a light page.
    pub light: &'static str,
    /// Value on a dark page.
    pub dark: &'static str,
    /// What it is used for.
    pub used: Used,
}

/// What a colour is used for.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Used {
    /// Behind text.
    Ground,
    /// For text, on any ground.
    Text,
    /// For lines and fillings without text on them.
    Mark,
}

const fn colour(name: &'static str, light: &'static str, dark: &'static str, used: Used) -> Colour {
    Colour {
        name,
        light,
        dark,
        used,
    }
}

/// The colours.
pub const COLOURS: [Colour; 18] = [
    colour("page", "#ffffff", "#16181b", Used::Ground),
    colour("panel", "#f3f4f6", "#22252a", Used::Ground),
    colour("good-ground", "#eaf4ec", "#1b2a20", Used::Ground),
    colour("warn-ground", "#fbf2df", "#2e2717", Used::Ground),
    colour("bad-ground", "#fbecea", "#34201f", Used::Ground),
    colour("drawn", "#f2e6cc", "#3a3222", Used::Ground),
    colour("ink", "#1b1d20", "#eceef1", Used::Text),
    colour("quiet", "#51565e", "#b3b9c2", Used::Text),
    colour("good", "#1c6535", "#82d09a", Used::Text),
    colour("warn", "#7a4f00", "#eab65c", Used::Text),
    colour("bad", "#a3211b", "#ff9d94", Used::Text),
    colour("supply", "#0b5c73", "#6cc7de", Used::Text),
    colour("draw", "#75500a", "#e0b566", Used::Text),
    colour("other", "#5b3f92", "#c3aef0", Used::Text),
    colour("rule", "#d5d8dd", "#3a3e45", Used::Mark),
    colour("axis", "#7b818a", "#8a9099", Used::Mark),
    colour("bar", "#2b6f85", "#5fb3c8", Used::Mark),
    colour("turn", "#f3f4f6", "#1f2226", Used::Mark),
];

/// The rules beside the colours.
const RULES: &str = include_str!("page.css");

/// The whole style sheet.
#[must_use]
pub fn sheet() -> String {
    let list = |dark: bool| {
        COLOURS
            .iter()
            .map(|c| format!("--{}:{};", c.name, if dark { c.dark } else { c.light }))
            .collect::<String>()
    };
    format!(
        ":root{{{}}}\n@media (prefers-color-scheme:dark){{@media screen{{:root{{{}}}}}}}\n{RULES}",
        list(false),
        list(true)
    )
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Relative luminance of a colour `#rrggbb` (WCAG 2.2, definition of relative luminance).
    fn luminance(colour: &str) -> f64 {
        let channel = |at: usize| {
            let value = u8::from_str_radix(&colour[at..at + 2], 16).expect("two hex digits");
            let value = f64::from(value) / 255.0;
            if value <= 0.04045 {
                value / 12.92
            } else {
                ((value + 0.055) / 1.055).powf(2.4)
            }
        };
        0.2126 * channel(1) + 0.7152 * channel(3) + 0.0722 * channel(5)
    }

    fn contrast(a: &str, b: &str) -> f64 {
        let (a, b) = (luminance(a), luminance(b));
        (a.max(b) + 0.05) / (a.min(b) + 0.05)
    }

    #[test]
    fn contrast_itself_is_right() {
        // WCAG 2.2: black on white is 21 : 1; #767676 on white is the known limit, 4.54 : 1.
        assert!((contrast("#000000", "#ffffff") - 21.0).abs() < 1e-9);
        assert!((contrast("#767676", "#ffffff") - 4.54).abs() < 0.005);
    }

    #[test]
    fn every_text_reads_on_every_ground() {
        for text in COLOURS.iter().filter(|c| c.used == Used::Text) {
            for ground in COLOURS.iter().filter(|c| c.used != Used::Text) {
                if ground.used == Used::Mark && ground.name != "turn" {
                    continue;
                }
                for (a, b) in [(text.light, ground.light), (text.dark, ground.dark)] {
                    let ratio = contrast(a, b);
                    assert!(
                        ratio >= 4.5,
                        "{} {a} on {} {b}: {ratio:.2}",
                        text.name,
                        ground.name
                    );
                }
            }
        }
    }

    #[test]
    fn lines_of_a_chart_stand_out() {
        // WCAG 2.2, 1.4.11: 3 : 1 for parts of a graphic that are needed to understand it.
        let page = COLOURS[0];
        for mark in COLOURS.iter().filter(|c| matches!(c.name, "axis" | "bar")) {
            assert!(contrast(mark.light, page.light) >= 3.0, "{}", mark.name);
            assert!(contrast(mark.dark, page.dark) >= 3.0, "{}", mark.name);
        }
    }

    #[test]
    fn every_variable_that_is_used_is_given() {
        for used in RULES.split("var(--").skip(1) {
            let name = used.split(')').next().unwrap_or_default();
            assert!(
                COLOURS.iter().any(|c| c.name == name),
                "`--{name}` is not given"
            );
        }
        for colour in COLOURS {
            assert!(
                RULES.contains(&format!("var(--{})", colour.name)),
                "`{}` unused",
                colour.name
            );
        }
        assert!(!RULES.contains('#'), "a colour beside the variables");
    }
}
