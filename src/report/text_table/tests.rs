//! Tables as text: widths, wrapping, headings.

use super::*;
use crate::quantity::{AmpHours, Amps, Fraction, Minutes};

fn style(width: usize) -> Style {
    Style {
        width,
        ..Style::default()
    }
}

fn table() -> Table {
    Table::new("t")
        .columns([
            Column::name("Accessory"),
            Column::number::<Amps>("When on"),
            Column::duration("Time"),
            Column::bar(),
        ])
        .row([
            Cell::name("a rather long name of a lamp"),
            Cell::fixed(Amps(8.25), 1),
            Cell::duration(Minutes(95.0)),
            Cell::bar(Fraction(1.0)),
        ])
        .total([Cell::name("All"), Cell::fixed(Amps(8.25), 1)])
}

#[test]
fn numbers_stand_to_the_right_under_their_unit() {
    let wanted = [
        "Accessory                     When on        Time",
        "                                    A",
        "──────────────────────────────────────────────────────────────────────────",
        "a rather long name of a lamp      8.2  1 h 35 min  ████████████████████████",
        "                              ───────",
        "All                               8.2",
    ];
    let lines = render(&table(), &style(80));
    assert_eq!(lines[0], wanted[0]);
    assert_eq!(lines[1], wanted[1]);
    assert!(lines[2].starts_with("───") && lines[2].chars().count() <= 80);
    assert_eq!(lines[3..], wanted[3..]);
}

#[test]
fn only_names_wrap() {
    let lines = render(&table(), &style(40));
    assert!(
        lines.contains(&"a rather long name       8.2  1 h 35 min".to_owned()),
        "{lines:#?}"
    );
    assert!(lines.contains(&"of a lamp".to_owned()), "{lines:#?}");
}

#[test]
fn a_bar_is_left_out_where_there_is_no_room() {
    assert!(render(&table(), &style(60)).iter().any(|l| l.contains('█')));
    assert!(!render(&table(), &style(44)).iter().any(|l| l.contains('█')));
}

#[test]
fn a_heading_of_two_words_wraps_and_the_last_words_stand_level() {
    let table = Table::new("")
        .columns([
            Column::name("State"),
            Column::number::<AmpHours>("Charge taken out"),
        ])
        .row([Cell::name("x"), Cell::fixed(AmpHours(1.0), 1)]);
    let lines = render(&table, &style(13));
    assert_eq!(
        lines[..4],
        [
            "       Charge",
            "        taken",
            "State     out",
            "           Ah"
        ]
    );
}

#[test]
fn the_widest_words_give_way_first() {
    let part = [
        Span {
            index: 0,
            least: 5,
            natural: 30,
        },
        Span {
            index: 1,
            least: 4,
            natural: 4,
        },
        Span {
            index: 2,
            least: 5,
            natural: 10,
        },
    ];
    assert_eq!(widths(&part, 80), [30, 4, 10]);
    assert_eq!(widths(&part, 34), [16, 4, 10]);
    assert_eq!(widths(&part, 10), [5, 4, 5]);
}

#[test]
fn words_wrap_and_a_word_without_end_is_cut() {
    assert_eq!(wrap("one  two\tthree", 8), ["one two", "three"]);
    assert_eq!(wrap("abcdefghij", 4), ["abcd", "efgh", "ij"]);
    assert_eq!(wrap("   ", 4), Vec::<String>::new());
    assert!(
        wrap("園芸用トラクター 園芸用", 8)
            .iter()
            .all(|l| l.chars().count() <= 8)
    );
}

#[test]
fn long_ids_break_after_a_hyphen() {
    assert_eq!(
        super::at_hyphens("winding-20a-three-phase fits".to_owned(), 16),
        "winding-20a-\nthree-phase fits"
    );
    assert_eq!(
        super::at_hyphens("no-break here".to_owned(), 16),
        "no-break here"
    );
}
