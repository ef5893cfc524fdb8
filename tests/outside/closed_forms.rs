//! Textbook stacks against the closed formula that belongs to each.
//!
//! The sources are named beside each stack in `closed_forms.json`; a message of this test repeats them.

use serde::Deserialize;

use crate::data::{Comparison, Element, polarisation, reference, stack};

#[derive(Deserialize)]
struct File {
    stacks: Vec<Entry>,
}

#[derive(Deserialize)]
struct Entry {
    name: String,
    source: String,
    incident: f64,
    elements: Vec<Element>,
    exit: [f64; 2],
    wavelength_nm: f64,
    angle_deg: f64,
    polarisation: String,
    reflectance: Option<f64>,
    transmittance: Option<f64>,
    tolerance: f64,
}

#[test]
fn textbook_stacks_meet_their_formulas() {
    let file: File = reference("closed_forms.json");
    let mut comparison = Comparison::default();
    for entry in &file.stacks {
        let what = format!("{} ({})", entry.name, entry.source);
        let response = stack(entry.incident, &entry.elements, entry.exit)
            .response(entry.wavelength_nm, entry.angle_deg.to_radians(), polarisation(&entry.polarisation))
            .unwrap_or_else(|e| panic!("{what}: {e}"));
        for (letter, got, expected) in [
            ("R", response.reflectance, entry.reflectance),
            ("T", response.transmittance, entry.transmittance),
        ] {
            if let Some(expected) = expected {
                comparison.add(&format!("{what}, {letter}"), got, expected, entry.tolerance);
            }
        }
    }
    comparison.finish(90);
}
