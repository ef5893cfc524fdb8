//! A function on an interval as a Chebyshev series.

use std::f64::consts::PI;

use crate::error::OpticsError;

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

impl Series {
    pub(crate) fn of(
        lo: f64,
        hi: f64,
        mut function: impl FnMut(f64) -> Result<f64, OpticsError>,
    ) -> Result<Series, OpticsError> {
        let degree = DEGREE as f64;
        let mut values = [0.0; DEGREE + 1];
        for (at, value) in values.iter_mut().enumerate() {
            let x = (PI * at as f64 / degree).cos();
            *value = function((0.5 * (lo + hi) + 0.5 * (hi - lo) * x).clamp(lo, hi))?;
        }
        let mut coefficients = [0.0; DEGREE + 1];
        for (order, coefficient) in coefficients.iter_mut().enumerate() {
            let share = |at: usize| if at == 0 || at == DEGREE { 0.5 } else { 1.0 };
            let sum: f64 = values
                .iter()
                .enumerate()
                .map(|(at, value)| share(at) * value * (PI * (at * order) as f64 / degree).cos())
                .sum();
            *coefficient = 2.0 / degree * share(order) * sum;
        }
        Ok(Series { lo, hi, coefficients })
    }

    /// The size of the last terms: how far the series is from the function, seen from inside.
    pub(crate) fn tail(&self) -> f64 {
        self.coefficients[DEGREE - 2..].iter().map(|coefficient| coefficient.abs()).fold(0.0, f64::max)
    }

    /// The series' value, by Clenshaw's recursion.
    pub(crate) fn at(&self, x: f64) -> f64 {
        let t = (2.0 * x - self.lo - self.hi) / (self.hi - self.lo);
        let (mut next, mut after) = (0.0, 0.0);
        for coefficient in self.coefficients[1..].iter().rev() {
            (next, after) = (coefficient + 2.0 * t * next - after, next);
        }
        self.coefficients[0] + t * next - after
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_polynomial_of_its_degree_is_met_everywhere() {
        let polynomial = |x: f64| (x / 600.0).powi(11) - 3.0 * (x / 600.0).powi(4) + 1.0;
        let series = Series::of(500.0, 700.0, |x| Ok(polynomial(x))).expect("values");
        for x in [500.0, 513.3, 600.0, 677.7, 700.0] {
            assert!((series.at(x) - polynomial(x)).abs() < 1e-13);
        }
    }
}
