//! What the documents show is what the tool understands.

use crate::{below_root, read};
use overcoat_lang::diagnostic::Severity;
use overcoat_lang::files::MemoryFiles;
use overcoat_lang::syntax::ast::Date;
use overcoat_lang::{Options, check, load};
use std::fs;

/// The contents of all blocks of a Markdown text that are tagged with `tag`.
fn blocks(text: &str, tag: &str) -> Vec<String> {
    let mut found = Vec::new();
    let mut open: Option<String> = None;
    for line in text.lines() {
        match &mut open {
            Some(block) if line == "```" => {
                found.push(std::mem::take(block));
                open = None;
            }
            Some(block) => {
                block.push_str(line);
                block.push('\n');
            }
            None if line == format!("```{tag}") => open = Some(String::new()),
            None => {}
        }
    }
    found
}

#[test]
fn the_reference_is_a_file_without_an_error_or_a_warning() {
    let recipes = blocks(&read("lang/README.md"), "coat");
    assert!(recipes.len() > 5);
    let mut files = MemoryFiles::new();
    files.insert("reference.coat", recipes.concat());
    let today = Date { year: 2026, month: 12, day: 1, span: Default::default() };
    let options =
        Options { today, asked: None, remedies: true, yields: true, parts: None, whole_project: true };
    let report = check(load(&files, &["reference.coat".to_owned()]), &options);
    let told: Vec<&str> = report
        .diagnostics
        .iter()
        .filter(|diagnostic| diagnostic.severity != Severity::Hint)
        .map(|diagnostic| diagnostic.message.as_str())
        .collect();
    assert_eq!(told, Vec::<&str>::new());
    assert!(report.recipes.len() >= 3 && report.recipes.iter().all(|recipe| recipe.met));
}

/// The recipe in the README stands in the examples, and the output in it is what the command prints.
#[test]
fn the_readme_shows_an_example_and_what_is_really_printed() {
    let readme = read("README.md");
    let [recipe] = &blocks(&readme, "coat")[..] else { panic!("one recipe") };
    assert_eq!(*recipe, read("examples/recipes/cell_front.coat"));

    let folder = tempfile::tempdir().unwrap();
    for part in ["recipes", "materials", "materials/measured", "chambers", "customers"] {
        let to = folder.path().join("examples").join(part);
        fs::create_dir_all(&to).unwrap();
        for entry in fs::read_dir(below_root("examples").join(part)).unwrap().map(Result::unwrap) {
            if entry.file_type().unwrap().is_file() {
                fs::copy(entry.path(), to.join(entry.file_name())).unwrap();
            }
        }
    }
    fs::write(folder.path().join("overcoat.toml"), "").unwrap();
    let wrong = recipe.replace("nitride 76 nm", "nitride 82 nm");
    assert_ne!(wrong, *recipe);
    fs::write(folder.path().join("examples/recipes/cell_front.coat"), wrong).unwrap();
    let output = std::process::Command::new(env!("CARGO_BIN_EXE_overcoat"))
        .args(["check", "examples/recipes/cell_front.coat"])
        .current_dir(folder.path())
        .output()
        .unwrap();
    assert_eq!(output.status.code(), Some(1));
    let printed = String::from_utf8(output.stdout).unwrap();
    let [shown] = &blocks(&readme, "text")[..] else { panic!("one output") };
    assert_eq!(*shown, printed, "the README shows another output");
}
