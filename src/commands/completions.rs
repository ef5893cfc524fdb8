//! `overcoat completions`: a script for a shell.

use crate::Status;
use crate::cli::{Cli, Completions};
use crate::failure::Failure;
use crate::output;
use clap::CommandFactory;

pub(super) fn run(arguments: &Completions) -> Result<Status, Failure> {
    let mut script = Vec::new();
    clap_complete::generate(arguments.shell, &mut Cli::command(), "overcoat", &mut script);
    output::print(&String::from_utf8_lossy(&script))?;
    Ok(Status::Met)
}
