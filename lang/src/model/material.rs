//! A material: optical constants and film properties.

use crate::source::Place;
use overcoat_engine::Index;

/// Where a material comes from.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Origin {
    /// A file of the project.
    Project,
    /// The library that comes with the tool.
    Handbook,
    /// In scope everywhere: air and vacuum.
    BuiltIn,
}

/// A material. Two are the same when their [`Material::place`] is.
#[derive(Clone, Debug)]
pub struct Material {
    /// Its name where it is defined.
    pub name: String,
    /// Its name's place: its identity.
    pub place: Place,
    /// The `##` lines before it.
    pub description: Vec<String>,
    /// Where it comes from.
    pub origin: Origin,
    /// Its optical constants; none where its statements were wrong.
    pub index: Option<Index>,
    /// Where its numbers come from.
    pub source: Option<String>,
    /// Materials that its index is made from: those of a mixture, or the one that it derives from.
    pub made_of: Vec<std::sync::Arc<Material>>,
    /// g/cm³.
    pub density: Option<f64>,
    /// MPa, negative for compressive.
    pub stress: Option<f64>,
    /// Printed with the run sheet.
    pub cautions: Vec<String>,
}

impl Material {
    /// Whether this and `other` are one material.
    pub fn is(&self, other: &Material) -> bool {
        self.place == other.place
    }
}
