//! From arguments to exit code. Each command reads its input, calls the library, lays the answer
//! out, and writes it.

pub mod args;
mod check;
mod completions;
mod curve;
mod files;
mod fleet;
mod identify;
mod input;
mod man;
mod new;
mod odds;
mod output;
mod parts;
mod progress;
mod remedy;
mod schema;
mod sheet;
mod size;
mod why;
mod wire;

use ampledger::catalog::CatalogError;
use ampledger::problem::Refusal;
use ampledger::resolve::KitError;
use args::{Arguments, Command};

/// Exit code: it keeps up, or nothing was to be judged.
pub const KEEPS_UP: u8 = 0;
/// Exit code: it does not keep up.
pub const DOES_NOT: u8 = 1;
/// Exit code: the input or the call is wrong, or there is no answer.
pub const WRONG: u8 = 2;

/// Runs the command.
///
/// # Errors
/// Anything that leaves no answer: [`Refusal`] of an input file, a file that cannot be written.
pub fn run(arguments: &Arguments) -> anyhow::Result<u8> {
    let common = &arguments.common;
    // what may not be written is told before anything is worked out, and before anything is written
    files::ready(&arguments.command, common)?;
    match &arguments.command {
        Command::Check(check) => check::run(check, common),
        Command::Curve(args) => curve::run(args, common),
        Command::Size(size) => size::run(size, common),
        Command::Remedy(remedy) => remedy::run(remedy, common),
        Command::Wire(args) => wire::run(args, common),
        Command::Sheet(args) => sheet::run(args, common),
        Command::Identify(args) => identify::run(args, common),
        Command::Fleet(fleet) => fleet::run(fleet, common),
        Command::Odds(odds) => odds::run(odds, common),
        Command::Parts(parts) => parts::run(parts, common),
        Command::New(new) => new::run(new, common),
        Command::Schema(schema) => schema::run(schema, common),
        Command::Completions(completions) => completions::run(completions, common),
        Command::Man(man) => man::run(man, common),
    }
}

/// Tells of a problem on standard error; the exit code it calls for.
pub fn told(problem: &anyhow::Error, arguments: &Arguments) -> u8 {
    if output::is_broken_pipe(problem) {
        return KEEPS_UP;
    }
    let colour = arguments.common.colours(&std::io::stderr());
    for problem in each(problem) {
        match refusal(problem) {
            Some(refusal) => output::complain(refusal.render(colour).trim_end()),
            None => output::complain(&format!("error: {problem:#}")),
        }
    }
    WRONG
}

/// What is wrong with each of several inputs.
#[derive(Debug)]
pub struct Several(pub Vec<anyhow::Error>);

impl std::fmt::Display for Several {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        write!(f, "{} inputs are wrong", self.0.len())
    }
}

impl std::error::Error for Several {}

/// A problem, or each of several.
fn each(problem: &anyhow::Error) -> Vec<&anyhow::Error> {
    match problem.downcast_ref() {
        Some(Several(problems)) => problems.iter().collect(),
        None => vec![problem],
    }
}

/// The refusal of an input that a problem is or carries.
fn refusal(problem: &anyhow::Error) -> Option<&Refusal> {
    if let Some(CatalogError::Refused(refusal)) = problem.downcast_ref() {
        return Some(refusal);
    }
    if let Some(KitError::Refused(refusal)) = problem.downcast_ref() {
        return Some(refusal);
    }
    problem.downcast_ref()
}
