//! From the parser's errors to findings: what was expected, what stands there, and what was likely meant.

use super::keywords::{self, BlockKind};
use super::lexeme::Lexeme;
use super::problem::Problem;
use super::slips::quoted;
use super::tokens::TokenKind;
use crate::finding::{Finding, FormFact};
use crate::near::nearest;
use crate::source::{FileId, Span};
use crate::units;

/// The finding of a problem; none where the lexer or the balance of braces has reported it already.
pub(super) fn finding(problem: Problem, lexemes: &[Lexeme<'_>], file: FileId) -> Option<Finding> {
    if let Some(known) = problem.fact {
        let (span, fact) = *known;
        return Some(Finding::new(fact, span.at(file)));
    }
    let found = lexemes.get(problem.at);
    if found.is_some_and(|found| found.kind == TokenKind::Bad) {
        return None;
    }
    let before = problem.at.checked_sub(1).and_then(|at| lexemes.get(at));
    if let Some(finding) = misspelt(problem.at, lexemes, file) {
        return Some(finding);
    }
    // What lacks its end is shown at its end, not on the line after.
    let ended = found.is_none_or(|found| found.text.is_empty() || found.first_on_line);
    // Where only words could have followed, the statement was whole, and the keyword of another block starts the next.
    let whole = !expected(&problem.expected, found).iter().any(|label| label.contains(' '));
    let misplaced = found.is_some_and(|found| {
        (found.first_on_line || whole) && keywords::starts_some(found.text) && !found.starts(found.block)
    });
    let span = match (found, before) {
        (_, Some(before)) if ended && !misplaced && !at_start(problem.at, lexemes) => before.span,
        (Some(found), _) => found.span,
        (None, Some(before)) => before.span,
        (None, None) => Span::default(),
    };
    let hint = hint(found, before, lexemes.get(problem.at + 1), &problem.expected);
    let fact = FormFact::Syntax {
        expected: match found.filter(|_| misplaced) {
            Some(found) => vec![found.block.label().to_owned()],
            None => expected(&problem.expected, found),
        },
        found: found.filter(|found| !found.text.is_empty()).map(|found| quoted(found.text)),
        hint,
    };
    Some(Finding::new(fact, span.at(file)))
}

/// Whether a statement was to start at this lexeme.
fn at_start(at: usize, lexemes: &[Lexeme<'_>]) -> bool {
    let Some(before) = at.checked_sub(1).and_then(|at| lexemes.get(at)) else {
        return true;
    };
    matches!(before.kind, TokenKind::LeftBrace | TokenKind::RightBrace)
}

/// Labels as the text of a message: words and marks in backticks, phrases as they are, most useful first.
fn expected(labels: &[&'static str], found: Option<&Lexeme<'_>>) -> Vec<String> {
    let phrase = |label: &str| label.contains(' ') || label.starts_with('`');
    let mut shown: Vec<&str> = labels.iter().copied().filter(|label| !label.is_empty()).collect();
    shown.sort_by_key(|label| !phrase(label));
    let mut words: Vec<String> = shown
        .into_iter()
        .map(|label| if phrase(label) { label.to_owned() } else { format!("`{label}`") })
        .collect();
    words.dedup();
    if words.is_empty() {
        words.push(match found.map(|found| found.block) {
            Some(BlockKind::Module) | None => "the next item".to_owned(),
            Some(_) => "the next statement or `}`".to_owned(),
        });
    }
    words
}

/// A line whose first word is nearly a keyword: that word is the mistake, wherever the parser stopped.
fn misspelt(at: usize, lexemes: &[Lexeme<'_>], file: FileId) -> Option<Finding> {
    let mut first = at.min(lexemes.len().saturating_sub(1));
    while !lexemes.get(first)?.first_on_line && at - first < 8 {
        // The statement's own keyword on this line settles that it is spelt well.
        let lexeme = lexemes.get(first)?;
        let earlier = first.checked_sub(1)?;
        if first < at && lexeme.starts(lexeme.block) {
            return None;
        }
        first = earlier;
    }
    let lexeme = lexemes.get(first)?;
    if lexeme.kind != TokenKind::Word || keywords::reserved(lexeme.text) {
        return None;
    }
    let next = lexemes.get(first + 1)?;
    if next.first_on_line || matches!(next.kind, TokenKind::Comma | TokenKind::DotDot) || next.kind.operator()
    {
        return None;
    }
    let starters = lexeme.block.starters();
    let best = nearest(lexeme.text, starters.iter().copied()).into_iter().next()?;
    let fact = FormFact::Syntax {
        expected: vec![lexeme.block.label().to_owned()],
        found: Some(quoted(lexeme.text)),
        hint: Some(format!("`{best}` is probably meant")),
    };
    Some(Finding::new(fact, lexeme.span.at(file)))
}

/// A remedy for a likely mistake.
fn hint(
    found: Option<&Lexeme<'_>>,
    before: Option<&Lexeme<'_>>,
    after: Option<&Lexeme<'_>>,
    expected: &[&'static str],
) -> Option<String> {
    let found = found?;
    let unit_before = before
        .filter(|before| before.kind == TokenKind::Word)
        .and_then(|before| units::canonical(before.text));
    match found.kind {
        TokenKind::Equals => {
            Some("only a `let` takes a `=`: a statement is its keyword and its value".to_owned())
        }
        TokenKind::Number if unit_before.is_some() => {
            Some(format!("the unit follows the number: `{} {}`", found.text, unit_before.unwrap_or("")))
        }
        TokenKind::Comma
            if before.is_some_and(|before| before.kind == TokenKind::Number)
                && after.is_some_and(|after| after.kind == TokenKind::Number) =>
        {
            let (whole, part) =
                (before.map_or("", |before| before.text), after.map_or("", |after| after.text));
            Some(format!("a decimal point is written `.`: `{whole}.{part}`"))
        }
        TokenKind::Comma => Some("commas stand only between the members of a list".to_owned()),
        TokenKind::Word if expected.iter().any(|label| label.contains("in quotes")) => {
            Some(format!("a text stands in double quotes: `\"{} …\"`", found.text))
        }
        TokenKind::Word
            if units::canonical(found.text).is_some()
                && after.is_some_and(|after| after.kind == TokenKind::Number) =>
        {
            Some(format!(
                "the unit follows the number: `{} {}`",
                after.map_or("", |after| after.text),
                found.text
            ))
        }
        TokenKind::Word if expected.contains(&"..") && expected.contains(&"±") => {
            Some("a bound is `<= …`, `>= …`, `a .. b` or `v ± t`".to_owned())
        }
        TokenKind::Word
            if expected.contains(&"..") && (found.text == "to" || expected.contains(&"parts")) =>
        {
            Some("a range is written `400 .. 700 nm`".to_owned())
        }
        TokenKind::Word => word_hint(found, expected),
        TokenKind::Text if expected.iter().any(|label| label.starts_with("the name of")) => {
            Some("names are written without quotes".to_owned())
        }
        // Where a value lacks, as in `min()`, the parenthesis is not what is wrong.
        TokenKind::RightParenthesis if expected.iter().any(|label| label.contains(", for example")) => None,
        TokenKind::RightParenthesis => Some("no parenthesis is open here".to_owned()),
        TokenKind::PlusMinus => Some("a variation or a tolerance has one value after the `±`".to_owned()),
        _ => None,
    }
}

fn word_hint(found: &Lexeme<'_>, expected: &[&'static str]) -> Option<String> {
    if keywords::starts_some(found.text) && !found.starts(found.block) {
        let homes: Vec<&str> = keywords::homes(found.text).map(BlockKind::phrase).collect();
        let at = |phrase: &str| if phrase == BlockKind::Module.phrase() { "at" } else { "in" };
        let home = homes.join(" or ");
        let here = found.block.phrase();
        return Some(format!("`{}` belongs {} {home}, not {} {here}", found.text, at(&home), at(here)));
    }
    if keywords::reserved(found.text) {
        let wants_name = expected.iter().any(|label| label.starts_with("the name of"));
        return wants_name.then(|| format!("`{}` is a keyword and can't be a name", found.text));
    }
    let clauses = keywords::CLAUSES.iter().chain(found.block.starters()).copied();
    let words = expected.iter().copied().filter(|label| !label.contains([' ', '`'])).chain(clauses);
    let best = nearest(found.text, words).into_iter().next()?;
    Some(format!("`{best}` is probably meant"))
}
