//! Which recipe files lie below the paths asked for.

use crate::failure::Failure;
use crate::root::Root;
use crate::settings::Settings;
use ignore::overrides::{Override, OverrideBuilder};
use ignore::{DirEntry, WalkBuilder};
use std::collections::BTreeSet;
use std::path::Path;

/// Beyond this many files a project is not read as a whole when only a part of it is asked for.
const WHOLE: usize = 5_000;

/// Files by their paths below the root, with `/`, sorted.
pub(crate) struct Found {
    /// Those asked for.
    pub(crate) asked: Vec<String>,
    /// All of the project, those asked for first; only those where `whole` is not set.
    pub(crate) all: Vec<String>,
    /// Whether `all` is the whole project.
    pub(crate) whole: bool,
}

/// Whether Markdown documents with recipes in them are wanted beside the recipe files.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Documents {
    /// Yes: their blocks are checked.
    Too,
    /// No.
    Not,
}

/// Finds the files asked for and those of the whole project.
pub(crate) fn find(root: &Root, settings: &Settings) -> Result<Found, Failure> {
    let asked = asked(root, settings, Documents::Too)?;
    let covered = root.asked.contains(&root.folder);
    let mut all: Vec<String> = asked.iter().cloned().collect();
    let mut whole = covered;
    // Without a mark nobody said that the files around the one asked for belong to it.
    if !covered && root.marked {
        let mut found = BTreeSet::new();
        let within = walk(root, &root.folder, settings, Documents::Too, &mut found, WHOLE)?;
        if within {
            all.extend(found.into_iter().filter(|path| !asked.contains(path)));
            whole = true;
        }
    }
    Ok(Found { asked: asked.into_iter().collect(), all, whole })
}

/// The files asked for alone.
pub(crate) fn asked(
    root: &Root,
    settings: &Settings,
    documents: Documents,
) -> Result<BTreeSet<String>, Failure> {
    let mut found = BTreeSet::new();
    for path in &root.asked {
        if path.is_dir() {
            walk(root, path, settings, documents, &mut found, usize::MAX)?;
        } else {
            found.insert(below(root, path)?);
        }
    }
    Ok(found)
}

/// Adds the recipe files below a folder; whether there were at most `most`.
fn walk(
    root: &Root,
    folder: &Path,
    settings: &Settings,
    documents: Documents,
    found: &mut BTreeSet<String>,
    most: usize,
) -> Result<bool, Failure> {
    let mut walker = WalkBuilder::new(folder);
    // The same files on every machine: what git ignores here counts, a user's own settings do not.
    walker.require_git(false).ignore(false).git_global(false).overrides(excluded(&root.folder, settings)?);
    for entry in walker.build() {
        let entry = entry.map_err(|error| Failure::message(format!("a folder can't be read: {error}")))?;
        if taken(root, &entry, documents) {
            if found.len() >= most {
                return Ok(false);
            }
            found.insert(below(root, entry.path())?);
        }
    }
    Ok(true)
}

/// Whether an entry is a recipe file. A link counts where it leads out of the project, so that it is told; one that
/// stays inside leads to a file that is found by itself.
fn taken(root: &Root, entry: &DirEntry, documents: Documents) -> bool {
    let path = entry.path();
    let coat = path.extension().is_some_and(|extension| extension == "coat")
        || documents == Documents::Too && has_recipes(path);
    let Some(kind) = entry.file_type() else { return false };
    if kind.is_symlink() {
        let inside = entry.path().canonicalize().is_ok_and(|real| real.starts_with(&root.folder));
        return coat && !inside;
    }
    coat && !kind.is_dir()
}

/// Whether a file is a Markdown document with blocks of recipes in it.
fn has_recipes(path: &Path) -> bool {
    path.extension().is_some_and(|extension| extension == "md")
        && std::fs::read_to_string(path).is_ok_and(|text| overcoat_lang::markdown::recipes(&text).is_some())
}

fn excluded(root: &Path, settings: &Settings) -> Result<Override, Failure> {
    let mut patterns = OverrideBuilder::new(root);
    let refused = |pattern: &str, why: String| {
        Failure::message(format!("overcoat.toml: `{pattern}` in `exclude` is not a pattern: {why}"))
    };
    for pattern in &settings.exclude {
        if pattern.starts_with('!') || pattern.is_empty() {
            return Err(refused(pattern, "it must name files, for example \"drafts/**\"".to_owned()));
        }
        patterns.add(&format!("!{pattern}")).map_err(|error| refused(pattern, error.to_string()))?;
    }
    patterns.build().map_err(|error| refused("exclude", error.to_string()))
}

/// A path below the root, with `/`.
fn below(root: &Root, path: &Path) -> Result<String, Failure> {
    let inside = path.strip_prefix(&root.folder).unwrap_or(path);
    let parts: Option<Vec<&str>> = inside.iter().map(|part| part.to_str()).collect();
    let unreadable = || Failure::message(format!("the name of `{}` is not UTF-8", path.display()));
    Ok(parts.ok_or_else(unreadable)?.join("/"))
}
