//! Materials: every index model, and what else is known of a film.

use super::expression::DEEPEST;
use super::names::Kind;
use super::{ItemId, ModuleId, Resolver, State, all, table};
use crate::finding::FormFact;
use crate::model::{Material, Origin};
use crate::source::Span;
use crate::syntax::ast::{
    Change, Expr, Extinction, IndexModel, Item, MaterialStatement, Name, Oscillator as WrittenOscillator,
};
use crate::units::Dimension;
use overcoat_engine::{Index, MixingRule, ModelError, Oscillator};
use std::sync::Arc;

/// Powers of a micrometre that Cauchy's coefficients carry, and nm to that power in one µm to it.
const CAUCHY: [(Dimension, f64); 4] =
    [(Dimension::Ratio, 1.0), (Dimension::Area, 1e6), (Dimension::Length4, 1e12), (Dimension::Length6, 1e18)];

impl Resolver<'_> {
    /// A material; reports a cycle where its index needs itself.
    pub(super) fn material(&mut self, item: ItemId) -> Option<Arc<Material>> {
        match self.materials.get(&item) {
            Some(State::Done(material)) => return material.clone(),
            Some(State::Open) => {
                self.cycle(item, "materials");
                return None;
            }
            None => {}
        }
        let (module, number) = item;
        let syntax = self.modules[module.0].syntax.clone();
        let Item::Material(written) = &syntax.items[number].kind else { return None };
        if self.path.len() >= DEEPEST {
            let must = format!("made from a chain of at most {DEEPEST} others");
            self.invalid(module, written.name.span, "a material", &written.name.text.clone(), &must);
            self.materials.insert(item, State::Done(None));
            return None;
        }
        self.materials.insert(item, State::Open);
        self.path.push(item);
        let mut material = Material {
            name: written.name.text.clone(),
            place: self.place(module, written.name.span),
            description: syntax.items[number].description.clone(),
            origin: self.modules[module.0].origin,
            index: None,
            source: None,
            made_of: Vec::new(),
            density: None,
            stress: None,
            cautions: Vec::new(),
        };
        let statements = &written.body.statements;
        macro_rules! once {
            ($word:literal, $pattern:pat => $value:expr) => {
                self.once(module, $word, all!(statements, $pattern => $value))
            };
        }
        let source = once!("source", MaterialStatement::Source(text) => text);
        material.source = source.map(|(_, text)| text.value.clone()).filter(|text| !text.trim().is_empty());
        let valid = once!("valid", MaterialStatement::Valid(range) => range);
        let valid = valid.map(|(_, range)| (range, self.band(module, range, "the range of a formula")));
        if let Some((_, density)) = once!("density", MaterialStatement::Density(expr) => expr) {
            material.density = self.positive(module, density, Dimension::Density, "a density", false);
        }
        if let Some((_, stress)) = once!("stress", MaterialStatement::Stress(expr) => expr) {
            material.stress = self.quantity(module, stress, Dimension::Stress, "a stress");
        }
        material.cautions = statements
            .iter()
            .filter_map(|statement| match &statement.kind {
                MaterialStatement::Caution(text) => Some(text.value.clone()),
                _ => None,
            })
            .collect();
        match once!("index", kind @ MaterialStatement::Index { .. } => kind) {
            Some((keyword, MaterialStatement::Index { model, extinction })) => {
                let index = self.index(module, model, extinction.as_ref(), keyword, &mut material.made_of);
                material.index = match (index, valid) {
                    (Some(index), Some((range, Some((low, high))))) => {
                        self.model(module, range.span, index.valid_over(low, high))
                    }
                    (index, None) => index,
                    // A range that is wrong has been reported; without it the formula would be trusted everywhere.
                    _ => None,
                };
            }
            _ if written.body.broken => {}
            _ => {
                let hint = "write `index` and a model, for example `index 1.46`";
                self.missing(module, written.name.span, "`index`", "the material", hint);
            }
        }
        self.path.pop();
        // Whoever met it while it was open closed a cycle: it has no index then.
        let material = Arc::new(material);
        self.materials.insert(item, State::Done(Some(material.clone())));
        Some(material)
    }

    /// Passes a model on, or reports why the engine refuses it.
    fn model(&mut self, module: ModuleId, span: Span, model: Result<Index, ModelError>) -> Option<Index> {
        match model {
            Ok(index) => Some(index),
            Err(error) => {
                let (what, value, must) = match error {
                    ModelError::Parameter { what, value, must } => {
                        (what.to_owned(), value.to_string(), must.to_owned())
                    }
                    ModelError::Row { row, what, value, must } => {
                        (format!("{what} of row {row}"), value.to_string(), must.to_owned())
                    }
                    ModelError::TooFew { what, given, needed } => {
                        (what.to_owned(), given.to_string(), format!("{needed} or more"))
                    }
                    ModelError::Fractions { sum } => {
                        let shown = format!("{} %", crate::resolve::quantity::rounded(sum * 100.0));
                        ("the sum of the shares".to_owned(), shown, "100 %".to_owned())
                    }
                    ModelError::NoCommonRange => {
                        let what = "the range that the parts have in common".to_owned();
                        (what, "empty".to_owned(), "some band of wavelengths".to_owned())
                    }
                    ModelError::TooDeep { deepest } => {
                        let what = "the number of materials made from one another".to_owned();
                        (what, format!("more than {deepest}"), format!("at most {deepest}"))
                    }
                };
                self.invalid(module, span, &what, &value, &must);
                None
            }
        }
    }

    fn index(
        &mut self,
        module: ModuleId,
        model: &IndexModel,
        extinction: Option<&Extinction>,
        keyword: Span,
        made_of: &mut Vec<Arc<Material>>,
    ) -> Option<Index> {
        // A constant n with a constant k is one model; any other k is added to the model of n.
        if let (IndexModel::Constant(n), Some(Extinction::Constant(k))) = (model, extinction) {
            let n = self.positive(module, n, Dimension::Ratio, "n", false);
            let k = self.positive(module, k, Dimension::Ratio, "k", true);
            return self.model(module, keyword, Index::constant(n?, k?));
        }
        let index = self.model_of_n(module, model, keyword, made_of);
        let Some(extinction) = extinction else { return index };
        match extinction {
            Extinction::Constant(k) => {
                let value = self.positive(module, k, Dimension::Ratio, "k", true);
                let index = index?;
                let extinction = self.model(module, k.span, Index::constant(1.0, value?))?;
                self.model(module, keyword, index.with_extinction(extinction))
            }
            Extinction::Urbach { k, at, width } => {
                let value = self.positive(module, k, Dimension::Ratio, "k", true);
                let wavelength = self.wavelength(module, at, "the wavelength of k");
                let energy = self.energy(module, width, "the width of the tail");
                self.model(module, keyword, index?.with_urbach(value?, wavelength?, energy?))
            }
            Extinction::Table(table) => {
                let rows = self.table(module, table, table::K);
                let index = index?;
                let rows: Vec<(f64, f64, f64)> = rows?.into_iter().map(|(nm, k)| (nm, 1.0, k[0])).collect();
                let extinction = self.model(module, keyword, Index::table(&rows))?;
                self.model(module, keyword, index.with_extinction(extinction))
            }
        }
    }

    fn model_of_n(
        &mut self,
        module: ModuleId,
        model: &IndexModel,
        keyword: Span,
        made_of: &mut Vec<Arc<Material>>,
    ) -> Option<Index> {
        match model {
            IndexModel::Constant(n) => {
                let n = self.positive(module, n, Dimension::Ratio, "n", false)?;
                self.model(module, keyword, Index::constant(n, 0.0))
            }
            IndexModel::Table(written) => {
                let rows = self.table(module, written, table::NK)?;
                let rows: Vec<(f64, f64, f64)> =
                    rows.into_iter().map(|(nm, nk)| (nm, nk[0], nk[1])).collect();
                self.model(module, keyword, Index::table(&rows))
            }
            IndexModel::Cauchy(written) => self.cauchy(module, written, keyword),
            IndexModel::Sellmeier(terms) => {
                let terms: Vec<Option<(f64, f64)>> = terms
                    .iter()
                    .map(|(b, c)| {
                        let strength = self.quantity(module, b, Dimension::Ratio, "a Sellmeier strength");
                        let resonance =
                            self.positive(module, c, Dimension::Length, "a Sellmeier wavelength", true);
                        Some((strength?, resonance? / 1e3))
                    })
                    .collect();
                let terms: Vec<(f64, f64)> = terms.into_iter().collect::<Option<_>>()?;
                self.model(module, keyword, Index::sellmeier(&terms))
            }
            IndexModel::Oscillators { background, terms } => {
                let background =
                    self.positive(module, background, Dimension::Ratio, "ε at high energy", true);
                let terms: Vec<Option<Oscillator>> =
                    terms.iter().map(|term| self.oscillator(module, term)).collect();
                let terms: Vec<Oscillator> = terms.into_iter().collect::<Option<_>>()?;
                self.model(module, keyword, Index::oscillators(background?, terms))
            }
            IndexModel::Mixture { parts, rule } => {
                let rule = self.mixing_rule(module, rule.as_ref());
                let mut found = Vec::new();
                for (name, share) in parts {
                    let share_value = self.positive(module, share, Dimension::Ratio, "a share", true);
                    let material =
                        self.lookup(module, name, Kind::Material).and_then(|item| self.material(item));
                    found.push(material.zip(share_value));
                }
                let found: Vec<(Arc<Material>, f64)> = found.into_iter().collect::<Option<_>>()?;
                made_of.extend(found.iter().map(|(material, _)| material.clone()));
                let parts: Vec<(Index, f64)> = found
                    .iter()
                    .map(|(material, share)| Some((material.index.clone()?, *share)))
                    .collect::<Option<_>>()?;
                self.model(module, keyword, Index::mixture(rule?, &parts))
            }
            IndexModel::Derived { of, change } => {
                let material = self.lookup(module, of, Kind::Material).and_then(|item| self.material(item));
                let change = match change {
                    None => None,
                    Some(Change::Shifted(by)) => {
                        let by = self.quantity(module, by, Dimension::Ratio, "a shift of n");
                        Some((false, by?))
                    }
                    Some(Change::Scaled(by)) => {
                        let by = self.quantity(module, by, Dimension::Ratio, "a change of n");
                        Some((true, by?))
                    }
                };
                let material = material?;
                made_of.push(material.clone());
                let index = material.index.clone()?;
                match change {
                    None => Some(index),
                    Some((false, by)) => self.model(module, keyword, index.shifted(by)),
                    Some((true, by)) => self.model(module, keyword, index.scaled(by)),
                }
            }
        }
    }

    fn cauchy(&mut self, module: ModuleId, written: &[Expr], keyword: Span) -> Option<Index> {
        if written.len() > CAUCHY.len() {
            let (count, most) = (written.len().to_string(), format!("at most {}", CAUCHY.len()));
            self.invalid(module, keyword, "the number of Cauchy coefficients", &count, &most);
            return None;
        }
        let roles = ["Cauchy's A", "Cauchy's B", "Cauchy's C", "Cauchy's fourth coefficient"];
        let coefficients: Vec<Option<f64>> = written
            .iter()
            .zip(CAUCHY)
            .zip(roles)
            .map(|((expr, (dimension, factor)), role)| {
                Some(self.quantity(module, expr, dimension, role)? / factor)
            })
            .collect();
        let coefficients: Vec<f64> = coefficients.into_iter().collect::<Option<_>>()?;
        self.model(module, keyword, Index::cauchy(&coefficients))
    }

    fn oscillator(&mut self, module: ModuleId, term: &WrittenOscillator) -> Option<Oscillator> {
        let kind = term.kind.text.as_str();
        let part = |resolver: &mut Self, expr: &Option<Expr>, word: &str, role: &str| match expr {
            Some(expr) => resolver.energy(module, expr, role),
            None => {
                let hint = format!("write `{word}` and an energy in eV");
                resolver.missing(
                    module,
                    term.kind.span,
                    &format!("`{word}`"),
                    &format!("the `{kind}` term"),
                    &hint,
                );
                None
            }
        };
        match kind {
            "lorentz" => {
                let strength = self.positive(module, &term.strength, Dimension::Ratio, "a strength", true);
                let centre = part(self, &term.centre, "at", "an oscillator's energy");
                let width = part(self, &term.width, "width", "an oscillator's width");
                Some(Oscillator::Lorentz { strength: strength?, centre_ev: centre?, width_ev: width? })
            }
            "drude" => {
                let plasma = self.energy(module, &term.strength, "the plasma energy");
                let width = part(self, &term.width, "width", "the damping");
                Some(Oscillator::Drude { plasma_ev: plasma?, width_ev: width? })
            }
            "tauc_lorentz" => {
                let strength = self.energy(module, &term.strength, "the strength A");
                let centre = part(self, &term.centre, "at", "an oscillator's energy");
                let width = part(self, &term.width, "width", "an oscillator's width");
                let gap = part(self, &term.gap, "gap", "the gap");
                Some(Oscillator::TaucLorentz {
                    strength_ev: strength?,
                    centre_ev: centre?,
                    width_ev: width?,
                    gap_ev: gap?,
                })
            }
            _ => {
                let kinds = ["lorentz", "drude", "tauc_lorentz"];
                let near = super::nearest(kind, kinds);
                let fact =
                    FormFact::UnknownName { kind: "oscillator", name: kind.to_owned(), near, import: None };
                self.report(module, term.kind.span, fact);
                None
            }
        }
    }

    /// The rule of a mixture; Bruggeman's where none is named.
    pub(super) fn mixing_rule(&mut self, module: ModuleId, rule: Option<&Name>) -> Option<MixingRule> {
        let Some(name) = rule else { return Some(MixingRule::Bruggeman) };
        let rules = [
            ("bruggeman", MixingRule::Bruggeman),
            ("maxwell_garnett", MixingRule::MaxwellGarnett),
            ("lorentz_lorenz", MixingRule::LorentzLorenz),
            ("volume", MixingRule::Volume),
        ];
        let found = rules.iter().find(|(word, _)| *word == name.text);
        if found.is_none() {
            let near = super::nearest(&name.text, rules.iter().map(|(word, _)| *word));
            let fact =
                FormFact::UnknownName { kind: "mixing rule", name: name.text.clone(), near, import: None };
            self.report(module, name.span, fact);
        }
        found.map(|(_, rule)| *rule)
    }
}

impl Material {
    /// Whether its optical constants are published ones rather than the shop's own.
    pub fn published(&self) -> bool {
        self.origin == Origin::Handbook
    }
}
