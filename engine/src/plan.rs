//! A stack prepared for evaluation: materials told apart by identity, so that each is evaluated once per
//! wavelength however often it is used.

use std::collections::HashMap;
use std::f64::consts::FRAC_PI_2;
use std::f64::consts::TAU;

use num_complex::Complex64;

use crate::bodies::{Chain, Link};
use crate::coating::{Coating, Detail};
use crate::dispersion::Index;
use crate::error::{IndexError, OpticsError};
use crate::matrix::{Medium, Mode, Step};
use crate::response::{Absorption, Polarisation, Response};
use crate::stack::Stack;

/// A layer of a prepared stack: the number of its material, its thickness in nm.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Layer {
    pub(crate) material: usize,
    pub(crate) thickness_nm: f64,
}

/// A well-formed stack. Material 0 is the incident medium's.
#[derive(Clone, Debug)]
pub(crate) struct Plan {
    pub(crate) materials: Vec<Index>,
    pub(crate) coatings: Vec<Vec<Layer>>,
    pub(crate) bodies: Vec<Layer>,
    pub(crate) exit: usize,
}

impl Plan {
    pub(crate) fn new(stack: &Stack) -> Result<Plan, OpticsError> {
        let (coatings, bodies) = (stack.coatings.len(), stack.bodies.len());
        if coatings != bodies + 1 {
            return Err(OpticsError::Shape { coatings, bodies });
        }
        let mut materials: Vec<Index> = Vec::new();
        let mut known: HashMap<usize, usize> = HashMap::new();
        let mut number = |index: &Index| {
            *known.entry(index.id()).or_insert_with(|| {
                materials.push(index.clone());
                materials.len() - 1
            })
        };
        number(&stack.incident);
        let mut layer = |index: &Index, thickness_nm: f64| {
            if thickness_nm.is_finite() && thickness_nm >= 0.0 {
                Ok(Layer { material: number(index), thickness_nm })
            } else {
                Err(OpticsError::Thickness { thickness_nm })
            }
        };
        let mut coatings = Vec::with_capacity(bodies + 1);
        for films in &stack.coatings {
            let films: Result<Vec<Layer>, _> =
                films.iter().map(|film| layer(&film.index, film.thickness_nm)).collect();
            coatings.push(films?);
        }
        let bodies: Result<Vec<Layer>, _> =
            stack.bodies.iter().map(|body| layer(&body.index, body.thickness_nm)).collect();
        let bodies = bodies?;
        let exit = layer(&stack.exit, 0.0)?.material;
        Ok(Plan { materials, coatings, bodies, exit })
    }

    /// All materials at one vacuum wavelength in nm.
    pub(crate) fn indices(&self, wavelength_nm: f64) -> Result<Vec<Complex64>, OpticsError> {
        let mut indices = Vec::with_capacity(self.materials.len());
        for index in &self.materials {
            let at = |cause: IndexError| OpticsError::Material { index: index.clone(), cause };
            indices.push(index.at(wavelength_nm).map_err(at)?);
        }
        let k = indices[0].im;
        if k > 0.0 { Err(OpticsError::AbsorbingIncident { wavelength_nm, k }) } else { Ok(indices) }
    }

    /// The stack at one wavelength and one angle of incidence in rad, from the materials' indices there.
    pub(crate) fn tilted(
        &self,
        indices: &[Complex64],
        wavelength_nm: f64,
        angle_rad: f64,
    ) -> Result<Tilted<'_>, OpticsError> {
        if !(0.0..FRAC_PI_2).contains(&angle_rad) {
            return Err(OpticsError::Angle { angle_rad });
        }
        let incident = indices[0];
        let alpha = incident * angle_rad.sin();
        let mut media: Vec<Medium<Complex64>> =
            indices.iter().map(|&index| Medium::new(index, &alpha)).collect();
        // The incident medium's own is known without the loss of digits near grazing incidence.
        media[0].normal_squared = incident * incident * angle_rad.cos().powi(2);
        let wave_number = TAU / wavelength_nm;
        let step = |film: &Layer| {
            Step::new(&media[film.material], &Complex64::new(wave_number * film.thickness_nm, 0.0))
        };
        let steps = self.coatings.iter().map(|films| films.iter().map(step).collect()).collect();
        Ok(Tilted { plan: self, wavelength_nm, angle_rad, media, steps })
    }

    /// The stack at one wavelength and angle.
    pub(crate) fn at(&self, wavelength_nm: f64, angle_rad: f64) -> Result<Tilted<'_>, OpticsError> {
        self.tilted(&self.indices(wavelength_nm)?, wavelength_nm, angle_rad)
    }

    pub(crate) fn response(
        &self,
        wavelength_nm: f64,
        angle_rad: f64,
        polarisation: Polarisation,
    ) -> Result<Response, OpticsError> {
        let tilted = self.at(wavelength_nm, angle_rad)?;
        tilted.by(polarisation, |mode| tilted.response(mode), Response::mean)
    }

    pub(crate) fn absorption(
        &self,
        wavelength_nm: f64,
        angle_rad: f64,
        polarisation: Polarisation,
    ) -> Result<Absorption, OpticsError> {
        let tilted = self.at(wavelength_nm, angle_rad)?;
        tilted.by(polarisation, |mode| tilted.absorption(mode), Absorption::mean)
    }
}

/// A prepared stack at one wavelength and angle.
#[derive(Debug)]
pub(crate) struct Tilted<'a> {
    plan: &'a Plan,
    wavelength_nm: f64,
    angle_rad: f64,
    media: Vec<Medium<Complex64>>,
    steps: Vec<Vec<Step<Complex64>>>,
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

    pub(crate) fn absorption(&self, mode: Mode) -> Result<Absorption, OpticsError> {
        Ok(self.chain(mode, Detail::ByFilm)?.absorption())
    }

    /// The coatings and the bodies between them, with every number checked.
    pub(crate) fn chain(&self, mode: Mode, detail: Detail) -> Result<Chain, OpticsError> {
        let coatings = self.coatings(mode, detail);
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

    /// Every coating from the front, and from behind where a body lies behind it.
    pub(crate) fn coatings(&self, mode: Mode, detail: Detail) -> Vec<Link> {
        let link = |at: usize| {
            let entry = if at == 0 { 0 } else { self.plan.bodies[at - 1].material };
            let body = self.plan.bodies.get(at);
            let exit = body.map_or(self.plan.exit, |body| body.material);
            let (entry, exit) = (&self.media[entry], &self.media[exit]);
            let steps = &self.steps[at];
            Link {
                front: Coating::solve(steps.iter(), entry, exit, mode, detail),
                back: body.map(|_| Coating::solve(steps.iter().rev(), exit, entry, mode, detail)),
            }
        };
        (0..self.steps.len()).map(link).collect()
    }

    fn not_finite(&self) -> OpticsError {
        OpticsError::NotFinite { wavelength_nm: self.wavelength_nm, angle_rad: self.angle_rad }
    }
}
