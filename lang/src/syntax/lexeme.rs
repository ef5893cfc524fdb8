//! Lexemes: the tokens that the parser reads, with their text and what a look around tells of them.

use super::keywords::BlockKind;
use super::tokens::{Token, TokenKind};
use crate::source::Span;

/// A token for the parser.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Lexeme<'a> {
    /// What it is.
    pub(super) kind: TokenKind,
    /// As written; empty for a brace that is missing and was put in.
    pub(super) text: &'a str,
    /// Where.
    pub(super) span: Span,
    /// Whether it is the first on its line.
    pub(super) first_on_line: bool,
    /// Bytes before it on its line.
    pub(super) column: u32,
    /// The block that it stands in; a brace belongs to the block around it.
    pub(super) block: BlockKind,
    /// The `##` lines before it, without the marks.
    pub(super) description: &'a [&'a str],
}

impl Lexeme<'_> {
    /// Whether it is this word.
    pub(super) fn is(&self, word: &str) -> bool {
        self.kind == TokenKind::Word && self.text == word
    }

    /// Whether it can start a statement of this block.
    pub(super) fn starts(&self, block: BlockKind) -> bool {
        self.kind == TokenKind::Word && block.starters().contains(&self.text)
    }
}

/// The `##` lines of a text without their marks, and for each token that they stand before, which.
pub(super) struct Descriptions<'a> {
    lines: Vec<&'a str>,
}

impl<'a> Descriptions<'a> {
    /// Collects them.
    pub(super) fn new(text: &'a str, tokens: &[Token]) -> Self {
        let marked = tokens.iter().filter(|token| token.kind == TokenKind::Description);
        let strip = |token: &Token| {
            let line = text.get(token.span.range()).unwrap_or("");
            let line = line.strip_prefix("##").unwrap_or(line);
            line.strip_prefix(' ').unwrap_or(line).trim_end()
        };
        Descriptions { lines: marked.map(strip).collect() }
    }

    /// The significant tokens as lexemes, their blocks not yet known.
    pub(super) fn lexemes(&'a self, text: &'a str, tokens: &[Token]) -> Vec<Lexeme<'a>> {
        let mut from = 0;
        let mut to = 0;
        let mut lexemes = Vec::with_capacity(tokens.len());
        for token in tokens {
            if token.kind == TokenKind::Description {
                to += 1;
            }
            if !token.kind.significant() {
                continue;
            }
            lexemes.push(Lexeme {
                kind: token.kind,
                text: text.get(token.span.range()).unwrap_or(""),
                span: token.span,
                first_on_line: token.first_on_line,
                column: token.column,
                block: BlockKind::Module,
                description: self.lines.get(from..to).unwrap_or(&[]),
            });
            from = to;
        }
        lexemes
    }
}
