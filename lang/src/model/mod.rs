//! The resolved model: names bound, units converted, tables read.
//!
//! Lengths are in nm, angles in rad, times in s, rates in nm/s, stresses in MPa, forces per width in N/m,
//! temperatures in °C, ratios as fractions. An item whose statements were wrong is still here, with what
//! was understood; [`Recipe::sound`] says whether evaluating it means anything.

mod chamber;
mod material;
mod recipe;
mod requirement;
mod rough;
mod spectrum;
mod stack;

pub use chamber::{Chamber, Deposit, Forbid, Limit, LimitKind, LimitRange, Spread, Variation};
pub use material::{Material, Origin};
pub use recipe::{Recipe, Reference, Waiver};
pub use requirement::{
    Angles, Beam, Bound, Mask, Observer, Quantity, Requirement, Side, Specification, Target, Weighting,
};
pub use rough::RoughFace;
pub use spectrum::{Spectrum, SpectrumKind};
pub use stack::{
    Body, BodyKind, CoatedSide, Element, Graded, Layer, LayerMaterial, Medium, MixingRule, Stack, Thickness,
};

use crate::source::FileId;
use std::sync::Arc;

/// One module after resolution.
#[derive(Clone, Debug, Default)]
pub struct Module {
    /// Its file; a module always has one.
    pub file: Option<FileId>,
    /// The files that it uses, those that they use included.
    pub uses: Vec<FileId>,
    /// Its specifications, in the order written.
    pub specifications: Vec<Arc<Specification>>,
    /// Its recipes, in the order written.
    pub recipes: Vec<Arc<Recipe>>,
    /// Its materials, in the order written.
    pub materials: Vec<Arc<Material>>,
    /// Its spectra, in the order written.
    pub spectra: Vec<Arc<Spectrum>>,
    /// Its chambers, in the order written.
    pub chambers: Vec<Arc<Chamber>>,
}
