//! A recipe: a stack, in a chamber, that meets specifications.

use super::{Chamber, Requirement, Specification, Stack};
use crate::code::Code;
use crate::source::Place;
use crate::syntax::ast::Date;
use std::sync::Arc;

/// A recipe.
#[derive(Clone, Debug)]
pub struct Recipe {
    /// Its name.
    pub name: String,
    /// Its title, for people.
    pub title: Option<String>,
    /// Its name's place: its identity.
    pub place: Place,
    /// The `##` lines before it.
    pub description: Vec<String>,
    /// Its revision letter.
    pub revision: Option<String>,
    /// The chamber, and where the recipe names it.
    pub chamber: Option<(Arc<Chamber>, Place)>,
    /// The specifications, and where the recipe names each.
    pub meets: Vec<(Arc<Specification>, Place)>,
    /// For quarter-waves.
    pub reference: Option<Reference>,
    /// The stack; none where its statements were wrong.
    pub stack: Option<Stack>,
    /// Its own requirements.
    pub requirements: Vec<Arc<Requirement>>,
    /// Its waivers.
    pub waivers: Vec<Waiver>,
}

/// Where quarter-waves are counted.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Reference {
    /// Vacuum wavelength, nm.
    pub wavelength: f64,
    /// Angle of incidence, rad.
    pub angle: f64,
    /// The statement.
    pub place: Place,
}

/// A finding that the shop has decided to live with.
#[derive(Clone, Debug, PartialEq)]
pub struct Waiver {
    /// The code, one of a family that can be waived.
    pub code: Code,
    /// The layer, material or other name that it is limited to.
    pub on: Option<String>,
    /// The reason.
    pub because: String,
    /// Its last day.
    pub until: Option<Date>,
    /// The statement.
    pub place: Place,
}

impl Recipe {
    /// All requirements with the place that brings each in: those of its specifications, then its own.
    pub fn all_requirements(&self) -> impl Iterator<Item = (&Arc<Requirement>, Place)> {
        let met = self.meets.iter().flat_map(|(specification, place)| {
            specification.requirements.iter().map(move |requirement| (requirement, *place))
        });
        met.chain(self.requirements.iter().map(|requirement| (requirement, requirement.place)))
    }

    /// Whether it can be evaluated: its stack is whole and all its materials have constants.
    pub fn sound(&self) -> bool {
        self.stack.as_ref().is_some_and(|stack| {
            stack.incident.material.index.is_some()
                && stack.exit.material.index.is_some()
                && stack.elements.iter().all(|element| match element {
                    super::Element::Layer(layer) => {
                        layer.material.materials().all(|material| material.index.is_some())
                    }
                    super::Element::Body(body) => body.material.index.is_some(),
                })
        })
    }
}
