//! A quantity that is one number at each angle, over the angles of a requirement.

use super::super::optics::Trouble;
use super::super::require::{Asked, Candidate};
use crate::model::Angles;
use crate::report::At;

/// At how many angles such a quantity is looked at over a range before its extremes are closed in on.
const ANGLES: usize = 32;

/// The values at the requirement's angles; over a range of them the least and the greatest too.
///
/// What is averaged over a band or read off at an edge runs smoothly with the angle, without the fringes.
pub(super) fn over(
    asked: &Asked<'_>,
    value: &dyn Fn(f64) -> Result<f64, Trouble>,
) -> Result<Vec<Candidate>, Trouble> {
    let candidate = |angle: f64| -> Result<Candidate, Trouble> {
        let at = At { wavelength: None, angle, polarisation: asked.requirement.polarisation };
        Ok(Candidate { value: value(angle)?, at })
    };
    match &asked.requirement.angles {
        Angles::List(angles) => angles.iter().map(|angle| candidate(*angle)).collect(),
        Angles::Range(from, to) => {
            let angles = (0..=ANGLES).map(|step| from + (to - from) * step as f64 / ANGLES as f64);
            let mut found: Vec<Candidate> = angles.map(candidate).collect::<Result<_, _>>()?;
            for sign in [1.0, -1.0] {
                let best = (0..=ANGLES).reduce(|best, next| {
                    if sign * found[next].value < sign * found[best].value { next } else { best }
                });
                let Some(best) = best else { continue };
                let low = found[best.saturating_sub(1)].at.angle;
                let high = found[(best + 1).min(ANGLES)].at.angle;
                found.push(closed_in(&candidate, sign, low, high)?);
            }
            Ok(found)
        }
    }
}

/// The least of sign × f between two angles, by golden sections.
///
/// Source: J. Kiefer, Proc. Am. Math. Soc. 4, 502 (1953).
fn closed_in(
    f: &dyn Fn(f64) -> Result<Candidate, Trouble>,
    sign: f64,
    mut low: f64,
    mut high: f64,
) -> Result<Candidate, Trouble> {
    let ratio = (5f64.sqrt() - 1.0) / 2.0;
    let mut a = f(high - ratio * (high - low))?;
    let mut b = f(low + ratio * (high - low))?;
    while high - low > 1e-5 {
        if sign * a.value <= sign * b.value {
            high = b.at.angle;
            b = a;
            a = f(high - ratio * (high - low))?;
        } else {
            low = a.at.angle;
            a = b;
            b = f(low + ratio * (high - low))?;
        }
    }
    Ok(if sign * a.value <= sign * b.value { a } else { b })
}
