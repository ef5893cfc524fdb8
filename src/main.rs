//! The `overcoat` command: arguments in, the language's answers out.

mod cli;
mod commands;
mod disk;
mod failure;
mod output;
mod quantity;
mod root;
mod settings;
mod views;
mod walk;

use clap::Parser;
use failure::Failure;
use std::process::ExitCode;

/// What the command ends with; the graver the greater.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub(crate) enum Status {
    /// Everything asked for is met.
    Met = 0,
    /// Something is missed.
    Missed = 1,
    /// Something can't be understood or read.
    NotUnderstood = 2,
    /// The tool itself is at fault.
    Fault = 3,
}

fn main() -> ExitCode {
    // The one place where a fault of the tool's own becomes an exit status.
    let status = std::panic::catch_unwind(|| match cli::Cli::try_parse() {
        Ok(cli) => told(cli),
        Err(error) => refused(&error),
    });
    let status = status.unwrap_or_else(|_| {
        let message = "this is a fault of overcoat, not of the recipe; please report it with the file that brought it \
                       about and the lines above";
        output::complain(cli::Colour::Auto, message);
        Status::Fault
    });
    ExitCode::from(status as u8)
}

/// Runs a command and says what ended it early.
fn told(cli: cli::Cli) -> Status {
    let colour = cli.global.color;
    commands::run(cli).unwrap_or_else(|failure| {
        if !matches!(failure, Failure::Closed) {
            output::complain(colour, &failure.to_string());
        }
        failure.status()
    })
}

/// Prints the help that was asked for, or why the arguments can't be understood.
fn refused(error: &clap::Error) -> Status {
    // A closed output is no fault, and there is nowhere to tell of another.
    let _ = error.print();
    if error.exit_code() == 0 { Status::Met } else { Status::NotUnderstood }
}
