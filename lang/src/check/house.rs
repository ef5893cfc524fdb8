//! Provenance and housekeeping: where numbers come from, and what nothing uses.

use super::{Options, optics};
use crate::finding::{Finding, HouseFact};
use crate::model::{Element, Material, Origin, Recipe, Stack};
use crate::project::Project;
use crate::source::Place;
use std::collections::BTreeSet;
use std::sync::Arc;

/// What is to be said of a recipe's materials.
pub(super) fn recipe_findings(recipe: &Recipe, stack: &Stack) -> Vec<Finding> {
    let mut findings = Vec::new();
    let mut films: BTreeSet<Place> = BTreeSet::new();
    for element in &stack.elements {
        let Element::Layer(layer) = element else { continue };
        for material in layer.material.materials() {
            if material.origin == Origin::Handbook && films.insert(material.place) {
                let fact = HouseFact::HandbookData {
                    material: material.name.clone(),
                    recipe: recipe.name.clone(),
                    defined: material.place,
                };
                findings.push(Finding::new(fact, layer.place));
            }
        }
    }
    for material in optics::materials(stack) {
        for bare in unsourced(&material) {
            let fact = HouseFact::Unsourced {
                material: bare.name.clone(),
                recipe: recipe.name.clone(),
                used_at: recipe.place,
            };
            let finding = Finding::new(fact, bare.place);
            if !findings.contains(&finding) {
                findings.push(finding);
            }
        }
    }
    findings
}

/// The materials without a source that a material's numbers rest on. One that is made of others rests on theirs,
/// and needs none of its own.
fn unsourced(material: &Arc<Material>) -> Vec<Arc<Material>> {
    if material.source.is_some() {
        return Vec::new();
    }
    if material.made_of.is_empty() {
        return vec![material.clone()];
    }
    material.made_of.iter().flat_map(unsourced).collect()
}

/// What is to be said of the project: names and specifications that nothing uses.
pub(super) fn project_findings(project: &Project, options: &Options) -> Vec<Finding> {
    let mut findings = Vec::new();
    for unused in &project.unused {
        // A `let` may be there for a file that was not read.
        if unused.imported || options.whole_project {
            let fact = HouseFact::Unused {
                name: unused.name.clone(),
                imported: unused.imported,
                remove: unused.remove,
            };
            findings.push(Finding::new(fact, unused.place));
        }
    }
    if options.whole_project {
        let recipes = project.modules.iter().flat_map(|module| &module.recipes);
        let met: BTreeSet<Place> = recipes
            .flat_map(|recipe| recipe.meets.iter().map(|(specification, _)| specification.place))
            .collect();
        for specification in project.modules.iter().flat_map(|module| &module.specifications) {
            if !met.contains(&specification.place) {
                let fact = HouseFact::Unmet { specification: specification.name.clone() };
                findings.push(Finding::new(fact, specification.place));
            }
        }
    }
    findings
}
