//! The formatter: one layout for every text, comments where they were, what can't be read as it was typed.
//!
//! The layout is a function of the tokens and of three facts of how they were written: where a line was left
//! blank, which comments stood on a line of their own, and which blocks were written on one line. The layout
//! keeps all three, so that formatting twice is formatting once.

mod align;
mod marks;
mod print;
mod spacing;
mod tree;

use super::ast::Module;
use super::tokens::{Token, TokenKind};
use super::{Parsed, parse};
use crate::source::FileId;
use crate::units;

/// Columns that a line may take where it can be broken.
const WIDTH: usize = 100;

/// The formatter would have changed what the text says, and has left it alone: a fault of its own.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct FormatFault;

/// The text in the one layout. Statements with syntax errors stay as typed; a text that can't be read at all
/// comes back unchanged, and so does a broken one of which a new layout would change what is understood.
///
/// # Errors
///
/// [`FormatFault`] where the result would not say the same as the text.
pub fn format(text: &str) -> Result<String, FormatFault> {
    let body = text.strip_prefix('\u{FEFF}').unwrap_or(text);
    let before = parse(body, FileId(0));
    if before.module.items.is_empty() && before.module.broken {
        return Ok(text.to_owned());
    }
    let entries = tree::entries(body, &before);
    let mut formatted = print::print(body, &entries);
    let after = parse(&formatted, FileId(0));
    if !same(body, &before, &formatted, &after) {
        // What a broken text means hangs on where its lines break: it is left as typed altogether.
        return if before.findings.is_empty() { Err(FormatFault) } else { Ok(text.to_owned()) };
    }
    if body.find('\n').is_some_and(|at| body[..at].ends_with('\r')) {
        formatted = formatted.replace('\n', "\r\n");
    }
    Ok(formatted)
}

/// A token as the formatter writes it.
fn written<'a>(text: &'a str, token: &Token) -> &'a str {
    let typed = text.get(token.span.range()).unwrap_or("");
    match token.kind {
        TokenKind::Unit => units::canonical(typed).unwrap_or(typed),
        TokenKind::PlusMinus => "±",
        TokenKind::Comment | TokenKind::Description => typed.trim_end(),
        _ => typed,
    }
}

/// Whether two texts say the same: token by token, comments included, and in their trees.
fn same(text: &str, before: &Parsed, formatted: &str, after: &Parsed) -> bool {
    let tokens = |text, parsed: &Parsed| -> Vec<(TokenKind, String)> {
        parsed.tokens.iter().map(|token| (token.kind, written(text, token).to_owned())).collect()
    };
    before.findings.len() == after.findings.len()
        && tokens(text, before) == tokens(formatted, after)
        && skeleton(&before.module) == skeleton(&after.module)
}

/// A tree without its places, units as the formatter writes them.
fn skeleton(module: &Module) -> String {
    const SPAN: &str = "Span { start: ";
    const UNIT: &str = "Unit { text: \"";
    let whole = format!("{module:?}");
    let mut skeleton = String::with_capacity(whole.len());
    let mut rest = whole.as_str();
    loop {
        let span = rest.find(SPAN);
        let unit = rest.find(UNIT);
        match (span, unit) {
            (Some(span), unit) if unit.is_none_or(|unit| span < unit) => {
                skeleton.push_str(&rest[..span]);
                let end = rest[span..].find('}').map_or(rest.len(), |end| span + end + 1);
                rest = &rest[end..];
            }
            (_, Some(unit)) => {
                let start = unit + UNIT.len();
                skeleton.push_str(&rest[..start]);
                let end = rest[start..].find('"').map_or(rest.len(), |end| start + end);
                skeleton.push_str(units::canonical(&rest[start..end]).unwrap_or(&rest[start..end]));
                rest = &rest[end..];
            }
            _ => {
                skeleton.push_str(rest);
                return skeleton;
            }
        }
    }
}
