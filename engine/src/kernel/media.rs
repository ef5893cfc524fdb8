//! What a stack's media do to tilted light at every point: all that the films' thicknesses have no part in.
//!
//! With q = N cos θ, q² = N² − α², the tilted admittances are η = q for s and N²/q for p, in units of free space's. A film of
//! thickness d turns the phase by 2 q d/λ half-turns, and its absorption halves the power 2 log₂e k₀ Im q d times.

use std::f64::consts::{LOG2_E, TAU};

use pulp::{Simd, WithSimd};

use super::points::{Points, Row, WIDTH, parts};
use crate::lanes::{Complex, Lanes, dispatch};
use crate::plan::{Mean, Plan};

/// Smaller numbers in place of q = 0 leave sin δ/q the same to the last digit, and 1/q a number.
const LEAST: f64 = 1e-100;

/// What a medium is to light at all points of a block.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Kind {
    /// Without absorption, and light runs through it: all is real.
    Clear,
    /// With absorption, or in total reflection.
    Dim,
    /// The mean of two media, in which s and p turn differently.
    Mean,
}

/// A complex quantity over a block.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Pairs {
    pub(crate) re: Row,
    pub(crate) im: Row,
}

impl Pairs {
    const ZERO: Pairs = Pairs { re: Row::ZERO, im: Row::ZERO };

    #[inline(always)]
    pub(crate) fn load<S: Simd>(&self, simd: S, part: usize) -> Complex<S> {
        Complex { re: self.re.load(simd, part), im: self.im.load(simd, part) }
    }

    #[inline(always)]
    fn store<S: Simd>(&mut self, part: usize, value: Complex<S>) {
        self.re.store(part, value.re);
        self.im.store(part, value.im);
    }
}

/// A medium for one polarisation over a block.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Slab {
    /// Half-turns of the phase per nm.
    pub(crate) turns: Row,
    /// Halvings of the power per nm.
    pub(crate) halvings: Row,
    /// η and 1/η.
    pub(crate) admittance: Pairs,
    pub(crate) impedance: Pairs,
}

impl Slab {
    const ZERO: Slab =
        Slab { turns: Row::ZERO, halvings: Row::ZERO, admittance: Pairs::ZERO, impedance: Pairs::ZERO };
}

/// A wave that runs away from the light, in a scale in which it is finite for p even where q vanishes: (1, q) for s, (q/N, N)
/// for p.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Wave {
    pub(crate) b: Pairs,
    pub(crate) c: Pairs,
}

impl Wave {
    const ZERO: Wave = Wave { b: Pairs::ZERO, c: Pairs::ZERO };
}

/// All media of a stack at all points, under one angle each.
#[derive(Clone, Debug)]
pub(crate) struct Media {
    count: usize,
    kinds: Vec<Kind>,
    /// The most halvings per nm in each block.
    strongest: Vec<f64>,
    slabs: Vec<[Slab; 2]>,
    waves: Vec<[Wave; 2]>,
    /// Of the materials.
    pure: usize,
}

/// All media in one block.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Slabs<'a> {
    /// Of each for s and for p.
    pub(crate) slabs: &'a [[Slab; 2]],
    pub(crate) kinds: &'a [Kind],
    pub(crate) strongest: &'a [f64],
}

/// From where the light's angle counts.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Tilt<'a> {
    /// The medium in which the light has these angles, and whether it is the incident one.
    pub(crate) from: usize,
    pub(crate) incident: bool,
    /// The angles, rad: one for all points, or one for each.
    pub(crate) angles_rad: &'a [f64],
}

impl Media {
    pub(crate) fn new(plan: &Plan, points: &Points, tilt: Tilt<'_>) -> Media {
        let (blocks, pure) = (points.blocks(), plan.pure());
        let count = pure + plan.means.len();
        let mut media = Media {
            count,
            kinds: vec![Kind::Clear; blocks * count],
            strongest: vec![0.0; blocks * count],
            slabs: vec![[Slab::ZERO; 2]; blocks * count],
            waves: vec![[Wave::ZERO; 2]; blocks * pure],
            pure,
        };
        let ends = plan.ends();
        dispatch(Tables { means: &plan.means, ends: &ends, points, tilt, media: &mut media });
        for ((strongest, slabs), kind) in media.strongest.iter_mut().zip(&media.slabs).zip(&media.kinds) {
            if *kind != Kind::Clear {
                let [s, p] = slabs;
                *strongest = s.halvings.0.iter().chain(&p.halvings.0).copied().fold(0.0, f64::max);
            }
        }
        media
    }

    /// The media of a block.
    #[inline(always)]
    pub(crate) fn slabs(&self, block: usize) -> Slabs<'_> {
        let of = block * self.count..(block + 1) * self.count;
        Slabs {
            slabs: &self.slabs[of.clone()],
            kinds: &self.kinds[of.clone()],
            strongest: &self.strongest[of],
        }
    }

    /// The running waves of the materials in a block.
    #[inline(always)]
    pub(crate) fn waves(&self, block: usize) -> &[[Wave; 2]] {
        &self.waves[block * self.pure..(block + 1) * self.pure]
    }
}

/// Builds the tables.
struct Tables<'a> {
    means: &'a [Mean],
    /// Which of the materials are half-spaces or thick bodies.
    ends: &'a [bool],
    points: &'a Points,
    tilt: Tilt<'a>,
    media: &'a mut Media,
}

impl WithSimd for Tables<'_> {
    type Output = ();

    #[inline(always)]
    fn with_simd<S: Simd>(self, simd: S) {
        let Tables { means, ends, points, tilt, media } = self;
        let (mut sine, mut cosine) = (Row::ZERO, Row::ZERO);
        if let [angle] = tilt.angles_rad {
            (sine, cosine) = (Row([angle.sin(); WIDTH]), Row([angle.cos(); WIDTH]));
        }
        for block in 0..points.blocks() {
            if tilt.angles_rad.len() != 1 {
                let last = tilt.angles_rad.len() - 1;
                for lane in 0..WIDTH {
                    let angle = tilt.angles_rad[(block * WIDTH + lane).min(last)];
                    (sine.0[lane], cosine.0[lane]) = angle.sin_cos();
                }
            }
            for part in 0..parts::<S>() {
                let wavelength = points.wavelengths(block).load(simd, part);
                let inverse_wavelength = wavelength.of(1.0) / wavelength;
                let entry = points.index(block, tilt.from)[0].load(simd, part);
                let alpha = entry * sine.load(simd, part);
                for medium in 0..media.pure {
                    let [n, k] = points.index(block, medium);
                    let index = Complex { re: n.load(simd, part), im: k.load(simd, part) };
                    let permittivity = index * index;
                    let cosine = cosine.load(simd, part);
                    let square = if tilt.incident && medium == tilt.from {
                        // Known without the loss of digits near grazing incidence.
                        permittivity.scale(cosine * cosine)
                    } else {
                        // A product of sum and difference keeps the digits near the critical angle.
                        let real = Complex { re: alpha, im: alpha.of(0.0) };
                        (index - real) * (index + real)
                    };
                    let at = block * media.count + medium;
                    let [s, p] = &mut media.slabs[at];
                    if index.im.greatest() == 0.0 && square.re.least() > LEAST * LEAST {
                        let normal = square.re.sqrt();
                        let inverse = normal.of(1.0) / normal;
                        let permittivity = permittivity.re;
                        fill_clear(s, part, inverse_wavelength, normal, normal, inverse);
                        fill_clear(
                            p,
                            part,
                            inverse_wavelength,
                            normal,
                            permittivity * inverse,
                            normal / permittivity,
                        );
                    } else {
                        media.kinds[at] = Kind::Dim;
                        let normal = at_least(square.upper_sqrt());
                        let inverse = normal.inverse();
                        fill(s, part, inverse_wavelength, normal, normal, inverse);
                        let over = normal * permittivity.inverse();
                        fill(p, part, inverse_wavelength, normal, permittivity * inverse, over);
                    }
                    if ends[medium] {
                        let normal = square.upper_sqrt();
                        let [s, p] = &mut media.waves[block * media.pure + medium];
                        s.b.store(part, Complex::splat(simd, 1.0, 0.0));
                        s.c.store(part, normal);
                        p.b.store(part, normal * index.inverse());
                        p.c.store(part, index);
                    }
                }
                for (mean, at) in means.iter().zip(block * media.count + media.pure..) {
                    media.kinds[at] = Kind::Mean;
                    let [one, other] = [mean.one, mean.other].map(|medium| {
                        let [n, k] = points.index(block, medium);
                        let index = Complex { re: n.load(simd, part), im: k.load(simd, part) };
                        let real = Complex { re: alpha, im: alpha.of(0.0) };
                        let permittivity = index * index;
                        let square = (index - real) * (index + real);
                        [permittivity, square, square * permittivity.inverse()]
                    });
                    let (share, rest) = (alpha.of(mean.share), alpha.of(1.0 - mean.share));
                    // Of ε along the film, of 1/ε across it.
                    let [permittivity, square, ratio] =
                        [0, 1, 2].map(|part: usize| one[part].scale(share) + other[part].scale(rest));
                    let normal = at_least(square.upper_sqrt());
                    let [s, p] = &mut media.slabs[at];
                    fill(s, part, inverse_wavelength, normal, normal, normal.inverse());
                    let normal = at_least((permittivity * ratio).upper_sqrt());
                    let admittance = permittivity * normal.inverse();
                    fill(p, part, inverse_wavelength, normal, admittance, admittance.inverse());
                }
            }
        }
    }
}

/// The number, or a very small one in place of zero.
#[inline(always)]
fn at_least<S: Simd>(number: Complex<S>) -> Complex<S> {
    let least = number.re.of(LEAST);
    let size = number.re.abs() + number.im.abs();
    Complex { re: size.where_less(least, least, number.re), im: number.im }
}

#[inline(always)]
fn fill<S: Simd>(
    slab: &mut Slab,
    part: usize,
    inverse_wavelength: Lanes<S>,
    normal: Complex<S>,
    admittance: Complex<S>,
    impedance: Complex<S>,
) {
    slab.turns.store(part, normal.re * inverse_wavelength.of(2.0) * inverse_wavelength);
    let halvings = inverse_wavelength.of(2.0 * TAU * LOG2_E) * inverse_wavelength;
    slab.halvings.store(part, normal.im * halvings);
    slab.admittance.store(part, admittance);
    slab.impedance.store(part, impedance);
}

/// The same where all is real; the imaginary parts stay zero.
#[inline(always)]
fn fill_clear<S: Simd>(
    slab: &mut Slab,
    part: usize,
    inverse_wavelength: Lanes<S>,
    normal: Lanes<S>,
    admittance: Lanes<S>,
    impedance: Lanes<S>,
) {
    slab.turns.store(part, normal * inverse_wavelength.of(2.0) * inverse_wavelength);
    slab.admittance.re.store(part, admittance);
    slab.impedance.re.store(part, impedance);
}
