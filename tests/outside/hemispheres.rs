//! Means over all directions against closed formulas for smooth half-spaces.
//!
//! Sources: a dielectric's reflectance for diffuse light, J. W. T. Walsh, Dept. Sci. Ind. Res. Illum. Res. Tech. Paper 2,
//! 10 (1926), 0.092 at an index of 1.5; a metal's emittance, R. V. Dunkle, in Symposium on Thermal Radiation of Solids,
//! NASA SP-55, 39 (1965). Both formulas from memory; the second follows from Fresnel's with the ray in the metal taken
//! as normal to the face, which is right to about 1 / (n² + k²).

use overcoat_engine::{Quantity, SpectralWeight, hemispherical_mean};

use crate::data::{Comparison, constant, films};

/// The hemispherical mean over a narrow band of an index that does not change.
fn hemispherical(quantity: &Quantity, index: [f64; 2]) -> f64 {
    let stack = films(constant([1.0, 0.0]), Vec::new(), constant(index));
    let weight = SpectralWeight::blackbody(300.0).expect("a temperature");
    hemispherical_mean(&stack, quantity, &[(9000.0, 9100.0)], &weight).expect("a mean").value
}

#[test]
fn a_dielectric_reflects_diffuse_light_as_walsh_found() {
    let mut comparison = Comparison::default();
    for n in [1.2_f64, 1.5, 2.2, 4.0] {
        let (plus, minus, four) = (n * n + 1.0, n * n - 1.0, n.powi(4) - 1.0);
        let expected = 0.5
            + (n - 1.0) * (3.0 * n + 1.0) / (6.0 * (n + 1.0).powi(2))
            + n * n * minus.powi(2) / plus.powi(3) * ((n - 1.0) / (n + 1.0)).ln()
            - 2.0 * n.powi(3) * (n * n + 2.0 * n - 1.0) / (plus * four)
            + 8.0 * n.powi(4) * (n.powi(4) + 1.0) / (plus * four.powi(2)) * n.ln();
        let found = hemispherical(&Quantity::Reflectance, [n, 0.0]);
        comparison.add(&format!("index {n}"), found, expected, 1e-7);
    }
    assert!((hemispherical(&Quantity::Reflectance, [1.5, 0.0]) - 0.0918).abs() < 5e-5);
    comparison.finish(4);
}

#[test]
fn a_metal_radiates_as_dunkle_found() {
    let mut comparison = Comparison::default();
    for [n, k] in [[8.0_f64, 50.0], [20.0, 20.0], [42.0, 120.0]] {
        let a = n * n + k * k;
        let s =
            8.0 * n * (1.0 - n * ((1.0 + 2.0 * n + a) / a).ln() + (n * n - k * k) / k * (k / (n + a)).atan());
        let p = 8.0 * n / a
            * (1.0 - n / a * (1.0 + 2.0 * n + a).ln() + (n * n - k * k) / (k * a) * (k / (1.0 + n)).atan());
        // Light that enters a half-space counts as transmitted.
        let found = hemispherical(&Quantity::Transmittance, [n, k]);
        comparison.add(&format!("index {n} - {k}i"), found / (0.5 * (s + p)), 1.0, 1.0 / a);
    }
    comparison.finish(3);
}
