//! What can be promised of a stack, and the light that it is promised for.

use std::f64::consts::LN_2;

use crate::error::OpticsError;
use crate::kernel::{Outcome, WIDTH, Wanted, Within};
use crate::plan::{Layer, Plan};
use crate::response::Polarisation;

/// A quantity that a stack has at every wavelength and angle.
#[derive(Clone, Debug, PartialEq)]
pub enum Quantity {
    /// R.
    Reflectance,
    /// T.
    Transmittance,
    /// A, of all films and bodies.
    Absorptance,
    /// The absorptance in some films and thick bodies together.
    AbsorptanceIn {
        /// The films, each by coating and place within it, from 0, in the light's order.
        films: Vec<(usize, usize)>,
        /// The thick bodies, from 0, in the light's order.
        bodies: Vec<usize>,
        /// Whether what enters the exit half-space counts too: it is absorbed there.
        exit: bool,
    },
    /// −log₁₀ T.
    OpticalDensity,
    /// The phase of the reflected or the transmitted amplitude, or a derivative of it in the angular frequency; of one
    /// coating in a parallel beam of one polarisation (at normal incidence s and p are one).
    Phase(Outgoing, PhaseKind),
    /// The greatest |E/E₀|² inside the films, of a stack without thick bodies.
    PeakField,
}

/// Which light.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Outgoing {
    /// What comes back.
    Reflected,
    /// What goes through.
    Transmitted,
}

/// The phase or one of its derivatives.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum PhaseKind {
    /// φ in rad, on the branch within half a turn of the aim.
    Phase {
        /// rad.
        aim_rad: f64,
    },
    /// dφ/dω in fs.
    Delay,
    /// d²φ/dω² in fs².
    Dispersion,
}

/// A beam: its polarisation, its angle of incidence, and the cone that it fills.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Light {
    /// The polarisation, about the plane of incidence of the beam's axis.
    pub polarisation: Polarisation,
    /// The angle of incidence of the axis, rad.
    pub angle_rad: f64,
    /// The half-angle of the cone, rad; 0 is a parallel beam.
    pub cone_half_angle_rad: f64,
}

impl Light {
    /// A parallel beam of unpolarised light at normal incidence.
    pub fn normal() -> Light {
        Light::parallel(0.0, Polarisation::Mean)
    }

    /// A parallel beam at an angle of incidence in rad.
    pub fn parallel(angle_rad: f64, polarisation: Polarisation) -> Light {
        Light { polarisation, angle_rad, cone_half_angle_rad: 0.0 }
    }
}

/// A quantity that adds up over rays and polarisations in power: all but the optical density, which is the
/// logarithm of one that does.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Tally {
    /// The value over exp(`ln_scale`).
    pub(crate) value: f64,
    pub(crate) ln_scale: f64,
}

impl Tally {
    pub(crate) const NONE: Tally = Tally { value: 0.0, ln_scale: f64::NEG_INFINITY };

    /// The sum of this and a share of another.
    pub(crate) fn plus(self, share: f64, other: Tally) -> Tally {
        if share == 0.0 || other.ln_scale == f64::NEG_INFINITY {
            return self;
        }
        if other.ln_scale > self.ln_scale {
            let kept =
                if self.value == 0.0 { 0.0 } else { self.value * (self.ln_scale - other.ln_scale).exp() };
            Tally { value: kept + share * other.value, ln_scale: other.ln_scale }
        } else {
            Tally { value: self.value + share * other.value * (other.ln_scale - self.ln_scale).exp(), ..self }
        }
    }
}

impl Quantity {
    /// Whether the stack has the films and bodies that this names.
    pub(crate) fn check(&self, plan: &Plan) -> Result<(), OpticsError> {
        if let Quantity::AbsorptanceIn { films, bodies, .. } = self {
            let film =
                |&(coating, film): &(usize, usize)| plan.films(coating).is_some_and(|films| film < films);
            if !(films.iter().all(film) && bodies.iter().all(|&body| body < plan.bodies.len())) {
                return Err(OpticsError::NoSuchPlace);
            }
        }
        Ok(())
    }

    /// The layers and bodies in which the absorptance counts, where it is only some.
    pub(crate) fn within(&self, plan: &Plan) -> Option<Within> {
        let Quantity::AbsorptanceIn { films, bodies, exit } = self else { return None };
        let counts = |(coating, layers): (usize, &Vec<Layer>)| {
            layers.iter().map(|layer| films.contains(&(coating, layer.film))).collect()
        };
        Some(Within {
            layers: plan.coatings.iter().enumerate().map(counts).collect(),
            bodies: (0..plan.bodies.len()).map(|body| bodies.contains(&body)).collect(),
            exit: *exit,
        })
    }

    /// How what adds up changes with the powers of the whole.
    pub(crate) fn wanted<'a>(&self, within: Option<&'a Within>) -> Wanted<'a> {
        let nothing = Wanted { reflectance: 0.0, transmittance: 0.0, absorptance: false, within };
        match self {
            Quantity::Reflectance => Wanted { reflectance: 1.0, ..nothing },
            Quantity::Transmittance | Quantity::OpticalDensity => Wanted { transmittance: 1.0, ..nothing },
            Quantity::Absorptance => Wanted { absorptance: true, ..nothing },
            _ => nothing,
        }
    }

    /// The quantity of one polarisation at the points of a block, of one that is no logarithm.
    pub(crate) fn row(&self, outcome: &Outcome) -> [f64; WIDTH] {
        match self {
            Quantity::Reflectance => outcome.reflectance.0,
            Quantity::Transmittance => outcome.transmittance(),
            Quantity::Absorptance => outcome.absorptance.0,
            _ => outcome.within.0,
        }
    }

    /// What adds up of one polarisation at a point of a block; none where a number was lost.
    pub(crate) fn tally(&self, outcome: &Outcome, lane: usize) -> Option<Tally> {
        let (reflectance, passed) = (outcome.reflectance.0[lane], outcome.passed.0[lane]);
        let halved = outcome.halved.0[lane];
        if !(reflectance.is_finite() && passed.is_finite() && halved.is_finite()) {
            return None;
        }
        let plain = |value: f64| Tally { value, ln_scale: 0.0 };
        let ln_scale = -halved * LN_2;
        Some(match self {
            Quantity::Reflectance => plain(reflectance),
            Quantity::Transmittance if halved == 0.0 => plain(passed),
            Quantity::Transmittance => plain(passed * ln_scale.exp()),
            Quantity::Absorptance => plain(outcome.absorptance.0[lane]),
            Quantity::AbsorptanceIn { .. } => plain(outcome.within.0[lane]),
            Quantity::OpticalDensity if passed <= 0.0 => Tally::NONE,
            Quantity::OpticalDensity => Tally { value: passed, ln_scale },
            // These do not add up; the probe works them out without a tally.
            Quantity::Phase(..) | Quantity::PeakField => Tally::NONE,
        })
    }

    /// The quantity itself from what adds up.
    pub(crate) fn value(&self, tally: Tally, wavelength_nm: f64) -> Result<f64, OpticsError> {
        if !matches!(self, Quantity::OpticalDensity) {
            return Ok(if tally.ln_scale == f64::NEG_INFINITY {
                0.0
            } else {
                tally.value * tally.ln_scale.exp()
            });
        }
        if tally.ln_scale == f64::NEG_INFINITY || tally.value <= 0.0 {
            return Err(OpticsError::Dark { wavelength_nm });
        }
        Ok(-(tally.ln_scale + tally.value.ln()) / std::f64::consts::LN_10)
    }
}

impl Polarisation {
    /// The shares of s and p.
    pub(crate) fn shares(self) -> [f64; 2] {
        match self {
            Polarisation::S => [1.0, 0.0],
            Polarisation::P => [0.0, 1.0],
            Polarisation::Mean => [0.5, 0.5],
        }
    }
}
