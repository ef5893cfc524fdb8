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
    /// Which bodies don't absorb.
    clear: Vec<bool>,
    /// Whether nothing absorbs.
    lossless: bool,
}

impl Chain {
    /// `ln_passed` holds the logarithm of what one pass through each body leaves. `None` if a number is not
    /// finite or the balance of a body has no solution.
    pub(crate) fn new(
        links: Vec<Link>,
        ln_passed: Vec<f64>,
        clear: Vec<bool>,
        lossless: bool,
    ) -> Option<Chain> {
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
            clear,
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
        let films = (0..self.links.len()).map(|at| {
            let (from_front, from_behind) = self.films(at);
            from_front.iter().zip(&from_behind).map(|(front, behind)| front + behind).collect()
        });
        let bodies = (0..self.links.len() - 1).map(|at| self.body(at)).collect();
        Absorption { response: self.response(), films: films.collect(), bodies }
    }

    /// What the films of a coating take of the light from the front, and from behind.
    fn films(&self, at: usize) -> (Vec<f64>, Vec<f64>) {
        let (link, (from_front, from_behind)) = (&self.links[at], self.arriving[at]);
        let front = link.front.films.iter().map(|share| share * from_front).collect();
        let behind = match &link.back {
            Some(back) => back.films.iter().rev().map(|share| share * from_behind).collect(),
            None => vec![0.0; link.front.films.len()],
        };
        (front, behind)
    }

    /// What the body behind coating `at` takes: what enters it through its two coatings, less what leaves it
    /// into them. Of the light that runs in it towards a coating, all that the coating neither absorbs nor
    /// passes comes back or is its own: so the interference of both waves at its faces counts as its own.
    fn body(&self, at: usize) -> f64 {
        if self.clear[at] {
            return 0.0;
        }
        let (near, far) = (&self.links[at], &self.links[at + 1]);
        let entering = near.front.transmittance * self.arriving[at].0
            + far.back.as_ref().map_or(0.0, |back| back.transmittance * self.arriving[at + 1].1);
        let leaving = near.back.as_ref().map_or(0.0, |back| back.transmittance * self.arriving[at].1)
            + far.front.transmittance * self.arriving[at + 1].0;
        let in_films = self.films(at).1.iter().sum::<f64>() + self.films(at + 1).0.iter().sum::<f64>();
        entering - leaving - in_films
    }
}
