//! From tokens to what the printer lays out: entries with their comments.

use super::marks::{Mark, Marks};
use super::spacing::{self, Piece};
use crate::finding::{Fact, FormFact};
use crate::syntax::Parsed;
use crate::syntax::tokens::{Token, TokenKind};
use std::ops::Range;

/// A statement, a row, a comment on its own line, or what could not be read.
#[derive(Debug)]
pub(super) struct Entry<'a> {
    /// What it is.
    pub(super) kind: EntryKind<'a>,
    /// Whether a line was left blank before it.
    pub(super) blank_before: bool,
    /// The comment after it on its last line.
    pub(super) trailing: Option<&'a str>,
}

#[derive(Debug)]
pub(super) enum EntryKind<'a> {
    /// A comment on a line of its own.
    Comment(&'a str),
    /// Statement or row, piece by piece.
    Pieces(Vec<Part<'a>>),
    /// As typed; what stood between it and the entry before it, if on the same line.
    Typed { text: String, glue: Option<&'a str> },
}

/// A part of a statement.
#[derive(Debug)]
pub(super) enum Part<'a> {
    /// A token, with the blanks that go before it.
    Piece(Piece<'a>),
    /// A comment inside; whether it stood on its own line.
    Comment { text: &'a str, own_line: bool },
    /// Braces and what is in them.
    Block(Body<'a>),
}

/// What stands between braces.
#[derive(Debug)]
pub(super) struct Body<'a> {
    /// The entries.
    pub(super) entries: Vec<Entry<'a>>,
    /// Whether it was written on one line and may stay there.
    pub(super) one_line: bool,
    /// Whether the entries are statements, not rows or terms.
    pub(super) statements: bool,
    /// A comment right after the opening brace.
    pub(super) opening: Option<&'a str>,
}

/// The entries of a whole text.
pub(super) fn entries<'a>(text: &'a str, parsed: &'a Parsed) -> Vec<Entry<'a>> {
    let marks = Marks::new(parsed);
    // A place that can't be read keeps its statement as typed.
    let mut faults: Vec<u32> = parsed
        .findings
        .iter()
        .filter(|finding| matches!(finding.fact, Fact::Form(FormFact::Syntax { .. })))
        .map(|finding| finding.place.span.start)
        .chain(
            parsed.tokens.iter().filter(|token| token.kind == TokenKind::Noise).map(|token| token.span.start),
        )
        .collect();
    faults.sort_unstable();
    let builder = Builder { text, tokens: &parsed.tokens, marks, faults };
    builder.statements(0..parsed.tokens.len())
}

struct Builder<'a> {
    text: &'a str,
    tokens: &'a [Token],
    marks: Marks,
    faults: Vec<u32>,
}

fn comment(token: &Token) -> bool {
    matches!(token.kind, TokenKind::Comment | TokenKind::Description)
}

impl<'a> Builder<'a> {
    fn token(&self, index: usize) -> Option<&'a Token> {
        self.tokens.get(index)
    }

    fn written(&self, token: &Token) -> &'a str {
        super::written(self.text, token)
    }

    /// The index of the first token at or after a byte.
    fn index(&self, byte: u32) -> usize {
        self.tokens.partition_point(|token| token.span.start < byte)
    }

    fn faulty(&self, range: Range<u32>) -> bool {
        let first = self.faults.partition_point(|at| *at < range.start);
        self.faults.get(first).is_some_and(|at| *at < range.end)
    }

    fn blank_before(&self, index: usize) -> bool {
        let (Some(before), Some(token)) =
            (index.checked_sub(1).and_then(|at| self.token(at)), self.token(index))
        else {
            return false;
        };
        let between = self.text.get(before.span.end as usize..token.span.start as usize).unwrap_or("");
        between.bytes().filter(|byte| *byte == b'\n').count() > 1
    }

    /// The comment right after the token before `index`, on its line.
    fn trailing(&self, index: usize, range: &Range<usize>) -> Option<&'a str> {
        let token = self.token(index).filter(|token| comment(token) && !token.first_on_line)?;
        range.contains(&index).then(|| self.written(token))
    }

    fn statements(&self, range: Range<usize>) -> Vec<Entry<'a>> {
        let mut entries: Vec<Entry<'a>> = Vec::new();
        let mut at = range.start;
        while at < range.end {
            let Some(token) = self.token(at) else { break };
            let blank_before = self.blank_before(at);
            if comment(token) {
                entries.push(Entry {
                    kind: EntryKind::Comment(self.written(token)),
                    blank_before,
                    trailing: None,
                });
                at += 1;
                continue;
            }
            let mark = self.marks.at(token.span.start);
            let end = match mark {
                Some(mark) => self.index(mark.end),
                None => self.unread_end(at, range.end),
            };
            let kind = match mark.filter(|mark| self.sound(token, *mark, at..end)) {
                Some(mark) => EntryKind::Pieces(self.pieces(at..end, mark)),
                None => self.typed(at..end, entries.last()),
            };
            let trailing = self.trailing(end, &range);
            at = end + usize::from(trailing.is_some());
            entries.push(Entry { kind, blank_before, trailing });
        }
        entries
    }

    /// Whether a statement may be laid out anew: its braces match and its own words are readable.
    fn sound(&self, first: &Token, mark: Mark, range: Range<usize>) -> bool {
        let tokens = self.tokens.get(range).unwrap_or(&[]);
        let count = |kind| tokens.iter().filter(|token| token.kind == kind).count();
        let own_end = mark.block.map_or(mark.end, |block| block.start);
        count(TokenKind::LeftBrace) == count(TokenKind::RightBrace) && !self.faulty(first.span.start..own_end)
    }

    /// The end of what can't be read: the next statement, without the comments that stand before that.
    fn unread_end(&self, from: usize, limit: usize) -> usize {
        let mut end = from + 1;
        let mut at = from + 1;
        while at < limit {
            let Some(token) = self.token(at) else { break };
            if !comment(token) {
                if self.marks.at(token.span.start).is_some() {
                    break;
                }
                end = at + 1;
            }
            at += 1;
        }
        end
    }

    fn typed(&self, range: Range<usize>, before: Option<&Entry<'a>>) -> EntryKind<'a> {
        let (Some(first), Some(last)) = (self.token(range.start), self.token(range.end - 1)) else {
            return EntryKind::Comment("");
        };
        let typed = self.text.get(first.span.start as usize..last.span.end as usize).unwrap_or("");
        let free = before
            .is_some_and(|before| before.trailing.is_none() && !matches!(before.kind, EntryKind::Comment(_)));
        let previous = range.start.checked_sub(1).and_then(|at| self.token(at));
        let glue = previous
            .filter(|_| free && !first.first_on_line)
            .and_then(|previous| self.text.get(previous.span.end as usize..first.span.start as usize));
        EntryKind::Typed { text: typed.replace("\r\n", "\n"), glue }
    }

    fn pieces(&self, range: Range<usize>, mark: Mark) -> Vec<Part<'a>> {
        let mut parts = Vec::new();
        let mut spacing = spacing::Spacing::new(false);
        let mut at = range.start;
        while at < range.end {
            let Some(token) = self.token(at) else { break };
            if comment(token) {
                parts.push(Part::Comment { text: self.written(token), own_line: token.first_on_line });
                at += 1;
            } else if token.kind == TokenKind::LeftBrace {
                let close = self.closing(at, range.end);
                let statements = mark.block.is_some_and(|block| block.start == token.span.start);
                parts.push(Part::Block(self.body(at, close, statements)));
                spacing.block();
                at = close + 1;
            } else {
                parts.push(Part::Piece(self.piece(&mut spacing, at)));
                at += 1;
            }
        }
        parts
    }

    fn piece(&self, spacing: &mut spacing::Spacing, at: usize) -> Piece<'a> {
        let text = self.token(at).map_or("", |token| self.written(token));
        let kind = self.token(at).map_or(TokenKind::Bad, |token| token.kind);
        let adjacent = at
            .checked_sub(1)
            .and_then(|before| self.token(before))
            .is_some_and(|before| Some(before.span.end) == self.token(at).map(|token| token.span.start));
        spacing.next(kind, text, adjacent)
    }

    /// The brace that closes the one at `open`; braces are known to match here.
    fn closing(&self, open: usize, limit: usize) -> usize {
        let mut depth = 0_usize;
        for at in open..limit {
            match self.token(at).map(|token| token.kind) {
                Some(TokenKind::LeftBrace) => depth += 1,
                Some(TokenKind::RightBrace) => {
                    depth -= 1;
                    if depth == 0 {
                        return at;
                    }
                }
                _ => {}
            }
        }
        limit.saturating_sub(1)
    }

    fn body(&self, open: usize, close: usize, statements: bool) -> Body<'a> {
        let range = open + 1..close;
        let opening = self.trailing(range.start, &range);
        let inner = range.start + usize::from(opening.is_some())..close;
        let start = self.token(open).map_or(0, |token| token.span.start as usize);
        let end = self.token(close).map_or(start, |token| token.span.end as usize);
        let written = self.text.get(start..end).unwrap_or("");
        let comments = self.tokens.get(range).unwrap_or(&[]).iter().any(comment);
        let one_line = !written.contains('\n') && !comments;
        let entries = if statements { self.statements(inner) } else { self.rows(inner) };
        Body { entries, one_line, statements, opening }
    }

    /// Rows of a table end with a comma, terms of an index start with their kind.
    fn rows(&self, range: Range<usize>) -> Vec<Entry<'a>> {
        let mut entries = Vec::new();
        let mut at = range.start;
        while at < range.end {
            let Some(token) = self.token(at) else { break };
            let blank_before = self.blank_before(at);
            if comment(token) {
                entries.push(Entry {
                    kind: EntryKind::Comment(self.written(token)),
                    blank_before,
                    trailing: None,
                });
                at += 1;
                continue;
            }
            let mut parts = Vec::new();
            let mut spacing =
                spacing::Spacing::new(self.written(token).starts_with(|c: char| !c.is_alphabetic()));
            let mut depth = 0_usize;
            let first = at;
            while at < range.end {
                let Some(token) = self.token(at) else { break };
                let text = self.written(token);
                let term = matches!(text, "lorentz" | "drude" | "tauc_lorentz");
                // A comment after the last word of a row belongs behind the row.
                let ends = self.tokens.get(at..range.end).unwrap_or(&[]).iter().find(|next| !comment(next));
                let last = ends.is_none_or(|next| {
                    next.kind == TokenKind::Word
                        && matches!(self.written(next), "lorentz" | "drude" | "tauc_lorentz")
                });
                if at > first && (term && token.kind == TokenKind::Word || comment(token) && last) {
                    break;
                }
                if comment(token) {
                    parts.push(Part::Comment { text, own_line: token.first_on_line });
                    at += 1;
                    continue;
                }
                match token.kind {
                    TokenKind::LeftParenthesis => depth += 1,
                    TokenKind::RightParenthesis => depth = depth.saturating_sub(1),
                    _ => {}
                }
                parts.push(Part::Piece(self.piece(&mut spacing, at)));
                at += 1;
                if token.kind == TokenKind::Comma && depth == 0 {
                    break;
                }
            }
            let trailing = self.trailing(at, &range);
            at += usize::from(trailing.is_some());
            entries.push(Entry { kind: EntryKind::Pieces(parts), blank_before, trailing });
        }
        entries
    }
}
