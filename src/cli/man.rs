//! `ampledger man`.

use super::args::support::ManArgs;
use super::args::{Arguments, Common};
use super::{KEEPS_UP, output};
use anyhow::{Context, anyhow};
use clap::{Command, CommandFactory};
use clap_mangen::Man;
use clap_mangen::roff::{Roff, roman};

/// Writes the manual page of the program or of one command.
///
/// # Errors
/// No such command; the file exists, or cannot be written.
pub fn run(args: &ManArgs, common: &Common) -> anyhow::Result<u8> {
    let mut program = Arguments::command().disable_help_subcommand(true);
    program.build();
    let command = match &args.of {
        None => program,
        Some(name) => named(&program, name)?,
    };
    let page = page(command).context("the manual page cannot be made")?;
    output::put(common, &String::from_utf8_lossy(&page))?;
    Ok(KEEPS_UP)
}

/// The command of a name.
fn named(program: &Command, name: &str) -> anyhow::Result<Command> {
    let found = program.find_subcommand(name).cloned();
    found.ok_or_else(|| {
        let names: Vec<String> = program
            .get_subcommands()
            .map(|c| format!("`{}`", c.get_name()))
            .collect();
        anyhow!("no command `{name}`: there are {}", names.join(", "))
    })
}

/// The sections of a page; what stands under the help of the command becomes sections of their own.
fn page(command: Command) -> std::io::Result<Vec<u8>> {
    let notes = command
        .get_after_help()
        .map(|text| text.to_string())
        .unwrap_or_default();
    let has_commands = command.has_subcommands();
    let man = Man::new(command)
        .manual("ampledger")
        .source(concat!("ampledger ", env!("CARGO_PKG_VERSION")));
    let mut out = Vec::new();
    man.render_title(&mut out)?;
    man.render_name_section(&mut out)?;
    man.render_synopsis_section(&mut out)?;
    man.render_description_section(&mut out)?;
    man.render_options_section(&mut out)?;
    if has_commands {
        man.render_subcommands_section(&mut out)?;
    }
    let mut more = Roff::new();
    for note in notes.split("\n\n") {
        section(&mut more, note);
    }
    more.to_writer(&mut out)?;
    Ok(out)
}

/// One note as a section.
fn section(roff: &mut Roff, note: &str) {
    let (heading, text) = match note.split_once('\n') {
        Some(("Exit codes:", text)) => ("EXIT STATUS", text),
        Some(("Examples:", text)) => ("EXAMPLES", text),
        _ if note.is_empty() => return,
        _ => ("NOTES", note),
    };
    roff.control("SH", [heading]);
    roff.control("nf", []);
    for line in text.lines() {
        roff.text([roman(line)]);
    }
    roff.control("fi", []);
}
