//! Derivatives in the films' thicknesses against differences of the values themselves.

use overcoat_engine::{
    Body, Film, Gradient, Index, Light, MixingRule, OpticsError, Outgoing, PhaseKind, Polarisation, Profile,
    Quantity, Stack, Steps, slopes, value,
};

fn index(n: f64, k: f64) -> Index {
    Index::constant(n, k).expect("an index")
}

fn film(n: f64, k: f64, nm: f64) -> Film {
    Film::new(index(n, k), nm)
}

fn graded(nm: f64) -> Film {
    let gradient = Gradient {
        front: index(1.46, 0.0),
        back: index(2.3, 0.01),
        shares: (0.0, 1.0),
        rule: MixingRule::Bruggeman,
        steps: Steps::Smooth(8),
    };
    Film { profile: Profile::Graded(gradient), thickness_nm: nm }
}

fn coating() -> Vec<Film> {
    vec![
        film(1.46, 0.0, 92.0),
        film(2.35, 0.002, 61.0),
        graded(140.0),
        film(0.06, 3.6, 9.0),
        film(2.0, 0.0, 45.0),
    ]
}

fn half_space(facets_rad: Option<f64>) -> Stack {
    Stack {
        incident: index(1.0, 0.0),
        coatings: vec![coating()],
        bodies: vec![],
        exit: index(3.6, 0.02),
        facets_rad,
    }
}

fn pane() -> Stack {
    let body = |n: f64, k: f64, mm: f64| Body { index: index(n, k), thickness_nm: mm * 1e6 };
    let coatings =
        vec![vec![film(1.38, 0.0, 99.0)], coating(), vec![film(2.1, 0.1, 30.0), film(1.7, 0.0, 50.0)]];
    let bodies = vec![body(1.52, 1e-6, 4.0), body(1.49, 0.0, 0.4)];
    Stack { incident: index(1.0, 0.0), coatings, bodies, exit: index(1.0, 0.0), facets_rad: None }
}

/// The derivative in one film's thickness by a central difference of fourth order.
fn difference(
    stack: &Stack,
    quantity: &Quantity,
    light: &Light,
    (coating, film): (usize, usize),
) -> Result<f64, OpticsError> {
    let at = |steps: f64| {
        let mut moved = stack.clone();
        moved.coatings[coating][film].thickness_nm += 1e-2 * steps;
        value(&moved, quantity, light, 620.0)
    };
    Ok((at(-2.0)? - at(2.0)? + 8.0 * (at(1.0)? - at(-1.0)?)) / 0.12)
}

fn agree(stack: &Stack, quantity: &Quantity, light: &Light, tolerance: f64) {
    let found = slopes(stack, quantity, light, &[620.0]).expect("slopes").remove(0);
    let plain = value(stack, quantity, light, 620.0).expect("a value");
    assert!(
        (found.value - plain).abs() < 1e-9 * (1.0 + plain.abs()),
        "{quantity:?}: {} {plain}",
        found.value
    );
    let mut compared = 0;
    for (coating, films) in found.films.iter().enumerate() {
        for (film, slope) in films.iter().enumerate() {
            let expected = difference(stack, quantity, light, (coating, film)).expect("a difference");
            let greatest = films.iter().fold(0.0_f64, |most, slope| most.max(slope.abs()));
            let far = (slope - expected).abs();
            assert!(
                far < tolerance * greatest.max(1e-4),
                "{quantity:?} {coating}.{film}: {slope} {expected}"
            );
            compared += 1;
        }
    }
    assert!(compared >= 5);
}

fn lights() -> Vec<Light> {
    vec![
        Light::normal(),
        Light::parallel(0.8, Polarisation::S),
        Light::parallel(1.1, Polarisation::P),
        Light::parallel(0.5, Polarisation::Mean),
        Light { polarisation: Polarisation::Mean, angle_rad: 0.4, cone_half_angle_rad: 0.2 },
    ]
}

fn powers(films: Vec<(usize, usize)>, bodies: Vec<usize>) -> Vec<Quantity> {
    vec![
        Quantity::Reflectance,
        Quantity::Transmittance,
        Quantity::Absorptance,
        Quantity::OpticalDensity,
        Quantity::AbsorptanceIn { films, bodies, exit: false },
        Quantity::AbsorptanceIn { films: vec![], bodies: vec![], exit: true },
    ]
}

#[test]
fn powers_of_a_coating_change_as_their_differences() {
    for light in lights() {
        for quantity in powers(vec![(0, 1), (0, 2), (0, 3)], vec![]) {
            agree(&half_space(None), &quantity, &light, 1e-6);
        }
    }
}

#[test]
fn powers_of_a_pane_coated_on_every_face_change_as_their_differences() {
    for light in lights() {
        for quantity in powers(vec![(0, 0), (1, 2), (1, 3), (2, 0)], vec![0]) {
            agree(&pane(), &quantity, &light, 1e-6);
        }
    }
}

#[test]
fn powers_on_pyramids_change_as_their_differences() {
    for quantity in powers(vec![(0, 1), (0, 3)], vec![]) {
        agree(&half_space(Some(0.955)), &quantity, &Light::normal(), 1e-6);
    }
}

#[test]
fn phases_and_delays_change_as_their_differences() {
    for light in
        [Light::normal(), Light::parallel(0.8, Polarisation::S), Light::parallel(1.1, Polarisation::P)]
    {
        for outgoing in [Outgoing::Reflected, Outgoing::Transmitted] {
            for kind in [PhaseKind::Phase { aim_rad: 0.3 }, PhaseKind::Delay, PhaseKind::Dispersion] {
                agree(&half_space(None), &Quantity::Phase(outgoing, kind), &light, 1e-5);
            }
        }
    }
}

#[test]
fn the_greatest_field_changes_as_its_differences() {
    let mut stack = half_space(None);
    stack.coatings[0].remove(2);
    for light in
        [Light::normal(), Light::parallel(0.8, Polarisation::S), Light::parallel(1.1, Polarisation::P)]
    {
        for thickness in [40.0, 92.0, 210.0] {
            stack.coatings[0][0].thickness_nm = thickness;
            stack.coatings[0][0] = film(1.46, 0.0, thickness);
            let found = slopes(&stack, &Quantity::PeakField, &light, &[620.0]).expect("slopes").remove(0);
            for (at, slope) in found.films[0].iter().enumerate() {
                let expected =
                    difference(&stack, &Quantity::PeakField, &light, (0, at)).expect("a difference");
                assert!(
                    (slope - expected).abs() < 1e-4 * (expected.abs() + 0.01),
                    "{thickness} {at}: {slope} {expected}"
                );
            }
        }
    }
}
