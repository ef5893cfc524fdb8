//! `require yield`: the share of parts that pass against its bound, and what would bring it there.

use super::Simulation;
use crate::check::optics::{Optics, Trouble};
use crate::check::require::{self, Asked, Judged, Light};
use crate::check::{Options, blame};
use crate::finding::{Driver, Finding, PromiseFact, Remedy, Sensitive, ShortYield, Verdict};
use crate::model::{Bound, Chamber, Quantity, Recipe, Requirement, Stack};
use crate::report::{RequirementReport, RequirementYield, YieldReport};
use std::sync::Arc;

/// How many parts a yield counts where none are said.
pub(crate) const PARTS: u32 = 2_000;
/// How many parts decide how much a variation must shrink.
const TRIED: u32 = 1_000;
/// The share of a requirement's variance from which on it hangs on one layer.
const HANGS: f64 = 0.5;
/// A requirement that more parts than this meet hangs on nothing.
const SAFE: f64 = 0.99;

/// A recipe whose yield is asked for.
pub(in crate::check) struct Case<'a> {
    pub(in crate::check) recipe: &'a Recipe,
    pub(in crate::check) stack: &'a Stack,
    pub(in crate::check) optics: &'a Optics,
    pub(in crate::check) chamber: Option<&'a Chamber>,
    /// The requirements that count, with their values as written.
    pub(in crate::check) counted: &'a [(Arc<Requirement>, Judged)],
    /// Whether every requirement that counts has a value.
    pub(in crate::check) all_valued: bool,
    /// The light that graded films are integrated for.
    pub(in crate::check) light: &'a Light,
}

/// Evaluates every `require yield` of a recipe, fills its report and tells what is short.
pub(in crate::check) fn promised(
    case: &Case<'_>,
    options: &Options,
    reports: &mut [RequirementReport],
    findings: &mut Vec<Finding>,
) -> Option<YieldReport> {
    let asked: Vec<usize> = (0..reports.len())
        .filter(|at| matches!(reports[*at].requirement.quantity, Quantity::Yield))
        .collect();
    if asked.is_empty() {
        return None;
    }
    if !options.yields {
        asked.iter().for_each(|at| reports[*at].met = true);
        return None;
    }
    let simulation = if case.all_valued {
        Simulation::new(case.recipe, case.stack, case.optics, case.counted)
    } else {
        let what = "a requirement that it counts".to_owned();
        Err(Trouble::Verdict(Verdict::NotEvaluated { what }))
    };
    let mut told: Option<YieldReport> = None;
    for at in asked {
        let report = &mut reports[at];
        let requirement = report.requirement.clone();
        let asked_at = report.asked_at;
        let tell = |verdict| {
            let (requirement, recipe) = (requirement.clone(), case.recipe.name.clone());
            PromiseFact { requirement, recipe, asked_at, verdict, remedy: Remedy::NotSought }
        };
        let parts = options.parts.or(requirement.parts).unwrap_or(PARTS);
        let found = simulation.as_ref().map_err(Trouble::clone);
        let found = match found.and_then(|simulation| simulation.report(parts, &mut |_| true)) {
            Ok(found) => found,
            Err(Trouble::Fact(fact)) => {
                findings.push(Finding { fact: *fact, place: requirement.place });
                continue;
            }
            Err(Trouble::Verdict(verdict)) => {
                findings.push(Finding::new(tell(verdict), requirement.place));
                continue;
            }
        };
        let (min, max) = match requirement.bound {
            Bound::Range { min, max } => (min, max),
            _ => (None, None),
        };
        let margin = min.map_or(f64::INFINITY, |min| found.value() - min);
        let margin = margin.min(max.map_or(f64::INFINITY, |max| max - found.value()));
        report.met = margin >= 0.0;
        report.value = Some(found.value());
        (report.min, report.max) = (min, max);
        report.margin = Some(margin);
        if margin < 0.0 {
            let Ok(simulation) = &simulation else { continue };
            let short = short(case, simulation, &found, min.unwrap_or(0.0), options.remedies);
            findings.push(Finding::new(tell(Verdict::YieldShort(Box::new(short))), requirement.place));
        } else if let Some(min) = min.filter(|min| *min > 0.0 && *min < 1.0) {
            // As for any share, the nearer of 0 and 1 is the room there is.
            if !found.causes.is_empty() && margin < 0.1 * min.min(1.0 - min) {
                let (value, bound, at) = (found.value(), min, report.at);
                let verdict = Verdict::Thin { value, bound, least: true, margin, at };
                findings.push(Finding::new(tell(verdict), requirement.place));
            }
        }
        sensitive(case, &found, &mut |verdict, place| findings.push(Finding::new(tell(verdict), place)));
        told = Some(found);
    }
    told
}

/// What is to be said of a yield that is short.
fn short(
    case: &Case<'_>,
    simulation: &Simulation<'_>,
    found: &YieldReport,
    bound: f64,
    remedies: bool,
) -> ShortYield {
    let weakest = found.weakest();
    let driver = weakest.and_then(|weakest| driver(found, weakest));
    let leading =
        driver.as_ref().and_then(|driver| found.causes.iter().position(|cause| *cause == driver.cause));
    let shrink = leading.filter(|_| remedies).and_then(|cause| shrink(simulation, found, cause, bound));
    let moved = weakest.filter(|_| remedies).and_then(|weakest| moved(case, weakest, bound));
    ShortYield {
        value: found.value(),
        interval: found.interval,
        parts: found.parts,
        bound,
        weakest: weakest
            .map(|one| (one.requirement.text.clone(), f64::from(one.passed) / f64::from(found.parts))),
        driver,
        shrink,
        moved,
        corner: weakest.and_then(|one| one.corner.map(|value| (one.requirement.clone(), value))),
        varies: !found.causes.is_empty(),
    }
}

/// The cause of most of a requirement's variance.
fn driver(found: &YieldReport, weakest: &RequirementYield) -> Option<Driver> {
    let leads = (0..found.causes.len()).max_by(|a, b| weakest.shares[*a].total_cmp(&weakest.shares[*b]))?;
    Some(Driver { cause: found.causes[leads].clone(), share: weakest.shares[leads] })
        .filter(|driver| driver.share > 0.0)
}

/// To which share of its size a cause must shrink for the yield to be met; none where it can't be met so.
fn shrink(simulation: &Simulation<'_>, found: &YieldReport, cause: usize, bound: f64) -> Option<f64> {
    let at = |share: f64| {
        let mut scales = vec![1.0; found.causes.len()];
        scales[cause] = share;
        simulation.value_with(&scales, found.parts.min(TRIED)).ok()
    };
    if at(0.0)? < bound {
        return None;
    }
    let (mut enough, mut too_much) = (0.0, 1.0);
    for _ in 0..6 {
        let middle = 0.5 * (enough + too_much);
        if at(middle)? >= bound { enough = middle } else { too_much = middle }
    }
    Some(enough)
}

/// The single thickness that gives the weakest requirement most room, with the yield that it leads to, if that is met.
fn moved(case: &Case<'_>, weakest: &RequirementYield, bound: f64) -> Option<(crate::finding::Aid, f64)> {
    let requirement = &weakest.requirement;
    let judged = &case.counted.iter().find(|counted| Arc::ptr_eq(&counted.0, requirement))?.1;
    let engine = case.optics.facing(requirement.from_exit)?;
    let asked = Asked { requirement, stack: case.stack, optics: case.optics, engine };
    let changed = |place, thickness| {
        let stack = require::with_thickness(case.stack, place, thickness);
        let optics = Optics::new(&stack, &case.light.spans, case.light.angle).ok()??;
        require::evaluate(requirement, &stack, &optics).ok()
    };
    let Remedy::Thickness(aid) = blame::blame(&asked, case.chamber, judged, &changed) else { return None };
    let stack = require::with_thickness(case.stack, aid.layer.thickness_place?, aid.thickness);
    let optics = Optics::new(&stack, &case.light.spans, case.light.angle).ok()??;
    let mut counted = Vec::new();
    for (requirement, _) in case.counted {
        counted.push((requirement.clone(), require::evaluate(requirement, &stack, &optics).ok()?));
    }
    let simulation = Simulation::new(case.recipe, &stack, &optics, &counted).ok()?;
    let value = simulation.value_with(&[], TRIED).ok()?;
    (value >= bound).then_some((aid, value))
}

/// Tells of layers that one requirement hangs on.
fn sensitive(case: &Case<'_>, found: &YieldReport, tell: &mut dyn FnMut(Verdict, crate::source::Place)) {
    // Of one or two films one always counts most.
    if case.stack.layers().count() < 3 {
        return;
    }
    for one in &found.requirements {
        let share_met = f64::from(one.passed) / f64::from(found.parts);
        if share_met > SAFE {
            continue;
        }
        for &(element, share) in one.layers.iter().filter(|layer| layer.1 > HANGS) {
            let Some(layer) = case.stack.layer(element) else { continue };
            let sensitive = Sensitive {
                layer: layer.call(),
                share,
                requirement: one.requirement.text.clone(),
                met: share_met,
            };
            tell(Verdict::Sensitive(sensitive), layer.place);
        }
    }
}
