//! Blanks between the tokens of a statement, and where a long one may be broken.

use crate::syntax::keywords;
use crate::syntax::tokens::TokenKind;

/// A token to be printed.
#[derive(Clone, Copy, Debug)]
pub(super) struct Piece<'a> {
    /// As written.
    pub(super) text: &'a str,
    /// Blanks before it, unless it starts a line.
    pub(super) gap: usize,
    /// Whether a long line may be broken before it.
    pub(super) breakable: bool,
    /// Its kind.
    pub(super) kind: TokenKind,
}

/// The words that start a clause of a requirement.
pub(super) const REQUIREMENT_CLAUSES: &[&str] =
    &["over", "at", "cone", "polarised", "under", "from", "nominal", "observer", "hemispherical"];

/// What the blanks before the next token depend on.
pub(super) struct Spacing {
    previous: Option<TokenKind>,
    /// The word before, if it was one.
    keyword_before: bool,
    function_before: bool,
    /// Whether nothing but words came before.
    only_words: bool,
    count: usize,
    unary_before: bool,
    depth: usize,
    requirement: bool,
    cells: bool,
}

impl Spacing {
    /// For a statement, or for the cells of a table's row, which stand side by side.
    pub(super) fn new(cells: bool) -> Self {
        Spacing {
            previous: None,
            keyword_before: false,
            function_before: false,
            only_words: true,
            count: 0,
            unary_before: false,
            depth: 0,
            requirement: false,
            cells,
        }
    }

    /// A block was printed.
    pub(super) fn block(&mut self) {
        self.previous = Some(TokenKind::RightBrace);
        self.unary_before = false;
        self.count += 1;
    }

    /// The next token with the blanks before it; `adjacent` says that it was typed without any.
    pub(super) fn next<'a>(&mut self, kind: TokenKind, text: &'a str, adjacent: bool) -> Piece<'a> {
        use TokenKind::*;
        if self.count == 0 {
            self.requirement = text == "require";
        }
        let word = kind == Word;
        let clause = word && self.depth == 0 && keywords::CLAUSES.contains(&text) && !self.cells;
        let unary = kind == Minus && self.is_sign();
        let mut gap = 1;
        if matches!(kind, Comma | RightParenthesis)
            || self.previous == Some(LeftParenthesis)
            || self.unary_before
            || kind == LeftParenthesis && self.previous == Some(Word) && (self.function_before || adjacent)
        {
            gap = 0;
        } else if clause && self.requirement && REQUIREMENT_CLAUSES.contains(&text) {
            gap = 2;
        }
        let breakable = gap > 0
            && self.count > 1
            && (clause
                || kind == Text && !self.keyword_before
                || self.previous == Some(Comma)
                || matches!(kind, AtMost | AtLeast)
                || kind.operator() && !unary);
        let piece = Piece { text, gap, breakable, kind };
        match kind {
            LeftParenthesis => self.depth += 1,
            RightParenthesis => self.depth = self.depth.saturating_sub(1),
            _ => {}
        }
        self.keyword_before =
            word && (self.count == 0 || keywords::CLAUSES.contains(&text) || keywords::INNER.contains(&text));
        self.function_before =
            word && (text == "lab" || keywords::FUNCTIONS.contains(&text) && !matches!(text, "n" | "k"));
        self.only_words &= word;
        self.unary_before = unary;
        self.previous = Some(kind);
        self.count += 1;
        piece
    }

    /// Whether a minus here is a sign and not an operator.
    fn is_sign(&self) -> bool {
        use TokenKind::*;
        if self.cells && self.depth == 0 {
            return true;
        }
        match self.previous {
            Some(Number | Unit | RightParenthesis) => false,
            // After the words that a statement begins with, a value follows.
            Some(Word) => self.keyword_before || self.only_words,
            _ => true,
        }
    }
}
