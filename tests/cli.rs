//! The shell's side of the program: what is written where, with which status, and nothing else.

mod support;

use snapbox::str;
use support::{Folder, GOOD, program};

#[test]
fn help_names_every_command_and_the_exit_codes() {
    let output = program().arg("--help").output().expect("it runs");
    assert_eq!(output.status.code(), Some(0));
    assert!(output.stderr.is_empty());
    let help = String::from_utf8_lossy(&output.stdout);
    for word in [
        "check",
        "parts",
        "new",
        "schema",
        "completions",
        "man",
        "Exit codes:",
        "Examples:",
    ] {
        assert!(help.contains(word), "{word}");
    }
}

/// Each command's help has examples, and each example is a call that is understood.
#[test]
fn examples_of_the_help_are_calls_that_are_understood() {
    let help = program().arg("--help").output().expect("it runs");
    let help = String::from_utf8_lossy(&help.stdout).into_owned();
    let commands = help.split("Commands:\n").nth(1).expect("commands").lines();
    let names: Vec<&str> = commands
        .take_while(|line| !line.is_empty())
        .filter_map(|line| line.split_whitespace().next())
        .filter(|name| *name != "help")
        .collect();
    assert!(names.len() >= 6, "{names:?}");
    for name in names {
        let output = program().args([name, "--help"]).output().expect("it runs");
        let help = String::from_utf8_lossy(&output.stdout).into_owned();
        let examples = help
            .split("Examples:\n")
            .nth(1)
            .unwrap_or_else(|| panic!("{name} has no examples"));
        let mut calls = 0;
        for line in examples.lines() {
            for call in line
                .split(" | ")
                .filter(|call| call.trim().starts_with("ampledger "))
            {
                let call = call
                    .split(" > ")
                    .next()
                    .expect("a call")
                    .split(" >> ")
                    .next()
                    .expect("a call");
                understood(call.trim());
                calls += 1;
            }
        }
        assert!(calls > 0, "{name} has no examples");
    }
}

/// The call fails over its files at most, not over its options.
#[track_caller]
fn understood(call: &str) {
    let folder = Folder::new();
    let mut words: Vec<String> = Vec::new();
    let mut quoted = false;
    let mut word = String::new();
    for c in call.chars().chain([' ']) {
        match c {
            '\'' => quoted = !quoted,
            ' ' if !quoted => {
                words.push(std::mem::take(&mut word));
            }
            other => word.push(other),
        }
    }
    words.retain(|w| !w.is_empty());
    let args: Vec<&str> = words.iter().skip(1).map(String::as_str).collect();
    let output = folder.run(&args).stdin("").output().expect("it runs");
    let told = String::from_utf8_lossy(&output.stderr);
    assert!(
        !told.contains("Usage:") && !told.contains("panick"),
        "{call}: {told}"
    );
}

#[test]
fn a_call_without_a_command_is_wrong() {
    let output = program().output().expect("it runs");
    assert_eq!(output.status.code(), Some(2));
    assert!(output.stdout.is_empty());
    program()
        .arg("boil")
        .assert()
        .code(2)
        .stdout_eq("")
        .stderr_eq(str![[r#"
error: unrecognized subcommand 'boil'

Usage: ampledger [OPTIONS] <COMMAND>

For more information, try '--help'.

"#]]);
}

/// What is wrong with a kit is told in the kit's file, and what is wrong with the build in the build's.
#[test]
fn a_kit_that_does_not_fit_is_shown_in_its_own_file() {
    let folder = Folder::with_good();
    let kit = "accessories:\n  - {name: lamp, draw: 30 W, duty: {idel: 100 %}}\n  - {name: pump, draw: 4 A, circuit: own}\n";
    folder.write("kit.yaml", kit);
    let told = "\
error: no state is named `idel`
 --> kit.yaml:2:37
  |
2 |   - {name: lamp, draw: 30 W, duty: {idel: 100 %}}
  |                                     ^^^^ did you mean `idle`?
  |
  = note: field `accessories[0].duty.idel`
  = help: names here: idle, governed, crank, stopped

error: no circuit is named `own`
 --> kit.yaml:3:38
  |
3 |   - {name: pump, draw: 4 A, circuit: own}
  |                                      ^^^ not there
  |
  = note: field `accessories[1].circuit`
  = help: there is none

2 problems in kit.yaml
";
    for command in ["check", "remedy", "size", "sheet"] {
        folder
            .run(&[command, "good.yaml", "--with", "kit.yaml"])
            .assert()
            .code(2)
            .stdout_eq("")
            .stderr_eq(told);
    }
    folder.write(
        "fleet.csv",
        "machine,build,kit\na,good.yaml,kit.yaml\nb,good.yaml,\n",
    );
    let fleet = folder
        .run(&["fleet", "fleet.csv", "--format", "csv"])
        .output();
    let rows = String::from_utf8(fleet.expect("run").stdout).expect("text");
    assert!(
        rows.contains("kit.yaml:2:37: no state is named `idel`"),
        "{rows}"
    );
    folder.write(
        "good.yaml",
        folder.read("good.yaml").replace("40 W", "40 V"),
    );
    let both = folder.run(&["check", "good.yaml", "--with", "kit.yaml"]);
    let told = String::from_utf8(both.output().expect("run").stderr).expect("text");
    assert!(
        told.contains("good.yaml:11:") && !told.contains("kit.yaml"),
        "{told}"
    );
}

#[test]
fn a_build_comes_from_standard_input() {
    let folder = Folder::new();
    folder
        .run(&["check", "-"])
        .stdin(GOOD)
        .assert()
        .code(0)
        .stderr_eq("");
    folder
        .run(&["check", "-"])
        .stdin(GOOD.replace("40 W", "40"))
        .assert()
        .code(2)
        .stdout_eq("")
        .stderr_eq(str![[r#"
error: unit missing: `40` must be a power, a current or a resistance
  --> standard input:11:24
   |
11 |   - {name: lamp, draw: 40, duty: {governed: 100 %}}
   |                        ^^ a number without a unit: `A`, `mA`, `W`, `kW`, `ohm` or `mΩ`
   |
   = note: field `accessories[0].draw`
   = help: write it like `55 W`

"#]]);
}

#[test]
fn line_ends_of_other_systems_change_nothing() {
    let folder = Folder::with_good();
    folder.write("dos.yaml", GOOD.replace('\n', "\r\n"));
    let plain = folder
        .run(&["check", "good.yaml"])
        .output()
        .expect("it runs");
    let dos = folder
        .run(&["check", "dos.yaml"])
        .output()
        .expect("it runs");
    assert_eq!(plain, dos);
    assert!(!plain.stdout.contains(&b'\r'));
    folder.write(
        "dos.yaml",
        GOOD.replace("40 W", "40 V").replace('\n', "\r\n"),
    );
    let output = folder
        .run(&["check", "dos.yaml"])
        .output()
        .expect("it runs");
    assert!(String::from_utf8_lossy(&output.stderr).contains("dos.yaml:11:27"));
    assert!(!output.stderr.contains(&b'\r'));
}

/// Shells that leave patterns alone: the program matches them.
#[test]
fn patterns_name_the_files_they_match() {
    let folder = Folder::new();
    for name in ["one", "two", "odd [1]"] {
        folder.write(
            &format!("builds/{name}.yaml"),
            GOOD.replace("Small mower", name),
        );
    }
    let json = |args: &[&str]| {
        let output = folder.run(args).output().expect("it runs");
        assert_eq!(
            output.status.code(),
            Some(0),
            "{}",
            String::from_utf8_lossy(&output.stderr)
        );
        serde_json::from_slice::<serde_json::Value>(&output.stdout).expect("JSON")
    };
    let all = json(&["check", "builds/*.yaml", "--format", "json"]);
    let names: Vec<_> = all
        .as_array()
        .expect("a list")
        .iter()
        .map(|c| c["build"].clone())
        .collect();
    assert_eq!(names, ["odd [1]", "one", "two"]);
    // a file of that very name is itself
    let one = json(&["check", "builds/odd [1].yaml", "--format", "json"]);
    assert_eq!(one["build"], "odd [1]");
    folder
        .run(&["check", "builds/*.yml"])
        .assert()
        .code(2)
        .stdout_eq("")
        .stderr_eq("error: `builds/*.yml` matches no file\n");
}

#[test]
fn colours_only_where_they_are_wanted() {
    let folder = Folder::with_good();
    folder.write("bad.yaml", GOOD.replace("40 W", "40"));
    let escapes = |args: &[&str]| {
        let output = folder.run(args).output().expect("it runs");
        let has = |bytes: &[u8]| bytes.contains(&0x1b);
        (has(&output.stdout), has(&output.stderr))
    };
    assert_eq!(escapes(&["check", "good.yaml"]), (false, false));
    assert_eq!(
        escapes(&["check", "good.yaml", "--color", "always"]),
        (true, false)
    );
    assert_eq!(escapes(&["check", "bad.yaml"]), (false, false));
    assert_eq!(
        escapes(&["check", "bad.yaml", "--color", "always"]),
        (false, true)
    );
    for format in ["json", "csv", "markdown", "html"] {
        assert_eq!(
            escapes(&[
                "check",
                "good.yaml",
                "--color",
                "always",
                "--format",
                format
            ]),
            (false, false)
        );
    }
}

/// Characters of the longest line.
fn widest(text: &[u8]) -> usize {
    String::from_utf8_lossy(text)
        .lines()
        .map(|l| l.chars().count())
        .max()
        .unwrap_or(0)
}

#[test]
fn a_width_is_kept_to() {
    let folder = Folder::with_good();
    for (args, most) in [
        (&["check", "good.yaml"][..], 80),
        (&["parts"], 80),
        (&["parts", "winding-15a"], 80),
    ] {
        let output = folder.run(args).output().expect("it runs");
        assert!(
            widest(&output.stdout) <= most,
            "{args:?}: {}",
            widest(&output.stdout)
        );
        let narrow = [args, &["--width", "60"]].concat();
        let output = folder.run(&narrow).output().expect("it runs");
        assert!(
            widest(&output.stdout) <= 60,
            "{narrow:?}: {}",
            widest(&output.stdout)
        );
    }
    folder
        .run(&["check", "good.yaml", "--width", "3"])
        .assert()
        .code(2)
        .stdout_eq("");
}

#[test]
fn ascii_alone_where_it_is_asked_for() {
    let folder = Folder::with_good();
    let output = folder.run(&["parts", "--ascii"]).output().expect("it runs");
    let text = String::from_utf8_lossy(&output.stdout);
    assert!(!text.contains(['─', '█']), "{text}");
}

#[test]
fn parts_are_searched_and_shown() {
    let folder = Folder::new();
    folder
        .run(&["parts", "led", "bar"])
        .assert()
        .success()
        .stderr_eq("")
        .stdout_eq(str![[r#"
Catalogs: led bar
2 parts

Accessories
Id                  What it is            Figures   Price
─────────────────────────────────────────────────────────
light-bar-led-72w   LED light bar, 72 W   72 W      85.00
light-bar-led-120w  LED light bar, 120 W  120 W    125.00

"#]]);
    folder
        .run(&["parts", "winding-9a"])
        .assert()
        .success()
        .stderr_eq("")
        .stdout_eq(str![[r#"
winding-9a
9 A charging winding, bridge, regulated

Key                   Value
─────────────────────────────────────────────────────────────────────────────
winding.rated         9 A at 3600 rpm
winding.open_circuit  28 V at 3600 rpm ± 7 %
winding.resistance    0.25 ohm ± 20 %
winding.poles         12
rectifier             full-wave
regulator.holds       14.4 V ± 1.5 %
regulator.kind        series
price                 110
figures from          typical of windings met with, no source; price invented
certainty             common practice
stands in             built-in windings.yaml, under `charging`

part: winding-9a

"#]]);
}

#[test]
fn parts_that_are_not_there_are_told() {
    let folder = Folder::new();
    let says = |args: &[&str], told: &str| {
        folder
            .run(args)
            .assert()
            .code(2)
            .stdout_eq("")
            .stderr_eq(told.to_owned());
    };
    says(
        &["parts", "wnding-9a"],
        "error: no part `wnding-9a`: did you mean `winding-9a`?\n",
    );
    says(
        &["parts", "steam"],
        "error: no part has `steam` in its id or title: `ampledger parts` lists all there are\n",
    );
    says(
        &["parts", "--kind", "kits", "winding-9a"],
        "error: no part has `winding-9a` in its id or title under `kits`: `ampledger parts` lists all there are\n",
    );
}

/// Every entry is listed once, under its kind, with figures to choose it by.
#[test]
fn parts_as_json_hold_every_entry() {
    use ampledger::catalog::{Catalogs, Kind};
    let output = program()
        .args(["parts", "--format", "json"])
        .output()
        .expect("it runs");
    let listed: serde_json::Value = serde_json::from_slice(&output.stdout).expect("JSON");
    let listed = listed["parts"].as_array().expect("a list");
    let catalogs = Catalogs::builtin();
    let entries: Vec<_> = Kind::ALL
        .into_iter()
        .flat_map(|k| catalogs.entries(k))
        .collect();
    assert_eq!(listed.len(), entries.len());
    for (row, entry) in listed.iter().zip(&entries) {
        assert_eq!(
            (&row["id"], &row["kind"]),
            (&entry.id.clone().into(), &entry.kind.key().into())
        );
        assert_ne!(row["figures"], "", "{}", entry.id);
        assert_ne!(row["certainty"], "certainty not said", "{}", entry.id);
    }
}

#[test]
fn completions_name_the_commands() {
    for shell in ["bash", "zsh", "fish", "powershell", "elvish"] {
        let output = program()
            .args(["completions", shell])
            .output()
            .expect("it runs");
        assert!(output.status.success());
        let script = String::from_utf8_lossy(&output.stdout);
        for word in ["check", "parts", "catalogs"] {
            assert!(script.contains(word), "{shell}: {word}");
        }
    }
    let bash = program()
        .args(["completions", "bash"])
        .output()
        .expect("it runs");
    assert!(String::from_utf8_lossy(&bash.stdout).contains("series-regulated shunt-regulated"));
}

#[test]
fn manual_pages_have_their_sections() {
    let page = |args: &[&str]| {
        let output = program().arg("man").args(args).output().expect("it runs");
        assert!(output.status.success());
        String::from_utf8_lossy(&output.stdout).into_owned()
    };
    let program_page = page(&[]);
    for section in [
        "NAME",
        "SYNOPSIS",
        "OPTIONS",
        "SUBCOMMANDS",
        "\"EXIT STATUS\"",
        "EXAMPLES",
    ] {
        assert!(
            program_page.contains(&format!("\n.SH {section}")),
            "{section}"
        );
    }
    assert!(page(&["check"]).contains(".TH ampledger-check 1"));
    program()
        .args(["man", "nonesuch"])
        .assert()
        .code(2)
        .stdout_eq("");
}

#[test]
fn schemas_are_json() {
    for file in ["build", "catalog"] {
        let output = program().args(["schema", file]).output().expect("it runs");
        assert!(output.status.success());
        let schema: serde_json::Value = serde_json::from_slice(&output.stdout).expect("JSON");
        assert_eq!(schema["type"], "object");
    }
}
