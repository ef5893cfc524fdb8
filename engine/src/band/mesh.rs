//! Where to look: a mesh over wavelengths or angles that misses no structure of a stack's response.
//!
//! For one polarisation r = N/D, where D = η₀B + C and N = η₀B − C are smooth on the scale of the films' own
//! fringes, δλ = λ²/(2 Σ n d cos θ): they are sums of exponentials whose phases no pass through the films
//! exceeds. All that is narrower in R, T and A comes from zeros of D near the real axis, and lies about their
//! real parts with their imaginary parts as half-widths. So a mesh with a few points per shortest fringe
//! shows where the zeros are, by parabolas through three neighbouring complex values of D (D. E. Muller,
//! Math. Tables Aids Comput. 10, 208 (1956)); points are set about each zero, from half its half-width
//! outwards in octaves, until the mesh's own spacing there is finer than the resonance. A parabola has two
//! zeros, so that coupled resonances come apart as well.

use std::f64::consts::{FRAC_PI_2, FRAC_PI_8, TAU};

use num_complex::Complex64;

use crate::error::OpticsError;
use crate::matrix::Mode;
use crate::plan::Plan;
use crate::quantity::Light;
use crate::response::Polarisation;

/// More points than this are a mistake or beyond patience.
const MOST: usize = 400_000;
/// The least number of steps over a range.
const FEWEST: usize = 16;
/// No resonance is resolved finer than this share of its place: its width would be lost in rounding.
const FINEST: f64 = 1e-13;

/// What the mesh runs along.
#[derive(Clone, Copy, Debug)]
pub(crate) enum Along {
    /// The vacuum wavelength in nm, at an angle of incidence in rad.
    Wavelength { angle_rad: f64 },
    /// The angle of incidence in rad, at a vacuum wavelength in nm.
    Angle { wavelength_nm: f64 },
}

/// A mesh with what it was built from.
#[derive(Debug)]
pub(crate) struct Mesh {
    samples: Vec<Sample>,
}

/// The stack at one point of the mesh.
#[derive(Clone, Debug)]
struct Sample {
    x: f64,
    /// The phase of one pass, by coating.
    phases: Vec<f64>,
    indices: Vec<Complex64>,
    /// N and D of each coating and mode, each up to exp of a logarithm.
    channels: Vec<Channel>,
}

#[derive(Clone, Copy, Debug)]
struct Channel {
    numerator: Complex64,
    denominator: Complex64,
    ln_scale: f64,
}

impl Mesh {
    /// A mesh from `range.0` to `range.1`, both included. `both` asks for both polarisations whatever the
    /// light's own is, as a cone does.
    pub(crate) fn build(
        plan: &Plan,
        light: &Light,
        both: bool,
        along: Along,
        range: (f64, f64),
    ) -> Result<Mesh, OpticsError> {
        let modes: &[Mode] = match light.polarisation {
            Polarisation::S if !both => &[Mode::S],
            Polarisation::P if !both => &[Mode::P],
            _ => &[Mode::S, Mode::P],
        };
        let builder = Builder { plan, modes, along };
        let mut samples = builder.base(range)?;
        for pass in 0..40 {
            let wanted = builder.zeros(&samples, pass < 2);
            if wanted.is_empty() {
                break;
            }
            samples = builder.insert(samples, wanted)?;
        }
        Ok(Mesh { samples })
    }

    /// The points of a mesh that knows of no resonance.
    pub(crate) fn base_points(plan: &Plan, along: Along, range: (f64, f64)) -> Result<Vec<f64>, OpticsError> {
        let builder = Builder { plan, modes: &[], along };
        Ok(builder.base(range)?.into_iter().map(|sample| sample.x).collect())
    }

    /// The points, ascending.
    pub(crate) fn points(&self) -> impl Iterator<Item = f64> {
        self.samples.iter().map(|sample| sample.x)
    }
}

struct Builder<'a> {
    plan: &'a Plan,
    modes: &'a [Mode],
    along: Along,
}

impl Builder<'_> {
    /// The mesh before any resonance is known: both ends, knots and lines of the materials, and steps of at
    /// most a sixteenth of a turn of the phase of one pass, an eighth of a fringe.
    fn base(&self, range: (f64, f64)) -> Result<Vec<Sample>, OpticsError> {
        let (lo, hi) = range;
        if lo >= hi {
            return Ok(vec![self.sample(lo)?]);
        }
        let even = |at: usize| lo + (hi - lo) * at as f64 / FEWEST as f64;
        let mut points: Vec<f64> = (0..FEWEST).map(even).collect();
        points.push(hi);
        points.extend(self.marks()?.into_iter().filter(|&x| lo < x && x < hi));
        points.sort_by(f64::total_cmp);
        points.dedup();
        let mut open: Vec<Sample> =
            points.into_iter().rev().map(|x| self.sample(x)).collect::<Result<_, _>>()?;
        let mut samples: Vec<Sample> = Vec::new();
        samples.extend(open.pop());
        while let (Some(left), Some(right)) = (samples.last(), open.pop()) {
            let pieces = pieces(left, &right);
            let (from, width) = (left.x, right.x - left.x);
            let fine = pieces <= 1 || width <= 4.0 * FINEST * right.x;
            open.push(right);
            if fine {
                samples.extend(open.pop());
                continue;
            }
            if samples.len() + open.len() + pieces > MOST {
                return Err(OpticsError::NotConverged {
                    estimate: 0.0,
                    error: f64::INFINITY,
                    wavelength_nm: self.wavelength(from),
                });
            }
            for at in (1..pieces).rev() {
                open.push(self.sample(from + width * at as f64 / pieces as f64)?);
            }
        }
        Ok(samples)
    }

    /// Places where the materials or the geometry are not smooth.
    fn marks(&self) -> Result<Vec<f64>, OpticsError> {
        let mut marks = Vec::new();
        match self.along {
            Along::Wavelength { .. } => {
                for material in &self.plan.materials {
                    marks.extend(material.knots_nm());
                    for (centre, width) in material.lines_nm() {
                        let width = width.max(1e-6 * centre);
                        let octaves = (0..48).map(|octave| 0.25 * width * 2.0_f64.powi(octave));
                        marks.push(centre);
                        marks.extend(
                            octaves
                                .take_while(|&off| off < 0.2 * centre)
                                .flat_map(|off| [centre - off, centre + off]),
                        );
                    }
                }
            }
            Along::Angle { wavelength_nm } => {
                // Half-spaces and bodies have a square root at their critical angle.
                let indices = self.plan.indices(wavelength_nm)?;
                let bodies = self.plan.bodies.iter().map(|body| body.material);
                for material in bodies.chain([self.plan.exit]) {
                    let critical = (indices[material].re / indices[0].re).asin();
                    if critical.is_finite() && critical < FRAC_PI_2 {
                        let octaves = (1..40).map(|octave| critical * 0.5_f64.powi(octave));
                        marks.push(critical);
                        marks.extend(octaves.flat_map(|off| [critical - off, critical + off]));
                    }
                }
            }
        }
        Ok(marks)
    }

    fn wavelength(&self, x: f64) -> f64 {
        match self.along {
            Along::Wavelength { .. } => x,
            Along::Angle { wavelength_nm } => wavelength_nm,
        }
    }

    fn sample(&self, x: f64) -> Result<Sample, OpticsError> {
        let (wavelength_nm, angle_rad) = match self.along {
            Along::Wavelength { angle_rad } => (x, angle_rad),
            Along::Angle { wavelength_nm } => (wavelength_nm, x),
        };
        let indices = self.plan.indices(wavelength_nm)?;
        let tilted = self.plan.tilted(&indices, wavelength_nm, angle_rad)?;
        let normals: Vec<Complex64> =
            tilted.media.iter().map(|medium| medium.normal() * (TAU / wavelength_nm)).collect();
        let pass = |films: &Vec<crate::plan::Layer>| {
            let phase = |film: &crate::plan::Layer| {
                let phase = normals[film.material] * film.thickness_nm;
                // Light that does not come back from a film's far side makes no fringe with the rest.
                if phase.im > 20.0 { 0.0 } else { phase.re }
            };
            films.iter().map(phase).sum()
        };
        let phases = self.plan.coatings.iter().map(pass).collect();
        let mut channels = Vec::new();
        for &mode in self.modes {
            channels.extend(tilted.resonators(mode).map(|coating| Channel {
                numerator: coating.numerator,
                denominator: coating.denominator,
                ln_scale: coating.ln_scale,
            }));
        }
        Ok(Sample { x, phases, indices, channels })
    }

    /// The points still missing about the zeros of D, and, if asked for, of N, whose zeros are where a
    /// reflectance is least.
    fn zeros(&self, samples: &[Sample], of_numerators: bool) -> Vec<f64> {
        let (Some(first), Some(last)) = (samples.first(), samples.last()) else { return Vec::new() };
        let mut wanted = Vec::new();
        for (at, triple) in samples.windows(3).enumerate() {
            let (reach_left, reach_right) = (triple[1].x - triple[0].x, triple[2].x - triple[1].x);
            let near = |x: f64| {
                (triple[0].x - if at == 0 { reach_left } else { 0.0 }) <= x
                    && x <= triple[2].x + if triple[2].x == last.x { reach_right } else { 0.0 }
            };
            for channel in 0..triple[1].channels.len() {
                let parts = [0, 1, 2].map(|place| triple[place].channels[channel]);
                for zero in roots(triple, parts.map(|part| part.denominator), parts) {
                    if near(zero.re) {
                        let centre = zero.re.clamp(first.x, last.x);
                        let off = (zero.re - centre).abs();
                        let width = zero.im.abs().max(off).max(FINEST * centre.abs().max(1e-6));
                        cluster(samples, centre, width, &mut wanted);
                    }
                }
                if !of_numerators {
                    continue;
                }
                for zero in roots(triple, parts.map(|part| part.numerator), parts) {
                    if near(zero.re) && first.x < zero.re && zero.re < last.x {
                        let (spacing, nearest) = spacing(samples, zero.re);
                        if nearest > 0.05 * spacing && zero.im.abs() < spacing {
                            wanted.push(zero.re);
                        }
                    }
                }
            }
        }
        wanted
    }

    /// The samples with new ones at the points wanted, leaving out those that stand there already.
    fn insert(&self, samples: Vec<Sample>, mut wanted: Vec<f64>) -> Result<Vec<Sample>, OpticsError> {
        wanted.sort_by(f64::total_cmp);
        let mut merged: Vec<Sample> = Vec::with_capacity(samples.len() + wanted.len());
        let mut wanted = wanted.into_iter().peekable();
        for sample in samples {
            while let Some(x) = wanted.next_if(|&x| x < sample.x) {
                let apart = 0.25 * FINEST * x.abs().max(1e-6);
                // Nothing stands before the first sample: that is where the range begins.
                let clear = merged.last().is_some_and(|before| x - before.x > apart) && sample.x - x > apart;
                if clear {
                    merged.push(self.sample(x)?);
                }
            }
            merged.push(sample);
        }
        if merged.len() > MOST {
            let wavelength_nm = merged.last().map_or(0.0, |sample| self.wavelength(sample.x));
            return Err(OpticsError::NotConverged { estimate: 0.0, error: f64::INFINITY, wavelength_nm });
        }
        Ok(merged)
    }
}

/// Into how many pieces a step must be cut for phases and indices to change little over each.
fn pieces(left: &Sample, right: &Sample) -> usize {
    let turned = left.phases.iter().zip(&right.phases).map(|(a, b)| (a - b).abs()).fold(0.0, f64::max);
    let changed =
        left.indices.iter().zip(&right.indices).map(|(a, b)| (a - b).norm() / b.norm()).fold(0.0, f64::max);
    let pieces = (turned / FRAC_PI_8).max(changed / 0.1).ceil();
    if pieces.is_finite() { (pieces as usize).clamp(1, 4096) } else { 1 }
}

/// The width of the step that holds x, and the distance to the nearer of its ends.
fn spacing(samples: &[Sample], x: f64) -> (f64, f64) {
    let after = samples.partition_point(|sample| sample.x <= x).clamp(1, samples.len() - 1);
    let (lo, hi) = (samples[after - 1].x, samples[after].x);
    (hi - lo, (x - lo).abs().min((hi - x).abs()))
}

/// The points wanted about a resonance: none if the mesh is finer than its width there already.
fn cluster(samples: &[Sample], centre: f64, width: f64, wanted: &mut Vec<f64>) {
    let (step, _) = spacing(samples, centre);
    if step <= width {
        return;
    }
    wanted.push(centre);
    let mut off = 0.5 * width;
    while off < step {
        wanted.push(centre - off);
        wanted.push(centre + off);
        off *= 2.0;
    }
}

/// The zeros of the parabola through three complex values at three real points.
fn roots(triple: &[Sample], values: [Complex64; 3], parts: [Channel; 3]) -> impl Iterator<Item = Complex64> {
    let greatest = parts.iter().map(|part| part.ln_scale).fold(f64::NEG_INFINITY, f64::max);
    let [v0, v1, v2] = [0, 1, 2].map(|place| values[place] * (parts[place].ln_scale - greatest).exp());
    let (x0, x1, x2) = (triple[0].x, triple[1].x, triple[2].x);
    let first = (v1 - v0) / (x1 - x0);
    let second = (v2 - v1) / (x2 - x1);
    let curvature = (second - first) / (x2 - x0);
    let slope = (first * (x2 - x1) + second * (x1 - x0)) / (x2 - x0);
    let root = (slope * slope - 4.0 * curvature * v1).sqrt();
    // Of the two forms of the solution, the one in which nothing cancels.
    let big = if (slope + root).norm() >= (slope - root).norm() { slope + root } else { slope - root };
    let near = -2.0 * v1 / big;
    let far = -big / (2.0 * curvature);
    [near, far].into_iter().map(move |off| off + x1).filter(|zero| zero.is_finite())
}
