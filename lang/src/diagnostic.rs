//! The one diagnostic type. Terminal, editor, JSON, SARIF and JUnit are views of it.

use crate::code::Code;
use crate::source::{Place, Span};

/// How grave a diagnostic is; the order is that of gravity.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Severity {
    /// Something is wrong: the check fails.
    Error,
    /// Something should be looked at.
    Warning,
    /// Something worth knowing.
    Hint,
}

impl Severity {
    /// `error`, `warning` or `hint`.
    pub fn word(self) -> &'static str {
        match self {
            Severity::Error => "error",
            Severity::Warning => "warning",
            Severity::Hint => "hint",
        }
    }
}

/// What the checker has to say, ready to be shown.
#[derive(Clone, Debug, PartialEq)]
pub struct Diagnostic {
    /// Its slug.
    pub code: Code,
    /// How grave.
    pub severity: Severity,
    /// One sentence with the numbers in it.
    pub message: String,
    /// Where.
    pub place: Place,
    /// Other places that belong to it.
    pub related: Vec<Related>,
    /// More to know, a sentence each.
    pub notes: Vec<String>,
    /// What would mend it.
    pub fix: Option<Fix>,
    /// Set where a waiver covers it: it is listed, and fails nothing.
    pub waived: Option<Waived>,
}

/// Another place, with what it has to do with it.
#[derive(Clone, Debug, PartialEq)]
pub struct Related {
    /// Where.
    pub place: Place,
    /// For example "the limit stands here".
    pub message: String,
}

/// A change of text that mends a diagnostic.
#[derive(Clone, Debug, PartialEq)]
pub struct Fix {
    /// What it does, for a menu.
    pub title: String,
    /// The edits; they do not overlap.
    pub edits: Vec<Edit>,
}

/// One replacement.
#[derive(Clone, Debug, PartialEq)]
pub struct Edit {
    /// What is replaced; empty to insert.
    pub place: Place,
    /// By what.
    pub text: String,
}

/// Why and how long a diagnostic is waived.
#[derive(Clone, Debug, PartialEq)]
pub struct Waived {
    /// The reason given.
    pub reason: String,
    /// The waiver's last day, as written.
    pub until: Option<String>,
    /// The waiver itself.
    pub place: Place,
}

impl Diagnostic {
    /// Order of showing: file, place, severity, code, message.
    pub fn sort_key(&self) -> (u32, Span, Severity, &'static str, &str) {
        (self.place.file.0, self.place.span, self.severity, self.code.slug(), &self.message)
    }

    /// Whether it makes the check fail.
    pub fn fails(&self) -> bool {
        self.severity == Severity::Error && self.waived.is_none()
    }
}
