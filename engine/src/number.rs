//! The arithmetic that the formulas of optics are written in.
//!
//! Dispersion formulas and the film recursion are generic over [`Number`], so that the same source text
//! serves plain complex values and quantities that carry more than a value, such as derivatives.

use std::ops::{Add, Div, Mul, Neg, Sub};

use num_complex::Complex64;

/// A complex-valued function of a real variable (a photon energy), known at one point.
pub(crate) trait Number:
    Clone + Add<Output = Self> + Sub<Output = Self> + Mul<Output = Self> + Div<Output = Self> + Neg<Output = Self>
{
    /// A value that does not depend on the variable.
    fn constant(value: Complex64) -> Self;
    /// The plain value at the point.
    fn value(&self) -> Complex64;
    /// The real part of the function, which is again a function of the real variable.
    fn re(&self) -> Self;
    /// The imaginary part of the function.
    fn im(&self) -> Self;
    /// The product with a real constant.
    fn scale(&self, factor: f64) -> Self;
    /// The principal square root.
    fn sqrt(&self) -> Self;
    /// The exponential.
    fn exp(&self) -> Self;
    /// The principal logarithm.
    fn ln(&self) -> Self;
    /// `(cos δ · f, sin δ / δ · f, −ln f)` from δ², with the factor f = exp(−|Im δ|).
    ///
    /// Both functions are even in δ, so they depend on δ² alone and are smooth at δ = 0: a film at its
    /// critical angle needs no special case.
    fn cos_sinc(squared: &Self) -> (Self, Self, f64);

    /// A real constant.
    fn real(value: f64) -> Self {
        Self::constant(Complex64::new(value, 0.0))
    }
}

impl Number for Complex64 {
    fn constant(value: Complex64) -> Self {
        value
    }

    fn value(&self) -> Complex64 {
        *self
    }

    fn re(&self) -> Self {
        Complex64::new(self.re, 0.0)
    }

    fn im(&self) -> Self {
        Complex64::new(self.im, 0.0)
    }

    fn scale(&self, factor: f64) -> Self {
        self * factor
    }

    fn sqrt(&self) -> Self {
        // On the negative real axis the sign of zero would choose the branch; the upper one is meant.
        if self.im == 0.0 {
            let root = self.re.abs().sqrt();
            return if self.re >= 0.0 { Complex64::new(root, 0.0) } else { Complex64::new(0.0, root) };
        }
        let size = (self.re * self.re + self.im * self.im).sqrt();
        if !(1e-150..1e150).contains(&size) {
            return Complex64::sqrt(*self);
        }
        // The greater part first, the other from it: nothing cancels, and no angle is needed.
        let greater = (0.5 * (size + self.re.abs())).sqrt();
        let other = 0.5 * self.im / greater;
        if self.re >= 0.0 {
            Complex64::new(greater, other)
        } else {
            Complex64::new(other.abs(), greater.copysign(self.im))
        }
    }

    fn exp(&self) -> Self {
        Complex64::exp(*self)
    }

    fn ln(&self) -> Self {
        Complex64::ln(*self)
    }

    fn cos_sinc(squared: &Self) -> (Self, Self, f64) {
        if squared.im == 0.0 {
            return real_cos_sinc(squared.re);
        }
        let delta = Number::sqrt(squared);
        let (sin, cos) = delta.re.sin_cos();
        let decay = delta.im.abs();
        let twice = (-2.0 * decay).exp_m1();
        let cosh = 1.0 + 0.5 * twice;
        let sinh = (-0.5 * twice).copysign(delta.im);
        let cosine = Complex64::new(cos * cosh, -sin * sinh);
        let sinc = if squared.norm() < 1e-8 {
            small_sinc(*squared) * (-decay).exp()
        } else {
            Complex64::new(sin * cosh, cos * sinh) / delta
        };
        (cosine, sinc, decay)
    }
}

/// The same for a phase that is purely real (a film without absorption) or purely imaginary (a film in
/// total reflection).
fn real_cos_sinc(squared: f64) -> (Complex64, Complex64, f64) {
    let (cos, sinc, decay) = if squared >= 0.0 {
        let delta = squared.sqrt();
        let (sin, cos) = delta.sin_cos();
        (cos, if squared < 1e-8 { 1.0 - squared / 6.0 } else { sin / delta }, 0.0)
    } else {
        let decay = (-squared).sqrt();
        let twice = (-2.0 * decay).exp_m1();
        let sinc =
            if squared > -1e-8 { (1.0 - squared / 6.0) * (-decay).exp() } else { -0.5 * twice / decay };
        (1.0 + 0.5 * twice, sinc, decay)
    };
    (Complex64::new(cos, 0.0), Complex64::new(sinc, 0.0), decay)
}

/// sin δ / δ for |δ|² < 1e-8, where two terms of its series are exact to the last digit.
fn small_sinc(squared: Complex64) -> Complex64 {
    Complex64::new(1.0, 0.0) - squared / 6.0
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn cos_and_sinc_agree_with_the_library_functions() {
        for (re, im) in [(0.3, 0.2), (5.0, 3.0), (1e-5, 2e-5), (2.0, 0.0), (0.0, 1.5), (1e-3, 0.0)] {
            let delta = Complex64::new(re, im);
            let (cos, sinc, decay) = Complex64::cos_sinc(&(delta * delta));
            let grown = decay.exp();
            assert!((cos * grown - delta.cos()).norm() < 1e-14 * grown);
            assert!((sinc * grown - delta.sin() / delta).norm() < 1e-14 * grown);
        }
    }

    #[test]
    fn the_square_root_is_the_librarys() {
        for re in [-1e200, -3.0, -1e-9, 0.0, 1e-9, 0.4, 7.0, 1e200] {
            for im in [-1e200, -2.0, -1e-12, 0.0, 1e-12, 0.3, 5.0] {
                let number = Complex64::new(re, im);
                let (own, library) = (Number::sqrt(&number), number.sqrt());
                assert!((own - library).norm() <= 4e-16 * library.norm(), "{number}: {own} {library}");
            }
        }
    }

    #[test]
    fn a_great_imaginary_phase_does_not_overflow() {
        let (cos, sinc, decay) = Complex64::cos_sinc(&Complex64::new(-1e10, 3e9));
        assert!(cos.is_finite() && sinc.is_finite());
        assert!(decay > 1e4);
    }
}
