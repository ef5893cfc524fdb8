//! `overcoat check`: recipes against their promises and their chambers.

use super::{Opened, open};
use crate::Status;
use crate::cli::{Check, Colour, Format, Global};
use crate::failure::Failure;
use crate::views::{Shown, View, human, json, junit, sarif};
use crate::{output, walk};
use indicatif::{ProgressBar, ProgressStyle};
use overcoat_lang::code::Code;
use overcoat_lang::report::Report;
use overcoat_lang::source::Span;
use overcoat_lang::syntax::ast::Date;
use overcoat_lang::{Options, check, load};
use std::collections::BTreeSet;
use std::io::IsTerminal;
use std::time::Duration;

pub(super) fn run(arguments: &Check, global: &Global) -> Result<Status, Failure> {
    let mut opened = open(&arguments.paths, global.root.as_deref())?;
    for word in &arguments.deny {
        opened.settings.deny.add(word).map_err(|why| Failure::message(format!("--deny: {why}")))?;
    }
    let report = checked(&opened, arguments)?;
    let view = View {
        report: &report,
        shown: Shown::new(&report.sources, &opened.root.folder, &opened.here),
        deny: &opened.settings.deny,
    };
    let text = rendered(&view, arguments, global.color)?;
    match &arguments.output {
        Some(path) => output::replace(path, &text)?,
        None => output::print(&text)?,
    }
    Ok(status(&view))
}

/// Reads and checks what was asked for.
fn checked(opened: &Opened, arguments: &Check) -> Result<Report, Failure> {
    let today = today(arguments.today)?;
    let found = walk::find(&opened.root, &opened.settings)?;
    let working = working(found.asked.len());
    let project = load(&opened.files, &found.all);
    let asked: BTreeSet<&str> = found.asked.iter().map(String::as_str).collect();
    let files = project.sources.iter().filter(|(_, source)| asked.contains(source.path.as_str()));
    let options = Options {
        today,
        asked: Some(files.map(|(file, _)| file).collect()),
        remedies: true,
        yields: !arguments.no_yield,
        parts: arguments.parts,
        whole_project: found.whole,
    };
    let mut report = check(project, &options);
    working.finish_and_clear();
    if !opened.settings.handbook_only_hint {
        report.diagnostics.retain(|finding| finding.code != Code::HandbookData);
    }
    Ok(report)
}

/// A sign of life for a large project; nothing at all where the standard error is no terminal.
fn working(files: usize) -> ProgressBar {
    if files < 50 || !std::io::stderr().is_terminal() {
        return ProgressBar::hidden();
    }
    let style = ProgressStyle::with_template("{spinner} checking {msg}, {elapsed}");
    let bar = ProgressBar::new_spinner().with_message(format!("{files} files"));
    bar.set_style(style.unwrap_or_else(|_| ProgressStyle::default_spinner()));
    bar.enable_steady_tick(Duration::from_millis(200));
    bar
}

/// The day on which waivers are judged.
fn today(given: Option<jiff::civil::Date>) -> Result<Date, Failure> {
    let day = given.unwrap_or_else(|| jiff::ZonedDateTime::now().date());
    let refused = || Failure::message(format!("--today needs a day after the year 0, not {day}"));
    let year = u16::try_from(day.year()).map_err(|_| refused())?;
    let (month, day) = (day.month().unsigned_abs(), day.day().unsigned_abs());
    Ok(Date { year, month, day, span: Span::default() })
}

fn rendered(view: &View<'_>, arguments: &Check, colour: Colour) -> Result<String, Failure> {
    let fault =
        |error: String| Failure::Fault(format!("the report can't be written: {error}; please report this"));
    match arguments.format {
        Format::Human => {
            let coloured = match &arguments.output {
                Some(_) => colour == Colour::Always,
                None => output::coloured(colour, &std::io::stdout()),
            };
            Ok(human::render(view, coloured))
        }
        Format::Json => json::render(view).map_err(|error| fault(error.to_string())),
        Format::Sarif => sarif::render(view).map_err(|error| fault(error.to_string())),
        Format::Junit => junit::render(view).map_err(|error| fault(error.to_string())),
    }
}

/// What the check comes to.
fn status(view: &View<'_>) -> Status {
    if view.report.not_understood {
        Status::NotUnderstood
    } else if view.failed() {
        Status::Missed
    } else {
        Status::Met
    }
}
