//! The quantities that a requirement can promise: one file for each group, one line here for each.

mod angles;
mod colour;
mod edge;
mod field;
pub(super) mod mask;
pub(super) mod phase;
pub(super) mod power;
mod weighted;

use super::optics::Trouble;
use super::require::{Asked, Candidate, Judged};
use crate::finding::Verdict;
use crate::model::{Bound, Quantity, Requirement};
use overcoat_engine::VISIBLE_NM;

/// Judges a requirement by the value of its quantity that is nearest to breaking its bound.
pub(super) fn judge(asked: &Asked<'_>) -> Result<Judged, Trouble> {
    let judged = match &asked.requirement.bound {
        Bound::Crosses { level, rising, within } => return edge::judge(asked, *level, *rising, *within),
        Bound::AtMostMask(curve) => return mask::judge(asked, curve, true),
        Bound::AtLeastMask(curve) => return mask::judge(asked, curve, false),
        Bound::NearColour { difference, aim } => return colour::judge(asked, *difference, *aim),
        Bound::Range { min, max } if phase::is_phase(&asked.requirement.quantity) => {
            phase::judge(asked, *min, *max)?
        }
        Bound::Range { min, max } if matches!(asked.requirement.quantity, Quantity::PeakField) => {
            field::judge(asked, *min, *max)?
        }
        Bound::Range { min, max } => {
            let candidates = candidates(asked)?;
            Judged::worst(candidates.into_iter().map(|candidate| Judged::within(candidate, *min, *max)))
        }
    };
    // A requirement has a band, a wavelength or a range of its own: there is always something to judge.
    judged.ok_or_else(|| not_evaluated("a requirement without wavelengths"))
}

/// The values of a requirement's quantity among which the one nearest to breaking its bound is.
fn candidates(asked: &Asked<'_>) -> Result<Vec<Candidate>, Trouble> {
    use Quantity::*;
    match &asked.requirement.quantity {
        Reflectance | Transmittance | Absorptance | AbsorptanceIn(_) | OpticalDensity => {
            power::candidates(asked)
        }
        Luminous(_) => weighted::luminous(asked),
        Solar(_) | SolarAbsorptance => weighted::solar(asked),
        Photocurrent(_) | PhotocurrentLoss(_) => weighted::photocurrent(asked),
        Emittance => weighted::emittance(asked),
        Colour(_) => Err(not_evaluated("a colour without an aim")),
        Phase(_) | GroupDelay(_) | GroupDelayDispersion(_) => Err(not_evaluated("a phase in this form")),
        PeakField => Err(not_evaluated("a peak field in this form")),
        Yield => Err(not_evaluated("a yield")),
    }
}

fn not_evaluated(what: &str) -> Trouble {
    Trouble::Verdict(Verdict::NotEvaluated { what: what.to_owned() })
}

/// Every stretch of wavelengths that a requirement looks at, nm.
pub(super) fn spans(requirement: &Requirement) -> Vec<(f64, f64)> {
    match (&requirement.quantity, &requirement.bound) {
        (Quantity::Luminous(_) | Quantity::Colour(_), _) => vec![VISIBLE_NM],
        (Quantity::Yield, _) => Vec::new(),
        (_, Bound::Crosses { within, .. }) => edge::searched(requirement, *within),
        (_, Bound::AtMostMask(curve) | Bound::AtLeastMask(curve)) => mask::looked_at(requirement, curve),
        _ => {
            let points = requirement.wavelengths.iter().map(|nm| (*nm, *nm));
            requirement.bands.iter().copied().chain(points).collect()
        }
    }
}
