//! Oblique incidence and tunnelling.

use overcoat_engine::Polarisation::{P, S};

use super::{at, coated, same};

#[test]
fn frustrated_total_reflection() {
    // glass | air gap | glass at 45°: 1/T = 1 + a sinh² y. S. Zhu et al., Am. J. Phys. 54, 601 (1986).
    for (share, s, p) in [
        (0.1, 0.871_046_780_012_107_2, 0.941_075_282_722_196_5),
        (0.25, 0.493_813_544_747_054_3, 0.697_573_460_308_816_7),
        (0.5, 0.146_652_678_849_254_6, 0.288_930_690_859_639_8),
        (1.0, 0.012_554_073_990_353_77, 0.029_182_763_191_058_49),
    ] {
        let gap = coated(1.5168, &[(1.0, 0.0, share * 550.0)], (1.5168, 0.0));
        same("Ts", at(&gap, 550.0, 45.0, S).transmittance, s);
        same("Tp", at(&gap, 550.0, 45.0, P).transmittance, p);
    }
}

#[test]
fn polarising_cube() {
    // S. M. MacNeille, US patent 2 403 731 (1946); M. Banning, J. Opt. Soc. Am. 37, 792 (1947). In a glass where
    // light at 45° meets H and L at Brewster's angle, (HL)^5 a quarter-wave each at their own angles.
    let (glass, high, low) = (1.682_899_410_586_853, 2.35, 1.38);
    let film = |n: f64, degrees: f64| (n, 0.0, 550.0 / 4.0 / n / degrees.to_radians().cos());
    let pair = [film(high, 30.422_906_207_693_52), film(low, 59.577_093_792_306_48)];
    let stack = coated(glass, &pair.repeat(5), (glass, 0.0));
    same("Tp", at(&stack, 550.0, 45.0, P).transmittance, 1.0);
    same("Ts", at(&stack, 550.0, 45.0, S).transmittance, 9.511_824_278_311_227e-5);
}

#[test]
fn reflector_matched_to_30_degrees() {
    // Tilted admittances in the formula of normal incidence; Born and Wolf, 1.6.3.
    let inside = |n: f64| (1.0 - (0.5 / n) * (0.5 / n)).sqrt();
    let film = |n: f64| (n, 0.0, 550.0 / 4.0 / n / inside(n));
    let mut films = [film(2.35), film(1.38)].repeat(4);
    films.push(film(2.35));
    let stack = coated(1.0, &films, (1.5168, 0.0));
    same("Rs", at(&stack, 550.0, 30.0, S).reflectance, 0.990_920_943_612_443_2);
    same("Rp", at(&stack, 550.0, 30.0, P).reflectance, 0.973_882_114_481_027_1);
}

#[test]
fn surface_plasmon_on_silver() {
    // glass | silver-like film | air, p: the geometry of E. Kretschmann, Z. Phys. 241, 313 (1971).
    let stack = coated(1.5168, &[(0.06, 3.6, 50.0)], (1.0, 0.0));
    for (degrees, reflectance) in [
        (40.0, 0.927_202_629_166_067_5),
        (43.0, 0.879_943_588_555_534_2),
        (43.5, 0.213_470_299_888_809_7),
        (44.0, 0.821_745_367_977_968_3),
        (45.0, 0.922_311_032_132_804_8),
        (50.0, 0.952_858_644_515_259_1),
    ] {
        same("Rp", at(&stack, 550.0, degrees, P).reflectance, reflectance);
    }
}
