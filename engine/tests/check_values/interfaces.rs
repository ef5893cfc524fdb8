//! Single interfaces. Born and Wolf, *Principles of Optics*, 7th ed. (1999), 1.5; optical constants of metals
//! as named beside them.

use overcoat_engine::Polarisation::{Mean, P, S};

use super::{at, coated, normal, same};

#[test]
fn bare_crown_glass() {
    // R = ((n₀ − n)/(n₀ + n))².
    let response = normal(&coated(1.0, &[], (1.5168, 0.0)), 550.0);
    same("R", response.reflectance, 0.042_164_562_594_545_83);
    same("T", response.transmittance, 0.957_835_437_405_454_2);
    same("A", response.absorptance, 0.0);
}

#[test]
fn fresnel_at_45_and_60_degrees() {
    let glass = coated(1.0, &[], (1.5, 0.0));
    same("Rs(45)", at(&glass, 550.0, 45.0, S).reflectance, 0.092_013_363_045_524_40);
    same("Rp(45)", at(&glass, 550.0, 45.0, P).reflectance, 0.008_466_458_978_947_476);
    same("Rs(60)", at(&glass, 550.0, 60.0, S).reflectance, 0.176_571_488_082_840_5);
    same("Rp(60)", at(&glass, 550.0, 60.0, P).reflectance, 0.001_801_937_521_585_036);
    same("R(60)", at(&glass, 550.0, 60.0, Mean).reflectance, 0.089_186_712_802_212_78);
    same("Ts(60)", at(&glass, 550.0, 60.0, S).transmittance, 0.823_428_511_917_159_5);
    same("Tp(60)", at(&glass, 550.0, 60.0, P).transmittance, 0.998_198_062_478_415_0);
}

#[test]
fn brewster_angle() {
    // θ = atan n, and there Rp = 0.
    let glass = coated(1.0, &[], (1.5168, 0.0));
    let degrees = 56.603_826_176_326_39;
    same("Rp", at(&glass, 550.0, degrees, P).reflectance, 0.0);
    same("Rs", at(&glass, 550.0, degrees, S).reflectance, 0.155_286_959_920_509_0);
}

#[test]
fn total_reflection_beyond_the_critical_angle() {
    // θc = asin(1/n).
    let out_of_glass = coated(1.5168, &[], (1.0, 0.0));
    for degrees in [41.2452, 45.0, 80.0, 89.999] {
        for polarisation in [S, P] {
            let response = at(&out_of_glass, 550.0, degrees, polarisation);
            same("R", response.reflectance, 1.0);
            assert_eq!(response.transmittance, 0.0);
        }
    }
    for polarisation in [S, P] {
        assert!(at(&out_of_glass, 550.0, 41.2451, polarisation).transmittance > 1e-3);
        // Exactly there: no NaN, and R = 1 as far as the angle's own rounding lets it be.
        let response = at(&out_of_glass, 550.0, 41.245_190_369_612_65, polarisation);
        super::near("R at the critical angle", response.reflectance, 1.0, 1e-6);
    }
}

#[test]
fn metal_mirrors() {
    // Rows of measured tables: P. B. Johnson and R. W. Christy, Phys. Rev. B 6, 4370 (1972) and 9, 5056 (1974);
    // A. D. Rakić, Appl. Opt. 34, 4755 (1995). Rp(45°) = Rs(45°)² also for absorbing media.
    let mirrors = [
        (
            "Ag",
            548.6,
            (0.06, 3.586),
            0.982_836_296_313_036_2,
            0.988_061_043_538_297_4,
            0.976_264_625_757_989_3,
        ),
        (
            "Au",
            659.5,
            (0.14, 3.697),
            0.962_585_374_663_042_9,
            0.973_862_485_700_825_8,
            0.948_408_141_055_391_1,
        ),
        (
            "Cr",
            549.0,
            (3.18, 3.33),
            0.554_642_120_631_764_0,
            0.660_396_430_834_120_1,
            0.436_123_445_858_444_8,
        ),
        (
            "Al",
            563.57,
            (1.0728, 6.7839),
            0.914_718_050_450_976_6,
            0.939_215_749_520_490_9,
            0.882_126_224_147_337_4,
        ),
    ];
    for (name, wavelength, constants, at_normal, s, p) in mirrors {
        let mirror = coated(1.0, &[], constants);
        same(name, normal(&mirror, wavelength).reflectance, at_normal);
        same(name, at(&mirror, wavelength, 45.0, S).reflectance, s);
        same(name, at(&mirror, wavelength, 45.0, P).reflectance, p);
    }
}

#[test]
fn bare_silicon() {
    // M. A. Green, Sol. Energy Mater. Sol. Cells 92, 1305 (2008): its row of 600 nm.
    let wafer = coated(1.0, &[], (3.94, 1.9934e-2));
    same("R", normal(&wafer, 600.0).reflectance, 0.354_204_159_068_680_0);
}
