//! Where a quantity crosses a level: the edges of filters.

use super::extremes::{check_band, mesh_points};
use super::least::bounds;
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
    let points = mesh_points(&probe, band_nm)?;
    let above = |wavelength_nm: f64| Ok::<f64, OpticsError>(probe.at(wavelength_nm)? - level);
    let mut values = Vec::with_capacity(points.len());
    for x in points {
        values.push(Point { x, y: above(x)? });
    }
    refine(&mut values, &above)?;
    let mut found = Vec::new();
    for step in values.windows(2) {
        if (step[0].y < 0.0) != (step[1].y < 0.0) {
            let rising = step[0].y < 0.0;
            found.push(Crossing { wavelength_nm: root(step[0], step[1], &above)?, rising });
        }
    }
    Ok(found)
}

/// Halves the steps that may hide two crossings.
fn refine(
    values: &mut Vec<Point>,
    function: &dyn Fn(f64) -> Result<f64, OpticsError>,
) -> Result<(), OpticsError> {
    for _ in 0..PASSES {
        if values.len() < 5 {
            return Ok(());
        }
        let mirrored: Vec<Point> = values.iter().map(|point| Point { x: point.x, y: -point.y }).collect();
        let (below, above) = (bounds(values), bounds(&mirrored));
        let mut finer = Vec::with_capacity(values.len());
        for (at, value) in values.iter().enumerate() {
            finer.push(*value);
            let Some(next) = values.get(at + 1) else { continue };
            let side = if value.y < 0.0 { &above } else { &below };
            let Some(bound) = side.get(at).filter(|_| (value.y < 0.0) == (next.y < 0.0)) else { continue };
            if bound.least - bound.slack < 0.0 && next.x - value.x > 1e-9 * next.x {
                let x = 0.5 * (value.x + next.x);
                finer.push(Point { x, y: function(x)? });
            }
        }
        if finer.len() == values.len() || finer.len() > MOST {
            return Ok(());
        }
        *values = finer;
    }
    Ok(())
}

/// The zero between two points of opposite sign, by false position with halved ordinates and bisection.
///
/// Source: M. Dowell, P. Jarratt, BIT 11, 168–174 (1971), "Illinois" modification.
fn root(
    mut a: Point,
    mut b: Point,
    function: &dyn Fn(f64) -> Result<f64, OpticsError>,
) -> Result<f64, OpticsError> {
    for turn in 0..200 {
        if (b.x - a.x).abs() <= 1e-7 {
            break;
        }
        let mut x = b.x - b.y * (b.x - a.x) / (b.y - a.y);
        // Every fourth step halves the bracket, whatever the function does.
        if turn % 4 == 3 || !(x > a.x.min(b.x) && x < a.x.max(b.x)) {
            x = 0.5 * (a.x + b.x);
        }
        let next = Point { x, y: function(x)? };
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
