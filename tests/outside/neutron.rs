//! s-polarised reflectance against a neutron-reflectometry package, whose equation is the same.
//!
//! Sources: refnx 0.1.67, A. R. J. Nelson, S. W. Prescott, J. Appl. Cryst. 52, 193 (2019);
//! F. Abelès, J. Phys. Radium 11, 307 (1950).

use overcoat_engine::Polarisation;
use serde::Deserialize;

use crate::data::{Comparison, constant, films, reference};

#[derive(Deserialize)]
struct File {
    parts: Vec<Part>,
}

#[derive(Deserialize)]
struct Part {
    incident: f64,
    films: Vec<([f64; 2], f64)>,
    exit: [f64; 2],
    /// Wavelength in nm, angle in degrees, reflectance.
    cases: Vec<(f64, f64, f64)>,
}

#[test]
fn s_polarised_light_reflects_as_neutrons_do() {
    let file: File = reference("abeles_refnx.json");
    let mut comparison = Comparison::default();
    for (number, part) in file.parts.iter().enumerate() {
        let layers = part.films.iter().map(|&(index, thickness)| (constant(index), thickness)).collect();
        let stack = films(constant([part.incident, 0.0]), layers, constant(part.exit));
        for &(wavelength_nm, angle_deg, expected) in &part.cases {
            let response = stack
                .response(wavelength_nm, angle_deg.to_radians(), Polarisation::S)
                .expect("a well-formed stack");
            let what = format!("part {number} at {wavelength_nm} nm, {angle_deg} deg");
            comparison.add(&what, response.reflectance, expected, 1e-11);
        }
    }
    comparison.finish(200);
}
