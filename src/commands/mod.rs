//! The commands, one a file.

mod check;
mod completions;
mod explain;
mod fmt;
mod handbook;
mod one;
mod spectrum;
mod yields;

use crate::cli::{Cli, Command};
use crate::failure::Failure;
use crate::{Status, disk::DiskFiles, root, root::Root, settings::Settings};
use std::path::{Path, PathBuf};

/// Does what the arguments ask for.
pub(crate) fn run(cli: Cli) -> Result<Status, Failure> {
    let global = &cli.global;
    match cli.command {
        Command::Check(arguments) => check::run(&arguments, global),
        Command::Spectrum(arguments) => spectrum::run(&arguments, global),
        Command::Yield(arguments) => yields::run(&arguments, global),
        Command::Fmt(arguments) => fmt::run(&arguments, global),
        Command::Explain(arguments) => explain::run(&arguments),
        Command::Handbook(arguments) => handbook::run(&arguments),
        Command::Completions(arguments) => completions::run(&arguments),
    }
}

/// A project on the disk.
struct Opened {
    root: Root,
    files: DiskFiles,
    settings: Settings,
    /// The folder where the command was run.
    here: PathBuf,
}

/// Finds the project of some paths and reads its settings.
fn open(paths: &[PathBuf], root: Option<&Path>) -> Result<Opened, Failure> {
    let here = std::env::current_dir().and_then(|here| here.canonicalize());
    let here = here.map_err(|error| Failure::path(Path::new("."), "read", &error))?;
    let root = root::find(paths, root)?;
    let files = DiskFiles::new(root.folder.clone());
    let settings = Settings::read(&files)?;
    Ok(Opened { root, files, settings, here })
}
