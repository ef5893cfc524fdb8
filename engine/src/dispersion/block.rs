//! The constants at several wavelengths at once, in plain arithmetic where a model allows it.

use num_complex::Complex64;

use super::model::Model;
use super::{Index, ev_to_nm, formula, oscillator};
use crate::error::IndexError;
use crate::kernel::{Row, WIDTH};
use crate::number::Number;

impl Index {
    /// n and k at several vacuum wavelengths in nm; the same as [`Index::at`] to the last digits.
    ///
    /// # Errors
    /// As [`Index::at`], for the first wavelength that has one.
    pub(crate) fn at_all(&self, wavelengths_nm: &[f64; WIDTH], to: &mut [Row; 2]) -> Result<(), IndexError> {
        let inside = |nm: &f64| match self.range_nm() {
            Some((lo, hi)) => lo <= *nm && *nm <= hi,
            None => *nm > 0.0 && nm.is_finite(),
        };
        if wavelengths_nm.iter().all(inside) && self.plain(wavelengths_nm, to) {
            return Ok(());
        }
        for (lane, wavelength_nm) in wavelengths_nm.iter().enumerate() {
            let index = self.at(*wavelength_nm)?;
            (to[0].0[lane], to[1].0[lane]) = (index.re, index.im);
        }
        Ok(())
    }

    /// The same without a word on what is wrong: `false` where the model has no plain arithmetic, or a number that no film has.
    fn plain(&self, wavelengths_nm: &[f64; WIDTH], to: &mut [Row; 2]) -> bool {
        let [n, k] = to;
        match &self.0.model {
            Model::Constant(index) => (*n, *k) = (Row([index.re; WIDTH]), Row([index.im; WIDTH])),
            Model::Cauchy(coefficients) => {
                (*n, *k) = (Row(formula::cauchy_all(coefficients, wavelengths_nm)), Row::ZERO);
            }
            Model::Sellmeier(terms) => {
                (*n, *k) = (Row(formula::sellmeier_all(terms, wavelengths_nm).map(f64::sqrt)), Row::ZERO);
            }
            Model::Table(table) => table.index_all(wavelengths_nm, n, k),
            Model::Shifted(base, dn) => {
                if !base.plain(wavelengths_nm, to) {
                    return false;
                }
                to[0].0.iter_mut().for_each(|n| *n += dn);
            }
            Model::Scaled(base, factor) => {
                if !base.plain(wavelengths_nm, to) {
                    return false;
                }
                to[0].0.iter_mut().for_each(|n| *n *= 1.0 + factor);
            }
            Model::WithExtinction { n_of, k_of } => {
                let mut other = [Row::ZERO; 2];
                if !(k_of.plain(wavelengths_nm, &mut other) && n_of.plain(wavelengths_nm, to)) {
                    return false;
                }
                to[1] = other[1];
            }
            Model::Same(base) => return base.plain(wavelengths_nm, to),
            Model::Oscillators { eps_inf, terms } => {
                let energies_ev = wavelengths_nm.map(ev_to_nm);
                let Some([re, im]) = oscillator::permittivity_all(*eps_inf, terms, &energies_ev) else {
                    return false;
                };
                for lane in 0..WIDTH {
                    let index = Number::sqrt(&Complex64::new(re[lane], im[lane]));
                    (n.0[lane], k.0[lane]) = (index.re, index.im);
                }
            }
            Model::Urbach { base, k0, at_ev, width_ev } => {
                if !base.plain(wavelengths_nm, to) {
                    return false;
                }
                for (k, nm) in to[1].0.iter_mut().zip(wavelengths_nm) {
                    *k += ((ev_to_nm(*nm) - at_ev) * (1.0 / width_ev)).exp() * k0;
                }
            }
            Model::Mixture { .. } => return false,
        }
        let [n, k] = to;
        n.0.iter().all(|n| *n > 0.0 && n.is_finite()) && k.0.iter().all(|k| *k >= 0.0 && k.is_finite())
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::dispersion::{MixingRule, Oscillator};

    #[test]
    fn a_block_is_what_its_wavelengths_are_one_by_one() {
        let table = Index::table(&[
            (380.0, 2.5, 0.01),
            (400.0, 2.45, 0.002),
            (401.0, 2.44, 0.0),
            (700.0, 2.3, 0.0),
            (900.0, 2.28, 1e-4),
        ])
        .expect("valid");
        let cauchy = Index::cauchy(&[1.45, 0.003, 1e-4]).expect("valid");
        let sellmeier = Index::sellmeier(&[(0.7, 0.07), (0.4, 0.12), (0.9, 9.9)]).expect("valid");
        let drude = Oscillator::Drude { plasma_ev: 9.0, width_ev: 0.1 };
        let lorentz = Oscillator::Lorentz { strength: 2.1, centre_ev: 2.3, width_ev: 0.4 };
        let tauc = Oscillator::TaucLorentz { strength_ev: 92.0, centre_ev: 3.5, width_ev: 4.0, gap_ev: 1.4 };
        let sharp = Oscillator::Lorentz { strength: 0.3, centre_ev: 6.0, width_ev: 0.0 };
        let oscillators =
            |eps_inf, terms: &[Oscillator]| Index::oscillators(eps_inf, terms.to_vec()).expect("valid");
        let metal = oscillators(1.0, &[drude, lorentz]);
        let mixture =
            |rule| Index::mixture(rule, &[(metal.clone(), 0.2), (table.clone(), 0.8)]).expect("valid");
        let models = [
            // These five have no plain arithmetic.
            oscillators(1.0, &[tauc, lorentz]),
            mixture(MixingRule::Bruggeman),
            mixture(MixingRule::MaxwellGarnett),
            mixture(MixingRule::LorentzLorenz),
            mixture(MixingRule::Volume),
            // The others have.
            oscillators(2.0, &[sharp]),
            oscillators(3.0, &[lorentz, sharp]),
            // A metal without damping has no n where its permittivity is negative: an error.
            oscillators(1.0, &[Oscillator::Drude { plasma_ev: 9.0, width_ev: 0.0 }]),
            metal.with_urbach(0.02, 300.0, 0.25).expect("valid"),
            table.shifted(-2.4).expect("valid"),
            Index::sellmeier(&[(1.0, 0.4)]).expect("valid"),
            cauchy.with_extinction(metal.clone()).expect("valid"),
            metal.clone(),
            Index::constant(1.5, 0.1).expect("valid"),
            table.clone(),
            cauchy.clone(),
            sellmeier.clone(),
            table.shifted(0.02).expect("valid"),
            sellmeier.scaled(-0.03).expect("valid"),
            cauchy.with_extinction(table.clone()).expect("valid"),
            cauchy.with_urbach(0.1, 400.0, 0.2).expect("valid"),
            Index::oscillators(1.0, vec![drude]).expect("valid"),
            table.valid_over(390.0, 800.0).expect("valid"),
        ];
        let blocks = [
            [400.0, 400.5, 401.0, 402.0, 650.0, 700.0, 701.0, 799.0],
            [390.0, 800.0, 400.2, 555.5, 620.0, 399.9, 633.0, 745.0],
            [380.0, 900.0, 380.0, 900.0, 500.0, 901.0, 1.0, 379.9],
        ];
        for (at, model) in models.iter().enumerate() {
            for wavelengths in &blocks {
                let mut to = [Row::ZERO; 2];
                let found = model.at_all(wavelengths, &mut to);
                let one_by_one: Result<Vec<_>, _> = wavelengths.iter().map(|nm| model.at(*nm)).collect();
                match one_by_one {
                    Err(error) => assert_eq!(found, Err(error), "model {at}"),
                    Ok(expected) => {
                        assert_eq!(found, Ok(()));
                        assert_eq!(model.plain(wavelengths, &mut [Row::ZERO; 2]), at >= 5, "model {at}");
                        for (lane, index) in expected.iter().enumerate() {
                            assert!((to[0].0[lane] - index.re).abs() <= 1e-15 * index.re, "model {at}");
                            assert!((to[1].0[lane] - index.im).abs() <= 1e-15 * index.re, "model {at}");
                        }
                    }
                }
            }
        }
    }
}
