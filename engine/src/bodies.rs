//! Coatings joined by thick bodies: powers instead of amplitudes, all reflections summed in closed form.
//!
//! Between coating j and the next, the power that runs on is weakened by exp(−4π Im(N cos θ) d/λ) in the
//! body. If Rb is the reflectance of everything behind the body and R′ that of coating j from behind, the
//! geometric sum of all passes is 1/(1 − R′ Rb e²). Source: G. G. Stokes, Proc. R. Soc. London 11, 545
//! (1862), for the pile of plates; the same sum with coatings and absorption.

use crate::coating::Powers;
use crate::real::Real;
use crate::response::{Absorption, Response};

/// A coating seen from the front, and from behind where a thick body lies behind it.
#[derive(Clone, Debug)]
pub(crate) struct Link<F> {
    pub(crate) front: Powers<F>,
    pub(crate) back: Option<Powers<F>>,
}

/// What lies between the coatings.
#[derive(Clone, Debug)]
pub(crate) struct Between {
    /// The logarithm of what one pass through each body leaves.
    pub(crate) ln_passed: Vec<f64>,
    /// Which bodies don't absorb.
    pub(crate) clear: Vec<bool>,
    /// Whether nothing at all absorbs.
    pub(crate) lossless: bool,
}

/// A whole stack for one mode, its power flow solved.
#[derive(Debug)]
pub(crate) struct Chain<F> {
    links: Vec<Link<F>>,
    between: Between,
    /// The power that arrives at each coating from the front, and from behind.
    arriving: Vec<(F, F)>,
    pub(crate) reflectance: F,
    pub(crate) transmittance: F,
    pub(crate) ln_transmittance: F,
}

impl<F: Real> Chain<F> {
    /// `None` if a number is not finite or the balance of a body has no solution.
    pub(crate) fn new(links: Vec<Link<F>>, between: Between) -> Option<Chain<F>> {
        let finite =
            |link: &Link<F>| link.front.is_finite() && link.back.as_ref().is_none_or(Powers::is_finite);
        if !links.iter().all(finite) {
            return None;
        }
        let one = F::of(1.0);
        let passed = |at: usize| F::of(between.ln_passed[at].exp());
        // From the exit towards the light: the reflectance of everything from each coating on.
        let last = links.len() - 1;
        let mut behind = vec![links[last].front.reflectance; links.len()];
        let mut gain = vec![one; links.len()];
        for at in (0..last).rev() {
            let passed = passed(at);
            let (front, back) = (&links[at].front, links[at].back.as_ref()?);
            let lost = one - back.reflectance * behind[at + 1] * passed * passed;
            if lost.value() <= 0.0 {
                // No power enters a body in total reflection, so that it has nothing to sum.
                if front.transmittance.value() > 0.0 {
                    return None;
                }
                gain[at] = one;
            } else {
                gain[at] = one / lost;
            }
            let returned = front.transmittance * back.transmittance * passed * passed * behind[at + 1];
            behind[at] = front.reflectance + returned * gain[at];
        }
        // And with the light: the power that arrives at each coating from either side.
        let mut arriving = vec![(one, F::of(0.0)); links.len()];
        let mut ln_arriving = F::of(0.0);
        for at in 0..last {
            let passed = passed(at);
            let front = &links[at].front;
            arriving[at + 1].0 = arriving[at].0 * front.transmittance * gain[at] * passed;
            arriving[at].1 = arriving[at + 1].0 * behind[at + 1] * passed;
            let step = front.ln_transmittance + gain[at].ln() + F::of(between.ln_passed[at]);
            ln_arriving = ln_arriving + step;
        }
        let chain = Chain {
            reflectance: behind[0],
            transmittance: arriving[last].0 * links[last].front.transmittance,
            ln_transmittance: ln_arriving + links[last].front.ln_transmittance,
            links,
            between,
            arriving,
        };
        let finite = chain.reflectance.is_number() && chain.transmittance.is_number();
        (finite && !chain.ln_transmittance.value().is_nan()).then_some(chain)
    }

    /// What films and bodies take together.
    pub(crate) fn absorptance(&self) -> F {
        // Rounding must not make a loss, or a gain, where there is none.
        if self.between.lossless {
            return F::of(0.0);
        }
        (F::of(1.0) - self.reflectance - self.transmittance).at_least_zero()
    }

    /// What each layer of a coating takes.
    pub(crate) fn films(&self, at: usize) -> Vec<F> {
        let (from_front, from_behind) = self.by_side(at);
        from_front.into_iter().zip(from_behind).map(|(front, behind)| front + behind).collect()
    }

    /// What the layers of a coating take of the light from the front, and from behind.
    fn by_side(&self, at: usize) -> (Vec<F>, Vec<F>) {
        let (link, (from_front, from_behind)) = (&self.links[at], self.arriving[at]);
        let front = link.front.films.iter().map(|share| *share * from_front).collect();
        let behind = match &link.back {
            Some(back) => back.films.iter().rev().map(|share| *share * from_behind).collect(),
            None => vec![F::of(0.0); link.front.films.len()],
        };
        (front, behind)
    }

    /// What the body behind coating `at` takes: what enters it through its two coatings, less what leaves it
    /// into them. Of the light that runs in it towards a coating, all that the coating neither absorbs nor
    /// passes comes back or is its own: so the interference of both waves at its faces counts as its own.
    pub(crate) fn body(&self, at: usize) -> F {
        let zero = F::of(0.0);
        if self.between.clear[at] {
            return zero;
        }
        let (near, far) = (&self.links[at], &self.links[at + 1]);
        let through = |powers: &Option<Powers<F>>, arriving: F| {
            powers.as_ref().map_or(zero, |back| back.transmittance * arriving)
        };
        let entering =
            near.front.transmittance * self.arriving[at].0 + through(&far.back, self.arriving[at + 1].1);
        let leaving =
            through(&near.back, self.arriving[at].1) + far.front.transmittance * self.arriving[at + 1].0;
        let sum = |shares: Vec<F>| shares.into_iter().fold(zero, |sum, share| sum + share);
        entering - leaving - sum(self.by_side(at).1) - sum(self.by_side(at + 1).0)
    }
}

impl Chain<f64> {
    pub(crate) fn response(&self) -> Response {
        Response {
            reflectance: self.reflectance,
            transmittance: self.transmittance,
            absorptance: self.absorptance(),
            ln_transmittance: self.ln_transmittance,
        }
    }

    /// By layer and body.
    pub(crate) fn absorption(&self) -> Absorption {
        let films = (0..self.links.len()).map(|at| self.films(at)).collect();
        let bodies = (0..self.links.len() - 1).map(|at| self.body(at)).collect();
        Absorption { response: self.response(), films, bodies }
    }
}
