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
    /// q²/N².
    pub(crate) ratio: N,
    /// For p the squared normal component is the product of N² and `ratio`; given where that is not q², as in the mean of
    /// two media.
    p_squared: Option<N>,
}

impl<N: Number> Medium<N> {
    /// The medium of index N where α = N sin θ.
    pub(crate) fn new(index: N, alpha: &N) -> Self {
        let permittivity = index.clone() * index.clone();
        // A product of sum and difference keeps the digits of q² near the critical angle.
        let normal_squared = (index.clone() - alpha.clone()) * (index.clone() + alpha.clone());
        Medium::with_normal(index, permittivity, normal_squared)
    }

    /// The medium of incidence, whose q = N cos θ is known without the loss of digits near grazing incidence.
    pub(crate) fn of_incidence(index: N, angle_rad: f64) -> Self {
        let permittivity = index.clone() * index.clone();
        let normal_squared = permittivity.scale(angle_rad.cos().powi(2));
        Medium::with_normal(index, permittivity, normal_squared)
    }

    fn with_normal(index: N, permittivity: N, normal_squared: N) -> Self {
        let ratio = normal_squared.clone() / permittivity.clone();
        Medium { index, permittivity, normal_squared, ratio, p_squared: None }
    }

    /// The mean of two media, as a step of fourth order through a profile asks for: of ε along the film, of 1/ε across it.
    pub(crate) fn mean(one: &Self, share: f64, other: &Self) -> Self {
        let mean = |a: &N, b: &N| a.scale(share) + b.scale(1.0 - share);
        let permittivity = mean(&one.permittivity, &other.permittivity);
        let ratio = mean(&one.ratio, &other.ratio);
        Medium {
            index: permittivity.sqrt(),
            normal_squared: mean(&one.normal_squared, &other.normal_squared),
            p_squared: Some(permittivity.clone() * ratio.clone()),
            permittivity,
            ratio,
        }
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

/// A film's matrix without what the polarisation decides; but in the mean of two media s and p share the sine and the cosine.
#[derive(Clone, Debug)]
pub(crate) struct Step<N> {
    turn: Turn<N>,
    p_turn: Option<Turn<N>>,
    /// q².
    normal_squared: N,
    /// N².
    permittivity: N,
    /// q²/N².
    ratio: N,
}

#[derive(Clone, Debug)]
struct Turn<N> {
    cos: N,
    /// −i k₀ d sin δ/δ.
    lift: N,
    ln_scale: f64,
}

impl<N: Number> Turn<N> {
    fn new(normal_squared: &N, depth: &N) -> Self {
        let squared = normal_squared.clone() * depth.clone() * depth.clone();
        let (cos, sinc, ln_scale) = N::cos_sinc(&squared);
        Turn { cos, lift: N::constant(-Complex64::I) * depth.clone() * sinc, ln_scale }
    }
}

impl<N: Number> Step<N> {
    /// The matrix of a film, from k₀ d.
    pub(crate) fn new(medium: &Medium<N>, depth: &N) -> Self {
        Step {
            turn: Turn::new(&medium.normal_squared, depth),
            p_turn: medium.p_squared.as_ref().map(|squared| Turn::new(squared, depth)),
            normal_squared: medium.normal_squared.clone(),
            permittivity: medium.permittivity.clone(),
            ratio: medium.ratio.clone(),
        }
    }

    /// Whether the film takes no power from the light.
    pub(crate) fn is_lossless(&self) -> bool {
        self.permittivity.value().im == 0.0
    }

    /// The fields at the film's front from those at its back.
    pub(crate) fn carry(&self, behind: &Pair<N>, mode: Mode) -> Pair<N> {
        let (b, c) = (behind.b.clone(), behind.c.clone());
        let (turn, over, times) = self.parts(mode);
        let front = Pair {
            b: turn.cos.clone() * b.clone() + turn.lift.clone() * times_over(over, c.clone()),
            c: turn.lift.clone() * (times.clone() * b) + turn.cos.clone() * c,
            ln_scale: behind.ln_scale + turn.ln_scale,
        };
        front.in_range()
    }

    /// A row of two from the left through the matrix: what it makes of fields at the film's front, as a row for those at its
    /// back.
    pub(crate) fn pull(&self, row: &Pair<N>, mode: Mode) -> Pair<N> {
        let (b, c) = (row.b.clone(), row.c.clone());
        let (turn, over, times) = self.parts(mode);
        let behind = Pair {
            b: turn.cos.clone() * b.clone() + turn.lift.clone() * (times.clone() * c.clone()),
            c: turn.lift.clone() * times_over(over, b) + turn.cos.clone() * c,
            ln_scale: row.ln_scale + turn.ln_scale,
        };
        behind.in_range()
    }

    /// The derivative of the fields at the film's front in its thickness, from these fields and k₀.
    pub(crate) fn growth(&self, front: &Pair<N>, wave_number: &N, mode: Mode) -> Pair<N> {
        let (_, over, times) = self.parts(mode);
        let turn = N::constant(-Complex64::I) * wave_number.clone();
        Pair {
            b: turn.clone() * times_over(over, front.c.clone()),
            c: turn * (times.clone() * front.b.clone()),
            ln_scale: front.ln_scale,
        }
    }

    /// The matrix as sine and cosine, what C is multiplied by on its way into B (none for 1), and B on its way into C.
    fn parts(&self, mode: Mode) -> (&Turn<N>, Option<&N>, &N) {
        match mode {
            Mode::S => (&self.turn, None, &self.normal_squared),
            Mode::P => (self.p_turn.as_ref().unwrap_or(&self.turn), Some(&self.ratio), &self.permittivity),
        }
    }
}

fn times_over<N: Number>(over: Option<&N>, number: N) -> N {
    match over {
        Some(factor) => factor.clone() * number,
        None => number,
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
