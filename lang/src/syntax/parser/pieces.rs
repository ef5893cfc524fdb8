//! The smallest rules: marks, words, names, texts.

use super::super::ast::{Name, Text, Unit};
use super::super::keywords;
use super::super::lexeme::Lexeme;
use super::super::problem::{Problem, Tokens};
use super::super::tokens::TokenKind;
use super::{Extra, Rule};
use crate::finding::FormFact;
use crate::source::Span;
use chumsky::prelude::*;

/// One lexeme of a kind, unnamed in messages.
pub(super) fn lexeme<'a>(kind: TokenKind) -> impl Parser<'a, Tokens<'a>, Lexeme<'a>, Extra> + Clone {
    any().filter(move |lexeme: &Lexeme<'a>| lexeme.kind == kind)
}

/// A mark that a message may name.
pub(super) fn mark<'a>(kind: TokenKind) -> Rule<'a, Span> {
    lexeme(kind).map(|lexeme| lexeme.span).labelled(kind.mark()).boxed()
}

/// A word with a meaning of its own, that a message may name.
pub(super) fn word<'a>(word: &'static str) -> Rule<'a, Span> {
    any().filter(move |lexeme: &Lexeme<'a>| lexeme.is(word)).map(|lexeme| lexeme.span).labelled(word).boxed()
}

fn as_name(lexeme: &Lexeme<'_>) -> Name {
    Name { text: lexeme.text.to_owned(), span: lexeme.span }
}

/// A name of something that is defined elsewhere.
pub(super) fn name<'a>(label: &'static str) -> Rule<'a, Name> {
    any()
        .filter(|lexeme: &Lexeme<'a>| lexeme.kind == TokenKind::Word && !keywords::reserved(lexeme.text))
        .map(|lexeme| as_name(&lexeme))
        .labelled(label)
        .boxed()
}

/// A name where it is defined: one that would read as a keyword is taken, and reported.
pub(super) fn definition<'a>(label: &'static str) -> Rule<'a, Name> {
    any()
        .filter(|lexeme: &Lexeme<'a>| {
            // A keyword on the next line starts something; the name before it was left out.
            lexeme.kind == TokenKind::Word && !(lexeme.first_on_line && keywords::reserved(lexeme.text))
        })
        .validate(|lexeme, _, emitter| {
            if keywords::reserved(lexeme.text) {
                let name = lexeme.text.to_owned();
                emitter.emit(Problem::fact(lexeme.span, FormFact::KeywordAsName { name }));
            }
            if lexeme.text.ends_with(']') {
                let fact = FormFact::InvalidValue {
                    what: "a name".to_owned(),
                    value: format!("`{}`", lexeme.text),
                    must: "be free of an index: only a repeat numbers its layers".to_owned(),
                };
                emitter.emit(Problem::fact(lexeme.span, fact));
            }
            as_name(&lexeme)
        })
        .labelled(label)
        .boxed()
}

/// A word of any meaning on the same line.
pub(super) fn any_word<'a>(label: &'static str) -> Rule<'a, Name> {
    any()
        .filter(|lexeme: &Lexeme<'a>| {
            lexeme.kind == TokenKind::Word && !(lexeme.first_on_line && keywords::starts_some(lexeme.text))
        })
        .map(|lexeme| as_name(&lexeme))
        .labelled(label)
        .boxed()
}

/// A text in quotes.
pub(super) fn text<'a>(label: &'static str) -> Rule<'a, Text> {
    lexeme(TokenKind::Text)
        .map(|lexeme| Text { value: unescape(lexeme.text), span: lexeme.span })
        .labelled(label)
        .boxed()
}

/// A unit by itself.
pub(super) fn unit<'a>(label: &'static str) -> Rule<'a, Unit> {
    lexeme(TokenKind::Unit)
        .map(|lexeme| Unit { text: lexeme.text.to_owned(), span: lexeme.span })
        .labelled(label)
        .boxed()
}

/// Items with commas between them.
pub(super) fn list<'a, O: 'a>(item: Rule<'a, O>) -> Rule<'a, Vec<O>> {
    item.separated_by(mark(TokenKind::Comma)).at_least(1).collect().boxed()
}

/// From the first to the last of the lexemes that a rule took.
pub(super) fn extent(taken: &[Lexeme<'_>]) -> Span {
    match (taken.first(), taken.last()) {
        (Some(first), Some(last)) => first.span.to(last.span),
        _ => Span::default(),
    }
}

fn unescape(written: &str) -> String {
    let inner = written.strip_prefix('"').unwrap_or(written);
    let inner = inner.strip_suffix('"').unwrap_or(inner);
    let mut value = String::with_capacity(inner.len());
    let mut letters = inner.chars();
    while let Some(letter) = letters.next() {
        match letter {
            '\\' => match letters.next() {
                Some('n') => value.push('\n'),
                Some(other) => value.push(other),
                None => {}
            },
            other => value.push(other),
        }
    }
    value
}
