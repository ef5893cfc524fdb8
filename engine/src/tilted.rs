//! A prepared stack at one wavelength and angle: its coatings solved and joined.

use std::f64::consts::TAU;

use num_complex::Complex64;

use crate::bodies::{Chain, Link};
use crate::coating::{Coating, Detail};
use crate::error::OpticsError;
use crate::matrix::{Medium, Mode, Step};
use crate::plan::{Layer, Plan};
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
    pub(crate) fn chain(&self, mode: Mode, detail: Detail) -> Result<Chain, OpticsError> {
        let mut coatings: Vec<Link> = (0..self.steps.len()).map(|at| self.link(at, mode, detail)).collect();
        if let (false, Some(last)) = (self.facets.is_empty(), coatings.last_mut()) {
            // Half of the facets face along the field and half across it, whatever the light's polarisation.
            let [s, p] = [Mode::S, Mode::P].map(|mode| self.textured(mode, detail));
            last.front = s.mean(&p);
        }
        let bodies = &self.plan.bodies;
        let damping = |body: &Layer| {
            let decay = self.media[body.material].normal().im;
            -2.0 * TAU * decay * body.thickness_nm / self.wavelength_nm
        };
        let clear: Vec<bool> = bodies.iter().map(|body| self.media[body.material].index.im == 0.0).collect();
        let lossless =
            self.media.iter().enumerate().all(|(at, medium)| at == self.plan.exit || medium.index.im == 0.0);
        let ln_passed = bodies.iter().map(damping).collect();
        Chain::new(coatings, ln_passed, clear, lossless).ok_or(self.not_finite())
    }

    /// A coating from the front, and from behind where a body lies behind it.
    fn link(&self, at: usize, mode: Mode, detail: Detail) -> Link {
        let entry = if at == 0 { 0 } else { self.plan.bodies[at - 1].material };
        let body = self.plan.bodies.get(at);
        let exit = body.map_or(self.plan.exit, |body| body.material);
        let (entry, exit) = (&self.media[entry], &self.media[exit]);
        let steps = &self.steps[at];
        Link {
            front: Coating::solve(steps.iter(), entry, exit, mode, detail),
            back: body.map(|_| Coating::solve(steps.iter().rev(), exit, entry, mode, detail)),
        }
    }

    /// Every coating as light from the front meets it, on facets and on the flat: what has resonances.
    pub(crate) fn resonators(&self, mode: Mode) -> impl Iterator<Item = Coating> {
        let flat = self.steps.len() - usize::from(!self.facets.is_empty());
        let flat = (0..flat).map(move |at| self.link(at, mode, Detail::Whole).front);
        flat.chain(
            self.facets
                .iter()
                .flat_map(|facet| [Mode::S, Mode::P].map(|mode| self.on_facet(facet, mode, Detail::Whole))),
        )
    }

    fn on_facet(&self, facet: &Facet, mode: Mode, detail: Detail) -> Coating {
        let entry = self.plan.bodies.last().map_or(0, |body| body.material);
        let (entry, exit) = (&facet.media[entry], &facet.media[self.plan.exit]);
        Coating::solve(facet.steps.iter(), entry, exit, mode, detail)
    }

    /// All facets together: at each, what arrives is what the ones before reflect.
    fn textured(&self, mode: Mode, detail: Detail) -> Coating {
        let mut met = self.facets.iter().map(|facet| self.on_facet(facet, mode, detail));
        let Some(mut whole) = met.next() else { return self.link(self.steps.len() - 1, mode, detail).front };
        // The light that the facets so far return, of the rays that come as far as the last of them.
        let mut returned = whole.reflectance;
        whole.reflectance = 0.0;
        let mut share = 1.0;
        for (coating, facet) in met.zip(&self.facets[1..]) {
            whole.reflectance += (share - facet.share) * returned;
            share = facet.share;
            let arriving = share * returned;
            whole.transmittance += arriving * coating.transmittance;
            whole.films.iter_mut().zip(&coating.films).for_each(|(sum, film)| *sum += arriving * film);
            returned *= coating.reflectance;
        }
        whole.reflectance += share * returned;
        whole.ln_transmittance = whole.transmittance.ln();
        whole
    }

    fn not_finite(&self) -> OpticsError {
        OpticsError::NotFinite { wavelength_nm: self.wavelength_nm, angle_rad: self.angle_rad }
    }
}
