//! Extremes over bands and angles against closed forms and dense sampling.
//!
//! Sources of the closed forms: M. Born, E. Wolf, Principles of Optics, 7th ed. (1999), 1.5.3 (Brewster's
//! angle), 1.6.4 (films), 1.6.5 (mirrors), 7.6 (cavities). The rest: 700 001 samples of Airy's sum and a
//! bracketed search by scipy 1.17.1.

use overcoat_engine::{
    Extremes, Index, Light, Polarisation, Quantity, Stack, extremes, extremes_over_angles,
};
use serde::Deserialize;

use crate::data::{Comparison, constant, films, polarisation, reference};

#[derive(Deserialize)]
struct File {
    cavity_half_maxima_nm: [f64; 2],
    cases: Vec<Case>,
}

#[derive(Deserialize)]
struct Case {
    name: String,
    incident: f64,
    films: Vec<(Medium, f64)>,
    exit: [f64; 2],
    polarisation: String,
    wavelengths_nm: Span,
    angles_deg: Span,
    least: Place,
    greatest: Place,
}

#[derive(Deserialize)]
#[serde(untagged)]
enum Medium {
    Constant([f64; 2]),
    Cauchy { cauchy: Vec<f64> },
}

#[derive(Deserialize)]
#[serde(untagged)]
enum Span {
    One(f64),
    Range(f64, f64),
}

impl Span {
    fn ends(&self) -> (f64, f64) {
        match *self {
            Span::One(value) => (value, value),
            Span::Range(low, high) => (low, high),
        }
    }
}

#[derive(Deserialize)]
struct Place {
    value: f64,
    wavelength_nm: f64,
    angle_deg: f64,
}

fn index(medium: &Medium) -> Index {
    match medium {
        Medium::Constant(index) => constant(*index),
        Medium::Cauchy { cauchy } => Index::cauchy(cauchy).expect("valid coefficients"),
    }
}

fn stack(case: &Case) -> Stack {
    let layers = case.films.iter().map(|(medium, thickness)| (index(medium), *thickness)).collect();
    films(constant([case.incident, 0.0]), layers, constant(case.exit))
}

fn search(case: &Case) -> Extremes {
    let (from, to) = case.angles_deg.ends();
    let light = Light::parallel(from.to_radians(), polarisation(&case.polarisation));
    let (stack, band) = (stack(case), case.wavelengths_nm.ends());
    let found = if from == to {
        extremes(&stack, &Quantity::Reflectance, &light, band)
    } else {
        let angles = (from.to_radians(), to.to_radians());
        extremes_over_angles(&stack, &Quantity::Reflectance, &light, band, angles)
    };
    found.unwrap_or_else(|e| panic!("{}: {e}", case.name))
}

#[test]
fn extremes_are_found_and_not_sampled_past() {
    let file: File = reference("extremes.json");
    let mut comparison = Comparison::default();
    for case in &file.cases {
        let found = search(case);
        for (which, got, expected) in
            [("least", found.min, &case.least), ("greatest", found.max, &case.greatest)]
        {
            let what = format!("{}, {which}", case.name);
            comparison.add(&what, got.value, expected.value, 1e-8);
            // Many fringes of one height, or the flat top of a mirror, have no one place.
            if case.name.contains("fringes") || case.name.contains("cavity") && which == "greatest" {
                continue;
            }
            comparison.add(&format!("{what}, nm"), got.wavelength_nm, expected.wavelength_nm, 0.02);
            comparison.add(&format!("{what}, deg"), got.angle_rad.to_degrees(), expected.angle_deg, 0.02);
        }
    }
    comparison.finish(60);
}

/// The line between the glasses is 0.008 nm wide: its half maxima, by roots with 40 digits.
#[test]
fn a_narrow_line_has_its_width() {
    let file: File = reference("extremes.json");
    let case = file.cases.iter().find(|case| case.name == "cavity between glasses").expect("in the file");
    let stack = stack(case);
    let mut comparison = Comparison::default();
    for wavelength_nm in file.cavity_half_maxima_nm {
        let response = stack.response(wavelength_nm, 0.0, Polarisation::S).expect("a well-formed stack");
        comparison.add(&format!("T at {wavelength_nm} nm"), response.transmittance, 0.5, 1e-8);
    }
    comparison.finish(2);
}
