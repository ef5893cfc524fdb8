//! Random stacks against 50-digit arithmetic by another method.
//!
//! Sources of the method: M. Born, E. Wolf, Principles of Optics, 7th ed. (1999), 1.5.2 and 1.6.4;
//! P. Rouard, Ann. Phys. 11 (7), 291 (1937); G. G. Stokes, Proc. R. Soc. London 11, 545 (1862).

use serde::Deserialize;

use crate::data::{Comparison, Element, polarisation, reference, stack};

#[derive(Deserialize)]
struct File {
    parts: Vec<Part>,
}

#[derive(Deserialize)]
struct Part {
    name: String,
    incident: f64,
    elements: Vec<Element>,
    exit: [f64; 2],
    cases: Vec<Case>,
}

#[derive(Deserialize)]
struct Case {
    from: String,
    wavelength_nm: f64,
    angle_deg: f64,
    polarisation: String,
    reflectance: f64,
    transmittance: f64,
    absorptance: f64,
    /// None where nothing at all gets through.
    optical_density: Option<f64>,
    films: Vec<f64>,
}

/// Room for what other orders of the same sums would round.
const TOLERANCE: f64 = 1e-12;

/// Of an optical density, relative: beyond the critical angle a thick body with k of 1e-8 carries a power that is
/// the small real part of a nearly imaginary root, which keeps fewer digits.
const DENSITY: f64 = 1e-8;

#[test]
fn random_stacks_agree_with_fifty_digits() {
    let file: File = reference("stacks.json");
    let mut comparison = Comparison::default();
    for part in &file.parts {
        let forward = stack(part.incident, &part.elements, part.exit);
        for case in &part.cases {
            let backward = case.from == "exit";
            let stack = if backward { forward.reversed().expect("no texture") } else { forward.clone() };
            let what = format!(
                "{} from {} at {} nm, {} deg, {}",
                part.name, case.from, case.wavelength_nm, case.angle_deg, case.polarisation
            );
            let absorption = stack
                .absorption(case.wavelength_nm, case.angle_deg.to_radians(), polarisation(&case.polarisation))
                .unwrap_or_else(|e| panic!("{what}: {e}"));
            let response = absorption.response;
            comparison.add(&format!("{what}, R"), response.reflectance, case.reflectance, TOLERANCE);
            comparison.add(&format!("{what}, T"), response.transmittance, case.transmittance, TOLERANCE);
            comparison.add(&format!("{what}, A"), response.absorptance, case.absorptance, TOLERANCE);
            let density = -response.ln_transmittance / std::f64::consts::LN_10;
            match case.optical_density {
                Some(expected) => {
                    comparison.add(
                        &format!("{what}, density"),
                        density,
                        expected,
                        DENSITY * expected.max(1.0),
                    );
                }
                None => comparison.add(&format!("{what}, T of nothing"), response.transmittance, 0.0, 0.0),
            }

            let mut films: Vec<f64> = absorption.films.into_iter().flatten().collect();
            if backward {
                films.reverse();
            }
            assert_eq!(films.len(), case.films.len(), "{what}");
            for (at, (got, expected)) in films.iter().zip(&case.films).enumerate() {
                comparison.add(&format!("{what}, film {at}"), *got, *expected, TOLERANCE);
            }
        }
    }
    comparison.finish(3000);
}
