//! A requirement as a few samples of its quantity have it: cheap to evaluate, close enough to choose a change by.
//!
//! What is chosen is evaluated in full before it is said; nothing that a sketch gives is shown.

use super::optics::weight;
use super::quantity::{self, mask, phase, power};
use super::require::{Asked, Judged};
use crate::model::{self, Angles, Bound, Quantity, Side};
use crate::report::At;
use crate::units::EV_NM;
use overcoat_engine::{
    self as engine, Lab, Light, OpticsError, Polarisation, SpectralWeight, Stack, VISIBLE_NM,
};

/// At how many angles the hemisphere is looked at.
const TILTS: usize = 6;

/// What samples come to: how far they are from breaking the bound, and the value that is nearest to it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Verdict {
    pub(super) margin: f64,
    pub(super) value: f64,
}

/// Of the samples of one beam.
type Score<'a> = Box<dyn Fn(&[f64]) -> Verdict + Send + Sync + 'a>;

/// The samples of a requirement, and what they come to.
pub(super) struct Sketch<'a> {
    quantity: engine::Quantity,
    beams: Vec<(Light, Vec<f64>)>,
    score: Score<'a>,
    /// Whether the beams are parts of one mean; else the worst of them counts.
    pooled: bool,
    /// The polarisation asked for: at normal incidence s stands for both.
    polarisation: Polarisation,
}

/// The samples of a stack: values, and their derivatives in the thickness of every film.
#[derive(Clone)]
pub(super) struct Samples(Vec<Vec<engine::Slopes>>);

/// The derivative of a sample in the thickness of several films that grow together.
fn slope(sample: &engine::Slopes, films: &[(usize, usize)]) -> f64 {
    films.iter().map(|&(coating, film)| sample.films[coating][film]).sum()
}

impl<'a> Sketch<'a> {
    /// The samples of a requirement, so many over its bands, those places among them where it was found worst. None for a
    /// quantity that no thickness is to be blamed for.
    pub(super) fn new(asked: &Asked<'_>, judged: &Judged, worst: &[At], across: usize) -> Option<Sketch<'a>> {
        let requirement = asked.requirement;
        let bound = Between { min: judged.min, max: judged.max };
        let angles = angles(asked, worst);
        let spread = |bands: &[(f64, f64)]| sampled(bands, worst, across);
        let plain = |quantity, wavelengths: Vec<f64>, score: Score<'a>| Sketch {
            quantity,
            beams: angles.iter().map(|angle| (beam(asked, *angle), wavelengths.clone())).collect(),
            score,
            pooled: false,
            polarisation: requirement.polarisation,
        };
        let extremes = |quantity, wavelengths: Vec<f64>, scale: f64| {
            let places = wavelengths.clone();
            let score = move |values: &[f64]| {
                with_crests(&places, values)
                    .map(|(_, value)| bound.of(scale * value))
                    .reduce(worse)
                    .unwrap_or(NOTHING)
            };
            plain(quantity, wavelengths, Box::new(score))
        };
        let bands = quantity::spans(requirement);
        match (&requirement.bound, &requirement.quantity) {
            (Bound::AtMostMask(curve) | Bound::AtLeastMask(curve), _) => {
                let most = matches!(requirement.bound, Bound::AtMostMask(_));
                let wavelengths = spread(&bands);
                let (places, curve) = (wavelengths.clone(), curve.clone());
                let score = move |values: &[f64]| {
                    let each = with_crests(&places, values).map(|(nm, value)| {
                        let room = mask::at(&curve, nm) - value;
                        Verdict { margin: if most { room } else { -room }, value }
                    });
                    each.reduce(worse).unwrap_or(NOTHING)
                };
                Some(plain(power::engine_quantity(asked).ok()?, wavelengths, Box::new(score)))
            }
            (Bound::Crosses { level, rising, .. }, _) => {
                let wavelengths = fine(&bands, 2 * across);
                let (level, rising, places) = (*level, *rising, wavelengths.clone());
                let score = move |values: &[f64]| {
                    let better = |a: Verdict, b: Verdict| if b.margin > a.margin { b } else { a };
                    edges(&places, values, level, rising)
                        .map(|nm| bound.of(nm))
                        .reduce(better)
                        .unwrap_or(NOTHING)
                };
                Some(plain(power::engine_quantity(asked).ok()?, wavelengths, Box::new(score)))
            }
            (Bound::NearColour { difference, aim }, Quantity::Colour(side)) => {
                let wavelengths = fine(&[VISIBLE_NM], 2 * across);
                let score = colour(asked, &wavelengths, *difference, *aim)?;
                Some(plain(of_side(*side), wavelengths, score))
            }
            (Bound::Range { min, max }, _) if phase::is_phase(&requirement.quantity) => {
                let scale = phase::Scale::of(&requirement.quantity, *min, *max)?;
                Some(extremes(scale.quantity.clone(), spread(&bands), scale.value))
            }
            (Bound::Range { .. }, Quantity::PeakField) => {
                Some(extremes(engine::Quantity::PeakField, spread(&bands), 1.0))
            }
            (Bound::Range { .. }, quantity) if quantity.is_curve() && !requirement.mean => {
                Some(extremes(power::engine_quantity(asked).ok()?, spread(&bands), 1.0))
            }
            (Bound::Range { .. }, _) => mean(asked, &bands, bound, &angles, 2 * across),
            _ => None,
        }
    }

    /// Ready for many parts of a stack, in which the indices of some films may be off.
    pub(super) fn sampler(
        &self,
        stack: &Stack,
        off: &[(usize, usize)],
    ) -> Result<engine::Sampler, OpticsError> {
        engine::Sampler::new(stack, &self.quantity, &self.beams, off)
    }

    /// What the samples of a part come to, its light tilted by so many rad.
    pub(super) fn verdict(&self, part: &engine::Part<'_>, tilt: f64) -> Result<Verdict, OpticsError> {
        let mut values = Vec::with_capacity(self.beams.len());
        for (at, (light, _)) in self.beams.iter().enumerate() {
            for light in self.tilted(light, tilt) {
                values.push(part.values(at, &light)?);
            }
        }
        Ok(self.total(values))
    }

    /// The samples of a stack.
    pub(super) fn of(&self, stack: &Stack) -> Result<Samples, OpticsError> {
        let beam = |(light, wavelengths): &(Light, Vec<f64>)| {
            engine::slopes(stack, &self.quantity, light, wavelengths)
        };
        self.beams.iter().map(beam).collect::<Result<_, _>>().map(Samples)
    }

    /// How far the samples would be from breaking the bound, to first order, after films have grown by so many nm each.
    pub(super) fn score(&self, samples: &Samples, films: &[(usize, usize)], growth: f64) -> f64 {
        let one = |sample: &engine::Slopes| sample.value + growth * slope(sample, films);
        self.total(samples.0.iter().map(|beam| beam.iter().map(one).collect()).collect()).margin
    }

    /// The same from the samples at two growths, by cubic curves that have the values and derivatives of both.
    pub(super) fn score_between(
        &self,
        (near, from): (&Samples, f64),
        (far, to): (&Samples, f64),
        films: &[(usize, usize)],
        growth: f64,
    ) -> f64 {
        let (width, x) = (to - from, (growth - from) / (to - from));
        let y = 1.0 - x;
        let one = |(near, far): (&engine::Slopes, &engine::Slopes)| {
            let values = y * y * (1.0 + 2.0 * x) * near.value + x * x * (1.0 + 2.0 * y) * far.value;
            values + width * x * y * (y * slope(near, films) - x * slope(far, films))
        };
        let beams = near.0.iter().zip(&far.0);
        self.total(beams.map(|(near, far)| near.iter().zip(far).map(one).collect()).collect()).margin
    }

    /// A beam as it meets a tilted part. The hemisphere is all there is; away from normal incidence s and p have phases of their
    /// own.
    fn tilted(&self, light: &Light, tilt: f64) -> Vec<Light> {
        if tilt == 0.0 || self.pooled {
            return vec![*light];
        }
        let angle_rad = (light.angle_rad + tilt).abs();
        let light = |polarisation| Light { polarisation, angle_rad, ..*light };
        match (&self.quantity, self.polarisation) {
            (engine::Quantity::Phase(..), Polarisation::Mean) => {
                [Polarisation::S, Polarisation::P].map(light).to_vec()
            }
            _ => vec![light(self.polarisation)],
        }
    }

    /// What the values of all beams come to.
    fn total(&self, values: Vec<Vec<f64>>) -> Verdict {
        if self.pooled {
            return (self.score)(&values.concat());
        }
        values.iter().map(|values| (self.score)(values)).reduce(worse).unwrap_or(NOTHING)
    }

    /// The middle of its wavelengths, nm.
    pub(super) fn wavelength(&self) -> f64 {
        let all: Vec<f64> = self.beams.iter().flat_map(|beam| beam.1.iter().copied()).collect();
        if all.is_empty() { 550.0 } else { all.iter().sum::<f64>() / all.len() as f64 }
    }
}

/// Where there is nothing that could be within a bound.
const NOTHING: Verdict = Verdict { margin: f64::NEG_INFINITY, value: f64::NAN };

fn worse(a: Verdict, b: Verdict) -> Verdict {
    if b.margin < a.margin { b } else { a }
}

/// What a value must be.
#[derive(Clone, Copy)]
struct Between {
    min: Option<f64>,
    max: Option<f64>,
}

impl Between {
    fn of(self, value: f64) -> Verdict {
        let below = self.max.map_or(f64::INFINITY, |max| max - value);
        Verdict { margin: below.min(self.min.map_or(f64::INFINITY, |min| value - min)), value }
    }
}

/// The samples, and the crests between them by parabolas through every three.
fn with_crests<'v>(places: &'v [f64], values: &'v [f64]) -> impl Iterator<Item = (f64, f64)> + 'v {
    let crests = values.windows(3).zip(places.windows(3)).filter_map(|(y, x)| {
        let stands_out = (y[1] >= y[0] && y[1] >= y[2]) || (y[1] <= y[0] && y[1] <= y[2]);
        let (left, right) = ((y[1] - y[0]) / (x[1] - x[0]), (y[2] - y[1]) / (x[2] - x[1]));
        let bend = (right - left) / (x[2] - x[0]);
        let slope = left + bend * (x[1] - x[0]);
        let off = -0.5 * slope / bend;
        let inside = off.is_finite() && (x[0]..=x[2]).contains(&(x[1] + off));
        (stands_out && inside).then(|| (x[1] + off, y[1] + 0.5 * slope * off))
    });
    places.iter().copied().zip(values.iter().copied()).chain(crests)
}

/// A beam of the requirement; at normal incidence s and p are one.
fn beam(asked: &Asked<'_>, angle: f64) -> Light {
    let light = power::light(asked, angle);
    let upright = angle == 0.0 && light.cone_half_angle_rad == 0.0;
    if upright { Light { polarisation: Polarisation::S, ..light } } else { light }
}

/// The angles of the requirement, or the ends and the middle of its range, with those where it was found worst.
fn angles(asked: &Asked<'_>, worst: &[At]) -> Vec<f64> {
    let mut angles = match &asked.requirement.angles {
        Angles::List(list) => list.clone(),
        Angles::Range(from, to) => vec![*from, 0.5 * (from + to), *to],
    };
    angles.extend(worst.iter().map(|at| at.angle));
    angles.sort_by(f64::total_cmp);
    angles.dedup();
    angles
}

/// Wavelengths over bands, ends included, with those where the requirement was found worst.
fn sampled(bands: &[(f64, f64)], worst: &[At], across: usize) -> Vec<f64> {
    let whole: f64 = bands.iter().map(|band| band.1 - band.0).sum();
    let mut wavelengths = Vec::new();
    for &(lo, hi) in bands {
        let steps = if hi > lo { (across as f64 * (hi - lo) / whole).ceil().max(2.0) as usize } else { 0 };
        // Even in the wave number, as fringes are.
        let at = |step: usize| 1.0 / (1.0 / hi + (1.0 / lo - 1.0 / hi) * step as f64 / steps.max(1) as f64);
        wavelengths.extend((1..steps).map(at).chain([lo, hi]));
    }
    let holds = |nm: &f64| bands.iter().any(|band| band.0 <= *nm && *nm <= band.1);
    wavelengths.extend(worst.iter().filter_map(|at| at.wavelength).filter(holds));
    wavelengths.sort_by(f64::total_cmp);
    wavelengths.dedup();
    wavelengths
}

/// The middles of equal steps over bands, for sums.
fn fine(bands: &[(f64, f64)], steps: usize) -> Vec<f64> {
    let of = |&(lo, hi): &(f64, f64)| {
        (0..steps).map(move |step| lo + (hi - lo) * (step as f64 + 0.5) / steps as f64)
    };
    bands.iter().flat_map(of).collect()
}

fn of_side(side: Side) -> engine::Quantity {
    match side {
        Side::Reflected => engine::Quantity::Reflectance,
        Side::Transmitted => engine::Quantity::Transmittance,
    }
}

/// Where a sampled curve crosses a level in one sense.
fn edges<'v>(
    places: &'v [f64],
    values: &'v [f64],
    level: f64,
    rising: bool,
) -> impl Iterator<Item = f64> + 'v {
    values.windows(2).zip(places.windows(2)).filter_map(move |(values, places)| {
        let (before, after) = (values[0] - level, values[1] - level);
        let crosses = if rising { before < 0.0 && after >= 0.0 } else { before > 0.0 && after <= 0.0 };
        crosses.then(|| places[0] + (places[1] - places[0]) * before / (before - after))
    })
}

/// How far the colour of samples is within its difference from the aim.
fn colour<'a>(asked: &Asked<'_>, wavelengths: &[f64], most: f64, aim: [f64; 3]) -> Option<Score<'a>> {
    let observer = match asked.requirement.observer {
        model::Observer::Two => engine::Observer::Two,
        model::Observer::Ten => engine::Observer::Ten,
    };
    let source = weight(asked.requirement.under.as_ref())?;
    let shares: Vec<[f64; 3]> = wavelengths
        .iter()
        .map(|nm| {
            let power = source.at(*nm).unwrap_or(0.0);
            observer.functions().each_ref().map(|function| power * function.at(*nm).unwrap_or(0.0))
        })
        .collect();
    let white = shares.iter().fold([0.0; 3], |sum, share| [0, 1, 2].map(|at| sum[at] + share[at]));
    let [l, a, b] = aim;
    Some(Box::new(move |values: &[f64]| {
        let seen = values.iter().zip(&shares).fold([0.0; 3], |sum, (value, share)| {
            [0, 1, 2].map(|at| sum[at] + value * share[at] / white[at])
        });
        let value = engine::ciede2000(Lab::from_shares(seen.map(|share| share.max(0.0))), Lab { l, a, b });
        Verdict { margin: most - value, value }
    }))
}

/// A mean under a weight.
fn mean<'a>(
    asked: &Asked<'_>,
    bands: &[(f64, f64)],
    bound: Between,
    angles: &[f64],
    steps: usize,
) -> Option<Sketch<'a>> {
    let requirement = asked.requirement;
    let source = weight(requirement.under.as_ref());
    let (quantity, weight) = match &requirement.quantity {
        Quantity::Luminous(side) => (of_side(*side), source?.times(&engine::Observer::Two.functions()[1])),
        Quantity::Solar(side) => (of_side(*side), source?),
        Quantity::SolarAbsorptance => (engine::Quantity::Absorptance, source?),
        Quantity::Photocurrent(target) | Quantity::PhotocurrentLoss(target) => {
            let counted = requirement.under.as_ref().is_some_and(|under| under.photons);
            let photons = if counted { source? } else { source?.photons() };
            (power::absorptance_in(asked, target).ok()?, photons)
        }
        Quantity::Emittance => {
            (engine::Quantity::Absorptance, SpectralWeight::blackbody(requirement.temperature?).ok()?)
        }
        quantity if quantity.is_curve() => (power::engine_quantity(asked).ok()?, source?),
        _ => return None,
    };
    // A photocurrent is the mean times all the photons there are, or what is left of them.
    let most = weight.integral(bands).map_or(0.0, |flux| flux / EV_NM / 10.0);
    let (offset, factor) = match requirement.quantity {
        Quantity::Photocurrent(_) => (0.0, most),
        Quantity::PhotocurrentLoss(_) => (most, -most),
        _ => (0.0, 1.0),
    };
    let wavelengths = fine(bands, steps);
    let mut weights = weights_of(bands, steps, &weight);
    let tilts = |at: usize| ((at as f64 + 0.5) / TILTS as f64).sqrt().asin();
    let beams: Vec<(Light, Vec<f64>)> = if requirement.hemispherical {
        // Even steps of sin²θ carry even shares of the hemisphere's power.
        weights = weights.repeat(TILTS);
        let light = |at| Light::parallel(tilts(at), Polarisation::Mean);
        (0..TILTS).map(|at| (light(at), wavelengths.clone())).collect()
    } else {
        angles.iter().map(|angle| (beam(asked, *angle), wavelengths.clone())).collect()
    };
    let whole: f64 = weights.iter().sum();
    let score = move |values: &[f64]| {
        let sum: f64 = values.iter().zip(&weights).map(|(value, weight)| value * weight).sum();
        bound.of(offset + factor * sum / whole)
    };
    Some(Sketch {
        quantity,
        beams,
        score: Box::new(score),
        pooled: requirement.hemispherical,
        polarisation: requirement.polarisation,
    })
}

/// The weight of each step over the bands, whole.
fn weights_of(bands: &[(f64, f64)], steps: usize, weight: &SpectralWeight) -> Vec<f64> {
    let step = |(lo, hi): (f64, f64), at: usize| {
        let end = |at: usize| lo + (hi - lo) * at as f64 / steps as f64;
        weight.integral(&[(end(at), end(at + 1))]).unwrap_or(0.0)
    };
    bands.iter().flat_map(|&band| (0..steps).map(move |at| step(band, at))).collect()
}
