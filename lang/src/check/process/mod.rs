//! What a recipe asks of its chamber: each coated side is one run.

mod layers;
mod run;

use crate::finding::{Finding, LayerName, ProcessFact, SideName, Trouble};
use crate::model::{Chamber, CoatedSide, Layer, Recipe, Stack, Thickness};
use crate::report::ProcessReport;
use crate::source::Place;

/// A recipe in its chamber.
struct Shop<'a> {
    recipe: &'a Recipe,
    stack: &'a Stack,
    chamber: &'a Chamber,
    /// Where the recipe names the chamber.
    chamber_at: Place,
}

/// Compares every run of a recipe with its chamber, and sums up what the runs need.
pub(super) fn check(recipe: &Recipe, stack: &Stack, findings: &mut Vec<Finding>) -> ProcessReport {
    let sides = stack.sides();
    let mut duration = None;
    if let Some((chamber, chamber_at)) = &recipe.chamber {
        let shop = Shop { recipe, stack, chamber, chamber_at: *chamber_at };
        let mut total = Some(0.0);
        for (number, side) in sides.iter().enumerate() {
            let name = match (sides.len(), number) {
                (1, _) => SideName::Only,
                (_, 0) => SideName::Front,
                (_, number) => SideName::Back(number + 1),
            };
            layers::check(&shop, side, findings);
            let run = run::check(&shop, side, name, findings);
            total = total.zip(run).map(|(total, run)| total + run);
        }
        duration = total.filter(|_| !sides.is_empty());
        run::check_temperatures(&shop, &sides, findings);
        // Two sides that break the same limit of a layer say so once for each place.
        dedup(findings);
    }
    ProcessReport {
        layers: stack.layers().count(),
        thickness: stack.layers().map(|layer| layer.thickness).sum(),
        duration,
    }
}

fn dedup(findings: &mut Vec<Finding>) {
    let mut kept: Vec<Finding> = Vec::with_capacity(findings.len());
    for finding in findings.drain(..) {
        if !kept.contains(&finding) {
            kept.push(finding);
        }
    }
    *findings = kept;
}

impl Shop<'_> {
    fn find(&self, trouble: Trouble, said_at: Place, place: Place) -> Finding {
        let fact = ProcessFact {
            recipe: self.recipe.name.clone(),
            chamber: self.chamber.name.clone(),
            said_at,
            trouble,
        };
        Finding::new(fact, place)
    }

    /// The layers of a side in the order of deposition.
    fn layers<'s>(&'s self, side: &'s CoatedSide) -> impl Iterator<Item = &'s Layer> {
        side.layers.iter().filter_map(|index| self.stack.layer(*index))
    }
}

/// A layer as a message calls it.
pub(super) fn name_of(layer: &Layer) -> LayerName {
    // Inside a repeat one statement stands for many layers: its number is that of the first.
    LayerName {
        name: layer.name.as_ref().and_then(|name| name.split('[').next()).map(str::to_owned),
        material: layer.material.name(),
        number: layer.number,
        copies: layer.copies,
        thickness: layer.thickness,
        thickness_place: (layer.written == Thickness::Length).then_some(layer.thickness_place),
    }
}
