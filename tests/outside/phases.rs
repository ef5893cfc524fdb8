//! Phases, group delays and their dispersion against numerical differentiation with 50 digits.
//!
//! Source: G. B. Airy, Phil. Mag. 2, 20 (1833), summed film by film in `phases.py`; M. Born, E. Wolf, Principles of Optics, 1.6.

use std::collections::BTreeMap;

use overcoat_engine::{Film, Index, Light, Oscillator, Outgoing, PhaseKind, Quantity, Stack, value};
use serde::Deserialize;

use crate::data::{Comparison, polarisation, reference};

#[derive(Deserialize)]
struct File {
    materials: Vec<Material>,
    stacks: Vec<Row>,
}

#[derive(Deserialize)]
struct Material {
    name: String,
    model: Model,
}

#[derive(Deserialize)]
#[serde(rename_all = "snake_case")]
enum Model {
    Constant([String; 2]),
    Sellmeier(Vec<[String; 2]>),
    Cauchy(Vec<String>),
    Drude([String; 3]),
}

#[derive(Deserialize)]
struct Row {
    incident: String,
    films: Vec<(String, String)>,
    exit: String,
    angle_rad: String,
    polarised: String,
    wavelength_nm: String,
    reflected: [f64; 3],
    transmitted: [f64; 3],
}

fn number(text: &str) -> f64 {
    text.parse().expect("a number")
}

fn index(model: &Model) -> Index {
    let index = match model {
        Model::Constant([n, k]) => Index::constant(number(n), number(k)),
        Model::Sellmeier(terms) => {
            let terms: Vec<(f64, f64)> = terms.iter().map(|[b, c]| (number(b), number(c))).collect();
            Index::sellmeier(&terms)
        }
        Model::Cauchy(coefficients) => {
            let coefficients: Vec<f64> = coefficients.iter().map(|text| number(text)).collect();
            Index::cauchy(&coefficients)
        }
        Model::Drude([background, plasma, width]) => {
            let term = Oscillator::Drude { plasma_ev: number(plasma), width_ev: number(width) };
            Index::oscillators(number(background), vec![term])
        }
    };
    index.expect("a physical index")
}

#[test]
fn phases_and_their_derivatives_agree_with_arbitrary_precision() {
    let file: File = reference("phases.json");
    let materials: BTreeMap<&str, Index> =
        file.materials.iter().map(|material| (material.name.as_str(), index(&material.model))).collect();
    let mut comparison = Comparison::default();
    for row in &file.stacks {
        let of = |name: &str| materials[name].clone();
        let film = |(name, nm): &(String, String)| Film::new(of(name), number(nm));
        let coatings = vec![row.films.iter().map(film).collect()];
        let stack = Stack {
            facets_rad: None,
            incident: of(&row.incident),
            coatings,
            bodies: Vec::new(),
            exit: of(&row.exit),
        };
        let light = Light::parallel(number(&row.angle_rad), polarisation(&row.polarised));
        for (outgoing, expected) in
            [(Outgoing::Reflected, row.reflected), (Outgoing::Transmitted, row.transmitted)]
        {
            let kinds = [PhaseKind::Phase { aim_rad: expected[0] }, PhaseKind::Delay, PhaseKind::Dispersion];
            for (kind, expected) in kinds.into_iter().zip(expected) {
                let got = value(&stack, &Quantity::Phase(outgoing, kind), &light, number(&row.wavelength_nm))
                    .expect("a value");
                let what = format!("{outgoing:?} {kind:?}, {} rad {}", row.angle_rad, row.polarised);
                comparison.add(&what, got, expected, 1e-6 * expected.abs().max(1e-3));
            }
        }
    }
    comparison.finish(190);
}
