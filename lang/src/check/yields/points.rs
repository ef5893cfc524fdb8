//! The points at which the draws are made: scrambled Sobol sequences, and the distributions of JCGM 101.
//!
//! Sources: I. M. Sobol, USSR Comput. Math. Math. Phys. 7, 86–112 (1967); A. B. Owen, J. Complexity 14, 466–489 (1998), for the
//! scrambling, in the form of B. Burley, J. Comput. Graph. Tech. 9(4) (2020); JCGM 101:2008, 6.4.2 and 6.4.7, for the
//! distributions.

use crate::syntax::ast::SpreadKind;
use statrs::function::erf::{erf, erf_inv};
use std::f64::consts::SQRT_2;

/// A sequence has so many points; more parts come from sequences scrambled otherwise.
const LENGTH: u32 = 1 << 16;
/// A sequence has so many dimensions; more draws come from sequences scrambled otherwise.
const DIMENSIONS: u32 = 256;
/// Normal distributions are cut at so many standard deviations.
const CUT: f64 = 4.0;

/// The draws of a part, each in its unit.
pub(super) fn part(seed: u32, part: u32, kinds: impl Iterator<Item = SpreadKind>) -> Vec<f64> {
    let (block, at) = (part / LENGTH, part % LENGTH);
    let draw = |(dimension, kind): (usize, SpreadKind)| {
        let (group, dimension) = (dimension as u32 / DIMENSIONS, dimension as u32 % DIMENSIONS);
        let seed = seed ^ block.wrapping_mul(0x9e37_79b9) ^ group.wrapping_mul(0x85eb_ca6b);
        // A sample stands for a cell of 2⁻²⁴: its middle is never 0 nor 1.
        let uniform = f64::from(sobol_burley::sample(at, dimension, seed)) + 0.5 / f64::from(1 << 24);
        unit(kind, uniform)
    };
    kinds.enumerate().map(draw).collect()
}

/// A draw from a number between 0 and 1.
fn unit(kind: SpreadKind, uniform: f64) -> f64 {
    match kind {
        SpreadKind::Rectangular => 2.0 * uniform - 1.0,
        SpreadKind::Normal => SQRT_2 * erf_inv((2.0 * uniform - 1.0) * erf(CUT / SQRT_2)),
    }
}

/// The variance of a draw in its unit.
pub(super) fn variance(kind: SpreadKind) -> f64 {
    match kind {
        SpreadKind::Rectangular => 1.0 / 3.0,
        SpreadKind::Normal => {
            // Of the cut distribution: 1 − 2 c φ(c)/(2 Φ(c) − 1).
            let density = (-0.5 * CUT * CUT).exp() / (2.0 * std::f64::consts::PI).sqrt();
            1.0 - 2.0 * CUT * density / erf(CUT / SQRT_2)
        }
    }
}

/// How far a draw can go, in its unit.
pub(super) fn reach(kind: SpreadKind) -> f64 {
    match kind {
        SpreadKind::Rectangular => 1.0,
        SpreadKind::Normal => CUT,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn draws_have_the_moments_and_the_ends_of_their_distributions() {
        for (kind, fourth) in [(SpreadKind::Rectangular, 0.2), (SpreadKind::Normal, 2.98)] {
            let draws: Vec<f64> = (0..4096).map(|at| part(7, at, std::iter::once(kind))[0]).collect();
            let mean = |of: &dyn Fn(f64) -> f64| draws.iter().map(|x| of(*x)).sum::<f64>() / 4096.0;
            assert!(mean(&|x| x).abs() < 1e-3);
            assert!((mean(&|x| x * x) - variance(kind)).abs() < 2e-3, "{kind:?}");
            assert!((mean(&|x| x.powi(4)) - fourth).abs() < 0.03, "{kind:?} {}", mean(&|x| x.powi(4)));
            assert!(draws.iter().all(|x| x.abs() <= reach(kind)));
        }
    }

    #[test]
    fn more_parts_and_more_draws_than_one_sequence_has_are_still_different() {
        let kinds = || std::iter::repeat_n(SpreadKind::Rectangular, 300);
        let (one, other) = (part(7, 5, kinds()), part(7, 5 + LENGTH, kinds()));
        assert!(one[0] != one[256] && one[0] != other[0]);
    }
}
