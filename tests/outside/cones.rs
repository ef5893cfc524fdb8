//! Beams that fill a cone against a sum over rays with explicit vectors.
//!
//! Sources: projected solid angle, ISO 80000-7:2019; the turn of a polarised beam from its axis to its rays,
//! B. Richards, E. Wolf, Proc. R. Soc. A 253, 358 (1959); numpy 2.4.6.

use overcoat_engine::{Light, Quantity, Stack, value};
use serde::Deserialize;

use crate::data::{Comparison, constant, films, polarisation, reference};

#[derive(Deserialize)]
struct File {
    parts: Vec<Part>,
    beams: Vec<Beam>,
}

#[derive(Deserialize)]
struct Part {
    name: String,
    incident: f64,
    films: Vec<([f64; 2], f64)>,
    exit: [f64; 2],
}

#[derive(Deserialize)]
struct Beam {
    part: String,
    wavelength_nm: f64,
    axis_deg: f64,
    half_angle_deg: f64,
    s: f64,
    p: f64,
    mean: f64,
}

fn stack(part: &Part) -> Stack {
    let layers = part.films.iter().map(|&(index, thickness)| (constant(index), thickness)).collect();
    films(constant([part.incident, 0.0]), layers, constant(part.exit))
}

#[test]
fn cones_agree_with_a_sum_over_rays() {
    let file: File = reference("cone.json");
    let mut comparison = Comparison::default();
    for beam in &file.beams {
        let part = file.parts.iter().find(|part| part.name == beam.part).expect("a part of the file");
        for (name, expected) in [("s", beam.s), ("p", beam.p), ("mean", beam.mean)] {
            let light = Light {
                polarisation: polarisation(name),
                angle_rad: beam.axis_deg.to_radians(),
                cone_half_angle_rad: beam.half_angle_deg.to_radians(),
            };
            let what = format!(
                "{} at {} nm, {} deg, cone {} deg, {name}",
                part.name, beam.wavelength_nm, beam.axis_deg, beam.half_angle_deg
            );
            let got = value(&stack(part), &Quantity::Reflectance, &light, beam.wavelength_nm)
                .unwrap_or_else(|e| panic!("{what}: {e}"));
            comparison.add(&what, got, expected, 1e-9);
        }
    }
    comparison.finish(180);
}
