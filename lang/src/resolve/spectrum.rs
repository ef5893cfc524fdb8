//! Spectra: light sources and detector responses.

use super::expression::DEEPEST;
use super::names::Kind;
use super::quantity::Wanted;
use super::{ItemId, Resolver, State, table};
use crate::model::{Origin, Spectrum, SpectrumKind};
use crate::syntax::ast::{Item, SpectrumStatement};
use crate::units::Dimension;
use std::sync::Arc;

impl Resolver<'_> {
    /// A spectrum; reports a cycle where a product needs itself.
    pub(super) fn spectrum(&mut self, item: ItemId) -> Option<Arc<Spectrum>> {
        match self.spectra.get(&item) {
            Some(State::Done(spectrum)) => return spectrum.clone(),
            Some(State::Open) => {
                self.cycle(item, "spectra");
                return None;
            }
            None => {}
        }
        let (module, number) = item;
        let syntax = self.modules[module.0].syntax.clone();
        let Item::Spectrum(written) = &syntax.items[number].kind else { return None };
        if self.path.len() >= DEEPEST {
            let must = format!("made from a chain of at most {DEEPEST} others");
            self.invalid(module, written.name.span, "a spectrum", &written.name.text.clone(), &must);
            self.spectra.insert(item, State::Done(None));
            return None;
        }
        self.spectra.insert(item, State::Open);
        self.path.push(item);
        let statements = &written.body.statements;
        let source = self.once(
            module,
            "source",
            statements.iter().filter_map(|statement| match &statement.kind {
                SpectrumStatement::Source(text) => Some((statement.keyword, text)),
                _ => None,
            }),
        );
        let irradiance = self.once(
            module,
            "irradiance",
            statements.iter().filter_map(|statement| match &statement.kind {
                SpectrumStatement::Irradiance(unit) => Some((unit.span, unit)),
                _ => None,
            }),
        );
        let irradiance = match irradiance {
            Some((_, unit)) if unit.text == "W/m2" => true,
            Some((span, unit)) => {
                let found = crate::units::scale(&unit.text)
                    .map_or("an unknown unit", |scale| scale.dimension.phrase());
                self.mismatch(module, span, "the unit of an irradiance", "W/m2 (per nm)", found, None);
                false
            }
            None => false,
        };
        let kinds = statements.iter().filter_map(|statement| match &statement.kind {
            kind @ (SpectrumStatement::Table(_)
            | SpectrumStatement::Blackbody(_)
            | SpectrumStatement::Product(_)) => Some((statement.keyword, kind)),
            _ => None,
        });
        let kind = match self.once(module, "", kinds) {
            Some((span, kind)) => self.spectrum_kind(module, span, kind),
            None => {
                if !written.body.broken {
                    let hint = "write `table`, `blackbody` or `product`";
                    self.missing(module, written.name.span, "the values", "the spectrum", hint);
                }
                None
            }
        };
        self.path.pop();
        let spectrum = Arc::new(Spectrum {
            name: written.name.text.clone(),
            place: self.place(module, written.name.span),
            description: syntax.items[number].description.clone(),
            handbook: self.modules[module.0].origin != Origin::Project,
            kind,
            source: source.map(|(_, text)| text.value.clone()).filter(|text| !text.trim().is_empty()),
            irradiance,
        });
        self.spectra.insert(item, State::Done(Some(spectrum.clone())));
        Some(spectrum)
    }

    fn spectrum_kind(
        &mut self,
        module: super::ModuleId,
        span: crate::source::Span,
        kind: &SpectrumStatement,
    ) -> Option<SpectrumKind> {
        match kind {
            SpectrumStatement::Table(written) => {
                let rows = self.table(module, written, table::CURVE)?;
                let rows: Vec<(f64, f64)> = rows.into_iter().map(|(nm, values)| (nm, values[0])).collect();
                if let Some((nm, value)) = rows.iter().find(|(_, value)| *value < 0.0) {
                    let what = format!("the value at {nm} nm");
                    self.invalid(module, span, &what, &value.to_string(), "0 or more");
                    return None;
                }
                if rows.iter().all(|(_, value)| *value == 0.0) {
                    self.invalid(module, span, "every value", "0", "greater than 0 somewhere");
                    return None;
                }
                Some(SpectrumKind::Table(rows))
            }
            SpectrumStatement::Blackbody(expr) => {
                let celsius = self.quantity(
                    module,
                    expr,
                    Wanted { dimension: Dimension::Temperature, unit: "K" },
                    "a body's temperature",
                )?;
                let kelvin = self.kelvin(module, expr.span, celsius)?;
                Some(SpectrumKind::Blackbody(kelvin))
            }
            SpectrumStatement::Product(names) => {
                let factors: Vec<Option<Arc<Spectrum>>> = names
                    .iter()
                    .map(|name| {
                        self.lookup(module, name, Kind::Spectrum).and_then(|item| self.spectrum(item))
                    })
                    .collect();
                let factors: Vec<Arc<Spectrum>> = factors.into_iter().collect::<Option<_>>()?;
                let sound = !factors.is_empty() && factors.iter().all(|factor| factor.kind.is_some());
                sound.then_some(SpectrumKind::Product(factors))
            }
            SpectrumStatement::Source(_) | SpectrumStatement::Irradiance(_) => None,
        }
    }

    /// The absolute temperature of one in °C; reports one that is not above absolute zero.
    pub(super) fn kelvin(
        &mut self,
        module: super::ModuleId,
        span: crate::source::Span,
        celsius: f64,
    ) -> Option<f64> {
        let kelvin = celsius + 273.15;
        if kelvin > 0.0 {
            return Some(kelvin);
        }
        let shown = self.written(module, span);
        self.invalid(module, span, "a temperature", &shown, "above absolute zero");
        None
    }
}
