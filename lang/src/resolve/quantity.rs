//! Values of a wanted dimension: lengths, wavelengths, angles, ranges and lists.

use super::expression::Value;
use super::{ModuleId, Resolver};
use crate::finding::{FormFact, OpticsFact};
use crate::model::Material;
use crate::source::Span;
use crate::syntax::ast::{Expr, ExprKind, Range, Unit};
use crate::units::{self, Dimension, is_bare};
use num_complex::Complex64;
use overcoat_engine::IndexError;
use std::sync::Arc;

/// The dimension that a place needs, with the unit that its messages name.
#[derive(Clone, Copy, Debug)]
pub(super) struct Wanted {
    pub(super) dimension: Dimension,
    pub(super) unit: &'static str,
}

impl From<Dimension> for Wanted {
    fn from(dimension: Dimension) -> Wanted {
        Wanted { dimension, unit: dimension.usual_unit() }
    }
}

impl Resolver<'_> {
    /// A value of one dimension, in its base unit.
    pub(super) fn quantity(
        &mut self,
        module: ModuleId,
        expr: &Expr,
        wanted: impl Into<Wanted>,
        role: &str,
    ) -> Option<f64> {
        let value = self.value(module, expr)?;
        self.expect(module, expr.span, value, wanted, role)
    }

    /// The number of a value if it has this dimension; otherwise says so.
    pub(super) fn expect(
        &mut self,
        module: ModuleId,
        span: Span,
        value: Value,
        wanted: impl Into<Wanted>,
        role: &str,
    ) -> Option<f64> {
        let Wanted { dimension, unit } = wanted.into();
        if value.dimension == dimension {
            return Some(value.number);
        }
        let found = self.found(module, span, value);
        if value.dimension == Dimension::Ratio {
            self.mismatch(module, span, role, dimension.phrase(), found, Some(unit));
        } else if unit == dimension.usual_unit() {
            self.mismatch(module, span, role, dimension.phrase(), found, None);
        } else {
            let needed = format!("{}, for example in `{unit}`", dimension.phrase());
            self.mismatch(module, span, role, &needed, found, None);
        }
        None
    }

    /// What a value of the wrong dimension is called: `5 %` and a named ratio are ratios, `5` only lacks its unit.
    pub(super) fn found(&self, module: ModuleId, span: Span, value: Value) -> &'static str {
        if value.dimension == Dimension::Ratio && is_bare(&self.written(module, span)) {
            "a number without a unit"
        } else {
            value.dimension.phrase()
        }
    }

    /// A value that must be greater than zero (or not negative), in its base unit.
    pub(super) fn positive(
        &mut self,
        module: ModuleId,
        expr: &Expr,
        wanted: impl Into<Wanted>,
        role: &str,
        zero_too: bool,
    ) -> Option<f64> {
        let number = self.quantity(module, expr, wanted, role)?;
        if number > 0.0 || (zero_too && number == 0.0) {
            return Some(number);
        }
        let must = if zero_too { "0 or more" } else { "greater than 0" };
        let shown = self.written(module, expr.span);
        self.invalid(module, expr.span, role, &shown, must);
        None
    }

    /// A whole number from 1 to `most`.
    pub(super) fn count(&mut self, module: ModuleId, expr: &Expr, role: &str, most: f64) -> Option<u32> {
        let number = self.quantity(module, expr, Dimension::Ratio, role)?;
        if number.fract() == 0.0 && (1.0..=most).contains(&number) {
            return Some(number as u32);
        }
        let shown = self.written(module, expr.span);
        self.invalid(module, expr.span, role, &shown, &format!("a whole number from 1 to {most}"));
        None
    }

    /// A vacuum wavelength in nm, from a length, a photon energy, a wavenumber or a frequency.
    pub(super) fn wavelength(&mut self, module: ModuleId, expr: &Expr, role: &str) -> Option<f64> {
        let value = self.value(module, expr)?;
        self.as_wavelength(module, expr.span, value, role)
    }

    pub(super) fn as_wavelength(
        &mut self,
        module: ModuleId,
        span: Span,
        value: Value,
        role: &str,
    ) -> Option<f64> {
        if !value.dimension.spectral() {
            let suggestion = (value.dimension == Dimension::Ratio).then_some("nm");
            let found = self.found(module, span, value);
            self.mismatch(module, span, role, "a wavelength", found, suggestion);
            return None;
        }
        let wavelength = units::wavelength_nm(value.number, value.dimension);
        if wavelength.is_none() {
            let shown = self.written(module, span);
            self.invalid(module, span, role, &shown, "greater than 0");
        }
        wavelength
    }

    /// A photon energy in eV, from an energy or any other spectral quantity.
    pub(super) fn energy(&mut self, module: ModuleId, expr: &Expr, role: &str) -> Option<f64> {
        self.positive(module, expr, Dimension::Energy, role, false)
    }

    /// An angle of incidence in rad: from 0 to below 90°.
    pub(super) fn incidence(
        &mut self,
        module: ModuleId,
        span: Span,
        value: Value,
        role: &str,
    ) -> Option<f64> {
        let angle = self.expect(module, span, value, Dimension::Angle, role)?;
        if (0.0..std::f64::consts::FRAC_PI_2 - 1e-12).contains(&angle) {
            return Some(angle);
        }
        let shown = self.written(module, span);
        self.invalid(module, span, role, &shown, "0 deg or more and less than 90 deg");
        None
    }

    /// The values of a list in which the last unit serves all that have none.
    pub(super) fn list(&mut self, module: ModuleId, exprs: &[&Expr]) -> Vec<Option<Value>> {
        let unit = exprs.iter().rev().find_map(|expr| last_unit(expr)).cloned();
        exprs
            .iter()
            .map(|expr| {
                let value = self.value(module, expr)?;
                let (Some(unit), None) = (&unit, last_unit(expr)) else { return Some(value) };
                // A bare number, or a calculation of bare numbers, but not the name of a quantity that has its own.
                if value.dimension != Dimension::Ratio || has_name(expr) {
                    return Some(value);
                }
                let scale = units::scale(&unit.text)?;
                let number = scale.base(value.number);
                self.finite(module, Value { number, dimension: scale.dimension }, expr.span)
            })
            .collect()
    }

    /// Both ends of a range; a bare first end takes the unit of the second.
    pub(super) fn ends(&mut self, module: ModuleId, range: &Range) -> Option<(Value, Value)> {
        let values = self.list(module, &[&range.low, &range.high]);
        Some((values[0]?, values[1]?))
    }

    /// A range of one dimension, lower end first; the ends may be alike.
    pub(super) fn range(
        &mut self,
        module: ModuleId,
        range: &Range,
        wanted: impl Into<Wanted>,
        role: &str,
    ) -> Option<(f64, f64)> {
        let wanted = wanted.into();
        let (low, high) = self.ends(module, range)?;
        let low = self.expect(module, range.low.span, low, wanted, role);
        let high = self.expect(module, range.high.span, high, wanted, role);
        let (low, high) = (low?, high?);
        if low > high {
            self.reversed(module, range, role);
            return None;
        }
        Some((low, high))
    }

    /// A band in nm, short end first. A band in energies, wavenumbers or frequencies runs the other way.
    pub(super) fn band(&mut self, module: ModuleId, range: &Range, role: &str) -> Option<(f64, f64)> {
        let (low, high) = self.ends(module, range)?;
        let end = format!("an end of {role}");
        let a = self.as_wavelength(module, range.low.span, low, &end);
        let b = self.as_wavelength(module, range.high.span, high, &end);
        let (a, b) = (a?, b?);
        if low.dimension != high.dimension {
            let (needed, found) = (high.dimension.phrase(), low.dimension.phrase());
            self.mismatch(module, range.low.span, &end, needed, found, None);
            return None;
        }
        if low.number >= high.number {
            self.reversed(module, range, role);
            return None;
        }
        Some((a.min(b), a.max(b)))
    }

    fn reversed(&mut self, module: ModuleId, range: &Range, role: &str) {
        let shown = self.written(module, range.span);
        self.invalid(module, range.span, role, &shown, "written from its lower to its higher end");
    }

    /// The text of a span, for messages.
    pub(super) fn written(&self, module: ModuleId, span: Span) -> String {
        let text = self.sources.get(self.modules[module.0].file).slice(span);
        text.split_whitespace().collect::<Vec<_>>().join(" ")
    }

    /// A material's optical constants at a wavelength; reports where it has none.
    pub(super) fn index_at(
        &mut self,
        module: ModuleId,
        span: Span,
        material: &Arc<Material>,
        wavelength: f64,
    ) -> Option<Complex64> {
        let index = material.index.as_ref()?;
        let (name, defined) = (material.name.clone(), material.place);
        let fact = match index.at(wavelength) {
            Ok(value) => return Some(value),
            Err(IndexError::Outside { range_nm, .. }) => {
                OpticsFact::OutsideData { name, defined, asked: (wavelength, wavelength), range: range_nm }
            }
            Err(IndexError::NotPhysical { n, k, .. }) => {
                OpticsFact::NotPhysical { name, defined, wavelength, nk: Some((n, k)) }
            }
            Err(_) => OpticsFact::NotPhysical { name, defined, wavelength, nk: None },
        };
        self.report(module, span, fact);
        None
    }

    /// Reports something that must be said and is not.
    pub(super) fn missing(&mut self, module: ModuleId, span: Span, what: &str, of: &str, hint: &str) {
        let fact =
            FormFact::MissingStatement { what: what.to_owned(), of: of.to_owned(), hint: hint.to_owned() };
        self.report(module, span, fact);
    }
}

/// The last unit that stands in an expression.
fn last_unit(expr: &Expr) -> Option<&Unit> {
    match &expr.kind {
        ExprKind::Number { unit, .. } => unit.as_ref(),
        ExprKind::Name(_) | ExprKind::Call { .. } => None,
        ExprKind::Negative(inside) | ExprKind::Parenthesis(inside) => last_unit(inside),
        ExprKind::Binary { left, right, .. } => last_unit(right).or_else(|| last_unit(left)),
    }
}

/// Whether an expression holds the name of a `let` or a function.
fn has_name(expr: &Expr) -> bool {
    match &expr.kind {
        ExprKind::Number { .. } => false,
        ExprKind::Name(_) | ExprKind::Call { .. } => true,
        ExprKind::Negative(inside) | ExprKind::Parenthesis(inside) => has_name(inside),
        ExprKind::Binary { left, right, .. } => has_name(left) || has_name(right),
    }
}

/// A number with at most six significant digits, for messages.
pub(super) fn rounded(number: f64) -> f64 {
    format!("{number:.5e}").parse().unwrap_or(number)
}
