//! Phases, group delays and their dispersion, in the report's units: degrees, fs, fs².

use super::super::optics::Trouble;
use super::super::require::{Asked, Judged};
use super::power::quantity_candidates;
use crate::model::{Quantity, Side};
use overcoat_engine::{self as engine, Outgoing, PhaseKind};

/// fs in a second.
const FS: f64 = 1e15;

/// Whether a quantity is a phase or a derivative of one.
pub(in super::super) fn is_phase(quantity: &Quantity) -> bool {
    matches!(quantity, Quantity::Phase(_) | Quantity::GroupDelay(_) | Quantity::GroupDelayDispersion(_))
}

/// The engine's quantity, and what takes bounds and values into the report's units.
pub(in super::super) struct Scale {
    pub(in super::super) quantity: engine::Quantity,
    bound: f64,
    pub(in super::super) value: f64,
}

impl Scale {
    /// Of a phase that is promised between bounds in rad or s; of a dispersion in fs².
    pub(in super::super) fn of(quantity: &Quantity, min: Option<f64>, max: Option<f64>) -> Option<Scale> {
        let (side, kind, bound, value) = match quantity {
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
            _ => return None,
        };
        let outgoing = match side {
            Side::Reflected => Outgoing::Reflected,
            Side::Transmitted => Outgoing::Transmitted,
        };
        Some(Scale { quantity: engine::Quantity::Phase(outgoing, kind), bound, value })
    }
}

/// The value nearest to breaking the bound, over every band, wavelength and angle.
pub(super) fn judge(
    asked: &Asked<'_>,
    min: Option<f64>,
    max: Option<f64>,
) -> Result<Option<Judged>, Trouble> {
    let Some(scale) = Scale::of(&asked.requirement.quantity, min, max) else { return Ok(None) };
    let (min, max) = (min.map(|min| min * scale.bound), max.map(|max| max * scale.bound));
    let candidates = quantity_candidates(asked, &scale.quantity)?;
    Ok(Judged::worst(candidates.into_iter().map(|mut candidate| {
        candidate.value *= scale.value;
        Judged::within(candidate, min, max)
    })))
}
