//! The views of one report: nothing is said in one of them only.

pub(crate) mod amount;
pub(crate) mod chart;
pub(crate) mod human;
pub(crate) mod json;
pub(crate) mod junit;
mod picture;
pub(crate) mod sarif;
mod table;
pub(crate) mod yields;

use crate::cli::Colour;
use crate::settings::Deny;
use crate::{disk, output};
use overcoat_lang::diagnostic::{Diagnostic, Severity};
use overcoat_lang::handbook;
use overcoat_lang::report::Report;
use overcoat_lang::source::{FileId, Place, Source, Sources};
use std::path::Path;

/// Files with the names that they are shown by.
pub(crate) struct Shown<'r> {
    /// The texts.
    pub(crate) sources: &'r Sources,
    names: Vec<String>,
}

impl<'r> Shown<'r> {
    /// Names the files as seen from the folder where the command was run.
    pub(crate) fn new(sources: &'r Sources, root: &Path, here: &Path) -> Shown<'r> {
        let name = |source: &Source| {
            if from_handbook(source) {
                source.path.clone()
            } else {
                disk::relative(here, &root.join(&source.path))
            }
        };
        Shown { sources, names: sources.iter().map(|(_, source)| name(source)).collect() }
    }

    /// A file's name.
    pub(crate) fn name(&self, file: FileId) -> &str {
        self.names.get(file.0 as usize).map_or("", String::as_str)
    }

    /// A place in lines and columns.
    pub(crate) fn located(&self, place: Place) -> Located<'_> {
        let source = self.sources.get(place.file);
        let (start, end) = (source.position(place.span.start), source.position(place.span.end));
        Located {
            file: self.name(place.file),
            line: start.line,
            column: start.column,
            end_line: end.line,
            end_column: end.column,
        }
    }
}

/// Whether a text is an entry of the handbook, and not a project's file in a folder of that name.
fn from_handbook(source: &Source) -> bool {
    let entry = source.path.strip_prefix("handbook/").and_then(|file| file.strip_suffix(".coat"));
    let name = entry.map(|entry| entry.rsplit('/').next().unwrap_or(entry));
    name.and_then(handbook::text).is_some_and(|text| *text == *source.text)
}

/// A place for people and machines: lines and columns from 1, columns in characters, the end exclusive.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) struct Located<'s> {
    /// Relative to where the command was run.
    pub(crate) file: &'s str,
    pub(crate) line: u32,
    pub(crate) column: u32,
    pub(crate) end_line: u32,
    pub(crate) end_column: u32,
}

/// A report with all that its views need.
pub(crate) struct View<'r> {
    pub(crate) report: &'r Report,
    pub(crate) shown: Shown<'r>,
    pub(crate) deny: &'r Deny,
}

impl View<'_> {
    /// How grave a finding is once denials count: a denied one is an error.
    pub(crate) fn gravity(&self, diagnostic: &Diagnostic) -> Severity {
        if self.deny.denies(diagnostic) { Severity::Error } else { diagnostic.severity }
    }

    /// Whether a finding makes the check fail.
    pub(crate) fn fails(&self, diagnostic: &Diagnostic) -> bool {
        diagnostic.waived.is_none() && self.gravity(diagnostic) == Severity::Error
    }

    /// Whether anything is missed or not understood.
    pub(crate) fn failed(&self) -> bool {
        self.report.not_understood
            || self.report.recipes.iter().any(|recipe| !recipe.met)
            || self.report.diagnostics.iter().any(|finding| self.fails(finding))
    }

    /// How many recipes, findings and waivers there are.
    pub(crate) fn totals(&self) -> Totals {
        let standing = |severity| {
            let counted = |finding: &&Diagnostic| finding.waived.is_none() && finding.severity == severity;
            self.report.diagnostics.iter().filter(counted).count()
        };
        Totals {
            recipes: self.report.recipes.len(),
            met: self.report.recipes.iter().filter(|recipe| recipe.met).count(),
            errors: standing(Severity::Error),
            warnings: standing(Severity::Warning),
            hints: standing(Severity::Hint),
            denied: self.report.diagnostics.iter().filter(|finding| self.deny.denies(finding)).count(),
            waived: self.report.diagnostics.iter().filter(|finding| finding.waived.is_some()).count(),
        }
    }
}

/// The totals of a report; waived findings count as waived only.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) struct Totals {
    pub(crate) recipes: usize,
    pub(crate) met: usize,
    pub(crate) errors: usize,
    pub(crate) warnings: usize,
    pub(crate) hints: usize,
    /// Of the warnings and hints, those that make the check fail.
    pub(crate) denied: usize,
    pub(crate) waived: usize,
}

/// Draws findings outside a check on the standard error.
pub(crate) fn complain_of(
    sources: &Sources,
    mut diagnostics: Vec<Diagnostic>,
    root: &Path,
    here: &Path,
    colour: Colour,
) {
    diagnostics.sort_by(|a, b| a.sort_key().cmp(&b.sort_key()));
    let report =
        Report { sources: Sources::default(), recipes: Vec::new(), diagnostics, not_understood: true };
    let view = View { report: &report, shown: Shown::new(sources, root, here), deny: &Deny::default() };
    output::tell(&human::findings(&view, output::coloured(colour, &std::io::stderr())));
}

/// The title of a recipe for people: its name, and its title where it has one.
pub(crate) fn called(recipe: &overcoat_lang::model::Recipe) -> String {
    match &recipe.title {
        Some(title) => format!("{}, {title}", recipe.name),
        None => recipe.name.clone(),
    }
}
