//! The closed set of models and how each is evaluated, in any [`Number`].

use num_complex::Complex64;

use super::formula;
use super::mixture::{self, MixingRule};
use super::oscillator::{self, Oscillator};
use super::table::Table;
use super::{EV_NM, Index};
use crate::error::IndexError;
use crate::number::Number;

/// How a material's optical constants come about.
#[derive(Debug)]
pub(super) enum Model {
    Constant(Complex64),
    Table(Table),
    Cauchy(Vec<f64>),
    Sellmeier(Vec<(f64, f64)>),
    Oscillators { eps_inf: f64, terms: Vec<Oscillator> },
    Mixture { rule: MixingRule, parts: Vec<(Index, f64)> },
    Shifted(Index, f64),
    Scaled(Index, f64),
    Urbach { base: Index, k0: f64, at_ev: f64, width_ev: f64 },
    WithExtinction { n_of: Index, k_of: Index },
    Same(Index),
}

/// One photon, told by its vacuum wavelength and by its energy.
pub(super) struct Photon<N> {
    pub(super) wavelength_nm: N,
    pub(super) energy_ev: N,
}

impl<N: Number> Photon<N> {
    pub(super) fn of_wavelength(wavelength_nm: f64) -> Self {
        Photon { wavelength_nm: N::real(wavelength_nm), energy_ev: N::real(EV_NM / wavelength_nm) }
    }
}

impl Index {
    /// The index for one photon, checked at every level so that a mixture of something impossible is
    /// impossible itself. The range is the caller's to check.
    pub(super) fn evaluate<N: Number>(&self, photon: &Photon<N>) -> Result<N, IndexError> {
        let index = self.formula(photon)?;
        let wavelength_nm = photon.wavelength_nm.value().re;
        let value = index.value();
        if !value.is_finite() {
            return Err(IndexError::NotFinite { wavelength_nm });
        }
        if value.re > 0.0 && value.im >= 0.0 {
            return Ok(index);
        }
        // A k that is zero but for the last digit of the arithmetic is zero.
        if value.re > 0.0 && value.im > -1e-13 * value.re {
            return Ok(index.re());
        }
        Err(IndexError::NotPhysical { wavelength_nm, n: value.re, k: value.im })
    }

    fn formula<N: Number>(&self, photon: &Photon<N>) -> Result<N, IndexError> {
        let i = || N::constant(Complex64::I);
        Ok(match &self.0.model {
            Model::Constant(index) => N::constant(*index),
            Model::Table(table) => table.index(&photon.wavelength_nm),
            Model::Cauchy(coefficients) => formula::cauchy(coefficients, &photon.wavelength_nm),
            Model::Sellmeier(terms) => formula::sellmeier(terms, &photon.wavelength_nm).sqrt(),
            Model::Oscillators { eps_inf, terms } => {
                oscillator::permittivity(*eps_inf, terms, &photon.energy_ev).sqrt()
            }
            Model::Mixture { rule, parts } => {
                let mut permittivities = Vec::with_capacity(parts.len());
                for (part, fraction) in parts {
                    let index = part.evaluate(photon)?;
                    permittivities.push((index.clone() * index, *fraction));
                }
                mixture::mix(*rule, &permittivities).sqrt()
            }
            Model::Shifted(base, dn) => base.evaluate(photon)? + N::real(*dn),
            Model::Scaled(base, factor) => {
                let index = base.evaluate(photon)?;
                index.re().scale(1.0 + factor) + i() * index.im()
            }
            Model::Urbach { base, k0, at_ev, width_ev } => {
                let rise = (photon.energy_ev.clone() - N::real(*at_ev)).scale(1.0 / width_ev);
                base.evaluate(photon)? + i() * rise.exp().scale(*k0)
            }
            Model::WithExtinction { n_of, k_of } => {
                n_of.evaluate(photon)?.re() + i() * k_of.evaluate(photon)?.im()
            }
            Model::Same(base) => base.evaluate(photon)?,
        })
    }
}
