//! Several `f64` side by side, on whichever vector instructions the processor has.
//!
//! `pulp` chooses the instructions at run time and provides the operations; the wrappers here give them operators, so that
//! formulas read as in a textbook. All functions must be inlined into the kernel that calls them: one that is not is compiled
//! without the processor's vector instructions. For the same reason kernels pass no closures about.

mod complex;
mod dispatch;
mod functions;

use std::ops::{Add, Div, Mul, Neg, Sub};

use pulp::Simd;

pub(crate) use complex::Complex;
pub use dispatch::Vectors;
pub(crate) use dispatch::dispatch;
pub(crate) use functions::{FEW_BITS, decay, half_turn, power_of_two, weak_decay};

/// As many values as a vector register holds: 8 with AVX-512, 4 with AVX2, 2 with NEON, 1 without any.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Lanes<S: Simd> {
    pub(crate) simd: S,
    pub(crate) values: S::f64s,
}

impl<S: Simd> Lanes<S> {
    /// How many there are.
    pub(crate) const COUNT: usize = S::F64_LANES;

    /// One value in all lanes.
    #[inline(always)]
    pub(crate) fn splat(simd: S, value: f64) -> Self {
        Lanes { simd, values: simd.splat_f64s(value) }
    }

    /// One of the registers that a slice fills.
    #[inline(always)]
    pub(crate) fn load(simd: S, from: &[f64], part: usize) -> Self {
        let (whole, _) = S::as_simd_f64s(from);
        Lanes { simd, values: whole[part] }
    }

    /// Into the place of one of the registers that a slice fills.
    #[inline(always)]
    pub(crate) fn store(self, to: &mut [f64], part: usize) {
        let (whole, _) = S::as_mut_simd_f64s(to);
        whole[part] = self.values;
    }

    /// One value in all lanes, with this one's instructions.
    #[inline(always)]
    pub(crate) fn of(self, value: f64) -> Self {
        Lanes::splat(self.simd, value)
    }

    /// self · factor + term.
    #[inline(always)]
    pub(crate) fn mul_add(self, factor: Self, term: Self) -> Self {
        let values = self.simd.mul_add_e_f64s(self.values, factor.values, term.values);
        Lanes { values, ..self }
    }

    /// term − self · factor.
    #[inline(always)]
    pub(crate) fn neg_mul_add(self, factor: Self, term: Self) -> Self {
        let values = self.simd.negate_mul_add_e_f64s(self.values, factor.values, term.values);
        Lanes { values, ..self }
    }

    #[inline(always)]
    pub(crate) fn sqrt(self) -> Self {
        Lanes { values: self.simd.sqrt_f64s(self.values), ..self }
    }

    #[inline(always)]
    pub(crate) fn abs(self) -> Self {
        Lanes { values: self.simd.abs_f64s(self.values), ..self }
    }

    #[inline(always)]
    pub(crate) fn max(self, other: Self) -> Self {
        Lanes { values: self.simd.max_f64s(self.values, other.values), ..self }
    }

    #[inline(always)]
    pub(crate) fn min(self, other: Self) -> Self {
        Lanes { values: self.simd.min_f64s(self.values, other.values), ..self }
    }

    /// In each lane `yes` where this is less than `than`, else `no`.
    #[inline(always)]
    pub(crate) fn where_less(self, than: Self, yes: Self, no: Self) -> Self {
        let mask = self.simd.less_than_f64s(self.values, than.values);
        Lanes { values: self.simd.select_f64s(mask, yes.values, no.values), ..self }
    }

    /// The greatest value of all lanes.
    #[inline(always)]
    pub(crate) fn greatest(self) -> f64 {
        self.simd.reduce_max_f64s(self.values)
    }

    /// The least value of all lanes.
    #[inline(always)]
    pub(crate) fn least(self) -> f64 {
        self.simd.reduce_min_f64s(self.values)
    }
}

impl<S: Simd> Add for Lanes<S> {
    type Output = Self;
    #[inline(always)]
    fn add(self, other: Self) -> Self {
        Lanes { values: self.simd.add_f64s(self.values, other.values), ..self }
    }
}

impl<S: Simd> Sub for Lanes<S> {
    type Output = Self;
    #[inline(always)]
    fn sub(self, other: Self) -> Self {
        Lanes { values: self.simd.sub_f64s(self.values, other.values), ..self }
    }
}

impl<S: Simd> Mul for Lanes<S> {
    type Output = Self;
    #[inline(always)]
    fn mul(self, other: Self) -> Self {
        Lanes { values: self.simd.mul_f64s(self.values, other.values), ..self }
    }
}

impl<S: Simd> Div for Lanes<S> {
    type Output = Self;
    #[inline(always)]
    fn div(self, other: Self) -> Self {
        Lanes { values: self.simd.div_f64s(self.values, other.values), ..self }
    }
}

impl<S: Simd> Neg for Lanes<S> {
    type Output = Self;
    #[inline(always)]
    fn neg(self) -> Self {
        Lanes { values: self.simd.neg_f64s(self.values), ..self }
    }
}
