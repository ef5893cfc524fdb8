//! Stacks: read as written from either end, turned into the light's order, repeats counted out.

use super::quantity::Wanted;
use super::{ModuleId, Resolver};
use crate::finding::FormFact;
use crate::model::{Body, BodyKind, Element, Layer, LayerMaterial, Material, Medium, Reference, Stack};
use crate::source::{Place, Span};
use crate::syntax::ast::{self, Block, StackStatement, Statement};
use crate::units::Dimension;
use std::collections::BTreeMap;
use std::f64::consts::FRAC_PI_2;
use std::sync::Arc;

/// The most films a stack may have, repeats counted out.
pub(crate) const MOST_FILMS: usize = 10_000;

/// An end of the stack as written.
enum End {
    Incident,
    Exit,
    /// A `substrate` without a thickness.
    HalfSpace,
}

/// What is read of a stack, in the order written.
#[derive(Default)]
pub(super) struct Reading {
    pub(super) elements: Vec<Element>,
    /// Names with the place of each and whether it stood in a repeat.
    pub(super) names: BTreeMap<String, (Place, usize)>,
    pub(super) sound: bool,
    too_many: bool,
    films: usize,
}

/// Where a layer stands.
#[derive(Clone, Copy)]
pub(super) struct Around {
    pub(super) repeated: bool,
    pub(super) copies: usize,
}

impl Resolver<'_> {
    /// A stack. `reference` is none where none was written, and holds none where it was wrong.
    pub(super) fn stack(
        &mut self,
        module: ModuleId,
        block: &Block<StackStatement>,
        reference: Option<Option<Reference>>,
    ) -> Option<Stack> {
        let ends = self.ends_of(module, block);
        let mut reading = Reading { sound: !block.broken && ends.is_some(), ..Reading::default() };
        let incident = block.statements.iter().find_map(|statement| match &statement.kind {
            StackStatement::Incident(name) => Some(name.clone()),
            _ => None,
        });
        let incident_material = incident.and_then(|name| self.material_named_quietly(module, &name));
        let scale = Scale { reference, incident: incident_material };
        let mut media: Vec<(usize, Medium)> = Vec::new();
        for (number, statement) in block.statements.iter().enumerate() {
            self.statement(module, statement, number, &scale, &mut reading, &mut media);
        }
        let first_is_incident = ends?;
        if !reading.sound {
            return None;
        }
        let (mut first, mut last) = (None, None);
        for (number, medium) in media {
            if number == 0 { first = Some(medium) } else { last = Some(medium) }
        }
        let (first, last) = (first?, last?);
        let layers = reading.elements.iter_mut().filter_map(|element| match element {
            Element::Layer(layer) => Some(layer),
            Element::Body(_) => None,
        });
        for (index, layer) in layers.enumerate() {
            layer.number = index + 1;
        }
        let place = self.place(module, block.span);
        let (incident, exit) = if first_is_incident { (first, last) } else { (last, first) };
        if !first_is_incident {
            reading.elements.reverse();
            for element in &mut reading.elements {
                if let Element::Layer(Layer { material: LayerMaterial::Graded(graded), .. }) = element {
                    std::mem::swap(&mut graded.front, &mut graded.back);
                }
            }
        }
        let elements = reading.elements;
        let stack = Stack { place, written_from_incident: first_is_incident, incident, elements, exit };
        self.evaluable(module, &stack).then_some(stack)
    }

    /// Says what there is no optics for: light inside a textured piece, a film rougher than it is thick.
    fn evaluable(&mut self, module: ModuleId, stack: &Stack) -> bool {
        let inside = stack.elements.iter().find_map(|element| match element {
            Element::Body(body) => body.textured,
            Element::Layer(_) => None,
        });
        if let Some((_, place)) = inside.or(stack.incident.textured) {
            let problem = "light runs on inside a textured piece";
            let remedy = "leave out the piece's thickness and put it last, so that what enters it counts as absorbed in it";
            self.order(module, place.span, problem, remedy);
            return false;
        }
        if let Some((thin, roughest)) = stack.too_rough()
            && let Some((_, place)) = roughest.rough
        {
            let shown = format!("`{}`", self.written(module, place.span));
            let thickness = (10.0 * thin.thickness).round() / 10.0;
            let must =
                format!("small against the {thickness} nm of {}, its faces taken together", thin.call());
            self.invalid(module, place.span, "this face", &shown, &must);
            return false;
        }
        true
    }

    fn material_named_quietly(&mut self, module: ModuleId, name: &ast::Name) -> Option<Arc<Material>> {
        let (item, _) = self.find(module, &name.text, super::names::Kind::Material)?.item?;
        self.material(item)
    }

    /// Checks both ends and the order of bodies; says whether the stack was written from the light's side.
    fn ends_of(&mut self, module: ModuleId, block: &Block<StackStatement>) -> Option<bool> {
        let statements = &block.statements;
        if statements.is_empty() {
            if !block.broken {
                self.order(
                    module,
                    block.span,
                    "it is empty",
                    "begin with `incident` and end with `substrate` or `exit`",
                );
            }
            return None;
        }
        // Statements that could not be read may be the ends that are missing.
        if block.broken
            && (end_of(&statements[0]).is_none() || end_of(&statements[statements.len() - 1]).is_none())
        {
            return None;
        }
        let first = &statements[0];
        let Some(first_end) = end_of(first) else {
            let begins = describe(&first.kind);
            let remedy = "begin with the side that the light comes from, `incident air`, or, written as deposited, with \
                          `substrate` or `exit`";
            self.order(module, first.span, &format!("it begins with {begins}"), remedy);
            return None;
        };
        let from_incident = matches!(first_end, End::Incident);
        let mut ended: Option<usize> = None;
        let mut thick_since_end: Option<Span> = None;
        for (number, statement) in statements.iter().enumerate().skip(1) {
            if ended.is_some() && !matches!(statement.kind, StackStatement::Textured(_)) {
                let problem = format!("{} follows its end", describe(&statement.kind));
                self.order(module, statement.span, &problem, "write what lies between the ends between them");
                return None;
            }
            if let StackStatement::Substrate { thickness: Some(_), .. } | StackStatement::Slab { .. } =
                statement.kind
            {
                thick_since_end = Some(statement.span);
            }
            if let StackStatement::Textured(_) = statement.kind {
                let before = &statements[number - 1].kind;
                if !matches!(before, StackStatement::Substrate { .. }) {
                    self.order(
                        module,
                        statement.span,
                        "`textured` does not follow a substrate",
                        "write it right after `substrate`",
                    );
                    return None;
                }
            }
            match end_of(statement) {
                None => {}
                Some(End::Incident) if !from_incident => ended = Some(number),
                Some(End::Exit | End::HalfSpace) if from_incident => ended = Some(number),
                Some(_) => {
                    let problem = if from_incident {
                        "it has two `incident` sides".to_owned()
                    } else {
                        format!(
                            "{} stands inside it, and its far end is there already",
                            describe(&statement.kind)
                        )
                    };
                    let remedy =
                        if from_incident { "keep one, at one end" } else { "end it with `incident`" };
                    self.order(module, statement.span, &problem, remedy);
                    return None;
                }
            }
        }
        if ended.is_none() {
            let last = &statements[statements.len() - 1];
            if block.broken {
                return None;
            }
            let (problem, remedy) = if !from_incident {
                (
                    "it does not end with the side that the light comes from".to_owned(),
                    "end it with `incident air` or the like",
                )
            } else if thick_since_end.is_some() {
                ("nothing lies behind its thick piece".to_owned(), "end it with `exit air` or the like")
            } else {
                (format!("it ends with {}", describe(&last.kind)), "end it with `substrate` or `exit`")
            };
            self.order(module, last.span, &problem, remedy);
            return None;
        }
        Some(from_incident)
    }

    fn order(&mut self, module: ModuleId, span: Span, problem: &str, remedy: &str) {
        let fact = FormFact::StackOrder { problem: problem.to_owned(), remedy: remedy.to_owned() };
        self.report(module, span, fact);
    }

    fn statement(
        &mut self,
        module: ModuleId,
        statement: &Statement<StackStatement>,
        number: usize,
        scale: &Scale,
        reading: &mut Reading,
        media: &mut Vec<(usize, Medium)>,
    ) {
        let place = self.place(module, statement.span);
        match &statement.kind {
            StackStatement::Incident(name) | StackStatement::Exit(name) => {
                match self.material_named(module, name) {
                    Some(material) => {
                        media.push((number, Medium { material, place, substrate: false, textured: None }))
                    }
                    None => reading.sound = false,
                }
            }
            StackStatement::Substrate { material: name, thickness: None } => {
                match self.material_named(module, name) {
                    Some(material) => {
                        media.push((number, Medium { material, place, substrate: true, textured: None }))
                    }
                    None => reading.sound = false,
                }
            }
            StackStatement::Substrate { material, thickness } => {
                let body =
                    self.body(module, material, thickness.as_ref(), BodyKind::Substrate, statement.span);
                reading.keep(body.map(Element::Body));
            }
            StackStatement::Slab { material, thickness } => {
                let body = self.body(module, material, thickness.as_ref(), BodyKind::Slab, statement.span);
                reading.keep(body.map(Element::Body));
            }
            StackStatement::Textured(expr) => {
                let angle = self.quantity(module, expr, Dimension::Angle, "the facets' angle");
                let angle = angle.filter(|angle| {
                    let fits = *angle > 0.0 && *angle < FRAC_PI_2;
                    if !fits {
                        let shown = self.written(module, expr.span);
                        self.invalid(module, expr.span, "the facets' angle", &shown, "between 0 and 90 deg");
                    }
                    fits
                });
                let Some(angle) = angle else {
                    reading.sound = false;
                    return;
                };
                // It belongs to the substrate before it: the last medium or the last body read.
                let medium_is_last = media.last().is_some_and(|(at, _)| *at + 1 == number);
                if medium_is_last {
                    if let Some((_, medium)) = media.last_mut() {
                        medium.textured = Some((angle, place));
                    }
                } else if let Some(Element::Body(body)) = reading.elements.last_mut() {
                    body.textured = Some((angle, place));
                }
            }
            StackStatement::Layer(_) | StackStatement::Repeat { .. } => {
                self.films(module, statement, Around { repeated: false, copies: 1 }, scale, reading);
            }
        }
    }

    fn body(
        &mut self,
        module: ModuleId,
        material: &ast::Name,
        thickness: Option<&ast::Expr>,
        kind: BodyKind,
        span: Span,
    ) -> Option<Body> {
        let material = self.material_named(module, material);
        let Some(written) = thickness else {
            self.missing(
                module,
                span,
                "a thickness",
                "the slab",
                "write it after the material, for example `450 um`",
            );
            return None;
        };
        // A bare 3 behind a thick piece is no 3 nm.
        let wanted = Wanted { dimension: Dimension::Length, unit: "mm" };
        let thickness = self.positive(module, written, wanted, "a thickness", false);
        Some(Body {
            material: material?,
            thickness: thickness?,
            kind,
            place: self.place(module, span),
            textured: None,
        })
    }

    /// A layer or a repeat, inside a repeat or not.
    fn films(
        &mut self,
        module: ModuleId,
        statement: &Statement<StackStatement>,
        around: Around,
        scale: &Scale,
        reading: &mut Reading,
    ) {
        match &statement.kind {
            StackStatement::Layer(layer) => {
                reading.films += 1;
                let layer = self.layer(module, layer, statement.span, around, scale, reading);
                reading.keep(layer.map(Element::Layer));
            }
            StackStatement::Repeat { count, body } => {
                let times = self.count(module, count, "the number of repeats", MOST_FILMS as f64);
                let Some(times) = times else {
                    reading.sound = false;
                    return;
                };
                self.repeat(module, count.span, times as usize, body, around, scale, reading);
            }
            other => {
                let problem = format!("{} stands inside a `repeat`", describe(other));
                self.order(module, statement.span, &problem, "keep only layers in it");
                reading.sound = false;
            }
        }
    }

    /// Reads the block once, with its findings, and then copies it.
    #[allow(clippy::too_many_arguments)]
    fn repeat(
        &mut self,
        module: ModuleId,
        count_span: Span,
        times: usize,
        body: &Block<StackStatement>,
        around: Around,
        scale: &Scale,
        reading: &mut Reading,
    ) {
        reading.sound &= !body.broken;
        let start = reading.elements.len();
        let films_before = reading.films;
        let inside = Around { repeated: true, copies: around.copies.saturating_mul(times) };
        for statement in &body.statements {
            self.films(module, statement, inside, scale, reading);
        }
        let films = reading.films - films_before;
        let total = films_before.saturating_add(films.saturating_mul(times));
        if total > MOST_FILMS && !reading.too_many {
            let must = format!("few enough for at most {MOST_FILMS} films in the stack");
            let shown = self.written(module, count_span);
            self.invalid(module, count_span, "the number of repeats", &shown, &must);
            reading.too_many = true;
        }
        if reading.too_many {
            reading.sound = false;
            return;
        }
        reading.films = total;
        let block: Vec<Element> = reading.elements[start..].to_vec();
        for _ in 1..times {
            for element in &block {
                let mut element = element.clone();
                if let Element::Layer(layer) = &mut element {
                    let base = layer.name.as_ref().and_then(|name| name.split('[').next()).map(str::to_owned);
                    if let Some((_, copies)) = base.as_ref().and_then(|base| reading.names.get_mut(base)) {
                        *copies += 1;
                        layer.name = base.as_ref().map(|base| format!("{base}[{copies}]"));
                    }
                }
                reading.elements.push(element);
            }
        }
    }
}

impl Reading {
    fn keep(&mut self, element: Option<Element>) {
        match element {
            Some(element) => self.elements.push(element),
            None => self.sound = false,
        }
    }
}

/// What quarter-waves are counted by.
pub(super) struct Scale {
    /// None where no `reference` was written; holds none where it was wrong.
    pub(super) reference: Option<Option<Reference>>,
    pub(super) incident: Option<Arc<Material>>,
}

fn end_of(statement: &Statement<StackStatement>) -> Option<End> {
    match &statement.kind {
        StackStatement::Incident(_) => Some(End::Incident),
        StackStatement::Exit(_) => Some(End::Exit),
        StackStatement::Substrate { thickness: None, .. } => Some(End::HalfSpace),
        _ => None,
    }
}

fn describe(kind: &StackStatement) -> &'static str {
    match kind {
        StackStatement::Incident(_) => "`incident`",
        StackStatement::Exit(_) => "`exit`",
        StackStatement::Substrate { thickness: None, .. } => "a `substrate` without a thickness",
        StackStatement::Substrate { .. } => "a thick `substrate`",
        StackStatement::Slab { .. } => "a `slab`",
        StackStatement::Textured(_) => "`textured`",
        StackStatement::Layer(_) => "a layer",
        StackStatement::Repeat { .. } => "a `repeat`",
    }
}
