//! Means over a band and over all directions: what a surface radiates into the half-space before it.

use super::mean::{Mean, mean};
use crate::error::OpticsError;
use crate::quadrature::gauss_legendre;
use crate::quantity::{Light, Quantity};
use crate::response::Polarisation;
use crate::stack::Stack;
use crate::weight::SpectralWeight;

/// The numbers of directions tried.
const NODES: [usize; 5] = [8, 16, 32, 64, 128];
/// To what the result must have settled.
const SETTLED: f64 = 1e-7;

/// ∫ q(θ) 2 sin θ cos θ dθ over the hemisphere, q being the mean over the bands under the weight, unpolarised.
///
/// With cos θ = t² this is ∫₀¹ q 4t³ dt, by Gauss–Legendre nodes doubled until the result settles to 1e-7. A metal's
/// p-polarised part rises and falls within cos θ of about 1/|N|, so the nodes crowd towards grazing light. Source: the
/// definition of hemispherical from directional emissivity, M. F. Modest, S. Mazumder, Radiative Heat Transfer, 4th ed.
/// (2021), section 3.2 (from memory).
///
/// # Errors
/// As [`mean`]; [`OpticsError::NotConverged`] where 128 directions are not enough.
pub fn hemispherical_mean(
    stack: &Stack,
    quantity: &Quantity,
    bands_nm: &[(f64, f64)],
    weight: &SpectralWeight,
) -> Result<Mean, OpticsError> {
    let mut before: Option<f64> = None;
    let mut error = f64::INFINITY;
    for count in NODES {
        let mut value = 0.0;
        for (x, share) in gauss_legendre(count) {
            let t = 0.5 * (1.0 + x);
            let light = Light::parallel((t * t).acos(), Polarisation::Mean);
            value += 2.0 * t.powi(3) * share * mean(stack, quantity, &light, bands_nm, weight)?.value;
        }
        error = before.map_or(f64::INFINITY, |before| (value - before).abs());
        if error <= SETTLED {
            return Ok(Mean { value, error });
        }
        before = Some(value);
    }
    let wavelength_nm = bands_nm.first().map_or(f64::NAN, |band| band.0);
    Err(OpticsError::NotConverged { estimate: before.unwrap_or(f64::NAN), error, wavelength_nm })
}
