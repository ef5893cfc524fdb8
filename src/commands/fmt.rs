//! `overcoat fmt`: recipes in the one layout.

use super::open;
use crate::Status;
use crate::cli::{Colour, Fmt, Global};
use crate::disk::relative;
use crate::failure::Failure;
use crate::{output, views, walk};
use overcoat_lang::files::{Files, ReadError};
use overcoat_lang::finding::Finding;
use overcoat_lang::messages::render;
use overcoat_lang::source::{Source, Sources, Span};
use overcoat_lang::syntax::{decode, format, parse};
use std::collections::BTreeMap;
use std::io::Read;
use std::path::Path;
use std::rc::Rc;

/// What became of one text.
struct Laid {
    /// The text in the one layout; none where it can't be read at all.
    text: Option<String>,
    /// What it was.
    before: Vec<u8>,
    /// Its text, with what could not be read in it.
    sources: Sources,
    findings: Vec<Finding>,
}

impl Laid {
    fn changed(&self) -> bool {
        self.text.as_ref().is_some_and(|text| text.as_bytes() != self.before)
    }
}

pub(super) fn run(arguments: &Fmt, global: &Global) -> Result<Status, Failure> {
    if arguments.paths.iter().any(|path| path == Path::new("-")) {
        if arguments.paths.len() > 1 {
            return Err(Failure::message(
                "`-` stands for the standard input and can't be named with other paths",
            ));
        }
        return standard_input(arguments.check, global.color);
    }
    // Laying a file out needs no other file, so each path may belong to a project of its own.
    let mut files = BTreeMap::new();
    for path in &arguments.paths {
        let opened = Rc::new(open(std::slice::from_ref(path), global.root.as_deref())?);
        for file in walk::asked(&opened.root, &opened.settings, walk::Documents::Not)? {
            files.insert(opened.root.folder.join(&file), (opened.clone(), file));
        }
    }
    let mut status = Status::Met;
    let mut otherwise = String::new();
    for (full, (opened, file)) in &files {
        let name = relative(&opened.here, full);
        let laid = match opened.files.read(file) {
            Ok(bytes) => laid_out(file, bytes)?,
            Err(error) => {
                output::complain(global.color, &std::format!("`{name}` {}", why(error)));
                status = Status::NotUnderstood;
                continue;
            }
        };
        if laid.changed() {
            if let (false, Some(text)) = (arguments.check, &laid.text) {
                output::replace(full, text)?;
            }
            otherwise.push_str(&difference(&name, &laid));
        }
        if !laid.findings.is_empty() {
            views::complain_of(
                &laid.sources,
                rendered(&laid),
                &opened.root.folder,
                &opened.here,
                global.color,
            );
            status = Status::NotUnderstood;
        }
    }
    if arguments.check && !otherwise.is_empty() {
        output::print(&otherwise)?;
        status = status.max(Status::Missed);
    }
    Ok(status)
}

fn standard_input(check: bool, colour: Colour) -> Result<Status, Failure> {
    let mut bytes = Vec::new();
    let read = std::io::stdin().lock().read_to_end(&mut bytes);
    read.map_err(|error| Failure::path(Path::new("-"), "read", &error))?;
    let laid = laid_out("-", bytes)?;
    let mut status = Status::Met;
    if check {
        if laid.changed() {
            output::print(&difference("-", &laid))?;
            status = Status::Missed;
        }
    } else {
        output::print(laid.text.as_deref().unwrap_or(&String::from_utf8_lossy(&laid.before)))?;
    }
    if !laid.findings.is_empty() {
        let here = Path::new("/");
        views::complain_of(&laid.sources, rendered(&laid), here, here, colour);
        status = Status::NotUnderstood;
    }
    Ok(status)
}

/// Lays a text out; what can't be read in it stays as it was typed.
fn laid_out(path: &str, before: Vec<u8>) -> Result<Laid, Failure> {
    let mut sources = Sources::default();
    let text = match decode(&before) {
        Ok(text) => text,
        Err(fact) => {
            let file = sources.add(Source::new(path, String::from_utf8_lossy(&before).into_owned()));
            let findings = vec![Finding::new(fact, Span::default().at(file))];
            return Ok(Laid { text: None, before, sources, findings });
        }
    };
    let fault = |_| {
        Failure::Fault(std::format!(
            "`{path}` was left alone: laid out, it would say something else; please report this"
        ))
    };
    let laid = format(&text).map_err(fault)?;
    let file = sources.add(Source::new(path, text.as_str()));
    let findings = parse(&text, file).findings;
    Ok(Laid { text: Some(laid), before, sources, findings })
}

/// A line that says where a text is first laid out otherwise.
fn difference(name: &str, laid: &Laid) -> String {
    let before = String::from_utf8_lossy(&laid.before);
    let after = laid.text.as_deref().unwrap_or("");
    let same = before.split('\n').zip(after.split('\n')).take_while(|(before, after)| before == after);
    std::format!("{name}:{}: laid out otherwise from here\n", same.count() + 1)
}

fn rendered(laid: &Laid) -> Vec<overcoat_lang::diagnostic::Diagnostic> {
    laid.findings.iter().map(|finding| render(finding, &laid.sources)).collect()
}

/// Why a file could not be read, as the end of a sentence.
fn why(error: ReadError) -> String {
    match error {
        ReadError::Missing => "does not exist".to_owned(),
        ReadError::Outside(why) | ReadError::Failed(why) => why,
    }
}
