//! The repository itself: its architecture, its documents, its examples.

// In tests a panic is the report, in helpers too.
#![allow(clippy::unwrap_used)]

mod architecture;
mod documents;
mod examples;

use std::fs;
use std::path::{Path, PathBuf};

/// A path below the repository's root.
fn below_root(path: &str) -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join(path)
}

/// The text of a file below the root.
fn read(path: &str) -> String {
    fs::read_to_string(below_root(path)).unwrap_or_else(|error| panic!("{path}: {error}"))
}

/// Every Rust file below a folder, by its path below the root.
fn rust_files(folder: &str) -> Vec<String> {
    let entries = fs::read_dir(below_root(folder)).unwrap_or_else(|error| panic!("{folder}: {error}"));
    let mut found = Vec::new();
    for entry in entries.map(Result::unwrap) {
        let path = format!("{folder}/{}", entry.file_name().to_str().unwrap());
        if entry.file_type().unwrap().is_dir() {
            found.extend(rust_files(&path));
        } else if path.ends_with(".rs") {
            found.push(path);
        }
    }
    found.sort();
    found
}
