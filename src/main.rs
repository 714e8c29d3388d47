//! The command: arguments in, a call to the library, bytes out, an exit code.

mod cli;

use clap::Parser;
use std::process::ExitCode;

fn main() -> ExitCode {
    let arguments = match cli::args::Arguments::try_parse() {
        Ok(arguments) => arguments,
        Err(problem) => {
            let code = if problem.use_stderr() {
                cli::WRONG
            } else {
                cli::KEEPS_UP
            };
            // A broken pipe while printing help is no error.
            let _ = problem.print();
            return ExitCode::from(code);
        }
    };
    match cli::run(&arguments) {
        Ok(code) => ExitCode::from(code),
        Err(problem) => {
            let code = cli::told(&problem, &arguments);
            // What was read goes with the process: giving back a large file's values one by one takes longer.
            std::mem::forget(problem);
            ExitCode::from(code)
        }
    }
}
