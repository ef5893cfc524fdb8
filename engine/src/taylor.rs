//! Numbers that carry their first two derivatives: truncated Taylor series in the angular frequency.
//!
//! f(ω₀ + h) = c₀ + c₁ h + c₂ h², all else cut off. Products, quotients and elementary functions of such series are series
//! again, by the recurrences of A. Griewank, A. Walther, *Evaluating Derivatives*, 2nd ed. (2008), chapter 13.

use std::ops::{Add, Div, Mul, Neg, Sub};

use num_complex::Complex64;

use crate::number::Number;

/// A series of three complex coefficients.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Taylor(pub(crate) [Complex64; 3]);

impl Taylor {
    /// The variable itself, times a real factor, at the real value `at`.
    pub(crate) fn variable(at: f64, factor: f64) -> Taylor {
        let real = |value| Complex64::new(value, 0.0);
        Taylor([real(at * factor), real(factor), real(0.0)])
    }

    /// The composition with a function known by its value and its first two derivatives at c₀.
    fn composed(&self, value: Complex64, first: Complex64, second: Complex64) -> Taylor {
        let [_, a, b] = self.0;
        Taylor([value, first * a, first * b + 0.5 * second * a * a])
    }

    fn each(&self, of: impl Fn(Complex64) -> Complex64) -> Taylor {
        Taylor(self.0.map(of))
    }
}

impl Add for Taylor {
    type Output = Taylor;
    fn add(self, other: Taylor) -> Taylor {
        Taylor([self.0[0] + other.0[0], self.0[1] + other.0[1], self.0[2] + other.0[2]])
    }
}

impl Sub for Taylor {
    type Output = Taylor;
    fn sub(self, other: Taylor) -> Taylor {
        self + -other
    }
}

impl Neg for Taylor {
    type Output = Taylor;
    fn neg(self) -> Taylor {
        self.each(|c| -c)
    }
}

impl Mul for Taylor {
    type Output = Taylor;
    fn mul(self, other: Taylor) -> Taylor {
        let ([a, b, c], [p, q, r]) = (self.0, other.0);
        Taylor([a * p, a * q + b * p, a * r + b * q + c * p])
    }
}

impl Div for Taylor {
    type Output = Taylor;
    fn div(self, other: Taylor) -> Taylor {
        let ([a, b, c], [p, q, r]) = (self.0, other.0);
        let x = a / p;
        let y = (b - x * q) / p;
        Taylor([x, y, (c - x * r - y * q) / p])
    }
}

impl Number for Taylor {
    fn constant(value: Complex64) -> Self {
        let zero = Complex64::new(0.0, 0.0);
        Taylor([value, zero, zero])
    }

    fn value(&self) -> Complex64 {
        self.0[0]
    }

    fn re(&self) -> Self {
        self.each(|c| Complex64::new(c.re, 0.0))
    }

    fn im(&self) -> Self {
        self.each(|c| Complex64::new(c.im, 0.0))
    }

    fn scale(&self, factor: f64) -> Self {
        self.each(|c| c * factor)
    }

    fn sqrt(&self) -> Self {
        let root = Number::sqrt(&self.0[0]);
        let first = 0.5 / root;
        self.composed(root, first, -0.5 * first / self.0[0])
    }

    fn exp(&self) -> Self {
        let value = Number::exp(&self.0[0]);
        self.composed(value, value, value)
    }

    fn ln(&self) -> Self {
        let inverse = 1.0 / self.0[0];
        self.composed(Number::ln(&self.0[0]), inverse, -inverse * inverse)
    }

    /// With C = cos √u and S = sin √u/√u: C′ = −S/2, S′ = (C − S)/2u, and their derivatives.
    fn cos_sinc(squared: &Self) -> (Self, Self, f64) {
        let u = squared.0[0];
        let (cos, sinc, decay) = Complex64::cos_sinc(&u);
        let (slope, bend) = if u.norm() < 1e-2 {
            let f = (-decay).exp();
            // The series of S: Σ (−u)ᵏ/(2k + 1)!.
            let slope = -1.0 / 6.0 + u * (1.0 / 60.0 + u * (-1.0 / 1680.0 + u * (1.0 / 90_720.0)));
            let bend = 1.0 / 60.0 + u * (-1.0 / 840.0 + u * (1.0 / 30_240.0 - u / 1_995_840.0));
            (slope * f, bend * f)
        } else {
            let slope = (cos - sinc) / (2.0 * u);
            (slope, (-0.25 * sinc - 1.5 * slope) / u)
        };
        (squared.composed(cos, -0.5 * sinc, -0.5 * slope), squared.composed(sinc, slope, bend), decay)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The coefficients of f at 0.7 by central differences of high order, in plain arithmetic.
    fn differences(f: impl Fn(Complex64) -> Complex64) -> [Complex64; 3] {
        let h = 1e-2;
        let at = |steps: f64| f(Complex64::new(0.7 + steps * h, 0.0));
        let first = (at(-2.0) - at(2.0) + 8.0 * (at(1.0) - at(-1.0))) / (12.0 * h);
        let second = (-at(2.0) - at(-2.0) + 16.0 * (at(1.0) + at(-1.0)) - 30.0 * at(0.0)) / (12.0 * h * h);
        [at(0.0), first, 0.5 * second]
    }

    fn agree(taylor: Taylor, expected: [Complex64; 3]) {
        for (found, expected) in taylor.0.iter().zip(expected) {
            assert!((found - expected).norm() < 1e-6 * (1.0 + expected.norm()), "{found} {expected}");
        }
    }

    #[test]
    fn every_function_has_its_derivatives() {
        let x = Taylor::variable(0.7, 1.0);
        let base = |x: Complex64| x * x * Complex64::new(1.3, 0.4) + Complex64::new(0.2, 0.9);
        let series =
            x * x * Taylor::constant(Complex64::new(1.3, 0.4)) + Taylor::constant(Complex64::new(0.2, 0.9));
        agree(Number::sqrt(&series), differences(|x| base(x).sqrt()));
        agree(Number::exp(&series), differences(|x| base(x).exp()));
        agree(Number::ln(&series), differences(|x| base(x).ln()));
        agree(series / (x + series), differences(|x| base(x) / (x + base(x))));
    }

    #[test]
    fn sine_and_cosine_have_theirs_near_zero_and_far_from_it() {
        for size in [1e-3, 0.02, 1.0, 40.0] {
            let shape = Complex64::new(1.3, 0.4) * size;
            let x = Taylor::variable(0.7, 1.0);
            let (cos, sinc, decay) = Number::cos_sinc(&(x * x * Taylor::constant(shape)));
            let f = decay.exp();
            let delta = |x: Complex64| (x * x * shape).sqrt();
            agree(cos.scale(f), differences(|x| delta(x).cos()));
            agree(sinc.scale(f), differences(|x| delta(x).sin() / delta(x)));
        }
    }
}
