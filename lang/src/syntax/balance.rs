//! Braces that match, before anything is parsed.
//!
//! A brace too many or too few would take the rest of the file with it. So each item is balanced by itself:
//! a missing `}` is put in where the layout shows that the block has ended, a stray one is set aside, and
//! each is reported once. The parser then only ever sees balanced blocks, and may skip over one as a whole.

use super::ENOUGH;
use super::keywords::BlockKind;
use super::lexeme::Lexeme;
use super::tokens::TokenKind;
use crate::finding::{Finding, FormFact};
use crate::source::{FileId, Span};

/// Braces and parentheses may be nested this deep; what reads the tree may recurse.
pub(super) const NESTING_BOUND: usize = 64;
/// Operators that one expression may have; what reads the tree may recurse.
pub(super) const OPERATOR_BOUND: usize = 500;

/// Refuses texts whose tree would be too deep.
///
/// # Errors
///
/// The first bracket or operator beyond the bounds.
pub(super) fn bounded(lexemes: &[Lexeme<'_>], file: FileId) -> Result<(), Finding> {
    let refuse = |span: Span, why: String| Err(Finding::new(FormFact::Unreadable { why }, span.at(file)));
    let mut depth = 0_usize;
    let mut parentheses = 0_usize;
    let mut operators = 0_usize;
    let mut operand_before = false;
    for lexeme in lexemes {
        let operand = matches!(lexeme.kind, TokenKind::Number | TokenKind::Word | TokenKind::LeftParenthesis);
        // Two operands side by side belong to two expressions; inside parentheses all counts as one.
        let apart = operand && operand_before && lexeme.kind != TokenKind::LeftParenthesis;
        let inside = operand || lexeme.kind.operator() || lexeme.kind == TokenKind::Unit;
        match lexeme.kind {
            TokenKind::LeftBrace => {
                depth += 1;
                // No expression holds a brace: a parenthesis still open here was never closed.
                parentheses = 0;
            }
            TokenKind::RightBrace => {
                depth = depth.saturating_sub(1);
                parentheses = 0;
            }
            TokenKind::LeftParenthesis => parentheses += 1,
            TokenKind::RightParenthesis => parentheses = parentheses.saturating_sub(1),
            kind if kind.operator() => operators += 1,
            _ => {}
        }
        if depth + parentheses > NESTING_BOUND {
            return refuse(
                lexeme.span,
                format!("blocks and parentheses are nested more than {NESTING_BOUND} deep"),
            );
        }
        if parentheses == 0 && (apart || !inside && lexeme.kind != TokenKind::RightParenthesis) {
            operators = 0;
        }
        if operators > OPERATOR_BOUND {
            return refuse(lexeme.span, format!("one expression has more than {OPERATOR_BOUND} operators"));
        }
        operand_before = matches!(
            lexeme.kind,
            TokenKind::Number | TokenKind::Word | TokenKind::Unit | TokenKind::RightParenthesis
        );
    }
    Ok(())
}

/// The lexemes with balanced braces and with the block of each, and what was wrong.
pub(super) fn balance<'a>(lexemes: Vec<Lexeme<'a>>, file: FileId) -> (Vec<Lexeme<'a>>, Vec<Finding>) {
    let mut balancer = Balancer { out: Vec::with_capacity(lexemes.len() + 8), findings: Vec::new(), file };
    let mut rest = lexemes.as_slice();
    while !rest.is_empty() {
        let (item, after) = rest.split_at(item_length(rest));
        balancer.item(item, after.first());
        rest = after;
    }
    (balancer.out, balancer.findings)
}

/// The lexemes from here to the next item.
fn item_length(lexemes: &[Lexeme<'_>]) -> usize {
    // Where an item stands in the middle of a line says nothing of the layout.
    let column = lexemes.first().filter(|first| first.first_on_line).map_or(0, |first| first.column);
    let mut depth = 0_usize;
    for (index, lexeme) in lexemes.iter().enumerate() {
        match lexeme.kind {
            TokenKind::LeftBrace => depth += 1,
            TokenKind::RightBrace => depth = depth.saturating_sub(1),
            TokenKind::Word if index > 0 && lexeme.starts(BlockKind::Module) => {
                // Inside an unclosed block only a keyword at the start of a line, no deeper than the item
                // itself, starts the next; and `chamber` only where it opens a block, being a statement too.
                let opens = || {
                    let mut next = lexemes.iter().skip(index + 1);
                    next.next().is_some_and(|name| name.kind == TokenKind::Word)
                        && next
                            .next()
                            .is_some_and(|then| matches!(then.kind, TokenKind::LeftBrace | TokenKind::Text))
                };
                let outside = lexeme.first_on_line && lexeme.column <= column;
                if depth == 0 || (outside && (lexeme.text != "chamber" || opens())) {
                    return index;
                }
            }
            _ => {}
        }
    }
    lexemes.len()
}

struct Open<'a> {
    brace: Lexeme<'a>,
    block: BlockKind,
    keyword: &'a str,
}

struct Balancer<'a> {
    out: Vec<Lexeme<'a>>,
    findings: Vec<Finding>,
    file: FileId,
}

impl<'a> Balancer<'a> {
    fn item(&mut self, lexemes: &[Lexeme<'a>], next: Option<&Lexeme<'a>>) {
        let count = |kind| lexemes.iter().filter(|lexeme| lexeme.kind == kind).count();
        let mut missing = count(TokenKind::LeftBrace).saturating_sub(count(TokenKind::RightBrace));
        let mut open: Vec<Open<'a>> = Vec::new();
        let mut keyword = "";
        for lexeme in lexemes {
            let mut lexeme = *lexeme;
            let block = open.last().map_or(BlockKind::Module, |open| open.block);
            let around = open.iter().rev().nth(1).map_or(BlockKind::Module, |open| open.block);
            if missing > 0
                && open.len() > 1
                && lexeme.first_on_line
                && lexeme.starts(around)
                && !lexeme.starts(block)
                && block != BlockKind::Data
                && let Some(unclosed) = open.pop()
            {
                missing -= 1;
                self.close(&unclosed, Some(&lexeme), true);
            }
            let block = open.last().map_or(BlockKind::Module, |open| open.block);
            lexeme.block = block;
            match lexeme.kind {
                TokenKind::Word if lexeme.starts(block) => keyword = lexeme.text,
                TokenKind::LeftBrace => {
                    let child = block.child(keyword);
                    open.push(Open { brace: lexeme, block: child, keyword });
                    keyword = "";
                }
                TokenKind::RightBrace => match open.pop() {
                    Some(_) => lexeme.block = open.last().map_or(BlockKind::Module, |open| open.block),
                    None => {
                        self.stray(&lexeme);
                        lexeme.kind = TokenKind::Bad;
                    }
                },
                _ => {}
            }
            self.out.push(lexeme);
        }
        // One report is enough where several blocks end together: the outermost names the item.
        while let Some(unclosed) = open.pop() {
            self.close(&unclosed, next, open.is_empty());
        }
    }

    fn stray(&mut self, lexeme: &Lexeme<'a>) {
        if self.findings.len() > ENOUGH {
            return;
        }
        let hint = Some("no block is open here".to_owned());
        let fact = FormFact::Syntax {
            expected: vec![BlockKind::Module.label().to_owned()],
            found: Some("`}`".to_owned()),
            hint,
        };
        self.findings.push(Finding::new(fact, lexeme.span.at(self.file)));
    }

    fn close(&mut self, unclosed: &Open<'a>, before: Option<&Lexeme<'a>>, report: bool) {
        let written = self.out.iter().rev().find(|lexeme| !lexeme.text.is_empty());
        let last = written.map_or(unclosed.brace.span, |last| last.span);
        let span = Span { start: last.end, end: last.end };
        if report {
            let what = if unclosed.keyword.is_empty() { "block" } else { unclosed.keyword };
            let fact = FormFact::Syntax {
                expected: vec!["`}`".to_owned()],
                found: before.map(|before| format!("`{}`", before.text)),
                hint: Some(format!("the `{what}` block is never closed")),
            };
            self.findings.push(Finding::new(fact, last.at(self.file)));
        }
        self.out.push(Lexeme {
            kind: TokenKind::RightBrace,
            text: "",
            span,
            first_on_line: false,
            column: 0,
            block: BlockKind::Module,
            description: &[],
        });
    }
}
