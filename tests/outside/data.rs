//! Reading the reference files and building stacks from them.

use std::path::PathBuf;

use overcoat_engine::{Body, Film, Index, Polarisation, Stack};
use serde::Deserialize;
use serde::de::DeserializeOwned;

fn root() -> PathBuf {
    PathBuf::from(env!("CARGO_MANIFEST_DIR"))
}

/// A file of `tests/reference/data`.
pub(crate) fn reference<T: DeserializeOwned>(name: &str) -> T {
    let path = root().join("tests/reference/data").join(name);
    let text = std::fs::read_to_string(&path).unwrap_or_else(|e| panic!("{}: {e}", path.display()));
    serde_json::from_str(&text).unwrap_or_else(|e| panic!("{name}: {e}"))
}

pub(crate) fn constant([n, k]: [f64; 2]) -> Index {
    Index::constant(n, k).expect("a physical index")
}

/// Films between two half-spaces.
pub(crate) fn films(incident: Index, films: Vec<(Index, f64)>, exit: Index) -> Stack {
    let films = films.into_iter().map(|(index, thickness_nm)| Film::new(index, thickness_nm)).collect();
    Stack { facets_rad: None, incident, coatings: vec![films], bodies: Vec::new(), exit }
}

#[derive(Deserialize)]
#[serde(rename_all = "snake_case")]
pub(crate) enum Kind {
    Film,
    Body,
}

/// A film or a thick body of a reference stack.
#[derive(Deserialize)]
pub(crate) struct Element {
    kind: Kind,
    index: [f64; 2],
    thickness_nm: f64,
}

/// The engine's stack for elements in the light's order.
pub(crate) fn stack(incident: f64, elements: &[Element], exit: [f64; 2]) -> Stack {
    let mut coatings = vec![Vec::new()];
    let mut bodies = Vec::new();
    for element in elements {
        let (index, thickness_nm) = (constant(element.index), element.thickness_nm);
        match element.kind {
            Kind::Film => coatings.last_mut().expect("never empty").push(Film::new(index, thickness_nm)),
            Kind::Body => {
                bodies.push(Body { index, thickness_nm });
                coatings.push(Vec::new());
            }
        }
    }
    Stack { facets_rad: None, incident: constant([incident, 0.0]), coatings, bodies, exit: constant(exit) }
}

pub(crate) fn polarisation(name: &str) -> Polarisation {
    match name {
        "s" => Polarisation::S,
        "p" => Polarisation::P,
        "mean" => Polarisation::Mean,
        other => panic!("no such polarisation: {other}"),
    }
}

/// Compares many figures and tells of every one that is off.
#[derive(Default)]
pub(crate) struct Comparison {
    compared: usize,
    off: Vec<String>,
}

impl Comparison {
    pub(crate) fn add(&mut self, what: &str, got: f64, expected: f64, tolerance: f64) {
        self.compared += 1;
        let deviation = (got - expected).abs();
        // Not a number is off as well.
        if deviation.is_nan() || deviation > tolerance {
            self.off.push(format!("{what}: {got} instead of {expected}, off by {deviation:e}"));
        }
    }

    pub(crate) fn finish(self, at_least: usize) {
        let off = self.off.join("\n");
        assert!(self.off.is_empty(), "{} of {} are off:\n{off}", self.off.len(), self.compared);
        assert!(self.compared >= at_least, "only {} figures were compared", self.compared);
    }
}
