//! The project's files on the disk: nothing outside the root is ever read.

use crate::failure::plain;
use overcoat_lang::files::{Files, ReadError};
use std::fs::File;
use std::io::{self, Read};
use std::path::{Path, PathBuf};

/// No recipe and no table is larger than this; a larger file is a mistake, and would cost memory.
const LARGEST: u64 = 64 * 1024 * 1024;

/// Names beside a missing file that are looked at for one that may be meant.
const MOST_BESIDE: usize = 1000;

/// Reads files below a root.
#[derive(Clone, Debug)]
pub(crate) struct DiskFiles {
    root: PathBuf,
}

impl DiskFiles {
    /// Files below `root`, which is canonical.
    pub(crate) fn new(root: PathBuf) -> DiskFiles {
        DiskFiles { root }
    }

    /// Where a path really leads, if that is below the root.
    fn real(&self, path: &str) -> Result<PathBuf, ReadError> {
        let full = self.root.join(path);
        match full.canonicalize() {
            Ok(real) if real.starts_with(&self.root) => Ok(real),
            Ok(_) => Err(ReadError::Outside("is a link that leaves the project".to_owned())),
            Err(error) if missing(&error) && full.symlink_metadata().is_ok() => {
                Err(ReadError::Failed("is a link to a file that does not exist".to_owned()))
            }
            Err(error) => Err(failed(&error)),
        }
    }
}

impl Files for DiskFiles {
    fn read(&self, path: &str) -> Result<Vec<u8>, ReadError> {
        let real = self.real(path)?;
        // Told before opening, because opening a pipe waits for its writer.
        let about = real.metadata().map_err(|error| failed(&error))?;
        if about.is_dir() {
            return Err(ReadError::Failed("is a folder".to_owned()));
        }
        if !about.is_file() {
            return Err(ReadError::Failed("is not a regular file".to_owned()));
        }
        let mut bytes = Vec::new();
        let file = File::open(&real).map_err(|error| failed(&error))?;
        file.take(LARGEST + 1).read_to_end(&mut bytes).map_err(|error| failed(&error))?;
        if bytes.len() as u64 > LARGEST {
            return Err(ReadError::Failed("is larger than 64 MB".to_owned()));
        }
        Ok(bytes)
    }

    fn beside(&self, path: &str) -> Vec<String> {
        let folder = path.rsplit_once('/').map_or("", |(folder, _)| folder);
        let Ok(real) = self.real(folder) else { return Vec::new() };
        let Ok(entries) = real.read_dir() else { return Vec::new() };
        let files = entries.flatten().filter(|entry| entry.file_type().is_ok_and(|kind| !kind.is_dir()));
        let names = files.filter_map(|entry| entry.file_name().into_string().ok());
        let paths = names.map(|name| if folder.is_empty() { name } else { format!("{folder}/{name}") });
        let mut paths: Vec<String> = paths.take(MOST_BESIDE).collect();
        paths.sort();
        paths
    }
}

fn missing(error: &io::Error) -> bool {
    matches!(error.kind(), io::ErrorKind::NotFound | io::ErrorKind::NotADirectory)
}

fn failed(error: &io::Error) -> ReadError {
    if missing(error) {
        ReadError::Missing
    } else {
        ReadError::Failed(format!("can't be read: {}", plain(error)))
    }
}

/// How `path` is written from the folder `from`, both absolute: with `/`, and `..` where it must be.
pub(crate) fn relative(from: &Path, path: &Path) -> String {
    let shared = from.components().zip(path.components()).take_while(|(a, b)| a == b).count();
    // Paths on two drives share nothing, and are written in full.
    if shared == 0 {
        return path.display().to_string();
    }
    let ups = from.components().skip(shared).map(|_| "..".to_owned());
    let downs = path.components().skip(shared).map(|part| part.as_os_str().to_string_lossy().into_owned());
    let parts: Vec<String> = ups.chain(downs).collect();
    if parts.is_empty() { ".".to_owned() } else { parts.join("/") }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn paths_are_written_from_where_the_command_was_run() {
        let written = |from: &str, path: &str| relative(Path::new(from), Path::new(path));
        assert_eq!(written("/house", "/house/recipes/front.coat"), "recipes/front.coat");
        assert_eq!(written("/house/recipes", "/house/materials/a.coat"), "../materials/a.coat");
        assert_eq!(written("/house", "/house"), ".");
    }
}
