//! Phases and delays against closed formulas.

use overcoat_engine::{
    Film, Index, Light, Outgoing, PhaseKind, Polarisation, Quantity, Stack, extremes, value,
};

/// The speed of light in vacuum, nm/fs.
const C: f64 = 299.792_458;

fn index(n: f64) -> Index {
    Index::constant(n, 0.0).expect("an index")
}

fn stack(incident: f64, films: &[(f64, f64)], exit: f64) -> Stack {
    let film = |&(n, thickness_nm): &(f64, f64)| Film::new(index(n), thickness_nm);
    let coatings = vec![films.iter().map(film).collect()];
    Stack { facets_rad: None, incident: index(incident), coatings, bodies: vec![], exit: index(exit) }
}

fn delay(outgoing: Outgoing) -> Quantity {
    Quantity::Phase(outgoing, PhaseKind::Delay)
}

fn at(stack: &Stack, quantity: &Quantity, wavelength_nm: f64) -> f64 {
    value(stack, quantity, &Light::normal(), wavelength_nm).expect("a value")
}

#[test]
fn a_bare_surface_turns_the_phase_by_half_a_turn_and_delays_nothing() {
    let glass = stack(1.0, &[], 1.5);
    let phase = Quantity::Phase(Outgoing::Reflected, PhaseKind::Phase { aim_rad: 3.0 });
    assert!((at(&glass, &phase, 550.0) - std::f64::consts::PI).abs() < 1e-12);
    assert!(at(&glass, &delay(Outgoing::Reflected), 550.0).abs() < 1e-12);
    let within = Quantity::Phase(Outgoing::Reflected, PhaseKind::Phase { aim_rad: 0.2 });
    assert!(at(&stack(1.5, &[], 1.0), &within, 550.0).abs() < 1e-12);
}

#[test]
fn light_takes_its_time_through_a_slab_between_like_media() {
    // Without reflections t = exp(i ω n d/c): φ = ω n d/c, a delay of n d/c, no dispersion.
    let slab = stack(1.5, &[(1.5, 1000.0)], 1.5);
    assert!((at(&slab, &delay(Outgoing::Transmitted), 550.0) - 1.5 * 1000.0 / C).abs() < 1e-10);
    let dispersion = Quantity::Phase(Outgoing::Transmitted, PhaseKind::Dispersion);
    assert!(at(&slab, &dispersion, 550.0).abs() < 1e-9);
}

#[test]
fn a_gires_tournois_interferometer_delays_as_published() {
    // F. Gires, P. Tournois, C. R. Acad. Sci. 258, 6112 (1964): between a front mirror of reflectance R and a perfect back
    // mirror a delay of (2nd/c)(1 + √R)/(1 − √R) on resonance and its inverse factor between; here with a front face of
    // r = (n₀ − n)/(n₀ + n) alone and a back mirror of n → ∞. The exit index stands for the perfect mirror: what it lets
    // pass is of the order of 1e-8.
    let (n, d) = (3.0, 1000.0);
    let cavity = stack(1.0, &[(n, d)], 1e8);
    let r: f64 = (n - 1.0) / (n + 1.0);
    let round_trip = 2.0 * n * d / C;
    // Half-wave and quarter-wave thicknesses: 2 n d/λ = 10 and 10.5.
    let (whole, half) = (2.0 * n * d / 10.0, 2.0 * n * d / 10.5);
    let factor = (1.0 + r) / (1.0 - r);
    let delays =
        [at(&cavity, &delay(Outgoing::Reflected), whole), at(&cavity, &delay(Outgoing::Reflected), half)];
    let (long, short) = (delays[0].max(delays[1]), delays[0].min(delays[1]));
    assert!((long / (round_trip * factor) - 1.0).abs() < 1e-6, "{long} {}", round_trip * factor);
    assert!((short / (round_trip / factor) - 1.0).abs() < 1e-6, "{short} {}", round_trip / factor);
}

#[test]
fn delay_and_dispersion_are_the_derivatives_of_the_phase() {
    // With dispersion, absorption and a table: high-order central differences of the phase itself, in ω.
    let sellmeier = Index::sellmeier(&[(1.2, 0.12), (0.8, 9.0)]).expect("a formula");
    let table = Index::table(&[(400.0, 2.4, 0.02), (600.0, 2.3, 0.01), (900.0, 2.25, 0.0)]).expect("a table");
    let lossy = Index::oscillators(
        2.0,
        vec![overcoat_engine::Oscillator::TaucLorentz {
            strength_ev: 80.0,
            centre_ev: 4.5,
            width_ev: 2.0,
            gap_ev: 1.6,
        }],
    )
    .expect("an oscillator");
    let film = |index: &Index, thickness_nm| Film::new(index.clone(), thickness_nm);
    let films = vec![film(&table, 80.0), film(&sellmeier, 120.0), film(&lossy, 60.0), film(&table, 210.0)];
    let stack = Stack {
        facets_rad: None,
        incident: index(1.0),
        coatings: vec![films],
        bodies: vec![],
        exit: index(1.52),
    };
    for (outgoing, polarisation, angle_rad) in [
        (Outgoing::Reflected, Polarisation::S, 0.0),
        (Outgoing::Reflected, Polarisation::P, 0.7),
        (Outgoing::Transmitted, Polarisation::S, 1.1),
        (Outgoing::Transmitted, Polarisation::P, 0.4),
    ] {
        let light = Light::parallel(angle_rad, polarisation);
        let wavelength = 730.0;
        let omega = std::f64::consts::TAU * C / wavelength;
        let of = |kind, omega: f64| {
            let nm = std::f64::consts::TAU * C / omega;
            value(&stack, &Quantity::Phase(outgoing, kind), &light, nm).expect("a value")
        };
        let aim_rad = of(PhaseKind::Phase { aim_rad: 0.0 }, omega);
        let h = 2e-3;
        let phase = |steps: f64| of(PhaseKind::Phase { aim_rad }, omega + steps * h);
        let first = (phase(-2.0) - phase(2.0) + 8.0 * (phase(1.0) - phase(-1.0))) / (12.0 * h);
        let second = (-phase(2.0) - phase(-2.0) + 16.0 * (phase(1.0) + phase(-1.0)) - 30.0 * phase(0.0))
            / (12.0 * h * h);
        let (delay, dispersion) = (of(PhaseKind::Delay, omega), of(PhaseKind::Dispersion, omega));
        assert!((delay - first).abs() < 1e-6 * (1.0 + delay.abs()), "{delay} {first}");
        assert!((dispersion - second).abs() < 1e-4 * (1.0 + dispersion.abs()), "{dispersion} {second}");
    }
}

#[test]
fn a_narrow_resonance_s_delay_is_found_over_a_band() {
    // A cavity in transmission: its delay peaks at the resonance, where it is the longest.
    let mirror = [(2.3, 1064.0 / 9.2), (1.45, 1064.0 / 5.8)];
    let mut films: Vec<(f64, f64)> = std::iter::repeat_n(mirror, 8).flatten().collect();
    let back: Vec<(f64, f64)> = films.iter().rev().copied().collect();
    films.push((2.3, 1064.0 / 2.3));
    films.extend(back);
    let cavity = stack(1.52, &films, 1.52);
    let over = extremes(&cavity, &delay(Outgoing::Transmitted), &Light::normal(), (1030.0, 1100.0))
        .expect("extremes");
    assert!((over.max.wavelength_nm - 1064.0).abs() < 1e-3, "{:?}", over.max);
    assert!(over.max.value > 1000.0);
}

#[test]
fn what_has_no_phase_says_so() {
    let glass = stack(1.0, &[(1.38, 100.0)], 1.5);
    let phase = delay(Outgoing::Reflected);
    assert!(value(&glass, &phase, &Light::parallel(0.5, Polarisation::Mean), 550.0).is_err());
    let cone = Light { cone_half_angle_rad: 0.1, ..Light::normal() };
    assert!(value(&glass, &phase, &cone, 550.0).is_err());
    // Nothing comes back from no boundary at all.
    assert!(value(&stack(1.5, &[(1.5, 80.0)], 1.5), &phase, &Light::normal(), 550.0).is_err());
}
