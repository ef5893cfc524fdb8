//! What can go wrong, as values: nothing here is ever told by a NaN or a panic.

use thiserror::Error;

use crate::dispersion::Index;

/// Why a model of optical constants was refused.
#[derive(Clone, Debug, PartialEq, Error)]
pub enum ModelError {
    /// A parameter that is not a number, or not in the range that it must be in.
    #[error("{what} is {value}, but must be {must}")]
    Parameter {
        /// What the parameter is.
        what: &'static str,
        /// What was given.
        value: f64,
        /// What it must be.
        must: &'static str,
    },
    /// A row of a table with a wavelength, an n or a k that cannot be.
    #[error("row {row}: {what} is {value}, but must be {must}")]
    Row {
        /// The row, counted from 1.
        row: usize,
        /// The column.
        what: &'static str,
        /// What was given.
        value: f64,
        /// What it must be.
        must: &'static str,
    },
    /// Fewer entries than the model needs.
    #[error("{what}: {given} given, at least {needed} needed")]
    TooFew {
        /// Of what.
        what: &'static str,
        /// How many there are.
        given: usize,
        /// How many there must be.
        needed: usize,
    },
    /// Fractions of a mixture that don't make a whole.
    #[error("the fractions add up to {sum}, not to 1")]
    Fractions {
        /// Their sum.
        sum: f64,
    },
    /// The parts have no wavelength in common.
    #[error("the parts have no wavelength in common")]
    NoCommonRange,
    /// Models built on models, more than 64 deep.
    #[error("more than {deepest} models are built on one another")]
    TooDeep {
        /// How deep it may go.
        deepest: usize,
    },
}

/// Why a material has no optical constants at a wavelength.
#[derive(Clone, Copy, Debug, PartialEq, Error)]
pub enum IndexError {
    /// The wavelength lies outside the range that the data or the formula hold for.
    #[error("no optical constants at {wavelength_nm} nm: they reach from {} to {} nm", range_nm.0, range_nm.1)]
    Outside {
        /// The wavelength asked for, nm.
        wavelength_nm: f64,
        /// The range that there is, nm.
        range_nm: (f64, f64),
    },
    /// The formula gives n ≤ 0 or k < 0.
    #[error("at {wavelength_nm} nm the formula gives n = {n}, k = {k}, which no passive material has")]
    NotPhysical {
        /// The wavelength, nm.
        wavelength_nm: f64,
        /// The real part of the index.
        n: f64,
        /// The imaginary part of the index.
        k: f64,
    },
    /// The formula has a pole there, or its numbers overflow.
    #[error("at {wavelength_nm} nm the formula has no finite value")]
    NotFinite {
        /// The wavelength, nm.
        wavelength_nm: f64,
    },
    /// A wavelength that is not a positive number.
    #[error("{wavelength_nm} nm is not a wavelength")]
    Wavelength {
        /// What was given, nm.
        wavelength_nm: f64,
    },
}

/// Why a spectrum (a light source, a detector, a weight) was refused.
#[derive(Clone, Debug, PartialEq, Error)]
pub enum WeightError {
    /// Fewer than two rows.
    #[error("a table needs at least 2 rows, not {given}")]
    TooFew {
        /// How many there are.
        given: usize,
    },
    /// A row with a wavelength or a value that cannot be.
    #[error("row {row}: {what} is {value}, but must be {must}")]
    Row {
        /// The row, counted from 1.
        row: usize,
        /// The column.
        what: &'static str,
        /// What was given.
        value: f64,
        /// What it must be.
        must: &'static str,
    },
    /// A temperature that is not above 0 K.
    #[error("a black body of {kelvin} K does not shine")]
    Temperature {
        /// What was given, K.
        kelvin: f64,
    },
    /// The factors of a product have no wavelength in common.
    #[error("the factors have no wavelength in common")]
    NoCommonRange,
    /// A product of nothing.
    #[error("a product needs at least one factor")]
    NoFactor,
}

/// Why a stack could not be evaluated.
#[derive(Clone, Debug, Error)]
pub enum OpticsError {
    /// An angle that facets of upright pyramids can't have.
    #[error("facets of {facets_rad} rad: the angle must lie between 0 and π/2")]
    Facets {
        /// What was given, rad.
        facets_rad: f64,
    },
    /// Light that does not fall along the axes of the pyramids of a textured half-space.
    #[error("a textured half-space is evaluated at normal incidence, not at {angle_rad} rad")]
    Textured {
        /// What was asked for, rad.
        angle_rad: f64,
    },
    /// A material of the stack has no optical constants at a wavelength.
    #[error("{cause}")]
    Material {
        /// The material; compare with [`Index::same_as`] to find out which one it is.
        index: Index,
        /// What is missing.
        cause: IndexError,
    },
    /// The half-space that the light comes from absorbs.
    #[error("the incident medium absorbs: k = {k} at {wavelength_nm} nm")]
    AbsorbingIncident {
        /// The wavelength, nm.
        wavelength_nm: f64,
        /// The extinction coefficient there.
        k: f64,
    },
    /// An angle of incidence that is negative, 90° or more, or not a number.
    #[error("an angle of incidence of {angle_rad} rad is not from 0 to below 90°")]
    Angle {
        /// The angle, rad.
        angle_rad: f64,
    },
    /// A cone that reaches 90° of incidence, or a half-angle that is not an angle.
    #[error("a cone of half-angle {half_angle_rad} rad about {angle_rad} rad reaches 90°")]
    Cone {
        /// The axis' angle of incidence, rad.
        angle_rad: f64,
        /// The half-angle, rad.
        half_angle_rad: f64,
    },
    /// A thickness that is negative or not a number.
    #[error("a thickness of {thickness_nm} nm is not a thickness")]
    Thickness {
        /// The thickness, nm.
        thickness_nm: f64,
    },
    /// The number of coatings is not one more than the number of thick bodies.
    #[error("{coatings} coatings cannot stand about {bodies} thick bodies")]
    Shape {
        /// The coatings given.
        coatings: usize,
        /// The bodies given.
        bodies: usize,
    },
    /// A film or a body that the stack does not have.
    #[error("the stack has no such film or body")]
    NoSuchPlace,
    /// A band that is reversed, empty where it must not be, or not made of wavelengths.
    #[error("{} .. {} nm is not a band", band_nm.0, band_nm.1)]
    Band {
        /// The band given, nm.
        band_nm: (f64, f64),
    },
    /// The weight has no value in part of the band.
    #[error("the spectrum reaches from {} to {} nm, not over {} .. {} nm", range_nm.0, range_nm.1, band_nm.0, band_nm.1)]
    WeightOutside {
        /// The band asked for, nm.
        band_nm: (f64, f64),
        /// Where the weight has values, nm.
        range_nm: (f64, f64),
    },
    /// The weight is zero all over the band, so that there is no mean.
    #[error("the spectrum is zero over {} .. {} nm", band_nm.0, band_nm.1)]
    WeightZero {
        /// The band, nm.
        band_nm: (f64, f64),
    },
    /// An optical density where no light at all gets through.
    #[error("no light gets through at {wavelength_nm} nm: its optical density has no value")]
    Dark {
        /// The wavelength, nm.
        wavelength_nm: f64,
    },
    /// A field inside the films that has no meaning.
    #[error("there is no one field: {why}")]
    NoField {
        /// Why.
        why: &'static str,
    },
    /// A phase that has no meaning.
    #[error("there is no phase: {why}")]
    NoPhase {
        /// Why.
        why: &'static str,
    },
    /// The result did not settle to the accuracy promised.
    #[error("the result did not settle: {estimate} within {error}, near {wavelength_nm} nm")]
    NotConverged {
        /// The best estimate.
        estimate: f64,
        /// How uncertain it is.
        error: f64,
        /// Where the difficulty lies, nm.
        wavelength_nm: f64,
    },
    /// An intermediate result overflowed, or the power balance of a thin absorbing body has no solution.
    #[error("the stack has no finite result at {wavelength_nm} nm and {angle_rad} rad")]
    NotFinite {
        /// The wavelength, nm.
        wavelength_nm: f64,
        /// The angle of incidence, rad.
        angle_rad: f64,
    },
}
