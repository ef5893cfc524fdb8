//! Constants and the formulas of transparent media: Cauchy's and Sellmeier's.

use num_complex::Complex64;

use super::model::Model;
use super::{Index, check};
use crate::error::ModelError;
use crate::kernel::WIDTH;
use crate::number::Number;

impl Index {
    /// The same N = n + ik at every wavelength.
    ///
    /// # Errors
    /// n ≤ 0, k < 0, or not a number.
    pub fn constant(n: f64, k: f64) -> Result<Index, ModelError> {
        check("n", n, n > 0.0, "above 0")?;
        check("k", k, k >= 0.0, "0 or above")?;
        Ok(Index::basic(Model::Constant(Complex64::new(n, k)), None, Vec::new(), Vec::new()))
    }

    /// n = A + B/λ² + C/λ⁴ + …, with the coefficients A, B in µm², C in µm⁴ and so on; k = 0.
    ///
    /// Source: A. L. Cauchy, *Mémoire sur la dispersion de la lumière* (1836).
    ///
    /// # Errors
    /// No coefficient, or one that is not a number.
    pub fn cauchy(coefficients: &[f64]) -> Result<Index, ModelError> {
        if coefficients.is_empty() {
            return Err(ModelError::TooFew { what: "coefficients", given: 0, needed: 1 });
        }
        for &coefficient in coefficients {
            check("a Cauchy coefficient", coefficient, true, "a number")?;
        }
        Ok(Index::basic(Model::Cauchy(coefficients.to_vec()), None, Vec::new(), Vec::new()))
    }

    /// n² = 1 + Σ B λ²/(λ² − C²), with pairs (B, C in µm); k = 0.
    ///
    /// Source: W. Sellmeier, Ann. Phys. 219, 272 (1871).
    ///
    /// # Errors
    /// No term, or a parameter that is not a number, or C < 0.
    pub fn sellmeier(terms: &[(f64, f64)]) -> Result<Index, ModelError> {
        if terms.is_empty() {
            return Err(ModelError::TooFew { what: "terms", given: 0, needed: 1 });
        }
        for &(strength, resonance_um) in terms {
            check("a Sellmeier strength", strength, true, "a number")?;
            check("a Sellmeier wavelength", resonance_um, resonance_um >= 0.0, "0 or above")?;
        }
        Ok(Index::basic(Model::Sellmeier(terms.to_vec()), None, Vec::new(), Vec::new()))
    }
}

pub(super) fn cauchy<N: Number>(coefficients: &[f64], wavelength_nm: &N) -> N {
    let um = wavelength_nm.scale(1e-3);
    let inverse_square = N::real(1.0) / (um.clone() * um);
    let horner = |sum: N, &coefficient: &f64| sum * inverse_square.clone() + N::real(coefficient);
    coefficients.iter().rev().fold(N::real(0.0), horner)
}

/// The same at several wavelengths in nm.
pub(super) fn cauchy_all(coefficients: &[f64], wavelengths_nm: &[f64; WIDTH]) -> [f64; WIDTH] {
    let inverse_square = wavelengths_nm.map(|nm| 1.0 / (nm * 1e-3 * (nm * 1e-3)));
    let mut sum = [0.0; WIDTH];
    for coefficient in coefficients.iter().rev() {
        for (sum, inverse_square) in sum.iter_mut().zip(inverse_square) {
            *sum = *sum * inverse_square + coefficient;
        }
    }
    sum
}

/// n², which is negative inside a resonance.
pub(super) fn sellmeier<N: Number>(terms: &[(f64, f64)], wavelength_nm: &N) -> N {
    let um = wavelength_nm.scale(1e-3);
    let square = um.clone() * um;
    let add = |sum: N, &(strength, resonance): &(f64, f64)| {
        sum + square.scale(strength) / (square.clone() - N::real(resonance * resonance))
    };
    terms.iter().fold(N::real(1.0), add)
}

/// The same at several wavelengths in nm.
pub(super) fn sellmeier_all(terms: &[(f64, f64)], wavelengths_nm: &[f64; WIDTH]) -> [f64; WIDTH] {
    let square = wavelengths_nm.map(|nm| nm * 1e-3 * (nm * 1e-3));
    let mut sum = [1.0; WIDTH];
    for (strength, resonance) in terms {
        for (sum, square) in sum.iter_mut().zip(square) {
            *sum += square * strength / (square - resonance * resonance);
        }
    }
    sum
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::error::IndexError;

    #[test]
    fn a_wavelength_inside_a_resonance_is_refused() {
        let glass = Index::sellmeier(&[(1.0, 0.1)]).expect("valid");
        assert!(matches!(glass.at(99.0), Err(IndexError::NotPhysical { .. })));
        assert!(matches!(glass.at(100.0), Err(IndexError::NotFinite { .. })));
    }

    #[test]
    fn parameters_are_checked() {
        assert!(Index::constant(0.0, 0.0).is_err());
        assert!(Index::constant(1.5, -1e-9).is_err());
        assert!(Index::constant(f64::NAN, 0.0).is_err());
        assert!(Index::cauchy(&[]).is_err());
        assert!(Index::sellmeier(&[(f64::INFINITY, 0.1)]).is_err());
    }
}
