//! `overcoat yield`: how many parts of one recipe pass, and why the others don't.

use super::one::{self, One};
use crate::Status;
use crate::cli::{Global, Table, Yield};
use crate::failure::Failure;
use crate::output;
use crate::views::{Shown, yields};
use indicatif::{ProgressBar, ProgressStyle};
use overcoat_lang::model::{Recipe, Requirement};
use overcoat_lang::report::{Column, Part, Watch, YieldReport};
use overcoat_lang::simulate;
use std::io::{IsTerminal, Write};
use std::sync::Arc;
use std::sync::atomic::{AtomicBool, Ordering};

pub(super) fn run(arguments: &Yield, global: &Global) -> Result<Status, Failure> {
    let Some(One { project, opened, recipe }) =
        one::named(&arguments.file, arguments.recipe.as_deref(), global)?
    else {
        return Ok(Status::NotUnderstood);
    };
    // Stopped from the keyboard, it ends in order: no part of a file is left behind.
    let _ = ctrlc::set_handler(|| STOP.store(true, Ordering::Relaxed));
    let no_yield = |why: String| Failure::message(format!("`{}` has no yield: {why}", recipe.name));
    if arguments.format == Table::Csv {
        let mut rows = Rows { bar: Bar::hidden(), out: sink(arguments)?, failed: None };
        let found = simulate(&recipe, arguments.parts, &mut rows).map_err(no_yield)?;
        rows.bar.0.finish_and_clear();
        stopped()?;
        if let Some(error) = rows.failed {
            return Err(error.into());
        }
        rows.out.finish(arguments)?;
        return Ok(status(&recipe, &found));
    }
    let mut bar = Bar::hidden();
    let found = simulate(&recipe, arguments.parts, &mut bar).map_err(no_yield)?;
    bar.0.finish_and_clear();
    stopped()?;
    let shown = Shown::new(&project.sources, &opened.root.folder, &opened.here);
    let text = match arguments.format {
        Table::Json => yields::json(&recipe, &found).map_err(|error| {
            Failure::Fault(format!("the yield can't be written: {error}; please report this"))
        })?,
        _ => {
            let coloured = arguments.output.is_none() && output::coloured(global.color, &std::io::stdout());
            yields::table(&recipe, &found, &shown, coloured)
        }
    };
    match &arguments.output {
        Some(path) => output::replace(path, &text)?,
        None => output::print(&text)?,
    }
    Ok(status(&recipe, &found))
}

/// Whether the yield is what the recipe promises, in whatever format it is told.
fn status(recipe: &Recipe, found: &YieldReport) -> Status {
    if yields::short(recipe, found) { Status::Missed } else { Status::Met }
}

/// Whether it was stopped from the keyboard.
static STOP: AtomicBool = AtomicBool::new(false);

fn stopped() -> Result<(), Failure> {
    if STOP.load(Ordering::Relaxed) {
        Err(Failure::message("stopped; nothing was written".to_owned()))
    } else {
        Ok(())
    }
}

/// How far it has come; nothing at all where the standard error is no terminal.
struct Bar(ProgressBar);

impl Bar {
    fn hidden() -> Bar {
        Bar(ProgressBar::hidden())
    }
}

impl Watch for Bar {
    fn begin(&mut self, _: &[Column], _: &[Arc<Requirement>], parts: u32) {
        if std::io::stderr().is_terminal() {
            let style = ProgressStyle::with_template("{bar:30} {pos} of {len} parts, {eta} to go");
            self.0 = ProgressBar::new(u64::from(parts));
            self.0.set_style(style.unwrap_or_else(|_| ProgressStyle::default_bar()));
        }
    }

    fn part(&mut self, _: &Part) -> bool {
        self.0.inc(1);
        !STOP.load(Ordering::Relaxed)
    }
}

/// Rows as they come: to the standard output, or to a file that takes its name when it is whole.
struct Rows {
    bar: Bar,
    out: Sink,
    failed: Option<std::io::Error>,
}

enum Sink {
    Stream(std::io::BufWriter<std::io::Stdout>),
    File(std::io::BufWriter<output::Draft>),
}

fn sink(arguments: &Yield) -> Result<Sink, Failure> {
    Ok(match &arguments.output {
        Some(path) => Sink::File(std::io::BufWriter::new(output::Draft::beside(path)?)),
        None => Sink::Stream(std::io::BufWriter::new(std::io::stdout())),
    })
}

impl Sink {
    fn write(&mut self, text: &str) -> std::io::Result<()> {
        match self {
            Sink::Stream(out) => out.write_all(text.as_bytes()),
            Sink::File(out) => out.write_all(text.as_bytes()),
        }
    }

    fn finish(self, arguments: &Yield) -> Result<(), Failure> {
        match (self, &arguments.output) {
            (Sink::File(out), Some(path)) => {
                let draft =
                    out.into_inner().map_err(|error| Failure::path(path, "written", error.error()))?;
                draft.keep()
            }
            (Sink::Stream(mut out), _) => Ok(out.flush()?),
            (Sink::File(_), None) => Ok(()),
        }
    }
}

impl Watch for Rows {
    fn begin(&mut self, columns: &[Column], requirements: &[Arc<Requirement>], parts: u32) {
        self.bar.begin(columns, requirements, parts);
        self.failed = self.out.write(&yields::heading(columns, requirements)).err();
    }

    fn part(&mut self, part: &Part) -> bool {
        if !self.bar.part(part) {
            return false;
        }
        if self.failed.is_none() {
            self.failed = self.out.write(&yields::row(part)).err();
        }
        self.failed.is_none()
    }
}
