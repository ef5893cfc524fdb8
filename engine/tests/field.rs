//! The field inside films against closed formulas.

use overcoat_engine::{Film, Index, Light, Polarisation, Quantity, Stack, extremes, peak_field};

fn index(n: f64, k: f64) -> Index {
    Index::constant(n, k).expect("an index")
}

fn stack(films: &[(f64, f64)], exit: Index) -> Stack {
    let film = |&(n, thickness_nm): &(f64, f64)| Film::new(index(n, 0.0), thickness_nm);
    let coatings = vec![films.iter().map(film).collect()];
    Stack { facets_rad: None, incident: index(1.0, 0.0), coatings, bodies: vec![], exit }
}

#[test]
fn a_quarter_wave_mirror_with_its_low_index_outermost_has_four_at_its_surface() {
    // (LH)^8 with a quarter-wave L outermost: r is positive and near 1, |1 + r|² near 4 at the front surface; deeper in the
    // field is less (matrix theory; M. Born, E. Wolf, Principles of Optics, 1.6).
    let quarter = |n: f64| (n, 550.0 / (4.0 * n));
    let films: Vec<(f64, f64)> = std::iter::repeat_n([quarter(1.38), quarter(2.35)], 9).flatten().collect();
    let mirror = stack(&films, index(1.5168, 0.0));
    let peak = peak_field(&mirror, &Light::normal(), 550.0).expect("a field");
    let y = (2.35_f64 / 1.38).powi(18) * 1.5168;
    // The stack's admittance is that of H outermost, inverted by the quarter-wave L: r = (1 − 1/Y′)/(1 + 1/Y′).
    let r = (1.0 - 1.0 / y) / (1.0 + 1.0 / y);
    assert!((peak.value - (1.0 + r) * (1.0 + r)).abs() < 2e-3, "{peak:?} {}", (1.0 + r).powi(2));
    assert_eq!((peak.film, peak.depth_nm), (0, 0.0));
}

#[test]
fn the_standing_wave_before_a_metal_has_its_crest_where_the_phase_says() {
    // In a film of the incident medium's own index before a mirror: |E|² = |1 + r exp(2ik(d − z))|², crest (1 + |r|)².
    let metal = index(0.06, 3.6);
    let n = num_complex::Complex64::new(0.06, 3.6);
    let r = (1.0 - n) / (1.0 + n);
    let peak = peak_field(&stack(&[(1.0, 2000.0)], metal), &Light::normal(), 550.0).expect("a field");
    assert!((peak.value - (1.0 + r.norm()).powi(2)).abs() < 1e-9, "{peak:?}");
    let phase = r.arg() + 4.0 * std::f64::consts::PI * (2000.0 - peak.depth_nm) / 550.0;
    assert!((phase / std::f64::consts::TAU - (phase / std::f64::consts::TAU).round()).abs() < 1e-5);
}

#[test]
fn without_a_boundary_the_field_is_one_for_both_polarisations_at_any_angle() {
    let nothing = stack(&[(1.0, 300.0)], index(1.0, 0.0));
    for polarisation in [Polarisation::S, Polarisation::P, Polarisation::Mean] {
        let light = Light::parallel(0.9, polarisation);
        let peak = peak_field(&nothing, &light, 550.0).expect("a field");
        assert!((peak.value - 1.0).abs() < 1e-12, "{polarisation:?} {peak:?}");
    }
}

#[test]
fn p_light_crosses_into_a_film_with_the_normal_component_of_maxwell() {
    // At a matched Brewster angle nothing comes back: in the film |E|² = cos² θ₀/cos² θ₁ for the tangential part plus
    // the normal one, N₀² sin² θ₀ … together |E₁|² = (n₀ cos θ₀)/(n₁ cos θ₁) by the power that flows on (Born and Wolf, 1.5.3).
    let n: f64 = 1.5;
    let film = stack(&[(n, 700.0)], index(n, 0.0));
    let angle = n.atan();
    let peak = peak_field(&film, &Light::parallel(angle, Polarisation::P), 550.0).expect("a field");
    let inside = (angle.sin() / n).asin();
    assert!((peak.value - angle.cos() / (n * inside.cos())).abs() < 1e-12, "{peak:?}");
}

#[test]
fn the_greatest_over_a_band_is_found_at_a_resonance() {
    let quarter = |n: f64| (n, 1064.0 / (4.0 * n));
    let mut films: Vec<(f64, f64)> =
        std::iter::repeat_n([quarter(2.3), quarter(1.45)], 8).flatten().collect();
    let back: Vec<(f64, f64)> = films.iter().rev().copied().collect();
    films.push((2.3, 1064.0 / 2.3));
    films.extend(back);
    let over =
        extremes(&stack(&films, index(1.0, 0.0)), &Quantity::PeakField, &Light::normal(), (1030.0, 1100.0))
            .expect("extremes");
    assert!((over.max.wavelength_nm - 1064.0).abs() < 0.01 && over.max.value > 100.0, "{:?}", over.max);
}

#[test]
fn the_field_in_a_graded_film_is_that_of_many_thin_ones() {
    use overcoat_engine::{Gradient, MixingRule, Profile, Steps};
    let gradient = |steps| Gradient {
        front: index(1.46, 0.0),
        back: index(2.4, 0.0),
        shares: (0.0, 1.0),
        rule: MixingRule::Bruggeman,
        steps,
    };
    let peak = |steps, polarisation| {
        let film = Film { profile: Profile::Graded(gradient(steps)), thickness_nm: 420.0 };
        let stack = Stack {
            facets_rad: None,
            incident: index(1.0, 0.0),
            coatings: vec![vec![film]],
            bodies: vec![],
            exit: index(3.0, 0.0),
        };
        peak_field(&stack, &Light::parallel(0.9, polarisation), 550.0).expect("a peak")
    };
    for polarisation in [Polarisation::S, Polarisation::P] {
        let (smooth, thin) = (peak(Steps::Smooth(16), polarisation), peak(Steps::Films(2000), polarisation));
        assert!((smooth.value - thin.value).abs() < 2e-4 * thin.value, "{smooth:?} {thin:?}");
        assert!((smooth.depth_nm - thin.depth_nm).abs() < 1.0 && smooth.film == 0, "{smooth:?} {thin:?}");
    }
}
