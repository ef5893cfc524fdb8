//! Resonances far narrower than any grid: cavities with closed formulas of their own.

use std::f64::consts::PI;

use overcoat_engine::{
    Film, Index, Light, Polarisation, Quantity, SpectralWeight, Stack, extremes, extremes_over_angles, mean,
};

fn index(n: f64) -> Index {
    Index::constant(n, 0.0).expect("a valid index")
}

/// Quarter-wave pairs (high, low) at `design`, `pairs` times, as films in the light's order.
fn mirror(high: &Index, low: &Index, n: (f64, f64), design: f64, pairs: usize) -> Vec<Film> {
    let quarter = |index: &Index, n: f64| Film::new(index.clone(), design / 4.0 / n);
    (0..pairs).flat_map(|_| [quarter(high, n.0), quarter(low, n.1)]).collect()
}

/// glass | (HL)^p 2H (LH)^p | glass, with the spacer at its middle shifted so that the resonance lies at
/// `design`, which no mesh point meets.
fn cavity(pairs: usize, design: f64) -> Stack {
    let (high, low, glass) = (index(2.35), index(1.38), index(1.5168));
    let mut films = mirror(&high, &low, (2.35, 1.38), design, pairs);
    films.push(Film::new(high.clone(), design / 2.0 / 2.35));
    films.extend(mirror(&low, &high, (1.38, 2.35), design, pairs));
    Stack { facets_rad: None, incident: glass.clone(), coatings: vec![films], bodies: vec![], exit: glass }
}

#[test]
fn cavities_down_to_a_millionth_of_a_nanometre_are_found() {
    for (pairs, widest) in [(6, 1.0), (9, 0.05), (11, 0.006), (14, 3e-4), (18, 4e-6)] {
        let design = 1_000.123_456_7;
        let stack = cavity(pairs, design);
        let found =
            extremes(&stack, &Quantity::Transmittance, &Light::normal(), (965.0, 1035.0)).expect("a value");
        // All films pair off into half-waves, so that T = 1 at the design wavelength exactly.
        assert!((found.max.value - 1.0).abs() < 1e-9, "{pairs}: {found:?}");
        assert!((found.max.wavelength_nm - design).abs() < 1e-5, "{pairs}: {found:?}");
        let off = extremes(
            &stack,
            &Quantity::Transmittance,
            &Light::normal(),
            (design + widest, design + widest + 20.0),
        );
        let off = off.expect("a value");
        assert!(off.max.value < 0.5, "{pairs}: {off:?}, the resonance is narrower than {widest} nm");
    }
}

#[test]
fn two_coupled_cavities_come_apart() {
    // Two equal cavities with a common mirror split into two peaks of T = 1. For a symmetric lossless system
    // seen from one cavity: T = 1 where the reflectances on both sides of the plane of symmetry match; here
    // the check is the count and the height of the peaks by a scan at the resonance's own scale.
    let design = 1_000.123_456_7;
    let (high, low, glass) = (index(2.35), index(1.38), index(1.5168));
    let spacer = Film::new(high.clone(), design / 2.0 / 2.35);
    let low_film = Film::new(low.clone(), design / 4.0 / 1.38);
    let (outer, inner) = (9, 7);
    let mut films = mirror(&high, &low, (2.35, 1.38), design, outer);
    films.push(spacer.clone());
    films.extend(mirror(&low, &high, (1.38, 2.35), design, inner));
    films.push(low_film);
    films.extend(mirror(&high, &low, (2.35, 1.38), design, inner));
    films.push(spacer);
    films.extend(mirror(&low, &high, (1.38, 2.35), design, outer));
    let stack = Stack {
        facets_rad: None,
        incident: glass.clone(),
        coatings: vec![films],
        bodies: vec![],
        exit: glass,
    };
    let light = Light::normal();
    let found = extremes(&stack, &Quantity::Transmittance, &light, (965.0, 1035.0)).expect("a value");
    assert!((found.max.value - 1.0).abs() < 1e-9, "{found:?}");
    // Each side of the design wavelength holds a peak of its own, mirror images in frequency.
    let left = extremes(&stack, &Quantity::Transmittance, &light, (965.0, design)).expect("a value");
    let right = extremes(&stack, &Quantity::Transmittance, &light, (design, 1035.0)).expect("a value");
    assert!((left.max.value - 1.0).abs() < 1e-8, "{left:?}");
    assert!((right.max.value - 1.0).abs() < 1e-8, "{right:?}");
    let mirrored = 1.0 / (2.0 / design - 1.0 / left.max.wavelength_nm);
    assert!((right.max.wavelength_nm - mirrored).abs() < 1e-6, "{left:?} {right:?}");
}

#[test]
fn the_mean_over_a_narrow_peak_is_its_area() {
    // Near the resonance T = 1/(1 + (2 (λ − λ₀)/w)²) with area π w/2; w from the half-maximum.
    let design = 1_000.123_456_7;
    let stack = cavity(11, design);
    let (mut lo, mut hi) = (0.0, 0.1);
    let at = |off: f64| {
        let mean = Polarisation::Mean;
        stack.response(design + off, 0.0, mean).expect("a value").transmittance
    };
    for _ in 0..60 {
        let middle = 0.5 * (lo + hi);
        if at(middle) > 0.5 { lo = middle } else { hi = middle }
    }
    let half = lo;
    let band = (design - 50.0 * half, design + 50.0 * half);
    let found =
        mean(&stack, &Quantity::Transmittance, &Light::normal(), &[band], &SpectralWeight::constant());
    let area = found.expect("a mean").value * (band.1 - band.0);
    let lorentz = 2.0 * half * 50.0_f64.atan();
    assert!((area / lorentz - 1.0).abs() < 1e-4, "{area} {lorentz} {half}");
    assert!(half < 0.005 && PI > 3.0);
}

#[test]
fn a_resonance_that_crosses_a_single_wavelength_within_the_angles_is_found() {
    let stack = cavity(11, 1_000.123_456_7);
    let band = (990.0, 990.0);
    let light = Light::normal();
    let found =
        extremes_over_angles(&stack, &Quantity::Transmittance, &light, band, (0.0, 0.4)).expect("a value");
    assert!(found.max.value > 0.49, "{found:?}");
    let s = Light { polarisation: Polarisation::S, ..light };
    let found =
        extremes_over_angles(&stack, &Quantity::Transmittance, &s, band, (0.0, 0.4)).expect("a value");
    assert!((found.max.value - 1.0).abs() < 1e-6, "{found:?}");
}
