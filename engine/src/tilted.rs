//! A prepared stack at one wavelength and angle: its coatings solved and joined.

use std::f64::consts::TAU;

use num_complex::Complex64;

use crate::bodies::{Between, Chain, Link};
use crate::coating::{Coating, Detail, Powers};
use crate::error::OpticsError;
use crate::facets;
use crate::matrix::{Medium, Mode, Step};
use crate::plan::{Layer, Plan};
use crate::real::Real;
use crate::response::{Absorption, Polarisation, Response};

/// A prepared stack at one wavelength and angle.
#[derive(Debug)]
pub(crate) struct Tilted<'a> {
    pub(crate) plan: &'a Plan,
    pub(crate) wavelength_nm: f64,
    pub(crate) angle_rad: f64,
    pub(crate) media: Vec<Medium<Complex64>>,
    pub(crate) steps: Vec<Vec<Step<Complex64>>>,
    /// The last coating as the facets of a textured half-space have it.
    pub(crate) facets: Vec<Facet>,
}

/// The last coating at the angle of one of the facets that light meets in turn.
#[derive(Debug)]
pub(crate) struct Facet {
    /// The share of the rays that come this far.
    pub(crate) share: f64,
    pub(crate) media: Vec<Medium<Complex64>>,
    pub(crate) steps: Vec<Step<Complex64>>,
}

impl Tilted<'_> {
    /// A result for the polarisation asked for, from those of the two modes.
    pub(crate) fn by<V>(
        &self,
        polarisation: Polarisation,
        of: impl Fn(Mode) -> Result<V, OpticsError>,
        mean: impl Fn(V, V) -> V,
    ) -> Result<V, OpticsError> {
        match polarisation {
            Polarisation::S => of(Mode::S),
            Polarisation::P => of(Mode::P),
            Polarisation::Mean => Ok(mean(of(Mode::S)?, of(Mode::P)?)),
        }
    }

    pub(crate) fn response(&self, mode: Mode) -> Result<Response, OpticsError> {
        Ok(self.chain(mode, Detail::Whole)?.response())
    }

    /// The absorptance of every film and body, the layers of a graded film taken together.
    pub(crate) fn absorption(&self, mode: Mode) -> Result<Absorption, OpticsError> {
        let mut absorption = self.chain(mode, Detail::ByFilm)?.absorption();
        for (shares, layers) in absorption.films.iter_mut().zip(&self.plan.coatings) {
            let films = layers.last().map_or(0, |layer| layer.film + 1);
            if films < layers.len() {
                let mut summed = vec![0.0; films];
                layers.iter().zip(&*shares).for_each(|(layer, share)| summed[layer.film] += share);
                *shares = summed;
            }
        }
        Ok(absorption)
    }

    /// The coatings and the bodies between them, with every number checked.
    fn chain(&self, mode: Mode, detail: Detail) -> Result<Chain<f64>, OpticsError> {
        let solve = |face: &Face<'_>, mode| face.solve(mode, detail).powers;
        let links = self.links(mode, &solve);
        Chain::new(links, self.between()).ok_or(self.not_finite())
    }

    /// The links of a chain, each face solved in one way.
    pub(crate) fn links<F: Real>(
        &self,
        mode: Mode,
        solve: &dyn Fn(&Face<'_>, Mode) -> Powers<F>,
    ) -> Vec<Link<F>> {
        let flat = self.flat();
        let mut links: Vec<Link<F>> = (0..flat)
            .map(|at| Link {
                front: solve(&self.face(at, Side::Front), mode),
                back: (at < self.plan.bodies.len()).then(|| solve(&self.face(at, Side::Back), mode)),
            })
            .collect();
        if flat < self.steps.len() {
            // Half of the facets face along the field and half across it, whatever the light's polarisation.
            let of = |mode| {
                let each = self.facets.iter().map(|facet| (solve(&self.on_facet(facet), mode), facet.share));
                facets::together(each)
            };
            links.push(Link { front: of(Mode::S).mean(&of(Mode::P)), back: None });
        }
        links
    }

    pub(crate) fn between(&self) -> Between {
        let bodies = &self.plan.bodies;
        let damping = |body: &Layer| {
            let decay = self.media[body.material].normal().im;
            -2.0 * TAU * decay * body.thickness_nm / self.wavelength_nm
        };
        let exit = self.plan.exit;
        Between {
            ln_passed: bodies.iter().map(damping).collect(),
            clear: bodies.iter().map(|body| self.media[body.material].index.im == 0.0).collect(),
            lossless: self.media.iter().enumerate().all(|(at, medium)| at == exit || medium.index.im == 0.0),
        }
    }

    /// How many coatings lie on flat faces, from the front.
    pub(crate) fn flat(&self) -> usize {
        self.steps.len() - usize::from(!self.facets.is_empty())
    }

    /// A coating as light from one side meets it.
    pub(crate) fn face(&self, coating: usize, side: Side) -> Face<'_> {
        let before = coating.checked_sub(1).map_or(0, |body| self.plan.bodies[body].material);
        let behind = self.plan.bodies.get(coating).map_or(self.plan.exit, |body| body.material);
        let (entry, exit) = if side == Side::Front { (before, behind) } else { (behind, before) };
        let (entry, exit) = (&self.media[entry], &self.media[exit]);
        Face { side, steps: &self.steps[coating], entry, exit }
    }

    pub(crate) fn on_facet<'a>(&'a self, facet: &'a Facet) -> Face<'a> {
        let entry = self.plan.bodies.last().map_or(0, |body| body.material);
        let (entry, exit) = (&facet.media[entry], &facet.media[self.plan.exit]);
        Face { side: Side::Front, steps: &facet.steps, entry, exit }
    }

    /// Every coating as light from the front meets it, on facets and on the flat: what has resonances.
    #[cfg(test)]
    pub(crate) fn resonators(&self, mode: Mode) -> impl Iterator<Item = Coating> {
        let flat = (0..self.flat()).map(move |at| self.face(at, Side::Front).solve(mode, Detail::Whole));
        flat.chain(
            self.facets.iter().flat_map(|facet| {
                [Mode::S, Mode::P].map(|mode| self.on_facet(facet).solve(mode, Detail::Whole))
            }),
        )
    }

    pub(crate) fn not_finite(&self) -> OpticsError {
        OpticsError::NotFinite { wavelength_nm: self.wavelength_nm, angle_rad: self.angle_rad }
    }
}

/// From which side light meets a coating.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Side {
    Front,
    Back,
}

/// A coating as light from one side meets it.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Face<'a> {
    pub(crate) side: Side,
    /// The films from the front of the stack, whatever the side.
    pub(crate) steps: &'a [Step<Complex64>],
    pub(crate) entry: &'a Medium<Complex64>,
    pub(crate) exit: &'a Medium<Complex64>,
}

impl Face<'_> {
    pub(crate) fn solve(&self, mode: Mode, detail: Detail) -> Coating {
        match self.side {
            Side::Front => Coating::solve(self.steps.iter(), self.entry, self.exit, mode, detail),
            Side::Back => Coating::solve(self.steps.iter().rev(), self.entry, self.exit, mode, detail),
        }
    }
}
