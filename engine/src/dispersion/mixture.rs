//! Effective media: the permittivity of a mixture from those of its parts.

use num_complex::Complex64;

use super::model::Model;
use super::{Index, check};
use crate::error::ModelError;
use crate::number::Number;

/// How the permittivities of the parts make that of the mixture.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum MixingRule {
    /// Σ fᵢ (εᵢ − ε)/(εᵢ + 2ε) = 0: spheres of every part in the mixture itself.
    /// D. A. G. Bruggeman, Ann. Phys. 416, 636 (1935).
    Bruggeman,
    /// (ε − εₕ)/(ε + 2εₕ) = Σ fᵢ (εᵢ − εₕ)/(εᵢ + 2εₕ): spheres in a host, which is the first part.
    /// J. C. Maxwell Garnett, Phil. Trans. R. Soc. A 203, 385 (1904).
    MaxwellGarnett,
    /// (ε − 1)/(ε + 2) = Σ fᵢ (εᵢ − 1)/(εᵢ + 2). H. A. Lorentz (1880), L. Lorenz (1880).
    LorentzLorenz,
    /// ε = Σ fᵢ εᵢ, the upper of O. Wiener's bounds (1912).
    Volume,
}

impl Index {
    /// A mixture of parts with their fractions by volume.
    ///
    /// # Errors
    /// Fewer than two parts, a fraction outside 0 to 1, fractions that don't add up to 1 (within 1e-9), parts
    /// with no wavelength in common.
    pub fn mixture(rule: MixingRule, parts: &[(Index, f64)]) -> Result<Index, ModelError> {
        if parts.len() < 2 {
            return Err(ModelError::TooFew { what: "parts", given: parts.len(), needed: 2 });
        }
        for &(_, fraction) in parts {
            check("a fraction", fraction, (0.0..=1.0).contains(&fraction), "from 0 to 1")?;
        }
        let sum: f64 = parts.iter().map(|part| part.1).sum();
        if (sum - 1.0).abs() > 1e-9 {
            return Err(ModelError::Fractions { sum });
        }
        let indices: Vec<&Index> = parts.iter().map(|part| &part.0).collect();
        Index::derive(Model::Mixture { rule, parts: parts.to_vec() }, &indices, None)
    }
}

/// The permittivity of a mixture from (permittivity, fraction) of its parts.
pub(crate) fn mix<N: Number>(rule: MixingRule, parts: &[(N, f64)]) -> N {
    let one = || N::real(1.0);
    let sum = |term: &dyn Fn(&N) -> N| {
        parts.iter().fold(N::real(0.0), |sum, (eps, fraction)| sum + term(eps).scale(*fraction))
    };
    match rule {
        MixingRule::Volume => sum(&N::clone),
        MixingRule::LorentzLorenz => {
            let polarisability = sum(&|eps| (eps.clone() - one()) / (eps.clone() + N::real(2.0)));
            (one() + polarisability.scale(2.0)) / (one() - polarisability)
        }
        MixingRule::MaxwellGarnett => {
            let host = &parts[0].0;
            let share = sum(&|eps| (eps.clone() - host.clone()) / (eps.clone() + host.scale(2.0)));
            host.clone() * (one() + share.scale(2.0)) / (one() - share)
        }
        MixingRule::Bruggeman => bruggeman(parts),
    }
}

/// The root of Bruggeman's equation that a passive mixture has.
///
/// The equation is the same as ε = 1/(3 Σ fᵢ/(εᵢ + 2ε)). For passive parts the right-hand side maps the upper
/// half-plane into itself, and so has one fixed point there (Denjoy and Wolff): that is the right root, for any number
/// of parts.
fn bruggeman<N: Number>(parts: &[(N, f64)]) -> N {
    match parts {
        [one, other] => polished(of_two(one, other), parts, 1),
        _ => {
            let values: Vec<(Complex64, f64)> =
                parts.iter().map(|(eps, fraction)| (eps.value(), *fraction)).collect();
            polished(N::constant(iterated(&values)), parts, 4)
        }
    }
}

/// Of two parts it is the root of a quadratic equation, 2ε² − hε − ε₁ε₂ = 0 with h = Σ (3fᵢ − 1) εᵢ: the one in the
/// upper half-plane, or the positive one where both are real.
fn of_two<N: Number>((one, f): &(N, f64), (other, g): &(N, f64)) -> N {
    let h = one.scale(3.0 * f - 1.0) + other.scale(3.0 * g - 1.0);
    let product = one.clone() * other.clone();
    let root = (h.clone() * h.clone() + product.scale(8.0)).sqrt();
    let (plus, minus) = (h.clone() + root.clone(), h - root);
    let lies_above = minus.value().im > plus.value().im + 1e-12 * minus.value().norm();
    if lies_above { minus.scale(0.25) } else { plus.scale(0.25) }
}

/// The fixed point by iteration.
fn iterated(parts: &[(Complex64, f64)]) -> Complex64 {
    let mut root: Complex64 = parts.iter().map(|(eps, fraction)| eps * *fraction).sum();
    for _ in 0..10_000 {
        let sum: Complex64 = parts.iter().map(|(eps, fraction)| *fraction / (eps + 2.0 * root)).sum();
        let next = 0.5 * (root + 1.0 / (3.0 * sum));
        let settled = (next - root).norm() <= 1e-10 * next.norm();
        root = next;
        if settled {
            break;
        }
    }
    root
}

/// The root after some of Newton's steps, each of which doubles the digits, and the derivatives that a number may carry.
fn polished<N: Number>(mut eps: N, parts: &[(N, f64)], steps: usize) -> N {
    for _ in 0..steps {
        let mut balance = N::real(0.0);
        let mut slope = N::real(0.0);
        for (part, fraction) in parts {
            let inverse = N::real(1.0) / (part.clone() + eps.scale(2.0));
            balance = balance + ((part.clone() - eps.clone()) * inverse.clone()).scale(*fraction);
            slope = slope - (part.clone() * inverse.clone() * inverse).scale(3.0 * fraction);
        }
        eps = eps - balance / slope;
    }
    eps
}

#[cfg(test)]
mod tests {
    use super::*;

    fn mixed(rule: MixingRule, parts: &[(f64, f64, f64)]) -> Complex64 {
        let parts: Vec<(Index, f64)> =
            parts.iter().map(|&(n, k, f)| (Index::constant(n, k).expect("valid"), f)).collect();
        Index::mixture(rule, &parts).expect("valid").at(550.0).expect("physical")
    }

    #[test]
    fn a_mixture_of_one_thing_is_that_thing() {
        for rule in
            [MixingRule::Bruggeman, MixingRule::MaxwellGarnett, MixingRule::LorentzLorenz, MixingRule::Volume]
        {
            let index = mixed(rule, &[(1.7, 0.2, 0.3), (1.7, 0.2, 0.7)]);
            assert!((index - Complex64::new(1.7, 0.2)).norm() < 1e-14);
        }
    }

    #[test]
    fn three_parts_satisfy_the_equation_and_the_limit_of_two() {
        let eps =
            mixed(MixingRule::Bruggeman, &[(2.35, 0.0, 0.3), (0.06, 3.6, 0.2), (1.0, 0.0, 0.5)]).powi(2);
        let parts: [(Complex64, f64); 3] = [
            (Complex64::new(2.35, 0.0), 0.3),
            (Complex64::new(0.06, 3.6), 0.2),
            (Complex64::new(1.0, 0.0), 0.5),
        ];
        let balance: Complex64 = parts.iter().map(|(n, f)| (n * n - eps) / (n * n + 2.0 * eps) * *f).sum();
        assert!(balance.norm() < 1e-14 && eps.im > 0.0);
        let two = mixed(MixingRule::Bruggeman, &[(2.35, 0.0, 0.3), (1.46, 0.0, 0.7)]);
        let three = mixed(MixingRule::Bruggeman, &[(2.35, 0.0, 0.3), (1.46, 0.0, 0.7), (9.0, 0.0, 0.0)]);
        assert!((two - three).norm() < 1e-14);
    }

    #[test]
    fn two_parts_solve_the_same_equation_in_closed_form_as_by_iteration() {
        for metal in [Complex64::new(0.06, 3.6), Complex64::new(1.4, 7.6), Complex64::new(3.9, 0.02)] {
            for step in 1..20 {
                let f = f64::from(step) / 20.0;
                let parts = [(metal * metal, f), (Complex64::new(2.13, 0.0), 1.0 - f)];
                let (closed, found) = (bruggeman(&parts), polished(iterated(&parts), &parts, 4));
                assert!((closed - found).norm() < 1e-12 * found.norm(), "{metal} {f}: {closed} {found}");
            }
        }
    }

    #[test]
    fn fractions_make_a_whole() {
        let part = Index::constant(1.5, 0.0).expect("valid");
        let error = Index::mixture(MixingRule::Volume, &[(part.clone(), 0.5), (part, 0.4)]).map(|_| ());
        assert_eq!(error, Err(ModelError::Fractions { sum: 0.9 }));
    }
}
