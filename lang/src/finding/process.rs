//! Facts about what a chamber can do.

use crate::model::LimitKind;
use crate::source::Place;

/// A fact about a recipe in its chamber.
#[derive(Clone, Debug, PartialEq)]
pub struct ProcessFact {
    /// The recipe's name.
    pub recipe: String,
    /// The chamber's name.
    pub chamber: String,
    /// The chamber's statement that is not kept, or its name where none says it.
    pub said_at: Place,
    /// What is the case.
    pub trouble: Trouble,
}

/// A layer as a message calls it.
#[derive(Clone, Debug, PartialEq)]
pub struct LayerName {
    /// Its name after `as`, or none.
    pub name: Option<String>,
    /// What it is made of.
    pub material: String,
    /// Its number in the order written.
    pub number: usize,
    /// How many times the block around it is repeated in all.
    pub copies: usize,
    /// nm.
    pub thickness: f64,
    /// The thickness as written in the text; none for quarter-waves, which can't be set to a length.
    pub thickness_place: Option<Place>,
}

/// What a chamber can't do.
#[derive(Clone, Debug, PartialEq)]
pub enum Trouble {
    /// The source makes layers of at least this, nm.
    TooThin {
        /// The layer.
        layer: LayerName,
        /// nm.
        least: f64,
    },
    /// The source makes layers of at most this, nm.
    TooThick {
        /// The layer.
        layer: LayerName,
        /// nm.
        most: f64,
    },
    /// The chamber has no source for a material.
    NotDeposited {
        /// The layer.
        layer: LayerName,
        /// The material that has no source: of a graded layer one of two.
        material: String,
        /// What the chamber deposits.
        deposits: Vec<String>,
    },
    /// The controller's step does not divide the thickness.
    BelowResolution {
        /// The layer.
        layer: LayerName,
        /// nm.
        step: f64,
        /// The nearest multiples of the step, nm: below and above.
        nearest: (f64, f64),
    },
    /// A film on one that it must not touch.
    Forbidden {
        /// The later film.
        layer: LayerName,
        /// What it lies on.
        lower: String,
        /// Where that stands.
        lower_at: Place,
        /// Why it is forbidden.
        because: Option<String>,
    },
    /// A source hotter than the chamber's limit.
    TooHot {
        /// The material.
        material: String,
        /// °C.
        temperature: f64,
        /// °C.
        most: f64,
        /// Where the source's temperature stands.
        source_at: Place,
    },
    /// A run that needs more than a source holds.
    OverCapacity {
        /// The side: front or back.
        side: SideName,
        /// The material.
        material: String,
        /// nm.
        needed: f64,
        /// nm.
        holds: f64,
    },
    /// A limit of the chamber.
    Limit {
        /// The side: front or back.
        side: SideName,
        /// What is limited.
        kind: LimitKind,
        /// The value, in the limit's base unit.
        value: f64,
        /// The bound that it breaks.
        bound: f64,
        /// Whether the bound is the least value allowed.
        least: bool,
        /// Materials of the run whose share is unknown (no rate, no stress): the true value lies further out or elsewhere.
        unknown: Vec<String>,
    },
}

/// Which coated side a run is for.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum SideName {
    /// The part has one.
    Only,
    /// The one that the light meets first.
    Front,
    /// Another; its number from the light.
    Back(usize),
}
