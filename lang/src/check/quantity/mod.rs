//! The quantities that a requirement can promise: one file for each group, one line here for each.

mod power;

use super::optics::Trouble;
use super::require::{Asked, Candidate};
use crate::finding::Verdict;
use crate::model::{Bound, Quantity};

/// The values of a requirement's quantity among which the one nearest to breaking its bound is.
pub(super) fn candidates(asked: &Asked<'_>) -> Result<Vec<Candidate>, Trouble> {
    let what = match (&asked.requirement.quantity, &asked.requirement.bound) {
        (_, Bound::Crosses { .. }) => "an edge",
        (_, Bound::AtMostMask(_) | Bound::AtLeastMask(_)) => "a bound from a mask",
        (
            Quantity::Reflectance
            | Quantity::Transmittance
            | Quantity::Absorptance
            | Quantity::AbsorptanceIn(_),
            _,
        ) => {
            return power::candidates(asked);
        }
        (Quantity::OpticalDensity, _) => "an optical density",
        (Quantity::Luminous(_), _) => "a luminous quantity",
        (Quantity::Solar(_) | Quantity::SolarAbsorptance, _) => "a solar quantity",
        (Quantity::Photocurrent(_) | Quantity::PhotocurrentLoss(_), _) => "a photocurrent",
        (Quantity::Colour(_), _) => "a colour",
        (Quantity::Phase(_), _) => "a phase",
        (Quantity::GroupDelay(_), _) => "a group delay",
        (Quantity::GroupDelayDispersion(_), _) => "a group-delay dispersion",
        (Quantity::PeakField, _) => "a peak field",
        (Quantity::Emittance, _) => "an emittance",
        (Quantity::Yield, _) => "a yield",
    };
    Err(Trouble::Verdict(Verdict::NotEvaluated { what: what.to_owned() }))
}
