//! Complex numbers in lanes.

use std::ops::{Add, Mul, Neg, Sub};

use pulp::Simd;

use super::Lanes;

/// One complex number in each lane.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Complex<S: Simd> {
    pub(crate) re: Lanes<S>,
    pub(crate) im: Lanes<S>,
}

impl<S: Simd> Complex<S> {
    /// One number in all lanes.
    #[inline(always)]
    pub(crate) fn splat(simd: S, re: f64, im: f64) -> Self {
        Complex { re: Lanes::splat(simd, re), im: Lanes::splat(simd, im) }
    }

    /// self · factor + term.
    #[inline(always)]
    pub(crate) fn mul_add(self, factor: Self, term: Self) -> Self {
        Complex {
            re: self.im.neg_mul_add(factor.im, self.re.mul_add(factor.re, term.re)),
            im: self.im.mul_add(factor.re, self.re.mul_add(factor.im, term.im)),
        }
    }

    /// The product with a real number.
    #[inline(always)]
    pub(crate) fn scale(self, factor: Lanes<S>) -> Self {
        Complex { re: self.re * factor, im: self.im * factor }
    }

    #[inline(always)]
    pub(crate) fn conj(self) -> Self {
        Complex { re: self.re, im: -self.im }
    }

    /// |self|².
    #[inline(always)]
    pub(crate) fn norm_sqr(self) -> Lanes<S> {
        self.re.mul_add(self.re, self.im * self.im)
    }

    /// Re(self* · other).
    #[inline(always)]
    pub(crate) fn dot(self, other: Self) -> Lanes<S> {
        self.re.mul_add(other.re, self.im * other.im)
    }

    /// 1/self.
    #[inline(always)]
    pub(crate) fn inverse(self) -> Self {
        // Scaled by the greater part, so that the square of neither over- nor underflows.
        let size = self.re.abs().max(self.im.abs());
        let scale = size.of(1.0) / size;
        let small = self.scale(scale);
        small.conj().scale(scale / small.norm_sqr())
    }

    /// The square root with Im ≥ 0, and Re ≥ 0 where that is zero.
    #[inline(always)]
    pub(crate) fn upper_sqrt(self) -> Self {
        let (zero, one, half) = (self.re.of(0.0), self.re.of(1.0), self.re.of(0.5));
        // The greater part first, the other from it: nothing cancels.
        let greater = ((self.norm_sqr().sqrt() + self.re.abs()) * half).sqrt();
        let other = self.im.abs() * half / zero.where_less(greater, greater, one);
        let side = self.im.where_less(zero, -one, one);
        Complex {
            re: side * self.re.where_less(zero, other, greater),
            im: self.re.where_less(zero, greater, other),
        }
    }
}

impl<S: Simd> Add for Complex<S> {
    type Output = Self;
    #[inline(always)]
    fn add(self, other: Self) -> Self {
        Complex { re: self.re + other.re, im: self.im + other.im }
    }
}

impl<S: Simd> Sub for Complex<S> {
    type Output = Self;
    #[inline(always)]
    fn sub(self, other: Self) -> Self {
        Complex { re: self.re - other.re, im: self.im - other.im }
    }
}

impl<S: Simd> Mul for Complex<S> {
    type Output = Self;
    #[inline(always)]
    fn mul(self, other: Self) -> Self {
        Complex {
            re: self.im.neg_mul_add(other.im, self.re * other.re),
            im: self.im.mul_add(other.re, self.re * other.im),
        }
    }
}

impl<S: Simd> Neg for Complex<S> {
    type Output = Self;
    #[inline(always)]
    fn neg(self) -> Self {
        Complex { re: -self.re, im: -self.im }
    }
}
