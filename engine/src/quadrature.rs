//! Gauss–Legendre nodes and weights.

use std::f64::consts::PI;

/// The `n` nodes on −1 … 1, ascending, each with its weight; exact for polynomials of degree 2n − 1.
///
/// Newton's method on the Legendre polynomial by its three-term recursion. Source: NIST Digital Library of
/// Mathematical Functions, 3.5(v).
pub(crate) fn gauss_legendre(n: usize) -> Vec<(f64, f64)> {
    let order = n as f64;
    let node = |at: usize| {
        let mut x = (PI * (at as f64 + 0.75) / (order + 0.5)).cos();
        let mut slope = 1.0;
        for _ in 0..100 {
            let (value, derivative) = legendre(n, x);
            slope = derivative;
            let step = value / derivative;
            x -= step;
            if step.abs() < 1e-16 {
                break;
            }
        }
        (x, 2.0 / ((1.0 - x * x) * slope * slope))
    };
    (0..n).rev().map(node).collect()
}

/// The Legendre polynomial of degree n at x, and its derivative.
fn legendre(n: usize, x: f64) -> (f64, f64) {
    let (mut before, mut value) = (1.0, x);
    for degree in 2..=n {
        let degree = degree as f64;
        (before, value) = (value, ((2.0 * degree - 1.0) * x * value - (degree - 1.0) * before) / degree);
    }
    (value, n as f64 * (x * value - before) / (x * x - 1.0))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn polynomials_are_integrated_exactly() {
        for n in [2, 7, 8, 24, 96] {
            let rule = gauss_legendre(n);
            for power in (0..2 * n as i32).step_by(2) {
                let sum: f64 = rule.iter().map(|(x, w)| w * x.powi(power)).sum();
                assert!((sum - 2.0 / f64::from(power + 1)).abs() < 1e-13, "{n} {power} {sum}");
            }
        }
    }
}
