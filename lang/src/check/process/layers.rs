//! What each layer asks of the chamber: a source, a thickness that it can make and set, a neighbour that it may touch.

use super::{Shop, name_of};
use crate::finding::{Finding, Trouble};
use crate::model::{CoatedSide, Layer, LayerMaterial, Material, Thickness};
use crate::source::Place;
use std::collections::BTreeSet;
use std::sync::Arc;

/// How far a thickness may be from a multiple of the controller's step, as a share of the step: binary fractions.
const SETTABLE: f64 = 1e-6;

/// How far a thickness may be beyond a source's range, as a share of the range's end: binary fractions again.
const ROUNDING: f64 = 1e-9;

pub(super) fn check(shop: &Shop<'_>, side: &CoatedSide, findings: &mut Vec<Finding>) {
    let mut told: BTreeSet<Place> = BTreeSet::new();
    let mut touching: BTreeSet<(Place, Place)> = BTreeSet::new();
    let mut below: Option<&Layer> = None;
    for layer in shop.layers(side) {
        // A statement inside a repeat speaks for all its copies.
        if told.insert(layer.place) {
            sources(shop, layer, findings);
            settable(shop, layer, findings);
        }
        let (lower, lower_at) = match below {
            Some(below) => (facing(below, side, true), below.place),
            None => (side.base.clone(), base_place(shop, side)),
        };
        if touching.insert((layer.place, lower_at)) {
            forbidden(shop, layer, &facing(layer, side, false), &lower, lower_at, findings);
        }
        below = Some(layer);
    }
}

/// A source for each material, and a thickness that it makes.
fn sources(shop: &Shop<'_>, layer: &Layer, findings: &mut Vec<Finding>) {
    for material in layer.material.materials() {
        let Some(deposit) = shop.chamber.deposits.iter().find(|deposit| deposit.material.is(material)) else {
            let trouble = Trouble::NotDeposited {
                layer: name_of(layer),
                material: material.name.clone(),
                deposits: shop.chamber.deposits.iter().map(|deposit| deposit.material.name.clone()).collect(),
            };
            findings.push(shop.find(trouble, shop.chamber.place, layer.place));
            continue;
        };
        let Some((least, most, said_at)) = deposit.thickness else { continue };
        if layer.thickness < least * (1.0 - ROUNDING) {
            let trouble = Trouble::TooThin { layer: name_of(layer), least };
            findings.push(shop.find(trouble, said_at, layer.place));
        } else if layer.thickness > most * (1.0 + ROUNDING) {
            let trouble = Trouble::TooThick { layer: name_of(layer), most };
            findings.push(shop.find(trouble, said_at, layer.place));
        }
    }
}

/// A thickness that the controller can set. Quarter-waves are rounded to its step when they are loaded.
fn settable(shop: &Shop<'_>, layer: &Layer, findings: &mut Vec<Finding>) {
    let Some((step, said_at)) = shop.chamber.resolution else { return };
    if layer.written != Thickness::Length {
        return;
    }
    let steps = layer.thickness / step;
    if (steps - steps.round()).abs() > SETTABLE {
        let nearest = (steps.floor() * step, steps.ceil() * step);
        let trouble = Trouble::BelowResolution { layer: name_of(layer), step, nearest };
        findings.push(shop.find(trouble, said_at, layer.place));
    }
}

/// The material at a layer's face: the one away from the piece (`upper`) or the one towards it.
fn facing(layer: &Layer, side: &CoatedSide, upper: bool) -> Arc<Material> {
    match &layer.material {
        LayerMaterial::Plain(material) => material.clone(),
        // On a front side the face away from the piece is the one that the light meets first.
        LayerMaterial::Graded(graded) if side.front == upper => graded.front.clone(),
        LayerMaterial::Graded(graded) => graded.back.clone(),
    }
}

fn base_place(shop: &Shop<'_>, side: &CoatedSide) -> Place {
    let bodies = shop.stack.elements.iter().find_map(|element| match element {
        crate::model::Element::Body(body) if body.material.is(&side.base) => Some(body.place),
        _ => None,
    });
    bodies.unwrap_or(if side.front { shop.stack.exit.place } else { shop.stack.incident.place })
}

fn forbidden(
    shop: &Shop<'_>,
    layer: &Layer,
    upper: &Arc<Material>,
    lower: &Arc<Material>,
    lower_at: Place,
    findings: &mut Vec<Finding>,
) {
    for forbid in &shop.chamber.forbids {
        if forbid.upper.is(upper) && forbid.lower.is(lower) {
            let trouble = Trouble::Forbidden {
                layer: name_of(layer),
                lower: lower.name.clone(),
                lower_at,
                because: forbid.because.clone(),
            };
            findings.push(shop.find(trouble, forbid.place, layer.place));
        }
    }
}
