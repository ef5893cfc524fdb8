//! Layers: what a film is made of, how thick it is, what it is called.

use super::stack::{Around, Reading, Scale};
use super::{ModuleId, Resolver};
use crate::finding::FormFact;
use crate::model::{Graded, Layer, LayerMaterial, Thickness};
use crate::source::{Place, Span};
use crate::syntax::ast::{self, Each, LayerOptionKind};
use crate::units::Dimension;

impl Resolver<'_> {
    pub(super) fn layer(
        &mut self,
        module: ModuleId,
        written: &ast::Layer,
        span: Span,
        around: Around,
        scale: &Scale,
        reading: &mut Reading,
    ) -> Option<Layer> {
        let place = self.place(module, span);
        let mut name = None;
        let (mut variation, mut fixed, mut between, mut rough) = (None, false, None, None);
        let (mut rule, mut steps) = (None, None);
        let mut sound = true;
        let mut seen: Vec<(&'static str, Span)> = Vec::new();
        for option in &written.options {
            let word = match &option.kind {
                LayerOptionKind::As(given) => {
                    name = self.layer_name(module, given, around, reading);
                    "as"
                }
                LayerOptionKind::Spread(spread) => {
                    variation = self.spread(module, spread, Dimension::Length, Each::Layer, option.span);
                    sound &= variation.is_some();
                    "± …"
                }
                LayerOptionKind::Fixed => {
                    fixed = true;
                    "fixed"
                }
                LayerOptionKind::Between(range) => {
                    between = self.range(module, range, Dimension::Length, "what refining may change");
                    sound &= between.is_some();
                    "between"
                }
                LayerOptionKind::Rough(expr) => {
                    let rms = self.positive(module, expr, Dimension::Length, "a roughness", true);
                    let place = self.place(module, option.span);
                    rough = rms.map(|rms| (rms, place));
                    sound &= rough.is_some();
                    "rough"
                }
                LayerOptionKind::By(by) => {
                    rule = Some((by.clone(), option.span));
                    "by"
                }
                LayerOptionKind::Steps(expr) => {
                    let number = self.count(module, expr, "the number of steps", 1000.0);
                    sound &= number.is_some();
                    steps = number.map(|number| (number, option.span));
                    "in … steps"
                }
            };
            match seen.iter().find(|(other, _)| *other == word) {
                Some((_, first)) => {
                    let first = self.place(module, *first);
                    self.report(module, option.span, FormFact::Repeated { what: word.to_owned(), first });
                    sound = false;
                }
                None => seen.push((word, option.span)),
            }
        }
        let material = self.layer_material(module, &written.material, rule, steps);
        let thickness = self.thickness(module, written, material.as_ref(), scale, span);
        let (material, (thickness, how, thickness_place)) = (material?, thickness?);
        if fixed && between.is_some() {
            self.invalid(module, span, "a layer", "`fixed` and `between`", "one of the two");
            return None;
        }
        sound.then_some(Layer {
            material,
            thickness,
            written: how,
            name,
            // Counted once all repeats are counted out.
            number: 0,
            place,
            thickness_place,
            variation,
            fixed,
            between,
            rough,
            copies: around.copies,
        })
    }

    /// A layer's name: its own outside a repeat, with an index inside.
    fn layer_name(
        &mut self,
        module: ModuleId,
        given: &ast::Name,
        around: Around,
        reading: &mut Reading,
    ) -> Option<String> {
        if let Some((first, _)) = reading.names.get(&given.text) {
            let fact = FormFact::DuplicateName { name: given.text.clone(), first: *first };
            self.report(module, given.span, fact);
            reading.sound = false;
            return None;
        }
        let place = self.place(module, given.span);
        reading.names.insert(given.text.clone(), (place, 1));
        Some(if around.repeated { format!("{}[1]", given.text) } else { given.text.clone() })
    }

    fn layer_material(
        &mut self,
        module: ModuleId,
        written: &ast::LayerMaterial,
        rule: Option<(ast::Name, Span)>,
        steps: Option<(u32, Span)>,
    ) -> Option<LayerMaterial> {
        match written {
            ast::LayerMaterial::Plain(name) => {
                let material = self.material_named(module, name);
                let stray =
                    rule.map(|(_, span)| ("by", span)).or(steps.map(|(_, span)| ("in … steps", span)));
                if let Some((word, span)) = stray {
                    let must = "left out: only a graded layer has it";
                    self.invalid(module, span, "an option of this layer", &format!("`{word}`"), must);
                    return None;
                }
                material.map(LayerMaterial::Plain)
            }
            ast::LayerMaterial::Graded { from, to } => {
                let front = self.material_named(module, from);
                let back = self.material_named(module, to);
                let rule = self.mixing_rule(module, rule.as_ref().map(|(name, _)| name));
                let steps = steps.map(|(number, _)| number);
                Some(LayerMaterial::Graded(Graded { front: front?, back: back?, rule: rule?, steps }))
            }
        }
    }

    fn thickness(
        &mut self,
        module: ModuleId,
        written: &ast::Layer,
        material: Option<&LayerMaterial>,
        scale: &Scale,
        span: Span,
    ) -> Option<(f64, Thickness, Place)> {
        let Some(expr) = &written.thickness else {
            self.missing(
                module,
                span,
                "a thickness",
                "the layer",
                "write it after the material, for example `62 nm`",
            );
            return None;
        };
        let value = self.value(module, expr)?;
        let place = self.place(module, expr.span);
        if value.number < 0.0 {
            let shown = self.written(module, expr.span);
            self.invalid(module, expr.span, "a thickness", &shown, "0 or more");
            return None;
        }
        if value.dimension != Dimension::OpticalThickness {
            let nm = self.expect(module, expr.span, value, Dimension::Length, "a thickness")?;
            return Some((nm, Thickness::Length, place));
        }
        let Some(reference) = scale.reference else {
            let hint = "write `reference 600 nm` in the recipe, or give the thickness as a length";
            self.missing(module, expr.span, "`reference`", "the recipe, which has quarter-waves,", hint);
            return None;
        };
        let (reference, material) = (reference?, material?);
        let LayerMaterial::Plain(material) = material else {
            let must = "given as a length: a graded layer has no one index";
            let shown = self.written(module, expr.span);
            self.invalid(module, expr.span, "a graded layer's thickness", &shown, must);
            return None;
        };
        let n = self.index_at(module, expr.span, material, reference.wavelength)?.re;
        let sine = if reference.angle > 0.0 {
            let incident = scale.incident.as_ref()?;
            self.index_at(module, expr.span, incident, reference.wavelength)?.re * reference.angle.sin() / n
        } else {
            0.0
        };
        if sine >= 1.0 {
            let shown = self.written(module, expr.span);
            let must = "given as a length: at the reference's angle no light runs through this layer";
            self.invalid(module, expr.span, "an optical thickness", &shown, must);
            return None;
        }
        // A quarter-wave: n d cos θ = λ/4 (Born and Wolf, Principles of Optics, 1.6).
        let nm = value.number * reference.wavelength / (4.0 * n * (1.0 - sine * sine).sqrt());
        Some((nm, Thickness::Quarters(value.number), place))
    }
}
