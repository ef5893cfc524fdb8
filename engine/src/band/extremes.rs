//! The least and the greatest value over a band.

use super::mesh::{Along, Mesh};
use super::probe::Probe;
use super::search::{Point, minimum};
use crate::error::OpticsError;
use crate::quantity::{Light, Quantity};
use crate::stack::Stack;

/// How many places are searched, at most, for one extreme.
const SEARCHES: usize = 64;

/// An extreme of a quantity, and where it is.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Extreme {
    /// The value.
    pub value: f64,
    /// The vacuum wavelength, nm.
    pub wavelength_nm: f64,
    /// The angle of incidence of the beam's axis, rad.
    pub angle_rad: f64,
}

/// The least and the greatest value of a quantity.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Extremes {
    /// The least.
    pub min: Extreme,
    /// The greatest.
    pub max: Extreme,
}

/// The least and the greatest value of a quantity over a band of vacuum wavelengths in nm, ends included.
///
/// The band is searched on the scale of the stack's own fringes and of its resonances, however narrow, and
/// each extreme is closed in on: the value to 1e-9, the place to 0.01 nm where the extreme is not flat. A band
/// whose ends are equal is one wavelength.
///
/// # Errors
/// As [`value`](super::value), and a band that is reversed or not made of wavelengths.
pub fn extremes(
    stack: &Stack,
    quantity: &Quantity,
    light: &Light,
    band_nm: (f64, f64),
) -> Result<Extremes, OpticsError> {
    check_band(band_nm)?;
    over_band(&Probe::new(stack, quantity, light)?, band_nm)
}

/// An error unless the two are wavelengths in order.
pub(crate) fn check_band(band_nm: (f64, f64)) -> Result<(), OpticsError> {
    let (lo, hi) = band_nm;
    if lo > 0.0 && lo <= hi && hi.is_finite() { Ok(()) } else { Err(OpticsError::Band { band_nm }) }
}

/// The same for a prepared stack.
pub(crate) fn over_band(probe: &Probe, band_nm: (f64, f64)) -> Result<Extremes, OpticsError> {
    let mut points = Vec::new();
    for angle_rad in mesh_angles(probe) {
        let along = Along::Wavelength { angle_rad };
        points.extend(Mesh::build(&probe.plan, &probe.light, probe.cone.is_some(), along, band_nm)?.points());
    }
    points.sort_by(f64::total_cmp);
    points.dedup();
    let (min, max) = along(&points, |wavelength_nm| probe.at(wavelength_nm))?;
    let angle_rad = probe.light.angle_rad;
    let extreme = |point: Point| Extreme { value: point.y, wavelength_nm: point.x, angle_rad };
    Ok(Extremes { min: extreme(min), max: extreme(max) })
}

/// The angles whose resonances shape a quantity: a cone blurs those of all its rays.
pub(crate) fn mesh_angles(probe: &Probe) -> Vec<f64> {
    match &probe.cone {
        None => vec![probe.light.angle_rad],
        Some(cone) => {
            let (lo, hi) = cone.range_rad();
            vec![lo, 0.5 * (lo + hi), hi]
        }
    }
}

/// The least and the greatest value of a function on a mesh that shows all its structure.
pub(crate) fn along(
    points: &[f64],
    mut function: impl FnMut(f64) -> Result<f64, OpticsError>,
) -> Result<(Point, Point), OpticsError> {
    let mut values = Vec::with_capacity(points.len());
    for &x in points {
        values.push(Point { x, y: function(x)? });
    }
    let least = least(&values, &mut function)?;
    let mirrored: Vec<Point> = values.iter().map(|point| Point { x: point.x, y: -point.y }).collect();
    let most = self::least(&mirrored, &mut |x| function(x).map(|y| -y))?;
    Ok((least, Point { x: most.x, y: -most.y }))
}

/// The least value: every dip of the mesh that could hold it is searched, the most promising first.
fn least(
    values: &[Point],
    function: &mut dyn FnMut(f64) -> Result<f64, OpticsError>,
) -> Result<Point, OpticsError> {
    let mut best = *values
        .iter()
        .min_by(|a, b| a.y.total_cmp(&b.y))
        .ok_or(OpticsError::Band { band_nm: (f64::NAN, f64::NAN) })?;
    let last = values.len() - 1;
    // Dips by how low they may go: a parabola's vertex, and as much below it again for safety.
    let mut dips: Vec<(f64, usize)> = Vec::new();
    for at in 0..values.len() {
        let here = values[at];
        let left = values[at.saturating_sub(1)];
        let right = values[(at + 1).min(last)];
        if left.y >= here.y && right.y >= here.y {
            let depth = if at == 0 || at == last {
                0.5 * (left.y - here.y).max(right.y - here.y)
            } else {
                vertex_depth(left, here, right)
            };
            dips.push((here.y - 2.0 * depth, at));
        }
    }
    dips.sort_by(|a, b| a.0.total_cmp(&b.0));
    for &(bound, at) in dips.iter().take(SEARCHES) {
        if bound > best.y {
            break;
        }
        let (lo, hi) = (values[at.saturating_sub(1)].x, values[(at + 1).min(last)].x);
        if lo >= hi {
            continue;
        }
        let tolerance = 1e-7 * (hi - lo);
        let found = minimum(lo, values[at], hi, tolerance, &mut *function)?;
        if found.y < best.y {
            best = found;
        }
    }
    Ok(best)
}

/// How far the parabola through three points, the middle one lowest, goes below it.
fn vertex_depth(left: Point, here: Point, right: Point) -> f64 {
    let (a, b) = (here.x - left.x, right.x - here.x);
    let (down, up) = ((here.y - left.y) / a, (right.y - here.y) / b);
    let curvature = (up - down) / (a + b);
    if curvature <= 0.0 || curvature.is_nan() {
        return 0.0;
    }
    let slope = (down * b + up * a) / (a + b);
    slope * slope / (4.0 * curvature)
}
