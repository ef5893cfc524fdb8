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

use std::f64::consts::{FRAC_PI_2, FRAC_PI_8, PI};

use num_complex::Complex64;

use super::probe::Probe;
use super::search::Point;
use crate::error::OpticsError;
use crate::kernel::{Beam, Points, WIDTH};
use crate::plan::Plan;
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
    points: Vec<Point>,
    valued: bool,
}

impl Mesh {
    /// A mesh from `range.0` to `range.1`, both included. `both` asks for both polarisations whatever the
    /// light's own is, as a cone does.
    pub(crate) fn build(
        probe: &Probe<'_>,
        both: bool,
        along: Along,
        range: (f64, f64),
    ) -> Result<Mesh, OpticsError> {
        let modes: &[usize] = match probe.light.polarisation {
            Polarisation::S if !both => &[0],
            Polarisation::P if !both => &[1],
            _ => &[0, 1],
        };
        let own_angle = match along {
            Along::Wavelength { angle_rad } => angle_rad == probe.light.angle_rad,
            Along::Angle { .. } => true,
        };
        let valued = !both && probe.is_plain() && own_angle;
        let channels = probe.program.channels(modes.len());
        let mut builder = Builder { probe, modes, along, channels, valued, found: Samples::default() };
        let mut mesh = builder.base(range)?;
        let mut fresh = vec![true; mesh.len()];
        for pass in 0..40 {
            let wanted = builder.zeros(&mesh, &fresh, pass < 2);
            if wanted.is_empty() {
                break;
            }
            (mesh, fresh) = builder.insert(mesh, wanted)?;
        }
        let point = |sample: &Sample| Point { x: sample.x, y: builder.found.values[sample.at] };
        Ok(Mesh { points: mesh.iter().map(point).collect(), valued })
    }

    /// The points of a mesh that knows of no resonance.
    pub(crate) fn base_points(
        probe: &Probe<'_>,
        along: Along,
        range: (f64, f64),
    ) -> Result<Vec<f64>, OpticsError> {
        let mut builder =
            Builder { probe, modes: &[], along, channels: 0, valued: false, found: Samples::default() };
        Ok(builder.base(range)?.into_iter().map(|sample| sample.x).collect())
    }

    /// The points, ascending.
    pub(crate) fn points(&self) -> impl Iterator<Item = f64> {
        self.points.iter().map(|point| point.x)
    }

    /// The points with the quantity's values there, if they were found on the way.
    pub(crate) fn values(&self) -> Option<&[Point]> {
        self.valued.then_some(&self.points[..])
    }
}

/// A point of the mesh, and where its sample is.
#[derive(Clone, Copy, Debug)]
struct Sample {
    x: f64,
    at: usize,
}

/// What was found at all points so far, each quantity in a list of its own.
#[derive(Debug, Default)]
struct Samples {
    /// The phase of one pass, by coating.
    phases: Vec<f64>,
    indices: Vec<Complex64>,
    /// N and D of each coating and mode, each up to exp of a logarithm.
    channels: Vec<Channel>,
    /// The quantity itself.
    values: Vec<f64>,
}

#[derive(Clone, Copy, Debug)]
struct Channel {
    numerator: Complex64,
    denominator: Complex64,
    ln_scale: f64,
}

struct Builder<'a> {
    probe: &'a Probe<'a>,
    modes: &'static [usize],
    along: Along,
    channels: usize,
    valued: bool,
    found: Samples,
}

impl Builder<'_> {
    fn plan(&self) -> &Plan {
        &self.probe.plan
    }

    /// The mesh before any resonance is known: both ends, knots and lines of the materials, and steps of at
    /// most a sixteenth of a turn of the phase of one pass, an eighth of a fringe.
    fn base(&mut self, range: (f64, f64)) -> Result<Vec<Sample>, OpticsError> {
        let (lo, hi) = range;
        if lo >= hi {
            return self.sample(&[lo]);
        }
        let even = |at: usize| lo + (hi - lo) * at as f64 / FEWEST as f64;
        let mut points: Vec<f64> = (0..FEWEST).map(even).collect();
        points.push(hi);
        points.extend(self.marks()?.into_iter().filter(|&x| lo < x && x < hi));
        points.sort_by(f64::total_cmp);
        points.dedup();
        let mut mesh = self.sample(&points)?;
        // Steps that have been found fine stay so: only those with a new end are looked at again.
        let mut fresh = vec![true; mesh.len()];
        loop {
            let mut wanted = Vec::new();
            for at in 1..mesh.len() {
                let (left, right) = (mesh[at - 1], mesh[at]);
                if !(fresh[at - 1] || fresh[at]) {
                    continue;
                }
                let (pieces, width) = (self.pieces(left, right), right.x - left.x);
                if pieces <= 1 || width <= 4.0 * FINEST * right.x {
                    continue;
                }
                if mesh.len() + wanted.len() + pieces > MOST {
                    return Err(self.too_many(left.x));
                }
                wanted.extend((1..pieces).map(|piece| left.x + width * piece as f64 / pieces as f64));
            }
            if wanted.is_empty() {
                return Ok(mesh);
            }
            (mesh, fresh) = self.merge(mesh, &wanted)?;
        }
    }

    fn too_many(&self, x: f64) -> OpticsError {
        let wavelength_nm = self.wavelength(x);
        OpticsError::NotConverged { estimate: 0.0, error: f64::INFINITY, wavelength_nm }
    }

    /// Places where the materials or the geometry are not smooth.
    fn marks(&self) -> Result<Vec<f64>, OpticsError> {
        let mut marks = Vec::new();
        match self.along {
            Along::Wavelength { .. } => {
                for material in &self.plan().materials {
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
                let points = Points::new(self.plan(), &[wavelength_nm])?;
                let index = |material: usize| points.at(0, material).re;
                let bodies = self.plan().bodies.iter().map(|body| body.material);
                for material in bodies.chain([self.plan().exit]) {
                    let critical = (index(material) / index(0)).asin();
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

    /// Samples at ascending points.
    fn sample(&mut self, xs: &[f64]) -> Result<Vec<Sample>, OpticsError> {
        let probe = self.probe;
        let (points, angles) = match self.along {
            Along::Wavelength { angle_rad } => (Points::new(&probe.plan, xs)?, vec![angle_rad]),
            Along::Angle { wavelength_nm } => {
                (Points::new(&probe.plan, &[wavelength_nm])?.repeated(xs.len()), xs.to_vec())
            }
        };
        let beam = Beam::new(&probe.plan, &points, &angles)?;
        let first = self.found.values.len();
        for at in 0..xs.len() {
            self.found.phases.extend(beam.phases(&probe.program, at).map(|half_turns| PI * half_turns));
            self.found.indices.extend((0..probe.plan.pure()).map(|medium| points.at(at, medium)));
        }
        if self.modes.is_empty() {
            self.found.values.resize(first + xs.len(), 0.0);
        } else {
            let within = probe.within.as_deref();
            let (outcomes, channels) = beam.channels(&probe.program, &points, self.modes, within);
            for at in 0..xs.len() {
                let (block, lane) = (at / WIDTH, at % WIDTH);
                let here = &channels[block * self.channels..(block + 1) * self.channels];
                self.found.channels.extend(here.iter().map(|channel| {
                    let [numerator, denominator] = [&channel.numerator, &channel.denominator]
                        .map(|parts| Complex64::new(parts[0].0[lane], parts[1].0[lane]));
                    Channel { numerator, denominator, ln_scale: channel.ln_scale.0[lane] }
                }));
            }
            if self.valued {
                let shares = probe.light.polarisation.shares();
                self.found.values.extend(probe.told_of(&points, &angles, shares, &outcomes)?);
            } else {
                self.found.values.resize(first + xs.len(), 0.0);
            }
        }
        Ok(xs.iter().enumerate().map(|(at, x)| Sample { x: *x, at: first + at }).collect())
    }

    /// Into how many pieces a step must be cut for phases and indices to change little over each.
    fn pieces(&self, left: Sample, right: Sample) -> usize {
        let (coatings, media) = (self.plan().coatings.len(), self.plan().pure());
        let phases = |sample: Sample| &self.found.phases[sample.at * coatings..(sample.at + 1) * coatings];
        let indices = |sample: Sample| &self.found.indices[sample.at * media..(sample.at + 1) * media];
        let turned = phases(left).iter().zip(phases(right)).map(|(a, b)| (a - b).abs()).fold(0.0, f64::max);
        let changed = indices(left)
            .iter()
            .zip(indices(right))
            .map(|(a, b)| (a - b).norm_sqr() / b.norm_sqr())
            .fold(0.0, f64::max);
        let pieces = (turned / FRAC_PI_8).max(changed.sqrt() / 0.1).ceil();
        if pieces.is_finite() { (pieces as usize).clamp(1, 4096) } else { 1 }
    }

    /// The points still missing about the zeros of D, and, if asked for, of N, whose zeros are where a
    /// reflectance is least. Only triples with a fresh sample can show what has not been seen before.
    fn zeros(&self, mesh: &[Sample], fresh: &[bool], of_numerators: bool) -> Vec<f64> {
        let (Some(first), Some(last)) = (mesh.first(), mesh.last()) else { return Vec::new() };
        let mut wanted = Vec::new();
        for (at, triple) in mesh.windows(3).enumerate() {
            if !fresh[at..at + 3].contains(&true) {
                continue;
            }
            let (reach_left, reach_right) = (triple[1].x - triple[0].x, triple[2].x - triple[1].x);
            let near = |x: f64| {
                (triple[0].x - if at == 0 { reach_left } else { 0.0 }) <= x
                    && x <= triple[2].x + if triple[2].x == last.x { reach_right } else { 0.0 }
            };
            for channel in 0..self.channels {
                let parts = [0, 1, 2]
                    .map(|place: usize| &self.found.channels[triple[place].at * self.channels + channel]);
                for zero in roots(triple, parts.map(|part| part.denominator), parts) {
                    if near(zero.re) {
                        let centre = zero.re.clamp(first.x, last.x);
                        let off = (zero.re - centre).abs();
                        let width = zero.im.abs().max(off).max(FINEST * centre.abs().max(1e-6));
                        cluster(mesh, centre, width, &mut wanted);
                    }
                }
                if !of_numerators {
                    continue;
                }
                for zero in roots(triple, parts.map(|part| part.numerator), parts) {
                    if near(zero.re) && first.x < zero.re && zero.re < last.x {
                        let (spacing, nearest) = spacing(mesh, zero.re);
                        if nearest > 0.05 * spacing && zero.im.abs() < spacing {
                            wanted.push(zero.re);
                        }
                    }
                }
            }
        }
        wanted
    }

    /// The mesh with new samples at the points wanted, leaving out those that stand there already, and which are new.
    fn insert(
        &mut self,
        mesh: Vec<Sample>,
        mut wanted: Vec<f64>,
    ) -> Result<(Vec<Sample>, Vec<bool>), OpticsError> {
        wanted.sort_by(f64::total_cmp);
        let mut clear: Vec<f64> = Vec::with_capacity(wanted.len());
        let mut wanted = wanted.into_iter().peekable();
        // Nothing stands before the first sample: that is where the range begins.
        let mut before: Option<f64> = None;
        for sample in &mesh {
            while let Some(x) = wanted.next_if(|&x| x < sample.x) {
                let apart = 0.25 * FINEST * x.abs().max(1e-6);
                if before.is_some_and(|before| x - before > apart) && sample.x - x > apart {
                    clear.push(x);
                    before = Some(x);
                }
            }
            before = Some(sample.x);
        }
        if mesh.len() + clear.len() > MOST {
            return Err(self.too_many(mesh.last().map_or(0.0, |sample| sample.x)));
        }
        self.merge(mesh, &clear)
    }

    /// The mesh with new samples at ascending points between its own, and which are new.
    fn merge(&mut self, mesh: Vec<Sample>, between: &[f64]) -> Result<(Vec<Sample>, Vec<bool>), OpticsError> {
        let mut new = self.sample(between)?.into_iter().peekable();
        let mut merged = Vec::with_capacity(mesh.len() + between.len());
        let mut fresh = Vec::with_capacity(merged.capacity());
        for sample in mesh {
            while let Some(next) = new.next_if(|next| next.x < sample.x) {
                merged.push(next);
                fresh.push(true);
            }
            merged.push(sample);
            fresh.push(false);
        }
        Ok((merged, fresh))
    }
}

/// The width of the step that holds x, and the distance to the nearer of its ends.
fn spacing(mesh: &[Sample], x: f64) -> (f64, f64) {
    let after = mesh.partition_point(|sample| sample.x <= x).clamp(1, mesh.len() - 1);
    let (lo, hi) = (mesh[after - 1].x, mesh[after].x);
    (hi - lo, (x - lo).abs().min((hi - x).abs()))
}

/// The points wanted about a resonance: none if the mesh is finer than its width there already.
fn cluster(mesh: &[Sample], centre: f64, width: f64, wanted: &mut Vec<f64>) {
    let (step, _) = spacing(mesh, centre);
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

/// The zeros of the parabola through three complex values at three real points, but for those so far off that a step of the
/// mesh is finer than they are wide.
fn roots(triple: &[Sample], values: [Complex64; 3], parts: [&Channel; 3]) -> impl Iterator<Item = Complex64> {
    let scales = parts.map(|part| part.ln_scale);
    let greatest = scales[0].max(scales[1]).max(scales[2]);
    let [v0, v1, v2] = [0, 1, 2].map(|place: usize| {
        // Most fields have no scale of their own.
        if scales[place] == greatest {
            values[place]
        } else {
            values[place] * (scales[place] - greatest).exp()
        }
    });
    let (x0, x1, x2) = (triple[0].x, triple[1].x, triple[2].x);
    let first = (v1 - v0) * (1.0 / (x1 - x0));
    let second = (v2 - v1) * (1.0 / (x2 - x1));
    let curvature = (second - first) * (1.0 / (x2 - x0));
    let slope = (first * (x2 - x1) + second * (x1 - x0)) * (1.0 / (x2 - x0));
    // A zero z of the parabola has |v₁| ≤ |slope| |z| + |curvature| |z|².
    let reach = 4.0 * (x1 - x0).max(x2 - x1);
    let most = 2.0 * (slope.norm_sqr() * reach * reach + curvature.norm_sqr() * reach.powi(4));
    let zeros = if v1.norm_sqr() > most {
        [Complex64::new(f64::NAN, f64::NAN); 2]
    } else {
        let root = (slope * slope - 4.0 * curvature * v1).sqrt();
        // Of the two forms of the solution, the one in which nothing cancels.
        let [plus, minus] = [slope + root, slope - root];
        let big = if plus.norm_sqr() >= minus.norm_sqr() { plus } else { minus };
        [-2.0 * v1 / big, -big / (2.0 * curvature)]
    };
    zeros.into_iter().map(move |off| off + x1).filter(|zero| zero.is_finite())
}
