//! Suites in Markdown: a heading is a test, fenced blocks are its files, `# ! code` at the end of a line is what is
//! expected there, and nothing else is expected anywhere.
//!
//! A block named by a line `File: x.coat` before it is that file; the first without a name is `main.coat`. Codes of one
//! line are parted by blanks. `Without hints.` in the prose leaves the provenance of handbook data aside. What is said, word
//! for word, is kept as a snapshot of the whole suite.

#![allow(clippy::unwrap_used, reason = "in a test a panic is the report")]

use overcoat_lang::files::MemoryFiles;
use overcoat_lang::report::Report;
use overcoat_lang::source::Place;
use overcoat_lang::syntax::ast::Date;
use overcoat_lang::{Options, check, load};
use std::fmt::Write;

/// One heading with its files.
#[derive(Default)]
struct Case {
    heading: String,
    files: Vec<(String, String)>,
    hints: bool,
}

fn cases(suite: &str) -> Vec<Case> {
    let mut cases: Vec<Case> = Vec::new();
    let mut name: Option<String> = None;
    let mut open = false;
    for line in suite.lines() {
        if open {
            let file = cases.last_mut().unwrap().files.last_mut().unwrap();
            if line == "```" {
                open = false;
            } else {
                file.1.push_str(line);
                file.1.push('\n');
            }
        } else if let Some(heading) = line.strip_prefix("## ") {
            cases.push(Case { heading: heading.to_owned(), hints: true, ..Case::default() });
        } else if line.starts_with("```") {
            let path = name.take().unwrap_or_else(|| "main.coat".to_owned());
            cases.last_mut().unwrap().files.push((path, String::new()));
            open = true;
        } else if let Some(given) = line.strip_prefix("File: ") {
            name = Some(given.trim().to_owned());
        } else if line.contains("Without hints.") {
            cases.last_mut().unwrap().hints = false;
        }
    }
    cases
}

fn run(case: &Case) -> Report {
    let mut files = MemoryFiles::new();
    for (path, text) in &case.files {
        files.insert(path.clone(), text.clone());
    }
    let asked: Vec<String> =
        case.files.iter().map(|file| file.0.clone()).filter(|path| path.ends_with(".coat")).collect();
    let today = Date { year: 2026, month: 12, day: 1, span: Default::default() };
    check(
        load(&files, &asked),
        &Options { today, asked: None, remedies: true, yields: true, parts: None, whole_project: true },
    )
}

/// Every expectation as (file, line, code), sorted.
fn expected(case: &Case) -> Vec<(String, u32, String)> {
    let mut all = Vec::new();
    for (path, text) in &case.files {
        for (number, line) in text.lines().enumerate() {
            let Some((_, codes)) = line.split_once("# ! ") else { continue };
            all.extend(
                codes.split_whitespace().map(|code| (path.clone(), number as u32 + 1, code.to_owned())),
            );
        }
    }
    all.sort();
    all
}

fn where_is(report: &Report, place: Place) -> (String, u32, u32) {
    let source = report.sources.get(place.file);
    let position = source.position(place.span.start);
    (source.path.clone(), position.line, position.column)
}

fn suite(name: &str) {
    let path = format!("{}/tests/suite/{name}.md", env!("CARGO_MANIFEST_DIR"));
    let cases = cases(&std::fs::read_to_string(path).unwrap());
    assert!(cases.len() > 1, "{name}");
    let mut said = String::new();
    for case in &cases {
        assert!(!case.files.is_empty(), "{name}: {} has no file", case.heading);
        let report = run(case);
        writeln!(said, "## {}", case.heading).unwrap();
        let mut found = Vec::new();
        for one in &report.diagnostics {
            let (file, line, column) = where_is(&report, one.place);
            if !case.hints && one.code.slug() == "handbook_data" {
                continue;
            }
            let waived = if one.waived.is_some() { " (waived)" } else { "" };
            writeln!(said, "{file}:{line}:{column} {} {}{waived}", one.severity.word(), one.code.slug())
                .unwrap();
            let text = report.sources.get(one.place.file).text.clone();
            if let Some(text) = text.lines().nth(line as usize - 1) {
                writeln!(said, "    | {}", text.split("# !").next().unwrap_or(text).trim()).unwrap();
            }
            writeln!(said, "    {}", one.message).unwrap();
            for related in &one.related {
                let (file, line, _) = where_is(&report, related.place);
                writeln!(said, "    {file}:{line}: {}", related.message).unwrap();
            }
            for note in &one.notes {
                writeln!(said, "    note: {note}").unwrap();
            }
            if let Some(fix) = &one.fix {
                writeln!(said, "    fix: {}", fix.title).unwrap();
            }
            found.push((file, line, one.code.slug().to_owned()));
        }
        for recipe in &report.recipes {
            for one in &recipe.requirements {
                if let Some(value) = one.value {
                    let met = if one.met { "met" } else { "missed" };
                    writeln!(said, "{}: {} is {value:.6}, {met}", recipe.recipe.name, one.requirement.text)
                        .unwrap();
                }
            }
        }
        said.push('\n');
        found.sort();
        assert_eq!(found, expected(case), "{name}: {}\n{said}", case.heading);
    }
    insta::with_settings!({ snapshot_path => "suite/said", prepend_module_to_snapshot => false, omit_expression => true }, {
        insta::assert_snapshot!(name, said);
    });
}

macro_rules! suites {
    ($($name:ident),* $(,)?) => {
        $(#[test] fn $name() { suite(stringify!($name)); })*

        #[test]
        fn every_suite_is_run() {
            let names = [$(stringify!($name)),*];
            let folder = format!("{}/tests/suite", env!("CARGO_MANIFEST_DIR"));
            for entry in std::fs::read_dir(folder).unwrap() {
                let name = entry.unwrap().file_name().into_string().unwrap();
                if let Some(name) = name.strip_suffix(".md") {
                    assert!(names.contains(&name), "{name} is not run");
                }
            }
        }
    };
}

suites!(
    chambers,
    expressions,
    house,
    imports,
    materials,
    quantities,
    requirements,
    spectra,
    stacks,
    tables,
    text,
    waivers
);
