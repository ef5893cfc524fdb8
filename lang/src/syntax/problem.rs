//! The parser's own errors, before they are put into words.

use super::lexeme::Lexeme;
use crate::finding::FormFact;
use crate::source::Span;
use chumsky::DefaultExpected;
use chumsky::error::{Error, LabelError};
use chumsky::span::SimpleSpan;
use chumsky::util::MaybeRef;

/// What the parser reads.
pub(super) type Tokens<'a> = &'a [Lexeme<'a>];

/// An error of the parser: at which lexeme, and what could have stood there.
#[derive(Clone, Debug)]
pub(super) struct Problem {
    /// Index of the lexeme; the number of lexemes for the end of the text.
    pub(super) at: usize,
    /// Labels of what was expected.
    pub(super) expected: Vec<&'static str>,
    /// A fact that is known already, with its place.
    pub(super) fact: Option<Box<(Span, FormFact)>>,
}

impl Problem {
    /// A fact that needs no further words.
    pub(super) fn fact(span: Span, fact: FormFact) -> Self {
        Problem { at: 0, expected: Vec::new(), fact: Some(Box::new((span, fact))) }
    }
}

impl<'a> Error<'a, Tokens<'a>> for Problem {
    fn merge(mut self, other: Self) -> Self {
        for label in other.expected {
            if !self.expected.contains(&label) {
                self.expected.push(label);
            }
        }
        self
    }
}

impl<'a> LabelError<'a, Tokens<'a>, DefaultExpected<'a, Lexeme<'a>>> for Problem {
    fn expected_found<E: IntoIterator<Item = DefaultExpected<'a, Lexeme<'a>>>>(
        _: E,
        _: Option<MaybeRef<'a, Lexeme<'a>>>,
        span: SimpleSpan<usize>,
    ) -> Self {
        Problem { at: span.start, expected: Vec::new(), fact: None }
    }

    fn merge_expected_found<E: IntoIterator<Item = DefaultExpected<'a, Lexeme<'a>>>>(
        self,
        _: E,
        _: Option<MaybeRef<'a, Lexeme<'a>>>,
        _: SimpleSpan<usize>,
    ) -> Self {
        self
    }
}

impl<'a> LabelError<'a, Tokens<'a>, &'static str> for Problem {
    fn expected_found<E: IntoIterator<Item = &'static str>>(
        expected: E,
        _: Option<MaybeRef<'a, Lexeme<'a>>>,
        span: SimpleSpan<usize>,
    ) -> Self {
        Problem { at: span.start, expected: expected.into_iter().collect(), fact: None }
    }

    fn label_with(&mut self, label: &'static str) {
        self.expected.clear();
        self.expected.push(label);
    }
}
