//! Thick plates: powers add. G. G. Stokes, Proc. R. Soc. London 11, 545 (1862).

use overcoat_engine::{Body, Stack};

use super::{index, near, normal, plates, same};

#[test]
fn lossless_plate() {
    // R = 2R₁/(1 + R₁), T = 2n/(n² + 1).
    let response = normal(&plates(1, (1.5168, 0.0), 1e6), 550.0);
    same("R", response.reflectance, 0.080_917_283_331_097_03);
    same("T", response.transmittance, 0.919_082_716_668_903_0);
}

#[test]
fn absorbing_plate() {
    // T = (1 − R)² e/(1 − R² e²), R_tot = R (1 + e T), e = exp(−αd), αd = 0.5 (J. I. Pankove, *Optical
    // Processes in Semiconductors* (1971), chapter 4). So thick a plate that its k does not change R.
    let thickness = 1e13;
    let k = 0.5 / (4.0 * std::f64::consts::PI * thickness) * 550.0;
    let response = normal(&plates(1, (1.5168, k), thickness), 550.0);
    same("T", response.transmittance, 0.556_824_963_303_646_9);
    same("R", response.reflectance, 0.056_404_859_870_174_65);
    same("A", response.absorptance, 0.386_770_176_826_178_5);
}

#[test]
fn pile_of_plates() {
    // T = (1 − R)/(1 + (2m − 1) R).
    for (count, transmittance) in
        [(1, 0.919_082_716_668_903_0), (5, 0.694_344_752_423_614_8), (10, 0.531_797_925_763_702_2)]
    {
        same("T", normal(&plates(count, (1.5168, 0.0), 1e6), 550.0).transmittance, transmittance);
    }
}

#[test]
fn silicon_wafer_near_its_band_edge() {
    // n and k of C. Schinke et al., AIP Adv. 5, 067168 (2015), at 1100 nm; 180 µm, both faces polished. The
    // formula takes |r|² at both faces and exp(−αd) between.
    let response = normal(&plates(1, (3.545, 3.0217e-5), 180e3), 1100.0);
    near("T", response.transmittance, 0.484_928_555_662_177_1, 1e-9);
    near("R", response.reflectance, 0.456_440_236_556_528_3, 1e-9);
    near("A", response.absorptance, 0.058_631_207_781_294_59, 1e-9);
}

#[test]
fn coherent_film_on_an_incoherent_plate() {
    // R. Swanepoel, J. Phys. E 16, 1214 (1983): the envelopes of a film n = 2.3 on a plate s = 1.5168.
    // T_M = 2s/(s² + 1), T_m = 4n²s/(n⁴ + n²(s² + 1) + s²).
    let (air, glass, film) = (index(1.0, 0.0), index(1.5168, 0.0), index(2.3, 0.0));
    let plate = |thickness_nm: f64| Stack {
        facets_rad: None,
        incident: air.clone(),
        coatings: vec![vec![overcoat_engine::Film::new(film.clone(), thickness_nm)], vec![]],
        bodies: vec![Body { index: glass.clone(), thickness_nm: 1e6 }],
        exit: air.clone(),
    };
    let quarter = 600.0 / 4.0 / 2.3;
    for stack in [plate(2.0 * quarter), plate(2.0 * quarter).reversed().expect("no texture")] {
        same("T_M", normal(&stack, 600.0).transmittance, 0.919_082_716_668_903_0);
    }
    for stack in [plate(quarter), plate(quarter).reversed().expect("no texture")] {
        same("T_m", normal(&stack, 600.0).transmittance, 0.672_221_697_908_487_0);
    }
}
