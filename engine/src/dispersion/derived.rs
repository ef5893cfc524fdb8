//! Models made from another by a shift, a factor or added absorption.

use super::model::Model;
use super::{EV_NM, Index, check};
use crate::error::ModelError;

impl Index {
    /// n + dn, k unchanged.
    ///
    /// # Errors
    /// A shift that is not a number.
    pub fn shifted(&self, dn: f64) -> Result<Index, ModelError> {
        check("the shift", dn, true, "a number")?;
        Index::derive(Model::Shifted(self.clone(), dn), &[self], None)
    }

    /// n (1 + factor), k unchanged.
    ///
    /// # Errors
    /// A factor that is not a number or that leaves no n above 0.
    pub fn scaled(&self, factor: f64) -> Result<Index, ModelError> {
        check("the factor", factor, factor > -1.0, "above −1")?;
        Index::derive(Model::Scaled(self.clone(), factor), &[self], None)
    }

    /// An absorption tail k₀ exp((E − E₀)/width) added to k, where E₀ is the photon energy of `at_nm`.
    ///
    /// Source: F. Urbach, Phys. Rev. 92, 1324 (1953).
    ///
    /// # Errors
    /// k₀ < 0, a wavelength or a width that is not above 0.
    pub fn with_urbach(&self, k0: f64, at_nm: f64, width_ev: f64) -> Result<Index, ModelError> {
        check("k of the Urbach tail", k0, k0 >= 0.0, "0 or above")?;
        check("the wavelength of the Urbach tail", at_nm, at_nm > 0.0, "above 0 nm")?;
        check("the width of the Urbach tail", width_ev, width_ev > 0.0, "above 0 eV")?;
        let model = Model::Urbach { base: self.clone(), k0, at_ev: EV_NM / at_nm, width_ev };
        Index::derive(model, &[self], None)
    }

    /// n of this material with k of another: a formula for n beside a table of k.
    ///
    /// # Errors
    /// No wavelength in common.
    pub fn with_extinction(&self, other: Index) -> Result<Index, ModelError> {
        let model = Model::WithExtinction { n_of: self.clone(), k_of: other.clone() };
        Index::derive(model, &[self, &other], None)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::error::IndexError;

    #[test]
    fn shift_and_factor_leave_k_alone() {
        let base = Index::constant(2.0, 0.1).expect("valid");
        let shifted =
            base.shifted(0.01).and_then(|index| index.at(500.0).map_err(|_| ModelError::NoCommonRange));
        assert_eq!(shifted.map(|index| (index.re, index.im)), Ok((2.01, 0.1)));
        let scaled = base.scaled(0.5).expect("valid").at(500.0).expect("physical");
        assert_eq!((scaled.re, scaled.im), (3.0, 0.1));
    }

    #[test]
    fn the_tail_has_its_k_at_its_wavelength_and_falls_by_e_in_one_width() {
        let film = Index::constant(2.0, 0.0).and_then(|n| n.with_urbach(0.02, 300.0, 0.25)).expect("valid");
        assert!((film.at(300.0).expect("physical").im - 0.02).abs() < 1e-16);
        let lower = EV_NM / (EV_NM / 300.0 - 0.25);
        assert!((film.at(lower).expect("physical").im - 0.02 / std::f64::consts::E).abs() < 1e-15);
    }

    #[test]
    fn a_range_is_narrowed_and_nothing_lies_outside() {
        let base = Index::constant(1.5, 0.0).and_then(|n| n.valid_over(300.0, 900.0)).expect("valid");
        let narrow = base.valid_over(200.0, 500.0).expect("valid");
        assert_eq!(narrow.range_nm(), Some((300.0, 500.0)));
        assert!(matches!(narrow.at(500.1), Err(IndexError::Outside { range_nm: (300.0, 500.0), .. })));
        assert_eq!(base.valid_over(1000.0, 1100.0).map(|_| ()), Err(ModelError::NoCommonRange));
        assert!(base.valid_over(500.0, 400.0).is_err());
    }

    #[test]
    fn a_tower_of_models_has_an_end() {
        let mut index = Index::constant(1.5, 0.0).expect("valid");
        let error = loop {
            match index.shifted(0.0) {
                Ok(next) => index = next,
                Err(error) => break error,
            }
        };
        assert_eq!(error, ModelError::TooDeep { deepest: 64 });
    }
}
