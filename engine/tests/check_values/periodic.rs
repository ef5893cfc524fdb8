//! Periodic stacks and cavities. Born and Wolf, 1.6.5 and 7.6; P. Yeh, *Optical Waves in Layered Media* (1988).

use overcoat_engine::{Polarisation, Stack};

use super::{coated, normal, same};

const DESIGN: f64 = 550.0;
const HIGH: f64 = 2.35;
const LOW: f64 = 1.38;

/// Quarter-waves at the design wavelength: 'H', 'L', and any more from the light's side.
fn stack(incident: f64, films: &str, absorbing: (f64, f64)) -> Stack {
    let film = |letter: char| match letter {
        'H' => (HIGH, absorbing.0, DESIGN / 4.0 / HIGH),
        _ => (LOW, absorbing.1, DESIGN / 4.0 / LOW),
    };
    let films: Vec<(f64, f64, f64)> = films.chars().map(film).collect();
    coated(incident, &films, (1.5168, 0.0))
}

#[test]
fn reflector_that_ends_in_high() {
    // (HL)^p H: Y = (nH/nL)^2p nH²/nₛ, R = ((1 − Y)/(1 + Y))².
    for (pairs, reflectance, rest) in [
        (1, 0.683_864_300_677_020_4, 0.316_135_699_322_979_6),
        (4, 0.984_583_872_611_254_1, 0.015_416_127_388_745_88),
        (8, 0.999_780_323_061_887_0, 0.000_219_676_938_112_973_2),
    ] {
        let response = normal(&stack(1.0, &("HL".repeat(pairs) + "H"), (0.0, 0.0)), DESIGN);
        same("R", response.reflectance, reflectance);
        // T is a product of its own, and keeps its digits however small.
        super::near("T", response.transmittance, rest, 1e-14);
    }
}

#[test]
fn reflector_that_ends_in_low() {
    for (pairs, reflectance) in [(4, 0.963_393_263_117_504_8), (8, 0.999_472_774_085_113_6)] {
        same("R", normal(&stack(1.0, &"HL".repeat(pairs), (0.0, 0.0)), DESIGN).reflectance, reflectance);
    }
}

#[test]
fn ten_periods() {
    // By Chebyshev polynomials of the pair's matrix, F. Abelès, Ann. Phys. (Paris) 5, 596 (1950); g = λ₀/λ.
    let periods = stack(1.0, &"HL".repeat(10), (0.0, 0.0));
    for (g, reflectance) in
        [(0.7, 0.373_970_588_157_175_1), (0.85, 0.994_679_500_621_982_8), (1.3, 0.373_970_588_157_175_1)]
    {
        same("R", normal(&periods, DESIGN / g).reflectance, reflectance);
    }
}

#[test]
fn all_dielectric_cavity() {
    // H L H 2L H L H between glasses: every film pairs off into half-waves, T = 1; other wavelengths: matrix.
    let cavity = stack(1.5168, "HLHLLHLH", (0.0, 0.0));
    for (wavelength, transmittance) in
        [(550.0, 1.0), (560.0, 0.851_582_088_387_640_1), (500.0, 0.196_461_515_203_416_0)]
    {
        same("T", normal(&cavity, wavelength).transmittance, transmittance);
    }
}

#[test]
fn absorption_of_a_thick_reflector() {
    // (HL)^25 H, matrix. To first order A = 2π n₀ (kH + kL)/(nH² − nL²) = 1.9103e-4: G. Koppelmann, Ann. Phys.
    // 460 (5), 388 (1960).
    let mirror = stack(1.0, &("HL".repeat(25) + "H"), (1e-4, 1e-5));
    same("A", normal(&mirror, DESIGN).absorptance, 0.000_191_007_535_770_578_8);
    let shares = mirror.absorption(DESIGN, 0.0, Polarisation::Mean).expect("shares");
    same("A of the films", shares.films[0].iter().sum(), 0.000_191_007_535_770_578_8);
}

#[test]
fn fabry_perot_with_absorbing_mirrors_peaks_below_one() {
    // Airy: peak T = (T₁/(1 − R₁))² for two equal mirrors, T₁ and R₁ of one mirror alone from inside the
    // spacer. The spacer's thickness is that of the peak, searched here.
    let silver = (0.06, 3.6, 40.0);
    let glass = 1.5168;
    let mirror = normal(&coated(glass, &[silver], (glass, 0.0)), DESIGN);
    let peak = (mirror.transmittance / (1.0 - mirror.reflectance)).powi(2);
    let at =
        |spacer: f64| normal(&coated(glass, &[silver, (glass, 0.0, spacer), silver], (glass, 0.0)), DESIGN);
    let (mut lo, mut hi) = (60.0, 200.0);
    for _ in 0..200 {
        let (a, b) = (lo + 0.382 * (hi - lo), lo + 0.618 * (hi - lo));
        if at(a).transmittance > at(b).transmittance { hi = b } else { lo = a }
    }
    same("peak T", at(lo).transmittance, peak);
}
