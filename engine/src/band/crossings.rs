//! Where a quantity crosses a level: the edges of filters.

use super::extremes::{check_band, mesh_values};
use super::least::{Function, bounds, merged, valued};
use super::probe::Probe;
use super::search::Point;
use crate::error::OpticsError;
use crate::quantity::{Light, Quantity};
use crate::stack::Stack;

/// How often the mesh may be made finer.
const PASSES: usize = 40;
/// More points than this are beyond patience.
const MOST: usize = 1_000_000;

/// A crossing of a level.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Crossing {
    /// The vacuum wavelength, nm.
    pub wavelength_nm: f64,
    /// Whether the quantity rises with the wavelength there.
    pub rising: bool,
}

/// Every crossing of a level over a band of vacuum wavelengths in nm, ascending; each to 1e-6 nm.
///
/// The mesh is the one of [`extremes`](super::extremes); a step whose two ends lie on one side of the level is halved
/// for as long as the cubics through its neighbourhood leave room for a double crossing in it.
///
/// # Errors
/// As [`extremes`](super::extremes).
pub fn crossings(
    stack: &Stack,
    quantity: &Quantity,
    light: &Light,
    band_nm: (f64, f64),
    level: f64,
) -> Result<Vec<Crossing>, OpticsError> {
    check_band(band_nm)?;
    let probe = Probe::new(stack, quantity, light)?;
    let off = |point: Point| Point { y: point.y - level, ..point };
    let values: Vec<Point> = mesh_values(&probe, band_nm)?.into_iter().map(off).collect();
    let mut above = |wavelengths_nm: &[f64]| -> Result<Vec<f64>, OpticsError> {
        Ok(probe.values(wavelengths_nm)?.into_iter().map(|value| value - level).collect())
    };
    let values = refined(values, &mut above)?;
    let mut found = Vec::new();
    for step in values.windows(2) {
        if (step[0].y < 0.0) != (step[1].y < 0.0) {
            let rising = step[0].y < 0.0;
            found.push(Crossing { wavelength_nm: root(step[0], step[1], &mut above)?, rising });
        }
    }
    Ok(found)
}

/// Halves the steps that may hide two crossings.
fn refined(mut values: Vec<Point>, function: Function<'_>) -> Result<Vec<Point>, OpticsError> {
    for _ in 0..PASSES {
        if values.len() < 5 {
            break;
        }
        let mut wanted = Vec::new();
        for (bound, step) in bounds(&values).iter().zip(values.windows(2)) {
            let below = step[0].y < 0.0;
            let crosses = if below { bound.highest() >= 0.0 } else { bound.lowest() < 0.0 };
            if below == (step[1].y < 0.0) && crosses && step[1].x - step[0].x > 1e-9 * step[1].x {
                wanted.push(0.5 * (step[0].x + step[1].x));
            }
        }
        if wanted.is_empty() || values.len() + wanted.len() > MOST {
            break;
        }
        let found = valued(&wanted, function)?;
        values = merged(values, found);
    }
    Ok(values)
}

/// The zero between two points of opposite sign, by false position with halved ordinates and bisection.
///
/// Source: M. Dowell, P. Jarratt, BIT 11, 168–174 (1971), "Illinois" modification.
fn root(mut a: Point, mut b: Point, function: Function<'_>) -> Result<f64, OpticsError> {
    for turn in 0..200 {
        if (b.x - a.x).abs() <= 1e-7 {
            break;
        }
        let mut x = b.x - b.y * (b.x - a.x) / (b.y - a.y);
        // Every fourth step halves the bracket, whatever the function does.
        if turn % 4 == 3 || !(x > a.x.min(b.x) && x < a.x.max(b.x)) {
            x = 0.5 * (a.x + b.x);
        }
        let next = Point { x, y: function(&[x])?[0] };
        if next.y == 0.0 {
            return Ok(x);
        }
        if (next.y < 0.0) != (b.y < 0.0) {
            a = b;
        } else {
            a.y *= 0.5;
        }
        b = next;
    }
    Ok(0.5 * (a.x + b.x))
}
