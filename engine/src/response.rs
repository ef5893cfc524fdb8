//! What a stack does with light: the results.

/// The polarisation of the light, told by the plane of incidence.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Polarisation {
    /// The electric field stands across the plane of incidence.
    S,
    /// The electric field lies in the plane of incidence.
    P,
    /// Unpolarised light: the mean of both.
    Mean,
}

/// Where the incident power goes, as fractions of it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Response {
    /// R.
    pub reflectance: f64,
    /// T, computed as a product, so that a tiny one keeps its digits; the half-space behind counts as
    /// transmitted.
    pub transmittance: f64,
    /// A, of all films and bodies.
    pub absorptance: f64,
    /// The natural logarithm of T, which keeps its digits where T itself is too small for a number; −∞ where
    /// nothing gets through at all.
    pub ln_transmittance: f64,
}

/// A response with the absorptance of each film and each body, as fractions of the incident power.
#[derive(Clone, Debug, PartialEq)]
pub struct Absorption {
    /// The whole.
    pub response: Response,
    /// By coating and by film within it, in the light's order.
    pub films: Vec<Vec<f64>>,
    /// By thick body. A body's share closes the balance: what the interference of the two waves at the faces
    /// of an absorbing body takes counts as the body's.
    pub bodies: Vec<f64>,
}

/// ln((e^a + e^b)/2) without overflow.
pub(crate) fn ln_mean(a: f64, b: f64) -> f64 {
    let (high, low) = if a >= b { (a, b) } else { (b, a) };
    if high == f64::NEG_INFINITY { high } else { high + (0.5 * (low - high).exp() + 0.5).ln() }
}

impl Response {
    /// The response to unpolarised light from those to s and p.
    pub(crate) fn mean(s: Response, p: Response) -> Response {
        Response {
            reflectance: 0.5 * (s.reflectance + p.reflectance),
            transmittance: 0.5 * (s.transmittance + p.transmittance),
            absorptance: 0.5 * (s.absorptance + p.absorptance),
            ln_transmittance: ln_mean(s.ln_transmittance, p.ln_transmittance),
        }
    }
}

impl Absorption {
    /// The same for the shares of films and bodies.
    pub(crate) fn mean(s: Absorption, p: Absorption) -> Absorption {
        let middle = |a: Vec<f64>, b: Vec<f64>| a.iter().zip(&b).map(|(a, b)| 0.5 * (a + b)).collect();
        Absorption {
            response: Response::mean(s.response, p.response),
            films: s.films.into_iter().zip(p.films).map(|(a, b)| middle(a, b)).collect(),
            bodies: middle(s.bodies, p.bodies),
        }
    }
}
