//! Facts about provenance and order in the house.

use crate::code::Code;
use crate::source::Place;
use crate::syntax::ast::Date;

/// A fact about provenance or housekeeping.
#[derive(Clone, Debug, PartialEq)]
pub enum HouseFact {
    /// Published data stand for the shop's own film.
    HandbookData {
        /// The material.
        material: String,
        /// The recipe.
        recipe: String,
        /// Where the handbook has it.
        defined: Place,
    },
    /// Optical constants without a source.
    Unsourced {
        /// The material.
        material: String,
        /// A recipe that rests on them.
        recipe: String,
        /// Where the recipe uses it.
        used_at: Place,
    },
    /// An import or a `let` that nothing uses.
    Unused {
        /// The name.
        name: String,
        /// Whether it is an import.
        imported: bool,
        /// What a fix may delete.
        remove: Place,
    },
    /// A specification that no recipe meets.
    Unmet {
        /// Its name.
        specification: String,
    },
    /// A waiver that covers nothing.
    WaiverUnused {
        /// The code.
        code: Code,
        /// What it is limited to.
        on: Option<String>,
        /// The recipe.
        recipe: String,
    },
    /// A waiver past its date.
    WaiverExpired {
        /// The code.
        code: Code,
        /// Its last day.
        until: Date,
        /// The recipe.
        recipe: String,
        /// How many findings it would still cover.
        covers: usize,
    },
}
