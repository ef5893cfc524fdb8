//! One recipe of one file, for commands that look at a recipe alone.

use super::{Opened, open};
use crate::cli::Global;
use crate::failure::Failure;
use crate::settings::did_you_mean;
use crate::{views, walk};
use overcoat_lang::messages::render;
use overcoat_lang::model::Recipe;
use overcoat_lang::project::Project;
use overcoat_lang::{load, nearest};
use std::path::Path;
use std::sync::Arc;

/// A recipe with the project that it stands in.
pub(super) struct One {
    pub(super) project: Project,
    pub(super) opened: Opened,
    pub(super) recipe: Arc<Recipe>,
}

/// The recipe of a name, or the only one of the file. None where the file can't be understood, which has been told.
pub(super) fn named(path: &Path, name: Option<&str>, global: &Global) -> Result<Option<One>, Failure> {
    let file = path.display().to_string();
    if path.is_dir() {
        return Err(Failure::message(format!("`{file}` is a folder; name one file")));
    }
    let opened = open(&[path.to_owned()], global.root.as_deref())?;
    let paths: Vec<String> =
        walk::asked(&opened.root, &opened.settings, walk::Documents::Not)?.into_iter().collect();
    let project = load(&opened.files, &paths);
    let first = project.modules.iter().find(|module| {
        module.file.is_some_and(|file| paths.first() == Some(&project.sources.get(file).path))
    });
    let recipes = first.map_or(&[][..], |module| &module.recipes);
    // A recipe that can be evaluated is; another is told why not, as a check would.
    let recipe = chosen(recipes, name, &file).cloned();
    let sound = recipe.as_ref().is_ok_and(|recipe| recipe.sound());
    if !sound && !project.findings.is_empty() {
        not_understood(&project, &opened, global);
        return Ok(None);
    }
    let recipe = recipe?;
    Ok(Some(One { project, opened, recipe }))
}

/// Says on the standard error what keeps a file from being understood.
fn not_understood(project: &Project, opened: &Opened, global: &Global) {
    let diagnostics = project.findings.iter().map(|finding| render(finding, &project.sources)).collect();
    views::complain_of(&project.sources, diagnostics, &opened.root.folder, &opened.here, global.color);
}

/// The recipe asked for, or the only one.
fn chosen<'r>(
    recipes: &'r [Arc<Recipe>],
    name: Option<&str>,
    file: &str,
) -> Result<&'r Arc<Recipe>, Failure> {
    let names = || recipes.iter().map(|recipe| recipe.name.as_str());
    match (recipes, name) {
        ([], _) => Err(Failure::message(format!("`{file}` holds no recipe"))),
        ([only], None) => Ok(only),
        (_, None) => {
            let names: Vec<&str> = names().collect();
            let names = names.join(", ");
            Err(Failure::message(format!(
                "`{file}` holds several recipes; choose one with --recipe: {names}"
            )))
        }
        (_, Some(name)) => recipes.iter().find(|recipe| recipe.name == name).ok_or_else(|| {
            let near = did_you_mean(&nearest(name, names()));
            Failure::message(format!("`{file}` holds no recipe `{name}`{near}"))
        }),
    }
}
