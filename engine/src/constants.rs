//! Constants of nature: exact in the SI since 2019 (BIPM, SI Brochure, 9th edition).

/// The speed of light in vacuum, m/s.
pub(crate) const LIGHT: f64 = 299_792_458.0;
/// Planck's constant, J s.
pub(crate) const PLANCK: f64 = 6.626_070_15e-34;
/// The elementary charge, C.
pub(crate) const CHARGE: f64 = 1.602_176_634e-19;
/// Boltzmann's constant, J/K.
pub(crate) const BOLTZMANN: f64 = 1.380_649e-23;
/// The product of a photon's energy and its vacuum wavelength, eV nm.
pub(crate) const EV_NM: f64 = PLANCK * LIGHT / CHARGE * 1e9;
