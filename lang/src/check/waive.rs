//! Waivers: what a recipe has decided to live with, until when, and whether it still needs to.

use crate::code::Code;
use crate::diagnostic::{Diagnostic, Waived};
use crate::finding::{Fact, Finding, HouseFact, LayerName, OpticsFact, Trouble, Verdict};
use crate::messages::render;
use crate::model::{LimitKind, Recipe, Waiver};
use crate::source::Sources;
use crate::syntax::ast::Date;
use std::sync::Arc;

/// Renders a recipe's findings with its waivers applied, and what is to be said of the waivers themselves.
///
/// `elsewhere` counts, for each waiver, the findings of the recipe's file that it covers.
pub(super) fn apply(
    recipe: &Recipe,
    findings: Vec<Finding>,
    elsewhere: &[usize],
    today: Date,
    sources: &Sources,
) -> (Vec<Diagnostic>, Vec<Diagnostic>) {
    let mut covered: Vec<usize> = elsewhere.to_vec();
    covered.resize(recipe.waivers.len(), 0);
    let mut own = Vec::with_capacity(findings.len());
    for finding in &findings {
        let mut diagnostic = render(finding, sources);
        for (number, waiver) in recipe.waivers.iter().enumerate() {
            if covers(waiver, diagnostic.code, &finding.fact) {
                covered[number] += 1;
                if diagnostic.waived.is_none() && !expired(waiver, today) {
                    diagnostic.waived = Some(waived(waiver));
                }
            }
        }
        own.push(diagnostic);
    }
    let mut about = Vec::new();
    for (waiver, covers) in recipe.waivers.iter().zip(covered) {
        let name = recipe.name.clone();
        let fact = match waiver.until {
            Some(until) if expired(waiver, today) => {
                HouseFact::WaiverExpired { code: waiver.code, until, recipe: name, covers }
            }
            _ if covers == 0 => {
                HouseFact::WaiverUnused { code: waiver.code, on: waiver.on.clone(), recipe: name }
            }
            _ => continue,
        };
        about.push(render(&Finding::new(fact, waiver.place), sources));
    }
    (own, about)
}

/// How many of the general findings of a recipe's file each of its waivers covers.
pub(super) fn file_covers(general: &[Finding], recipe: &Recipe) -> Vec<usize> {
    let here: Vec<&Finding> =
        general.iter().filter(|finding| finding.place.file == recipe.place.file).collect();
    let count = |waiver: &Waiver| {
        here.iter().filter(|finding| covers(waiver, code_of(&finding.fact), &finding.fact)).count()
    };
    recipe.waivers.iter().map(count).collect()
}

/// Marks the general findings that a waiver of a recipe in the same file covers.
pub(super) fn cover_file_findings(
    diagnostics: &mut [Diagnostic],
    general: &[Finding],
    recipes: &[&Arc<Recipe>],
    today: Date,
) {
    for recipe in recipes {
        for waiver in recipe.waivers.iter().filter(|waiver| !expired(waiver, today)) {
            for finding in general.iter().filter(|finding| finding.place.file == recipe.place.file) {
                let code = code_of(&finding.fact);
                if !covers(waiver, code, &finding.fact) {
                    continue;
                }
                let same = |diagnostic: &&mut Diagnostic| {
                    diagnostic.place == finding.place && diagnostic.code == code
                };
                for diagnostic in diagnostics.iter_mut().filter(same) {
                    diagnostic.waived.get_or_insert_with(|| waived(waiver));
                }
            }
        }
    }
}

fn code_of(fact: &Fact) -> Code {
    match fact {
        Fact::House(HouseFact::Unused { .. }) => Code::UnusedName,
        Fact::House(HouseFact::Unmet { .. }) => Code::UnmetSpecification,
        // Only those two stand outside a recipe and can be waived.
        _ => Code::Syntax,
    }
}

fn waived(waiver: &Waiver) -> Waived {
    let until = waiver.until.map(|date| format!("{:04}-{:02}-{:02}", date.year, date.month, date.day));
    Waived { reason: waiver.because.clone(), until, place: waiver.place }
}

fn expired(waiver: &Waiver, today: Date) -> bool {
    let day = |date: Date| (date.year, date.month, date.day);
    waiver.until.is_some_and(|until| day(today) > day(until))
}

fn covers(waiver: &Waiver, code: Code, fact: &Fact) -> bool {
    // A finding speaks for all copies of a layer in a repeat, so a waiver on one of them covers it.
    let base = waiver.on.as_ref().map(|on| on.split('[').next().unwrap_or(on));
    waiver.code == code && base.is_none_or(|on| about(fact).iter().any(|name| name == on))
}

/// The names that a finding is about: what may follow `on`.
fn about(fact: &Fact) -> Vec<String> {
    let layer = |layer: &LayerName| layer.name.iter().chain([&layer.material]).cloned().collect::<Vec<_>>();
    match fact {
        Fact::Process(fact) => match &fact.trouble {
            Trouble::TooThin { layer: name, .. }
            | Trouble::TooThick { layer: name, .. }
            | Trouble::BelowResolution { layer: name, .. } => layer(name),
            Trouble::NotDeposited { layer: name, material, .. } => {
                [layer(name), vec![material.clone()]].concat()
            }
            Trouble::Forbidden { layer: name, lower, .. } => [layer(name), vec![lower.clone()]].concat(),
            Trouble::TooHot { material, .. } | Trouble::OverCapacity { material, .. } => {
                vec![material.clone()]
            }
            Trouble::Limit { kind, .. } => {
                let word = LimitKind::ALL.iter().find(|(other, _)| other == kind);
                word.map(|(_, word)| (*word).to_owned()).into_iter().collect()
            }
        },
        Fact::Promise(fact) => {
            if let Verdict::Sensitive(sensitive) = &fact.verdict {
                // The layer's name, or what it is made of.
                return sensitive.layer.split(" (").next().map(str::to_owned).into_iter().collect();
            }
            let words = fact.requirement.text.split_whitespace();
            words
                .take_while(|word| word.starts_with(|first: char| first.is_alphabetic()))
                .map(str::to_owned)
                .collect()
        }
        Fact::House(fact) => match fact {
            HouseFact::HandbookData { material, .. } | HouseFact::Unsourced { material, .. } => {
                vec![material.clone()]
            }
            HouseFact::Unused { name, .. } => vec![name.clone()],
            HouseFact::Unmet { specification } => vec![specification.clone()],
            HouseFact::WaiverUnused { .. } | HouseFact::WaiverExpired { .. } => Vec::new(),
        },
        Fact::Optics(OpticsFact::OutsideData { name, .. } | OpticsFact::NotPhysical { name, .. }) => {
            vec![name.clone()]
        }
        Fact::Form(_) => Vec::new(),
    }
}
