//! The greatest field inside the films, with the film and the depth where it is.

use super::super::optics::Trouble;
use super::super::require::{Asked, Judged};
use super::power::{light, quantity_candidates};
use crate::finding::Verdict;
use overcoat_engine as engine;

/// The value nearest to breaking the bound, over every band, wavelength and angle.
pub(super) fn judge(
    asked: &Asked<'_>,
    min: Option<f64>,
    max: Option<f64>,
) -> Result<Option<Judged>, Trouble> {
    let candidates = quantity_candidates(asked, &engine::Quantity::PeakField)?;
    let worst = Judged::worst(candidates.into_iter().map(|candidate| Judged::within(candidate, min, max)));
    Ok(worst.map(|mut judged| {
        judged.missed = place(asked, &judged);
        judged
    }))
}

/// The film that bears the field, where it is beyond its greatest value at one wavelength.
fn place(asked: &Asked<'_>, judged: &Judged) -> Option<Verdict> {
    let (value, most) = (judged.value?, judged.max?);
    let wavelength = judged.at.wavelength?;
    let from_exit = asked.requirement.from_exit;
    let peak = engine::peak_field(asked.engine, &light(asked, judged.at.angle), wavelength).ok()?;
    let layer = asked.stack.layer(asked.optics.element_of(peak.film, from_exit)?)?.call();
    (value > most).then_some(Verdict::FieldHigh { value, most, layer, depth: peak.depth_nm, at: judged.at })
}
