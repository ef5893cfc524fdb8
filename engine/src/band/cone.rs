//! Beams that fill a cone: the rays that stand for it.
//!
//! A beam of uniform radiance about an axis at the angle α fills the cone of half-angle β. The power that a
//! ray brings to the surface goes with cos θ dΩ, θ being its own angle of incidence. A stack looks the same
//! from all sides, so that only θ and the polarisation count: the directions of equal θ form an arc about the
//! surface's normal, and one integral over θ remains. Its ends are square-root-like and are taken off by
//! θ = middle + half-width · sin t.
//!
//! A polarised beam is turned from the axis to each ray by the least rotation, as a focusing lens turns it
//! (B. Richards and E. Wolf, Proc. R. Soc. A 253, 358 (1959)), and then resolved into s and p of the ray's
//! own plane of incidence. About a normal axis this gives the mean of s and p.

use std::f64::consts::{FRAC_PI_2, PI};

use crate::error::OpticsError;
use crate::quadrature::gauss_legendre;
use crate::quantity::Light;
use crate::response::Polarisation;

/// A ray: its angle of incidence and its share of the beam's power in s and in p.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Ray {
    pub(crate) angle_rad: f64,
    pub(crate) shares: [f64; 2],
}

/// A cone about an axis.
#[derive(Clone, Debug)]
pub(crate) struct Cone {
    light: Light,
    arc: Vec<(f64, f64)>,
}

/// One of the two stretches of θ: where the whole circle lies in the cone, and where an arc of it does.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Stretch {
    Circle,
    Arc,
}

impl Cone {
    /// `None` for a parallel beam.
    ///
    /// # Errors
    /// A cone that reaches 90°.
    pub(crate) fn new(light: &Light) -> Result<Option<Cone>, OpticsError> {
        let (angle_rad, half_angle_rad) = (light.angle_rad, light.cone_half_angle_rad);
        if !(0.0..FRAC_PI_2).contains(&angle_rad) {
            return Err(OpticsError::Angle { angle_rad });
        }
        if !(half_angle_rad >= 0.0 && angle_rad + half_angle_rad < FRAC_PI_2) {
            return Err(OpticsError::Cone { angle_rad, half_angle_rad });
        }
        if half_angle_rad == 0.0 {
            return Ok(None);
        }
        Ok(Some(Cone { light: *light, arc: gauss_legendre(24) }))
    }

    /// The stretches that this cone has.
    pub(crate) fn stretches(&self) -> Vec<Stretch> {
        let (axis, half) = (self.light.angle_rad, self.light.cone_half_angle_rad);
        let mut stretches = Vec::new();
        if half > axis {
            stretches.push(Stretch::Circle);
        }
        if axis > 0.0 {
            stretches.push(Stretch::Arc);
        }
        stretches
    }

    /// The least and the greatest angle of incidence.
    pub(crate) fn range_rad(&self) -> (f64, f64) {
        let (axis, half) = (self.light.angle_rad, self.light.cone_half_angle_rad);
        ((axis - half).max(0.0), axis + half)
    }

    /// The ray at a place x from −1 to 1 along a stretch, its shares being densities in x.
    pub(crate) fn ray(&self, stretch: Stretch, x: f64) -> Ray {
        let (axis, half) = (self.light.angle_rad, self.light.cone_half_angle_rad);
        // The power of the whole beam, ∫cos θ dΩ over the cone.
        let whole = PI * axis.cos() * half.sin().powi(2);
        let (angle_rad, density, reach) = match stretch {
            Stretch::Circle => {
                let greatest = (half - axis).sin().powi(2);
                let square = 0.5 * (1.0 + x) * greatest;
                // sin θ cos θ dθ = d(sin²θ)/2.
                (square.sqrt().asin(), 0.25 * greatest, PI)
            }
            Stretch::Arc => {
                let turn = FRAC_PI_2 * x;
                let (middle, width) = (axis.max(half), axis.min(half));
                let angle = middle + width * turn.sin();
                let density = angle.cos() * angle.sin() * width * turn.cos() * FRAC_PI_2;
                // The half-angle form of the spherical triangle's cosine rule, which cancels nothing.
                let (more, less) = (0.5 * (half + angle - axis), 0.5 * (half - angle + axis));
                let square = more.sin() * less.sin() / (axis.sin() * angle.sin());
                (angle, density, 2.0 * square.clamp(0.0, 1.0).sqrt().asin())
            }
        };
        let power = density * 2.0 * reach / whole;
        let s = self.s_fraction(angle_rad, reach);
        Ray { angle_rad, shares: [power * s, power * (1.0 - s)] }
    }

    /// The place along a stretch of an angle of incidence, outside −1 to 1 if the stretch does not hold it.
    pub(crate) fn place(&self, stretch: Stretch, angle_rad: f64) -> f64 {
        let (axis, half) = (self.light.angle_rad, self.light.cone_half_angle_rad);
        match stretch {
            Stretch::Circle => 2.0 * angle_rad.sin().powi(2) / (half - axis).sin().powi(2) - 1.0,
            Stretch::Arc => {
                let off = (angle_rad - axis.max(half)) / axis.min(half);
                if off.abs() < 1.0 { off.asin() / FRAC_PI_2 } else { 2.0_f64.copysign(off) }
            }
        }
    }

    /// The share of s in the light of one θ, over the arc |χ| ≤ reach about the axis' plane.
    fn s_fraction(&self, angle_rad: f64, reach: f64) -> f64 {
        let axis = self.light.angle_rad;
        let field = match self.light.polarisation {
            Polarisation::Mean => return 0.5,
            Polarisation::S => [0.0, 1.0, 0.0],
            Polarisation::P => [axis.cos(), 0.0, -axis.sin()],
        };
        let along = [axis.sin(), 0.0, axis.cos()];
        let dot = |a: &[f64; 3], b: &[f64; 3]| a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
        let at = |chi: f64| {
            let ray = [angle_rad.sin() * chi.cos(), angle_rad.sin() * chi.sin(), angle_rad.cos()];
            let turned = dot(&field, &ray) / (1.0 + dot(&along, &ray));
            let across = [-chi.sin(), chi.cos(), 0.0];
            let both = [along[0] + ray[0], along[1] + ray[1], along[2] + ray[2]];
            (dot(&field, &across) - turned * dot(&both, &across)).powi(2)
        };
        self.arc.iter().map(|&(x, weight)| 0.5 * weight * at(0.5 * reach * (1.0 + x))).sum()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn total(axis: f64, half: f64, polarisation: Polarisation) -> [f64; 2] {
        let light = Light { polarisation, angle_rad: axis, cone_half_angle_rad: half };
        let cone = Cone::new(&light).expect("valid").expect("a cone");
        let rule = gauss_legendre(48);
        let mut sum = [0.0; 2];
        for stretch in cone.stretches() {
            for &(x, weight) in &rule {
                let ray = cone.ray(stretch, x);
                sum[0] += weight * ray.shares[0];
                sum[1] += weight * ray.shares[1];
            }
        }
        sum
    }

    #[test]
    fn the_shares_add_up_to_one() {
        for (axis, half) in [(0.0, 0.2), (0.1, 0.3), (0.3, 0.1), (0.5, 0.5), (1.0, 0.4), (0.3, 1e-3)] {
            for polarisation in [Polarisation::S, Polarisation::P, Polarisation::Mean] {
                let [s, p] = total(axis, half, polarisation);
                assert!((s + p - 1.0).abs() < 1e-10, "{axis} {half} {polarisation:?} {s} {p}");
            }
        }
    }

    #[test]
    fn about_the_normal_a_polarised_cone_is_half_s_and_half_p() {
        for polarisation in [Polarisation::S, Polarisation::P] {
            let [s, _] = total(0.0, 0.6, polarisation);
            assert!((s - 0.5).abs() < 1e-12);
            let [s, _] = total(1e-4, 0.6, polarisation);
            assert!((s - 0.5).abs() < 1e-3);
        }
    }

    #[test]
    fn a_narrow_oblique_cone_keeps_the_axis_polarisation() {
        let [s, p] = total(0.8, 1e-3, Polarisation::S);
        assert!(s > 0.99999 && p < 1e-5);
        let [s, p] = total(0.8, 1e-3, Polarisation::P);
        assert!(p > 0.99999 && s < 1e-5);
    }

    #[test]
    fn a_cone_that_reaches_grazing_incidence_is_refused() {
        let light = Light { polarisation: Polarisation::S, angle_rad: 1.0, cone_half_angle_rad: 0.6 };
        assert!(matches!(Cone::new(&light), Err(OpticsError::Cone { .. })));
    }
}
