//! The arrows between the crates, and what each may touch.

use crate::{read, rust_files};
use std::collections::BTreeSet;

/// What a manifest depends on outside its tests.
fn dependencies(manifest: &str) -> BTreeSet<String> {
    let manifest: toml::Table = read(manifest).parse().unwrap();
    let names = |section: &str| {
        let table = manifest.get(section).and_then(toml::Value::as_table);
        table.into_iter().flat_map(|table| table.keys().cloned()).collect::<Vec<_>>()
    };
    // A dependency for some systems only would be one in hiding.
    assert!(!manifest.contains_key("target"));
    names("dependencies").into_iter().chain(names("build-dependencies")).collect()
}

/// The workspace's own crates among them.
fn own(manifest: &str) -> Vec<String> {
    dependencies(manifest).into_iter().filter(|name| name.starts_with("overcoat")).collect()
}

#[test]
fn arrows_run_from_the_command_over_the_language_to_the_engine() {
    assert!(own("engine/Cargo.toml").is_empty());
    assert_eq!(own("lang/Cargo.toml"), ["overcoat-engine"]);
    assert_eq!(own("Cargo.toml"), ["overcoat-engine", "overcoat-lang"]);
}

#[test]
fn engine_and_language_know_no_terminal() {
    let terminal =
        ["anstream", "anstyle", "ariadne", "clap", "clap_complete", "ignore", "indicatif", "tempfile"];
    for manifest in ["engine/Cargo.toml", "lang/Cargo.toml"] {
        let found = dependencies(manifest);
        assert!(!terminal.iter().any(|name| found.contains(*name)), "{manifest}: {found:?}");
    }
    assert!(terminal.iter().any(|name| dependencies("Cargo.toml").contains(*name)));
}

#[test]
fn engine_and_language_read_and_write_nothing() {
    let outside = ["std::fs", "std::env", "std::net", "std::process", "std::time", "println!", "eprintln!"];
    let touches = |path: &String| {
        let text = read(path);
        outside.iter().any(|word| text.contains(word))
    };
    let sources = [rust_files("engine/src"), rust_files("lang/src")].concat();
    let found: Vec<String> =
        sources.into_iter().filter(|path| !path.contains("/tests/") && touches(path)).collect();
    assert_eq!(found, Vec::<String>::new());
    assert!(rust_files("src").iter().any(touches));
}

#[test]
fn a_file_says_what_it_is_about() {
    for path in ["engine", "lang/src", "src", "tests"].into_iter().flat_map(rust_files) {
        let text = read(&path);
        assert!(text.starts_with("//!"), "{path} does not begin with a line that says what it is about");
    }
}
