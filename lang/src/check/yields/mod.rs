//! How many parts will pass: the recipe evaluated again for every part, with what its chamber varies drawn anew.
//!
//! A part is judged by samples of each requirement's quantity. How far samples and the full evaluation are apart is measured on
//! a few parts; every part that lies nearer to a bound than that is evaluated in full, so that no part is judged less strictly
//! than the recipe itself.

mod draws;
mod interval;
mod points;
mod promised;
mod simulate;
mod tally;

pub(super) use promised::{Case, promised};
pub use simulate::simulate;

use super::optics::{Optics, Trouble};
use super::quantity;
use super::require::{Asked, Judged};
use super::sketch::{Sketch, Verdict};
use crate::model::{Angles, Beam, Recipe, Requirement, Stack};
use crate::report::{RequirementYield, WorstDraw, WorstPart, YieldReport};
use crate::syntax::ast::SpreadKind;
use draws::{Draws, Off};
use overcoat_engine::{Change, Sampler};
use rayon::prelude::*;
use std::sync::Arc;
use tally::Tally;

/// How many parts a thread takes at a time.
const BLOCK: u32 = 64;
/// How many blocks are under way before their parts are handed on.
const BLOCKS: u32 = 64;
/// On how many parts samples are compared with the full evaluation.
const COMPARED: u32 = 8;
/// The numbers of samples tried, until few parts need the full evaluation.
const ACROSS: [usize; 4] = [24, 48, 96, 192];
/// The share of parts that may need it.
const FEW: f64 = 0.02;

/// One part: its draws, and what each requirement comes to.
pub(super) struct Judgement {
    pub(super) number: u32,
    pub(super) units: Vec<f64>,
    pub(super) verdicts: Vec<Verdict>,
}

/// A recipe ready to be evaluated part by part.
pub(super) struct Simulation<'a> {
    stack: &'a Stack,
    optics: &'a Optics,
    draws: Draws,
    seed: u32,
    promises: Vec<Promise>,
}

/// A requirement that counts, as its parts are judged.
struct Promise {
    requirement: Arc<Requirement>,
    /// What is sampled, and the stack ready for it.
    sketch: Option<(Sketch<'static>, Sampler)>,
    /// What the full evaluation of the recipe as written gives more than its samples.
    offset: Verdict,
    /// How near to the bound samples are not to be trusted.
    doubt: f64,
}

impl<'a> Simulation<'a> {
    /// For the requirements that count, each with its value as written.
    pub(super) fn new(
        recipe: &Recipe,
        stack: &'a Stack,
        optics: &'a Optics,
        counted: &[(Arc<Requirement>, Judged)],
    ) -> Result<Simulation<'a>, Trouble> {
        let draws = Draws::of(recipe, stack);
        let seed = draws.seed(recipe, stack);
        let mut simulation = Simulation { stack, optics, draws, seed, promises: Vec::new() };
        for (requirement, judged) in counted {
            let promise = simulation.promise(requirement, judged)?;
            simulation.promises.push(promise);
        }
        Ok(simulation)
    }

    /// Chooses the samples of a requirement.
    fn promise(&self, requirement: &Arc<Requirement>, judged: &Judged) -> Result<Promise, Trouble> {
        let mut chosen = Promise {
            requirement: requirement.clone(),
            sketch: None,
            offset: Verdict { margin: 0.0, value: 0.0 },
            doubt: f64::INFINITY,
        };
        let Some(engine) = self.optics.facing(requirement.from_exit) else { return Ok(chosen) };
        let asked = Asked { requirement, stack: self.stack, optics: self.optics, engine };
        for across in ACROSS {
            let Some(sketch) = Sketch::new(&asked, judged, &[judged.at], across) else { return Ok(chosen) };
            let off: Vec<(usize, usize)> = self
                .draws
                .shifted()
                .into_iter()
                .filter_map(|element| self.optics.film_of(element, requirement.from_exit))
                .collect();
            let Ok(sampler) = sketch.sampler(engine, &off) else { return Ok(chosen) };
            let here = sampler.part(&[]).and_then(|part| sketch.verdict(&part, 0.0));
            let Ok(here) = here else { return Ok(chosen) };
            if !here.margin.is_finite() || !judged.margin.is_finite() {
                return Ok(chosen);
            }
            let value = judged.value.unwrap_or(0.0) - here.value;
            chosen.offset = Verdict { margin: judged.margin - here.margin, value };
            chosen.sketch = Some((sketch, sampler));
            let mut doubt = 0.0_f64;
            for number in 0..COMPARED {
                let units = self.units(number);
                let (full, sampled) = (self.full(requirement, &units)?, self.sampled(&chosen, &units)?);
                doubt = doubt.max((full.margin - sampled.margin).abs());
            }
            chosen.doubt = 2.0 * doubt + 1e-12;
            let mut near = 0;
            const LOOKED_AT: u32 = 128;
            for number in 0..LOOKED_AT {
                let sampled = self.sampled(&chosen, &self.units(number))?;
                near += u32::from(sampled.margin.abs() <= chosen.doubt);
            }
            if f64::from(near) <= FEW * f64::from(LOOKED_AT) {
                break;
            }
        }
        Ok(chosen)
    }

    fn units(&self, number: u32) -> Vec<f64> {
        points::part(self.seed, number, self.draws.draws.iter().map(|draw| draw.kind))
    }

    /// A requirement of a part by its samples.
    fn sampled(&self, promise: &Promise, units: &[f64]) -> Result<Verdict, Trouble> {
        let requirement = &promise.requirement;
        let Some((sketch, sampler)) = &promise.sketch else { return self.full(requirement, units) };
        let (off, tilt) = self.off(units);
        let change = |(element, off): (usize, &Off)| {
            let film = self.optics.film_of(element, requirement.from_exit)?;
            Some(Change { film, growth_nm: off.growth, shift: off.shift })
        };
        let changes: Vec<Change> = off.iter().enumerate().filter_map(change).collect();
        let found = sampler.part(&changes).and_then(|part| sketch.verdict(&part, tilt));
        let found = found.map_err(|error| self.trouble(&error, requirement))?;
        Ok(Verdict {
            margin: found.margin + promise.offset.margin,
            value: found.value + promise.offset.value,
        })
    }

    /// A requirement of a part, evaluated as that of the recipe itself is.
    fn full(&self, requirement: &Requirement, units: &[f64]) -> Result<Verdict, Trouble> {
        let (engine, tilt) = self.part(requirement, units)?;
        let mut worst: Option<Verdict> = None;
        for tilted in tilted(requirement, tilt) {
            let asked =
                Asked { requirement: &tilted, stack: self.stack, optics: self.optics, engine: &engine };
            let judged = quantity::judge(&asked)?;
            let found = Verdict { margin: judged.margin, value: judged.value.unwrap_or(f64::NAN) };
            worst =
                Some(worst.map_or(found, |worst| if found.margin < worst.margin { found } else { worst }));
        }
        // There is always one.
        Ok(worst.unwrap_or(Verdict { margin: f64::NEG_INFINITY, value: f64::NAN }))
    }

    fn part(
        &self,
        requirement: &Requirement,
        units: &[f64],
    ) -> Result<(overcoat_engine::Stack, f64), Trouble> {
        let beyond = || {
            Trouble::Verdict(crate::finding::Verdict::NotEvaluated {
                what: "a part of this index".to_owned(),
            })
        };
        let (off, tilt) = self.off(units);
        let forward = Draws::stack(self.optics, &off).map_err(|_| beyond())?;
        let stack = if requirement.from_exit { forward.reversed().ok_or_else(beyond)? } else { forward };
        Ok((stack, tilt))
    }

    /// By how much the elements of a part are off, and how its light is tilted, rad.
    fn off(&self, units: &[f64]) -> (Vec<Off>, f64) {
        let (off, tilt) = self.draws.part(self.stack.elements.len(), units);
        // How pyramids take light at an angle is not known; theirs is the angle that they have.
        (off, if self.stack.exit.textured.is_some() { 0.0 } else { tilt })
    }

    fn trouble(&self, error: &overcoat_engine::OpticsError, requirement: &Requirement) -> Trouble {
        super::optics::explain(error, self.optics.materials(), requirement, self.stack)
    }

    /// A part: by its samples, or in full where they lie too near to a bound to tell.
    fn judge(&self, number: u32, scales: &[f64]) -> Result<Judgement, Trouble> {
        let mut units = self.units(number);
        for (unit, draw) in units.iter_mut().zip(&self.draws.draws) {
            *unit *= scales.get(draw.cause).copied().unwrap_or(1.0);
        }
        let mut verdicts = Vec::with_capacity(self.promises.len());
        for promise in &self.promises {
            let sampled = self.sampled(promise, &units)?;
            let sure = promise.sketch.is_none() || sampled.margin.abs() > promise.doubt;
            verdicts.push(if sure { sampled } else { self.full(&promise.requirement, &units)? });
        }
        Ok(Judgement { number, units, verdicts })
    }

    /// Evaluates so many parts, each cause at a share of its size; hands every part on, in order.
    fn run(
        &self,
        parts: u32,
        scales: &[f64],
        each: &mut dyn FnMut(&Judgement) -> bool,
    ) -> Result<(), Trouble> {
        let mut from = 0;
        while from < parts {
            let to = parts.min(from + BLOCK * BLOCKS);
            let starts: Vec<u32> = (from..to).step_by(BLOCK as usize).collect();
            let block = |start: &u32| -> Result<Vec<Judgement>, Trouble> {
                (*start..to.min(start + BLOCK)).map(|number| self.judge(number, scales)).collect()
            };
            let blocks: Vec<Result<Vec<Judgement>, Trouble>> = starts.par_iter().map(block).collect();
            for block in blocks {
                for part in block? {
                    if !each(&part) {
                        return Ok(());
                    }
                }
            }
            from = to;
        }
        Ok(())
    }

    /// The yield over so many parts. `each` sees every part in order and says whether to go on.
    pub(super) fn report(
        &self,
        parts: u32,
        each: &mut dyn FnMut(&Judgement) -> bool,
    ) -> Result<YieldReport, Trouble> {
        // Where nothing varies one part says all.
        let parts = if self.draws.draws.is_empty() { 1 } else { parts };
        let mut passed = 0;
        let mut done = 0;
        let mut tallies: Vec<Tally> =
            self.promises.iter().map(|_| Tally::new(self.draws.draws.len())).collect();
        self.run(parts, &[], &mut |part| {
            done += 1;
            passed += u32::from(part.verdicts.iter().all(|verdict| verdict.margin >= 0.0));
            for (tally, verdict) in tallies.iter_mut().zip(&part.verdicts) {
                tally.add(part, *verdict);
            }
            each(part)
        })?;
        let requirements: Result<Vec<RequirementYield>, Trouble> = self
            .promises
            .iter()
            .zip(tallies)
            .map(|(promise, tally)| self.requirement(promise, tally))
            .collect();
        Ok(YieldReport {
            parts: done,
            passed,
            interval: interval::clopper_pearson(passed, done),
            causes: self.draws.causes.clone(),
            requirements: requirements?,
        })
    }

    fn requirement(&self, promise: &Promise, tally: Tally) -> Result<RequirementYield, Trouble> {
        let draws = &self.draws.draws;
        let variances: Vec<f64> = draws.iter().map(|draw| points::variance(draw.kind)).collect();
        let by_draw = tally.shares(&variances);
        let mut shares = vec![0.0; self.draws.causes.len()];
        let mut layers: Vec<(usize, f64)> = Vec::new();
        for (draw, share) in draws.iter().zip(&by_draw) {
            shares[draw.cause] += share;
            if let Some(element) = draw.layer {
                match layers.iter_mut().find(|layer| layer.0 == element) {
                    Some(layer) => layer.1 += share,
                    None => layers.push((element, *share)),
                }
            }
        }
        let drawn = |units: &[f64]| {
            let one = |(draw, units): (&draws::Draw, &f64)| WorstDraw {
                cause: draw.cause,
                layer: draw.layer.and_then(|element| self.stack.layer(element)).map(|layer| layer.call()),
                units: *units,
            };
            draws.iter().zip(units).map(one).collect()
        };
        let rectangular = draws.iter().any(|draw| draw.kind == SpreadKind::Rectangular);
        let corner = if rectangular {
            let ends = draws.iter().zip(tally.slopes()).map(|(draw, slope)| match draw.kind {
                SpreadKind::Rectangular => -slope.signum() * points::reach(draw.kind),
                SpreadKind::Normal => 0.0,
            });
            let ends: Vec<f64> = ends.collect();
            let found = self.full(&promise.requirement, &ends).ok();
            found.map(|found| found.value).filter(|value| value.is_finite())
        } else {
            None
        };
        Ok(RequirementYield {
            requirement: promise.requirement.clone(),
            passed: tally.passed(),
            quantiles: tally.quantiles(),
            shares,
            layers,
            worst: WorstPart {
                number: tally.worst.0 + 1,
                value: tally.worst.1.value,
                draws: drawn(&self.units(tally.worst.0)),
            },
            corner,
        })
    }

    /// The yield with causes at shares of their sizes.
    pub(super) fn value_with(&self, scales: &[f64], parts: u32) -> Result<f64, Trouble> {
        let mut passed = 0_u32;
        self.run(parts, scales, &mut |part| {
            passed += u32::from(part.verdicts.iter().all(|verdict| verdict.margin >= 0.0));
            true
        })?;
        Ok(f64::from(passed) / f64::from(parts))
    }
}

/// A requirement under light tilted by so many rad: away from normal incidence s and p have phases of their own.
fn tilted(requirement: &Requirement, tilt: f64) -> Vec<Requirement> {
    let mut tilted = requirement.clone();
    if tilt == 0.0 || requirement.hemispherical {
        return vec![tilted];
    }
    tilted.angles = match &requirement.angles {
        Angles::List(angles) => Angles::List(angles.iter().map(|angle| (angle + tilt).abs()).collect()),
        Angles::Range(from, to) => Angles::Range((from + tilt).max(0.0), (to + tilt).max(0.0)),
    };
    if quantity::phase::is_phase(&requirement.quantity) && requirement.polarisation == Beam::Mean {
        return [Beam::S, Beam::P]
            .map(|polarisation| Requirement { polarisation, ..tilted.clone() })
            .to_vec();
    }
    vec![tilted]
}
