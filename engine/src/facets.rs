//! Upright pyramids: which facets a ray meets, at which angles, and how much of the light comes that far.
//!
//! Light falls along the pyramids' axes. Every facet faces one of the opposite facets across a straight valley, so that a ray
//! stays in the plane through the two facets' normals, and the valley is a groove that looks alike at every scale: a ray that
//! starts at height 1 meets the k-th facet at height κₖ, whatever its height in the valley. It does so only where κₖ times
//! its own height is still below the edge of the triangular facet, which is a share 1/κₖ of the light.
//!
//! The method is that of P. Campbell, M. A. Green, J. Appl. Phys. 62, 243–249 (1987): each bounce by the coating's reflectance at
//! that facet's own angle of incidence, powers multiplied. It ends where facets are not large against the wavelength, where
//! pyramids are not regular (random ones pass some rays sideways), and away from normal incidence, where the answer depends
//! on how the rows lie to the beam.

use crate::coating::Powers;
use crate::real::Real;

/// A facet that light meets.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Bounce {
    /// The angle of incidence on the facet, rad.
    pub(crate) angle_rad: f64,
    /// The share of the rays that come this far.
    pub(crate) share: f64,
}

/// More bounces than this leave nothing that could be told from the light that is lost already.
const MOST: usize = 64;

/// The facets that light along the axes of upright pyramids meets, in turn. The facets' angle is in rad, between 0 and π/2.
pub(crate) fn bounces(facets_rad: f64) -> Vec<Bounce> {
    let (sine, cosine) = facets_rad.sin_cos();
    let slope = sine / cosine;
    // The ray in the frame of the facet that it meets, which rises to the left: x is the distance from the valley's bottom,
    // the facet's normal (sin, cos).
    let (mut across, mut up) = (0.0_f64, -1.0_f64);
    let mut height = 1.0_f64;
    let mut highest = 1.0_f64;
    let mut met = Vec::new();
    while met.len() < MOST {
        let against = -(across * sine + up * cosine);
        met.push(Bounce { angle_rad: against.clamp(0.0, 1.0).acos(), share: 1.0 / highest });
        across += 2.0 * against * sine;
        up += 2.0 * against * cosine;
        // The facet across rises with the slope to the right: the ray comes to it if it runs to the right and rises less.
        if across <= 0.0 || up >= slope * across * (1.0 - 1e-12) {
            break;
        }
        let run = 2.0 * height * slope / (slope * across - up);
        height = run * across - height;
        highest = highest.max(height);
        across = -across;
    }
    met
}

/// What facets do together that light meets in turn, each with the share of the rays that come as far: at each, what arrives
/// is what the ones before reflect.
pub(crate) fn together<F: Real>(mut met: impl Iterator<Item = (Powers<F>, f64)>) -> Powers<F> {
    let Some((mut whole, mut share)) = met.next() else { return Powers::dark(0) };
    // What the facets so far return, of the rays that come as far as the last of them.
    let mut returned = whole.reflectance;
    whole.reflectance = F::of(0.0);
    for (facet, next) in met {
        whole.reflectance = whole.reflectance + returned.scaled(share - next);
        share = next;
        let arriving = returned.scaled(share);
        whole.transmittance = whole.transmittance + arriving * facet.transmittance;
        for (sum, film) in whole.films.iter_mut().zip(facet.films) {
            *sum = *sum + arriving * film;
        }
        returned = returned * facet.reflectance;
    }
    whole.reflectance = whole.reflectance + returned.scaled(share);
    whole.ln_transmittance = whole.transmittance.ln();
    whole
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn anisotropically_etched_silicon_sends_a_ninth_of_the_light_to_a_third_facet() {
        // Facets of {111} on {100}: tan = √2. By hand the angles are β, 180° − 3β and 360° − 5β.
        let met = bounces(2.0_f64.sqrt().atan());
        let degrees: Vec<f64> = met.iter().map(|bounce| bounce.angle_rad.to_degrees()).collect();
        assert_eq!(met.len(), 3);
        assert!((degrees[0] - 54.7356).abs() < 1e-3 && (degrees[1] - 15.7932).abs() < 1e-3);
        assert!((degrees[2] - 86.3220).abs() < 1e-3);
        assert!((met[1].share - 1.0).abs() < 1e-12 && (met[2].share - 1.0 / 9.0).abs() < 1e-12);
    }

    #[test]
    fn shallow_facets_are_met_once_and_facets_of_45_degrees_twice() {
        assert_eq!(bounces(25_f64.to_radians()).len(), 1);
        let half = bounces(40_f64.to_radians());
        assert!(half.len() == 2 && half[1].share < 1.0);
        let met = bounces(45_f64.to_radians());
        assert!(met.len() == 2 && (met[1].share - 1.0).abs() < 1e-12);
        assert!((met[1].angle_rad.to_degrees() - 45.0).abs() < 1e-9);
    }

    #[test]
    fn at_60_degrees_all_light_turns_back_on_the_second_facet() {
        let met = bounces(60_f64.to_radians());
        assert!(met.len() == 3 && met[1].angle_rad < 1e-6);
        assert!((met[2].angle_rad.to_degrees() - 60.0).abs() < 1e-6 && (met[2].share - 1.0).abs() < 1e-9);
    }
}
