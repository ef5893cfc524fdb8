//! A quantity against a curve: masks.

use super::extremes::{Extreme, Extremes, check_band, mesh_values};
use super::least::along;
use super::probe::Probe;
use super::search::Point;
use crate::error::OpticsError;
use crate::quantity::{Light, Quantity};
use crate::stack::Stack;

/// The least and the greatest difference of a quantity from a curve over a band of vacuum wavelengths in nm, where both
/// are known: the curve's rows are (wavelength in nm, value), ascending, joined by straight lines. `None` where the
/// curve has nothing in the band.
///
/// # Errors
/// As [`extremes`](super::extremes).
pub fn extremes_against(
    stack: &Stack,
    quantity: &Quantity,
    light: &Light,
    band_nm: (f64, f64),
    curve: &[(f64, f64)],
) -> Result<Option<Extremes>, OpticsError> {
    check_band(band_nm)?;
    let probe = Probe::new(stack, quantity, light)?;
    let angle_rad = light.angle_rad;
    let mut all: Option<Extremes> = None;
    for rows in curve.windows(2) {
        let ((x0, y0), (x1, y1)) = (rows[0], rows[1]);
        let piece = (x0.max(band_nm.0), x1.min(band_nm.1));
        if piece.0 > piece.1 {
            continue;
        }
        let line = |x: f64| y0 + (y1 - y0) * ((x - x0) / (x1 - x0)).clamp(0.0, 1.0);
        let off = |point: Point| Point { y: point.y - line(point.x), ..point };
        let start = mesh_values(&probe, piece)?.into_iter().map(off).collect();
        let (min, max) = along(start, &mut |xs| {
            let values = probe.values(xs)?;
            Ok(xs.iter().zip(values).map(|(x, value)| value - line(*x)).collect())
        })?;
        let extreme = |x: f64, value: f64| Extreme { value, wavelength_nm: x, angle_rad };
        let (min, max) = (extreme(min.x, min.y), extreme(max.x, max.y));
        all = Some(match all {
            None => Extremes { min, max },
            Some(all) => Extremes {
                min: if min.value < all.min.value { min } else { all.min },
                max: if max.value > all.max.value { max } else { all.max },
            },
        });
    }
    Ok(all)
}
