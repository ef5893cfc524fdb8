//! Tests of the parser as a whole.

mod broken;
mod layout;
mod torture;

use crate::finding::{Fact, FormFact};
use crate::source::{FileId, Source};
use crate::syntax::parse;
use std::path::Path;

/// A text that uses every construct, formatted.
const EVERYTHING: &str = include_str!("everything.coat");

/// Every finding of a text as a line: place, covered text, what is said.
fn told(text: &str) -> Vec<String> {
    let source = Source::new("a.coat", text);
    let parsed = parse(text, FileId(0));
    let told = parsed.findings.iter().map(|finding| {
        let at = source.position(finding.place.span.start);
        let covered = source.slice(finding.place.span);
        let said = match &finding.fact {
            Fact::Form(FormFact::Syntax { expected, found, hint }) => {
                let expected = match expected.as_slice() {
                    [] => String::new(),
                    some => format!("expected {}; ", some.join(", ")),
                };
                let found =
                    found.as_ref().map_or("found the end".to_owned(), |found| format!("found {found}"));
                let hint = hint.as_ref().map_or(String::new(), |hint| format!("; {hint}"));
                format!("{expected}{found}{hint}")
            }
            other => format!("{other:?}"),
        };
        format!("{}:{} `{covered}`: {said}", at.line, at.column)
    });
    told.collect()
}

/// The texts of the handbook.
fn handbook() -> Vec<(String, String)> {
    let root = Path::new(env!("CARGO_MANIFEST_DIR")).join("handbook");
    let mut texts = Vec::new();
    for folder in [root.clone(), root.join("spectra")] {
        for entry in std::fs::read_dir(folder).unwrap().flatten() {
            if entry.path().extension().is_some_and(|extension| extension == "coat") {
                let text = std::fs::read_to_string(entry.path()).unwrap();
                texts.push((entry.path().display().to_string(), text));
            }
        }
    }
    assert!(texts.len() > 10, "the handbook has moved");
    texts.sort();
    texts
}
