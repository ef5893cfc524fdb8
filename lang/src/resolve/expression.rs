//! Values of expressions, with their dimensions.

use super::names::Kind;
use super::{ItemId, ModuleId, Resolver, State};
use crate::finding::FormFact;
use crate::source::Span;
use crate::syntax::ast::{Expr, ExprKind, Item, Name, Operator, Unit};
use crate::units::{self, Dimension};

/// A number in the base unit of its dimension.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Value {
    pub(super) number: f64,
    pub(super) dimension: Dimension,
}

/// Definitions may rest on one another in a chain of this length; a longer one would cost stack.
pub(super) const DEEPEST: usize = 256;

/// Functions of numbers, besides `n`, `k` and `quarter`, which ask for a material.
const FUNCTIONS: [&str; 13] =
    ["sqrt", "abs", "min", "max", "sin", "cos", "tan", "asin", "acos", "atan", "n", "k", "quarter"];

impl Resolver<'_> {
    /// The value of a `let`; reports a cycle where it needs itself.
    pub(super) fn let_value(&mut self, item: ItemId) -> Option<Value> {
        match self.lets.get(&item) {
            Some(State::Done(value)) => return *value,
            Some(State::Open) => {
                self.cycle(item, "lets");
                return None;
            }
            None => {}
        }
        let (module, number) = item;
        let syntax = self.modules[module.0].syntax.clone();
        let Item::Let(written) = &syntax.items[number].kind else { return None };
        if self.path.len() >= DEEPEST {
            let must = format!("made from a chain of at most {DEEPEST} others");
            self.invalid(module, written.name.span, "a `let`", &written.name.text.clone(), &must);
            self.lets.insert(item, State::Done(None));
            return None;
        }
        self.lets.insert(item, State::Open);
        self.path.push(item);
        let value = self.value(module, &written.value);
        self.path.pop();
        self.lets.insert(item, State::Done(value));
        value
    }

    /// Reports the cycle that `item` closes, once, at its own definition.
    pub(super) fn cycle(&mut self, item: ItemId, kind: &'static str) {
        let start = self.path.iter().position(|open| *open == item).unwrap_or(0);
        let members: Vec<ItemId> = self.path[start..].to_vec();
        let mut chain: Vec<String> = members.iter().map(|member| self.name_of(*member)).collect();
        chain.push(self.name_of(item));
        let place = self.name_place(item);
        self.findings.push(crate::finding::Finding::new(FormFact::Cycle { kind, chain }, place));
    }

    /// The value of an expression; what is wrong with it is reported, once.
    pub(super) fn value(&mut self, module: ModuleId, expr: &Expr) -> Option<Value> {
        match &expr.kind {
            ExprKind::Number { value, unit } => self.number(module, *value, unit.as_ref(), expr.span),
            ExprKind::Name(name) => {
                let item = self.lookup(module, name, Kind::Let)?;
                self.let_value(item)
            }
            ExprKind::Parenthesis(inside) => self.value(module, inside),
            ExprKind::Negative(inside) => {
                let value = self.value(module, inside)?;
                if value.dimension == Dimension::Temperature {
                    // 0 °C is no zero: −(20 °C) has no meaning that −20 °C has.
                    if !matches!(inside.kind, ExprKind::Number { .. }) {
                        return self.no_temperatures(module, expr.span);
                    }
                    return self.negative_temperature(module, inside, expr.span);
                }
                Some(Value { number: -value.number, ..value })
            }
            ExprKind::Binary { operator, left, right } => {
                let (a, b) = (self.value(module, left), self.value(module, right));
                self.binary(module, *operator, (a?, left.span), (b?, right.span), expr.span)
            }
            ExprKind::Call { function, arguments } => self.call(module, function, arguments, expr.span),
        }
    }

    fn number(&mut self, module: ModuleId, value: f64, unit: Option<&Unit>, span: Span) -> Option<Value> {
        let Some(unit) = unit else { return Some(Value { number: value, dimension: Dimension::Ratio }) };
        // The parser has reported a unit that does not exist.
        let scale = units::scale(&unit.text)?;
        let number = scale.base(value);
        self.finite(module, Value { number, dimension: scale.dimension }, span)
    }

    fn negative_temperature(&mut self, module: ModuleId, inside: &Expr, span: Span) -> Option<Value> {
        let ExprKind::Number { value, unit } = &inside.kind else { return None };
        self.number(module, -value, unit.as_ref(), span)
    }

    /// Passes a finite value on and reports any other.
    pub(super) fn finite(&mut self, module: ModuleId, value: Value, span: Span) -> Option<Value> {
        if value.number.is_finite() {
            return Some(value);
        }
        let shown = if value.number.is_nan() { "no number at all" } else { "greater than any number" };
        self.invalid(module, span, "the result", shown, "a finite number");
        None
    }

    /// Reports a number that can't be meant.
    pub(super) fn invalid(&mut self, module: ModuleId, span: Span, what: &str, value: &str, must: &str) {
        let fact =
            FormFact::InvalidValue { what: what.to_owned(), value: value.to_owned(), must: must.to_owned() };
        self.report(module, span, fact);
    }

    fn no_temperatures<T>(&mut self, module: ModuleId, span: Span) -> Option<T> {
        self.mismatch(module, span, "a calculation", "numbers whose zero is a zero", "a temperature", None);
        None
    }

    pub(super) fn mismatch(
        &mut self,
        module: ModuleId,
        span: Span,
        role: &str,
        needed: &str,
        found: &str,
        suggestion: Option<&str>,
    ) {
        let fact = FormFact::UnitMismatch {
            role: role.to_owned(),
            needed: needed.to_owned(),
            found: found.to_owned(),
            suggestion: suggestion.map(str::to_owned),
        };
        self.report(module, span, fact);
    }

    fn binary(
        &mut self,
        module: ModuleId,
        operator: Operator,
        (a, _): (Value, Span),
        (b, right): (Value, Span),
        span: Span,
    ) -> Option<Value> {
        if a.dimension == Dimension::Temperature || b.dimension == Dimension::Temperature {
            return self.no_temperatures(module, span);
        }
        let value = match operator {
            Operator::Add | Operator::Subtract => {
                if a.dimension != b.dimension {
                    let sign = if operator == Operator::Add { "+" } else { "-" };
                    let role = format!("the right side of `{sign}`");
                    let suggestion = (b.dimension == Dimension::Ratio).then(|| a.dimension.usual_unit());
                    self.mismatch(
                        module,
                        right,
                        &role,
                        a.dimension.phrase(),
                        b.dimension.phrase(),
                        suggestion,
                    );
                    return None;
                }
                let number =
                    if operator == Operator::Add { a.number + b.number } else { a.number - b.number };
                Value { number, dimension: a.dimension }
            }
            Operator::Multiply | Operator::Divide => {
                let by = operator == Operator::Divide;
                if by && b.number == 0.0 {
                    self.invalid(module, right, "the divisor", "0", "another number");
                    return None;
                }
                let dimension =
                    if by { quotient(a.dimension, b.dimension) } else { product(a.dimension, b.dimension) };
                let Some((dimension, factor)) = dimension else {
                    let role = if by { "the divisor" } else { "the right side of `*`" };
                    let needed = format!("a ratio beside {}", a.dimension.phrase());
                    self.mismatch(module, right, role, &needed, b.dimension.phrase(), None);
                    return None;
                };
                let number = if by { a.number / b.number } else { a.number * b.number };
                Value { number: number * factor, dimension }
            }
            Operator::Power => return self.power(module, a, b, right, span),
        };
        self.finite(module, value, span)
    }

    fn power(&mut self, module: ModuleId, a: Value, b: Value, right: Span, span: Span) -> Option<Value> {
        if b.dimension != Dimension::Ratio {
            self.mismatch(module, right, "an exponent", "a ratio", b.dimension.phrase(), None);
            return None;
        }
        let dimension = match (a.dimension, b.number) {
            (Dimension::Ratio, _) => Dimension::Ratio,
            (same, 1.0) => same,
            (Dimension::Length, 2.0) => Dimension::Area,
            (Dimension::Length, 4.0) => Dimension::Length4,
            (Dimension::Length, 6.0) => Dimension::Length6,
            (Dimension::Area, 2.0) => Dimension::Length4,
            (Dimension::Area, 3.0) => Dimension::Length6,
            (Dimension::Area, 0.5) => Dimension::Length,
            _ => {
                let found = format!("{} with this exponent", a.dimension.phrase());
                self.mismatch(module, span, "a power", "a ratio", &found, None);
                return None;
            }
        };
        if a.number == 0.0 && b.number < 0.0 {
            self.invalid(module, span, "the base of a negative power", "0", "another number");
            return None;
        }
        self.finite(module, Value { number: a.number.powf(b.number), dimension }, span)
    }

    fn call(&mut self, module: ModuleId, function: &Name, arguments: &[Expr], span: Span) -> Option<Value> {
        let name = function.text.as_str();
        if !FUNCTIONS.contains(&name) {
            let near = super::nearest(name, FUNCTIONS);
            let fact = FormFact::UnknownName { kind: "function", name: name.to_owned(), near, import: None };
            self.report(module, function.span, fact);
            return None;
        }
        if matches!(name, "n" | "k" | "quarter") {
            return self.optical(module, name, arguments, span);
        }
        let several = matches!(name, "min" | "max");
        if arguments.is_empty() || (!several && arguments.len() > 1) {
            let must = if several { "one or more" } else { "one" };
            let what = format!("the number of things in `{name}( )`");
            self.invalid(module, span, &what, &arguments.len().to_string(), must);
            return None;
        }
        let values: Vec<Option<Value>> =
            arguments.iter().map(|argument| self.value(module, argument)).collect();
        let values: Vec<Value> = values.into_iter().collect::<Option<_>>()?;
        let first = values[0];
        match name {
            "min" | "max" => {
                let mut best = first;
                for (value, argument) in values.iter().zip(arguments).skip(1) {
                    if value.dimension != first.dimension {
                        let role = format!("an argument of `{name}`");
                        let (needed, found) = (first.dimension.phrase(), value.dimension.phrase());
                        self.mismatch(module, argument.span, &role, needed, found, None);
                        return None;
                    }
                    let better =
                        if name == "min" { value.number < best.number } else { value.number > best.number };
                    if better {
                        best = *value;
                    }
                }
                Some(best)
            }
            "abs" => Some(Value { number: first.number.abs(), ..first }),
            "sqrt" => {
                let dimension = match first.dimension {
                    Dimension::Ratio => Dimension::Ratio,
                    Dimension::Area => Dimension::Length,
                    Dimension::Length4 => Dimension::Area,
                    other => {
                        self.mismatch(
                            module,
                            arguments[0].span,
                            "a square root",
                            "a ratio",
                            other.phrase(),
                            None,
                        );
                        return None;
                    }
                };
                if first.number < 0.0 {
                    self.invalid(
                        module,
                        arguments[0].span,
                        "what is under the root",
                        &first.number.to_string(),
                        "0 or more",
                    );
                    return None;
                }
                Some(Value { number: first.number.sqrt(), dimension })
            }
            "sin" | "cos" | "tan" => {
                if first.dimension != Dimension::Angle {
                    // No unit is suggested: a bare number may be degrees or radians.
                    let role = format!("the argument of `{name}`");
                    self.mismatch(
                        module,
                        arguments[0].span,
                        &role,
                        "an angle",
                        first.dimension.phrase(),
                        None,
                    );
                    return None;
                }
                let number = match name {
                    "sin" => first.number.sin(),
                    "cos" => first.number.cos(),
                    _ => first.number.tan(),
                };
                self.finite(module, Value { number, dimension: Dimension::Ratio }, span)
            }
            _ => {
                if first.dimension != Dimension::Ratio {
                    let role = format!("the argument of `{name}`");
                    self.mismatch(
                        module,
                        arguments[0].span,
                        &role,
                        "a ratio",
                        first.dimension.phrase(),
                        None,
                    );
                    return None;
                }
                if name != "atan" && first.number.abs() > 1.0 {
                    let what = format!("the argument of `{name}`");
                    self.invalid(module, arguments[0].span, &what, &first.number.to_string(), "from -1 to 1");
                    return None;
                }
                let number = match name {
                    "asin" => first.number.asin(),
                    "acos" => first.number.acos(),
                    _ => first.number.atan(),
                };
                Some(Value { number, dimension: Dimension::Angle })
            }
        }
    }

    /// `n(material, wavelength)`, `k(…)` and `quarter(…)`.
    fn optical(&mut self, module: ModuleId, name: &str, arguments: &[Expr], span: Span) -> Option<Value> {
        let [first, second] = arguments else {
            let what = format!("the number of things in `{name}( )`");
            self.invalid(
                module,
                span,
                &what,
                &arguments.len().to_string(),
                "two: a material and a wavelength",
            );
            return None;
        };
        let wavelength = self.wavelength(module, second, "the second argument");
        let ExprKind::Name(material) = &first.kind else {
            let role = format!("the first argument of `{name}`");
            self.mismatch(module, first.span, &role, "the name of a material", "a number", None);
            return None;
        };
        let item = self.lookup(module, material, Kind::Material)?;
        let material = self.material(item)?;
        let index = self.index_at(module, span, &material, wavelength?)?;
        Some(match name {
            "n" => Value { number: index.re, dimension: Dimension::Ratio },
            "k" => Value { number: index.im, dimension: Dimension::Ratio },
            _ => Value { number: wavelength? / (4.0 * index.re), dimension: Dimension::Length },
        })
    }
}

/// The dimension of a product and what its number is to be multiplied by.
fn product(a: Dimension, b: Dimension) -> Option<(Dimension, f64)> {
    use Dimension::*;
    Some(match (a, b) {
        (Ratio, other) | (other, Ratio) => (other, 1.0),
        (Length, Length) => (Area, 1.0),
        (Area, Area) => (Length4, 1.0),
        (Area, Length4) | (Length4, Area) => (Length6, 1.0),
        (Rate, Time) | (Time, Rate) => (Length, 1.0),
        // MPa · nm = 10⁻³ N/m.
        (Stress, Length) | (Length, Stress) => (ForcePerWidth, 1e-3),
        _ => return None,
    })
}

/// The dimension of a quotient and what its number is to be multiplied by.
fn quotient(a: Dimension, b: Dimension) -> Option<(Dimension, f64)> {
    use Dimension::*;
    Some(match (a, b) {
        (same, other) if same == other => (Ratio, 1.0),
        (other, Ratio) => (other, 1.0),
        (Length, Time) => (Rate, 1.0),
        (Length, Rate) => (Time, 1.0),
        (Area, Length) => (Length, 1.0),
        (Length4, Area) => (Area, 1.0),
        (Length6, Length4) => (Area, 1.0),
        (Length6, Area) => (Length4, 1.0),
        (ForcePerWidth, Length) => (Stress, 1e3),
        (ForcePerWidth, Stress) => (Length, 1e3),
        _ => return None,
    })
}
