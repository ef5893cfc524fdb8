//! Tokens: what the lexer cuts a text into, with their places.

use crate::source::Span;

/// What a token is.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum TokenKind {
    /// A name or a keyword: which of the two, only the place tells.
    Word,
    /// A number without its unit.
    Number,
    /// The unit after a number.
    Unit,
    /// A text in quotes.
    Text,
    /// A date after `until`.
    Date,
    /// `# …` to the end of the line.
    Comment,
    /// `## …` on a line of its own.
    Description,
    /// `{`
    LeftBrace,
    /// `}`
    RightBrace,
    /// `(`
    LeftParenthesis,
    /// `)`
    RightParenthesis,
    /// `,`
    Comma,
    /// `..`
    DotDot,
    /// `=`
    Equals,
    /// `<=`
    AtMost,
    /// `>=`
    AtLeast,
    /// `±` or `+/-`
    PlusMinus,
    /// `+`
    Plus,
    /// `-`
    Minus,
    /// `*`
    Star,
    /// `/`
    Slash,
    /// `^`
    Caret,
    /// What can't be read; its finding is the lexer's. The parser leaves out the statement that holds it.
    Bad,
    /// What can't be read, but can be left out without harm, as a `;`; its finding is the lexer's.
    Noise,
}

impl TokenKind {
    /// Whether the parser reads it.
    pub fn significant(self) -> bool {
        !matches!(self, TokenKind::Comment | TokenKind::Description | TokenKind::Noise)
    }

    /// `+ - * / ^`
    pub fn operator(self) -> bool {
        use TokenKind::*;
        matches!(self, Plus | Minus | Star | Slash | Caret)
    }

    /// How a mark is written; empty for kinds that are written in many ways.
    pub fn mark(self) -> &'static str {
        use TokenKind::*;
        match self {
            LeftBrace => "{",
            RightBrace => "}",
            LeftParenthesis => "(",
            RightParenthesis => ")",
            Comma => ",",
            DotDot => "..",
            Equals => "=",
            AtMost => "<=",
            AtLeast => ">=",
            PlusMinus => "±",
            Plus => "+",
            Minus => "-",
            Star => "*",
            Slash => "/",
            Caret => "^",
            Word | Number | Unit | Text | Date | Comment | Description | Bad | Noise => "",
        }
    }
}

/// A token with its place.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Token {
    /// What it is.
    pub kind: TokenKind,
    /// Where.
    pub span: Span,
    /// Whether nothing but blanks stands before it on its line.
    pub first_on_line: bool,
    /// Bytes between the start of its line and the token.
    pub column: u32,
}
