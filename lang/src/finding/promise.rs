//! Facts about what a part must do, and about margins.

use super::LayerName;
use crate::model::{Bound, Requirement};
use crate::report::{At, Cause};
use crate::source::Place;
use std::sync::Arc;

/// A fact about one requirement of one recipe.
#[derive(Clone, Debug)]
pub struct PromiseFact {
    /// The requirement.
    pub requirement: Arc<Requirement>,
    /// The recipe's name.
    pub recipe: String,
    /// The place that brings the requirement in: itself, or the specification's name under `meets`.
    pub asked_at: Place,
    /// What is the case.
    pub verdict: Verdict,
    /// What would mend it.
    pub remedy: Remedy,
}

/// What would mend a missed requirement.
#[derive(Clone, Debug, PartialEq)]
pub enum Remedy {
    /// It was not missed, or no thickness is to be blamed for what it asks for.
    NotSought,
    /// No single thickness brings it nearer to its bound.
    NoneHelps,
    /// The single thickness that helps most.
    Thickness(Aid),
}

/// A thickness to be changed.
#[derive(Clone, Debug, PartialEq)]
pub struct Aid {
    /// The layer, with the place of its thickness.
    pub layer: LayerName,
    /// What it would be, nm.
    pub thickness: f64,
    /// The same as the recipe would write it.
    pub written: String,
    /// The requirement's value then.
    pub value: f64,
    /// Whether the requirement is met then.
    pub mends: bool,
    /// The requirements, as written, that are met now and would not be then.
    pub breaks: Vec<String>,
}

/// What is the case with a requirement.
#[derive(Clone, Debug, PartialEq)]
pub enum Verdict {
    /// The value is beyond the bound.
    Missed {
        /// The value, in the report's unit.
        value: f64,
        /// The bound that it breaks, at the place of `at`.
        bound: f64,
        /// Whether the bound is the least value allowed.
        least: bool,
        /// Where.
        at: At,
    },
    /// The edge is elsewhere; none where the curve does not cross the level in the band searched.
    EdgeMisplaced {
        /// nm.
        found: Option<f64>,
        /// Where it must lie, nm.
        window: (f64, f64),
        /// The band searched, nm.
        searched: (f64, f64),
        /// Where it was looked for.
        at: At,
    },
    /// The colour is too far from its aim.
    ColourOff {
        /// L*, a*, b* of the part.
        seen: [f64; 3],
        /// L*, a*, b* of the aim.
        aim: [f64; 3],
        /// How far apart they are, CIEDE2000.
        difference: f64,
        /// How far they may be.
        most: f64,
        /// Where.
        at: At,
    },
    /// The field inside a film is too strong.
    FieldHigh {
        /// |E/E₀|².
        value: f64,
        /// The greatest allowed.
        most: f64,
        /// The film.
        layer: String,
        /// nm below the face that the light meets first.
        depth: f64,
        /// Where.
        at: At,
    },
    /// No light comes out that could have a colour or a density.
    NoLight {
        /// nm; none for the visible as a whole.
        wavelength: Option<f64>,
    },
    /// A phase or a field that has no meaning, and why.
    Meaningless {
        /// Why.
        why: &'static str,
    },
    /// Too few parts will pass.
    YieldShort(Box<ShortYield>),
    /// A requirement hangs on one layer.
    Sensitive(Sensitive),
    /// What a textured face is not evaluated for.
    Textured(Untold),
    /// A photocurrent under a light of unknown strength.
    NoIrradiance {
        /// The spectrum.
        name: String,
        /// Where it is defined.
        defined: Place,
    },
    /// Met, but within a tenth of the bound.
    Thin {
        /// The value, in the report's unit.
        value: f64,
        /// The bound, there.
        bound: f64,
        /// Whether the bound is the least value allowed.
        least: bool,
        /// How far inside.
        margin: f64,
        /// Where.
        at: At,
    },
    /// It is not evaluated by this version; what, as a noun phrase.
    NotEvaluated {
        /// What: "a requirement without wavelengths".
        what: String,
    },
    /// A mean or an extreme that did not settle.
    NotConverged {
        /// The best estimate.
        estimate: f64,
        /// How uncertain it is.
        error: f64,
        /// Where the difficulty lies, nm.
        wavelength: f64,
    },
    /// The half-space that the light comes from absorbs.
    AbsorbingIncident {
        /// The material.
        material: String,
        /// k there.
        k: f64,
        /// nm.
        wavelength: f64,
        /// The stack's statement.
        place: Place,
    },
    /// A name that neither a layer of the recipe nor a material has.
    UnknownTarget {
        /// The name.
        name: String,
        /// The names that the recipe has, nearest first.
        near: Vec<String>,
    },
    /// The light source has no value in part of the band.
    SpectrumOutside {
        /// Its name.
        name: String,
        /// Where it is defined.
        defined: Place,
        /// What is asked for, nm.
        asked: (f64, f64),
        /// What there is, nm.
        range: (f64, f64),
    },
    /// The light source is dark in the whole band, so that there is no mean.
    SpectrumDark {
        /// Its name.
        name: String,
        /// nm.
        asked: (f64, f64),
    },
    /// A mask that says nothing of part of what is asked for.
    MaskApart {
        /// The file as written.
        path: String,
        /// What is asked for, nm.
        asked: (f64, f64),
        /// What the mask covers, nm.
        covers: (f64, f64),
    },
}

impl PartialEq for PromiseFact {
    fn eq(&self, other: &Self) -> bool {
        self.requirement.place == other.requirement.place
            && self.recipe == other.recipe
            && self.asked_at == other.asked_at
            && self.verdict == other.verdict
            && self.remedy == other.remedy
    }
}

impl PromiseFact {
    /// The bound of the requirement.
    pub fn bound(&self) -> &Bound {
        &self.requirement.bound
    }
}

/// What can't be told of a textured face.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Untold {
    /// Light from inside the piece.
    Inside,
    /// Light at an angle.
    Tilted,
    /// A phase or a field.
    Waves,
}

/// A yield below its bound.
#[derive(Clone, Debug)]
pub struct ShortYield {
    /// The share of parts that pass.
    pub value: f64,
    /// The interval that holds the true share with 95 % confidence.
    pub interval: (f64, f64),
    /// How many parts were evaluated.
    pub parts: u32,
    /// The least share allowed.
    pub bound: f64,
    /// The requirement that the fewest parts meet, and their share.
    pub weakest: Option<(String, f64)>,
    /// What drives that requirement.
    pub driver: Option<Driver>,
    /// To which share of its size the driver must shrink for the yield to be met.
    pub shrink: Option<f64>,
    /// The thickness with which the yield is met, and the yield then.
    pub moved: Option<(Aid, f64)>,
    /// The weakest requirement's value with every `±` at its worst end.
    pub corner: Option<(Arc<Requirement>, f64)>,
    /// Whether anything varies.
    pub varies: bool,
}

impl PartialEq for ShortYield {
    fn eq(&self, other: &Self) -> bool {
        self.value == other.value && self.parts == other.parts && self.bound == other.bound
    }
}

/// A variation that drives a requirement.
#[derive(Clone, Debug, PartialEq)]
pub struct Driver {
    /// The variation.
    pub cause: Cause,
    /// Its share of the variance.
    pub share: f64,
}

/// A layer that a requirement hangs on.
#[derive(Clone, Debug, PartialEq)]
pub struct Sensitive {
    /// What the layer is called.
    pub layer: String,
    /// Its share of the variance.
    pub share: f64,
    /// The requirement, as written.
    pub requirement: String,
    /// The share of parts that meet it.
    pub met: f64,
}
