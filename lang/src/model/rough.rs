//! A stack's rough faces, and what they leave of the films beside them.

use super::{Element, Layer, Stack};

/// A rough face of a layer.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct RoughFace {
    /// The rough layer, as an index into [`Stack::elements`].
    pub layer: usize,
    /// Whether its rough face is the one that the light meets first.
    pub front: bool,
    /// The rms height, nm.
    pub rms: f64,
}

impl Stack {
    /// The rough faces: of every layer the one away from the piece that it lies on.
    pub fn rough_faces(&self) -> Vec<RoughFace> {
        let mut faces = Vec::new();
        for side in self.sides() {
            for &layer in &side.layers {
                let rms = self.layer(layer).and_then(|layer| layer.rough).map_or(0.0, |(rms, _)| rms);
                if rms > 0.0 {
                    faces.push(RoughFace { layer, front: side.front, rms });
                }
            }
        }
        faces
    }

    /// The element on the other side of a rough face; none at an end of the stack.
    pub fn across(&self, face: &RoughFace) -> Option<usize> {
        if face.front {
            face.layer.checked_sub(1)
        } else {
            Some(face.layer + 1).filter(|at| *at < self.elements.len())
        }
    }

    /// What is left of every layer between its rough faces, nm: below zero where there is no interface to speak of. A body
    /// keeps what it has.
    pub fn cores(&self) -> Vec<f64> {
        let thickness = |element: &Element| match element {
            Element::Layer(layer) => layer.thickness,
            Element::Body(_) => f64::INFINITY,
        };
        let mut left: Vec<f64> = self.elements.iter().map(thickness).collect();
        for face in self.rough_faces() {
            left[face.layer] -= face.rms;
            if let Some(other) = self.across(&face) {
                left[other] -= face.rms;
            }
        }
        left
    }

    /// The first layer that is thinner than the roughness of its faces leaves it, with the roughest layer at them.
    pub fn too_rough(&self) -> Option<(&Layer, &Layer)> {
        let thin = self.cores().iter().position(|left| *left < 0.0)?;
        let beside = |face: &RoughFace| face.layer == thin || self.across(face) == Some(thin);
        let faces = self.rough_faces().into_iter().filter(beside);
        let roughest = faces.max_by(|a, b| a.rms.total_cmp(&b.rms))?;
        Some((self.layer(thin)?, self.layer(roughest.layer)?))
    }
}
