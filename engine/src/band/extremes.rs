//! The least and the greatest value over a band.

use super::least::{along, valued};
use super::mesh::{Along, Mesh};
use super::probe::Probe;
use super::search::Point;
use crate::error::OpticsError;
use crate::quantity::{Light, Quantity};
use crate::stack::Stack;

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
pub(crate) fn over_band(probe: &Probe<'_>, band_nm: (f64, f64)) -> Result<Extremes, OpticsError> {
    let values = mesh_values(probe, band_nm)?;
    let (min, max) = along(values, &mut |wavelengths_nm| probe.values(wavelengths_nm))?;
    let angle_rad = probe.light.angle_rad;
    let extreme = |point: Point| Extreme { value: point.y, wavelength_nm: point.x, angle_rad };
    Ok(Extremes { min: extreme(min), max: extreme(max) })
}

/// The points that show a quantity's structure over a band, both ends among them, ascending, with its values.
pub(super) fn mesh_values(probe: &Probe<'_>, band_nm: (f64, f64)) -> Result<Vec<Point>, OpticsError> {
    let mut points = Vec::new();
    for angle_rad in mesh_angles(probe) {
        let along = Along::Wavelength { angle_rad };
        let mesh = Mesh::build(probe, probe.cone.is_some(), along, band_nm)?;
        if let Some(values) = mesh.values() {
            return Ok(values.to_vec());
        }
        points.extend(mesh.points());
    }
    points.sort_by(f64::total_cmp);
    points.dedup();
    valued(&points, &mut |wavelengths_nm| probe.values(wavelengths_nm))
}

/// The angles whose resonances shape a quantity: a cone blurs those of all its rays.
pub(crate) fn mesh_angles(probe: &Probe<'_>) -> Vec<f64> {
    match &probe.cone {
        None => vec![probe.light.angle_rad],
        Some(cone) => {
            let (lo, hi) = cone.range_rad();
            vec![lo, 0.5 * (lo + hi), hi]
        }
    }
}
