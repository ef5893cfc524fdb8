//! The field inside the films, and where it is greatest: what decides which film a strong beam breaks first.
//!
//! The tangential pair (B, C) at a depth follows from that at the film's back face by the matrix of what lies between. For s
//! the electric field is B, for p its components are B along the film and α C/N² across it; both refer to the field of
//! the wave that arrives. Source: O. Arnon, P. Baumeister, Appl. Opt. 19, 1853–1855 (1980).

use num_complex::Complex64;

use crate::adjoint::Passage;
use crate::band::minimum_between;
use crate::error::OpticsError;
use crate::matrix::{Medium, Mode, Pair, Step};
use crate::plan::Plan;
use crate::quantity::Light;
use crate::slopes::Slopes;
use crate::stack::Stack;

/// The greatest |E/E₀|² inside the films.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Peak {
    /// |E/E₀|².
    pub value: f64,
    /// The film, from 0, in the light's order.
    pub film: usize,
    /// The depth below that film's front face, nm.
    pub depth_nm: f64,
}

/// The greatest |E/E₀|² inside the films of a stack without thick bodies, at a vacuum wavelength in nm; E₀ is the field that
/// arrives. Without polarisation it is the mean of s and p, at one and the same depth.
///
/// In each film the standing wave is followed at sixteen points and more a wave, and its crests are closed in on.
///
/// # Errors
/// As [`value`](crate::value); [`OpticsError::NoField`] for a stack with a thick body, without films, or under a cone.
pub fn peak_field(stack: &Stack, light: &Light, wavelength_nm: f64) -> Result<Peak, OpticsError> {
    peak(&plan(stack)?, light, wavelength_nm)
}

/// A stack prepared for fields, with steps through smooth profiles fine enough to see every crest.
pub(crate) fn plan(stack: &Stack) -> Result<Plan, OpticsError> {
    Plan::new(&stack.refined(8))
}

/// The same of a stack prepared for fields.
pub(crate) fn peak(plan: &Plan, light: &Light, wavelength_nm: f64) -> Result<Peak, OpticsError> {
    if !plan.bodies.is_empty() {
        return Err(OpticsError::NoField {
            why: "behind a thick piece the waves add in power, not in amplitude",
        });
    }
    if plan.is_textured() {
        return Err(OpticsError::NoField {
            why: "on a textured face every ray has met facets at its own places",
        });
    }
    if light.cone_half_angle_rad > 0.0 {
        return Err(OpticsError::NoField { why: "the rays of a cone have fields of their own" });
    }
    // The plain evaluation has every check, of angles and of incident media that absorb among them.
    plan.at(wavelength_nm, light.angle_rad)?;
    let inside = Inside::new(plan, light, wavelength_nm)?;
    let mut best: Option<Peak> = None;
    let mut at = 0;
    for layers in plan.coatings[0].chunk_by(|one, next| one.film == next.film) {
        let film = layers[0].film;
        // The depth below the film's front face.
        let mut front = 0.0;
        let mut found = Vec::new();
        if plan.is_smooth(&layers[0]) {
            found.push(inside.crest(at..at + layers.len()));
        } else {
            for (place, layer) in layers.iter().enumerate() {
                let peak = inside.peak(at + place)?;
                found.push((front + peak.0, peak.1));
                front += layer.thickness_nm;
            }
        }
        for (depth_nm, value) in found {
            if best.is_none_or(|best| value > best.value) {
                best = Some(Peak { value, film, depth_nm });
            }
        }
        at += layers.len();
    }
    let best = best.ok_or(OpticsError::NoField { why: "there is no film to have one" })?;
    if best.value.is_finite() {
        Ok(best)
    } else {
        Err(OpticsError::NotFinite { wavelength_nm, angle_rad: light.angle_rad })
    }
}

/// The greatest |E/E₀|² with its derivatives in the thickness of every film, per nm. Where the field is greatest it does not
/// change with the depth, so that following the place changes nothing.
pub(crate) fn slopes(plan: &Plan, light: &Light, wavelength_nm: f64) -> Result<Slopes, OpticsError> {
    let found = peak(plan, light, wavelength_nm)?;
    let inside = Inside::new(plan, light, wavelength_nm)?;
    // The layer that holds the peak, and the depth in it.
    let mut depth_nm = found.depth_nm;
    let layers = &plan.coatings[0];
    let mut layer = layers.iter().position(|layer| layer.film == found.film).unwrap_or(0);
    while depth_nm > layers[layer].thickness_nm
        && layers.get(layer + 1).is_some_and(|next| next.film == found.film)
    {
        depth_nm -= layers[layer].thickness_nm;
        layer += 1;
    }
    Ok(Slopes::by_film(plan, found.value, &[inside.slopes(layer, depth_nm)]))
}

/// The fields at the back faces of all films.
struct Inside<'a> {
    plan: &'a Plan,
    indices: Vec<Complex64>,
    media: Vec<Medium<Complex64>>,
    alpha: Complex64,
    wave_number: f64,
    /// For each polarisation with a share: the share over |E₀|², the logarithm of the scale that E₀ is known in, and the
    /// pairs at the back faces in the light's order.
    modes: Vec<(Mode, f64, f64, Vec<Pair<Complex64>>)>,
}

impl Inside<'_> {
    fn new<'a>(plan: &'a Plan, light: &Light, wavelength_nm: f64) -> Result<Inside<'a>, OpticsError> {
        let indices = plan.indices(wavelength_nm)?;
        let alpha = indices[0] * light.angle_rad.sin();
        let media = plan.tilted_media(&indices, light.angle_rad);
        let wave_number = std::f64::consts::TAU / wavelength_nm;
        let mut modes = Vec::new();
        for (mode, share) in [Mode::S, Mode::P].into_iter().zip(light.polarisation.shares()) {
            if share == 0.0 {
                continue;
            }
            let mut pair = media[plan.exit].wave(mode);
            let mut backs = Vec::new();
            for layer in plan.coatings[0].iter().rev() {
                backs.push(pair.clone());
                let depth = Complex64::new(wave_number * layer.thickness_nm, 0.0);
                pair = Step::new(&media[layer.material], &depth).carry(&pair, mode);
            }
            backs.reverse();
            // The arriving wave's part of the fields at the front: (c₀ B + b₀ C)/2 b₀ c₀ times (b₀, c₀), whose field is 1.
            let arriving = media[0].wave(mode);
            let sum = arriving.c * pair.b + arriving.b * pair.c;
            let amplitude = sum / (2.0 * arriving.b * arriving.c);
            modes.push((mode, share / amplitude.norm_sqr(), pair.ln_scale, backs));
        }
        Ok(Inside { plan, indices, media, alpha, wave_number, modes })
    }

    /// |E/E₀|² at a depth in nm below a film's front face.
    fn square(&self, layer: usize, depth_nm: f64) -> f64 {
        let (film, layer) = (layer, &self.plan.coatings[0][layer]);
        let medium = &self.media[layer.material];
        let rest = Complex64::new(self.wave_number * (layer.thickness_nm - depth_nm).max(0.0), 0.0);
        let step = Step::new(medium, &rest);
        let share = if layer.thickness_nm > 0.0 { depth_nm / layer.thickness_nm } else { 0.0 };
        let permittivity = self.plan.permittivity(layer, &self.indices, share);
        let of = |(mode, share, ln_scale, backs): &(Mode, f64, f64, Vec<Pair<Complex64>>)| {
            let pair = step.carry(&backs[film], *mode);
            let across = match mode {
                Mode::S => 0.0,
                Mode::P => (self.alpha * pair.c / permittivity).norm_sqr(),
            };
            share * (pair.b.norm_sqr() + across) * (2.0 * (pair.ln_scale - ln_scale)).exp()
        };
        self.modes.iter().map(of).sum()
    }

    /// How |E/E₀|² at a depth in nm below a layer's front face changes with the thickness of every layer.
    fn slopes(&self, layer: usize, depth_nm: f64) -> Vec<f64> {
        let layers = &self.plan.coatings[0];
        let depth = |nm: f64| Complex64::new(self.wave_number * nm.max(0.0), 0.0);
        let steps: Vec<Step<Complex64>> = layers
            .iter()
            .map(|layer| Step::new(&self.media[layer.material], &depth(layer.thickness_nm)))
            .collect();
        let own = &layers[layer];
        let rest = own.thickness_nm - depth_nm;
        let step = Step::new(&self.media[own.material], &depth(rest));
        let share = if own.thickness_nm > 0.0 { depth_nm / own.thickness_nm } else { 0.0 };
        let permittivity = self.plan.permittivity(own, &self.indices, share);
        let wave_number = Complex64::new(self.wave_number, 0.0);
        let mut slopes = vec![0.0; layers.len()];
        for (mode, over, ln_scale, backs) in &self.modes {
            let passage = Passage {
                steps: steps.iter().collect(),
                entry: &self.media[0],
                exit: &self.media[self.plan.exit],
                wave_number,
                mode: *mode,
            };
            let changes = passage.changes(&passage.pairs());
            let across = |c: Complex64| match mode {
                Mode::S => Complex64::ZERO,
                Mode::P => self.alpha * c / permittivity,
            };
            let here = step.carry(&backs[layer], *mode);
            let size = |pair: &Pair<Complex64>| over * (2.0 * (pair.ln_scale - ln_scale)).exp();
            let square = size(&here) * (here.b.norm_sqr() + across(here.c).norm_sqr());
            for (at, change) in changes.iter().enumerate() {
                slopes[at] -= 2.0 * change.denominator.re * square;
                // A peak at the back face goes with it.
                if at < layer || (at == layer && rest <= 1e-9 * own.thickness_nm) {
                    continue;
                }
                let inner = if at == layer {
                    step.growth(&here, &wave_number, *mode)
                } else {
                    let front = steps[at].carry(&backs[at], *mode);
                    let growth = steps[at].growth(&front, &wave_number, *mode);
                    let at_back =
                        steps[layer + 1..at].iter().rev().fold(growth, |pair, step| step.carry(&pair, *mode));
                    step.carry(&at_back, *mode)
                };
                let turn = here.b.conj() * inner.b + across(here.c).conj() * across(inner.c);
                slopes[at] += 2.0 * size(&here) * turn.re * (inner.ln_scale - here.ln_scale).exp();
            }
        }
        slopes
    }

    /// The depth in nm and the height of the greatest field in a smooth profile.
    ///
    /// Only at the ends of whole steps, each of two layers, are the fields as exact as everywhere else; between them a parabola
    /// runs through three.
    fn crest(&self, layers: std::ops::Range<usize>) -> (f64, f64) {
        let mut samples = Vec::new();
        let mut depth = 0.0;
        for step in layers.clone().step_by(2) {
            samples.push((depth, self.square(step, 0.0)));
            depth += 2.0 * self.plan.coatings[0][step].thickness_nm;
        }
        let last = layers.end - 1;
        samples.push((depth, self.square(last, self.plan.coatings[0][last].thickness_nm)));
        let best = (0..samples.len()).max_by(|&a, &b| samples[a].1.total_cmp(&samples[b].1)).unwrap_or(0);
        let (Some(before), Some(after)) = (best.checked_sub(1), samples.get(best + 1)) else {
            return samples[best];
        };
        let ((x, y), left, right) = (samples[best], samples[before].1, after.1);
        let bend = left - 2.0 * y + right;
        if bend >= 0.0 {
            return (x, y);
        }
        let slope = 0.5 * (right - left);
        (x - slope / bend * (after.0 - x), y - 0.5 * slope * slope / bend)
    }

    /// The depth in nm and the height of the greatest field in a layer of one material.
    fn peak(&self, layer: usize) -> Result<(f64, f64), OpticsError> {
        let (film, layer) = (layer, &self.plan.coatings[0][layer]);
        let waves = layer.thickness_nm * self.wave_number * self.media[layer.material].normal().re
            / std::f64::consts::TAU;
        let steps = (32.0 * waves).ceil().clamp(8.0, 1e6) as usize;
        let at = |step: usize| layer.thickness_nm * step as f64 / steps as f64;
        let values: Vec<f64> = (0..=steps).map(|step| self.square(film, at(step))).collect();
        let greatest = values.iter().copied().fold(0.0, f64::max);
        let mut best = (0.0, -1.0);
        for (step, &value) in values.iter().enumerate() {
            if value > best.1 {
                best = (at(step), value);
            }
            let inner = step > 0 && step < steps && value >= values[step - 1] && value >= values[step + 1];
            // Between samples a crest is at most a fiftieth higher than its nearest sample.
            if inner && value > 0.9 * greatest {
                let (lo, hi) = (at(step - 1), at(step + 1));
                let (depth_nm, least) = minimum_between(lo, hi, |depth| Ok(-self.square(film, depth)))?;
                if -least > best.1 {
                    best = (depth_nm, -least);
                }
            }
        }
        Ok(best)
    }
}
