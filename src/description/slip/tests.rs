use super::told;
use crate::description::scan::scan;
use crate::problem::Part;

/// A text that is no YAML, what is marked in it, what is said of it, what would do.
type Row<'a> = (&'a str, &'a str, &'a str, &'a str);

fn hold(rows: &[Row<'_>]) {
    for &(text, mark, what, help) in rows {
        let problems = scan(text).err().unwrap_or_default();
        let last = problems.iter().last().cloned();
        let Some((Part::Bytes(bytes), kind)) = last.map(|p| (p.part, p.kind)) else {
            panic!("{text:?} is read, or refused without a place");
        };
        let found = (
            &text[bytes],
            kind.to_string().replace("not valid YAML: ", ""),
            kind.help().unwrap_or_default(),
        );
        assert_eq!(found, (mark, what.into(), help.into()), "{text}");
    }
}

#[test]
fn a_missing_space_is_told_where_it_is_missing() {
    let colon = "no space after the colon";
    let dash = "no space after the dash";
    hold(&[
        (
            "air:10 °C\n\n# the engine\nengine: {}\n",
            "air:",
            colon,
            "put a space after the colon: `air: 10 °C`",
        ),
        (
            "speeds:\n  idle:1800 rpm # slow\n  governed: 3400 rpm\n",
            "idle:",
            colon,
            "put a space after the colon: `idle: 1800 rpm`",
        ),
        (
            "build:mower # a remark\nair: 10 °C\n",
            "build:",
            colon,
            "put a space after the colon: `build: mower`",
        ),
        (
            "may:\n  Work lights:50 %\n  pump: 10 %\n",
            "Work lights:",
            colon,
            "put a space after the colon: `Work lights: 50 %`",
        ),
        (
            "shift:\n  -crank\n  - idle: 10 min\n",
            "-",
            dash,
            "put a space after it: `- entry`",
        ),
        (
            "list:\n  - {a: 1}\n  -{a: 2}\n",
            "-",
            dash,
            "put a space after it: `- entry`",
        ),
    ]);
}

#[test]
fn a_missing_mark_is_told_where_it_is_missing() {
    let colon = "no colon after the key";
    let dash = "no dash before the entry";
    let put = "put `- ` before it, as before each entry of a list";
    hold(&[
        (
            "capacity 32 Ah\ntype: flooded\n",
            "capacity 32 Ah",
            colon,
            "write `capacity: 32 Ah`",
        ),
        (
            "battery {capacity: 32 Ah, type: gel}\nair: 1 °C\n",
            "battery",
            colon,
            "write `battery: {capacity: 32 Ah, type: gel}`",
        ),
        (
            "air = 10 °C # cold\nbuild: mower\n",
            "air = 10 °C",
            colon,
            "write `air: 10 °C`",
        ),
        (
            "build: mower\nshift\n  - crank\n",
            "shift",
            colon,
            "write `shift:`",
        ),
        (
            "list:\n  - {a: 1}\n  {a: 2}\nparked: 1 h\n",
            "{a: 2}",
            dash,
            put,
        ),
        ("list:\n  {a: 1}\n  {a: 2}\n", "{a: 1}", dash, put),
        ("shift:\n  crank\n  - idle: 1 h\n", "crank", dash, put),
        (
            "list:\n  - {a: 1, b: {c: 2}\n  - {a: 2}\nparked: 1 h\n",
            "{",
            "the brace \"{\" is not closed",
            "close it with `}`",
        ),
        (
            "days: [1, 2\nparked: 1 h\n",
            "[",
            "the bracket \"[\" is not closed",
            "close it with `]`",
        ),
        (
            "days: [1, '[', 2} # [\nparked: 1 h\n",
            "[",
            "the bracket \"[\" is not closed",
            "close it with `]`",
        ),
    ]);
}

#[test]
fn a_line_out_of_line_is_told() {
    let deep = "this line stands deeper than the one above, which has a value already";
    let fits = "the indentation of this line fits none of the lines above";
    let take = "or take that value off";
    hold(&[
        (
            "battery:\n  capacity: 32 Ah\n   type: gel\n",
            "type: gel",
            deep,
            &format!("align `type` with the keys it belongs with, {take}"),
        ),
        (
            "battery: gel # remark\n  capacity: 32 Ah\n",
            "capacity: 32 Ah",
            deep,
            &format!("align `capacity` with the keys it belongs with, {take}"),
        ),
        (
            "shift:\n  - crank\n   - idle: 1 h\n",
            "idle: 1 h",
            deep,
            &format!("align its dash with those of its list, {take}"),
        ),
        (
            "list:\n  - name: x\n   draw: 1 A\n",
            "draw: 1 A",
            fits,
            "align `draw` with the keys it belongs with",
        ),
        (
            "shift:\n  - crank\n - idle: 1 h\n",
            "idle: 1 h",
            fits,
            "align its dash with those of its list",
        ),
        (
            "shift:\n  - crank\n  parked: 12 h\n",
            "parked: 12 h",
            "a key where a list entry should be",
            "put `- ` before it, or align `parked` with the keys it belongs with",
        ),
        (
            "parked: 12 h\n- crank\n",
            "crank",
            "a list entry where a key should be",
            "put it below the key of its list",
        ),
    ]);
}

#[test]
fn a_second_colon_is_told() {
    let colon = "a second colon after a key";
    hold(&[
        (
            "build: My mower: the big one # new\n",
            "My mower: the big one",
            colon,
            "put a text that holds `: ` into quotes: `build: \"My mower: the big one\"`",
        ),
        (
            "starter: draw: 120 A, time: 2 s\n",
            "draw: 120 A, time: 2 s",
            colon,
            "put keys into braces, `starter: {draw: 120 A, time: 2 s}`, a text into quotes",
        ),
    ]);
}

#[test]
fn what_is_no_known_slip_keeps_the_readers_words() {
    hold(&[
        (
            "a: {b: 1 c: 2}\n",
            ":",
            "while parsing a flow mapping, did not find expected \",\" or \"}\"",
            "put a comma between the entries of the brace `{`, and a space after each colon",
        ),
        (
            "a: [b, [c] [d]]\n",
            "[",
            "while parsing a flow sequence, expected \",\" or \"]\"",
            "put a comma between the entries of the bracket `[`",
        ),
        (
            "a: [b]]\n",
            "]",
            "misplaced bracket",
            "take it out, it closes nothing",
        ),
        (
            "a: `b`\n",
            "`",
            "unexpected character: a backtick",
            "put a text that begins with this character into quotes",
        ),
        (
            "a: *b\n",
            "*",
            "while parsing node, found unknown anchor",
            "an alias `*name` needs an anchor `&name` before it",
        ),
        (
            "a: \"b\" c\n",
            "c",
            "invalid trailing content after double-quoted scalar",
            "put the whole of the text into quotes",
        ),
        (
            "a: \"b\nc: 1\n",
            "\"",
            "invalid indentation in quoted scalar",
            "close the quotation mark",
        ),
    ]);
}

/// A bracket that goes over several lines and is closed in the end is no slip; it is told beside.
#[test]
fn a_bracket_that_is_closed_later_is_not_blamed() {
    let text = "a: [\n  b,\n  {c: 1 d: 2},\n]\n";
    let problems = scan(text).err().unwrap_or_default();
    let said = problems.iter().last().map(|p| p.kind.to_string());
    assert!(said.is_some_and(|s| s.contains("did not find expected")));
}

/// Whatever reader gives up wherever: a place within the text, on whole characters.
#[test]
fn any_place_of_any_text_has_an_answer() {
    let texts = [
        "",
        "\n",
        "é",
        "é:é\n\té: [\n",
        "- é\n#é\n -é: {é\n\"é\n'é",
        "a\u{2003}: [\"é",
    ];
    for text in texts {
        let places = (0..=text.len()).filter(|at| text.is_char_boundary(*at));
        for at in places {
            for what in [
                "",
                "mapping values",
                "did not find expected key",
                "simple key",
                "intercepting",
            ] {
                let told = told(text, at..at, what);
                let Part::Bytes(bytes) = told.part else {
                    panic!("no place")
                };
                assert!(
                    text.get(bytes.clone()).is_some(),
                    "{text:?} {at} {what}: {bytes:?}"
                );
            }
        }
    }
}
