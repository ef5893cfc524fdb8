//! The wording of all findings: what was found, why it can't stand, what to write instead.
//!
//! The facts are in [`crate::finding`]; nothing else in the project makes sentences of them.

mod form;
mod house;
mod number;
mod optics;
mod process;
mod promise;
mod yields;

use crate::code::Code;
use crate::diagnostic::{Diagnostic, Edit, Fix, Related};
use crate::finding::{Fact, Finding};
use crate::source::{Place, Sources};

/// A diagnostic without its place: what each family makes of a fact.
struct Words {
    code: Code,
    message: String,
    related: Vec<Related>,
    notes: Vec<String>,
    fix: Option<Fix>,
}

impl Words {
    fn new(code: Code, message: impl Into<String>) -> Words {
        Words { code, message: message.into(), related: Vec::new(), notes: Vec::new(), fix: None }
    }

    fn related(mut self, place: Place, message: impl Into<String>) -> Words {
        self.related.push(Related { place, message: message.into() });
        self
    }

    fn note(mut self, note: impl Into<String>) -> Words {
        self.notes.push(note.into());
        self
    }

    fn fix(mut self, title: impl Into<String>, place: Place, text: impl Into<String>) -> Words {
        self.fix = Some(Fix { title: title.into(), edits: vec![Edit { place, text: text.into() }] });
        self
    }
}

pub use yields::{cause, size};

/// Puts a finding into words.
pub fn render(finding: &Finding, sources: &Sources) -> Diagnostic {
    let place = finding.place;
    let words = match &finding.fact {
        Fact::Form(fact) => form::words(fact, place, sources),
        Fact::Optics(fact) => optics::words(fact),
        Fact::Promise(fact) => promise::words(fact, place),
        Fact::Process(fact) => process::words(fact),
        Fact::House(fact) => house::words(fact),
    };
    Diagnostic {
        code: words.code,
        severity: words.code.severity(),
        message: words.message,
        place,
        related: words.related,
        notes: words.notes,
        fix: words.fix,
        waived: None,
    }
}
