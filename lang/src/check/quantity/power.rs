//! Reflectance, transmittance, absorptance and optical density: at wavelengths, over bands, and their means.

use super::super::optics::{self, Trouble, weight};
use super::super::require::{Asked, Candidate};
use super::angles;
use crate::finding::Verdict;
use crate::model::{Angles, Element, Quantity, Target};
use crate::report::At;
use overcoat_engine::{self as engine, Extremes, Light, OpticsError, SpectralWeight};

pub(super) fn candidates(asked: &Asked<'_>) -> Result<Vec<Candidate>, Trouble> {
    quantity_candidates(asked, &engine_quantity(asked)?)
}

/// The values of one of the engine's quantities at the requirement's wavelengths and angles, or its means over the bands.
pub(super) fn quantity_candidates(
    asked: &Asked<'_>,
    quantity: &engine::Quantity,
) -> Result<Vec<Candidate>, Trouble> {
    if asked.requirement.mean {
        return means(asked, quantity);
    }
    extremes(asked, quantity).map_err(|error| explain(asked, &error))
}

/// What the engine's error means for a requirement.
pub(super) fn explain(asked: &Asked<'_>, error: &OpticsError) -> Trouble {
    optics::explain(error, asked.optics.materials(), asked.requirement, asked.stack)
}

/// The quantity as the engine has it; a name that stands for nothing in the stack is reported.
pub(in super::super) fn engine_quantity(asked: &Asked<'_>) -> Result<engine::Quantity, Trouble> {
    match &asked.requirement.quantity {
        Quantity::Transmittance => Ok(engine::Quantity::Transmittance),
        Quantity::Absorptance => Ok(engine::Quantity::Absorptance),
        Quantity::AbsorptanceIn(target) => absorptance_in(asked, target),
        Quantity::OpticalDensity => Ok(engine::Quantity::OpticalDensity),
        _ => Ok(engine::Quantity::Reflectance),
    }
}

/// The absorptance in what a name stands for.
pub(in super::super) fn absorptance_in(
    asked: &Asked<'_>,
    target: &Target,
) -> Result<engine::Quantity, Trouble> {
    asked.optics.target(asked.stack, target, asked.requirement.from_exit).ok_or_else(|| {
        let names: Vec<String> = asked.stack.elements.iter().flat_map(names).collect();
        let near = crate::nearest(&target.name, names.iter().map(String::as_str));
        Trouble::Verdict(Verdict::UnknownTarget { name: target.name.clone(), near })
    })
}

fn names(element: &Element) -> Vec<String> {
    match element {
        Element::Layer(layer) => {
            let materials = layer.material.materials().map(|material| material.name.clone());
            layer.name.iter().cloned().chain(materials).collect()
        }
        Element::Body(body) => vec![body.material.name.clone()],
    }
}

/// The requirement's beam at an angle.
pub(in super::super) fn light(asked: &Asked<'_>, angle: f64) -> Light {
    Light {
        polarisation: asked.requirement.polarisation,
        angle_rad: angle,
        cone_half_angle_rad: asked.requirement.cone,
    }
}

/// The least and the greatest value over every band, at every wavelength, at every angle.
fn extremes(asked: &Asked<'_>, quantity: &engine::Quantity) -> Result<Vec<Candidate>, OpticsError> {
    let requirement = asked.requirement;
    let stack = asked.engine;
    let points = requirement.wavelengths.iter().map(|nm| (*nm, *nm));
    let bands: Vec<(f64, f64)> = requirement.bands.iter().copied().chain(points).collect();
    let mut found = Vec::new();
    for band in bands {
        match &requirement.angles {
            Angles::List(angles) => {
                for angle in angles {
                    keep(asked, engine::extremes(stack, quantity, &light(asked, *angle), band)?, &mut found);
                }
            }
            Angles::Range(from, to) => {
                let light = light(asked, *from);
                let over = engine::extremes_over_angles(stack, quantity, &light, band, (*from, *to))?;
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

/// The mean over the bands at every angle.
fn means(asked: &Asked<'_>, quantity: &engine::Quantity) -> Result<Vec<Candidate>, Trouble> {
    let weight = weight(asked.requirement.under.as_ref()).unwrap_or_else(SpectralWeight::constant);
    mean_over_angles(asked, quantity, &asked.requirement.bands, &weight)
}

/// The mean of a quantity under a weight at every angle of the requirement.
pub(super) fn mean_over_angles(
    asked: &Asked<'_>,
    quantity: &engine::Quantity,
    bands: &[(f64, f64)],
    weight: &SpectralWeight,
) -> Result<Vec<Candidate>, Trouble> {
    let stack = asked.engine;
    angles::over(asked, &|angle| {
        let mean = engine::mean(stack, quantity, &light(asked, angle), bands, weight);
        mean.map(|mean| mean.value).map_err(|error| explain(asked, &error))
    })
}
