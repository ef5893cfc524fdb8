//! The characteristic matrix of a film and the pair of tangential fields that it carries.
//!
//! Conventions: fields go as exp(−iωt), N = n + ik, and α = N sin θ is the same in every medium (Snell). With
//! q = N cos θ, the root of q² = N² − α² with Im q ≥ 0 (and Re q ≥ 0 where that is zero), the tilted
//! admittances in units of free space's are q for s and N²/q for p. A film of thickness d has the phase
//! δ = k₀ q d with k₀ = 2π/λ and carries the pair (B, C) towards the light by
//! [[cos δ, −i sin δ/η], [−i η sin δ, cos δ]]. Written with sin δ/δ all entries are even in q, so neither the
//! choice of root nor a film at its critical angle matters.
//!
//! Source: F. Abelès, Ann. Phys. (Paris) 5, 596 (1950); M. Born and E. Wolf, *Principles of Optics*, 1.6.

use num_complex::Complex64;

use crate::number::Number;

/// One of the two polarisations that keep to themselves.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Mode {
    S,
    P,
}

/// The tangential electric and magnetic field (B, C), true up to the factor exp(`ln_scale`).
#[derive(Clone, Debug)]
pub(crate) struct Pair<N> {
    pub(crate) b: N,
    pub(crate) c: N,
    pub(crate) ln_scale: f64,
}

/// A medium at one wavelength and angle.
#[derive(Clone, Debug)]
pub(crate) struct Medium<N> {
    /// N.
    pub(crate) index: N,
    /// N².
    pub(crate) permittivity: N,
    /// q² = N² − α².
    pub(crate) normal_squared: N,
}

impl<N: Number> Medium<N> {
    /// The medium of index N where α = N sin θ.
    pub(crate) fn new(index: N, alpha: &N) -> Self {
        let permittivity = index.clone() * index.clone();
        // A product of sum and difference keeps the digits of q² near the critical angle.
        let normal_squared = (index.clone() - alpha.clone()) * (index.clone() + alpha.clone());
        Medium { index, permittivity, normal_squared }
    }

    /// q, the normal component of the wave vector in units of k₀.
    pub(crate) fn normal(&self) -> N {
        self.normal_squared.sqrt()
    }

    /// A wave that runs away from the light in this medium, in a scale in which it is finite for p even
    /// where q vanishes: (1, q) for s, (q/N, N) for p.
    pub(crate) fn wave(&self, mode: Mode) -> Pair<N> {
        let (b, c) = match mode {
            Mode::S => (N::real(1.0), self.normal()),
            Mode::P => (self.normal() / self.index.clone(), self.index.clone()),
        };
        Pair { b, c, ln_scale: 0.0 }
    }
}

/// A film's matrix without what the polarisation decides; s and p share the sine and the cosine.
#[derive(Clone, Debug)]
pub(crate) struct Step<N> {
    cos: N,
    /// −i k₀ d sin δ/δ.
    lift: N,
    /// q².
    normal_squared: N,
    /// N².
    permittivity: N,
    /// q²/N².
    ratio: N,
    ln_scale: f64,
}

impl<N: Number> Step<N> {
    /// The matrix of a film, from k₀ d.
    pub(crate) fn new(medium: &Medium<N>, depth: &N) -> Self {
        let squared = medium.normal_squared.clone() * depth.clone() * depth.clone();
        let (cos, sinc, ln_scale) = N::cos_sinc(&squared);
        Step {
            cos,
            lift: N::constant(-Complex64::I) * depth.clone() * sinc,
            normal_squared: medium.normal_squared.clone(),
            permittivity: medium.permittivity.clone(),
            ratio: medium.normal_squared.clone() / medium.permittivity.clone(),
            ln_scale,
        }
    }

    /// Whether the film takes no power from the light.
    pub(crate) fn is_lossless(&self) -> bool {
        self.permittivity.value().im == 0.0
    }

    /// The fields at the film's front from those at its back.
    pub(crate) fn carry(&self, behind: &Pair<N>, mode: Mode) -> Pair<N> {
        let (b, c) = (behind.b.clone(), behind.c.clone());
        let (over, times) = match mode {
            Mode::S => (c.clone(), self.normal_squared.clone() * b.clone()),
            Mode::P => (self.ratio.clone() * c.clone(), self.permittivity.clone() * b.clone()),
        };
        let front = Pair {
            b: self.cos.clone() * b + self.lift.clone() * over,
            c: self.lift.clone() * times + self.cos.clone() * c,
            ln_scale: behind.ln_scale + self.ln_scale,
        };
        front.in_range()
    }
}

impl<N: Number> Pair<N> {
    /// The same fields with their size, if it is extreme, moved into the logarithm.
    fn in_range(self) -> Self {
        let size = self.b.value().l1_norm() + self.c.value().l1_norm();
        if (1e-50..1e50).contains(&size) || size == 0.0 || !size.is_finite() {
            return self;
        }
        Pair { b: self.b.scale(1.0 / size), c: self.c.scale(1.0 / size), ln_scale: self.ln_scale + size.ln() }
    }

    /// The mean normal power flow Re(B* C), in units of the squared scale.
    pub(crate) fn flux(&self) -> f64 {
        let (b, c) = (self.b.value(), self.c.value());
        b.re * c.re + b.im * c.im
    }
}
