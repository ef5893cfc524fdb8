//! Blocks, statements, and how the parser goes on after one that it can't read.
//!
//! Every statement starts with a keyword, so what can't be read is skipped up to the next keyword of the same
//! block, nested blocks as a whole; braces are balanced before the parser sees them.

use super::super::ast::{Block, Statement};
use super::super::keywords::{self, BlockKind};
use super::super::lexeme::Lexeme;
use super::super::problem::Tokens;
use super::super::tokens::TokenKind;
use super::pieces::{extent, lexeme};
use super::{Extra, Rule};
use crate::near::nearest;
use chumsky::prelude::*;

/// A statement of one line: its keyword, its body, and then nothing but the next statement or the end.
pub(super) fn sentence<'a, K: 'a>(
    block: BlockKind,
    keyword: &'static str,
    body: impl Parser<'a, Tokens<'a>, K, Extra> + 'a,
) -> Rule<'a, Statement<K>> {
    let over = any()
        .filter(move |lexeme: &Lexeme<'a>| lexeme.kind == TokenKind::RightBrace || resumes(lexeme, block))
        .ignored()
        .or(end())
        .rewind();
    opened(keyword, body).then_ignore(over).boxed()
}

/// A statement that ends with a block.
pub(super) fn opened<'a, K: 'a>(
    keyword: &'static str,
    body: impl Parser<'a, Tokens<'a>, K, Extra> + 'a,
) -> Rule<'a, Statement<K>> {
    any()
        .filter(move |lexeme: &Lexeme<'a>| lexeme.is(keyword))
        .then(body)
        .map_with(|(first, kind), extra| Statement {
            description: first.description.iter().map(|line| (*line).to_owned()).collect(),
            keyword: first.span,
            kind,
            span: extent(extra.slice()),
        })
        .boxed()
}

/// Statements one after the other; none for each that can't be read.
pub(super) fn statements<'a, K: 'a>(
    block: BlockKind,
    statement: Rule<'a, Statement<K>>,
) -> Rule<'a, Vec<Option<Statement<K>>>> {
    let skipped = skip(block).map(|()| None);
    statement.labelled(block.label()).map(Some).recover_with(via_parser(skipped)).repeated().collect().boxed()
}

/// `{ … }` with statements of a kind.
pub(super) fn block<'a, K: 'a>(block: BlockKind, statement: Rule<'a, Statement<K>>) -> Rule<'a, Block<K>> {
    lexeme(TokenKind::LeftBrace)
        .labelled("{")
        .ignore_then(statements(block, statement))
        .then_ignore(lexeme(TokenKind::RightBrace))
        .map_with(|all, extra| {
            let broken = all.iter().any(Option::is_none);
            Block { statements: all.into_iter().flatten().collect(), broken, span: extent(extra.slice()) }
        })
        .boxed()
}

/// At least one lexeme, then all up to the next statement of the block or its end.
fn skip<'a>(block: BlockKind) -> Rule<'a, ()> {
    let anything = recursive(|anything| {
        let group = lexeme(TokenKind::LeftBrace)
            .then(anything.repeated())
            .then(lexeme(TokenKind::RightBrace))
            .ignored();
        let single = any()
            .filter(|lexeme: &Lexeme<'a>| {
                !matches!(lexeme.kind, TokenKind::LeftBrace | TokenKind::RightBrace)
            })
            .ignored();
        choice((single, group))
    })
    .boxed();
    let start = any().filter(move |lexeme: &Lexeme<'a>| resumes(lexeme, block));
    anything.clone().then(start.not().ignore_then(anything).repeated()).ignored().boxed()
}

/// Whether a statement starts here, be it one of another block or, first on its line, a mistyped one.
fn resumes(lexeme: &Lexeme<'_>, block: BlockKind) -> bool {
    if lexeme.kind != TokenKind::Word {
        return false;
    }
    lexeme.starts(block)
        || lexeme.first_on_line
            && (keywords::starts_some(lexeme.text)
                || !keywords::reserved(lexeme.text)
                    && !nearest(lexeme.text, block.starters().iter().copied()).is_empty())
}
