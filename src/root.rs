//! Where a project begins.

use crate::failure::Failure;
use std::path::{Path, PathBuf};

/// Files or folders that stand at a project's root.
const MARKS: [&str; 2] = [".git", "overcoat.toml"];

/// A project's root and the paths asked for below it.
#[derive(Debug)]
pub(crate) struct Root {
    /// The root, canonical.
    pub(crate) folder: PathBuf,
    /// Whether it was given or is marked, so that the files below it belong together.
    pub(crate) marked: bool,
    /// The paths asked for: folders canonical, files with a canonical folder, each below the root.
    pub(crate) asked: Vec<PathBuf>,
}

/// Finds the one root of all paths.
pub(crate) fn find(paths: &[PathBuf], given: Option<&Path>) -> Result<Root, Failure> {
    let asked: Vec<PathBuf> = paths.iter().map(|path| placed(path)).collect::<Result<_, _>>()?;
    if let Some(given) = given {
        let folder = given.canonicalize().map_err(|error| Failure::path(given, "read", &error))?;
        if !folder.is_dir() {
            return Err(Failure::message(format!("the root `{}` is not a folder", given.display())));
        }
        for (path, place) in paths.iter().zip(&asked) {
            if !place.starts_with(&folder) {
                let (path, given) = (path.display(), given.display());
                return Err(Failure::message(format!("`{path}` lies outside the root `{given}`")));
            }
        }
        return Ok(Root { folder, marked: true, asked });
    }
    let mut roots: Vec<Option<&Path>> = asked.iter().map(|path| marked_above(path)).collect();
    roots.sort();
    roots.dedup();
    match roots.as_slice() {
        [Some(folder)] => Ok(Root { folder: folder.to_path_buf(), marked: true, asked }),
        [None] | [] => Ok(Root { folder: shared_folder(&asked), marked: false, asked }),
        _ => Err(Failure::message(
            "the paths belong to several projects: check one project after the other, or name a common root with --root",
        )),
    }
}

/// A path that exists, with its folder resolved but not itself, so that a link to a file stays where it stands.
fn placed(path: &Path) -> Result<PathBuf, Failure> {
    let refused = |error: std::io::Error| Failure::path(path, "read", &error);
    let about = path.symlink_metadata().map_err(refused)?;
    if about.is_dir() || path.is_dir() {
        return path.canonicalize().map_err(refused);
    }
    let folder = match path.parent() {
        Some(folder) if !folder.as_os_str().is_empty() => folder,
        _ => Path::new("."),
    };
    let folder = folder.canonicalize().map_err(refused)?;
    Ok(path.file_name().map_or(folder.clone(), |name| folder.join(name)))
}

/// The nearest marked folder upward.
fn marked_above(path: &Path) -> Option<&Path> {
    path.ancestors().find(|folder| MARKS.iter().any(|mark| folder.join(mark).exists()))
}

/// The deepest folder that holds all paths.
fn shared_folder(asked: &[PathBuf]) -> PathBuf {
    let own = |path: &PathBuf| {
        if path.is_dir() { path.clone() } else { path.parent().map_or(path.clone(), Path::to_path_buf) }
    };
    let shared = |a: PathBuf, b: PathBuf| {
        a.components().zip(b.components()).take_while(|(a, b)| a == b).map(|(part, _)| part).collect()
    };
    asked.iter().map(own).reduce(shared).unwrap_or_default()
}
