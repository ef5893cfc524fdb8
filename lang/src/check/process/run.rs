//! What a whole run asks of the chamber: its limits, and what its sources hold.

use super::Shop;
use crate::finding::{Finding, SideName, Trouble};
use crate::model::{CoatedSide, Layer, LayerMaterial, LimitKind, Material};
use std::collections::BTreeMap;
use std::sync::Arc;

/// How far a sum may be beyond a limit, as a share of the limit: binary fractions.
const ROUNDING: f64 = 1e-9;

/// What the layers of one run add up to.
#[derive(Default)]
struct Sums {
    layers: usize,
    /// nm.
    thickness: f64,
    /// s, of what is known.
    duration: f64,
    /// N/m, of what is known.
    force: f64,
    /// Materials without a rate, and without a stress.
    no_rate: Vec<String>,
    no_stress: Vec<String>,
    /// nm of each material.
    used: BTreeMap<String, (Arc<Material>, f64)>,
}

/// Checks a run; returns its time in s where every rate is known.
pub(super) fn check(
    shop: &Shop<'_>,
    side: &CoatedSide,
    name: SideName,
    findings: &mut Vec<Finding>,
) -> Option<f64> {
    let sums = sum(shop, side);
    capacities(shop, &sums, name, findings);
    for limit in &shop.chamber.limits {
        let none = Vec::new();
        let (value, unknown) = match limit.kind {
            LimitKind::Layers => (sums.layers as f64, &none),
            LimitKind::Thickness => (sums.thickness, &none),
            LimitKind::Duration => (sums.duration, &sums.no_rate),
            LimitKind::FilmForce => (sums.force, &sums.no_stress),
            // Each source answers for itself.
            LimitKind::Temperature => continue,
        };
        let above = limit.range.max.filter(|max| value > max + max.abs() * ROUNDING);
        let below = limit.range.min.filter(|min| value < min - min.abs() * ROUNDING);
        if let Some(bound) = above.or(below) {
            let least = above.is_none();
            let unknown = unknown.clone();
            let trouble = Trouble::Limit { side: name, kind: limit.kind, value, bound, least, unknown };
            findings.push(shop.find(trouble, limit.place, shop.chamber_at));
        }
    }
    sums.no_rate.is_empty().then_some(sums.duration)
}

fn sum(shop: &Shop<'_>, side: &CoatedSide) -> Sums {
    let chamber = shop.chamber;
    let mut sums =
        Sums { duration: chamber.overhead_per_run.map_or(0.0, |(time, _)| time), ..Sums::default() };
    for layer in shop.layers(side) {
        sums.layers += 1;
        sums.thickness += layer.thickness;
        sums.duration += chamber.overhead_per_layer.map_or(0.0, |(time, _)| time);
        for (material, share) in shares(layer) {
            let nm = layer.thickness * share;
            sums.used.entry(format!("{:?}", material.place)).or_insert_with(|| (material.clone(), 0.0)).1 +=
                nm;
            let rate = chamber
                .deposits
                .iter()
                .find(|deposit| deposit.material.is(material))
                .and_then(|deposit| deposit.rate);
            // Two sources at once, each at a rate that changes: the recipe does not say how long that takes.
            let rate = rate.filter(|_| share == 1.0);
            match rate {
                Some(rate) => sums.duration += nm / rate,
                None => note(&mut sums.no_rate, &material.name),
            }
            match material.stress {
                // MPa · nm = 10⁻³ N/m (G. G. Stoney, Proc. R. Soc. London A 82, 172 (1909): force per width = stress × thickness).
                Some(stress) => sums.force += stress * nm * 1e-3,
                None => note(&mut sums.no_stress, &material.name),
            }
        }
    }
    sums
}

fn note(names: &mut Vec<String>, name: &str) {
    if !names.iter().any(|other| other == name) {
        names.push(name.to_owned());
    }
}

/// The materials of a layer with their shares of its thickness: half each where one runs into the other.
fn shares(layer: &Layer) -> Vec<(&Arc<Material>, f64)> {
    match &layer.material {
        LayerMaterial::Plain(material) => vec![(material, 1.0)],
        LayerMaterial::Graded(graded) => vec![(&graded.front, 0.5), (&graded.back, 0.5)],
    }
}

fn capacities(shop: &Shop<'_>, sums: &Sums, side: SideName, findings: &mut Vec<Finding>) {
    for (material, needed) in sums.used.values() {
        let deposit = shop.chamber.deposits.iter().find(|deposit| deposit.material.is(material));
        let Some((holds, said_at)) = deposit.and_then(|deposit| deposit.capacity) else { continue };
        if *needed > holds * (1.0 + ROUNDING) {
            let trouble =
                Trouble::OverCapacity { side, material: material.name.clone(), needed: *needed, holds };
            findings.push(shop.find(trouble, said_at, shop.chamber_at));
        }
    }
}

/// The sources that a recipe uses and that run hotter than the chamber allows, each once.
pub(super) fn check_temperatures(shop: &Shop<'_>, sides: &[CoatedSide], findings: &mut Vec<Finding>) {
    let limit = shop.chamber.limits.iter().find(|limit| limit.kind == LimitKind::Temperature);
    let Some((most, limit)) = limit.and_then(|limit| Some((limit.range.max?, limit))) else { return };
    for deposit in &shop.chamber.deposits {
        let Some((temperature, source_at)) = deposit.temperature else { continue };
        let uses = |layer: &Layer| layer.material.materials().any(|material| material.is(&deposit.material));
        if temperature > most && sides.iter().any(|side| shop.layers(side).any(uses)) {
            let trouble =
                Trouble::TooHot { material: deposit.material.name.clone(), temperature, most, source_at };
            findings.push(shop.find(trouble, limit.place, shop.chamber_at));
        }
    }
}
