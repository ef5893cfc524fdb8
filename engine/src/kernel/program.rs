//! A stack's films in the order the kernels take them.

use std::collections::BTreeSet;
use std::sync::Arc;

use crate::plan::{Layer, Plan};

/// A coating's films in the order in which fields are carried through them.
#[derive(Clone, Debug)]
pub(crate) struct Order {
    /// For light from the front: the last film first.
    pub(crate) from_front: Vec<Layer>,
    /// For light from behind, where there can be any: the first film first.
    pub(crate) from_behind: Vec<Layer>,
    /// Of which media they are, each once.
    pub(crate) media: Arc<[usize]>,
}

/// What a kernel runs through.
#[derive(Clone, Debug)]
pub(crate) struct Program {
    pub(crate) coatings: Vec<Order>,
    pub(crate) bodies: Vec<Layer>,
    pub(crate) exit: usize,
    /// The share of the rays that come as far as each facet of a textured exit.
    pub(crate) facets: Vec<f64>,
}

impl Program {
    pub(crate) fn new(plan: &Plan) -> Program {
        let order = |(at, layers): (usize, &Vec<Layer>)| Order {
            from_front: layers.iter().rev().copied().collect(),
            from_behind: if at < plan.bodies.len() { layers.clone() } else { Vec::new() },
            media: layers.iter().map(|layer| layer.material).collect::<BTreeSet<_>>().into_iter().collect(),
        };
        Program {
            coatings: plan.coatings.iter().enumerate().map(order).collect(),
            bodies: plan.bodies.clone(),
            exit: plan.exit,
            facets: plan.bounces.iter().flatten().map(|bounce| bounce.share).collect(),
        }
    }

    /// How many coatings lie on flat faces, from the front.
    pub(crate) fn flat(&self) -> usize {
        self.coatings.len() - usize::from(!self.facets.is_empty())
    }

    /// The media before and behind a coating.
    pub(crate) fn sides(&self, coating: usize) -> (usize, usize) {
        let before = coating.checked_sub(1).map_or(0, |body| self.bodies[body].material);
        (before, self.bodies.get(coating).map_or(self.exit, |body| body.material))
    }

    /// How many values of N and D a point has.
    pub(crate) fn channels(&self, modes: usize) -> usize {
        self.flat() * modes + 2 * self.facets.len()
    }
}
