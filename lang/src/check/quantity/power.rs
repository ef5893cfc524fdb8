//! Reflectance, transmittance and absorptance: at wavelengths, over bands, and their means.

use crate::check::optics::{Trouble, weight};
use crate::check::require::{Asked, Candidate};
use crate::finding::Verdict;
use crate::model::{Angles, Element, Quantity};
use crate::report::At;
use overcoat_engine::{self as engine, Extremes, Light, OpticsError, SpectralWeight};

/// At how many angles a mean over a range of angles is looked at before its extremes are closed in on.
const ANGLES: usize = 32;

pub(super) fn candidates(asked: &Asked<'_>) -> Result<Vec<Candidate>, Trouble> {
    let quantity = engine_quantity(asked)?;
    let result = if asked.requirement.mean { means(asked, &quantity) } else { extremes(asked, &quantity) };
    result.map_err(|error| asked.optics.explain(&error, asked.requirement, asked.stack))
}

/// The quantity as the engine has it; a name that stands for nothing in the stack is reported.
fn engine_quantity(asked: &Asked<'_>) -> Result<engine::Quantity, Trouble> {
    match &asked.requirement.quantity {
        Quantity::Transmittance => Ok(engine::Quantity::Transmittance),
        Quantity::Absorptance => Ok(engine::Quantity::Absorptance),
        Quantity::AbsorptanceIn(target) => {
            asked.optics.target(asked.stack, target, asked.requirement.from_exit).ok_or_else(|| {
                let names: Vec<String> = asked.stack.elements.iter().flat_map(names).collect();
                let near = crate::nearest(&target.name, names.iter().map(String::as_str));
                Trouble::Verdict(Verdict::UnknownTarget { name: target.name.clone(), near })
            })
        }
        _ => Ok(engine::Quantity::Reflectance),
    }
}

fn names(element: &Element) -> Vec<String> {
    match element {
        Element::Layer(layer) => layer
            .name
            .iter()
            .cloned()
            .chain(layer.material.materials().map(|material| material.name.clone()))
            .collect(),
        Element::Body(body) => vec![body.material.name.clone()],
    }
}

fn light(asked: &Asked<'_>, angle: f64) -> Light {
    Light {
        polarisation: asked.requirement.polarisation,
        angle_rad: angle,
        cone_half_angle_rad: asked.requirement.cone,
    }
}

/// The least and the greatest value over every band, at every wavelength, at every angle.
fn extremes(asked: &Asked<'_>, quantity: &engine::Quantity) -> Result<Vec<Candidate>, OpticsError> {
    let requirement = asked.requirement;
    let stack = asked.optics.facing(requirement.from_exit);
    let points = requirement.wavelengths.iter().map(|nm| (*nm, *nm));
    let bands: Vec<(f64, f64)> = requirement.bands.iter().copied().chain(points).collect();
    let mut found = Vec::new();
    for band in bands {
        match &requirement.angles {
            Angles::List(angles) => {
                for angle in angles {
                    let over = engine::extremes(stack, quantity, &light(asked, *angle), band)?;
                    keep(asked, over, &mut found);
                }
            }
            Angles::Range(from, to) => {
                let over =
                    engine::extremes_over_angles(stack, quantity, &light(asked, *from), band, (*from, *to))?;
                keep(asked, over, &mut found);
            }
        }
    }
    Ok(found)
}

fn keep(asked: &Asked<'_>, over: Extremes, found: &mut Vec<Candidate>) {
    for extreme in [over.min, over.max] {
        let at = At {
            wavelength: Some(extreme.wavelength_nm),
            angle: extreme.angle_rad,
            polarisation: asked.requirement.polarisation,
        };
        found.push(Candidate { value: extreme.value, at });
    }
}

/// The mean over the bands at every angle; over a range of angles its least and its greatest value.
fn means(asked: &Asked<'_>, quantity: &engine::Quantity) -> Result<Vec<Candidate>, OpticsError> {
    let requirement = asked.requirement;
    let weight = weight(requirement.under.as_ref()).unwrap_or_else(SpectralWeight::constant);
    let stack = asked.optics.facing(requirement.from_exit);
    let mean = |angle: f64| -> Result<Candidate, OpticsError> {
        let mean = engine::mean(stack, quantity, &light(asked, angle), &requirement.bands, &weight)?;
        let at = At { wavelength: None, angle, polarisation: requirement.polarisation };
        Ok(Candidate { value: mean.value, at })
    };
    match &requirement.angles {
        Angles::List(angles) => angles.iter().map(|angle| mean(*angle)).collect(),
        Angles::Range(from, to) => {
            // A mean over a band runs smoothly with the angle: the fringes that move are averaged out.
            let angles = (0..=ANGLES).map(|step| from + (to - from) * step as f64 / ANGLES as f64);
            let mut found: Vec<Candidate> = angles.map(mean).collect::<Result<_, _>>()?;
            for sign in [1.0, -1.0] {
                let best = (0..=ANGLES).reduce(|best, next| {
                    if sign * found[next].value < sign * found[best].value { next } else { best }
                });
                let Some(best) = best else { continue };
                let low = found[best.saturating_sub(1)].at.angle;
                let high = found[(best + 1).min(ANGLES)].at.angle;
                found.push(closed_in(&mean, sign, low, high)?);
            }
            Ok(found)
        }
    }
}

/// The least of sign × f between two angles, by golden sections.
///
/// Source: J. Kiefer, Proc. Am. Math. Soc. 4, 502 (1953).
fn closed_in(
    f: &dyn Fn(f64) -> Result<Candidate, OpticsError>,
    sign: f64,
    mut low: f64,
    mut high: f64,
) -> Result<Candidate, OpticsError> {
    let ratio = (5f64.sqrt() - 1.0) / 2.0;
    let mut a = f(high - ratio * (high - low))?;
    let mut b = f(low + ratio * (high - low))?;
    while high - low > 1e-6 {
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
