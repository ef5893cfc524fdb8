//! The requirements of a recipe: each with its value, its margin and where the extreme is.

use super::optics::{self, Optics, Trouble};
use super::quantity;
use super::{Options, blame, yields};
use crate::finding::{Fact, Finding, OpticsFact, PromiseFact, Remedy, Untold, Verdict};
use crate::model::{Angles, Bound, Element, Quantity, Recipe, Requirement, Stack};
use crate::report::{At, RequirementReport, YieldReport};
use crate::source::Place;
use overcoat_engine as engine;
use rayon::prelude::*;
use std::f64::consts::FRAC_PI_2;
use std::sync::Arc;

/// A value that may be the one nearest to breaking a bound.
#[derive(Clone, Copy, Debug)]
pub(super) struct Candidate {
    /// The value.
    pub(super) value: f64,
    /// Where it is.
    pub(super) at: At,
}

/// Everything that evaluating one requirement needs.
pub(super) struct Asked<'a> {
    pub(super) requirement: &'a Requirement,
    pub(super) stack: &'a Stack,
    pub(super) optics: &'a Optics,
    /// The stack as the requirement's light meets it.
    pub(super) engine: &'a engine::Stack,
}

/// Evaluates every requirement of a sound recipe.
pub(super) fn check(
    recipe: &Recipe,
    stack: &Stack,
    options: &Options,
    findings: &mut Vec<Finding>,
) -> (Vec<RequirementReport>, Option<YieldReport>) {
    let light = Light::of(recipe);
    let optics = Optics::new(stack, &light.spans, light.angle);
    let chamber = recipe.chamber.as_ref().map(|(chamber, _)| &**chamber);
    let mut reports = Vec::new();
    let mut missed = Vec::new();
    // What the yield counts, and whether all of it has a value.
    let (mut counted, mut all_valued) = (Vec::new(), true);
    let all: Vec<(&Arc<Requirement>, Place)> = recipe.all_requirements().collect();
    let result = |(requirement, _): &(&Arc<Requirement>, Place)| match &optics {
        // A yield is that of all the others: they come first.
        _ if matches!(requirement.quantity, Quantity::Yield) => None,
        Ok(Some(optics)) => Some(evaluate(requirement, stack, optics)),
        Ok(None) => Some(Err(Vec::new())),
        Err(error) => Some(Err(vec![optics::explain(error, &optics::materials(stack), requirement, stack)])),
    };
    let results: Vec<Option<Result<Judged, Vec<Trouble>>>> = all.par_iter().map(result).collect();
    for ((requirement, asked_at), result) in all.into_iter().zip(results) {
        let Some(result) = result else {
            reports.push(blank(requirement, asked_at));
            continue;
        };
        let mut report = blank(requirement, asked_at);
        let tell = |verdict| PromiseFact {
            requirement: requirement.clone(),
            recipe: recipe.name.clone(),
            asked_at,
            verdict,
            remedy: Remedy::NotSought,
        };
        match result {
            Ok(judged) => {
                if !requirement.nominal {
                    counted.push((requirement.clone(), judged.clone()));
                }
                report.met = judged.margin >= 0.0;
                report.value = judged.value;
                report.min = judged.min;
                report.max = judged.max;
                report.margin = judged.value.map(|_| judged.margin);
                report.at = judged.at;
                if let Some(verdict) = judged.verdict(requirement) {
                    if options.remedies && !report.met {
                        missed.push((findings.len(), requirement.clone(), judged));
                    }
                    findings.push(Finding::new(tell(verdict), requirement.place));
                }
            }
            Err(troubles) => {
                all_valued &= requirement.nominal;
                for trouble in troubles {
                    findings.push(match trouble {
                        Trouble::Fact(fact) => Finding { fact: *fact, place: requirement.place },
                        Trouble::Verdict(verdict) => Finding::new(tell(verdict), requirement.place),
                    });
                }
            }
        }
        reports.push(report);
    }
    let Ok(Some(optics)) = &optics else { return (reports, None) };
    let met: Vec<Arc<Requirement>> =
        reports.iter().filter(|report| report.met).map(|report| report.requirement.clone()).collect();
    for (at, requirement, judged) in missed {
        let Some(engine) = optics.facing(requirement.from_exit) else { continue };
        let asked = Asked { requirement: &requirement, stack, optics, engine };
        let again = |requirement: &Requirement, place: Place, thickness: f64| {
            let stack = with_thickness(stack, place, thickness);
            let optics = Optics::new(&stack, &light.spans, light.angle).ok()??;
            evaluate(requirement, &stack, &optics).ok()
        };
        let changed = |place: Place, thickness: f64| again(&requirement, place, thickness);
        let mut remedy = blame::blame(&asked, chamber, &judged, &changed);
        if let Remedy::Thickness(aid) = &mut remedy
            && let Some(place) = aid.layer.thickness_place
        {
            let breaks = |other: &&Arc<Requirement>| {
                again(other, place, aid.thickness).is_none_or(|judged| judged.margin < 0.0)
            };
            aid.breaks = met.iter().filter(breaks).map(|other| other.text.clone()).collect();
        }
        if let Fact::Promise(fact) = &mut findings[at].fact {
            fact.remedy = remedy;
        }
    }
    let case = yields::Case { recipe, stack, optics, chamber, counted: &counted, all_valued, light: &light };
    let yields = yields::promised(&case, options, &mut reports, findings);
    (reports, yields)
}

/// The light that a recipe's graded films are integrated for.
pub(super) struct Light {
    /// Every stretch of wavelengths, nm.
    pub(super) spans: Vec<(f64, f64)>,
    /// The greatest angle of incidence, rad.
    pub(super) angle: f64,
}

impl Light {
    pub(super) fn of(recipe: &Recipe) -> Light {
        let requirements = || recipe.all_requirements().map(|(requirement, _)| requirement);
        Light {
            spans: requirements().flat_map(|requirement| quantity::spans(requirement)).collect(),
            angle: requirements().map(|requirement| steepest(requirement)).fold(0.0, f64::max),
        }
    }
}

/// The stack with the layers of a statement at another thickness, nm.
pub(super) fn with_thickness(stack: &Stack, place: Place, thickness: f64) -> Stack {
    let mut stack = stack.clone();
    for element in &mut stack.elements {
        if let Element::Layer(layer) = element
            && layer.thickness_place == place
        {
            layer.thickness = thickness;
        }
    }
    stack
}

/// The requirements of a recipe that could not be understood: none has a value, none is met.
pub(super) fn not_evaluated(recipe: &Recipe) -> Vec<RequirementReport> {
    recipe.all_requirements().map(|(requirement, asked_at)| blank(requirement, asked_at)).collect()
}

fn blank(requirement: &Arc<Requirement>, asked_at: Place) -> RequirementReport {
    let (min, max) = match &requirement.bound {
        Bound::Range { min, max } => (*min, *max),
        Bound::NearColour { difference, .. } => (None, Some(*difference)),
        Bound::Crosses { within: Some((low, high)), .. } => (Some(*low), Some(*high)),
        _ => (None, None),
    };
    RequirementReport {
        requirement: requirement.clone(),
        asked_at,
        met: false,
        value: None,
        min,
        max,
        margin: None,
        at: At { wavelength: None, angle: 0.0, polarisation: requirement.polarisation },
    }
}

/// A value with its bound.
#[derive(Clone, Debug)]
pub(super) struct Judged {
    /// None where there is none, which breaks the bound: a curve that has no edge.
    pub(super) value: Option<f64>,
    pub(super) min: Option<f64>,
    pub(super) max: Option<f64>,
    pub(super) margin: f64,
    pub(super) at: At,
    /// What is to be said of it where it breaks its bound, if not simply by how much.
    pub(super) missed: Option<Verdict>,
}

impl Judged {
    /// A candidate against a range.
    pub(super) fn within(candidate: Candidate, min: Option<f64>, max: Option<f64>) -> Judged {
        let below = max.map_or(f64::INFINITY, |max| max - candidate.value);
        let above = min.map_or(f64::INFINITY, |min| candidate.value - min);
        Judged {
            value: Some(candidate.value),
            min,
            max,
            margin: below.min(above),
            at: candidate.at,
            missed: None,
        }
    }

    /// The one of several that is nearest to breaking its bound, or furthest beyond.
    pub(super) fn worst(all: impl IntoIterator<Item = Judged>) -> Option<Judged> {
        all.into_iter().reduce(|worst, next| if next.margin < worst.margin { next } else { worst })
    }

    /// What is to be said of it, if anything.
    fn verdict(&self, requirement: &Requirement) -> Option<Verdict> {
        let (at, margin) = (self.at, self.margin);
        if margin < 0.0 && self.missed.is_some() {
            return self.missed.clone();
        }
        let value = self.value?;
        let least = match (self.min, self.max) {
            (Some(min), Some(max)) => value - min < max - value,
            (min, _) => min.is_some(),
        };
        let bound = if least { self.min? } else { self.max? };
        if margin < 0.0 {
            return Some(Verdict::Missed { value, bound, least, at });
        }
        // A share of the light can't be less than nothing or more than all of it.
        if is_share(&requirement.quantity) && (bound == 0.0 || bound == 1.0) {
            return None;
        }
        let room = match (self.min, self.max) {
            (Some(min), Some(max)) => (max - min) / 2.0,
            // A share of the light has as much room as the nearer of 0 and 1 leaves it.
            _ if is_share(&requirement.quantity) => bound.abs().min((1.0 - bound).abs()),
            _ => bound.abs(),
        };
        (margin < room / 10.0).then_some(Verdict::Thin { value, bound, least, margin, at })
    }
}

pub(super) fn evaluate(
    requirement: &Requirement,
    stack: &Stack,
    optics: &Optics,
) -> Result<Judged, Vec<Trouble>> {
    let spans = quantity::spans(requirement);
    let gaps: Vec<OpticsFact> = spans.into_iter().flat_map(|band| optics.gaps(band)).collect();
    if !gaps.is_empty() {
        return Err(gaps.into_iter().map(|gap| Trouble::Fact(Box::new(gap.into()))).collect());
    }
    let Some(engine) = optics.facing(requirement.from_exit) else {
        return Err(vec![Trouble::Verdict(Verdict::Textured(Untold::Inside))]);
    };
    quantity::judge(&Asked { requirement, stack, optics, engine }).map_err(|trouble| vec![trouble])
}

/// The greatest angle of incidence of a requirement's light, rad, short of grazing.
fn steepest(requirement: &Requirement) -> f64 {
    let angle = match &requirement.angles {
        Angles::List(angles) => angles.iter().copied().fold(0.0, f64::max),
        Angles::Range(_, to) => *to,
    };
    let angle = if requirement.hemispherical { FRAC_PI_2 } else { angle + requirement.cone };
    angle.min(89_f64.to_radians())
}

fn is_share(quantity: &Quantity) -> bool {
    matches!(
        quantity,
        Quantity::Reflectance
            | Quantity::Transmittance
            | Quantity::Absorptance
            | Quantity::AbsorptanceIn(_)
            | Quantity::Luminous(_)
            | Quantity::Solar(_)
            | Quantity::SolarAbsorptance
            | Quantity::Emittance
    )
}
