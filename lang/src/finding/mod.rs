//! Findings: typed facts at a place. Their wording lives in [`crate::messages`] alone.
//!
//! Each family of facts has a file; a fact says everything that its message needs, in base units
//! (nm, rad, s, MPa, fractions), so that the words can be changed without touching the checks.

mod form;
mod house;
mod optics;
mod process;
mod promise;

pub use form::FormFact;
pub use house::HouseFact;
pub use optics::OpticsFact;
pub use process::{LayerName, ProcessFact, SideName, Trouble};
pub use promise::{Aid, Driver, PromiseFact, Remedy, Sensitive, ShortYield, Untold, Verdict};

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
    /// About what a part must do.
    Promise(Box<PromiseFact>),
    /// About what a chamber can do.
    Process(Box<ProcessFact>),
    /// About provenance and housekeeping.
    House(HouseFact),
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

impl From<PromiseFact> for Fact {
    fn from(fact: PromiseFact) -> Fact {
        Fact::Promise(Box::new(fact))
    }
}

impl From<ProcessFact> for Fact {
    fn from(fact: ProcessFact) -> Fact {
        Fact::Process(Box::new(fact))
    }
}

impl From<HouseFact> for Fact {
    fn from(fact: HouseFact) -> Fact {
        Fact::House(fact)
    }
}

impl Finding {
    /// A fact at a place.
    pub fn new(fact: impl Into<Fact>, place: Place) -> Finding {
        Finding { fact: fact.into(), place }
    }
}
