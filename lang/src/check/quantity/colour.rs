//! Colours: how far the part's is from its aim.

use super::super::optics::{Trouble, weight};
use super::super::require::{Asked, Judged};
use super::power::{explain, light};
use super::{angles, not_evaluated};
use crate::finding::Verdict;
use crate::model::{Observer, Quantity, Side};
use overcoat_engine::{self as engine, Lab};

/// Less light than this share of a white's has no colour that anybody sees.
const DARK: f64 = 1e-6;

/// The largest difference from the aim over the requirement's angles.
pub(super) fn judge(asked: &Asked<'_>, difference: f64, aim: [f64; 3]) -> Result<Judged, Trouble> {
    let [l, a, b] = aim;
    let wanted = Lab { l, a, b };
    let found = angles::over(asked, &|angle| Ok(engine::ciede2000(colour(asked, angle)?, wanted)))?;
    let judged =
        Judged::worst(found.into_iter().map(|candidate| Judged::within(candidate, None, Some(difference))));
    let mut judged = judged.ok_or_else(|| not_evaluated("a colour at no angle"))?;
    let seen = colour(asked, judged.at.angle)?;
    judged.missed = Some(Verdict::ColourOff {
        seen: [seen.l, seen.a, seen.b],
        aim,
        difference: judged.value.unwrap_or(0.0),
        most: difference,
        at: judged.at,
    });
    Ok(judged)
}

/// The part's colour at an angle.
fn colour(asked: &Asked<'_>, angle: f64) -> Result<Lab, Trouble> {
    let quantity = match asked.requirement.quantity {
        Quantity::Colour(Side::Transmitted) => engine::Quantity::Transmittance,
        _ => engine::Quantity::Reflectance,
    };
    let observer = match asked.requirement.observer {
        Observer::Two => engine::Observer::Two,
        Observer::Ten => engine::Observer::Ten,
    };
    let under =
        weight(asked.requirement.under.as_ref()).ok_or_else(|| not_evaluated("a colour under this light"))?;
    let stack = asked.engine;
    let colour = engine::colour(stack, &quantity, &light(asked, angle), &under, observer);
    let colour = colour.map_err(|error| explain(asked, &error))?;
    if colour.shares()[1] < DARK {
        return Err(Trouble::Verdict(Verdict::NoLight { wavelength: None }));
    }
    Ok(colour)
}
