//! Edges and masks over whole bands.

#![allow(clippy::unwrap_used, reason = "in a test a panic is the report")]

use overcoat_engine::{
    Film, Index, Light, Quantity, SpectralWeight, Stack, crossings, extremes, extremes_against, value,
};

/// A quarter-wave reflector (HL)^24 H at 550 nm on glass.
fn reflector() -> Stack {
    let index = |n: f64| Index::constant(n, 0.0).unwrap();
    let film = |n: f64| Film::new(index(n), 550.0 / (4.0 * n));
    let mut films = Vec::new();
    for _ in 0..24 {
        films.extend([film(2.35), film(1.38)]);
    }
    films.push(film(2.35));
    Stack {
        facets_rad: None,
        incident: index(1.0),
        coatings: vec![films],
        bodies: vec![],
        exit: index(1.5168),
    }
}

#[test]
fn the_stop_band_is_crossed_near_its_closed_edges() {
    // L. I. Epstein, J. Opt. Soc. Am. 42, 806 (1952): Δg = (2/π) asin((nH − nL)/(nH + nL)), edges λ₀/(1 ± Δg); the half-height
    // edges of 24 pairs lie just outside those of infinitely many.
    let edge = 2.0 / std::f64::consts::PI * ((2.35f64 - 1.38) / (2.35 + 1.38)).asin();
    let found =
        crossings(&reflector(), &Quantity::Transmittance, &Light::normal(), (430.0, 720.0), 0.5).unwrap();
    let (falling, rising) = (550.0 / (1.0 + edge), 550.0 / (1.0 - edge));
    let last_falling = found.iter().rfind(|one| !one.rising && one.wavelength_nm < 550.0).unwrap();
    let first_rising = found.iter().find(|one| one.rising && one.wavelength_nm > 550.0).unwrap();
    assert!((last_falling.wavelength_nm - falling).abs() < 4.0, "{last_falling:?} {falling}");
    assert!((first_rising.wavelength_nm - rising).abs() < 4.0, "{first_rising:?} {rising}");
    for one in &found {
        let there =
            value(&reflector(), &Quantity::Transmittance, &Light::normal(), one.wavelength_nm).unwrap();
        assert!((there - 0.5).abs() < 1e-6);
    }
    assert!(found.windows(2).all(|pair| pair[0].rising != pair[1].rising));
}

#[test]
fn a_resonance_crosses_a_level_twice_however_narrow() {
    let index = |n: f64| Index::constant(n, 0.0).unwrap();
    let quarter = |n: f64| Film::new(index(n), 1064.0 / (4.0 * n));
    let mut films = Vec::new();
    for _ in 0..11 {
        films.extend([quarter(2.3), quarter(1.45)]);
    }
    let mirror: Vec<Film> = films.clone();
    films.push(Film::new(index(2.3), 1064.0 / 2.3));
    films.extend(mirror.into_iter().rev());
    let stack = Stack {
        facets_rad: None,
        incident: index(1.52),
        coatings: vec![films],
        bodies: vec![],
        exit: index(1.52),
    };
    let found = crossings(&stack, &Quantity::Transmittance, &Light::normal(), (1030.0, 1100.0), 0.5).unwrap();
    assert_eq!(found.len(), 2, "{found:?}");
    assert!(found[0].rising && !found[1].rising);
    assert!((found[0].wavelength_nm - 1064.0).abs() < 0.01 && (found[1].wavelength_nm - 1064.0).abs() < 0.01);
}

#[test]
fn a_flat_mask_is_a_bound() {
    let stack = reflector();
    let (light, band) = (Light::normal(), (430.0, 720.0));
    let plain = extremes(&stack, &Quantity::Reflectance, &light, band).unwrap();
    let mask = [(400.0, 0.25), (500.0, 0.25), (510.0, 0.25), (800.0, 0.25)];
    let against = extremes_against(&stack, &Quantity::Reflectance, &light, band, &mask).unwrap().unwrap();
    assert!((against.max.value - (plain.max.value - 0.25)).abs() < 1e-9);
    assert!((against.min.value - (plain.min.value - 0.25)).abs() < 1e-9);
    let elsewhere =
        extremes_against(&stack, &Quantity::Reflectance, &light, band, &[(900.0, 0.1), (950.0, 0.2)]);
    assert_eq!(elsewhere.unwrap(), None);
}

#[test]
fn integrals_of_spectra_are_exact() {
    let lamp = SpectralWeight::table(&[(400.0, 1.0), (500.0, 3.0), (510.0, 0.0)]).unwrap();
    assert!((lamp.integral(&[(400.0, 510.0)]).unwrap() - 215.0).abs() < 1e-12);
    assert!((lamp.integral(&[(400.0, 450.0), (505.0, 510.0)]).unwrap() - (75.0 + 3.75)).abs() < 1e-12);
    assert_eq!(lamp.integral(&[(390.0, 450.0)]), None);
    // The fraction of a 300 K black body's exitance in 8–14 µm: 0.375 742 293 645 924 3 of 459.300 327 953 938 8 W/m²,
    // from Planck's law and its series (S. L. Chang, K. T. Rhee, Int. Commun. Heat Mass Transfer 11, 451 (1984)).
    let body = SpectralWeight::blackbody(300.0).unwrap();
    let share = body.integral(&[(8000.0, 14_000.0)]).unwrap() / 459.300_327_953_938_8;
    assert!((share - 0.375_742_293_645_924_3).abs() < 1e-9, "{share}");
}
