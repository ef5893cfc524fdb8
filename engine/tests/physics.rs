//! Laws that every stack obeys, over random stacks.

use overcoat_engine::{
    Body, Film, Index, Light, Polarisation, Quantity, SpectralWeight, Stack, extremes, mean, value,
};
use proptest::prelude::*;

fn index(n: f64, k: f64) -> Index {
    Index::constant(n, k).expect("a valid index")
}

fn film() -> impl Strategy<Value = Film> {
    let k = prop_oneof![Just(0.0), 0.0..0.1, 0.1..5.0];
    (0.05..4.0, k, 0.0..400.0).prop_map(|(n, k, thickness_nm)| Film::new(index(n, k), thickness_nm))
}

fn clear_film() -> impl Strategy<Value = Film> {
    (1.0..4.0, 0.0..400.0).prop_map(|(n, thickness_nm)| Film::new(index(n, 0.0), thickness_nm))
}

fn coatings(film: impl Strategy<Value = Film>, bodies: usize) -> impl Strategy<Value = Vec<Vec<Film>>> {
    prop::collection::vec(prop::collection::vec(film, 0..8), bodies + 1)
}

/// Any stack with up to two thick bodies.
fn any_stack() -> impl Strategy<Value = Stack> {
    (0_usize..3).prop_flat_map(|count| {
        let k = prop_oneof![Just(0.0), 0.0..1e-5];
        let body = (1.0..3.0, k, 1e3..1e7)
            .prop_map(|(n, k, thickness_nm)| Body { index: index(n, k), thickness_nm });
        let bodies = prop::collection::vec(body, count);
        (coatings(film(), count), bodies, 1.0..2.0, 0.5..4.0, prop_oneof![Just(0.0), 0.0..4.0]).prop_map(
            |(coatings, bodies, incident, n, k)| Stack {
                facets_rad: None,
                incident: index(incident, 0.0),
                coatings,
                bodies,
                exit: index(n, k),
            },
        )
    })
}

fn clear_stack() -> impl Strategy<Value = Stack> {
    (0_usize..3).prop_flat_map(|count| {
        let body =
            (1.0..3.0, 1e3..1e7).prop_map(|(n, thickness_nm)| Body { index: index(n, 0.0), thickness_nm });
        let bodies = prop::collection::vec(body, count);
        (coatings(clear_film(), count), bodies, 1.0..2.0, 1.0..2.0).prop_map(
            |(coatings, bodies, incident, exit)| Stack {
                facets_rad: None,
                incident: index(incident, 0.0),
                coatings,
                bodies,
                exit: index(exit, 0.0),
            },
        )
    })
}

const MODES: [Polarisation; 3] = [Polarisation::S, Polarisation::P, Polarisation::Mean];

proptest! {
    #[test]
    fn the_power_balance_closes(stack in any_stack(), wavelength in 200.0..2000.0, angle in 0.0..1.55) {
        for mode in MODES {
            let all = stack.absorption(wavelength, angle, mode).unwrap();
            let whole = all.response;
            let plain = stack.response(wavelength, angle, mode).unwrap();
            prop_assert!((whole.reflectance - plain.reflectance).abs() < 1e-15);
            prop_assert!(plain.transmittance >= 0.0 && plain.reflectance >= 0.0 && plain.absorptance >= 0.0);
            prop_assert!((plain.reflectance + plain.transmittance + plain.absorptance - 1.0).abs() < 1e-12);
            let films: f64 = all.films.iter().flatten().sum();
            let bodies: f64 = all.bodies.iter().sum();
            let sum = whole.reflectance + whole.transmittance + films + bodies;
            prop_assert!((sum - 1.0).abs() < 1e-12, "{sum}");
            for share in all.films.iter().flatten() {
                prop_assert!(*share > -1e-12, "{share}");
            }
        }
    }

    #[test]
    fn transmittance_is_the_same_from_both_sides(
        stack in clear_stack(), wavelength in 200.0..2000.0, sine in 0.0..0.99_f64,
    ) {
        // The same ray from either side: n sin θ is conserved, and both half-spaces carry it.
        let exit_n = stack.exit.at(wavelength).unwrap().re;
        let incident_n = stack.incident.at(wavelength).unwrap().re;
        let alpha: f64 = sine * exit_n.min(incident_n);
        let (there, back) = ((alpha / incident_n).asin(), (alpha / exit_n).asin());
        for mode in [Polarisation::S, Polarisation::P] {
            let front = stack.response(wavelength, there, mode).unwrap();
            let rear = stack.reversed().expect("no texture").response(wavelength, back, mode).unwrap();
            prop_assert!((front.transmittance - rear.transmittance).abs() < 1e-10);
            prop_assert!((front.reflectance - rear.reflectance).abs() < 1e-10);
            prop_assert!((front.reflectance + front.transmittance - 1.0).abs() < 1e-12);
            prop_assert_eq!(front.absorptance, 0.0);
        }
    }

    #[test]
    fn transmittance_of_absorbing_films_is_the_same_from_both_sides(
        films in prop::collection::vec(film(), 0..8), wavelength in 200.0..2000.0, sine in 0.0..0.95,
    ) {
        let (air, glass) = (index(1.0, 0.0), index(1.5, 0.0));
        let stack = Stack { facets_rad: None,  incident: air, coatings: vec![films], bodies: vec![], exit: glass };
        for mode in [Polarisation::S, Polarisation::P] {
            let front = stack.response(wavelength, f64::asin(sine), mode).unwrap();
            let rear = stack.reversed().expect("no texture").response(wavelength, f64::asin(sine / 1.5), mode).unwrap();
            prop_assert!((front.ln_transmittance - rear.ln_transmittance).abs() < 1e-9);
        }
    }

    #[test]
    fn s_and_p_are_one_at_normal_incidence(stack in any_stack(), wavelength in 200.0..2000.0) {
        let s = stack.response(wavelength, 0.0, Polarisation::S).unwrap();
        let p = stack.response(wavelength, 0.0, Polarisation::P).unwrap();
        prop_assert!((s.reflectance - p.reflectance).abs() < 1e-12);
        prop_assert!((s.transmittance - p.transmittance).abs() < 1e-12);
    }

    #[test]
    fn a_film_in_two_parts_is_one_film(
        stack in any_stack(), share in 0.0..1.0, wavelength in 200.0..2000.0, angle in 0.0..1.5,
    ) {
        let mut split = stack.clone();
        for films in &mut split.coatings {
            let halves = films.iter().flat_map(|film| {
                let part = |share: f64| Film { thickness_nm: share * film.thickness_nm, ..film.clone() };
                [part(share), part(1.0 - share)]
            });
            *films = halves.collect();
        }
        for mode in MODES {
            let one = stack.absorption(wavelength, angle, mode).unwrap();
            let two = split.absorption(wavelength, angle, mode).unwrap();
            prop_assert!((one.response.reflectance - two.response.reflectance).abs() < 1e-11);
            prop_assert!((one.response.transmittance - two.response.transmittance).abs() < 1e-11);
            for (films, halves) in one.films.iter().zip(&two.films) {
                for (film, halves) in films.iter().zip(halves.chunks(2)) {
                    prop_assert!((film - halves[0] - halves[1]).abs() < 1e-11);
                }
            }
        }
    }

    #[test]
    fn a_half_wave_is_absent(
        films in prop::collection::vec(film(), 0..6), place in 0_usize..7, n in 1.2..3.0_f64, order in 1_u32..4,
        angle in 0.0..1.5_f64, wavelength in 300.0..1500.0_f64,
    ) {
        let place = place.min(films.len());
        let inside = (1.0_f64 - (angle.sin() / n).powi(2)).sqrt();
        let thickness_nm = f64::from(order) * wavelength / 2.0 / n / inside;
        let mut more = films.clone();
        more.insert(place, Film::new(index(n, 0.0), thickness_nm));
        let stack = |films| Stack { facets_rad: None,
            incident: index(1.0, 0.0), coatings: vec![films], bodies: vec![], exit: index(1.5, 0.0),
        };
        for mode in MODES {
            let without = stack(films.clone()).response(wavelength, angle, mode).unwrap();
            let with = stack(more.clone()).response(wavelength, angle, mode).unwrap();
            prop_assert!((with.reflectance - without.reflectance).abs() < 1e-11);
            prop_assert!((with.transmittance - without.transmittance).abs() < 1e-11);
        }
    }

    #[test]
    fn extremes_bound_every_sample_and_are_reached(
        films in prop::collection::vec(film(), 1..8), angle in 0.0..1.2, share in 0.0..1.0,
    ) {
        let stack = Stack { facets_rad: None,
            incident: index(1.0, 0.0), coatings: vec![films], bodies: vec![], exit: index(1.5, 0.0),
        };
        let light = Light::parallel(angle, Polarisation::Mean);
        let whole = Quantity::AbsorptanceIn { films: vec![(0, 0)], bodies: vec![], exit: false };
        for quantity in [Quantity::Reflectance, Quantity::Transmittance, whole] {
            let found = extremes(&stack, &quantity, &light, (400.0, 700.0)).unwrap();
            for step in 0..300 {
                let wavelength = 400.0 + f64::from(step) + share;
                let here = value(&stack, &quantity, &light, wavelength).unwrap();
                prop_assert!(found.min.value <= here + 1e-9 && here <= found.max.value + 1e-9);
            }
            let there = value(&stack, &quantity, &light, found.max.wavelength_nm).unwrap();
            prop_assert!((there - found.max.value).abs() < 1e-14);
        }
    }

    #[test]
    fn a_mean_is_the_sum_of_its_parts(
        films in prop::collection::vec(film(), 1..5), angle in 0.0..1.2, cut in 420.0..680.0,
    ) {
        let stack = Stack { facets_rad: None,
            incident: index(1.0, 0.0), coatings: vec![films], bodies: vec![], exit: index(1.5, 0.0),
        };
        let light = Light::parallel(angle, Polarisation::S);
        let over = |band| mean(&stack, &Quantity::Reflectance, &light, &[band], &SpectralWeight::constant()).unwrap();
        let (left, right, both) = (over((400.0, cut)), over((cut, 700.0)), over((400.0, 700.0)));
        let joined = (left.value * (cut - 400.0) + right.value * (700.0 - cut)) / 300.0;
        prop_assert!((joined - both.value).abs() < 1e-9);
    }
}
