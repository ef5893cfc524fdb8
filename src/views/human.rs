//! The view for people: each finding with its text, a table for each recipe, the waived findings, the verdict.

use super::picture::{self, Texts};
use super::table::{self, Paint};
use super::{Totals, View};
use overcoat_lang::diagnostic::Diagnostic;
use std::fmt::Write;

/// The report as text.
pub(crate) fn render(view: &View<'_>, coloured: bool) -> String {
    let paint = Paint::new(coloured);
    let mut text = findings(view, coloured);
    for recipe in &view.report.recipes {
        text.push_str(&table::draw(view, recipe, paint));
        text.push('\n');
    }
    let waived: Vec<&Diagnostic> =
        view.report.diagnostics.iter().filter(|finding| finding.waived.is_some()).collect();
    if !waived.is_empty() {
        let _ = writeln!(text, "{}", paint.strong("Waived"));
        for finding in waived {
            text.push_str(&waived_line(view, finding));
        }
        text.push('\n');
    }
    let totals = view.totals();
    let _ = writeln!(text, "{}", paint.verdict(!view.failed(), &conclusion(&totals)));
    text
}

/// The findings that stand, each with the text that it is about.
pub(crate) fn findings(view: &View<'_>, coloured: bool) -> String {
    let mut texts = Texts::new(&view.shown);
    let mut text = String::new();
    for finding in view.report.diagnostics.iter().filter(|finding| finding.waived.is_none()) {
        text.push_str(&picture::draw(view, &mut texts, finding, coloured));
        text.push('\n');
    }
    text
}

fn waived_line(view: &View<'_>, finding: &Diagnostic) -> String {
    let at = view.shown.located(finding.place);
    let (reason, until) = match &finding.waived {
        Some(waived) => (waived.reason.as_str(), waived.until.as_deref()),
        None => ("", None),
    };
    let until = until.map_or(String::new(), |until| format!(", until {until}"));
    let (code, message) = (finding.code.slug(), &finding.message);
    let line =
        format!("  {}:{}:{} {code}: {message}\n      because {reason}{until}\n", at.file, at.line, at.column);
    picture::harmless(&line)
}

/// The last line.
fn conclusion(totals: &Totals) -> String {
    let count = |number: usize, one: &str, many: &str| match number {
        0 => None,
        1 => Some(format!("1 {one}")),
        _ => Some(format!("{number} {many}")),
    };
    let recipes = match totals.recipes {
        0 => "no recipes".to_owned(),
        1 if totals.met == 1 => "1 recipe, met".to_owned(),
        1 => "1 recipe, not met".to_owned(),
        all if totals.met == all => format!("{all} recipes, all met"),
        all => format!("{all} recipes, {} met", totals.met),
    };
    let parts = [
        Some(recipes),
        count(totals.errors, "error", "errors"),
        count(totals.warnings, "warning", "warnings"),
        count(totals.hints, "hint", "hints"),
        count(totals.denied, "of them denied", "of them denied"),
        count(totals.waived, "waived", "waived"),
    ];
    parts.into_iter().flatten().collect::<Vec<_>>().join("; ")
}
