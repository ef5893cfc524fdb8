//! From text to tree.
//!
//! Parsing never fails: what was understood comes back together with what was not. In turn: [`decode`] makes
//! a text of bytes, the lexer cuts it into [`tokens`], braces are balanced, the grammar reads the statements.

pub mod ast;
mod balance;
mod decode;
mod format;
pub mod keywords;
mod lexeme;
mod lexer;
mod parser;
mod problem;
mod slips;
#[cfg(test)]
mod tests;
pub mod tokens;
mod words;

pub use decode::decode;
pub use format::{FormatFault, format};
pub use keywords::KEYWORDS;

use crate::finding::{Fact, Finding, FormFact};
use crate::source::{FileId, Span};
use ast::Module;
use lexeme::Descriptions;
use tokens::Token;

/// How many syntax errors of one file are told; more would help nobody.
const ERROR_BOUND: usize = 100;
/// How many each stage collects, so that a file of rubbish costs no more than its reading.
const ENOUGH: usize = 1000;

/// What a text was understood to be.
#[derive(Clone, Debug, Default)]
pub struct Parsed {
    /// The tree of what could be read.
    pub module: Module,
    /// All tokens, comments and unreadable ones included, in order.
    pub tokens: Vec<Token>,
    /// What could not be read, in order.
    pub findings: Vec<Finding>,
}

impl Parsed {
    /// The comments of the text, descriptions among them.
    pub fn comments(&self) -> impl Iterator<Item = &Token> {
        use tokens::TokenKind::{Comment, Description};
        self.tokens.iter().filter(|token| matches!(token.kind, Comment | Description))
    }
}

/// Reads a text.
pub fn parse(text: &str, file: FileId) -> Parsed {
    if u32::try_from(text.len()).is_err() {
        let why = "it is larger than 4 GB".to_owned();
        let finding = Finding::new(FormFact::Unreadable { why }, Span::default().at(file));
        return unreadable(Vec::new(), finding);
    }
    let lexed = lexer::lex(text, file);
    let descriptions = Descriptions::new(text, &lexed.tokens);
    let lexemes = descriptions.lexemes(text, &lexed.tokens);
    if let Err(finding) = balance::bounded(&lexemes, file) {
        return unreadable(lexed.tokens, finding);
    }
    let (lexemes, unbalanced) = balance::balance(lexemes, file);
    let (mut module, problems) = parser::module(&lexemes);
    let mut findings = lexed.findings;
    let told = problems.into_iter().filter_map(|problem| words::finding(problem, &lexemes, file));
    findings.extend(told.take(ENOUGH));
    let (strays, unclosed): (Vec<Finding>, Vec<Finding>) = unbalanced.into_iter().partition(stray);
    findings.extend(unclosed);
    if findings.is_empty() {
        findings = strays;
    }
    module.broken |=
        findings.iter().any(|finding| matches!(&finding.fact, Fact::Form(FormFact::Syntax { .. })));
    Parsed { module, tokens: lexed.tokens, findings: presented(findings) }
}

fn unreadable(tokens: Vec<Token>, finding: Finding) -> Parsed {
    Parsed { module: Module { items: Vec::new(), broken: true }, tokens, findings: vec![finding] }
}

/// A `}` too many is mostly the consequence of another mistake.
fn stray(finding: &Finding) -> bool {
    matches!(&finding.fact, Fact::Form(FormFact::Syntax { found: Some(found), .. }) if found == "`}`")
}

/// In the order of the text, one for each place, and not too many.
fn presented(mut findings: Vec<Finding>) -> Vec<Finding> {
    findings.sort_by_key(|finding| finding.place);
    findings.dedup_by_key(|finding| finding.place);
    if findings.len() > ERROR_BOUND {
        findings.truncate(ERROR_BOUND);
        if let Some(Fact::Form(FormFact::Syntax { hint, .. })) =
            findings.last_mut().map(|last| &mut last.fact)
        {
            *hint = Some(format!("the file has more errors than these {ERROR_BOUND}"));
        }
    }
    findings
}
