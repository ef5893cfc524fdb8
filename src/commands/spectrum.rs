//! `overcoat spectrum`: reflectance, transmittance and absorptance of one recipe as CSV.

use super::one::{self, One};
use crate::Status;
use crate::cli::{From, Global, Polarised, Spectrum};
use crate::failure::Failure;
use crate::views::Shown;
use crate::views::amount::shortest;
use crate::{output, quantity};
use overcoat_engine::{IndexError, OpticsError, Polarisation, Prepared, Response};
use overcoat_lang::model::{Element, Material, Recipe};
use overcoat_lang::{engine_stack, range_of};
use std::sync::Arc;

/// Where a recipe without requirements is shown: the visible range.
const VISIBLE: (f64, f64) = (380.0, 780.0);

/// More rows than this are a slip of the pen.
const MOST_ROWS: f64 = 1_000_000.0;

pub(super) fn run(arguments: &Spectrum, global: &Global) -> Result<Status, Failure> {
    let over = arguments.over.as_deref().map(|text| quantity::band(text, "--over")).transpose()?;
    let step = quantity::length(&arguments.step, "--step")?;
    let angle = quantity::incidence(&arguments.at, "--at")?;
    let polarisation = match arguments.polarised {
        Some(Polarised::S) => Polarisation::S,
        Some(Polarised::P) => Polarisation::P,
        None => Polarisation::Mean,
    };
    let Some(One { project, opened, recipe }) =
        one::named(&arguments.file, arguments.recipe.as_deref(), global)?
    else {
        return Ok(Status::NotUnderstood);
    };
    let recipe = &*recipe;
    let no_spectrum = |why: &str| Failure::message(format!("`{}` has no spectrum: {why}", recipe.name));
    let written = recipe.stack.as_ref().ok_or_else(|| no_spectrum("it has no stack"))?;
    let band = band(range_of(written), recipe, over)?;
    let stack = engine_stack(written, arguments.from == From::Exit, band, angle);
    let stack = stack.map_err(|why| no_spectrum(&why))?;
    let shown = Shown::new(&project.sources, &opened.root.folder, &opened.here);
    let wavelengths = grid(band, step)?;
    let prepared = Prepared::new(&stack, &wavelengths, angle);
    let responses = prepared.and_then(|prepared| prepared.responses(polarisation));
    let responses = responses.map_err(|error| refusal(&error, recipe, &shown))?;
    let rows: Vec<(f64, Response)> = wavelengths.into_iter().zip(responses).collect();
    output::print(&csv(&rows))?;
    Ok(Status::Met)
}

/// The band asked for, if all materials have data over it; else the band of the requirements, as far as they have.
fn band(data: Option<(f64, f64)>, recipe: &Recipe, over: Option<(f64, f64)>) -> Result<(f64, f64), Failure> {
    if let Some(over) = over {
        return Ok(over);
    }
    let requirements = recipe.all_requirements().map(|(requirement, _)| requirement);
    let bands = requirements.flat_map(|requirement| {
        let single = requirement.wavelengths.iter().map(|at| (*at, *at));
        requirement.bands.iter().copied().chain(single)
    });
    let wide = |a: (f64, f64), b: (f64, f64)| (a.0.min(b.0), a.1.max(b.1));
    let wanted = bands.reduce(wide).filter(|band| band.0 < band.1).unwrap_or(VISIBLE);
    let data = data.unwrap_or((0.0, f64::INFINITY));
    let (low, high) = (wanted.0.max(data.0), wanted.1.min(data.1));
    if low < high {
        return Ok((low, high));
    }
    if data.0 < data.1 && data.1.is_finite() {
        return Ok(data);
    }
    Err(Failure::message(format!("the materials of `{}` have no wavelength in common", recipe.name)))
}

/// The wavelengths: from the low end in steps, and the high end.
fn grid((low, high): (f64, f64), step: f64) -> Result<Vec<f64>, Failure> {
    let steps = (high - low) / step;
    if steps > MOST_ROWS {
        return Err(Failure::message(format!(
            "the band holds {steps:.0} steps, and at most {MOST_ROWS} are printed"
        )));
    }
    // A last step shorter than this share of a step is rounding, not a row.
    let whole = (steps - 1e-9).ceil().max(1.0) as usize;
    let inside = (0..whole).map(|index| round(low + index as f64 * step));
    Ok(inside.chain([high]).collect())
}

/// The decimal of at most nine places that a wavelength was meant to be, if it is that but for rounding.
fn round(wavelength: f64) -> f64 {
    let decimal: f64 = format!("{wavelength:.9}").parse().unwrap_or(wavelength);
    if (decimal - wavelength).abs() <= 4.0 * f64::EPSILON * wavelength { decimal } else { wavelength }
}

fn csv(rows: &[(f64, Response)]) -> String {
    let mut text = "wavelength_nm,reflectance,transmittance,absorptance\n".to_owned();
    for (wavelength, response) in rows {
        let numbers = [*wavelength, response.reflectance, response.transmittance, response.absorptance];
        text.push_str(&numbers.map(shortest).join(","));
        text.push('\n');
    }
    text
}

/// Why the stack has no value, with the material and where it is defined.
fn refusal(error: &OpticsError, recipe: &Recipe, shown: &Shown<'_>) -> Failure {
    let OpticsError::Material { index, cause } = error else {
        return Failure::message(format!("`{}` has no spectrum there: {error}", recipe.name));
    };
    let is = |material: &&Arc<Material>| material.index.as_ref().is_some_and(|other| other.same_as(index));
    let materials = materials(recipe);
    let Some(material) = materials.iter().copied().find(|material| is(material)) else {
        return Failure::message(format!("`{}` has no spectrum there: {error}", recipe.name));
    };
    let at = shown.located(material.place);
    let place = format!("{}:{}", at.file, at.line);
    match cause {
        IndexError::Outside { wavelength_nm, range_nm } => Failure::message(format!(
            "{} has no optical constants at {} nm: its data reach from {} to {} nm ({place}); choose a band inside with --over",
            material.name,
            shortest(*wavelength_nm),
            shortest(range_nm.0),
            shortest(range_nm.1),
        )),
        other => Failure::message(format!("{} ({place}): {other}", material.name)),
    }
}

/// All materials of a stack.
fn materials(recipe: &Recipe) -> Vec<&Arc<Material>> {
    let Some(stack) = &recipe.stack else { return Vec::new() };
    let mut all = vec![&stack.incident.material];
    for element in &stack.elements {
        match element {
            Element::Layer(layer) => all.extend(layer.material.materials()),
            Element::Body(body) => all.push(&body.material),
        }
    }
    all.push(&stack.exit.material);
    all
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn both_ends_are_rows_and_decimals_stay_decimals() {
        assert_eq!(grid((400.0, 400.5), 0.1).unwrap(), [400.0, 400.1, 400.2, 400.3, 400.4, 400.5]);
        assert_eq!(grid((400.0, 402.5), 1.0).unwrap(), [400.0, 401.0, 402.0, 402.5]);
        assert_eq!(grid((400.0, 401.0), 5.0).unwrap(), [400.0, 401.0]);
        assert!(grid((1.0, 1e9), 1e-3).is_err());
    }
}
