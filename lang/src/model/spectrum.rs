//! A light source or a detector response.

use crate::source::Place;
use std::sync::Arc;

/// A spectrum.
#[derive(Clone, Debug)]
pub struct Spectrum {
    /// Its name where it is defined.
    pub name: String,
    /// Its name's place: its identity.
    pub place: Place,
    /// The `##` lines before it.
    pub description: Vec<String>,
    /// Whether it comes with the tool.
    pub handbook: bool,
    /// What it is; none where its statements were wrong.
    pub kind: Option<SpectrumKind>,
    /// Where its numbers come from.
    pub source: Option<String>,
    /// Whether its values are W m⁻² nm⁻¹.
    pub irradiance: bool,
}

/// How a spectrum is given.
#[derive(Clone, Debug)]
pub enum SpectrumKind {
    /// Rows of wavelength in nm and value, linear between them.
    Table(Vec<(f64, f64)>),
    /// Planck's, at a temperature in K.
    Blackbody(f64),
    /// The product of others.
    Product(Vec<Arc<Spectrum>>),
}
