//! The engine against closed formulas and handbook figures.
//!
//! Every value was computed from the formula named beside it in 30- to 60-digit arithmetic, apart from the
//! engine; those marked 'matrix' have no closed formula and were computed by two separate methods. The
//! sources are named from memory: authors and years are believed right, sections and pages are not verified.

// The figures keep all the digits that they were computed to, final zeros too.
#![allow(clippy::excessive_precision)]

mod dispersion;
mod films;
mod interfaces;
mod mixtures;
mod oblique;
mod periodic;
mod plates;

use overcoat_engine::{Body, Film, Index, Polarisation, Response, Stack};

/// The light goes from the first to the last medium; between them (n, k, nm).
fn coated(incident: f64, films: &[(f64, f64, f64)], exit: (f64, f64)) -> Stack {
    let films = films.iter().map(|&(n, k, thickness_nm)| Film::new(index(n, k), thickness_nm)).collect();
    Stack {
        facets_rad: None,
        incident: index(incident, 0.0),
        coatings: vec![films],
        bodies: vec![],
        exit: index(exit.0, exit.1),
    }
}

/// Plates of (n, k, nm) in air, with gaps of air as thick as they are between them.
fn plates(count: usize, (n, k): (f64, f64), thickness_nm: f64) -> Stack {
    let (glass, air) = (index(n, k), index(1.0, 0.0));
    let body = |at: usize| Body {
        index: if at.is_multiple_of(2) { glass.clone() } else { air.clone() },
        thickness_nm,
    };
    let bodies: Vec<Body> = (0..2 * count - 1).map(body).collect();
    Stack {
        facets_rad: None,
        incident: air.clone(),
        coatings: vec![vec![]; bodies.len() + 1],
        bodies,
        exit: air.clone(),
    }
}

fn index(n: f64, k: f64) -> Index {
    Index::constant(n, k).expect("a valid index")
}

fn at(stack: &Stack, wavelength_nm: f64, degrees: f64, polarisation: Polarisation) -> Response {
    stack.response(wavelength_nm, degrees.to_radians(), polarisation).expect("a response")
}

fn normal(stack: &Stack, wavelength_nm: f64) -> Response {
    at(stack, wavelength_nm, 0.0, Polarisation::Mean)
}

/// Within `tolerance` absolutely.
#[track_caller]
fn near(what: &str, found: f64, expected: f64, tolerance: f64) {
    assert!((found - expected).abs() <= tolerance, "{what}: {found:e}, expected {expected:e}");
}

/// Within 1e-12 absolutely.
#[track_caller]
fn same(what: &str, found: f64, expected: f64) {
    near(what, found, expected, 1e-12);
}
