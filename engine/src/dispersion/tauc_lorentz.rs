//! The Tauc–Lorentz oscillator in closed form.
//!
//! Source: G. E. Jellison and F. A. Modine, Appl. Phys. Lett. 69, 371 (1996), erratum 69, 2137 (1996). The
//! symbols are theirs. Their two logarithms of |E − Eg| are joined here, so that the real part is finite at
//! the gap, and their α is allowed to be imaginary (an oscillator wider than twice its centre energy), where
//! the arcus tangens becomes a logarithm.

use std::f64::consts::PI;

use num_complex::Complex64;

use crate::number::Number;

/// ε₁ + iε₂ without ε∞, at the photon energy E; all parameters in eV, A ≥ 0, E₀ > 0, C > 0, Eg ≥ 0.
#[allow(non_snake_case)] // The article's symbols.
pub(super) fn permittivity<N: Number>(A: f64, E0: f64, C: f64, Eg: f64, energy_ev: &N) -> N {
    let E = energy_ev.clone();
    let E2 = E.clone() * E.clone();
    let (E02, Eg2, C2) = (E0 * E0, Eg * Eg, C * C);
    let gamma2 = E02 - 0.5 * C2;
    let alpha2 = 4.0 * E02 - C2;
    let off = E2.clone() - N::real(gamma2);
    let zeta4 = off.clone() * off.clone() + N::real(0.25 * alpha2 * C2);

    let a_ln = E2.scale(Eg2 - E02) + N::real(Eg2 * C2 - E02 * (E02 + 3.0 * Eg2));
    let a_atan = (E2.clone() - N::real(E02)).scale(E02 + Eg2) + N::real(Eg2 * C2);
    let shape = Shape::new(E0, C, Eg);
    let first = a_ln.scale(0.5 * C / E0 * shape.log_over_alpha);
    let second = a_atan.scale(shape.arcs / E0);
    let third = off.scale(2.0 * E0 * Eg * shape.arc_over_alpha);

    let above = E.clone() + N::real(Eg);
    let below = E.clone() - N::real(Eg);
    let distance = below.value().re;
    let near = if distance == 0.0 {
        N::real(0.0)
    } else {
        below.clone() * below.clone() * below.scale(distance.signum()).ln()
    };
    let far = above.clone() * above.clone() * above.ln();
    let logs = (far - near) / E.clone() - N::real(Eg * ((E02 - Eg2).powi(2) + Eg2 * C2).ln());
    let fourth = logs.scale(E0 * C);

    let real = (first - second + third + fourth).scale(A / PI) / zeta4;
    if distance <= 0.0 {
        return real;
    }
    let denominator = ((E2.clone() - N::real(E02)) * (E2.clone() - N::real(E02)) + E2.scale(C2)) * E;
    let imaginary = (below.clone() * below).scale(A * E0 * C) / denominator;
    real + N::constant(Complex64::I) * imaginary
}

/// What the closed form needs of α = √(4E₀² − C²), none of it depending on the photon's energy.
struct Shape {
    /// ln[(E₀² + Eg² + αEg)/(E₀² + Eg² − αEg)]/α.
    log_over_alpha: f64,
    /// π − atan((2Eg + α)/C) + atan((α − 2Eg)/C).
    arcs: f64,
    /// [π + 2 atan(2(γ² − Eg²)/(αC))]/α.
    arc_over_alpha: f64,
}

impl Shape {
    fn new(e0: f64, c: f64, gap: f64) -> Shape {
        let alpha2 = 4.0 * e0 * e0 - c * c;
        let sum = e0 * e0 + gap * gap;
        let difference = e0 * e0 - 0.5 * c * c - gap * gap;
        let alpha = alpha2.abs().sqrt();
        if alpha2.abs() < 1e-14 * e0 * e0 {
            // The limit α → 0 of the expressions below; there γ² − Eg² is negative.
            let arcs = PI - 2.0 * (2.0 * gap / c).atan();
            return Shape { log_over_alpha: 2.0 * gap / sum, arcs, arc_over_alpha: -c / difference };
        }
        if alpha2 > 0.0 {
            Shape {
                log_over_alpha: ((sum + alpha * gap) / (sum - alpha * gap)).ln() / alpha,
                arcs: PI - ((2.0 * gap + alpha) / c).atan() + ((alpha - 2.0 * gap) / c).atan(),
                arc_over_alpha: 2.0 * (alpha * c).atan2(-2.0 * difference) / alpha,
            }
        } else {
            let arc = Complex64::new(2.0 * gap / c, alpha / c).atan();
            let ratio = -2.0 * difference / (alpha * c);
            Shape {
                log_over_alpha: 2.0 * (alpha * gap / sum).atan() / alpha,
                arcs: PI - 2.0 * arc.re,
                arc_over_alpha: ((ratio + 1.0) / (ratio - 1.0)).ln() / alpha,
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// ε₁ by the Kramers–Kronig integral, with the pole subtracted; substitution x = gap + u/(1 − u).
    fn kramers_kronig(a: f64, e0: f64, c: f64, gap: f64, energy: f64) -> f64 {
        let eps2 = |x: f64| {
            if x <= gap {
                return 0.0;
            }
            a * e0 * c * (x - gap).powi(2) / (((x * x - e0 * e0).powi(2) + c * c * x * x) * x)
        };
        // P∫₀^∞ dx/(x² − E²) = 0, so that E ε₂(E) may be taken off inside.
        let pole = energy * eps2(energy);
        let f = |x: f64| (x * eps2(x) - pole) / (x * x - energy * energy);
        let steps = 400_000;
        let sum: f64 = (0..steps)
            .map(|at| {
                let u = (at as f64 + 0.5) / steps as f64;
                f(u / (1.0 - u)) / (1.0 - u).powi(2)
            })
            .sum();
        2.0 / PI * sum / steps as f64
    }

    #[test]
    fn the_real_part_obeys_kramers_kronig_also_when_overdamped() {
        for (a, e0, c, gap) in [(122.0, 3.45, 2.54, 1.2), (40.0, 2.0, 5.0, 0.8), (40.0, 2.0, 4.0, 0.8)] {
            for energy in [0.7, 1.9, 3.3] {
                let closed = permittivity(a, e0, c, gap, &Complex64::new(energy, 0.0)).re;
                let integral = kramers_kronig(a, e0, c, gap, energy);
                assert!((closed - integral).abs() < 2e-4 * integral.abs().max(1.0), "{closed} {integral}");
            }
        }
    }

    #[test]
    fn it_is_finite_and_continuous_at_the_gap() {
        let at = |energy: f64| permittivity(122.0, 3.45, 2.54, 1.2, &Complex64::new(energy, 0.0)).re;
        assert!((at(1.2) - at(1.2 + 1e-9)).abs() < 1e-6);
        assert!((at(1.2) - at(1.2 - 1e-9)).abs() < 1e-6);
    }
}
