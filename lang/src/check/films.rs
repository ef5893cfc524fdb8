//! The films that stand for a stack's elements: one for a plain layer, a second one at a rough face.
//!
//! A rough interface of rms height σ becomes a film of half the one and half the other material by Bruggeman's rule, 2σ
//! thick and centred on the interface: each of the two films gives up σ. The rule is that of D. E. Aspnes, J. B. Theeten,
//! F. Hottier, Phys. Rev. B 20, 3292 (1979); the thickness is the one at which the transition's second moment is σ², to which
//! order it agrees with the exponential factor of L. Névot, P. Croce, Rev. Phys. Appl. 15, 761 (1980). It ends where σ is no
//! longer small against the wavelength in the films: light that is scattered is not in it.

use crate::model::{Element, Layer, LayerMaterial, Stack};
use overcoat_engine::{Film, Gradient, Index, MixingRule, Profile, Steps};

/// What a layer is made of between two of its depths, as shares of its thickness. None where a material has no index.
fn profile(layer: &Layer, from: f64, to: f64) -> Option<Profile> {
    Some(match &layer.material {
        LayerMaterial::Plain(material) => Profile::Uniform(material.index.clone()?),
        LayerMaterial::Graded(graded) => Profile::Graded(Gradient {
            front: graded.front.index.clone()?,
            back: graded.back.index.clone()?,
            shares: (from, to),
            rule: graded.rule,
            // How many steps an integrated profile needs is found where its light is known.
            steps: graded.steps.map_or(Steps::Smooth(1), Steps::Films),
        }),
    })
}

/// What a layer is made of at the face that the light meets first, or at the other.
fn at_face(layer: &Layer, front: bool) -> Option<Index> {
    match &layer.material {
        LayerMaterial::Graded(graded) if !front => graded.back.index.clone(),
        material => material.materials().next()?.index.clone(),
    }
}

/// The films of an element.
#[derive(Default)]
pub(super) struct Pieces {
    /// In the light's order.
    pub(super) films: Vec<Film>,
    /// Which of them is the layer itself.
    pub(super) core: usize,
}

/// The films of every element: none for a body. None where a material has no index, which has been
/// reported.
pub(super) fn pieces(stack: &Stack) -> Option<Vec<Pieces>> {
    let faces = stack.rough_faces();
    let mut pieces: Vec<Pieces> = Vec::with_capacity(stack.elements.len());
    for (at, (element, left)) in stack.elements.iter().zip(stack.cores()).enumerate() {
        let Element::Layer(layer) = element else {
            pieces.push(Pieces::default());
            continue;
        };
        // Between its rough faces a gradient is what it was.
        let cut = |front: bool| {
            let own = faces.iter().filter(|face| face.layer == at && face.front == front);
            let others = faces.iter().filter(|face| stack.across(face) == Some(at) && face.front != front);
            own.chain(others).map(|face| face.rms / layer.thickness.max(f64::MIN_POSITIVE)).sum::<f64>()
        };
        let profile = profile(layer, cut(true).min(1.0), (1.0 - cut(false)).max(0.0))?;
        let films = vec![Film { profile, thickness_nm: left.max(0.0) }];
        pieces.push(Pieces { films, core: 0 });
    }
    for face in faces {
        let own = at_face(stack.layer(face.layer)?, face.front)?;
        let other = match stack.across(&face).map(|at| &stack.elements[at]) {
            Some(Element::Layer(layer)) => at_face(layer, !face.front)?,
            Some(Element::Body(body)) => body.material.index.clone()?,
            None if face.front => stack.incident.material.index.clone()?,
            None => stack.exit.material.index.clone()?,
        };
        let mixed = Index::mixture(MixingRule::Bruggeman, &[(own, 0.5), (other, 0.5)]).ok()?;
        let film = Film::new(mixed, 2.0 * face.rms);
        let own = &mut pieces[face.layer];
        if face.front {
            own.films.insert(0, film);
            own.core += 1;
        } else {
            own.films.push(film);
        }
    }
    Some(pieces)
}
