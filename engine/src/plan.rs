//! A stack prepared for evaluation: materials told apart by identity, so that each is evaluated once per
//! wavelength however often it is used.

use std::collections::HashMap;
use std::f64::consts::FRAC_PI_2;
use std::f64::consts::TAU;

use num_complex::Complex64;

use crate::dispersion::{Index, MixingRule, mix};
use crate::error::{IndexError, OpticsError};
use crate::facets::{Bounce, bounces};
use crate::graded::{Gradient, Profile, Steps};
use crate::matrix::{Medium, Step};
use crate::number::Number;
use crate::response::{Absorption, Polarisation, Response};
use crate::stack::{Film, Stack};
use crate::tilted::{Facet, Tilted};

/// A layer of a prepared stack.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Layer {
    /// The number of its medium: a material, then a mixture, then a mean.
    pub(crate) material: usize,
    pub(crate) thickness_nm: f64,
    /// The film of the stack that it belongs to.
    pub(crate) film: usize,
}

/// A medium that a graded film is of at one depth.
#[derive(Clone, Copy, Debug)]
struct Mixture {
    rule: MixingRule,
    front: usize,
    back: usize,
    /// Of the back material.
    share: f64,
}

/// The mean of two media with the share of the first, which may lie beyond 1.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Mean {
    pub(crate) one: usize,
    pub(crate) share: f64,
    pub(crate) other: usize,
    /// The share of the back material at the two faces of the layer that it stands for.
    faces: (f64, f64),
}

/// A well-formed stack. Material 0 is the incident medium's.
#[derive(Clone, Debug)]
pub(crate) struct Plan {
    pub(crate) materials: Vec<Index>,
    mixtures: Vec<Mixture>,
    pub(crate) means: Vec<Mean>,
    pub(crate) coatings: Vec<Vec<Layer>>,
    pub(crate) bodies: Vec<Layer>,
    pub(crate) exit: usize,
    /// The facets of the exit half-space that light meets, where it is textured.
    pub(crate) bounces: Option<Vec<Bounce>>,
}

impl Plan {
    pub(crate) fn new(stack: &Stack) -> Result<Plan, OpticsError> {
        let (coatings, bodies) = (stack.coatings.len(), stack.bodies.len());
        if coatings != bodies + 1 {
            return Err(OpticsError::Shape { coatings, bodies });
        }
        if let Some(facets_rad) = stack.facets_rad.filter(|angle| !(*angle > 0.0 && *angle < FRAC_PI_2)) {
            return Err(OpticsError::Facets { facets_rad });
        }
        let mut draft = Draft::default();
        draft.material(&stack.incident);
        // Every material has its number before the first mixture gets one.
        stack.materials().for_each(|index| _ = draft.material(index));
        let first_mean = draft.materials.len() + mixtures(stack);
        let mut planned = Vec::with_capacity(bodies + 1);
        for films in &stack.coatings {
            let mut layers = Vec::with_capacity(films.len());
            for (number, film) in films.iter().enumerate() {
                draft.film(number, film, first_mean, &mut layers)?;
            }
            planned.push(layers);
        }
        let mut thick = Vec::with_capacity(bodies);
        for body in &stack.bodies {
            let thickness_nm = checked(body.thickness_nm)?;
            thick.push(Layer { material: draft.material(&body.index), thickness_nm, film: 0 });
        }
        let exit = draft.material(&stack.exit);
        let bounces = stack.facets_rad.map(bounces);
        let Draft { materials, mixtures, means, .. } = draft;
        Ok(Plan { materials, mixtures, means, coatings: planned, bodies: thick, exit, bounces })
    }

    /// All media at one vacuum wavelength in nm: the materials, the mixtures, the means.
    pub(crate) fn indices(&self, wavelength_nm: f64) -> Result<Vec<Complex64>, OpticsError> {
        let mut indices = Vec::with_capacity(self.materials.len() + self.mixtures.len());
        for index in &self.materials {
            let at = |cause: IndexError| OpticsError::Material { index: index.clone(), cause };
            indices.push(index.at(wavelength_nm).map_err(at)?);
        }
        let k = indices[0].im;
        if k > 0.0 {
            return Err(OpticsError::AbsorbingIncident { wavelength_nm, k });
        }
        self.mix(&mut indices, wavelength_nm)?;
        Ok(indices)
    }

    /// The indices with the mixtures' after the materials'.
    pub(crate) fn mix<N: Number>(&self, indices: &mut Vec<N>, wavelength_nm: f64) -> Result<(), OpticsError> {
        for mixture in &self.mixtures {
            let square = |index: &N| index.clone() * index.clone();
            let (front, back) = (square(&indices[mixture.front]), square(&indices[mixture.back]));
            let parts = [(front, 1.0 - mixture.share), (back, mixture.share)];
            let index = mix(mixture.rule, &parts).sqrt();
            let value = index.value();
            if !value.is_finite() || value.re <= 0.0 || value.im < -1e-13 * value.re {
                let (index, (n, k)) = (self.materials[mixture.front].clone(), (value.re, value.im));
                let cause = IndexError::NotPhysical { wavelength_nm, n, k };
                return Err(OpticsError::Material { index, cause });
            }
            // A k that is zero but for the last digit of the arithmetic is zero.
            indices.push(if value.im < 0.0 { index.re() } else { index });
        }
        Ok(())
    }

    /// All media from the indices of materials and mixtures, for light of α = N sin θ.
    pub(crate) fn media<N: Number>(&self, indices: &[N], alpha: &N) -> Vec<Medium<N>> {
        let mut media: Vec<Medium<N>> =
            indices.iter().map(|index| Medium::new(index.clone(), alpha)).collect();
        for mean in &self.means {
            media.push(Medium::mean(&media[mean.one], mean.share, &media[mean.other]));
        }
        media
    }

    /// The same for light that comes from the incident medium at an angle in rad.
    pub(crate) fn tilted_media<N: Number>(&self, indices: &[N], angle_rad: f64) -> Vec<Medium<N>> {
        let mut media = self.media(indices, &indices[0].scale(angle_rad.sin()));
        media[0] = Medium::of_incidence(indices[0].clone(), angle_rad);
        media
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
        let media = self.tilted_media(indices, angle_rad);
        let steps = |films: &Vec<Layer>, media: &[Medium<Complex64>]| {
            let depth = |film: &Layer| Complex64::new(TAU / wavelength_nm * film.thickness_nm, 0.0);
            films.iter().map(|film| Step::new(&media[film.material], &depth(film))).collect()
        };
        let mut facets = Vec::new();
        if let Some(bounces) = &self.bounces {
            if angle_rad > 0.0 {
                return Err(OpticsError::Textured { angle_rad });
            }
            let entry = indices[self.bodies.last().map_or(0, |body| body.material)].re;
            for bounce in bounces {
                let alpha = Complex64::new(entry * bounce.angle_rad.sin(), 0.0);
                let media = self.media(indices, &alpha);
                let steps = steps(&self.coatings[self.bodies.len()], &media);
                facets.push(Facet { share: bounce.share, media, steps });
            }
        }
        let steps = self.coatings.iter().map(|films| steps(films, &media)).collect();
        Ok(Tilted { plan: self, wavelength_nm, angle_rad, media, steps, facets })
    }

    /// The stack at one wavelength and angle.
    pub(crate) fn at(&self, wavelength_nm: f64, angle_rad: f64) -> Result<Tilted<'_>, OpticsError> {
        self.tilted(&self.indices(wavelength_nm)?, wavelength_nm, angle_rad)
    }

    /// How many materials and mixtures there are: media with an index of their own.
    pub(crate) fn pure(&self) -> usize {
        self.materials.len() + self.mixtures.len()
    }

    /// Which of them are half-spaces or thick bodies.
    pub(crate) fn ends(&self) -> Vec<bool> {
        let mut ends = vec![false; self.pure()];
        let bodies = self.bodies.iter().map(|body| body.material);
        bodies.chain([0, self.exit]).for_each(|medium| ends[medium] = true);
        ends
    }

    /// How many films a coating has.
    pub(crate) fn films(&self, coating: usize) -> Option<usize> {
        Some(self.coatings.get(coating)?.last().map_or(0, |layer| layer.film + 1))
    }

    /// Whether a layer is half of a step through a smooth profile.
    pub(crate) fn is_smooth(&self, layer: &Layer) -> bool {
        layer.material >= self.materials.len() + self.mixtures.len()
    }

    /// The permittivity of a layer at a share of its depth, from the media's indices.
    pub(crate) fn permittivity(&self, layer: &Layer, indices: &[Complex64], depth: f64) -> Complex64 {
        let mean = layer.material.checked_sub(indices.len()).and_then(|mean| self.means.get(mean));
        let mixture = mean
            .and_then(|mean| self.mixtures.get(mean.one.checked_sub(self.materials.len())?).zip(Some(mean)));
        let Some((mixture, mean)) = mixture else { return indices[layer.material] * indices[layer.material] };
        let share = mean.faces.0 + (mean.faces.1 - mean.faces.0) * depth;
        let part = |material: usize, share: f64| (indices[material] * indices[material], share);
        mix(mixture.rule, &[part(mixture.front, 1.0 - share), part(mixture.back, share)])
    }

    /// Whether the exit half-space is textured.
    pub(crate) fn is_textured(&self) -> bool {
        self.bounces.is_some()
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

/// A thickness in nm that one can have.
fn checked(thickness_nm: f64) -> Result<f64, OpticsError> {
    if thickness_nm.is_finite() && thickness_nm >= 0.0 {
        Ok(thickness_nm)
    } else {
        Err(OpticsError::Thickness { thickness_nm })
    }
}

/// How many mixtures the graded films of a stack need.
fn mixtures(stack: &Stack) -> usize {
    let of = |film: &Film| match &film.profile {
        Profile::Uniform(_) => 0,
        Profile::Graded(Gradient { steps: Steps::Films(steps), .. }) => *steps as usize,
        Profile::Graded(Gradient { steps: Steps::Smooth(steps), .. }) => 2 * *steps as usize,
    };
    stack.coatings.iter().flatten().map(of).sum()
}

/// A plan's media as they get their numbers.
#[derive(Default)]
struct Draft {
    materials: Vec<Index>,
    known: HashMap<usize, usize>,
    mixtures: Vec<Mixture>,
    means: Vec<Mean>,
}

impl Draft {
    fn material(&mut self, index: &Index) -> usize {
        *self.known.entry(index.id()).or_insert_with(|| {
            self.materials.push(index.clone());
            self.materials.len() - 1
        })
    }

    /// Adds the layers of a film.
    fn film(
        &mut self,
        number: usize,
        film: &Film,
        first_mean: usize,
        layers: &mut Vec<Layer>,
    ) -> Result<(), OpticsError> {
        let thickness_nm = checked(film.thickness_nm)?;
        let gradient = match &film.profile {
            Profile::Uniform(index) => {
                layers.push(Layer { material: self.material(index), thickness_nm, film: number });
                return Ok(());
            }
            Profile::Graded(gradient) => gradient,
        };
        let (front, back) = (self.material(&gradient.front), self.material(&gradient.back));
        let (from, to) = gradient.shares;
        let share_at = |at: f64| (from + (to - from) * at).clamp(0.0, 1.0);
        let mut mixture = |at: f64| {
            let share = share_at(at);
            self.mixtures.push(Mixture { rule: gradient.rule, front, back, share });
            self.materials.len() + self.mixtures.len() - 1
        };
        match gradient.steps {
            Steps::Films(steps) => {
                let part = thickness_nm / f64::from(steps);
                for step in 0..steps {
                    let material = mixture((f64::from(step) + 0.5) / f64::from(steps));
                    layers.push(Layer { material, thickness_nm: part, film: number });
                }
            }
            Steps::Smooth(steps) => {
                // Gauss's two nodes, and the share of the nearer one in the mean over either half of a step.
                let (node, near) = (3.0_f64.sqrt() / 6.0, 0.5 + 3.0_f64.sqrt() / 3.0);
                let part = 0.5 * thickness_nm / f64::from(steps);
                for step in 0..steps {
                    let middle = f64::from(step) + 0.5;
                    let one = mixture((middle - node) / f64::from(steps));
                    let other = mixture((middle + node) / f64::from(steps));
                    for (one, other, start) in [(one, other, middle - 0.5), (other, one, middle)] {
                        let faces = [start, start + 0.5].map(|at| share_at(at / f64::from(steps)));
                        self.means.push(Mean { one, share: near, other, faces: faces.into() });
                        let material = first_mean + self.means.len() - 1;
                        layers.push(Layer { material, thickness_nm: part, film: number });
                    }
                }
            }
        }
        Ok(())
    }
}
