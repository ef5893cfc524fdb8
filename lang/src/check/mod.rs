//! From the resolved project to a report: requirements evaluated, process limits compared, waivers applied.

mod blame;
mod films;
mod house;
mod optics;
mod process;
mod quantity;
mod require;
mod sketch;
mod waive;
mod yields;

pub use yields::simulate;

use crate::code::Family;
use crate::diagnostic::{Diagnostic, Severity};
use crate::finding::Finding;
use crate::messages::render;
use crate::model::{Module, Recipe, Stack};
use crate::project::Project;
use crate::report::{RecipeReport, Report};
use crate::source::FileId;
use crate::syntax::ast::Date;
use rayon::prelude::*;
use std::collections::BTreeSet;
use std::sync::Arc;

/// What a check is to look at.
#[derive(Clone, Debug)]
pub struct Options {
    /// Today, for waivers with a date.
    pub today: Date,
    /// The files whose recipes are evaluated and whose diagnostics are returned; all of the project's where none.
    pub asked: Option<BTreeSet<FileId>>,
    /// Whether to look for the thickness that mends a missed requirement, which takes longer than to evaluate it.
    pub remedies: bool,
    /// Whether to evaluate how many parts will pass.
    pub yields: bool,
    /// How many parts to evaluate, in place of what the requirement says.
    pub parts: Option<u32>,
    /// Whether the project was read whole, so that what nothing uses can be told.
    pub whole_project: bool,
}

/// What is found out about one recipe.
struct Outcome {
    report: RecipeReport,
    findings: Vec<Finding>,
}

/// Checks every recipe asked for. The result does not depend on the number of threads.
pub fn check(project: Project, options: &Options) -> Report {
    let asked = |file: FileId| options.asked.as_ref().is_none_or(|files| files.contains(&file));
    let own = |module: &&Module| module.file.is_some_and(asked);
    let recipes: Vec<&Arc<Recipe>> =
        project.modules.iter().filter(own).flat_map(|module| &module.recipes).collect();
    let outcomes: Vec<Outcome> = recipes.par_iter().map(|recipe| outcome(recipe, options)).collect();

    let concerns = concerned(&project, &asked);
    let general = house::project_findings(&project, options);
    let mut diagnostics: Vec<Diagnostic> = project
        .findings
        .iter()
        .chain(&general)
        .filter(|finding| concerns.contains(&finding.place.file))
        .map(|finding| render(finding, &project.sources))
        .collect();
    waive::cover_file_findings(&mut diagnostics, &general, &recipes, options.today);

    let wrong_files: BTreeSet<FileId> = diagnostics
        .iter()
        .filter(|diagnostic| diagnostic.severity == Severity::Error)
        .map(|diagnostic| diagnostic.place.file)
        .collect();
    let mut reports = Vec::with_capacity(outcomes.len());
    for Outcome { mut report, findings } in outcomes {
        let file_covers = waive::file_covers(&general, &report.recipe);
        let (own, waivers) =
            waive::apply(&report.recipe, findings, &file_covers, options.today, &project.sources);
        let fails = own.iter().chain(&waivers).any(Diagnostic::fails);
        let rests_on_wrong = files_of(&report.recipe).iter().any(|file| wrong_files.contains(file));
        report.met &= !fails && !rests_on_wrong;
        diagnostics.extend(own);
        diagnostics.extend(waivers);
        reports.push(report);
    }
    diagnostics.sort_by(|a, b| a.sort_key().cmp(&b.sort_key()));
    diagnostics.dedup();
    let not_understood =
        diagnostics.iter().any(|diagnostic| diagnostic.code.family() == Family::Form && diagnostic.fails());
    Report { sources: project.sources, recipes: reports, diagnostics, not_understood }
}

/// A stack as the engine evaluates it, with the light from the incident side or from the exit, its graded films integrated for
/// a band of wavelengths in nm and an angle in rad.
///
/// # Errors
///
/// Why it can't be evaluated, as a clause.
pub fn engine_stack(
    stack: &Stack,
    from_exit: bool,
    band: (f64, f64),
    angle: f64,
) -> Result<overcoat_engine::Stack, String> {
    let optics = optics::Optics::new(stack, &[band], angle).map_err(|error| error.to_string())?;
    let optics = optics.ok_or("a material has no optical constants")?;
    let facing = optics.facing(from_exit).ok_or("light from inside a textured piece is not followed")?;
    Ok(facing.clone())
}

/// The range of vacuum wavelengths in nm over which all materials of a stack have constants; `None` is everywhere.
pub fn range_of(stack: &Stack) -> Option<(f64, f64)> {
    let ranges = optics::materials(stack);
    let ranges = ranges.iter().filter_map(|material| material.index.as_ref()?.range_nm());
    ranges.reduce(|a, b| (a.0.max(b.0), a.1.min(b.1)))
}

/// The files whose own findings are to be told: those asked for and those that they use.
fn concerned(project: &Project, asked: &dyn Fn(FileId) -> bool) -> BTreeSet<FileId> {
    let mut files: BTreeSet<FileId> =
        project.sources.iter().map(|(file, _)| file).filter(|file| asked(*file)).collect();
    for module in project.modules.iter().filter(|module| module.file.is_some_and(asked)) {
        files.extend(&module.uses);
    }
    files
}

/// The files that a recipe rests on.
fn files_of(recipe: &Recipe) -> BTreeSet<FileId> {
    let mut files = BTreeSet::from([recipe.place.file]);
    files.extend(recipe.meets.iter().map(|(specification, _)| specification.place.file));
    files.extend(recipe.chamber.iter().map(|(chamber, _)| chamber.place.file));
    if let Some(stack) = &recipe.stack {
        files.extend(optics::materials(stack).iter().map(|material| material.place.file));
    }
    files
}

fn outcome(recipe: &Arc<Recipe>, options: &Options) -> Outcome {
    let mut findings = Vec::new();
    let ((requirements, yields), process) = match &recipe.stack {
        Some(stack) if recipe.sound() => {
            findings.extend(house::recipe_findings(recipe, stack));
            let process = process::check(recipe, stack, &mut findings);
            (require::check(recipe, stack, options, &mut findings), Some(process))
        }
        _ => ((require::not_evaluated(recipe), None), None),
    };
    let met = process.is_some() && requirements.iter().all(|requirement| requirement.met);
    Outcome { report: RecipeReport { recipe: recipe.clone(), met, requirements, yields, process }, findings }
}
