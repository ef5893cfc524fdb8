//! What varies from part to part: every draw that a recipe's chamber and layers make, and what it does to the stack.

use crate::check::optics::Optics;
use crate::model::{Chamber, Deposit, Layer, Recipe, Spread, Stack, Variation};
use crate::report::{Cause, Varying};
use crate::syntax::ast::{Each, SpreadKind};
use overcoat_engine::{self as engine, Film, Gradient, Index, ModelError, Profile};
use std::collections::{BTreeMap, BTreeSet};

/// One number that is drawn.
pub(super) struct Draw {
    /// The statement that makes it vary, by its place in [`Draws::causes`].
    pub(super) cause: usize,
    pub(super) kind: SpreadKind,
    /// The layer, as an element of the stack, if it is drawn for one layer alone.
    pub(super) layer: Option<usize>,
    /// The coated side, if it is drawn each run.
    pub(super) run: Option<usize>,
    /// What one unit of it changes: half the width of a rectangular distribution, or a standard deviation.
    effects: Vec<Effect>,
}

/// What one unit of a draw changes.
#[derive(Clone, Copy)]
enum Effect {
    /// An element's thickness, by so many nm.
    Thickness(usize, f64),
    /// An element's index, by this.
    Index(usize, f64),
    /// The angle of incidence, by so many rad.
    Tilt(f64),
}

/// All that varies.
#[derive(Default)]
pub(super) struct Draws {
    pub(super) causes: Vec<Cause>,
    pub(super) draws: Vec<Draw>,
}

/// A draw's identity while they are collected: its cause, and the layer or the run that it is for.
type Key = (usize, Option<usize>, Option<usize>);

#[derive(Default)]
struct Collecting {
    draws: Draws,
    known: BTreeMap<Key, usize>,
}

impl Draws {
    /// What varies in a recipe.
    pub(super) fn of(recipe: &Recipe, stack: &Stack) -> Draws {
        let mut collecting = Collecting::default();
        let chamber = recipe.chamber.as_ref().map(|(chamber, _)| &**chamber);
        for (run, side) in stack.sides().iter().enumerate() {
            for &element in &side.layers {
                if let Some(layer) = stack.layer(element) {
                    collecting.layer(chamber, layer, element, run);
                }
            }
        }
        for variation in chamber.iter().flat_map(|chamber| &chamber.angle_variations) {
            if let Spread::Absolute(radians) = variation.spread {
                let cause = collecting.cause(variation, Varying::Angle, String::new());
                collecting.add((cause, None, None), variation.kind, Effect::Tilt(radians));
            }
        }
        collecting.draws
    }

    /// What two recipes that mean the same have in common: which numbers are drawn, and for what.
    pub(super) fn seed(&self, recipe: &Recipe, stack: &Stack) -> u32 {
        let mut text = recipe.name.clone();
        for layer in stack.layers() {
            text.push_str(&format!("|{}", layer.material.name()));
        }
        for draw in &self.draws {
            let cause = &self.causes[draw.cause];
            text.push_str(&format!("|{:?} {} {:?} {:?}", cause.varying, cause.of, cause.each, draw.layer));
        }
        // FNV-1a, folded (G. Fowler, L. C. Noll, K.-P. Vo): the same on every machine and in every version.
        let hash = text.bytes().fold(0xcbf2_9ce4_8422_2325_u64, |hash, byte| {
            (hash ^ u64::from(byte)).wrapping_mul(0x0000_0100_0000_01b3)
        });
        (hash ^ (hash >> 32)) as u32
    }

    /// The elements whose index is drawn.
    pub(super) fn shifted(&self) -> BTreeSet<usize> {
        let index = |effect: &Effect| match *effect {
            Effect::Index(element, _) => Some(element),
            _ => None,
        };
        self.draws.iter().flat_map(|draw| draw.effects.iter().filter_map(index)).collect()
    }

    /// A part: by how much its elements are off with these draws, each in its units, and by how much its light is tilted, rad.
    pub(super) fn part(&self, elements: usize, units: &[f64]) -> (Vec<Off>, f64) {
        let mut off = vec![Off::default(); elements];
        let mut tilt = 0.0;
        for (draw, unit) in self.draws.iter().zip(units) {
            for effect in &draw.effects {
                match *effect {
                    Effect::Thickness(element, nm) => off[element].growth += nm * unit,
                    Effect::Index(element, by) => off[element].shift += by * unit,
                    Effect::Tilt(radians) => tilt += radians * unit,
                }
            }
        }
        (off, tilt)
    }

    /// The engine's stack of a part.
    pub(super) fn stack(optics: &Optics, off: &[Off]) -> Result<engine::Stack, ModelError> {
        let mut stack = optics.forward().clone();
        for (element, off) in off.iter().enumerate() {
            let Some((coating, film)) = optics.film_of(element, false) else { continue };
            let film = &mut stack.coatings[coating][film];
            film.thickness_nm = (film.thickness_nm + off.growth).max(0.0);
            if off.shift != 0.0 {
                shift(film, off.shift)?;
            }
        }
        Ok(stack)
    }
}

/// By how much an element of a part is off.
#[derive(Clone, Copy, Debug, Default)]
pub(super) struct Off {
    /// Of its thickness, nm.
    pub(super) growth: f64,
    /// Of its index.
    pub(super) shift: f64,
}

/// A film of an index greater by dn.
fn shift(film: &mut Film, dn: f64) -> Result<(), ModelError> {
    let shifted = |index: &Index| index.shifted(dn);
    film.profile = match &film.profile {
        Profile::Uniform(index) => Profile::Uniform(shifted(index)?),
        Profile::Graded(gradient) => Profile::Graded(Gradient {
            front: shifted(&gradient.front)?,
            back: shifted(&gradient.back)?,
            ..gradient.clone()
        }),
    };
    Ok(())
}

impl Collecting {
    /// The draws of a layer: its own variation in place of the chamber's for each layer; of a graded one half of each
    /// material's.
    fn layer(&mut self, chamber: Option<&Chamber>, layer: &Layer, element: usize, run: usize) {
        if let Some(own) = &layer.variation {
            let cause = self.cause(own, Varying::Thickness, layer.call());
            let effect = Effect::Thickness(element, nanometres(own, layer));
            self.add((cause, Some(element), None), own.kind, effect);
        }
        let materials: Vec<_> = layer.material.materials().collect();
        let share = 1.0 / materials.len() as f64;
        for material in &materials {
            let deposit = chamber
                .and_then(|chamber| chamber.deposits.iter().find(|deposit| deposit.material.is(material)));
            let Some(Deposit { thickness_variations, index_variations, material, .. }) = deposit else {
                continue;
            };
            for variation in thickness_variations {
                if variation.each == Each::Layer && layer.variation.is_some() {
                    continue;
                }
                let cause = self.cause(variation, Varying::Thickness, material.name.clone());
                let effect = Effect::Thickness(element, share * nanometres(variation, layer));
                self.add(key(cause, variation.each, element, run), variation.kind, effect);
            }
            for variation in index_variations {
                let Spread::Absolute(by) = variation.spread else { continue };
                let cause = self.cause(variation, Varying::Index, material.name.clone());
                self.add(
                    key(cause, variation.each, element, run),
                    variation.kind,
                    Effect::Index(element, share * by),
                );
            }
        }
    }

    fn cause(&mut self, variation: &Variation, varying: Varying, of: String) -> usize {
        let causes = &mut self.draws.causes;
        let known =
            |cause: &Cause| cause.place == variation.place && cause.of == of && cause.varying == varying;
        causes.iter().position(known).unwrap_or_else(|| {
            causes.push(Cause {
                varying,
                of,
                each: variation.each,
                kind: variation.kind,
                spread: variation.spread,
                place: variation.place,
            });
            causes.len() - 1
        })
    }

    fn add(&mut self, key: Key, kind: SpreadKind, effect: Effect) {
        let draws = &mut self.draws.draws;
        let at = *self.known.entry(key).or_insert_with(|| {
            draws.push(Draw { cause: key.0, kind, layer: key.1, run: key.2, effects: Vec::new() });
            draws.len() - 1
        });
        draws[at].effects.push(effect);
    }
}

fn key(cause: usize, each: Each, element: usize, run: usize) -> Key {
    match each {
        Each::Layer => (cause, Some(element), None),
        Each::Run => (cause, None, Some(run)),
        Each::Part => (cause, None, None),
    }
}

fn nanometres(variation: &Variation, layer: &Layer) -> f64 {
    match variation.spread {
        Spread::Absolute(nm) => nm,
        Spread::Relative(share) => share * layer.thickness,
    }
}
