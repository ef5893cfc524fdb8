//! A stack in the light's order, whichever way it was written.

use super::{Material, Spread, Variation};
use crate::source::Place;
use std::sync::Arc;

/// A half-space at an end of the stack.
#[derive(Clone, Debug)]
pub struct Medium {
    /// Its material.
    pub material: Arc<Material>,
    /// The statement.
    pub place: Place,
    /// Whether it is the coated piece itself (`substrate` as a half-space).
    pub substrate: bool,
    /// The facets' angle in rad, where it is textured.
    pub textured: Option<(f64, Place)>,
}

/// A stack from the light's side to the far side.
#[derive(Clone, Debug)]
pub struct Stack {
    /// The block.
    pub place: Place,
    /// Whether it was written as the light meets it.
    pub written_from_incident: bool,
    /// Where the light comes from.
    pub incident: Medium,
    /// Layers and bodies as the light meets them.
    pub elements: Vec<Element>,
    /// The half-space behind.
    pub exit: Medium,
}

/// A layer or a body.
#[derive(Clone, Debug)]
pub enum Element {
    /// A film.
    Layer(Layer),
    /// A thick piece.
    Body(Body),
}

/// A thick piece: reflections at its sides add in power.
#[derive(Clone, Debug)]
pub struct Body {
    /// Its material.
    pub material: Arc<Material>,
    /// nm.
    pub thickness: f64,
    /// The coated piece or another.
    pub kind: BodyKind,
    /// The statement.
    pub place: Place,
    /// The facets' angle in rad, where it is textured.
    pub textured: Option<(f64, Place)>,
}

/// What a body is.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum BodyKind {
    /// The coated piece.
    Substrate,
    /// Another thick body.
    Slab,
}

/// How a thickness was written.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Thickness {
    /// As a length.
    Length,
    /// As so many quarter-waves at the reference.
    Quarters(f64),
}

/// A rule for the permittivity of a mixture.
pub use overcoat_engine::MixingRule;

/// A film whose composition runs through it.
#[derive(Clone, Debug)]
pub struct Graded {
    /// At the face that the light meets first.
    pub front: Arc<Material>,
    /// At the face behind.
    pub back: Arc<Material>,
    /// How the two mix.
    pub rule: MixingRule,
    /// In how many steps; as many as converge where none is said.
    pub steps: Option<u32>,
}

/// What a layer is made of.
#[derive(Clone, Debug)]
pub enum LayerMaterial {
    /// One material.
    Plain(Arc<Material>),
    /// From one to another.
    Graded(Graded),
}

impl LayerMaterial {
    /// The materials, one or two.
    pub fn materials(&self) -> impl Iterator<Item = &Arc<Material>> {
        let (first, second) = match self {
            LayerMaterial::Plain(material) => (material, None),
            LayerMaterial::Graded(graded) => (&graded.front, Some(&graded.back)),
        };
        std::iter::once(first).chain(second)
    }

    /// The name that people read: `nitride`, or `titania to silica`.
    pub fn name(&self) -> String {
        match self {
            LayerMaterial::Plain(material) => material.name.clone(),
            LayerMaterial::Graded(graded) => format!("{} to {}", graded.front.name, graded.back.name),
        }
    }
}

/// A film.
#[derive(Clone, Debug)]
pub struct Layer {
    /// Of what.
    pub material: LayerMaterial,
    /// nm.
    pub thickness: f64,
    /// How the thickness was written.
    pub written: Thickness,
    /// Its name after `as`, with an index inside a `repeat`: `flash[3]`.
    pub name: Option<String>,
    /// Its number in the order written, from 1, repeats counted out.
    pub number: usize,
    /// The statement.
    pub place: Place,
    /// The thickness as written.
    pub thickness_place: Place,
    /// Its own variation, in place of the chamber's `each layer`.
    pub variation: Option<Variation>,
    /// Whether refining must leave it.
    pub fixed: bool,
    /// What refining may make of it, nm.
    pub between: Option<(f64, f64)>,
    /// Roughness (rms) of its upper interface (the one away from the piece it lies on), nm, with its place.
    pub rough: Option<(f64, Place)>,
    /// How many times the block around it is repeated in all; 1 outside a `repeat`.
    pub copies: usize,
}

impl Layer {
    /// What to call it in a message: its name or its material with its number.
    pub fn call(&self) -> String {
        match &self.name {
            Some(name) => name.clone(),
            None => format!("{} (layer {})", self.material.name(), self.number),
        }
    }

    /// The size of its own variation in nm.
    pub fn own_spread(&self) -> Option<f64> {
        self.variation.as_ref().map(|variation| match variation.spread {
            Spread::Absolute(nm) => nm,
            Spread::Relative(share) => share * self.thickness,
        })
    }
}

/// One coated side of a piece: one run.
#[derive(Clone, Debug)]
pub struct CoatedSide {
    /// What the first layer lies on.
    pub base: Arc<Material>,
    /// Whether the light meets this side from outside (its layers lie before the piece).
    pub front: bool,
    /// Indices into [`Stack::elements`], in the order of deposition.
    pub layers: Vec<usize>,
}

impl Stack {
    /// The layers as the light meets them.
    pub fn layers(&self) -> impl Iterator<Item = &Layer> {
        self.elements.iter().filter_map(|element| match element {
            Element::Layer(layer) => Some(layer),
            Element::Body(_) => None,
        })
    }

    /// The coated sides: runs of layers, each on the coated piece beside it.
    ///
    /// Layers lie on the substrate that they touch; where they touch none, on the slab, else on the half-space
    /// behind, else on the one before.
    pub fn sides(&self) -> Vec<CoatedSide> {
        let mut sides = Vec::new();
        let mut at = 0;
        while at < self.elements.len() {
            let start = at;
            while at < self.elements.len() && matches!(self.elements[at], Element::Layer(_)) {
                at += 1;
            }
            if at > start {
                let before = start.checked_sub(1).and_then(|index| self.body(index));
                let behind = self.body(at);
                let layers = start..at;
                let behind_rank = rank(behind, &self.exit);
                let before_rank = rank(before, &self.incident);
                let front = behind_rank >= before_rank;
                let (body, half_space) = if front { (behind, &self.exit) } else { (before, &self.incident) };
                let base = body.map_or(&half_space.material, |body| &body.material).clone();
                let layers = if front { layers.rev().collect() } else { layers.collect() };
                sides.push(CoatedSide { base, front, layers });
            }
            at += 1;
        }
        sides
    }

    /// The layer at an index of [`Stack::elements`].
    pub fn layer(&self, index: usize) -> Option<&Layer> {
        match self.elements.get(index) {
            Some(Element::Layer(layer)) => Some(layer),
            _ => None,
        }
    }

    fn body(&self, index: usize) -> Option<&Body> {
        match self.elements.get(index) {
            Some(Element::Body(body)) => Some(body),
            _ => None,
        }
    }
}

/// How likely a neighbour is the piece that films are deposited on.
fn rank(body: Option<&Body>, half_space: &Medium) -> u8 {
    match body {
        Some(body) if body.kind == BodyKind::Substrate => 3,
        None if half_space.substrate => 3,
        Some(_) => 2,
        None => 1,
    }
}
