//! A function on an interval as a Chebyshev series.

use std::f64::consts::PI;
use std::sync::LazyLock;

/// The degree of every series.
pub(crate) const DEGREE: usize = 12;

/// A series Σ cⱼ Tⱼ on an interval, through the function's values at the Chebyshev points.
///
/// Source: L. N. Trefethen, *Approximation Theory and Approximation Practice* (2013), chapters 2 to 4.
#[derive(Clone, Debug)]
pub(crate) struct Series {
    pub(crate) lo: f64,
    pub(crate) hi: f64,
    coefficients: [f64; DEGREE + 1],
}

/// The Chebyshev points, cos πj/n.
static PLACES: LazyLock<[f64; DEGREE + 1]> =
    LazyLock::new(|| std::array::from_fn(|at| (PI * at as f64 / DEGREE as f64).cos()));

/// The share of each value in each coefficient.
static SHARES: LazyLock<[[f64; DEGREE + 1]; DEGREE + 1]> = LazyLock::new(|| {
    let end = |at: usize| if at == 0 || at == DEGREE { 0.5 } else { 1.0 };
    let share = |order: usize, at: usize| {
        let angle = PI * (at * order) as f64 / DEGREE as f64;
        2.0 / DEGREE as f64 * end(order) * end(at) * angle.cos()
    };
    std::array::from_fn(|order| std::array::from_fn(|at| share(order, at)))
});

impl Series {
    /// Where the function is to be known.
    pub(crate) fn places(lo: f64, hi: f64) -> impl Iterator<Item = f64> {
        PLACES.iter().map(move |x| (0.5 * (lo + hi) + 0.5 * (hi - lo) * x).clamp(lo, hi))
    }

    /// From the values there.
    pub(crate) fn new(lo: f64, hi: f64, values: &[f64]) -> Series {
        let coefficient = |shares: &[f64; DEGREE + 1]| shares.iter().zip(values).map(|(a, b)| a * b).sum();
        Series { lo, hi, coefficients: SHARES.each_ref().map(coefficient) }
    }

    /// The size of the last terms: how far the series is from the function, seen from inside.
    pub(crate) fn tail(&self) -> f64 {
        self.coefficients[DEGREE - 2..].iter().map(|coefficient| coefficient.abs()).fold(0.0, f64::max)
    }

    /// The series' values at several places, by Clenshaw's recursion.
    pub(crate) fn at<const N: usize>(&self, places: &[f64; N]) -> [f64; N] {
        let scale = 1.0 / (self.hi - self.lo);
        let t = places.map(|x| (2.0 * x - self.lo - self.hi) * scale);
        let (mut next, mut after) = ([0.0; N], [0.0; N]);
        for coefficient in self.coefficients[1..].iter().rev() {
            for at in 0..N {
                (next[at], after[at]) = (coefficient + 2.0 * t[at] * next[at] - after[at], next[at]);
            }
        }
        std::array::from_fn(|at| self.coefficients[0] + t[at] * next[at] - after[at])
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_polynomial_of_its_degree_is_met_everywhere() {
        let polynomial = |x: f64| (x / 600.0).powi(11) - 3.0 * (x / 600.0).powi(4) + 1.0;
        let values: Vec<f64> = Series::places(500.0, 700.0).map(polynomial).collect();
        let series = Series::new(500.0, 700.0, &values);
        for x in [500.0, 513.3, 600.0, 677.7, 700.0] {
            assert!((series.at(&[x])[0] - polynomial(x)).abs() < 1e-13);
        }
    }
}
