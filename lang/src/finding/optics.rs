//! Facts about optical constants and light.

use crate::source::Place;

/// A fact about optical constants and light.
#[derive(Clone, Debug, PartialEq)]
pub enum OpticsFact {
    /// Wavelengths at which a material or a spectrum has no data.
    OutsideData {
        /// Its name.
        name: String,
        /// Where it is defined.
        defined: Place,
        /// What is asked for, nm; both ends alike for a single wavelength.
        asked: (f64, f64),
        /// What there is, nm.
        range: (f64, f64),
    },
    /// A formula that gives no index at a wavelength: n ≤ 0, k < 0, or no finite number.
    NotPhysical {
        /// The material.
        name: String,
        /// Where it is defined.
        defined: Place,
        /// nm.
        wavelength: f64,
        /// n and k where they are finite.
        nk: Option<(f64, f64)>,
    },
}
