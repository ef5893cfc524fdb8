//! Sentences about the text: syntax, names, units, files.

use super::Words;
use super::number::{needed, or_list, text};
use crate::code::Code;
use crate::finding::FormFact;
use crate::source::{Place, Sources, Span};
use crate::units::is_bare;

pub(super) fn words(fact: &FormFact, place: Place, sources: &Sources) -> Words {
    match fact {
        FormFact::Syntax { expected, found, hint } => syntax(expected, found.as_deref(), hint.as_deref()),
        FormFact::Unreadable { why } => Words::new(Code::Syntax, format!("this can't be read: {why}")),
        FormFact::KeywordAsName { name } => Words::new(
            Code::Syntax,
            format!(
                "`{name}` can't be a name, since a statement or a clause starts with this word; choose another"
            ),
        ),
        FormFact::UnknownName { kind, name, near, import } => {
            unknown(kind, name, near, import.as_deref(), place)
        }
        FormFact::NotInFile { name, path, near } => {
            let words =
                Words::new(Code::UnknownName, format!("\"{path}\" defines no `{name}`{}", meant(near)));
            replace_by_nearest(words, near, place)
        }
        FormFact::WrongKind { name, is, needed, defined } => Words::new(
            Code::UnknownName,
            format!("`{name}` is {}, and here the name of {} is needed", a(is), a(needed)),
        )
        .related(*defined, format!("`{name}` is defined here")),
        FormFact::DuplicateName { name, first } => Words::new(
            Code::DuplicateName,
            format!("`{name}` is there already; give one of the two another name"),
        )
        .related(*first, "the first one is here"),
        FormFact::Repeated { what, first } => Words::new(
            Code::DuplicateName,
            format!("`{what}` has been said already, and may be said once; keep the one that is meant"),
        )
        .related(*first, "the first one is here"),
        FormFact::UnitMismatch { role, needed: wanted, found, suggestion } => {
            let message = if role == wanted {
                format!("this must be {}, and is {found}", needed(wanted, suggestion.as_deref()))
            } else {
                format!("{role} must be {}, and this is {found}", needed(wanted, suggestion.as_deref()))
            };
            let words = Words::new(Code::UnitMismatch, message);
            let number = text(place, sources);
            match suggestion {
                // Behind a share, a name or a calculation a unit would not mend anything.
                Some(unit) if is_bare(&number) => {
                    words.fix(format!("write `{number} {unit}`"), place, format!("{number} {unit}"))
                }
                _ => words,
            }
        }
        FormFact::MissingStatement { what, of, hint } => {
            Words::new(Code::MissingStatement, format!("{of} lacks {what}: {hint}"))
        }
        FormFact::StackOrder { problem, remedy } => {
            Words::new(Code::StackOrder, format!("this stack can't be read, because {problem}; {remedy}"))
        }
        FormFact::Cycle { kind, chain } => {
            let what = match *kind {
                "imports" => "files that import one another in a circle",
                "lets" => "values that need one another",
                "materials" => "materials that are made from one another",
                _ => "spectra that are made from one another",
            };
            Words::new(Code::ImportCycle, format!("{what} have no beginning: {}", chain.join(" → ")))
        }
        FormFact::ImportOutside { path, why } => Words::new(
            Code::ImportOutside,
            format!("\"{path}\" {why}; a recipe reads only files of its own project"),
        ),
        FormFact::UnreadableFile { path, why, near } => {
            let near: Vec<String> = near.to_vec();
            let hint =
                if near.is_empty() { String::new() } else { format!("; did you mean {}?", or_list(&near)) };
            Words::new(Code::UnreadableFile, format!("\"{path}\" {why}{hint}"))
        }
        FormFact::TableMalformed { file, row, column, problem } => {
            let table = file.as_ref().map_or("this table".to_owned(), |file| format!("\"{file}\""));
            let row_word = if file.is_some() { "line" } else { "row" };
            let subject = match (row, column) {
                (Some(row), Some(column)) => format!("{table}, {row_word} {row}: {column}"),
                (Some(row), None) => format!("{table}, {row_word} {row}: the row"),
                (None, Some(column)) => format!("{table}: {column}"),
                (None, None) => table,
            };
            Words::new(Code::TableMalformed, format!("{subject} {problem}"))
        }
        FormFact::InvalidValue { what, value, must } => {
            let be = if must.starts_with("be ") { "" } else { "be " };
            Words::new(Code::InvalidValue, format!("{what} is {value}, and must {be}{must}"))
        }
    }
}

fn syntax(expected: &[String], found: Option<&str>, hint: Option<&str>) -> Words {
    let found = found.map_or("the text ends".to_owned(), |found| format!("{found} can't stand"));
    let message = match expected.split_last() {
        None => format!("{found} here"),
        Some((last, [])) => format!("{found} here; {}is expected", before_verb(last)),
        Some((last, rest)) => {
            // More than a handful of possibilities help nobody.
            let shown: Vec<&str> = rest.iter().map(String::as_str).take(4).collect();
            let others = if rest.len() > shown.len() { "something else" } else { last.as_str() };
            format!("{found} here; {} or {}is expected", shown.join(", "), before_verb(others))
        }
    };
    let words = Words::new(Code::Syntax, message);
    match hint {
        Some(hint) => words.note(hint),
        None => words,
    }
}

/// A phrase with what parts it from its verb: an example at its end is closed by a comma.
fn before_verb(phrase: &str) -> String {
    let comma = if phrase.contains(", for example") { "," } else { "" };
    format!("{phrase}{comma} ")
}

fn unknown(kind: &str, name: &str, near: &[String], import: Option<&str>, place: Place) -> Words {
    let subject = match kind {
        "quantity" => format!("there is no quantity `{name}`"),
        "unit" => format!("there is no unit `{name}`"),
        "code" => format!("there is no code `{name}`"),
        "function" => format!("there is no function `{name}`"),
        "limit" => format!("a chamber has no limit named `{name}`"),
        "polarisation" => format!("there is no polarisation `{name}`"),
        "oscillator" => format!("there is no oscillator `{name}`"),
        "mixing rule" => format!("there is no mixing rule `{name}`"),
        "handbook entry" => format!("the handbook has no `{name}`"),
        kind => format!("no {kind} is named `{name}`"),
    };
    if let (Some(from), true) = (import, near.is_empty()) {
        let from_text = if from == "handbook" { from.to_owned() } else { format!("\"{from}\"") };
        let start = Span::default().at(place.file);
        return Words::new(Code::UnknownName, format!("{subject} here; it can be taken from {from_text}"))
            .fix(format!("use `{name}` from {from_text}"), start, format!("use {name} from {from_text}\n"));
    }
    let words = Words::new(Code::UnknownName, format!("{subject}{}", meant(near)));
    replace_by_nearest(words, near, place)
}

fn replace_by_nearest(words: Words, near: &[String], place: Place) -> Words {
    match near {
        [only] => words.fix(format!("write `{only}`"), place, only.clone()),
        _ => words,
    }
}

fn meant(near: &[String]) -> String {
    if near.is_empty() { String::new() } else { format!("; did you mean {}?", or_list(near)) }
}

fn a(noun: &str) -> String {
    let article = if noun.starts_with(['a', 'e', 'i', 'o', 'u']) { "an" } else { "a" };
    format!("{article} {noun}")
}
