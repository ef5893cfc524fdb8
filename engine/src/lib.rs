//! The interference engine: what light does in a stack of films.
//!
//! It knows light and films, and nothing of recipes, files or editors. Lengths are in nm, wavelengths are in
//! vacuum, angles in rad, everything is `f64`.
//!
//! # Conventions
//!
//! - Fields go as exp(−iωt); a refractive index is N = n + ik with k ≥ 0.
//! - Angles are those of incidence, in the incident medium, from 0 to below 90°.
//! - For p polarisation r is that of the tangential electric field: at normal incidence r is the same for s
//!   and p, and negative where the light meets the higher index.
//! - R, T and A are fractions of the incident power; light that enters the exit half-space is transmitted.

mod adjoint;
mod band;
mod bodies;
mod coating;
mod colour;
mod constants;
mod dispersion;
mod error;
mod facets;
mod field;
mod graded;
mod kernel;
mod lanes;
mod matrix;
mod number;
mod parts;
mod phase;
mod plan;
mod prepared;
mod quadrature;
mod quantity;
mod real;
mod response;
mod slopes;
#[cfg(test)]
mod slopes_defined;
mod stack;
mod taylor;
mod tilted;
mod weight;

pub use band::{
    Crossing, Extreme, Extremes, Mean, crossings, extremes, extremes_against, extremes_over_angles,
    hemispherical_mean, mean, means, value, values,
};
pub use colour::{Lab, Observer, VISIBLE_NM, ciede2000, colour};
pub use dispersion::{Index, MixingRule, Oscillator};
pub use error::{IndexError, ModelError, OpticsError, WeightError};
pub use field::{Peak, peak_field};
pub use graded::{Gradient, Profile, Steps};
pub use lanes::Vectors;
pub use num_complex::Complex64;
pub use parts::{Change, Part, Sampler};
pub use prepared::{LayerSlopes, Prepared, Spectrum};
pub use quantity::{Light, Outgoing, PhaseKind, Quantity};
pub use response::{Absorption, Polarisation, Response};
pub use slopes::{Slopes, slopes};
pub use stack::{Body, Film, Stack};
pub use weight::SpectralWeight;
