//! Optical constants: the refractive index N = n + ik of one material against the vacuum wavelength.

mod block;
#[cfg(test)]
mod derivative;
mod derived;
mod formula;
mod mixture;
mod model;
mod oscillator;
mod table;
mod tauc_lorentz;

use std::sync::Arc;

use num_complex::Complex64;

pub use mixture::MixingRule;
pub(crate) use mixture::mix;
pub use oscillator::Oscillator;

use crate::constants::EV_NM;
use crate::error::{IndexError, ModelError};
use crate::number::Number;
use crate::taylor::Taylor;
use model::{Model, Photon};

/// How many models may be built on one another.
const DEEPEST: usize = 64;

/// The optical constants of one material: cheap to clone, and a clone is the same material.
///
/// The sign convention is N = n + ik with k ≥ 0, for fields that go as exp(−iωt).
#[derive(Clone, Debug)]
pub struct Index(Arc<Material>);

#[derive(Debug)]
struct Material {
    model: Model,
    range_nm: Option<(f64, f64)>,
    knots_nm: Vec<f64>,
    lines_nm: Vec<(f64, f64)>,
    depth: usize,
}

impl Index {
    /// The complex refractive index at a vacuum wavelength in nm.
    ///
    /// # Errors
    /// Outside the material's range (nothing is extrapolated), where the formula has no finite value, and
    /// where it gives what no passive material has: n ≤ 0 or k < 0.
    pub fn at(&self, wavelength_nm: f64) -> Result<Complex64, IndexError> {
        if !(wavelength_nm.is_finite() && wavelength_nm > 0.0) {
            return Err(IndexError::Wavelength { wavelength_nm });
        }
        if let Some(range_nm) = self.range_nm()
            && !(range_nm.0 <= wavelength_nm && wavelength_nm <= range_nm.1)
        {
            return Err(IndexError::Outside { wavelength_nm, range_nm });
        }
        self.evaluate(&Photon::<Complex64>::of_wavelength(wavelength_nm))
    }

    /// The index with its first two derivatives in the angular frequency ω in rad/fs, at the vacuum wavelength that
    /// belongs to ω; where the constants are not smooth, those towards longer wavelengths.
    pub(crate) fn series(&self, wavelength_nm: f64, omega: f64) -> Result<Taylor, IndexError> {
        // The plain evaluation has every check.
        self.at(wavelength_nm)?;
        let cycle = wavelength_nm * omega;
        let energy_ev = Taylor::variable(omega, EV_NM / cycle);
        let wavelength_nm = Taylor::real(cycle) / Taylor::variable(omega, 1.0);
        self.evaluate(&Photon { wavelength_nm, energy_ev })
    }

    /// The range of vacuum wavelengths in nm that the constants hold for; `None` is everywhere.
    pub fn range_nm(&self) -> Option<(f64, f64)> {
        self.0.range_nm
    }

    /// The vacuum wavelengths in nm at which the constants are not smooth: the rows of a table, the gap of
    /// a Tauc–Lorentz oscillator. Ascending.
    pub fn knots_nm(&self) -> Vec<f64> {
        self.0.knots_nm.clone()
    }

    /// The centres and the half-widths, in nm of vacuum wavelength, of absorption lines: the constants may
    /// change on that scale there.
    pub fn lines_nm(&self) -> Vec<(f64, f64)> {
        self.0.lines_nm.clone()
    }

    /// Whether the two are the same material: clones of one another.
    pub fn same_as(&self, other: &Index) -> bool {
        Arc::ptr_eq(&self.0, &other.0)
    }

    /// An identity for tables of materials, valid while a clone lives.
    pub(crate) fn id(&self) -> usize {
        Arc::as_ptr(&self.0).addr()
    }

    /// The same material with its constants held valid over the given wavelengths in nm only; a range that
    /// it has already is narrowed.
    ///
    /// # Errors
    /// A range that is reversed or not made of wavelengths, or that leaves nothing.
    pub fn valid_over(&self, lo_nm: f64, hi_nm: f64) -> Result<Index, ModelError> {
        check("the lower end of the range", lo_nm, lo_nm > 0.0, "above 0 nm")?;
        check("the upper end of the range", hi_nm, hi_nm > lo_nm, "above the lower end")?;
        Index::derive(Model::Same(self.clone()), &[self], Some((lo_nm, hi_nm)))
    }

    /// A model that stands on its own.
    fn basic(
        model: Model,
        range_nm: Option<(f64, f64)>,
        knots_nm: Vec<f64>,
        lines_nm: Vec<(f64, f64)>,
    ) -> Index {
        Index(Arc::new(Material { model, range_nm, knots_nm, lines_nm, depth: 0 }))
    }

    /// A model built on others: it holds where all of them do, and is as rough as they are.
    fn derive(model: Model, parts: &[&Index], own_range: Option<(f64, f64)>) -> Result<Index, ModelError> {
        let depth = 1 + parts.iter().map(|part| part.0.depth).max().unwrap_or(0);
        if depth > DEEPEST {
            return Err(ModelError::TooDeep { deepest: DEEPEST });
        }
        let mut range_nm = own_range;
        for part in parts {
            range_nm = match (range_nm, part.0.range_nm) {
                (Some(a), Some(b)) => Some((a.0.max(b.0), a.1.min(b.1))),
                (a, b) => a.or(b),
            };
        }
        if range_nm.is_some_and(|(lo, hi)| lo > hi) {
            return Err(ModelError::NoCommonRange);
        }
        let mut knots_nm: Vec<f64> = parts.iter().flat_map(|part| part.0.knots_nm.iter().copied()).collect();
        knots_nm.sort_by(f64::total_cmp);
        knots_nm.dedup();
        let lines_nm = parts.iter().flat_map(|part| part.0.lines_nm.iter().copied()).collect();
        Ok(Index(Arc::new(Material { model, range_nm, knots_nm, lines_nm, depth })))
    }
}

/// An error that names the parameter, unless it is a finite number that passes.
fn check(what: &'static str, value: f64, passes: bool, must: &'static str) -> Result<(), ModelError> {
    if value.is_finite() && passes { Ok(()) } else { Err(ModelError::Parameter { what, value, must }) }
}

/// The vacuum wavelength in nm of a photon energy in eV, and back.
fn ev_to_nm(energy_ev: f64) -> f64 {
    EV_NM / energy_ev
}
