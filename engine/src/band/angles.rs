//! The least and the greatest value over a band and a range of angles.

use super::extremes::{Extreme, Extremes, check_band, over_band};
use super::least::{along, valued};
use super::mesh::{Along, Mesh};
use super::probe::Probe;
use super::search::{Point, minimum};
use crate::error::OpticsError;
use crate::quantity::{Light, Quantity};
use crate::stack::Stack;

/// How many stretches of angle are searched, at most, for one extreme.
const SEARCHES: usize = 4;
/// Two values that differ by less are the same.
const ROUNDING: f64 = 1e-14;

/// The least and the greatest value of a quantity over a band of vacuum wavelengths in nm and a range of
/// angles of incidence in rad, ends included. The light's own angle is not looked at.
///
/// At each of a set of angles, as close as the fringes' own change with the angle asks for, the band is
/// searched as by [`extremes`](super::extremes); along the band's two ends the range of angles is, so that no
/// resonance passes through unseen. The best are then closed in on, in both variables.
///
/// # Errors
/// As [`extremes`](super::extremes), and angles that are reversed or not from 0 to below 90°.
pub fn extremes_over_angles(
    stack: &Stack,
    quantity: &Quantity,
    light: &Light,
    band_nm: (f64, f64),
    angles_rad: (f64, f64),
) -> Result<Extremes, OpticsError> {
    check_band(band_nm)?;
    let (from, to) = angles_rad;
    let probe = Probe::new(stack, quantity, &Light { angle_rad: from, ..*light })?;
    let far = probe.at_angle(to)?;
    if from > to {
        return Err(OpticsError::Angle { angle_rad: to });
    }
    if from == to {
        return over_band(&probe, band_nm);
    }
    let mut found = vec![over_band(&probe, band_nm)?, over_band(&far, band_nm)?];
    let ends = if band_nm.0 == band_nm.1 { vec![band_nm.0] } else { vec![band_nm.0, band_nm.1] };
    for wavelength_nm in ends {
        found.push(over_angles(&probe, wavelength_nm, angles_rad)?);
    }
    if band_nm.0 < band_nm.1 {
        let angles = angles(&probe, band_nm, angles_rad)?;
        let mut scanned = Vec::with_capacity(angles.len());
        for &angle_rad in &angles {
            scanned.push(over_band(&probe.at_angle(angle_rad)?, band_nm)?);
        }
        let least = |band: &Extremes| band.min.value;
        let most = |band: &Extremes| -band.max.value;
        found.extend(refined(&probe, band_nm, &angles, &scanned, least)?);
        found.extend(refined(&probe, band_nm, &angles, &scanned, most)?);
        found.extend(scanned);
    }
    // The ends come first, and stay the place of an extreme that lies there but for rounding.
    let mut all = found[0];
    for next in &found {
        if next.min.value < all.min.value - ROUNDING * (1.0 + all.min.value.abs()) {
            all.min = next.min;
        }
        if next.max.value > all.max.value + ROUNDING * (1.0 + all.max.value.abs()) {
            all.max = next.max;
        }
    }
    Ok(all)
}

/// The extremes along a range of angles at one wavelength.
fn over_angles(
    probe: &Probe<'_>,
    wavelength_nm: f64,
    angles_rad: (f64, f64),
) -> Result<Extremes, OpticsError> {
    let mesh = Mesh::build(probe, probe.cone.is_some(), Along::Angle { wavelength_nm }, angles_rad)?;
    let mut function = |angles_rad: &[f64]| probe.over_angles(wavelength_nm, angles_rad);
    let start = match mesh.values() {
        Some(values) => values.to_vec(),
        None => valued(&mesh.points().collect::<Vec<f64>>(), &mut function)?,
    };
    let (min, max) = along(start, &mut function)?;
    let extreme = |point: Point| Extreme { value: point.y, wavelength_nm, angle_rad: point.x };
    Ok(Extremes { min: extreme(min), max: extreme(max) })
}

/// Angles at which the band is searched: the mesh that the shortest wavelength's fringes ask for, thinned to
/// the spacing of its plain steps, because resonances are followed by the search along the band.
fn angles(probe: &Probe<'_>, band_nm: (f64, f64), angles_rad: (f64, f64)) -> Result<Vec<f64>, OpticsError> {
    let along = Along::Angle { wavelength_nm: band_nm.0 };
    let mesh = Mesh::base_points(probe, along, angles_rad)?;
    Ok(mesh)
}

/// Searches in angle about the best of the scanned ones, the whole band being searched at each step.
fn refined(
    probe: &Probe<'_>,
    band_nm: (f64, f64),
    angles: &[f64],
    scanned: &[Extremes],
    objective: impl Fn(&Extremes) -> f64,
) -> Result<Vec<Extremes>, OpticsError> {
    let values: Vec<f64> = scanned.iter().map(&objective).collect();
    let last = values.len() - 1;
    let mut dips: Vec<usize> = (0..values.len())
        .filter(|&at| values[at.saturating_sub(1)] >= values[at] && values[(at + 1).min(last)] >= values[at])
        .collect();
    dips.sort_by(|&a, &b| values[a].total_cmp(&values[b]));
    let mut found = Vec::new();
    for &at in dips.iter().take(SEARCHES) {
        let (lo, hi) = (angles[at.saturating_sub(1)], angles[(at + 1).min(last)]);
        let start = Point { x: angles[at], y: values[at] };
        minimum(lo, start, hi, 1e-5 * (hi - lo), |angle_rad| {
            let band = over_band(&probe.at_angle(angle_rad)?, band_nm)?;
            found.push(band);
            Ok(objective(&band))
        })?;
    }
    Ok(found)
}
