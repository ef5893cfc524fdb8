//! Many parts of one recipe: the same films, each a little off in thickness or index, sampled at the same wavelengths.
//!
//! What the films' thicknesses have no part in is worked out once: the materials' indices at the wavelengths, and what they
//! are to each beam.

use std::collections::BTreeMap;

use crate::band::Probe;
use crate::error::OpticsError;
use crate::graded::{Gradient, Profile};
use crate::kernel::{Beam, Points, Program};
use crate::plan::{Layer, Plan};
use crate::quantity::{Light, Quantity};
use crate::stack::{Film, Stack};

/// How one film of a part is off.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Change {
    /// The coating and the film within it, from 0, in the light's order.
    pub film: (usize, usize),
    /// By how much it is thicker, nm; a film is never thinner than nothing.
    pub growth_nm: f64,
    /// By how much its n is greater.
    pub shift: f64,
}

/// One quantity of a stack, prepared for many parts.
#[derive(Debug)]
pub struct Sampler {
    stack: Stack,
    quantity: Quantity,
    plan: Plan,
    program: Program,
    /// The thickness of every film, by coating, nm.
    whole: Vec<Vec<f64>>,
    beams: Vec<Sampled>,
    /// The media of the films whose index may be off, each film's its own; none for a graded one.
    shifted: BTreeMap<(usize, usize), Option<usize>>,
}

/// Wavelengths under one beam.
#[derive(Debug)]
struct Sampled {
    light: Light,
    wavelengths_nm: Vec<f64>,
    points: Points,
    /// For a parallel beam.
    beam: Option<Beam>,
}

impl Sampler {
    /// For beams, each with the vacuum wavelengths in nm at which it is looked at, and for parts in which the indices of some films
    /// (coating and film, from 0) may be off.
    ///
    /// # Errors
    /// As [`values`](crate::values).
    pub fn new(
        stack: &Stack,
        quantity: &Quantity,
        beams: &[(Light, Vec<f64>)],
        off: &[(usize, usize)],
    ) -> Result<Sampler, OpticsError> {
        let mut stack = stack.clone();
        for &(coating, film) in off {
            // A material of its own, with which it can be off for itself.
            let film = stack.coatings.get_mut(coating).and_then(|films| films.get_mut(film));
            let film = film.ok_or(OpticsError::NoSuchPlace)?;
            if let Profile::Uniform(index) = &mut film.profile {
                *index = index.shifted(0.0).map_err(|_| OpticsError::NoSuchPlace)?;
            }
        }
        let plan = Plan::new(&stack)?;
        let medium = |&(coating, film): &(usize, usize)| {
            let is_graded = matches!(stack.coatings[coating][film].profile, Profile::Graded(_));
            let layer = plan.coatings[coating].iter().find(|layer| layer.film == film);
            ((coating, film), layer.filter(|_| !is_graded).map(|layer| layer.material))
        };
        let shifted = off.iter().map(medium).collect();
        let mut sampled = Vec::with_capacity(beams.len());
        for (light, wavelengths_nm) in beams {
            let points = Points::new(&plan, wavelengths_nm)?;
            let parallel = light.cone_half_angle_rad == 0.0;
            let beam = if parallel { Some(Beam::new(&plan, &points, &[light.angle_rad])?) } else { None };
            sampled.push(Sampled { light: *light, wavelengths_nm: wavelengths_nm.clone(), points, beam });
        }
        let program = Program::new(&plan);
        let thickness = |films: &Vec<Film>| films.iter().map(|film| film.thickness_nm).collect();
        let whole = stack.coatings.iter().map(thickness).collect();
        Ok(Sampler { whole, stack, quantity: quantity.clone(), plan, program, beams: sampled, shifted })
    }

    /// A part whose films are off by so much.
    ///
    /// # Errors
    /// A film that the stack does not have; one off in its index that was not named before.
    pub fn part(&self, changes: &[Change]) -> Result<Part<'_>, OpticsError> {
        let mut part = Part { sampler: self, program: self.program.clone(), shifts: Vec::new(), stack: None };
        let in_full = matches!(self.quantity, Quantity::Phase(..) | Quantity::PeakField);
        let graded = |change: &Change| change.shift != 0.0 && self.shifted.get(&change.film) == Some(&None);
        if in_full || changes.iter().any(graded) {
            part.stack = Some(self.changed(changes)?);
            return Ok(part);
        }
        let mut growth: Vec<Vec<f64>> = self.whole.iter().map(|films| vec![0.0; films.len()]).collect();
        for change in changes {
            let (coating, film) = change.film;
            let own = growth.get_mut(coating).and_then(|films| films.get_mut(film));
            *own.ok_or(OpticsError::NoSuchPlace)? += change.growth_nm;
            if change.shift != 0.0 {
                let medium = self.shifted.get(&change.film).copied().flatten();
                part.shifts.push((medium.ok_or(OpticsError::NoSuchPlace)?, change.shift));
            }
        }
        for ((order, growth), whole) in part.program.coatings.iter_mut().zip(&growth).zip(&self.whole) {
            grow(&mut order.from_front, growth, whole);
            grow(&mut order.from_behind, growth, whole);
        }
        Ok(part)
    }

    /// The whole stack of a part.
    fn changed(&self, changes: &[Change]) -> Result<Stack, OpticsError> {
        let mut stack = self.stack.clone();
        for change in changes {
            let films = stack.coatings.get_mut(change.film.0);
            let film =
                films.and_then(|films| films.get_mut(change.film.1)).ok_or(OpticsError::NoSuchPlace)?;
            film.thickness_nm = (film.thickness_nm + change.growth_nm).max(0.0);
            if change.shift != 0.0 {
                let shifted =
                    |index: &crate::Index| index.shifted(change.shift).map_err(|_| OpticsError::NoSuchPlace);
                film.profile = match &film.profile {
                    Profile::Uniform(index) => Profile::Uniform(shifted(index)?),
                    Profile::Graded(gradient) => Profile::Graded(Gradient {
                        front: shifted(&gradient.front)?,
                        back: shifted(&gradient.back)?,
                        ..gradient.clone()
                    }),
                };
            }
        }
        Ok(stack)
    }
}

/// Makes the layers of every film thicker, each in its share; `whole` are the films' thicknesses as written.
fn grow(layers: &mut [Layer], growth: &[f64], whole: &[f64]) {
    for film in layers.chunk_by_mut(|one, next| one.film == next.film) {
        let (growth, whole) = (growth[film[0].film], whole[film[0].film]);
        let (grown, even) = ((whole + growth).max(0.0), 1.0 / film.len() as f64);
        for layer in film.iter_mut().filter(|_| growth != 0.0) {
            let share = if whole > 0.0 { layer.thickness_nm / whole } else { even };
            layer.thickness_nm = share * grown;
        }
    }
}

/// One part.
#[derive(Debug)]
pub struct Part<'a> {
    sampler: &'a Sampler,
    program: Program,
    /// By how much which media are off.
    shifts: Vec<(usize, f64)>,
    /// Where it can't be told by layers and media alone.
    stack: Option<Stack>,
}

impl Part<'_> {
    /// The quantity at the wavelengths of a beam, by its number, with its light as it meets this part.
    ///
    /// # Errors
    /// As [`values`](crate::values).
    pub fn values(&self, beam: usize, light: &Light) -> Result<Vec<f64>, OpticsError> {
        let sampler = self.sampler;
        let sampled = sampler.beams.get(beam).ok_or(OpticsError::NoSuchPlace)?;
        if let Some(stack) = &self.stack {
            return crate::values(stack, &sampler.quantity, light, &sampled.wavelengths_nm);
        }
        let probe = Probe::prepared(&sampler.plan, &self.program, &sampler.quantity, light)?;
        let points = self.points(sampled)?;
        match &sampled.beam {
            Some(beam) if *light == sampled.light && self.shifts.is_empty() => {
                probe.values_under(beam, &sampled.points)
            }
            _ => probe.values_at(points.as_ref().unwrap_or(&sampled.points)),
        }
    }

    /// The points with this part's indices, where they are not those of the recipe.
    fn points(&self, sampled: &Sampled) -> Result<Option<Points>, OpticsError> {
        if self.shifts.is_empty() {
            return Ok(None);
        }
        let mut points = sampled.points.clone();
        for &(medium, dn) in &self.shifts {
            points.shift(medium, dn);
            let failed =
                |cause| OpticsError::Material { index: self.sampler.plan.materials[medium].clone(), cause };
            points.check(medium).map_err(failed)?;
        }
        Ok(Some(points))
    }
}
