//! The colour in which a part is seen: CIELAB under any light for both standard observers, and how far two colours
//! are apart.
//!
//! Sources: CIE 015:2018, Colorimetry; ISO/CIE 11664-1 (observers), -3 (tristimulus values), -4 (CIELAB), -6 (CIEDE2000).

mod difference;
mod observer;

pub use difference::ciede2000;
pub use observer::Observer;

use crate::band::means;
use crate::error::OpticsError;
use crate::quantity::{Light, Quantity};
use crate::stack::Stack;
use crate::weight::SpectralWeight;

/// The wavelengths over which colours and luminous quantities are worked out, nm: those of EN 410, ISO 9050 and of the
/// usual abridged sums of CIE 015; what lies beyond changes a white point by less than 1e-5.
pub const VISIBLE_NM: (f64, f64) = (380.0, 780.0);

/// A colour in CIELAB, relative to a perfect white under the same light.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Lab {
    /// Lightness, 0 to 100.
    pub l: f64,
    /// Green to red.
    pub a: f64,
    /// Blue to yellow.
    pub b: f64,
}

impl Lab {
    /// From tristimulus values, each as a share of the white's: X/Xₙ, Y/Yₙ, Z/Zₙ.
    ///
    /// Source: ISO/CIE 11664-4, equations 3 to 5.
    pub fn from_shares(shares: [f64; 3]) -> Lab {
        let [x, y, z] = shares.map(cube_root);
        Lab { l: 116.0 * y - 16.0, a: 500.0 * (x - y), b: 200.0 * (y - z) }
    }

    /// The tristimulus values as shares of the white's: the inverse of [`Lab::from_shares`].
    pub fn shares(self) -> [f64; 3] {
        let y = (self.l + 16.0) / 116.0;
        [y + self.a / 500.0, y, y - self.b / 200.0].map(|root| {
            if root > 6.0 / 29.0 {
                root.powi(3)
            } else {
                3.0 * (6.0 / 29.0_f64).powi(2) * (root - 4.0 / 29.0)
            }
        })
    }
}

/// The cube root, continued by a straight line near zero.
fn cube_root(share: f64) -> f64 {
    let knee = 6.0 / 29.0_f64;
    if share > knee.powi(3) { share.cbrt() } else { share / (3.0 * knee * knee) + 4.0 / 29.0 }
}

/// The colour of light reflected or transmitted by a stack under an illuminant, for a standard observer.
///
/// The tristimulus integrals ∫ q S x̄ dλ run over [`VISIBLE_NM`] and are worked out to 1e-8 by
/// [`means`], with the tables joined by straight lines, not summed on a grid.
///
/// # Errors
/// As [`means`]: an illuminant that does not reach over the visible, a material without constants there.
pub fn colour(
    stack: &Stack,
    quantity: &Quantity,
    light: &Light,
    illuminant: &SpectralWeight,
    observer: Observer,
) -> Result<Lab, OpticsError> {
    let weights: Vec<SpectralWeight> =
        observer.functions().iter().map(|function| illuminant.times(function)).collect();
    let means = means(stack, quantity, light, &[VISIBLE_NM], &weights)?;
    let share = |at: usize| means.get(at).map_or(0.0, |mean| mean.value);
    Ok(Lab::from_shares([share(0), share(1), share(2)]))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn lightness_of_greys_as_in_cie_015() {
        // L* of Y/Yₙ = 0.18, 0.5 and 0.008 (below the knee) from the closed formula of ISO/CIE 11664-4.
        for (share, expected) in
            [(0.18, 49.496_107_610_119_58), (0.5, 76.069_261_014_155_57), (0.008, 7.226_370_370_370_37)]
        {
            let lab = Lab::from_shares([share; 3]);
            assert!((lab.l - expected).abs() < 1e-12 && lab.a.abs() < 1e-12 && lab.b.abs() < 1e-12);
            assert!((lab.shares()[1] - share).abs() < 1e-14);
        }
    }
}
