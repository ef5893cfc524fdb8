//! Requirements: what is promised, how much, where and under what.

use super::names::Kind;
use super::quantity::Wanted;
use super::{ItemId, ModuleId, Resolver, table};
use crate::finding::FormFact;
use crate::model::{Angles, Beam, Bound, Mask, Observer, Quantity, Requirement, Side, Specification, Target};
use crate::source::Span;
use crate::syntax::ast::{self, BoundKind, Item, Name, QuantityWords, Require, Text};
use crate::units::Dimension;
use std::sync::Arc;

/// Every quantity as it is written.
const QUANTITIES: [&str; 19] = [
    "reflectance",
    "transmittance",
    "absorptance",
    "optical_density",
    "luminous reflectance",
    "luminous transmittance",
    "solar reflectance",
    "solar transmittance",
    "solar absorptance",
    "photocurrent",
    "photocurrent_loss",
    "reflected colour",
    "transmitted colour",
    "reflected phase",
    "transmitted phase",
    "peak_field",
    "emittance",
    "yield",
    "reflected group_delay",
];

impl Resolver<'_> {
    /// A specification.
    pub(super) fn specification(&mut self, item: ItemId) -> Option<Arc<Specification>> {
        if let Some(specification) = self.specifications.get(&item) {
            return Some(specification.clone());
        }
        let (module, number) = item;
        let syntax = self.modules[module.0].syntax.clone();
        let Item::Specification(written) = &syntax.items[number].kind else { return None };
        let requirements = written.body.statements.iter();
        let requirements = requirements
            .filter_map(|statement| self.requirement(module, &statement.kind, statement.span))
            .collect();
        let specification = Arc::new(Specification {
            name: written.name.text.clone(),
            title: written.title.as_ref().map(|title| title.value.clone()),
            place: self.place(module, written.name.span),
            description: syntax.items[number].description.clone(),
            requirements,
        });
        self.specifications.insert(item, specification.clone());
        Some(specification)
    }

    /// A requirement; none where something in it was wrong.
    pub(super) fn requirement(
        &mut self,
        module: ModuleId,
        written: &Require,
        span: Span,
    ) -> Option<Arc<Requirement>> {
        let quantity = self.quantity_words(module, &written.quantity);
        let clauses = self.clauses(module, written, quantity.as_ref());
        let bound = match (&written.bound, &quantity) {
            (Some(bound), Some(quantity)) => {
                self.bound(module, bound, quantity).map(|kind| (kind, bound.span))
            }
            (Some(_), None) => None,
            (None, _) => {
                let hint = "write `<= v`, `>= v`, `a .. b` or `v ± t`";
                self.missing(module, span, "a bound", "the requirement", hint);
                None
            }
        };
        let (quantity, clauses, (bound, bound_span)) = (quantity?, clauses?, bound?);
        let clauses = self.complete(module, written, &quantity, &bound, clauses, span)?;
        Some(Arc::new(Requirement {
            text: self.sentence(module, span),
            place: self.place(module, span),
            bound_place: self.place(module, bound_span),
            mean: written.mean.is_some(),
            quantity,
            bound,
            bands: clauses.bands,
            wavelengths: clauses.wavelengths,
            angles: clauses.angles.unwrap_or(Angles::List(vec![0.0])),
            cone: clauses.cone.unwrap_or(0.0),
            polarisation: clauses.polarisation.unwrap_or(Beam::Mean),
            under: clauses.under,
            from_exit: clauses.from_exit,
            temperature: clauses.temperature,
            hemispherical: clauses.hemispherical,
            observer: clauses.observer.unwrap_or(Observer::Two),
            parts: clauses.parts,
            nominal: clauses.nominal,
        }))
    }

    fn quantity_words(&mut self, module: ModuleId, words: &QuantityWords) -> Option<Quantity> {
        let qualifier = words.qualifier.as_ref().map(|name| name.text.as_str());
        let target = |resolver: &mut Self| words.target.as_ref().map(|name| resolver.target(module, name));
        let quantity = match (qualifier, words.name.text.as_str()) {
            (None, "reflectance") => Quantity::Reflectance,
            (None, "transmittance") => Quantity::Transmittance,
            (None, "absorptance") => match target(self) {
                Some(target) => return Some(Quantity::AbsorptanceIn(target)),
                None => Quantity::Absorptance,
            },
            (None, "optical_density") => Quantity::OpticalDensity,
            (Some("luminous"), "reflectance") => Quantity::Luminous(Side::Reflected),
            (Some("luminous"), "transmittance") => Quantity::Luminous(Side::Transmitted),
            (Some("solar"), "reflectance") => Quantity::Solar(Side::Reflected),
            (Some("solar"), "transmittance") => Quantity::Solar(Side::Transmitted),
            (Some("solar"), "absorptance") => Quantity::SolarAbsorptance,
            (None, name @ ("photocurrent" | "photocurrent_loss")) => {
                let Some(target) = target(self) else {
                    let hint = format!("write `{name} in` and the material or layer that counts");
                    self.missing(module, words.span, "`in`", &format!("the {name}"), &hint);
                    return None;
                };
                let loss = name == "photocurrent_loss";
                return Some(if loss {
                    Quantity::PhotocurrentLoss(target)
                } else {
                    Quantity::Photocurrent(target)
                });
            }
            (Some("reflected"), "colour") => Quantity::Colour(Side::Reflected),
            (Some("transmitted"), "colour") => Quantity::Colour(Side::Transmitted),
            (Some("reflected"), "phase") => Quantity::Phase(Side::Reflected),
            (Some("transmitted"), "phase") => Quantity::Phase(Side::Transmitted),
            (Some("reflected"), "group_delay") => Quantity::GroupDelay(Side::Reflected),
            (Some("transmitted"), "group_delay") => Quantity::GroupDelay(Side::Transmitted),
            (Some("reflected"), "group_delay_dispersion") => Quantity::GroupDelayDispersion(Side::Reflected),
            (Some("transmitted"), "group_delay_dispersion") => {
                Quantity::GroupDelayDispersion(Side::Transmitted)
            }
            (None, "peak_field") => Quantity::PeakField,
            (None, "emittance") => Quantity::Emittance,
            (None, "yield") => Quantity::Yield,
            _ => {
                let name = self.written(module, words.name.span);
                let whole = qualifier.map_or(name.clone(), |first| format!("{first} {name}"));
                let more = [
                    "transmitted group_delay",
                    "reflected group_delay_dispersion",
                    "transmitted group_delay_dispersion",
                ];
                let mut near = super::nearest(&whole, QUANTITIES.into_iter().chain(more));
                if near.is_empty() {
                    // `colour` alone lacks its first word, and `solar` its second: name those that hold the word.
                    let holds =
                        |quantity: &&str| quantity.split(' ').any(|word| word == name || word == whole);
                    near = QUANTITIES.into_iter().chain(more).filter(holds).map(str::to_owned).collect();
                }
                let span =
                    words.qualifier.as_ref().map_or(words.name.span, |first| first.span.to(words.name.span));
                let fact = FormFact::UnknownName { kind: "quantity", name: whole, near, import: None };
                self.report(module, span, fact);
                return None;
            }
        };
        if let Some(name) = &words.target {
            let what = "`in` and a name".to_owned();
            self.invalid(
                module,
                name.span,
                "what follows the quantity",
                &what,
                "left out: only an absorptance or a photocurrent is in something",
            );
            return None;
        }
        Some(quantity)
    }

    /// The material or layer of a quantity. A name that no material has may be a layer's, which the recipe knows.
    fn target(&mut self, module: ModuleId, name: &Name) -> Target {
        let item = self.find(module, &name.text, Kind::Material).and_then(|entry| entry.item);
        let material = item.and_then(|(item, _)| self.material(item));
        Target { name: name.text.clone(), place: self.place(module, name.span), material }
    }

    fn bound(&mut self, module: ModuleId, bound: &ast::Bound, quantity: &Quantity) -> Option<Bound> {
        let (wanted, role) = measures(quantity);
        let is_colour = matches!(quantity, Quantity::Colour(_));
        let colour_bound = matches!(bound.kind, BoundKind::NearColour { .. });
        if is_colour != colour_bound {
            let shown = self.written(module, bound.span);
            let must = if is_colour {
                "`within 3 of lab(32, -4, -18)`, a difference from an aim"
            } else {
                "`<= v`, `>= v`, `a .. b` or `v ± t`; only a colour is compared with `lab( )`"
            };
            self.invalid(module, bound.span, role, &shown, must);
            return None;
        }
        let range = |min, max| Some(Bound::Range { min, max });
        match &bound.kind {
            BoundKind::AtMost(expr) => {
                let value = self.quantity(module, expr, wanted, role)?;
                self.share(module, expr.span, quantity, value)?;
                range(None, Some(value))
            }
            BoundKind::AtLeast(expr) => {
                let value = self.quantity(module, expr, wanted, role)?;
                self.share(module, expr.span, quantity, value)?;
                range(Some(value), None)
            }
            BoundKind::Between(written) => {
                let (low, high) = self.range(module, written, wanted, role)?;
                self.share(module, written.low.span, quantity, low)?;
                self.share(module, written.high.span, quantity, high)?;
                range(Some(low), Some(high))
            }
            BoundKind::Around { aim, tolerance } => {
                let (low, high) = self.around(module, aim, tolerance, wanted, role)?;
                self.share(module, aim.span, quantity, (low + high) / 2.0)?;
                range(Some(low), Some(high))
            }
            BoundKind::AtMostMask(path) => Some(Bound::AtMostMask(self.mask(module, path)?)),
            BoundKind::AtLeastMask(path) => Some(Bound::AtLeastMask(self.mask(module, path)?)),
            BoundKind::Crosses { level, rising, within } => {
                let value = self.quantity(module, level, wanted, role);
                let within = match within {
                    Some(range) => Some(self.band(module, range, "the window of an edge")?),
                    None => None,
                };
                self.share(module, level.span, quantity, value?)?;
                Some(Bound::Crosses { level: value?, rising: *rising, within })
            }
            BoundKind::NearColour { difference, aim } => {
                let limit = self.positive(module, difference, Dimension::Ratio, "a colour difference", false);
                let axes: Vec<Option<f64>> = aim
                    .iter()
                    .map(|expr| self.quantity(module, expr, Dimension::Ratio, "a colour's coordinate"))
                    .collect();
                let axes: Vec<f64> = axes.into_iter().collect::<Option<_>>()?;
                let Ok(aim) = <[f64; 3]>::try_from(axes) else {
                    let count = aim.len().to_string();
                    self.invalid(
                        module,
                        bound.span,
                        "the number of coordinates in `lab( )`",
                        &count,
                        "three: L*, a* and b*",
                    );
                    return None;
                };
                if !(0.0..=100.0).contains(&aim[0]) {
                    self.invalid(module, bound.span, "L*", &aim[0].to_string(), "from 0 to 100");
                    return None;
                }
                Some(Bound::NearColour { difference: limit?, aim })
            }
        }
    }

    /// Reports a share of the light that no part can have: a bound that is forgotten `%` would always hold.
    fn share(&mut self, module: ModuleId, span: Span, quantity: &Quantity, value: f64) -> Option<()> {
        use Quantity::*;
        let share = match quantity {
            Reflectance | Transmittance | Absorptance | AbsorptanceIn(_) | Luminous(_) | Solar(_)
            | SolarAbsorptance | Emittance | Yield => true,
            OpticalDensity
            | Photocurrent(_)
            | PhotocurrentLoss(_)
            | Colour(_)
            | Phase(_)
            | GroupDelay(_)
            | GroupDelayDispersion(_)
            | PeakField => false,
        };
        if !share || (0.0..=1.0).contains(&value) {
            return Some(());
        }
        let shown = self.written(module, span);
        self.invalid(module, span, "a share of the light", &shown, "from 0 to 100 %");
        None
    }

    fn mask(&mut self, module: ModuleId, path: &Text) -> Option<Mask> {
        let rows = self.table_file(module, path, table::CURVE)?;
        let rows = rows.into_iter().map(|(nm, values)| (nm, values[0])).collect();
        Some(Mask { path: path.value.clone(), rows })
    }

    /// The sentence after `require`, with single spaces and without comments.
    fn sentence(&self, module: ModuleId, span: Span) -> String {
        let text = self.sources.get(self.modules[module.0].file).slice(span);
        let mut words = Vec::new();
        for line in text.lines() {
            let code = without_comment(line);
            words.extend(code.split_whitespace());
        }
        let sentence = words.join(" ");
        sentence.strip_prefix("require").map_or(sentence.as_str(), str::trim_start).to_owned()
    }
}

/// A line up to its comment; a `#` in quotes is no comment.
fn without_comment(line: &str) -> &str {
    let mut quoted = false;
    let mut escaped = false;
    for (at, character) in line.char_indices() {
        match character {
            _ if escaped => escaped = false,
            '\\' if quoted => escaped = true,
            '"' => quoted = !quoted,
            '#' if !quoted => return &line[..at],
            _ => {}
        }
    }
    line
}

/// The dimension of a quantity's bound, and what to call a value of it.
fn measures(quantity: &Quantity) -> (Wanted, &'static str) {
    use Quantity::*;
    let (dimension, role) = match quantity {
        Reflectance => (Dimension::Ratio, "a reflectance"),
        Transmittance => (Dimension::Ratio, "a transmittance"),
        Absorptance | AbsorptanceIn(_) => (Dimension::Ratio, "an absorptance"),
        OpticalDensity => (Dimension::Ratio, "an optical density"),
        Luminous(_) => (Dimension::Ratio, "a luminous quantity"),
        Solar(_) | SolarAbsorptance => (Dimension::Ratio, "a solar quantity"),
        Photocurrent(_) | PhotocurrentLoss(_) => (Dimension::CurrentDensity, "a photocurrent"),
        Colour(_) => (Dimension::Ratio, "a colour"),
        Phase(_) => (Dimension::Angle, "a phase"),
        GroupDelay(_) => (Dimension::Time, "a group delay"),
        GroupDelayDispersion(_) => (Dimension::GroupDelayDispersion, "a group-delay dispersion"),
        PeakField => (Dimension::Ratio, "a peak field"),
        Emittance => (Dimension::Ratio, "an emittance"),
        Yield => (Dimension::Ratio, "a yield"),
    };
    let wanted = match quantity {
        // The same dimension as the minutes of a run, and fifteen powers of ten from them.
        GroupDelay(_) => Wanted { dimension, unit: "fs" },
        _ => dimension.into(),
    };
    (wanted, role)
}
