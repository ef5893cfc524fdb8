//! What a part must do.

use super::{Material, Spectrum};
use crate::source::Place;
use std::sync::Arc;

/// A named list of requirements.
#[derive(Clone, Debug)]
pub struct Specification {
    /// Its name.
    pub name: String,
    /// Its title, for people.
    pub title: Option<String>,
    /// Its name's place: its identity.
    pub place: Place,
    /// The `##` lines before it.
    pub description: Vec<String>,
    /// Its requirements that could be understood.
    pub requirements: Vec<Arc<Requirement>>,
}

/// Reflected or transmitted light.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Side {
    /// Reflected.
    Reflected,
    /// Transmitted.
    Transmitted,
}

/// The one material or layer that a quantity is about.
#[derive(Clone, Debug)]
pub struct Target {
    /// The name as written.
    pub name: String,
    /// Where.
    pub place: Place,
    /// The material of that name in the module that says so; a layer's name in the recipe goes first.
    pub material: Option<Arc<Material>>,
}

/// What is promised.
#[derive(Clone, Debug)]
pub enum Quantity {
    /// Of the incident power.
    Reflectance,
    /// Of the incident power.
    Transmittance,
    /// Of the incident power.
    Absorptance,
    /// In one material or layer.
    AbsorptanceIn(Target),
    /// −log₁₀ of the transmittance.
    OpticalDensity,
    /// Weighted by the light source and the photopic response.
    Luminous(Side),
    /// Weighted by the sun's power.
    Solar(Side),
    /// Weighted by the sun's power.
    SolarAbsorptance,
    /// mA/cm².
    Photocurrent(Target),
    /// mA/cm².
    PhotocurrentLoss(Target),
    /// CIELAB.
    Colour(Side),
    /// rad.
    Phase(Side),
    /// s.
    GroupDelay(Side),
    /// fs².
    GroupDelayDispersion(Side),
    /// |E/E₀|².
    PeakField,
    /// Thermal.
    Emittance,
    /// The share of parts that pass.
    Yield,
}

impl Quantity {
    /// Whether it is a curve against wavelength on a scale that edges and masks refer to.
    pub fn is_curve(&self) -> bool {
        use Quantity::*;
        matches!(self, Reflectance | Transmittance | Absorptance | AbsorptanceIn(_) | OpticalDensity)
    }
}

/// A curve against wavelength.
#[derive(Clone, Debug, PartialEq)]
pub struct Mask {
    /// The file as written.
    pub path: String,
    /// Wavelength in nm and bound, ascending, at least two; linear between.
    pub rows: Vec<(f64, f64)>,
}

/// How much of it.
#[derive(Clone, Debug, PartialEq)]
pub enum Bound {
    /// At least `min`, at most `max`; one of the two at least is there. `v ± t` is v − t and v + t.
    Range {
        /// Least.
        min: Option<f64>,
        /// Greatest.
        max: Option<f64>,
    },
    /// A curve that must not be exceeded.
    AtMostMask(Mask),
    /// A curve that must be reached.
    AtLeastMask(Mask),
    /// An edge.
    Crosses {
        /// The level.
        level: f64,
        /// Rising with wavelength, or falling.
        rising: bool,
        /// Where it must lie, nm.
        within: Option<(f64, f64)>,
    },
    /// A colour.
    NearColour {
        /// The greatest difference, CIEDE2000.
        difference: f64,
        /// L*, a*, b*.
        aim: [f64; 3],
    },
}

/// The angles of incidence that a requirement is about, rad.
#[derive(Clone, Debug, PartialEq)]
pub enum Angles {
    /// Each of these.
    List(Vec<f64>),
    /// All from the first to the second.
    Range(f64, f64),
}

/// Polarisation of the light.
pub use overcoat_engine::Polarisation as Beam;

/// The standard observer.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Observer {
    /// CIE 1931, 2°.
    Two,
    /// CIE 1964, 10°.
    Ten,
}

/// What a mean is weighted by.
#[derive(Clone, Debug)]
pub struct Weighting {
    /// The spectrum.
    pub spectrum: Arc<Spectrum>,
    /// By photons, not by power.
    pub photons: bool,
    /// Where it is said.
    pub place: Place,
}

/// A requirement.
#[derive(Clone, Debug)]
pub struct Requirement {
    /// The sentence after `require`, with single spaces, as written.
    pub text: String,
    /// The statement.
    pub place: Place,
    /// The bound as written.
    pub bound_place: Place,
    /// Whether a mean over the band is meant.
    pub mean: bool,
    /// What.
    pub quantity: Quantity,
    /// How much.
    pub bound: Bound,
    /// Bands in nm, each from its short end to its long end.
    pub bands: Vec<(f64, f64)>,
    /// Single wavelengths in nm.
    pub wavelengths: Vec<f64>,
    /// Angles of incidence.
    pub angles: Angles,
    /// A cone's half-angle in rad, 0 for none.
    pub cone: f64,
    /// Polarisation.
    pub polarisation: Beam,
    /// The spectrum that weights it.
    pub under: Option<Weighting>,
    /// Light from the other side.
    pub from_exit: bool,
    /// For an emittance, K.
    pub temperature: Option<f64>,
    /// For an emittance.
    pub hemispherical: bool,
    /// For a colour.
    pub observer: Observer,
    /// For a yield.
    pub parts: Option<u32>,
    /// Left out of the yield.
    pub nominal: bool,
}
