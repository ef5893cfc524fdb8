//! Findings: typed facts at a place. Their wording lives in [`crate::messages`] alone.
//!
//! Each family of facts has a file; a fact says everything that its message needs, in base units
//! (nm, rad, s, MPa, fractions), so that the words can be changed without touching the checks.

mod form;
mod optics;

pub use form::FormFact;
pub use optics::OpticsFact;

use crate::source::Place;

/// One fact and where it holds.
#[derive(Clone, Debug, PartialEq)]
pub struct Finding {
    /// The fact.
    pub fact: Fact,
    /// Where.
    pub place: Place,
}

/// A fact of some family.
#[derive(Clone, Debug, PartialEq)]
pub enum Fact {
    /// About the text: syntax, names, units, files.
    Form(FormFact),
    /// About optical constants and light.
    Optics(OpticsFact),
}

impl From<FormFact> for Fact {
    fn from(fact: FormFact) -> Fact {
        Fact::Form(fact)
    }
}

impl From<OpticsFact> for Fact {
    fn from(fact: OpticsFact) -> Fact {
        Fact::Optics(fact)
    }
}

impl Finding {
    /// A fact at a place.
    pub fn new(fact: impl Into<Fact>, place: Place) -> Finding {
        Finding { fact: fact.into(), place }
    }
}
