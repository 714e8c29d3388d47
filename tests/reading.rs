//! Reading build files: exact places of problems, files that must be accepted, and mutants of a good file.

use ampledger::description::{Description, DrawText, DutyText, read};
use ampledger::problem::Source;
use ampledger::quantity::{AmpHours, Celsius, Fraction, Rpm, Volts, Watts};

/// Every key there is, in block and flow style, with anchors, quotes, comments and every spelling of a unit.
const FULL: &str = include_str!("reading/full.yaml");

#[track_caller]
fn accepted(text: &str) -> (Description, Source) {
    read("full.yaml", text.as_bytes()).unwrap_or_else(|refusal| panic!("{refusal}"))
}

/// Lines, columns and the beginning of the title of every problem.
fn problems(text: &str) -> Vec<(usize, usize, String)> {
    let Err(refusal) = read("full.yaml", text.as_bytes()) else {
        return Vec::new();
    };
    let places = refusal.problems().iter().map(|p| {
        let (line, column) = refusal.source().place(p).unwrap_or_default();
        (line, column, p.kind.to_string())
    });
    places.collect()
}

#[test]
fn the_full_file_reads_as_written() {
    let (d, _) = accepted(FULL);
    the_machine_reads_as_written(&d);
    the_work_reads_as_written(&d);
}

fn the_machine_reads_as_written(d: &Description) {
    assert_eq!(d.build.value, "Orchard mower: evening work");
    assert_eq!(d.air.as_ref().map(|a| a.value), Some(Celsius(-10.0)));
    let speeds: Vec<_> = d
        .engine
        .speeds
        .iter()
        .map(|(name, rpm)| (name.as_str(), rpm.value))
        .collect();
    assert_eq!(speeds, [("idle", Rpm(1800.0)), ("governed", Rpm(3400.0))]);
    let winding = d.charging[0].winding.as_ref().expect("a winding");
    let open_circuit = winding.open_circuit.as_ref().expect("open-circuit volts");
    assert_eq!(open_circuit.value, (Volts(28.0), Rpm(3600.0)));
    assert_eq!(
        open_circuit.tolerance.map(|t| t.relative),
        Some(Fraction(0.06))
    );
    assert_eq!(winding.readings.len(), 3);
    let battery = d.battery.as_ref().expect("a battery");
    assert_eq!(
        battery.capacity.as_ref().map(|c| c.value),
        Some(AmpHours(30.0))
    );
    assert_eq!(
        battery.rest_full.as_ref().map(|v| v.path.as_str()),
        Some("battery.rest_volts.full")
    );
}

fn the_work_reads_as_written(d: &Description) {
    let lamp = &d.accessories[0];
    assert_eq!(
        lamp.draw.as_ref().map(|w| w.value),
        Some(DrawText::Power(Watts(55.0)))
    );
    match lamp.duty.as_ref().expect("a duty") {
        DutyText::ByState { shares, .. } => {
            let (state, share) = &shares[1];
            assert_eq!(
                (state.value.as_str(), share.value),
                ("governed", Fraction(0.85))
            );
            assert_eq!(share.path, "accessories[0].duty.governed");
        }
        DutyText::Everywhere(share) => panic!("{share:?}"),
    }
    let steps: Vec<_> = d
        .shift
        .iter()
        .map(|s| {
            (
                s.state.value.as_str(),
                s.time.as_ref().map(|t| t.value.minutes()),
            )
        })
        .collect();
    assert_eq!(steps[0], ("crank", None));
    assert_eq!(steps[1].0, "idle");
    assert_eq!(
        d.shift[2].time.as_ref().map(|t| t.path.as_str()),
        Some("shift[2].governed")
    );
    assert_eq!(
        d.shift[2].time.as_ref().map(|t| t.value.minutes().round()),
        Some(95.0)
    );
}

/// A byte order mark, other line ends and a missing last line end change nothing.
#[test]
fn line_ends_and_a_byte_order_mark_change_nothing() {
    let (plain, _) = accepted(FULL);
    let same = |text: String| assert_eq!(format!("{:?}", accepted(&text).0), format!("{plain:?}"));
    same(FULL.replace('\n', "\r\n"));
    same(format!("\u{feff}{FULL}"));
    same(FULL.trim_end().to_owned());
    same(format!("---\n{FULL}...\n"));
}

/// One slip each in a file that is otherwise right: what is written, what stands there instead, the line and column
/// at which it is told, and how the message begins.
const SLIPS: [(&str, &str, usize, usize, &str); 12] = [
    ("air: 14 °F", "air: 14 °G", 3, 9, "unknown unit `°G`"),
    (
        "idle: 1800 rpm",
        "idle: 0 rpm",
        6,
        18,
        "`0 rpm`: engine speed may not be zero",
    ),
    (
        "poles: 12",
        "poles: 13",
        22,
        14,
        "number of poles may not be 13",
    ),
    (
        "inductance: 0.4 mH",
        "inductance: -0.4 mH",
        15,
        19,
        "`-0.4 mH`: inductance may not be negative",
    ),
    (
        "rectifier: {kind: full-wave",
        "rectifier: {kind: full",
        29,
        23,
        "`full` is no kind of rectifier",
    ),
    (
        "full: 12.65 V",
        "full: 11 V",
        42,
        35,
        "the volts when empty is not below",
    ),
    (
        "draw: 55 W ± 8 %",
        "draw: 55 W ± 8 V",
        54,
        20,
        "wrong unit: `V` is a voltage",
    ),
    (
        "governed: 85 %",
        "governed: 185 %",
        57,
        35,
        "`185 %`: duty is above the limit of 100 %",
    ),
    (
        "      - Spray pump\n",
        "      - Spray pomp\n",
        75,
        9,
        "no accessory is called `Spray pomp`",
    ),
    (
        "- stopped: 20 min",
        "- stoped: 20 min",
        83,
        5,
        "no state `stoped` is defined",
    ),
    (
        "engine_space",
        "engine_spaec",
        104,
        3,
        "unknown key `engine_spaec`",
    ),
    (
        "lamps: yes",
        "lamps: maybe",
        98,
        10,
        "`maybe` is no answer to yes or no",
    ),
];

#[test]
fn slips_are_told_where_they_are() {
    for (from, to, line, column, says) in SLIPS {
        assert_eq!(FULL.matches(from).count(), 1, "{from} is in the file once");
        let found = problems(&FULL.replacen(from, to, 1));
        let first = found.first().unwrap_or_else(|| panic!("{to} was accepted"));
        assert_eq!((first.0, first.1), (line, column), "{to}: {found:?}");
        assert!(first.2.starts_with(says), "{to}: {found:?}");
    }
}

/// What stands at a path is found there.
#[test]
fn every_path_has_a_place() {
    let (description, source) = accepted(FULL);
    assert!(paths(&description).len() > 100);
    placed(&description, &source);
}

/// Every path in a description, by its debug text, which shows all of them.
fn paths(description: &Description) -> Vec<String> {
    let text = format!("{description:?}");
    let mut out = Vec::new();
    for after in text.split("path: \"").skip(1) {
        let mut path = String::new();
        let mut chars = after.chars();
        while let Some(c) = chars.next() {
            match c {
                '"' => break,
                '\\' => path.extend(chars.next()),
                other => path.push(other),
            }
        }
        out.push(path);
    }
    out
}

fn placed(description: &Description, source: &Source) {
    for path in paths(description) {
        let found = source.places.find(&path);
        assert!(
            found.is_some(),
            "no place for `{path}` in:\n{}",
            source.text
        );
    }
}

/// A generator of numbers, the same in every run (constants of Knuth's MMIX, from memory).
struct Dice(u64);

impl Dice {
    fn below(&mut self, n: usize) -> usize {
        self.0 = self
            .0
            .wrapping_mul(6_364_136_223_846_793_005)
            .wrapping_add(1_442_695_040_888_963_407);
        usize::try_from((self.0 >> 33) % n as u64).unwrap_or(0)
    }
}

/// Changes a text in a few places: bytes, words, lines, indentation.
fn mutant(text: &str, dice: &mut Dice) -> Vec<u8> {
    const BITS: &[&str] = &[
        " ", "\n", ":", ": ", "- ", "{", "}", "[", "]", "\"", "'", "#", " #", "&a ", "*a", "*heat",
        "<<: ", "!!str ", "|", ">-", "\t", "%", "±", "°", "\u{2212}", "1e400", ".nan", "~", "null",
        "0", "-", "---\n", "...\n", "\u{feff}", "\u{85}", "\0", "? ", "crank", "name", "V", "rpm",
        ",", "\\", "é",
    ];
    let mut bytes = text.as_bytes().to_vec();
    for _ in 0..=dice.below(2) * dice.below(2) {
        let at = dice.below(bytes.len() + 1);
        match dice.below(9) {
            0 => {
                let end = (at + dice.below(12)).min(bytes.len());
                bytes.drain(at..end);
            }
            1 | 2 => {
                bytes.splice(at..at, BITS[dice.below(BITS.len())].bytes());
            }
            3 => {
                let mut lines: Vec<&[u8]> = bytes.split_inclusive(|b| *b == b'\n').collect();
                let (one, other) = (dice.below(lines.len()), dice.below(lines.len()));
                if dice.below(2) == 0 {
                    lines.swap(one, other)
                } else {
                    lines.insert(one, lines[other])
                }
                bytes = lines.concat();
            }
            4 => bytes.truncate(at),
            5..=7 => {
                let ends = bytes
                    .iter()
                    .enumerate()
                    .skip(at)
                    .find(|(_, b)| **b == b'\n');
                let end = ends.map_or(bytes.len(), |(i, _)| i);
                bytes.splice(
                    end..end,
                    ["  # remark", "\n", "\n   # remark", " "][dice.below(4)].bytes(),
                );
            }
            _ => {
                if let Some(byte) = bytes.get_mut(at) {
                    *byte = u8::try_from(dice.below(256)).unwrap_or(b'?');
                }
            }
        }
        if bytes.is_empty() {
            break;
        }
    }
    bytes
}

/// Never a panic; what is refused has messages; what is accepted has a place for each path.
/// `MUTANTS=100000 cargo test --release --test reading` looks longer.
#[test]
fn mutants_of_a_good_file_are_answered() {
    let asked = std::env::var("MUTANTS").ok().and_then(|n| n.parse().ok());
    let rounds: usize = asked.unwrap_or(600);
    let mut dice = Dice(11 + rounds as u64);
    let (mut good, mut bad) = (0, 0);
    for _ in 0..rounds {
        let bytes = mutant(FULL, &mut dice);
        match read("mutant.yaml", &bytes) {
            Ok((description, source)) => {
                good += 1;
                placed(&description, &source);
            }
            Err(refusal) => {
                bad += 1;
                assert!(!refusal.problems().is_empty());
                let text = refusal.render(bad % 2 == 0);
                assert!(text.contains("error"), "{text}");
            }
        }
    }
    assert!(
        good > rounds / 8 && bad > rounds / 8,
        "{good} accepted, {bad} refused"
    );
}
