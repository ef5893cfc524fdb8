//! From text to tokens.
//!
//! Two things depend on what stands before and are cut by hand from the rest of the text: units after a
//! number, and a date after `until`.

use super::ENOUGH;
use super::keywords;
use super::slips;
use super::tokens::{Token, TokenKind};
use crate::finding::{Fact, Finding, FormFact};
use crate::near::nearest;
use crate::source::{FileId, Span};
use crate::units;
use logos::Logos;

/// What can be cut without regard to the place.
#[derive(Logos, Clone, Copy, Debug, PartialEq)]
#[logos(skip r"[ \t\r\n\x0C]+")]
enum Raw {
    #[regex(r"[A-Za-z_][A-Za-z0-9_]*(\[[0-9]+\])?", priority = 5)]
    Word,
    /// Letters that no name may hold.
    #[regex(r"[\p{XID_Start}_][\p{XID_Continue}]*", priority = 3)]
    ForeignWord,
    #[regex(r"[0-9][0-9_]*(\.[0-9][0-9_]*)?([eE][+-]?[0-9]+)?")]
    Number,
    #[regex(r"\.[0-9]+")]
    PointFirst,
    #[regex(r#""([^"\\\r\n]|\\[^\r\n])*""#)]
    Text,
    #[regex(r#""([^"\\\r\n]|\\[^\r\n])*"#)]
    OpenText,
    #[regex(r"'[^'\r\n]*'")]
    SingleQuoted,
    #[regex(r"[“„”][^“„”\r\n]*[“„”]")]
    CurlyQuoted,
    #[regex(r"#[^\r\n]*", allow_greedy = true)]
    Comment,
    #[regex(r"//[^\r\n]*", allow_greedy = true)]
    SlashComment,
    #[regex(r"/\*([^*]|\*+[^*/])*\*+/")]
    StarComment,
    #[regex(r"(<<<<<<<|=======|>>>>>>>|\|\|\|\|\|\|\|)[^\r\n]*", priority = 20, allow_greedy = true)]
    Conflict,
    #[token("{")]
    LeftBrace,
    #[token("}")]
    RightBrace,
    #[token("(")]
    LeftParenthesis,
    #[token(")")]
    RightParenthesis,
    #[token(",")]
    Comma,
    #[token("..")]
    DotDot,
    #[token("=")]
    Equals,
    #[token("<=")]
    AtMost,
    #[token(">=")]
    AtLeast,
    #[token("±")]
    #[token("+/-")]
    PlusMinus,
    #[token("+")]
    Plus,
    #[token("-")]
    Minus,
    #[token("*")]
    Star,
    #[token("/")]
    Slash,
    #[token("^")]
    Caret,
    #[token(";")]
    #[token(":")]
    Punctuation,
    #[token("->")]
    #[token("=>")]
    #[token("==")]
    #[token("=<")]
    #[token("**")]
    #[token("...")]
    Foreign,
}

/// What the lexer hands on.
pub(super) struct Lexed {
    /// All tokens, comments and unreadable ones included.
    pub(super) tokens: Vec<Token>,
    /// What can't be read.
    pub(super) findings: Vec<Finding>,
}

struct Lexer<'a> {
    text: &'a str,
    file: FileId,
    tokens: Vec<Token>,
    findings: Vec<Finding>,
    line_start: usize,
    measured: usize,
}

/// Cuts a text into tokens.
pub(super) fn lex(text: &str, file: FileId) -> Lexed {
    let mut lexer =
        Lexer { text, file, tokens: Vec::new(), findings: Vec::new(), line_start: 0, measured: 0 };
    // A byte order mark that nobody dropped is no more than a blank.
    let start = if text.starts_with('\u{FEFF}') { '\u{FEFF}'.len_utf8() } else { 0 };
    lexer.line_start = start;
    lexer.measured = start;
    let mut raw = Raw::lexer(text);
    raw.bump(start);
    while let Some(cut) = raw.next() {
        let range = raw.span();
        match cut {
            Ok(kind) => {
                let more = lexer.take(kind, range);
                raw.bump(more);
            }
            Err(()) => lexer.bad_character(range),
        }
    }
    Lexed { tokens: lexer.tokens, findings: lexer.findings }
}

impl<'a> Lexer<'a> {
    /// Takes a cut; says how many bytes after it belong to it.
    fn take(&mut self, raw: Raw, range: std::ops::Range<usize>) -> usize {
        let after = range.end;
        match raw {
            Raw::Word => {
                self.push(TokenKind::Word, range.clone());
                match self.slice(range) {
                    "until" => self.date(after),
                    "irradiance" => self.known_unit(after),
                    _ => 0,
                }
            }
            Raw::Number => self.number(range),
            Raw::Text => {
                self.escapes(range.clone());
                self.push(TokenKind::Text, range);
                0
            }
            Raw::Comment => {
                let description = self.slice(range.clone()).starts_with("##");
                self.push(TokenKind::Comment, range);
                if let Some(token) = self.tokens.last_mut()
                    && description
                    && token.first_on_line
                {
                    token.kind = TokenKind::Description;
                }
                0
            }
            Raw::SlashComment | Raw::StarComment | Raw::Conflict | Raw::Punctuation => {
                if raw == Raw::Conflict && !self.begins_line(range.start) {
                    return self.bad(range, slips::foreign("=="), "a plain text");
                }
                let (expected, hint) = slips::noise(self.slice(range.clone()));
                self.syntax(range.clone(), expected, Some(hint));
                self.push(TokenKind::Noise, range);
                0
            }
            Raw::ForeignWord | Raw::Foreign => {
                let hint = slips::foreign(self.slice(range.clone()));
                self.bad(range, hint, if raw == Raw::Foreign { "" } else { "a name" })
            }
            Raw::PointFirst => {
                let hint = format!("write `0{}`", self.slice(range.clone()));
                self.bad(range, Some(hint), "a number")
            }
            Raw::OpenText => {
                self.bad(range, Some("close it with `\"` on the same line".to_owned()), "a text in quotes")
            }
            Raw::SingleQuoted | Raw::CurlyQuoted => {
                let hint = "a text stands in plain double quotes, `\"…\"`".to_owned();
                self.bad(range, Some(hint), "a text in quotes")
            }
            Raw::LeftBrace => self.plain(TokenKind::LeftBrace, range),
            Raw::RightBrace => self.plain(TokenKind::RightBrace, range),
            Raw::LeftParenthesis => self.plain(TokenKind::LeftParenthesis, range),
            Raw::RightParenthesis => self.plain(TokenKind::RightParenthesis, range),
            Raw::Comma => self.plain(TokenKind::Comma, range),
            Raw::DotDot => self.plain(TokenKind::DotDot, range),
            Raw::Equals => self.plain(TokenKind::Equals, range),
            Raw::AtMost => self.plain(TokenKind::AtMost, range),
            Raw::AtLeast => self.plain(TokenKind::AtLeast, range),
            Raw::PlusMinus => self.plain(TokenKind::PlusMinus, range),
            Raw::Plus => self.plain(TokenKind::Plus, range),
            Raw::Minus => self.plain(TokenKind::Minus, range),
            Raw::Star => self.plain(TokenKind::Star, range),
            Raw::Slash => self.plain(TokenKind::Slash, range),
            Raw::Caret => self.plain(TokenKind::Caret, range),
        }
    }

    fn slice(&self, range: std::ops::Range<usize>) -> &'a str {
        self.text.get(range).unwrap_or("")
    }

    fn rest(&self, from: usize) -> &'a str {
        self.text.get(from..).unwrap_or("")
    }

    fn begins_line(&self, offset: usize) -> bool {
        offset == 0 || self.text.as_bytes().get(offset - 1) == Some(&b'\n')
    }

    fn plain(&mut self, kind: TokenKind, range: std::ops::Range<usize>) -> usize {
        self.push(kind, range);
        0
    }

    fn push(&mut self, kind: TokenKind, range: std::ops::Range<usize>) {
        let skipped = self.slice(self.measured..range.start);
        if let Some(newline) = skipped.rfind('\n') {
            self.line_start = self.measured + newline + 1;
        }
        self.measured = range.start;
        let first_on_line =
            self.tokens.last().is_none_or(|before| (before.span.end as usize) <= self.line_start);
        let column = (range.start - self.line_start) as u32;
        self.tokens.push(Token { kind, span: Span::new(range.start, range.end), first_on_line, column });
    }

    fn report(&mut self, range: std::ops::Range<usize>, fact: FormFact) {
        if self.findings.len() > ENOUGH {
            return;
        }
        self.findings.push(Finding::new(fact, Span::new(range.start, range.end).at(self.file)));
    }

    fn syntax(&mut self, range: std::ops::Range<usize>, expected: &str, hint: Option<String>) {
        let found = slips::quoted(self.slice(range.clone()));
        let expected = if expected.is_empty() { Vec::new() } else { vec![expected.to_owned()] };
        self.report(range, FormFact::Syntax { expected, found: Some(found), hint });
    }

    fn bad(&mut self, range: std::ops::Range<usize>, hint: Option<String>, expected: &str) -> usize {
        self.syntax(range.clone(), expected, hint);
        self.push(TokenKind::Bad, range);
        0
    }

    /// A character that starts nothing; neighbours make one error.
    fn bad_character(&mut self, range: std::ops::Range<usize>) {
        if let (Some(token), Some(finding)) = (self.tokens.last_mut(), self.findings.last_mut())
            && token.kind == TokenKind::Bad
            && token.span.end as usize == range.start
            && finding.place.span == token.span
            && let Fact::Form(FormFact::Syntax { found, .. }) = &mut finding.fact
        {
            token.span.end = range.end as u32;
            finding.place.span = token.span;
            *found = Some(slips::quoted(self.text.get(token.span.range()).unwrap_or("")));
            return;
        }
        let hint = slips::foreign(self.slice(range.clone()));
        self.bad(range, hint, "");
    }

    fn escapes(&mut self, range: std::ops::Range<usize>) {
        let bytes = self.slice(range.clone()).as_bytes();
        let mut at = 0;
        while let Some(step) = bytes.get(at..).and_then(|rest| rest.iter().position(|byte| *byte == b'\\')) {
            let escape = at + step;
            at = escape + 2;
            if bytes.get(escape + 1).is_some_and(|next| !matches!(next, b'"' | b'\\' | b'n')) {
                let start = range.start + escape;
                let length = self.rest(start + 1).chars().next().map_or(0, char::len_utf8);
                let hint = "write `\\\\` for a backslash; paths use `/`".to_owned();
                self.syntax(start..start + 1 + length, "`\\\"`, `\\\\` or `\\n`", Some(hint));
            }
        }
    }

    /// A number and the unit after it; says how long the latter is.
    fn number(&mut self, range: std::ops::Range<usize>) -> usize {
        let rest = self.rest(range.end);
        let digits = |text: &str| text.bytes().take_while(u8::is_ascii_digit).count();
        // `1.5.2` is one slip, not a number and another.
        if rest.starts_with('.') && digits(&rest[1..]) > 0 {
            let length = rest.bytes().take_while(|byte| *byte == b'.' || byte.is_ascii_digit()).count();
            self.bad(range.start..range.end + length, Some("it has two decimal points".into()), "a number");
            return length;
        }
        let written = self.slice(range.clone());
        if !written.replace('_', "").parse::<f64>().is_ok_and(f64::is_finite) {
            let must = "be less than 1.8e308".to_owned();
            let value = written.to_owned();
            self.report(range.clone(), FormFact::InvalidValue { what: "a number".into(), value, must });
            self.push(TokenKind::Bad, range.clone());
        } else {
            self.push(TokenKind::Number, range.clone());
        }
        self.unit(range.end)
    }

    /// A known unit after `offset`, or nothing.
    fn known_unit(&mut self, offset: usize) -> usize {
        let rest = self.rest(offset);
        let start = offset + (rest.len() - rest.trim_start().len());
        let length = unit_length(self.rest(start));
        if length > 0 && units::canonical(self.slice(start..start + length)).is_some() {
            self.push(TokenKind::Unit, start..start + length);
            return start + length - offset;
        }
        0
    }

    /// The unit after a number that ends at `offset`: the bytes to its end.
    fn unit(&mut self, offset: usize) -> usize {
        let known = self.known_unit(offset);
        if known > 0 {
            return known;
        }
        let rest = self.rest(offset);
        let start = offset + (rest.len() - rest.trim_start().len());
        let length = unit_length(self.rest(start));
        let written = self.slice(start..start + length);
        if length == 0 || !written.starts_with(|first: char| first.is_alphabetic() || first == '°') {
            return 0;
        }
        if start > offset {
            // A word on the next line, a keyword, and what looks like a mistyped one are no units.
            let word = written.split(['/', '^']).next().unwrap_or("");
            let keywords = keywords::KEYWORDS.iter().flat_map(|(_, words)| *words).chain(keywords::CLAUSES);
            if rest.trim_start_matches([' ', '\t']).starts_with(['\n', '\r'])
                || keywords::known(word)
                || (word.len() > 3 && !nearest(word, keywords.copied()).is_empty())
            {
                return 0;
            }
        }
        let near = nearest(written, units::all());
        let name = written.to_owned();
        self.report(start..start + length, FormFact::UnknownName { kind: "unit", name, near, import: None });
        self.push(TokenKind::Bad, start..start + length);
        start + length - offset
    }

    /// The date after `until`: the bytes to its end.
    fn date(&mut self, offset: usize) -> usize {
        let rest = self.rest(offset);
        let start = offset + (rest.len() - rest.trim_start().len());
        let length = self
            .rest(start)
            .bytes()
            .take_while(|byte| byte.is_ascii_digit() || matches!(byte, b'-' | b'.' | b'/'))
            .count();
        let written = self.slice(start..start + length);
        if !written.starts_with(|first: char| first.is_ascii_digit()) {
            return 0;
        }
        let range = start..start + length;
        match slips::date(written) {
            Some((year, month, day))
                if slips::days(year, month).is_some_and(|days| (1..=days).contains(&day)) =>
            {
                self.push(TokenKind::Date, range);
            }
            Some(_) => {
                let must = "a day of the calendar".to_owned();
                let value = written.to_owned();
                self.report(range.clone(), FormFact::InvalidValue { what: "a date".into(), value, must });
                self.push(TokenKind::Bad, range);
            }
            None => {
                self.bad(range, None, "a date, for example `2027-01-31`");
            }
        }
        start + length - offset
    }
}

/// How many bytes at the start of `text` read as a unit, known or not.
fn unit_length(text: &str) -> usize {
    let word = |text: &str| {
        text.char_indices()
            .take_while(|(_, letter)| letter.is_alphanumeric() || matches!(letter, '_' | '°'))
            .last()
            .map_or(0, |(at, letter)| at + letter.len_utf8())
    };
    if text.starts_with('%') {
        return 1;
    }
    // The one unit that starts with a digit.
    if text.starts_with("1/cm") && word(&text[2..]) == 2 {
        return 4;
    }
    if !text.starts_with(|first: char| first.is_alphabetic() || first == '°' || first == '_') {
        return 0;
    }
    let length = word(text);
    let rest = text.get(length..).unwrap_or("");
    match rest.as_bytes() {
        [b'/', next, ..] if next.is_ascii_alphabetic() => length + 1 + word(&rest[1..]),
        [b'^', next, ..] if next.is_ascii_digit() => length + 1 + word(&rest[1..]),
        _ => length,
    }
}
