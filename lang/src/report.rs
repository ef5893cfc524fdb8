//! What a check found out, recipe by recipe: the numbers behind every view.

use crate::diagnostic::Diagnostic;
use crate::model::{Recipe, Requirement};
use crate::source::Sources;
use std::sync::Arc;

/// The outcome of one check.
#[derive(Clone, Debug)]
pub struct Report {
    /// All texts that it read.
    pub sources: Sources,
    /// The recipes asked for, in order of file and place.
    pub recipes: Vec<RecipeReport>,
    /// Everything there is to say, sorted by [`Diagnostic::sort_key`].
    pub diagnostics: Vec<Diagnostic>,
    /// Whether some recipe could not be understood or some file could not be read.
    pub not_understood: bool,
}

/// One recipe's numbers.
#[derive(Clone, Debug)]
pub struct RecipeReport {
    /// The recipe.
    pub recipe: Arc<Recipe>,
    /// Whether it was evaluated, every requirement is met, and no error of it stands unwaived.
    pub met: bool,
    /// Its requirements, in order.
    pub requirements: Vec<RequirementReport>,
    /// What its runs need; none where the stack was not understood.
    pub process: Option<ProcessReport>,
}

/// One requirement's numbers. Ratios are fractions, phases degrees, delays fs, dispersions fs², currents mA/cm²;
/// an edge's value is a wavelength in nm, a colour's its difference from the aim.
#[derive(Clone, Debug)]
pub struct RequirementReport {
    /// The requirement.
    pub requirement: Arc<Requirement>,
    /// The place that brings it in: the requirement itself, or its specification's name under `meets`.
    pub asked_at: crate::source::Place,
    /// Whether it is met; false where it could not be evaluated.
    pub met: bool,
    /// The value: the one nearest to breaking the bound, or furthest beyond. None where it could not be evaluated.
    pub value: Option<f64>,
    /// Least value allowed, at the place of [`RequirementReport::at`].
    pub min: Option<f64>,
    /// Greatest value allowed, there.
    pub max: Option<f64>,
    /// How far the value is inside the bound; negative beyond it.
    pub margin: Option<f64>,
    /// Where the extreme is.
    pub at: At,
}

/// Where a value was found.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct At {
    /// nm; none for a mean.
    pub wavelength: Option<f64>,
    /// rad.
    pub angle: f64,
    /// Polarisation.
    pub polarisation: crate::model::Beam,
}

/// What a recipe's runs need, over all coated sides.
#[derive(Clone, Debug, PartialEq)]
pub struct ProcessReport {
    /// Layers of all sides.
    pub layers: usize,
    /// nm, all sides.
    pub thickness: f64,
    /// s, all runs; none where a rate is missing.
    pub duration: Option<f64>,
}
