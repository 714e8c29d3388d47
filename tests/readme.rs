//! The README's commands run and print what it says they print.

use std::process::Command;

/// Console blocks of the README: the command's words and the lines printed. `[...]` ends a block
/// that is shown in part.
fn blocks(text: &str) -> Vec<(Vec<String>, Vec<String>, bool)> {
    let mut all = Vec::new();
    let mut lines = text.lines();
    while let Some(line) = lines.next() {
        if line != "```console" {
            continue;
        }
        let command = lines
            .next()
            .and_then(|l| l.strip_prefix("$ ampledger "))
            .expect("a command");
        let mut shown: Vec<String> = lines
            .by_ref()
            .take_while(|l| *l != "```")
            .map(str::to_owned)
            .collect();
        let whole = shown.last().is_none_or(|last| last != "[...]");
        if !whole {
            shown.pop();
        }
        all.push((words(command), shown, whole));
    }
    all
}

/// Words of a command line, single quotes heeded.
fn words(command: &str) -> Vec<String> {
    let mut all = vec![String::new()];
    let mut quoted = false;
    for letter in command.chars() {
        match letter {
            '\'' => quoted = !quoted,
            ' ' if !quoted => all.push(String::new()),
            _ => {
                if let Some(word) = all.last_mut() {
                    word.push(letter);
                }
            }
        }
    }
    all
}

#[test]
fn every_block_prints_what_it_shows() {
    let readme = include_str!("../README.md");
    let blocks = blocks(readme);
    assert!(blocks.len() >= 2, "the README shows no commands");
    for (arguments, shown, whole) in blocks {
        let output = Command::new(env!("CARGO_BIN_EXE_ampledger"))
            .args(&arguments)
            .current_dir(env!("CARGO_MANIFEST_DIR"))
            .env_remove("NO_COLOR")
            .output()
            .expect("it runs");
        let printed = String::from_utf8(output.stdout).expect("UTF-8");
        let printed: Vec<&str> = printed.lines().collect();
        let compared = if whole { printed.len() } else { shown.len() };
        assert_eq!(
            printed.get(..compared).unwrap_or(&printed),
            shown,
            "{arguments:?}"
        );
    }
}

#[test]
fn the_two_commands_are_there() {
    let readme = include_str!("../README.md");
    assert!(readme.contains("\ncargo run --release -- check examples/dealer-mower-quote.yaml\n"));
    assert!(readme.contains("\ncargo test --locked\n"));
}
