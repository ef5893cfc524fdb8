//! Edges: where a curve crosses a level.

use super::super::optics::Trouble;
use super::super::require::{Asked, Judged};
use super::power::{engine_quantity, explain, light};
use super::{angles, not_evaluated};
use crate::finding::Verdict;
use crate::model::{Angles, Requirement};
use crate::report::At;
use overcoat_engine as engine;

/// Where an edge is looked for, nm: the requirement's bands, or else its window widened by its own width to either side,
/// so that an edge beside it can be named.
pub(super) fn searched(requirement: &Requirement, within: Option<(f64, f64)>) -> Vec<(f64, f64)> {
    match within {
        Some((low, high)) if requirement.bands.is_empty() => {
            let width = high - low;
            vec![((low - width).max(low / 2.0), high + width)]
        }
        _ => requirement.bands.clone(),
    }
}

/// The edge that is nearest to its window at the angle at which it is furthest out.
pub(super) fn judge(
    asked: &Asked<'_>,
    level: f64,
    rising: bool,
    within: Option<(f64, f64)>,
) -> Result<Judged, Trouble> {
    let bands = searched(asked.requirement, within);
    let window = within.or(bands.first().copied()).unwrap_or((0.0, 0.0));
    let inside = |nm: f64| (nm - window.0).min(window.1 - nm);
    let best = |angle: f64| -> Result<Option<f64>, Trouble> {
        let mut best: Option<f64> = None;
        for nm in edges(asked, &bands, level, rising, angle)? {
            if best.is_none_or(|best| inside(nm) > inside(best)) {
                best = Some(nm);
            }
        }
        Ok(best)
    };
    let one = |angle: f64, found: Option<f64>| {
        let at = At { wavelength: found, angle, polarisation: asked.requirement.polarisation };
        let searched = bands.first().zip(bands.last()).map_or(window, |(first, last)| (first.0, last.1));
        Judged {
            value: found,
            min: Some(window.0),
            max: Some(window.1),
            margin: found.map_or(f64::NEG_INFINITY, inside),
            at,
            missed: Some(Verdict::EdgeMisplaced { found, window, searched, at }),
        }
    };
    let judged = match &asked.requirement.angles {
        Angles::List(list) => {
            let each = list
                .iter()
                .map(|angle| Ok(one(*angle, best(*angle)?)))
                .collect::<Result<Vec<_>, Trouble>>()?;
            Judged::worst(each)
        }
        Angles::Range(..) => {
            // An edge moves steadily with the angle; where there is none at all its distance says so.
            let far = |angle: f64| Ok(best(angle)?.map_or(f64::MIN, inside));
            let found = angles::over(asked, &far)?;
            let each = found.iter().map(|candidate| Ok(one(candidate.at.angle, best(candidate.at.angle)?)));
            Judged::worst(each.collect::<Result<Vec<_>, Trouble>>()?)
        }
    };
    judged.ok_or_else(|| not_evaluated("an edge at no angle"))
}

fn edges(
    asked: &Asked<'_>,
    bands: &[(f64, f64)],
    level: f64,
    rising: bool,
    angle: f64,
) -> Result<Vec<f64>, Trouble> {
    let quantity = engine_quantity(asked)?;
    let stack = asked.engine;
    let mut found = Vec::new();
    for band in bands {
        let crossings = engine::crossings(stack, &quantity, &light(asked, angle), *band, level);
        let crossings = crossings.map_err(|error| explain(asked, &error))?;
        found.extend(crossings.into_iter().filter(|one| one.rising == rising).map(|one| one.wavelength_nm));
    }
    Ok(found)
}
