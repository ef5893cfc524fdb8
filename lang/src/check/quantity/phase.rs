//! Phases, group delays and their dispersion, in the report's units: degrees, fs, fs².

use super::super::optics::Trouble;
use super::super::require::{Asked, Judged};
use super::power::quantity_candidates;
use crate::model::{Quantity, Side};
use overcoat_engine::{self as engine, Outgoing, PhaseKind};

/// fs in a second.
const FS: f64 = 1e15;

/// The value nearest to breaking the bound, over every band, wavelength and angle.
pub(super) fn judge(
    asked: &Asked<'_>,
    min: Option<f64>,
    max: Option<f64>,
) -> Result<Option<Judged>, Trouble> {
    // In rad, s and fs² in the bound; in rad, fs and fs² out of the engine.
    let (side, kind, bound_scale, value_scale) = match asked.requirement.quantity {
        Quantity::GroupDelay(side) => (side, PhaseKind::Delay, FS, 1.0),
        Quantity::GroupDelayDispersion(side) => (side, PhaseKind::Dispersion, 1.0, 1.0),
        Quantity::Phase(side) => {
            // A phase is told up to whole turns: the branch is the one around the middle of the bound.
            let aim_rad = match (min, max) {
                (Some(min), Some(max)) => (min + max) / 2.0,
                (one, other) => one.or(other).unwrap_or(0.0),
            };
            let degrees = 1f64.to_degrees();
            (side, PhaseKind::Phase { aim_rad }, degrees, degrees)
        }
        _ => return Ok(None),
    };
    let outgoing = match side {
        Side::Reflected => Outgoing::Reflected,
        Side::Transmitted => Outgoing::Transmitted,
    };
    let (min, max) = (min.map(|min| min * bound_scale), max.map(|max| max * bound_scale));
    let candidates = quantity_candidates(asked, &engine::Quantity::Phase(outgoing, kind))?;
    Ok(Judged::worst(candidates.into_iter().map(|mut candidate| {
        candidate.value *= value_scale;
        Judged::within(candidate, min, max)
    })))
}
