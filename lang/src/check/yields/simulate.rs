//! A recipe's parts one by one, for those who look at them themselves.

use super::promised::PARTS;
use super::{Judgement, Simulation};
use crate::check::optics::Optics;
use crate::check::require;
use crate::model::{Quantity, Recipe, Spread};
use crate::report::{Column, Part, Watch, YieldReport};
use std::sync::Arc;

/// Evaluates a recipe's parts, as many as asked for, or as its own `require yield` says, or 2 000.
///
/// # Errors
///
/// Why the recipe has no yield, as a clause.
pub fn simulate(recipe: &Recipe, parts: Option<u32>, watch: &mut dyn Watch) -> Result<YieldReport, String> {
    let stack = recipe.stack.as_ref().filter(|_| recipe.sound());
    let stack = stack.ok_or("its stack or a material can't be understood; `overcoat check` says why")?;
    let beams = require::Light::of(recipe);
    let optics = Optics::new(stack, &beams.spans, beams.angle).map_err(|error| error.to_string())?;
    let optics = optics.ok_or("a material has no optical constants")?;
    let mut counted = Vec::new();
    let mut own = None;
    for (requirement, _) in recipe.all_requirements() {
        if matches!(requirement.quantity, Quantity::Yield) {
            own = own.max(requirement.parts);
        } else if !requirement.nominal {
            let judged = require::evaluate(requirement, stack, &optics);
            let judged = judged
                .map_err(|_| format!("`{}` has no value; `overcoat check` says why", requirement.text))?;
            counted.push((requirement.clone(), judged));
        }
    }
    if counted.is_empty() {
        return Err("it has no requirement that counts".to_owned());
    }
    let failed = |_| "a part of it can't be evaluated".to_owned();
    let simulation = Simulation::new(recipe, stack, &optics, &counted).map_err(failed)?;
    let draws = &simulation.draws;
    let column = |draw: &super::draws::Draw| Column {
        cause: draws.causes[draw.cause].clone(),
        layer: draw.layer.and_then(|element| stack.layer(element)).map(|layer| layer.call()),
        run: draw.run,
    };
    let columns: Vec<Column> = draws.draws.iter().map(column).collect();
    let requirements: Vec<Arc<_>> = counted.iter().map(|counted| counted.0.clone()).collect();
    let parts = parts.or(own).unwrap_or(PARTS);
    watch.begin(&columns, &requirements, if columns.is_empty() { 1 } else { parts });
    let mut tell = |judgement: &Judgement| {
        let amounts = judgement.units.iter().zip(&columns).map(|(unit, column)| match column.cause.spread {
            Spread::Absolute(size) | Spread::Relative(size) => unit * size,
        });
        let values =
            judgement.verdicts.iter().map(|verdict| Some(verdict.value).filter(|value| value.is_finite()));
        watch.part(&Part {
            number: judgement.number + 1,
            draws: amounts.collect(),
            values: values.collect(),
            met: judgement.verdicts.iter().all(|verdict| verdict.margin >= 0.0),
        })
    };
    simulation.report(parts, &mut tell).map_err(failed)
}
