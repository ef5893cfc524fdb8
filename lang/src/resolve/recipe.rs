//! Recipes.

use super::names::Kind;
use super::{ModuleId, Resolver, all};
use crate::code::Code;
use crate::finding::FormFact;
use crate::model::{Recipe, Reference, Waiver};
use crate::source::Span;
use crate::syntax::ast::{Expr, Named, RecipeStatement};

impl Resolver<'_> {
    /// A recipe with what was understood of it.
    pub(super) fn recipe(
        &mut self,
        module: ModuleId,
        written: &Named<RecipeStatement>,
        description: &[String],
    ) -> Recipe {
        let statements = &written.body.statements;
        macro_rules! once {
            ($word:literal, $pattern:pat => $value:expr) => {
                self.once(module, $word, all!(statements, $pattern => $value))
            };
        }
        let revision = once!("revision", RecipeStatement::Revision(text) => text);
        let chamber = once!("chamber", RecipeStatement::Chamber(name) => name);
        let reference = once!("reference", kind @ RecipeStatement::Reference { .. } => kind);
        let stack = once!("stack", RecipeStatement::Stack(block) => block);
        let chamber = chamber.and_then(|(_, name)| {
            let item = self.lookup(module, name, Kind::Chamber)?;
            Some((self.chamber(item)?, self.place(module, name.span)))
        });
        // A reference that is wrong has been reported: quarter-waves then have no thickness, silently.
        let reference_written = reference.is_some();
        let reference = match reference {
            Some((keyword, RecipeStatement::Reference { wavelength, angle })) => {
                self.reference(module, keyword, wavelength, angle.as_ref())
            }
            _ => None,
        };
        let stack = match stack {
            Some((_, block)) => {
                let reference = if reference_written { Some(reference) } else { None };
                self.stack(module, block, reference)
            }
            None => {
                if !written.body.broken {
                    let hint = "write `stack { … }` with the layers between its two ends";
                    self.missing(module, written.name.span, "`stack`", "the recipe", hint);
                }
                None
            }
        };
        let mut recipe = Recipe {
            name: written.name.text.clone(),
            title: written.title.as_ref().map(|title| title.value.clone()),
            place: self.place(module, written.name.span),
            description: description.to_vec(),
            revision: revision.map(|(_, text)| text.value.clone()),
            chamber,
            meets: Vec::new(),
            reference,
            stack,
            requirements: Vec::new(),
            waivers: Vec::new(),
        };
        for statement in statements {
            match &statement.kind {
                RecipeStatement::Meets(names) => {
                    for name in names {
                        let item = self.lookup(module, name, Kind::Specification);
                        let Some(specification) = item.and_then(|item| self.specification(item)) else {
                            continue;
                        };
                        if let Some((_, first)) =
                            recipe.meets.iter().find(|(other, _)| other.place == specification.place)
                        {
                            let fact = FormFact::DuplicateName { name: name.text.clone(), first: *first };
                            self.report(module, name.span, fact);
                            continue;
                        }
                        recipe.meets.push((specification, self.place(module, name.span)));
                    }
                }
                RecipeStatement::Require(require) => {
                    recipe.requirements.extend(self.requirement(module, require, statement.span));
                }
                RecipeStatement::Waive { .. } => {
                    recipe.waivers.extend(self.waiver(module, &statement.kind, statement.span));
                }
                _ => {}
            }
        }
        recipe
    }

    fn reference(
        &mut self,
        module: ModuleId,
        keyword: Span,
        wavelength: &Expr,
        angle: Option<&Expr>,
    ) -> Option<Reference> {
        let nm = self.wavelength(module, wavelength, "a reference");
        let angle = match angle {
            Some(expr) => {
                let value = self.value(module, expr);
                value.and_then(|value| self.incidence(module, expr.span, value, "the reference's angle"))
            }
            None => Some(0.0),
        };
        let place = self.place(module, keyword.to(wavelength.span));
        Some(Reference { wavelength: nm?, angle: angle?, place })
    }

    fn waiver(&mut self, module: ModuleId, statement: &RecipeStatement, span: Span) -> Option<Waiver> {
        let RecipeStatement::Waive { code: written, on, because, until } = statement else { return None };
        let code = Code::from_slug(&written.text);
        match code {
            None => {
                let slugs = Code::ALL.iter().filter(|code| code.family().waivable()).map(|code| code.slug());
                let near = super::nearest(&written.text, slugs);
                let fact =
                    FormFact::UnknownName { kind: "code", name: written.text.clone(), near, import: None };
                self.report(module, written.span, fact);
            }
            Some(code) if !code.family().waivable() => {
                let must = "a code of the process, the margin, the provenance or the housekeeping; what the text, the \
                            optics or a promise gets wrong can't be waived";
                self.invalid(module, written.span, "what is waived", &written.text, must);
                return None;
            }
            Some(_) => {}
        }
        let reason = because.as_ref().filter(|text| !text.value.trim().is_empty());
        if reason.is_none() {
            let hint = "write `because` and the reason in quotes";
            self.missing(module, span, "`because` with a reason", "the waiver", hint);
        }
        Some(Waiver {
            code: code?,
            on: on.as_ref().map(|name| name.text.clone()),
            because: reason?.value.clone(),
            until: *until,
            place: self.place(module, span),
        })
    }
}
