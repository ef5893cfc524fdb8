//! What a check found out, recipe by recipe: the numbers behind every view.

use crate::diagnostic::Diagnostic;
use crate::model::{Recipe, Requirement, Spread};
use crate::source::{Place, Sources};
use crate::syntax::ast::{Each, SpreadKind};
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
    /// How many parts will pass; none where no yield is asked for or it can't be evaluated.
    pub yields: Option<YieldReport>,
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

/// What the chamber's variation makes of a recipe.
#[derive(Clone, Debug)]
pub struct YieldReport {
    /// How many parts were evaluated.
    pub parts: u32,
    /// How many of them meet every requirement that counts.
    pub passed: u32,
    /// The interval that holds the true yield with 95 % confidence (Clopper and Pearson).
    pub interval: (f64, f64),
    /// What varies; empty where nothing does.
    pub causes: Vec<Cause>,
    /// The requirements that count.
    pub requirements: Vec<RequirementYield>,
}

impl YieldReport {
    /// The share of parts that pass.
    pub fn value(&self) -> f64 {
        f64::from(self.passed) / f64::from(self.parts)
    }

    /// The requirement that the fewest parts meet.
    pub fn weakest(&self) -> Option<&RequirementYield> {
        self.requirements.iter().min_by_key(|one| one.passed)
    }
}

/// What a variation varies.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Varying {
    /// A film's thickness.
    Thickness,
    /// A film's index.
    Index,
    /// The angle of incidence.
    Angle,
}

/// A statement that makes something vary.
#[derive(Clone, Debug, PartialEq)]
pub struct Cause {
    /// What varies.
    pub varying: Varying,
    /// Of which material or layer; empty for an angle.
    pub of: String,
    /// How often it is drawn.
    pub each: Each,
    /// Its distribution.
    pub kind: SpreadKind,
    /// Half its width, or its standard deviation: nm, a share, an index, rad.
    pub spread: Spread,
    /// The statement.
    pub place: Place,
}

/// One requirement over all parts.
#[derive(Clone, Debug)]
pub struct RequirementYield {
    /// The requirement.
    pub requirement: Arc<Requirement>,
    /// How many parts meet it.
    pub passed: u32,
    /// The values that 5, 50 and 95 % of the parts stay below, from the first 65 536 at most; none where it has none.
    pub quantiles: Option<[f64; 3]>,
    /// Which share of the value's variance each cause brings about, to first order: squared standardised regression
    /// coefficients (A. Saltelli and others, Global Sensitivity Analysis: The Primer, 2008, 1.2.5, from memory), exact where the
    /// value is linear in the draws.
    pub shares: Vec<f64>,
    /// The same of single layers, for what is drawn for each layer: the layer's index in the stack's elements and its share.
    pub layers: Vec<(usize, f64)>,
    /// The part that is furthest beyond the bound, or nearest to it.
    pub worst: WorstPart,
    /// The value with every `±` at the end that the regression points to, all else as written; none where nothing is `±`.
    pub corner: Option<f64>,
}

/// A part that does badly.
#[derive(Clone, Debug)]
pub struct WorstPart {
    /// Its number, from 1.
    pub number: u32,
    /// Its value.
    pub value: f64,
    /// What was drawn for it.
    pub draws: Vec<WorstDraw>,
}

/// One draw of such a part.
#[derive(Clone, Debug)]
pub struct WorstDraw {
    /// The place of its cause in [`YieldReport::causes`].
    pub cause: usize,
    /// What the layer is called that it is drawn for, if for one alone.
    pub layer: Option<String>,
    /// In half widths of a rectangular distribution, or in standard deviations.
    pub units: f64,
}

/// A number that is drawn for every part.
#[derive(Clone, Debug)]
pub struct Column {
    /// Why it varies.
    pub cause: Cause,
    /// The layer that it is drawn for, if for one alone.
    pub layer: Option<String>,
    /// The coated side, from 0, that it is drawn for, if it is drawn each run.
    pub run: Option<usize>,
}

/// One part of a simulation.
#[derive(Clone, Debug)]
pub struct Part {
    /// Its number, from 1.
    pub number: u32,
    /// What was drawn, by column, in the cause's unit: a share, nm, an index, rad.
    pub draws: Vec<f64>,
    /// The value of every requirement that counts; none where it has none.
    pub values: Vec<Option<f64>>,
    /// Whether it meets all of them.
    pub met: bool,
}

/// Who is told of a simulation as it goes.
pub trait Watch {
    /// What every part will have: its draws and its requirements.
    fn begin(&mut self, columns: &[Column], requirements: &[Arc<Requirement>], parts: u32);
    /// A part, in order. Says whether to go on.
    fn part(&mut self, part: &Part) -> bool;
}
