//! What one coating does to light from one side: amplitudes and powers.

use pulp::Simd;

use super::march::{Fields, Pair};
use super::media::Wave;
use super::points::Points;
use crate::lanes::{Complex, Lanes, decay};

/// An excess of R + T over 1 that tells that a resonance was lost in rounding: an error, not a result.
const LOST: f64 = 1e-10;

/// A coating, seen from one side, for one polarisation.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Face<S: Simd> {
    pub(crate) reflectance: Lanes<S>,
    /// T over 2^−halved.
    pub(crate) passed: Lanes<S>,
    pub(crate) halved: Lanes<S>,
    /// T.
    pub(crate) transmittance: Lanes<S>,
    /// N and D of r = N/D, in the fields' own scale.
    pub(crate) numerator: Complex<S>,
    pub(crate) denominator: Complex<S>,
    /// The power flow of a field in the coating, in the fields' own scale, over that of the arriving wave.
    pub(crate) share: Lanes<S>,
}

/// 2^−halved; fields that grew in a clear film may make the exponent negative.
#[inline(always)]
pub(crate) fn power<S: Simd>(halved: Lanes<S>) -> Lanes<S> {
    let zero = halved.of(0.0);
    if halved.abs().greatest() == 0.0 {
        return zero.of(1.0);
    }
    let (left, _) = decay(halved.max(zero));
    let (grown, _) = decay((-halved).max(zero));
    left / grown
}

/// Where nothing absorbs.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) struct Lossless {
    /// Not in the medium before the coating.
    pub(crate) before: bool,
    /// Nor in its films.
    pub(crate) films: bool,
}

impl Lossless {
    #[inline(always)]
    pub(crate) fn of(points: &Points, block: usize, before: usize, films: &[usize]) -> Lossless {
        Lossless {
            before: points.is_lossless(block, before),
            films: films.iter().all(|film| points.is_lossless(block, *film)),
        }
    }
}

/// The faces for `P` polarisations from the fields at the front.
#[inline(always)]
pub(crate) fn faces<S: Simd, const P: usize>(
    simd: S,
    fields: &Fields<S, P>,
    entry: &[Wave; 2],
    exit: &[Wave; 2],
    modes: [usize; P],
    lossless: Lossless,
    part: usize,
) -> [Face<S>; P] {
    let zero = Lanes::splat(simd, 0.0);
    let nothing = Complex { re: zero, im: zero };
    let mut faces = [Face {
        reflectance: zero,
        passed: zero,
        halved: zero,
        transmittance: zero,
        numerator: nothing,
        denominator: nothing,
        share: zero,
    }; P];
    for p in 0..P {
        let scale = power(fields.halved[p]);
        let arriving = Pair::of_wave(simd, &entry[modes[p]], part);
        let leaving = Pair::of_wave(simd, &exit[modes[p]], part);
        let front = fields.pairs[p];
        let (electric, magnetic) = (arriving.c * front.b, arriving.b * front.c);
        let (difference, sum) = (electric - magnetic, electric + magnetic);
        let flux_in = arriving.flux();
        let flux_out = leaving.flux().max(zero) * fields.norm;
        let (reflected, arrived) = (difference.norm_sqr(), sum.norm_sqr());
        let four = zero.of(4.0);
        // Without absorption |D|² = |N|² + 4 × both power flows, and in this form no rounding, not even at a resonance finer
        // than any number, can make R + T other than 1.
        let whole = if lossless.before && lossless.films {
            (four * flux_in * flux_out).mul_add(scale, reflected)
        } else {
            arrived
        };
        // One division for both.
        let over = zero.of(1.0) / (whole * flux_in);
        let reflectance = reflected * flux_in * over;
        let share = four * (arriving.b * arriving.c).norm_sqr() * over;
        let face = &mut faces[p];
        face.halved = fields.halved[p];
        // Where the medium before carries no power no light arrives.
        face.reflectance = zero.where_less(flux_in, reflectance, zero);
        face.share = zero.where_less(flux_in, share, zero);
        face.passed = face.share * flux_out;
        face.transmittance = face.passed * scale;
        if lossless.before {
            let both = face.reflectance + face.transmittance;
            face.reflectance = zero.of(1.0 + LOST).where_less(both, zero.of(f64::NAN), face.reflectance);
        }
        (face.numerator, face.denominator) = (difference, sum);
    }
    faces
}
