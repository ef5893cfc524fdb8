//! Films whose composition runs through them.
//!
//! With x = k₀z the tangential fields obey dB/dx = i u C and dC/dx = i v B away from the light, where u = 1 and v = ε − α² for s,
//! u = 1 − α²/ε and v = ε for p. Over a step h of a profile ε(z) the solution is, to fourth order, the product of two
//! films of thickness h/2 in which ε and 1/ε are each the combination ½ ± √3/3 of their values at Gauss's two nodes: the
//! commutator-free integrator of S. Blanes, P. C. Moan, Appl. Numer. Math. 56, 1519–1537 (2006), equation 2.10 there (the number
//! from memory); for the fields' equations M. Born, E. Wolf, *Principles of Optics*, 1.6.
//!
//! The method ends where a film stops being a mixture on a scale far below the wavelength, which is the mixing rule's limit.

use crate::dispersion::{Index, MixingRule};
use crate::error::OpticsError;
use crate::prepared::{Prepared, Spectrum};
use crate::stack::{Film, Stack};

/// What a film is made of.
#[derive(Clone, Debug)]
pub enum Profile {
    /// One material.
    Uniform(Index),
    /// A composition that runs from one material to another.
    Graded(Gradient),
}

/// A composition that runs linearly, by volume, from one material to another.
#[derive(Clone, Debug)]
pub struct Gradient {
    /// The material towards the light.
    pub front: Index,
    /// The material away from it.
    pub back: Index,
    /// The share of `back` at the film's two faces, from 0 to 1; (0, 1) for a whole gradient.
    pub shares: (f64, f64),
    /// How the two mix.
    pub rule: MixingRule,
    /// By what the profile is replaced.
    pub steps: Steps,
}

/// By what a continuous profile is replaced.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Steps {
    /// So many films of equal thickness, each of the composition in its middle.
    Films(u32),
    /// Nothing: it is integrated in so many steps of fourth order.
    Smooth(u32),
}

impl Profile {
    /// The materials that it is made of, one or two.
    pub fn materials(&self) -> impl Iterator<Item = &Index> {
        let (first, second) = match self {
            Profile::Uniform(index) => (index, None),
            Profile::Graded(gradient) => (&gradient.front, Some(&gradient.back)),
        };
        std::iter::once(first).chain(second)
    }

    /// As light from the other side meets it.
    pub(crate) fn reversed(&self) -> Profile {
        match self {
            Profile::Uniform(index) => Profile::Uniform(index.clone()),
            Profile::Graded(gradient) => Profile::Graded(Gradient {
                front: gradient.back.clone(),
                back: gradient.front.clone(),
                shares: (1.0 - gradient.shares.1, 1.0 - gradient.shares.0),
                ..gradient.clone()
            }),
        }
    }
}

/// To what R and T of a stack settle as its graded films are cut finer.
const SETTLED: f64 = 1e-8;
/// At how many wavelengths of a band they are compared.
const WAVELENGTHS: usize = 8;
/// A profile that needs more steps is beyond patience.
const MOST: u32 = 4096;

impl Stack {
    /// The same stack with as many steps in its smooth profiles as R and T of both polarisations need to settle to 1e-8, over
    /// bands of vacuum wavelengths in nm and from normal incidence up to an angle in rad.
    ///
    /// # Errors
    /// As [`Stack::response`]; [`OpticsError::NotConverged`] where 4096 steps are too few.
    pub fn settled(mut self, bands_nm: &[(f64, f64)], angle_rad: f64) -> Result<Stack, OpticsError> {
        if !self.set_steps(4) {
            return Ok(self);
        }
        let angle_rad = if self.facets_rad.is_some() { 0.0 } else { angle_rad };
        let mut wavelengths = Vec::new();
        for &(lo, hi) in bands_nm {
            let at = |at: usize| lo + (hi - lo) * at as f64 / WAVELENGTHS as f64;
            wavelengths.extend((0..=WAVELENGTHS).map(at));
        }
        wavelengths.dedup();
        let responses = |stack: &Stack| -> Result<Vec<[f64; 2]>, OpticsError> {
            let mut powers = Vec::new();
            for angle_rad in [0.0, angle_rad] {
                let Spectrum { reflectance, transmittance } =
                    Prepared::new(stack, &wavelengths, angle_rad)?.spectrum()?;
                for (reflectance, transmittance) in reflectance.iter().zip(&transmittance) {
                    powers.extend(reflectance.iter().zip(transmittance).map(|(r, t)| [*r, *t]));
                }
            }
            Ok(powers)
        };
        let mut before = responses(&self)?;
        let mut steps = 8;
        while steps <= MOST {
            self.set_steps(steps);
            let now = responses(&self)?;
            let apart = |(a, b): (&[f64; 2], &[f64; 2])| (a[0] - b[0]).abs().max((a[1] - b[1]).abs());
            if before.iter().zip(&now).map(apart).fold(0.0, f64::max) <= SETTLED {
                return Ok(self);
            }
            before = now;
            steps *= 2;
        }
        let wavelength_nm = bands_nm.first().map_or(0.0, |band| band.0);
        Err(OpticsError::NotConverged { estimate: 0.0, error: f64::INFINITY, wavelength_nm })
    }

    /// The same stack with every smooth profile in so many times as many steps.
    pub(crate) fn refined(&self, times: u32) -> Stack {
        let mut stack = self.clone();
        stack.each_smooth(|steps| *steps *= times);
        stack
    }

    /// Sets the number of steps of every smooth profile; whether there is one.
    fn set_steps(&mut self, number: u32) -> bool {
        self.each_smooth(|steps| *steps = number)
    }

    fn each_smooth(&mut self, change: impl Fn(&mut u32)) -> bool {
        let mut any = false;
        for Film { profile, .. } in self.coatings.iter_mut().flatten() {
            if let Profile::Graded(Gradient { steps: Steps::Smooth(steps), .. }) = profile {
                change(steps);
                any = true;
            }
        }
        any
    }
}
