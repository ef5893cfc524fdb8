//! One, two and three films. Born and Wolf, 1.6.4 and 14.4; O. S. Heavens, *Optical Properties of Thin Solid
//! Films* (1955).

use overcoat_engine::Polarisation::{P, S};

use super::{at, coated, near, normal, same};

const DESIGN: f64 = 550.0;

/// A quarter-wave at the design wavelength.
fn quarter(n: f64) -> (f64, f64, f64) {
    (n, 0.0, DESIGN / 4.0 / n)
}

#[test]
fn one_quarter_wave() {
    // R = ((n₀ nₛ − n₁²)/(n₀ nₛ + n₁²))².
    for (film, glass, reflectance) in [
        (1.38, 1.5168, 0.012_835_435_541_025_62),
        (1.38, 1.52, 0.012_600_790_214_630_31),
        (2.35, 1.5168, 0.323_815_693_173_792_4),
        (1.231_584_345_467_252, 1.5168, 0.0),
        (1.870_828_693_386_971, 3.5, 0.0),
    ] {
        same("R", normal(&coated(1.0, &[quarter(film)], (glass, 0.0)), DESIGN).reflectance, reflectance);
    }
}

#[test]
fn half_wave_is_absent() {
    let half = (2.35, 0.0, DESIGN / 2.0 / 2.35);
    same("R", normal(&coated(1.0, &[half], (1.5168, 0.0)), DESIGN).reflectance, 0.042_164_562_594_545_83);
}

#[test]
fn quarter_wave_off_its_wavelength_and_angle() {
    // R = (r₁² + r₂² + 2r₁r₂ cos 2δ)/(1 + r₁²r₂² + 2r₁r₂ cos 2δ).
    let stack = coated(1.0, &[quarter(1.38)], (1.5168, 0.0));
    same("R(400)", normal(&stack, 400.0).reflectance, 0.022_077_955_760_672_08);
    same("R(700)", normal(&stack, 700.0).reflectance, 0.016_121_769_333_201_42);
    same("Rs(45)", at(&stack, DESIGN, 45.0, S).reflectance, 0.040_479_142_934_794_83);
    same("Rp(45)", at(&stack, DESIGN, 45.0, P).reflectance, 0.001_393_631_398_537_575);
}

#[test]
fn weakly_absorbing_film() {
    // r = (r₁ + r₂ e^{2iδ})/(1 + r₁r₂ e^{2iδ}), t = t₁t₂ e^{iδ}/(…), T = nₛ|t|².
    let response = normal(&coated(1.0, &[(2.3, 0.01, 100.0)], (1.5168, 0.0)), 500.0);
    same("R", response.reflectance, 0.065_354_673_783_328_45);
    same("T", response.transmittance, 0.910_285_111_993_542_9);
    same("A", response.absorptance, 0.024_360_214_223_128_65);
}

#[test]
fn thin_silver_like_film() {
    for (thickness, r, t, a) in [
        (10.0, 0.341_952_310_130_776_3, 0.635_932_609_063_746_2, 0.022_115_080_805_477_56),
        (20.0, 0.684_233_968_410_057_1, 0.291_045_565_878_531_8, 0.024_720_465_711_411_07),
        (50.0, 0.957_566_196_750_492_5, 0.023_784_749_452_033_72, 0.018_649_053_797_473_74),
    ] {
        let stack = coated(1.0, &[(0.06, 3.6, thickness)], (1.5168, 0.0));
        let response = normal(&stack, DESIGN);
        same("R", response.reflectance, r);
        same("T", response.transmittance, t);
        same("A", response.absorptance, a);
        let back = normal(&stack.reversed().expect("no texture"), DESIGN);
        same("T from behind", back.transmittance, t);
        if thickness == 10.0 {
            same("R from behind", back.reflectance, 0.330_708_701_209_164_2);
        }
    }
}

#[test]
fn nitride_on_silicon() {
    let response = normal(&coated(1.0, &[(2.05, 0.0, 75.0)], (3.87, 0.016)), 633.0);
    same("R", response.reflectance, 0.002_610_039_868_553_391);
    same("T into the silicon", response.transmittance, 0.997_389_960_131_446_6);
}

#[test]
fn thin_conducting_sheet() {
    // W. Woltersdorff, Z. Phys. 91, 230 (1934): R = (y/(2 + y))², T = (2/(2 + y))², A = 4y/(2 + y)². A film so
    // thin and so conducting that ε = iy/(k₀d): N = √ε.
    let (wavelength, thickness) = (1e9, 1e-3);
    for (y, r, t, a) in
        [(2.0, 0.25, 0.25, 0.5), (0.5, 0.04, 0.64, 0.32), (10.0, 100.0 / 144.0, 1.0 / 36.0, 40.0 / 144.0)]
    {
        let size =
            (y * wavelength / (std::f64::consts::TAU * thickness)).sqrt() * std::f64::consts::FRAC_1_SQRT_2;
        let response = normal(&coated(1.0, &[(size, size, thickness)], (1.0, 0.0)), wavelength);
        near("R", response.reflectance, r, 1e-10);
        near("T", response.transmittance, t, 1e-10);
        near("A", response.absorptance, a, 1e-10);
    }
}

#[test]
fn two_quarter_waves() {
    // R = ((n₀n₂² − nₛn₁²)/(n₀n₂² + nₛn₁²))².
    let ideal = coated(1.0, &[quarter(1.38), quarter(1.699_586_396_744_808)], (1.5168, 0.0));
    same("R", normal(&ideal, DESIGN).reflectance, 0.0);
    let real = coated(1.0, &[quarter(1.38), quarter(1.70)], (1.52, 0.0));
    same("R", normal(&real, DESIGN).reflectance, 6.567_730_534_802_315e-7);
}

#[test]
fn v_coat_of_two_given_materials() {
    // J. F. Catalan, J. Opt. Soc. Am. 52, 437 (1962); A. F. Turner, J. Phys. Radium 11, 444 (1950).
    for (outer, inner) in
        [(70.195_206_348_409_00, 107.024_578_999_460_3), (129.080_155_970_431_6, 12.540_638_391_844_02)]
    {
        let stack = coated(1.0, &[(1.38, 0.0, outer), (2.3, 0.0, inner)], (1.5168, 0.0));
        same("R", normal(&stack, DESIGN).reflectance, 0.0);
    }
}

#[test]
fn quarter_half_quarter() {
    // The design of J. T. Cox, G. Hass and A. Thelen, J. Opt. Soc. Am. 52, 965 (1962); matrix.
    let half = (2.15, 0.0, DESIGN / 2.0 / 2.15);
    let stack = coated(1.0, &[quarter(1.38), half, quarter(1.62)], (1.52, 0.0));
    for (wavelength, reflectance) in [
        (550.0, 0.002_398_384_958_521_873),
        (420.0, 0.024_847_901_455_721_84),
        (480.0, 8.655_797_818_198_302e-5),
        (620.0, 0.000_472_045_355_846_552_1),
        (680.0, 0.001_199_605_673_776_785),
    ] {
        same("R", normal(&stack, wavelength).reflectance, reflectance);
    }
    same("Rs(30)", at(&stack, DESIGN, 30.0, S).reflectance, 0.005_215_082_148_095_760);
    same("Rp(30)", at(&stack, DESIGN, 30.0, P).reflectance, 0.000_685_682_198_014_717_0);
}

#[test]
fn three_quarter_waves() {
    // Y = n₁²n₃²/(n₂²nₛ), R = ((n₀ − Y)/(n₀ + Y))².
    let stack = coated(1.0, &[quarter(1.38), quarter(2.0), quarter(1.7)], (1.5168, 0.0));
    same("R", normal(&stack, DESIGN).reflectance, 0.002_371_524_939_355_852);
}
