//! Chambers: sources, limits, variation.

use super::names::Kind;
use super::quantity::Wanted;
use super::{ItemId, ModuleId, Resolver};
use crate::finding::FormFact;
use crate::model::{Chamber, Deposit, Forbid, Limit, LimitKind, LimitRange, Material, Spread, Variation};
use crate::source::Span;
use crate::syntax::ast::{
    self, Block, BoundKind, ChamberStatement, DepositStatement, Each, Expr, Item, Name, Per, Varying,
};
use crate::units::Dimension;
use std::sync::Arc;

impl Resolver<'_> {
    /// A chamber.
    pub(super) fn chamber(&mut self, item: ItemId) -> Option<Arc<Chamber>> {
        if let Some(chamber) = self.chambers.get(&item) {
            return Some(chamber.clone());
        }
        let (module, number) = item;
        let syntax = self.modules[module.0].syntax.clone();
        let Item::Chamber(written) = &syntax.items[number].kind else { return None };
        let mut chamber = Chamber {
            name: written.name.text.clone(),
            title: written.title.as_ref().map(|title| title.value.clone()),
            place: self.place(module, written.name.span),
            description: syntax.items[number].description.clone(),
            deposits: Vec::new(),
            angle_variations: Vec::new(),
            overhead_per_run: None,
            overhead_per_layer: None,
            resolution: None,
            forbids: Vec::new(),
            limits: Vec::new(),
        };
        for statement in &written.body.statements {
            let (keyword, span) = (statement.keyword, statement.span);
            match &statement.kind {
                ChamberStatement::Deposit { material, body } => {
                    self.add_deposit(module, &mut chamber, material, body, span)
                }
                ChamberStatement::AngleVaries { spread, each } => {
                    let spread = self.spread(module, spread, Dimension::Angle, *each, span);
                    chamber.angle_variations.extend(spread);
                }
                ChamberStatement::Overhead { time, per } => {
                    let time = self.positive(module, time, Dimension::Time, "an overhead", true);
                    let (slot, word) = match per {
                        Per::Run => (&mut chamber.overhead_per_run, "overhead … per run"),
                        Per::Layer => (&mut chamber.overhead_per_layer, "overhead … per layer"),
                    };
                    self.set(module, slot, word, keyword, span, time);
                }
                ChamberStatement::Resolution(expr) => {
                    let step = self.positive(module, expr, Dimension::Length, "a resolution", false);
                    self.set(module, &mut chamber.resolution, "resolution", keyword, span, step);
                }
                ChamberStatement::Forbid { upper, lower, because } => {
                    let upper = self.material_named(module, upper);
                    let lower = self.material_named(module, lower);
                    if let (Some(upper), Some(lower)) = (upper, lower) {
                        let because = because.as_ref().map(|text| text.value.clone());
                        chamber.forbids.push(Forbid {
                            upper,
                            lower,
                            because,
                            place: self.place(module, span),
                        });
                    }
                }
                ChamberStatement::Limit { what, bound } => {
                    chamber.limits.extend(self.limit(module, what, bound, span));
                }
                ChamberStatement::Source(_) => {}
            }
        }
        let chamber = Arc::new(chamber);
        self.chambers.insert(item, chamber.clone());
        Some(chamber)
    }

    /// The material of this name in `module`.
    pub(super) fn material_named(&mut self, module: ModuleId, name: &Name) -> Option<Arc<Material>> {
        let item = self.lookup(module, name, Kind::Material)?;
        self.material(item)
    }

    /// Keeps a value that may be set once; reports the statement that sets it again.
    fn set(
        &mut self,
        module: ModuleId,
        slot: &mut Option<(f64, crate::source::Place)>,
        word: &str,
        keyword: Span,
        span: Span,
        value: Option<f64>,
    ) {
        if let Some((_, first)) = slot {
            let fact = FormFact::Repeated { what: word.to_owned(), first: *first };
            self.report(module, keyword, fact);
        } else if let Some(value) = value {
            *slot = Some((value, self.place(module, span)));
        }
    }

    fn add_deposit(
        &mut self,
        module: ModuleId,
        chamber: &mut Chamber,
        name: &Name,
        body: &Block<DepositStatement>,
        span: Span,
    ) {
        let material = self.material_named(module, name);
        let deposit = self.deposit(module, material.clone(), body, span);
        let Some(deposit) = deposit else { return };
        if let Some(first) = chamber.deposits.iter().find(|other| other.material.is(&deposit.material)) {
            let fact = FormFact::DuplicateName { name: name.text.clone(), first: first.place };
            self.report(module, name.span, fact);
            return;
        }
        chamber.deposits.push(deposit);
    }

    /// A source; its statements are looked at even where its material is unknown.
    fn deposit(
        &mut self,
        module: ModuleId,
        material: Option<Arc<Material>>,
        body: &Block<DepositStatement>,
        span: Span,
    ) -> Option<Deposit> {
        let (mut rate, mut tooling) = (None, None);
        let (mut temperature, mut capacity) = (None, None);
        let mut thickness: Option<(f64, f64, crate::source::Place)> = None;
        let (mut thickness_variations, mut index_variations) = (Vec::new(), Vec::new());
        for statement in &body.statements {
            let (keyword, span) = (statement.keyword, statement.span);
            match &statement.kind {
                DepositStatement::Rate(expr) => {
                    let value = self.positive(module, expr, Dimension::Rate, "a rate", false);
                    self.set(module, &mut rate, "rate", keyword, span, value);
                }
                DepositStatement::Thickness(range) => {
                    let value = self.range(module, range, Dimension::Length, "a thickness");
                    if let Some((_, _, first)) = thickness {
                        self.report(
                            module,
                            keyword,
                            FormFact::Repeated { what: "thickness".to_owned(), first },
                        );
                    } else if let Some((low, high)) = value {
                        if low < 0.0 || high <= 0.0 {
                            let shown = self.written(module, range.span);
                            self.invalid(module, range.span, "what a layer may be", &shown, "greater than 0");
                        } else {
                            thickness = Some((low, high, self.place(module, span)));
                        }
                    }
                }
                DepositStatement::Varies { what: Varying::Thickness, spread, each } => {
                    thickness_variations.extend(self.spread(module, spread, Dimension::Length, *each, span));
                }
                DepositStatement::Varies { what: Varying::Index, spread, each } => {
                    index_variations.extend(self.spread(module, spread, Dimension::Ratio, *each, span));
                }
                DepositStatement::Temperature(expr) => {
                    let value = self.quantity(module, expr, Dimension::Temperature, "a temperature");
                    let value = value.filter(|celsius| self.kelvin(module, expr.span, *celsius).is_some());
                    self.set(module, &mut temperature, "temperature", keyword, span, value);
                }
                DepositStatement::Capacity(expr) => {
                    let value = self.positive(module, expr, Dimension::Length, "a capacity", false);
                    self.set(module, &mut capacity, "capacity", keyword, span, value);
                }
                DepositStatement::Tooling(expr) => {
                    let value = self.positive(module, expr, Dimension::Ratio, "a tooling factor", false);
                    self.set(module, &mut tooling, "tooling", keyword, span, value);
                }
            }
        }
        Some(Deposit {
            material: material?,
            place: self.place(module, span),
            rate: rate.map(|(value, _)| value),
            thickness,
            thickness_variations,
            index_variations,
            temperature,
            capacity,
            tooling: tooling.map(|(value, _)| value),
        })
    }

    /// A variation of a quantity of this dimension; a thickness may vary by a share of itself.
    pub(super) fn spread(
        &mut self,
        module: ModuleId,
        spread: &ast::Spread,
        dimension: Dimension,
        each: Each,
        span: Span,
    ) -> Option<Variation> {
        let value = self.value(module, &spread.value)?;
        let relative =
            dimension == Dimension::Length && value.dimension == Dimension::Ratio && has_share(&spread.value);
        let number = if relative {
            value.number
        } else {
            let role = match dimension {
                Dimension::Length => "how much a thickness varies",
                Dimension::Angle => "how much the angle varies",
                _ => "how much the index varies",
            };
            self.expect(module, spread.value.span, value, dimension, role)?
        };
        if number < 0.0 {
            let shown = self.written(module, spread.value.span);
            self.invalid(module, spread.value.span, "how much it varies", &shown, "0 or more");
            return None;
        }
        let size = if relative { Spread::Relative(number) } else { Spread::Absolute(number) };
        Some(Variation { kind: spread.kind, spread: size, each, place: self.place(module, span) })
    }

    fn limit(&mut self, module: ModuleId, what: &Name, bound: &ast::Bound, span: Span) -> Option<Limit> {
        let Some((kind, _)) = LimitKind::ALL.iter().find(|(_, word)| *word == what.text) else {
            let near = super::nearest(&what.text, LimitKind::ALL.iter().map(|(_, word)| *word));
            let fact = FormFact::UnknownName { kind: "limit", name: what.text.clone(), near, import: None };
            self.report(module, what.span, fact);
            return None;
        };
        let (dimension, role) = match kind {
            LimitKind::Layers => (Dimension::Ratio, "a number of layers"),
            LimitKind::Thickness => (Dimension::Length, "a limit of thickness"),
            LimitKind::Duration => (Dimension::Time, "a limit of duration"),
            LimitKind::Temperature => (Dimension::Temperature, "a limit of temperature"),
            LimitKind::FilmForce => (Dimension::ForcePerWidth, "a limit of film force"),
        };
        let mut one = |expr: &Expr| self.quantity(module, expr, dimension, role);
        let range = match &bound.kind {
            BoundKind::AtMost(expr) => LimitRange { min: None, max: Some(one(expr)?) },
            BoundKind::AtLeast(expr) => LimitRange { min: Some(one(expr)?), max: None },
            BoundKind::Between(range) => {
                let (low, high) = self.range(module, range, dimension, role)?;
                LimitRange { min: Some(low), max: Some(high) }
            }
            BoundKind::Around { aim, tolerance } => {
                let (low, high) = self.around(module, aim, tolerance, dimension, role)?;
                LimitRange { min: Some(low), max: Some(high) }
            }
            _ => {
                let shown = self.written(module, bound.span);
                self.invalid(module, bound.span, "a limit", &shown, "`<= v`, `>= v` or `a .. b`");
                return None;
            }
        };
        Some(Limit { kind: *kind, range, place: self.place(module, span) })
    }

    /// `aim ± tolerance` as a range; a bare aim takes the tolerance's unit.
    pub(super) fn around(
        &mut self,
        module: ModuleId,
        aim: &Expr,
        tolerance: &Expr,
        wanted: impl Into<Wanted>,
        role: &str,
    ) -> Option<(f64, f64)> {
        let wanted = wanted.into();
        let values = self.list(module, &[aim, tolerance]);
        let middle = self.expect(module, aim.span, values[0]?, wanted, role);
        let width = self.expect(module, tolerance.span, values[1]?, wanted, "a tolerance");
        let (middle, width) = (middle?, width?);
        if width < 0.0 {
            let shown = self.written(module, tolerance.span);
            self.invalid(module, tolerance.span, "a tolerance", &shown, "0 or more");
            return None;
        }
        Some((middle - width, middle + width))
    }
}

/// Whether a ratio was written with its unit: `2 %` of the thickness is meant, a bare `2` is a missing unit.
fn has_share(expr: &Expr) -> bool {
    use ast::ExprKind;
    match &expr.kind {
        ExprKind::Number { unit, .. } => unit.is_some(),
        ExprKind::Name(_) | ExprKind::Call { .. } => true,
        ExprKind::Negative(inside) | ExprKind::Parenthesis(inside) => has_share(inside),
        ExprKind::Binary { left, right, .. } => has_share(left) || has_share(right),
    }
}
