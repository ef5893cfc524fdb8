//! Every code's explanation shows an example that triggers it and one that does not: both are run.

#![allow(clippy::unwrap_used, reason = "in a test a panic is the report")]

use overcoat_lang::code::Code;
use overcoat_lang::diagnostic::Severity;
use overcoat_lang::files::MemoryFiles;
use overcoat_lang::report::Report;
use overcoat_lang::syntax::ast::Date;
use overcoat_lang::{Options, check, load};

/// Codes that this version explains and can't be made to raise with a short recipe: they show no example.
const WITHOUT_EXAMPLE: [Code; 1] = [Code::NotConverged];

/// The files of a section: fenced blocks, each but the first with its name before it.
fn files(section: &str) -> MemoryFiles {
    let mut files = MemoryFiles::new();
    let mut name = "main.coat".to_owned();
    let mut open: Option<String> = None;
    for line in section.lines() {
        match &mut open {
            None if line.starts_with("```") => open = Some(String::new()),
            None => {
                if let Some(given) = line.strip_prefix("File: ") {
                    name = given.trim().to_owned();
                }
            }
            Some(text) if line == "```" => {
                files.insert(name.clone(), std::mem::take(text));
                open = None;
            }
            Some(text) => {
                text.push_str(line);
                text.push('\n');
            }
        }
    }
    files
}

fn run(section: &str) -> Report {
    let files = files(section);
    let project = load(&files, &["main.coat".to_owned()]);
    let today = Date { year: 2026, month: 12, day: 1, span: Default::default() };
    check(
        project,
        &Options { today, asked: None, remedies: true, yields: true, parts: None, whole_project: true },
    )
}

fn section<'a>(text: &'a str, heading: &str) -> Option<&'a str> {
    let start = text.find(heading)? + heading.len();
    let end = text[start..].find("\n## ").map_or(text.len(), |at| start + at);
    Some(&text[start..end])
}

#[test]
fn every_example_triggers_its_code_and_every_mended_one_is_clean() {
    for code in Code::ALL {
        let text = code.explanation();
        assert!(text.starts_with(&format!("# {}\n", code.slug())), "{}", code.slug());
        assert!(section(text, "## What to do").is_some_and(|todo| todo.trim().len() > 10), "{}", code.slug());
        let example = section(text, "## An example");
        assert_eq!(example.is_none(), WITHOUT_EXAMPLE.contains(code), "{}: an example?", code.slug());
        let (Some(example), Some(mended)) = (example, section(text, "## Mended")) else { continue };
        let report = run(example);
        let said: Vec<&str> = report.diagnostics.iter().map(|one| one.code.slug()).collect();
        assert!(said.contains(&code.slug()), "{}: the example gives {said:?}", code.slug());
        let report = run(mended);
        let wrong: Vec<String> = report
            .diagnostics
            .iter()
            .filter(|one| one.waived.is_none() && (one.severity == Severity::Error || one.code == *code))
            .map(|one| format!("{}: {}", one.code.slug(), one.message))
            .collect();
        assert!(wrong.is_empty(), "{}: the mended example gives {wrong:?}", code.slug());
    }
}

#[test]
fn an_example_gives_no_error_but_its_own() {
    for code in Code::ALL {
        let Some(example) = section(code.explanation(), "## An example") else { continue };
        let others: Vec<String> = run(example)
            .diagnostics
            .iter()
            .filter(|one| one.severity == Severity::Error && one.code != *code)
            .map(|one| format!("{}: {}", one.code.slug(), one.message))
            .collect();
        assert!(others.is_empty() || *code == Code::WaiverExpired, "{}: {others:?}", code.slug());
    }
}
