//! One coating, coherent, between two media: amplitudes, powers and the power flow at every face.

use num_complex::Complex64;

use crate::matrix::{Medium, Mode, Step};
use crate::real::Real;

/// What a coating does to the power of a wave that arrives in one of the two media about it, as shares of it.
#[derive(Clone, Debug)]
pub(crate) struct Powers<F> {
    pub(crate) reflectance: F,
    pub(crate) transmittance: F,
    pub(crate) ln_transmittance: F,
    /// The absorptance of each layer, if asked for, in the order the light meets them.
    pub(crate) films: Vec<F>,
}

/// A coating solved for a wave that arrives in one of the two media about it.
#[derive(Clone, Debug)]
pub(crate) struct Coating {
    pub(crate) powers: Powers<f64>,
    /// The numerator and the denominator of r, the amplitude of the tangential electric field reflected, up to
    /// a common positive factor. For p this is the sign with which r is the same for s and p at normal
    /// incidence.
    #[cfg_attr(not(test), expect(dead_code, reason = "the kernels' own are tested against it"))]
    pub(crate) numerator: Complex64,
    #[cfg_attr(not(test), expect(dead_code, reason = "the kernels' own are tested against it"))]
    pub(crate) denominator: Complex64,
    /// The logarithm of that factor's size.
    #[cfg_attr(not(test), expect(dead_code, reason = "the kernels' own are tested against it"))]
    pub(crate) ln_scale: f64,
}

/// An excess of R + T over 1 that tells that a resonance was lost in rounding: an error, not a result.
const LOST: f64 = 1e-10;

/// Which results are wanted beyond R and T.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Detail {
    Whole,
    ByFilm,
}

impl Coating {
    /// `steps` in the order the light meets the films. R = |r|², T is the power that flows into the exit
    /// medium over what the arriving wave alone carries.
    ///
    /// Where the entry medium carries no power (a thick body in total reflection) all powers are zero: no
    /// light arrives there. A reflectance that is not a number stands for one lost in rounding.
    pub(crate) fn solve<'a>(
        steps: impl DoubleEndedIterator<Item = &'a Step<Complex64>>,
        entry: &Medium<Complex64>,
        exit: &Medium<Complex64>,
        mode: Mode,
        detail: Detail,
    ) -> Coating {
        let arriving = entry.wave(mode);
        let mut pair = exit.wave(mode);
        let flux_out = pair.flux().max(0.0);
        let mut faces: Vec<(f64, f64)> = Vec::new();
        let mut lossless: Vec<bool> = Vec::new();
        let mut all_lossless = entry.permittivity.im == 0.0;
        for step in steps.rev() {
            all_lossless &= step.is_lossless();
            if detail == Detail::ByFilm {
                faces.push((pair.flux(), pair.ln_scale));
                lossless.push(step.is_lossless());
            }
            pair = step.carry(&pair, mode);
        }
        let front = pair;
        let sum = arriving.c * front.b + arriving.b * front.c;
        let difference = arriving.c * front.b - arriving.b * front.c;
        let flux_in = arriving.flux();
        let powers = Powers::dark(faces.len());
        let mut coating =
            Coating { powers, numerator: difference, denominator: sum, ln_scale: front.ln_scale };
        if flux_in <= 0.0 {
            return coating;
        }
        let powers = &mut coating.powers;
        // Without absorption |D|² = |N|² + 4 × both power flows, and in this form no rounding, not even at a
        // resonance finer than any number, can make R + T other than 1.
        let passed = 4.0 * flux_in * flux_out * (-2.0 * front.ln_scale).exp();
        let whole = if all_lossless { difference.norm_sqr() + passed } else { sum.norm_sqr() };
        powers.reflectance = difference.norm_sqr() / whole;
        // The power flow of a field in the stack over that of the arriving wave alone.
        let share = 4.0 * (arriving.b * arriving.c).norm_sqr() / (flux_in * whole);
        if flux_out > 0.0 {
            powers.ln_transmittance = (share * flux_out).ln() - 2.0 * front.ln_scale;
            powers.transmittance = share * flux_out * (-2.0 * front.ln_scale).exp();
        }
        if entry.permittivity.im == 0.0 && powers.reflectance + powers.transmittance > 1.0 + LOST {
            powers.reflectance = f64::NAN;
        }
        if detail == Detail::ByFilm {
            faces.push((front.flux(), front.ln_scale));
            let flow =
                |&(flux, ln_scale): &(f64, f64)| share * flux * (2.0 * (ln_scale - front.ln_scale)).exp();
            let flows: Vec<f64> = faces.iter().rev().map(flow).collect();
            // A film that does not absorb takes nothing, and not what rounding leaves either.
            let share =
                |(faces, &lossless): (&[f64], &bool)| if lossless { 0.0 } else { faces[0] - faces[1] };
            powers.films = flows.windows(2).zip(lossless.iter().rev()).map(share).collect();
        }
        coating
    }
}

impl<F: Real> Powers<F> {
    /// Where no light arrives.
    pub(crate) fn dark(layers: usize) -> Powers<F> {
        let nothing = F::of(0.0);
        let ln_transmittance = F::of(f64::NEG_INFINITY);
        Powers {
            reflectance: nothing,
            transmittance: nothing,
            ln_transmittance,
            films: vec![nothing; layers],
        }
    }

    /// The powers of unpolarised light from those of s and p.
    pub(crate) fn mean(&self, p: &Powers<F>) -> Powers<F> {
        let mean = |s: F, p: F| (s + p).scaled(0.5);
        let transmittance = mean(self.transmittance, p.transmittance);
        Powers {
            reflectance: mean(self.reflectance, p.reflectance),
            transmittance,
            ln_transmittance: transmittance.ln(),
            films: self.films.iter().zip(&p.films).map(|(s, p)| mean(*s, *p)).collect(),
        }
    }

    /// Whether every number is one.
    pub(crate) fn is_finite(&self) -> bool {
        self.reflectance.is_number()
            && self.transmittance.is_number()
            && !self.ln_transmittance.value().is_nan()
            && self.films.iter().all(|share| share.is_number())
    }
}
