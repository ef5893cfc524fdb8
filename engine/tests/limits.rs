//! The ends of what can be asked: opaque, endless, grazing, empty, impossible.

use overcoat_engine::{
    Body, Film, Index, Light, OpticsError, Polarisation, Quantity, SpectralWeight, Stack, extremes, mean,
    value,
};

fn index(n: f64, k: f64) -> Index {
    Index::constant(n, k).expect("a valid index")
}

fn on_glass(films: Vec<Film>) -> Stack {
    Stack {
        facets_rad: None,
        incident: index(1.0, 0.0),
        coatings: vec![films],
        bodies: vec![],
        exit: index(1.52, 0.0),
    }
}

#[test]
fn a_millimetre_of_silver_reflects_as_a_bulk_does() {
    let silver = index(0.06, 3.6);
    let film = Film::new(silver.clone(), 1e6);
    let bulk = Stack {
        facets_rad: None,
        incident: index(1.0, 0.0),
        coatings: vec![vec![]],
        bodies: vec![],
        exit: silver,
    };
    let thick = on_glass(vec![film]);
    for angle in [0.0, 0.7, 1.5] {
        for mode in [Polarisation::S, Polarisation::P] {
            let film = thick.absorption(550.0, angle, mode).expect("a response");
            let bulk = bulk.response(550.0, angle, mode).expect("a response");
            assert!((film.response.reflectance - bulk.reflectance).abs() < 1e-14);
            assert_eq!(film.response.transmittance, 0.0);
            assert!((film.films[0][0] - (1.0 - bulk.reflectance)).abs() < 1e-12);
            // 4πkd/λ nepers, less what the faces do.
            let nepers = 4.0 * std::f64::consts::PI * 3.6 * 1e6 / 550.0;
            assert!(
                film.response.ln_transmittance < -nepers + 10.0 && film.response.ln_transmittance.is_finite()
            );
        }
    }
    let density = value(&thick, &Quantity::OpticalDensity, &Light::normal(), 550.0).expect("a density");
    assert!(density > 35_000.0 && density.is_finite());
}

#[test]
fn ten_thousand_films_have_a_response() {
    let (high, low) = (index(2.35, 0.0), index(1.38, 0.0));
    let film = |at: usize| {
        let (index, n) = if at.is_multiple_of(2) { (&high, 2.35) } else { (&low, 1.38) };
        Film::new(index.clone(), 550.0 / 4.0 / n)
    };
    let stack = on_glass((0..10_000).map(film).collect());
    let response = stack.response(550.0, 0.0, Polarisation::Mean).expect("a response");
    assert!((response.reflectance - 1.0).abs() < 1e-12);
    // ln T = ln(4 Y nₛ…) − 2p ln(nH/nL) for p pairs: Born and Wolf, 1.6.5, Y = (nH/nL)^2p nₛ, T = 4Y/(1 + Y)².
    let ln_y = 10_000.0 * (2.35_f64 / 1.38).ln() + 1.52_f64.ln();
    assert!((response.ln_transmittance - (4.0_f64.ln() - ln_y)).abs() < 1e-8);
    assert!(stack.absorption(400.0, 0.3, Polarisation::P).is_ok());
}

#[test]
fn no_resonance_in_a_thousand_odd_films_reflects_more_than_all() {
    // Light is localised in odd films, in resonances finer than any number: what rounding makes of them must
    // still balance. The thicknesses come from a quadratic sequence, equidistributed modulo 80 nm.
    let (high, low) = (index(2.35, 0.0), index(1.38, 0.0));
    let film = |at: usize| {
        let odd = (at as f64).powi(2) * 49.442_719_1;
        let index = if at.is_multiple_of(2) { &high } else { &low };
        Film::new(index.clone(), 60.0 + odd % 80.0)
    };
    let stack = on_glass((0..1_000).map(film).collect());
    for step in 0..2_000 {
        let response =
            stack.response(500.0 + 0.05 * f64::from(step), 0.0, Polarisation::S).expect("a response");
        assert!(response.reflectance <= 1.0 && response.transmittance >= 0.0);
        assert!((response.reflectance + response.transmittance - 1.0).abs() < 1e-12);
    }
}

#[test]
fn films_without_thickness_are_not_there() {
    let stack = on_glass(vec![Film::new(index(2.0, 0.0), 0.0), Film::new(index(0.06, 3.6), 0.0)]);
    let bare = on_glass(vec![]);
    for angle in [0.0, 1.0] {
        let there = stack.response(550.0, angle, Polarisation::P).expect("a response");
        let not = bare.response(550.0, angle, Polarisation::P).expect("a response");
        assert!((there.reflectance - not.reflectance).abs() < 1e-15);
    }
}

#[test]
fn a_film_at_its_critical_angle_is_finite() {
    // sin θ = 1/1.5 with a film of n = 1 in glass of 1.5: q = 0 in the film but for rounding. For s the matrix
    // is [[1, −ik₀d], [0, 1]], so that r = −ik₀dη/(2 − ik₀dη).
    let glass = index(1.5, 0.0);
    let gap = Film::new(index(1.0, 0.0), 100.0);
    let stack = Stack {
        facets_rad: None,
        incident: glass.clone(),
        coatings: vec![vec![gap]],
        bodies: vec![],
        exit: glass,
    };
    let angle = (1.0_f64 / 1.5).asin();
    let y = 2.0 * std::f64::consts::PI * 100.0 / 550.0 * 1.5 * angle.cos();
    let s = stack.response(550.0, angle, Polarisation::S).expect("a response");
    assert!((s.reflectance - y * y / (4.0 + y * y)).abs() < 1e-12);
    let p = stack.response(550.0, angle, Polarisation::P).expect("a response");
    assert!((p.reflectance + p.transmittance - 1.0).abs() < 1e-12);
}

#[test]
fn thick_bodies_in_total_reflection_pass_nothing() {
    let glass = index(1.5, 0.0);
    let stack = Stack {
        facets_rad: None,
        incident: glass.clone(),
        coatings: vec![vec![Film::new(index(1.38, 0.0), 100.0)], vec![]],
        bodies: vec![Body { index: index(1.0, 0.0), thickness_nm: 1e6 }],
        exit: glass,
    };
    for mode in [Polarisation::S, Polarisation::P] {
        for angle in [0.8, 1.2, (1.0_f64 / 1.5).asin()] {
            let all = stack.absorption(550.0, angle, mode).expect("a response");
            assert!((all.response.reflectance + all.response.transmittance - 1.0).abs() < 1e-12);
            assert!(angle < 0.75 || all.response.transmittance == 0.0);
        }
    }
    let dark = value(&stack, &Quantity::OpticalDensity, &Light::parallel(0.8, Polarisation::S), 550.0);
    assert!(matches!(dark, Err(OpticsError::Dark { .. })), "{dark:?}");
}

#[test]
fn a_wafer_that_absorbs_all_is_a_half_space() {
    let silicon = index(3.94, 0.02);
    let wafer = Stack {
        facets_rad: None,
        incident: index(1.0, 0.0),
        coatings: vec![vec![], vec![]],
        bodies: vec![Body { index: silicon.clone(), thickness_nm: 1e9 }],
        exit: index(1.0, 0.0),
    };
    let bulk = Stack {
        facets_rad: None,
        incident: index(1.0, 0.0),
        coatings: vec![vec![]],
        bodies: vec![],
        exit: silicon,
    };
    let (wafer, bulk) = (
        wafer.absorption(600.0, 0.5, Polarisation::Mean).expect("a response"),
        bulk.response(600.0, 0.5, Polarisation::Mean).expect("a response"),
    );
    assert!((wafer.response.reflectance - bulk.reflectance).abs() < 1e-14);
    assert!((wafer.bodies[0] - bulk.transmittance).abs() < 1e-12);
    assert!(wafer.response.ln_transmittance.is_finite());
}

#[test]
fn what_cannot_be_is_an_error() {
    let stack = on_glass(vec![Film::new(index(2.0, 0.0), 100.0)]);
    let response =
        |stack: &Stack, wavelength: f64, angle: f64| stack.response(wavelength, angle, Polarisation::S);
    for angle in [-0.1, std::f64::consts::FRAC_PI_2, 2.0, f64::NAN, f64::INFINITY] {
        assert!(matches!(response(&stack, 550.0, angle), Err(OpticsError::Angle { .. })));
    }
    for wavelength in [0.0, -1.0, f64::NAN, f64::INFINITY] {
        assert!(matches!(response(&stack, wavelength, 0.0), Err(OpticsError::Material { .. })));
    }
    for thickness_nm in [-1.0, f64::NAN, f64::INFINITY] {
        let bad = on_glass(vec![Film::new(index(2.0, 0.0), thickness_nm)]);
        assert!(matches!(response(&bad, 550.0, 0.0), Err(OpticsError::Thickness { .. })));
    }
    let absorbing = Stack { facets_rad: None, incident: index(1.5, 1e-9), ..stack.clone() };
    assert!(matches!(response(&absorbing, 550.0, 0.0), Err(OpticsError::AbsorbingIncident { k: 1e-9, .. })));
    let shapeless = Stack { coatings: vec![], ..stack.clone() };
    assert!(matches!(response(&shapeless, 550.0, 0.0), Err(OpticsError::Shape { coatings: 0, bodies: 0 })));
    let light = Light::normal();
    for band in [(700.0, 400.0), (0.0, 400.0), (f64::NAN, 500.0), (400.0, f64::INFINITY)] {
        let found = extremes(&stack, &Quantity::Reflectance, &light, band);
        assert!(matches!(found, Err(OpticsError::Band { .. })));
        let found = mean(&stack, &Quantity::Reflectance, &light, &[band], &SpectralWeight::constant());
        assert!(matches!(found, Err(OpticsError::Band { .. })));
    }
    let nowhere = Quantity::AbsorptanceIn { films: vec![(0, 1)], bodies: vec![], exit: false };
    assert!(matches!(value(&stack, &nowhere, &light, 550.0), Err(OpticsError::NoSuchPlace)));
}

#[test]
fn a_table_that_does_not_reach_names_its_material() {
    let film = Index::table(&[(400.0, 2.0, 0.0), (700.0, 1.9, 0.0)]).expect("a table");
    let stack = on_glass(vec![Film::new(film.clone(), 80.0)]);
    match extremes(&stack, &Quantity::Reflectance, &Light::normal(), (380.0, 700.0)) {
        Err(OpticsError::Material { index, .. }) => assert!(index.same_as(&film)),
        other => panic!("{other:?}"),
    }
    let lamp = SpectralWeight::table(&[(450.0, 1.0), (500.0, 1.0)]).expect("a lamp");
    let outside = mean(&stack, &Quantity::Reflectance, &Light::normal(), &[(420.0, 500.0)], &lamp);
    assert!(matches!(outside, Err(OpticsError::WeightOutside { .. })));
    let nothing = SpectralWeight::table(&[(450.0, 0.0), (500.0, 0.0)]).expect("a lamp");
    let dark = mean(&stack, &Quantity::Reflectance, &Light::normal(), &[(450.0, 500.0)], &nothing);
    assert!(matches!(dark, Err(OpticsError::WeightZero { .. })));
}

#[test]
fn a_resonance_finer_than_any_number_keeps_the_balance() {
    // A cavity between 40 and 40 pairs: the resonance is narrower than the spacing of numbers near its wavelength.
    let index = |n: f64| Index::constant(n, 0.0).expect("an index");
    let quarter = |n: f64| Film::new(index(n), 1000.0 / (4.0 * n));
    let mut films: Vec<Film> = (0..40).flat_map(|_| [quarter(2.35), quarter(1.38)]).collect();
    let back: Vec<Film> = films.iter().rev().cloned().collect();
    films.push(Film::new(index(2.35), 1000.0 / 2.35));
    films.extend(back);
    let stack = Stack {
        facets_rad: None,
        incident: index(1.0),
        coatings: vec![films],
        bodies: vec![],
        exit: index(1.0),
    };
    for wavelength in [999.999, 1000.0 - 1e-12, 1000.0, 1000.0 + 2e-13, 1000.001] {
        let response = stack.response(wavelength, 0.0, Polarisation::S).expect("a response");
        assert!(
            (response.reflectance + response.transmittance - 1.0).abs() < 1e-12,
            "{wavelength} {response:?}"
        );
    }
}
