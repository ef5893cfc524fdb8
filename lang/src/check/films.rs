//! The films that stand for a stack's elements: one for a plain layer, a second one at a rough face.
//!
//! A rough interface of rms height σ becomes a film of half the one and half the other material by Bruggeman's rule, 2σ
//! thick and centred on the interface: each of the two films gives up σ. The rule is that of D. E. Aspnes, J. B. Theeten,
//! F. Hottier, Phys. Rev. B 20, 3292 (1979); the thickness is the one at which the transition's second moment is σ², to which
//! order it agrees with the exponential factor of L. Névot, P. Croce, Rev. Phys. Appl. 15, 761 (1980). It ends where σ is no
//! longer small against the wavelength in the films: light that is scattered is not in it.

use crate::model::{Element, Layer, Stack};
use overcoat_engine::{Index, MixingRule};

/// A film: its index and its thickness in nm.
pub(super) type Piece = (Index, f64);

/// Which of a stack's faces are rough, in terms of the elements that it lies between.
struct Rough {
    /// The rough layer.
    layer: usize,
    /// Whether its rough face is the one that the light meets first.
    front: bool,
    /// nm.
    rms: f64,
}

fn rough_faces(stack: &Stack) -> Vec<Rough> {
    let mut faces = Vec::new();
    for side in stack.sides() {
        for &index in &side.layers {
            let rms = stack.layer(index).and_then(|layer| layer.rough).map_or(0.0, |(rms, _)| rms);
            if rms > 0.0 {
                // The upper face is the one away from the piece that the film lies on.
                faces.push(Rough { layer: index, front: side.front, rms });
            }
        }
    }
    faces
}

/// The element on the other side of a rough face; none at an end of the stack.
fn beyond(stack: &Stack, face: &Rough) -> Option<usize> {
    if face.front {
        face.layer.checked_sub(1)
    } else {
        Some(face.layer + 1).filter(|at| *at < stack.elements.len())
    }
}

/// What is left of every layer between its rough faces, nm; a body keeps what it has.
fn cores(stack: &Stack) -> Vec<f64> {
    let mut left: Vec<f64> = stack
        .elements
        .iter()
        .map(|element| match element {
            Element::Layer(layer) => layer.thickness,
            Element::Body(_) => f64::INFINITY,
        })
        .collect();
    for face in rough_faces(stack) {
        left[face.layer] -= face.rms;
        if let Some(other) = beyond(stack, &face) {
            left[other] -= face.rms;
        }
    }
    left
}

/// Whether some roughness is as large as a film beside it: then there is no interface to speak of.
pub(super) fn too_rough(stack: &Stack) -> bool {
    cores(stack).iter().any(|left| *left < 0.0)
}

/// The films of every element, in the light's order: none for a body. None where a material has no index, which has been
/// reported.
pub(super) fn pieces(stack: &Stack) -> Option<Vec<Vec<Piece>>> {
    let index_of = |layer: &Layer| layer.material.materials().next()?.index.clone();
    let mut pieces: Vec<Vec<Piece>> = Vec::with_capacity(stack.elements.len());
    for (element, left) in stack.elements.iter().zip(cores(stack)) {
        pieces.push(match element {
            Element::Layer(layer) => vec![(index_of(layer)?, left.max(0.0))],
            Element::Body(_) => Vec::new(),
        });
    }
    for face in rough_faces(stack) {
        let own = index_of(stack.layer(face.layer)?)?;
        let other = match beyond(stack, &face).map(|at| &stack.elements[at]) {
            Some(Element::Layer(layer)) => index_of(layer)?,
            Some(Element::Body(body)) => body.material.index.clone()?,
            None if face.front => stack.incident.material.index.clone()?,
            None => stack.exit.material.index.clone()?,
        };
        let mixed = Index::mixture(MixingRule::Bruggeman, &[(own, 0.5), (other, 0.5)]).ok()?;
        let film = (mixed, 2.0 * face.rms);
        if face.front { pieces[face.layer].insert(0, film) } else { pieces[face.layer].push(film) }
    }
    Some(pieces)
}
