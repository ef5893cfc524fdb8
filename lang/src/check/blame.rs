//! Which film to blame for a missed requirement: the one thickness whose change mends it best.
//!
//! From the exact derivatives of a few samples follows, for every film, how much a change of its thickness alone would help; the most
//! promising ones are followed step by step, and the best change is evaluated in full before it is told.

use super::process::name_of;
use super::require::{Asked, Judged};
use super::sketch::{Samples, Sketch};
use crate::finding::{Aid, LayerName, Remedy};
use crate::model::{Chamber, Element, Layer, Material, Thickness};
use crate::report::At;
use crate::source::Place;
use overcoat_engine::Stack;
use std::borrow::Cow;

/// How many samples are taken over a band.
const ACROSS: usize = 24;
/// How many films are followed.
const FOLLOWED: usize = 4;
/// How many steps each of them may take.
const STEPS: usize = 5;
/// How many of them are looked at far from where they are, if no small change mends anything.
const SCANNED: usize = 2;
/// How many changes are evaluated in full before the search gives up.
const TRIED: usize = 3;

/// A thickness that one statement sets, of one film or of all its copies.
struct Knob<'a> {
    layer: &'a Layer,
    /// The films in the engine's stack.
    films: Vec<(usize, usize)>,
    /// What the thickness may become, nm.
    range: (f64, f64),
    /// How far derivatives are to be trusted, nm.
    trust: f64,
}

/// The change found for one film: by how many nm, and how far the samples then are from breaking the bound.
#[derive(Clone, Copy)]
struct Change {
    growth: f64,
    score: f64,
}

/// What a changed stack comes to: the requirement judged again with the layers of a statement at a thickness in nm.
pub(super) type Evaluate<'a> = dyn Fn(Place, f64) -> Option<Judged> + 'a;

/// The single thickness that mends a missed requirement, or helps it most.
pub(super) fn blame(
    asked: &Asked<'_>,
    chamber: Option<&Chamber>,
    judged: &Judged,
    evaluate: &Evaluate<'_>,
) -> Remedy {
    if asked.stack.layers().next().is_none() {
        return Remedy::NotSought;
    }
    let mut worst = vec![judged.at];
    let mut best: Option<(Aid, f64)> = None;
    // A change that is good on the samples may break the bound between them; the place is then one of the samples.
    for _ in 0..2 {
        let Some((start, found)) = search(asked, chamber, judged, &worst) else { return Remedy::NotSought };
        let mut hopeful = false;
        for (knob, change) in found.iter().take(TRIED) {
            let thickness = settable(knob, chamber, change.growth);
            // Where the samples say that nothing mends it, only the film that helps most is of interest.
            let may_mend = judged.margin + change.score - start >= 0.0;
            if thickness == knob.layer.thickness || !(may_mend || best.is_none()) {
                continue;
            }
            let Some(after) = evaluate(knob.layer.thickness_place, thickness) else { continue };
            hopeful |= may_mend;
            worst.push(after.at);
            let better =
                after.margin > judged.margin && best.as_ref().is_none_or(|best| after.margin > best.1);
            if let (true, Some(value)) = (better, after.value) {
                let mends = after.margin >= 0.0;
                let (layer, written) = (called(knob.layer), written(knob.layer, thickness));
                let aid = Aid { layer, thickness, written, value, mends, breaks: Vec::new() };
                best = Some((aid, after.margin));
                if mends {
                    break;
                }
            }
        }
        if !hopeful || best.as_ref().is_some_and(|best| best.1 >= 0.0) {
            break;
        }
    }
    best.map_or(Remedy::NoneHelps, |best| Remedy::Thickness(best.0))
}

/// How far the samples are from breaking the bound, and the films whose change helps them, the most helpful first.
fn search<'a>(
    asked: &'a Asked<'_>,
    chamber: Option<&Chamber>,
    judged: &Judged,
    worst: &[At],
) -> Option<(f64, Vec<(Knob<'a>, Change)>)> {
    let sketch = Sketch::new(asked, judged, worst, ACROSS)?;
    let here = sketch.of(asked.engine).ok()?;
    let start = sketch.score(&here, &[], 0.0);
    if !start.is_finite() {
        return None;
    }
    let mut first: Vec<(Knob<'_>, Change)> = knobs(asked, chamber, sketch.wavelength())
        .into_iter()
        .map(|knob| {
            let change = first_step(&sketch, &here, &knob);
            (knob, change)
        })
        .collect();
    first.sort_by(|a, b| b.1.score.total_cmp(&a.1.score));
    first.truncate(FOLLOWED);
    let mut found: Vec<(Knob<'_>, Change)> = Vec::new();
    for (knob, change) in first {
        let mut reached = follow(&sketch, asked.engine, &knob, &here, change);
        if judged.margin + reached.score - start < 0.0 && found.len() < SCANNED {
            let far = scan(&sketch, asked.engine, &knob, &here);
            reached = if far.score > reached.score { far } else { reached };
        }
        if reached.score > start {
            found.push((knob, reached));
        }
    }
    found.sort_by(|a, b| b.1.score.total_cmp(&a.1.score));
    Some((start, found))
}

/// The thicknesses that may change.
fn knobs<'a>(asked: &'a Asked<'_>, chamber: Option<&Chamber>, wavelength: f64) -> Vec<Knob<'a>> {
    let mut knobs: Vec<Knob<'_>> = Vec::new();
    for (at, element) in asked.stack.elements.iter().enumerate() {
        let Element::Layer(layer) = element else { continue };
        let Some(film) = asked.optics.film_of(at, asked.requirement.from_exit) else { continue };
        if layer.fixed || layer.thickness <= 0.0 {
            continue;
        }
        if let Some(knob) = knobs.iter_mut().find(|knob| knob.layer.thickness_place == layer.thickness_place)
        {
            knob.films.push(film);
            continue;
        }
        let mut range =
            layer.between.unwrap_or((0.2 * layer.thickness, 2.0 * layer.thickness + 0.05 * wavelength));
        for material in layer.material.materials() {
            if let Some((least, most)) = chamber.and_then(|chamber| made(chamber, material)) {
                range = (range.0.max(least), range.1.min(most));
            }
        }
        if range.0 <= layer.thickness && layer.thickness <= range.1 {
            // A twelfth of a wave in the film, as deep as light comes in a metal.
            let size =
                layer.material.materials().next().and_then(|material| {
                    material.index.as_ref()?.at(wavelength).ok().map(|index| index.norm())
                });
            let trust = wavelength / 12.0 / size.unwrap_or(2.0).max(1.0);
            knobs.push(Knob { layer, films: vec![film], range, trust });
        }
    }
    for knob in &mut knobs {
        knob.trust /= (knob.films.len() as f64).sqrt();
    }
    knobs
}

/// What a chamber makes of a material in one layer, nm.
fn made(chamber: &Chamber, material: &Material) -> Option<(f64, f64)> {
    let deposit = chamber.deposits.iter().find(|deposit| deposit.material.is(material))?;
    deposit.thickness.map(|(least, most, _)| (least, most))
}

/// The best growth by a score, between two.
fn best_between(lo: f64, hi: f64, start: f64, score: impl Fn(f64) -> f64) -> Change {
    const PARTS: usize = 12;
    let mut best = Change { growth: start, score: score(start) };
    let mut try_at = |growth: f64| {
        let growth = growth.clamp(lo, hi);
        let score = score(growth);
        if score > best.score {
            best = Change { growth, score };
        }
        best.growth
    };
    let mut middle = start;
    for part in 0..=PARTS {
        middle = try_at(lo + (hi - lo) * part as f64 / PARTS as f64);
    }
    // Closer about the best part, each time by a third.
    let mut width = (hi - lo) / PARTS as f64;
    for _ in 0..6 {
        width /= 3.0;
        for off in [-2.0, -1.0, 1.0, 2.0] {
            try_at(middle + off * width);
        }
        middle = try_at(middle);
    }
    best
}

/// The best change to first order, as far as derivatives are to be trusted.
fn first_step(sketch: &Sketch<'_>, samples: &Samples, knob: &Knob<'_>) -> Change {
    let thickness = knob.layer.thickness;
    let (lo, hi) = ((knob.range.0 - thickness).max(-knob.trust), (knob.range.1 - thickness).min(knob.trust));
    best_between(lo, hi, 0.0, |growth| sketch.score(samples, &knob.films, growth))
}

/// Follows a film from its first step on: each next one is the best between the last two stops, or a little beyond, by the cubic
/// curves that have the values and the derivatives of every sample at both.
fn follow(sketch: &Sketch<'_>, stack: &Stack, knob: &Knob<'_>, start: &Samples, first: Change) -> Change {
    let thickness = knob.layer.thickness;
    let stop = |growth: f64| sketch.of(&grown(stack, knob, growth)).ok();
    let score = |samples: &Samples| sketch.score(samples, &knob.films, 0.0);
    let mut best = Change { growth: 0.0, score: score(start) };
    let mut near = (0.0_f64, Cow::Borrowed(start));
    let mut next = first;
    let Some(mut last) = stop(next.growth).map(|samples| (next.growth, Cow::Owned(samples))) else {
        return best;
    };
    for _ in 0..STEPS {
        let reached = score(&last.1);
        if reached > best.score {
            best = Change { growth: last.0, score: reached };
        }
        let (low, high) = (near.0.min(last.0), near.0.max(last.0));
        let beyond = (0.5 * (high - low)).max(0.1 * knob.trust);
        let lo = (low - beyond).max(knob.range.0 - thickness);
        let hi = (high + beyond).min(knob.range.1 - thickness);
        let between =
            |growth: f64| sketch.score_between((&near.1, near.0), (&last.1, last.0), &knob.films, growth);
        next = best_between(lo, hi, best.growth.clamp(lo, hi), between);
        if (next.growth - near.0).abs().min((next.growth - last.0).abs()) < 0.02 {
            break;
        }
        let Some(samples) = stop(next.growth) else { break };
        // The stop that is nearer to the new one is kept.
        if (last.0 - next.growth).abs() < (near.0 - next.growth).abs() {
            near = last;
        }
        last = (next.growth, Cow::Owned(samples));
    }
    let reached = score(&last.1);
    if reached > best.score { Change { growth: last.0, score: reached } } else { best }
}

/// Looks at a film all over its range: what no derivative shows from a crest that it stands on.
fn scan(sketch: &Sketch<'_>, stack: &Stack, knob: &Knob<'_>, start: &Samples) -> Change {
    let stop = |growth: f64| sketch.of(&grown(stack, knob, growth)).ok();
    let (lo, hi) = (knob.range.0 - knob.layer.thickness, knob.range.1 - knob.layer.thickness);
    let stride = 2.5 * knob.trust;
    let far = [-2.0, -1.0, 1.0, 2.0].map(|steps: f64| (steps * stride).clamp(lo, hi));
    let mut stops: Vec<(f64, Cow<'_, Samples>)> = vec![(0.0, Cow::Borrowed(start))];
    for growth in far {
        if stops.iter().all(|(other, _)| (other - growth).abs() > 0.1 * knob.trust) {
            stops.extend(stop(growth).map(|samples| (growth, Cow::Owned(samples))));
        }
    }
    let mut best = Change { growth: 0.0, score: sketch.score(start, &knob.films, 0.0) };
    for _ in 0..3 {
        stops.sort_by(|a, b| a.0.total_cmp(&b.0));
        let mut next = best;
        for pair in stops.windows(2) {
            let [near, far] = pair else { continue };
            let score =
                |growth: f64| sketch.score_between((&near.1, near.0), (&far.1, far.0), &knob.films, growth);
            let found = best_between(near.0, far.0, 0.5 * (near.0 + far.0), score);
            next = if found.score > next.score { found } else { next };
        }
        let known = stops.iter().any(|(growth, _)| (growth - next.growth).abs() < 0.02);
        let Some(samples) = (!known).then(|| stop(next.growth)).flatten() else { break };
        let score = sketch.score(&samples, &knob.films, 0.0);
        if score > best.score {
            best = Change { growth: next.growth, score };
        }
        stops.push((next.growth, Cow::Owned(samples)));
    }
    for (growth, samples) in &stops {
        let score = sketch.score(samples, &knob.films, 0.0);
        if score > best.score {
            best = Change { growth: *growth, score };
        }
    }
    best
}

/// The engine's stack with the films of a knob grown by so many nm.
fn grown(stack: &Stack, knob: &Knob<'_>, growth: f64) -> Stack {
    let mut stack = stack.clone();
    for &(coating, film) in &knob.films {
        let thickness = &mut stack.coatings[coating][film].thickness_nm;
        *thickness = (*thickness + growth).max(0.0);
    }
    stack
}

/// The thickness in nm after a growth as people would set it: in the controller's steps, in thousandths of a quarter-wave, in
/// tenths or hundredths of a nanometre.
fn settable(knob: &Knob<'_>, chamber: Option<&Chamber>, growth: f64) -> f64 {
    let wanted = knob.layer.thickness + growth;
    let resolution = chamber.and_then(|chamber| chamber.resolution).map(|(step, _)| step);
    let unit = match knob.layer.written {
        Thickness::Quarters(quarters) if quarters > 0.0 => 0.001 * knob.layer.thickness / quarters,
        _ => resolution.filter(|step| *step > 0.0).unwrap_or(if wanted < 10.0 { 0.01 } else { 0.1 }),
    };
    // A range that ends between two steps ends at the inner one.
    let (least, most) = ((knob.range.0 / unit - 1e-6).ceil(), (knob.range.1 / unit + 1e-6).floor());
    let set = (wanted / unit).round().clamp(least, most.max(least)) * unit;
    // Not 71.30000000000001.
    if unit >= 1e-3 { (set * 1e6).round() / 1e6 } else { set }
}

/// The thickness as the recipe writes it.
fn written(layer: &Layer, thickness: f64) -> String {
    let (number, unit) = match layer.written {
        Thickness::Quarters(quarters) => (quarters * thickness / layer.thickness, "qw"),
        Thickness::Length => (thickness, "nm"),
    };
    let decimals = format!("{number:.4}");
    format!("{} {unit}", decimals.trim_end_matches('0').trim_end_matches('.'))
}

fn called(layer: &Layer) -> LayerName {
    LayerName { thickness_place: Some(layer.thickness_place), ..name_of(layer) }
}
