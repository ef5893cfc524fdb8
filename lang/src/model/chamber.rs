//! What one deposition machine can do.

use super::Material;
use crate::source::Place;
use crate::syntax::ast::{Each, SpreadKind};
use std::sync::Arc;

/// A chamber.
#[derive(Clone, Debug)]
pub struct Chamber {
    /// Its name.
    pub name: String,
    /// Its title, for people.
    pub title: Option<String>,
    /// Its name's place: its identity.
    pub place: Place,
    /// The `##` lines before it.
    pub description: Vec<String>,
    /// Its sources.
    pub deposits: Vec<Deposit>,
    /// How the angle of incidence varies.
    pub angle_variations: Vec<Variation>,
    /// s per run, with its place.
    pub overhead_per_run: Option<(f64, Place)>,
    /// s per layer, with its place.
    pub overhead_per_layer: Option<(f64, Place)>,
    /// The controller's step in nm, with its place.
    pub resolution: Option<(f64, Place)>,
    /// Films that must not touch.
    pub forbids: Vec<Forbid>,
    /// Its limits.
    pub limits: Vec<Limit>,
}

/// One source of a chamber.
#[derive(Clone, Debug)]
pub struct Deposit {
    /// What it deposits.
    pub material: Arc<Material>,
    /// The statement.
    pub place: Place,
    /// nm/s.
    pub rate: Option<f64>,
    /// What one layer may be, nm, with its place.
    pub thickness: Option<(f64, f64, Place)>,
    /// How a layer's thickness varies.
    pub thickness_variations: Vec<Variation>,
    /// How the index varies; values are plain differences of n.
    pub index_variations: Vec<Variation>,
    /// °C, with its place.
    pub temperature: Option<(f64, Place)>,
    /// nm per run, with its place.
    pub capacity: Option<(f64, Place)>,
    /// Reading at the part over reading at the sensor.
    pub tooling: Option<f64>,
}

/// Half width or standard deviation.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Spread {
    /// Of a thickness in nm, an index, or an angle in rad.
    Absolute(f64),
    /// A fraction of the layer's own thickness.
    Relative(f64),
}

/// One thing that a process varies.
#[derive(Clone, Debug, PartialEq)]
pub struct Variation {
    /// The distribution.
    pub kind: SpreadKind,
    /// Its size.
    pub spread: Spread,
    /// How often it is drawn.
    pub each: Each,
    /// The statement.
    pub place: Place,
}

/// Films that must not touch.
#[derive(Clone, Debug)]
pub struct Forbid {
    /// The later film.
    pub upper: Arc<Material>,
    /// What it would lie on.
    pub lower: Arc<Material>,
    /// Why.
    pub because: Option<String>,
    /// The statement.
    pub place: Place,
}

/// One limit of a chamber.
#[derive(Clone, Debug, PartialEq)]
pub struct Limit {
    /// What is limited.
    pub kind: LimitKind,
    /// How.
    pub range: LimitRange,
    /// The statement.
    pub place: Place,
}

/// What a chamber can limit; each coated side is one run.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum LimitKind {
    /// Layers of a run.
    Layers,
    /// All layers of a run together, nm.
    Thickness,
    /// A run's time, s.
    Duration,
    /// The hottest source of a run, °C.
    Temperature,
    /// Stress times thickness over the layers of a side, N/m.
    FilmForce,
}

impl LimitKind {
    /// All of them with the word that the language has.
    pub const ALL: &'static [(LimitKind, &'static str)] = &[
        (LimitKind::Layers, "layers"),
        (LimitKind::Thickness, "thickness"),
        (LimitKind::Duration, "duration"),
        (LimitKind::Temperature, "temperature"),
        (LimitKind::FilmForce, "film_force"),
    ];
}

/// The range that a limit leaves.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct LimitRange {
    /// Least.
    pub min: Option<f64>,
    /// Greatest.
    pub max: Option<f64>,
}
