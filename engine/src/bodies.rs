//! Coatings joined by thick bodies: powers instead of amplitudes, all reflections summed in closed form.
//!
//! Between coating j and the next, the power that runs on is weakened by exp(−4π Im(N cos θ) d/λ) in the
//! body. If Rb is the reflectance of everything behind the body and R′ that of coating j from behind, the
//! geometric sum of all passes is 1/(1 − R′ Rb e²). Source: G. G. Stokes, Proc. R. Soc. London 11, 545
//! (1862), for the pile of plates; the same sum with coatings and absorption.

use crate::coating::Coating;
use crate::response::{Absorption, Response};

/// A coating seen from the front, and from behind where a thick body lies behind it.
#[derive(Clone, Debug)]
pub(crate) struct Link {
    pub(crate) front: Coating,
    pub(crate) back: Option<Coating>,
}

/// A whole stack for one mode, its power flow solved.
#[derive(Debug)]
pub(crate) struct Chain {
    links: Vec<Link>,
    /// The power that arrives at each coating from the front, and from behind.
    arriving: Vec<(f64, f64)>,
    reflectance: f64,
    transmittance: f64,
    ln_transmittance: f64,
    lossless: bool,
}

impl Chain {
    /// `ln_passed` holds the logarithm of what one pass through each body leaves. `None` if a number is not
    /// finite or the balance of a body has no solution.
    pub(crate) fn new(links: Vec<Link>, ln_passed: Vec<f64>, lossless: bool) -> Option<Chain> {
        let finite =
            |link: &Link| link.front.is_finite() && link.back.as_ref().is_none_or(Coating::is_finite);
        if !links.iter().all(finite) {
            return None;
        }
        // From the exit towards the light: the reflectance of everything from each coating on.
        let last = links.len() - 1;
        let mut behind = vec![links[last].front.reflectance; links.len()];
        let mut gain = vec![1.0; links.len()];
        for at in (0..last).rev() {
            let passed = ln_passed[at].exp();
            let (front, back) = (&links[at].front, links[at].back.as_ref()?);
            let lost = 1.0 - back.reflectance * behind[at + 1] * passed * passed;
            if lost <= 0.0 {
                // No power enters a body in total reflection, so that it has nothing to sum.
                if front.transmittance > 0.0 {
                    return None;
                }
                gain[at] = 1.0;
            } else {
                gain[at] = 1.0 / lost;
            }
            let returned = front.transmittance * back.transmittance * passed * passed * behind[at + 1];
            behind[at] = front.reflectance + returned * gain[at];
        }
        // And with the light: the power that arrives at each coating from either side.
        let mut arriving = vec![(1.0, 0.0); links.len()];
        let mut ln_arriving = 0.0;
        for at in 0..last {
            let passed = ln_passed[at].exp();
            let front = &links[at].front;
            arriving[at + 1].0 = arriving[at].0 * front.transmittance * gain[at] * passed;
            arriving[at].1 = arriving[at + 1].0 * behind[at + 1] * passed;
            ln_arriving += front.ln_transmittance + gain[at].ln() + ln_passed[at];
        }
        let chain = Chain {
            reflectance: behind[0],
            transmittance: arriving[last].0 * links[last].front.transmittance,
            ln_transmittance: ln_arriving + links[last].front.ln_transmittance,
            links,
            arriving,
            lossless,
        };
        let finite = chain.reflectance.is_finite() && chain.transmittance.is_finite();
        (finite && !chain.ln_transmittance.is_nan()).then_some(chain)
    }

    pub(crate) fn response(&self) -> Response {
        let rest = 1.0 - self.reflectance - self.transmittance;
        Response {
            reflectance: self.reflectance,
            transmittance: self.transmittance,
            // Rounding must not make a loss, or a gain, where there is none.
            absorptance: if self.lossless { 0.0 } else { rest.max(0.0) },
            ln_transmittance: self.ln_transmittance,
        }
    }

    pub(crate) fn absorption(&self) -> Absorption {
        let share = |(link, &(from_front, from_behind)): (&Link, &(f64, f64))| {
            let mut films: Vec<f64> = link.front.films.iter().map(|share| share * from_front).collect();
            if let Some(back) = &link.back {
                for (film, share) in films.iter_mut().zip(back.films.iter().rev()) {
                    *film += share * from_behind;
                }
            }
            films
        };
        let films: Vec<Vec<f64>> = self.links.iter().zip(&self.arriving).map(share).collect();
        let bodies = (0..self.links.len() - 1).map(|at| self.body(at, &films)).collect();
        Absorption { response: self.response(), films, bodies }
    }

    /// What the body behind coating `at` takes: the net power into the coatings before it less what they
    /// absorb and what goes on. Net power at each coating's front: what arrives less what leaves.
    fn body(&self, at: usize, films: &[Vec<f64>]) -> f64 {
        let net_in = self.net(at) - films[at].iter().sum::<f64>();
        net_in - self.net(at + 1)
    }

    /// The net power that enters a coating at its front.
    fn net(&self, at: usize) -> f64 {
        let link = &self.links[at];
        let (from_front, from_behind) = self.arriving[at];
        let through = link.back.as_ref().map_or(0.0, |back| back.transmittance * from_behind);
        from_front * (1.0 - link.front.reflectance) - through
    }
}
