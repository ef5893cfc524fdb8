//! How texts reach the language: one trait, so that a disk, an editor's unsaved text and a git revision look alike.

use std::collections::BTreeMap;

/// Why a file could not be read.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum ReadError {
    /// It is not there.
    Missing,
    /// It is there, outside the project; the text says how it gets there ("is a link that leaves the project").
    Outside(String),
    /// Something else; the text is the system's.
    Failed(String),
}

/// Reads the files of one project. Paths are relative to the project's root, use `/`, and hold no `.` or `..`.
pub trait Files: Sync {
    /// The bytes of a file.
    fn read(&self, path: &str) -> Result<Vec<u8>, ReadError>;

    /// The names of the files beside a path, for "did you mean"; may be empty.
    fn beside(&self, path: &str) -> Vec<String>;
}

/// Files in memory.
#[derive(Clone, Debug, Default)]
pub struct MemoryFiles {
    files: BTreeMap<String, Vec<u8>>,
}

impl MemoryFiles {
    /// No files.
    pub fn new() -> Self {
        Self::default()
    }

    /// Adds or replaces a file.
    pub fn insert(&mut self, path: impl Into<String>, bytes: impl Into<Vec<u8>>) {
        self.files.insert(path.into(), bytes.into());
    }

    /// The paths, sorted.
    pub fn paths(&self) -> impl Iterator<Item = &str> {
        self.files.keys().map(String::as_str)
    }
}

impl Files for MemoryFiles {
    fn read(&self, path: &str) -> Result<Vec<u8>, ReadError> {
        self.files.get(path).cloned().ok_or(ReadError::Missing)
    }

    fn beside(&self, path: &str) -> Vec<String> {
        let folder = path.rfind('/').map_or("", |at| &path[..=at]);
        let inside = |name: &&String| name.starts_with(folder) && !name[folder.len()..].contains('/');
        self.files.keys().filter(inside).cloned().collect()
    }
}
