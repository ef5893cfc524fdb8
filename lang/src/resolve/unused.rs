//! Names that nothing uses.

use super::names::{Entry, Kind, defines};
use super::{ModuleId, Resolver, State};
use crate::model::Origin;
use crate::project::Unused;
use crate::source::Span;
use crate::syntax::ast::{Item, Statement, UsedName};

impl Resolver<'_> {
    /// Imports that nothing in their module uses, and `let`s that nothing uses; wrong ones are left alone.
    pub(super) fn unused_names(&self) -> Vec<Unused> {
        let mut unused = Vec::new();
        for (number, module) in self.modules.iter().enumerate() {
            let id = ModuleId(number);
            // What can't be read may be what uses them.
            if module.origin != Origin::Project || broken(&module.syntax) {
                continue;
            }
            for (index, item) in module.syntax.items.iter().enumerate() {
                match &item.kind {
                    Item::Use(used) => {
                        for (position, name) in used.names.iter().enumerate() {
                            let local = name.alias.as_ref().unwrap_or(&name.name);
                            let here = |entry: &Entry| entry.span == local.span && entry.item.is_some();
                            let sound = module.scope.all(&local.text).iter().any(here);
                            if !sound || self.used.contains(&(id, local.text.clone())) {
                                continue;
                            }
                            unused.push(Unused {
                                name: local.text.clone(),
                                place: local.span.at(module.file),
                                remove: removal(item, &used.names, position).at(module.file),
                                imported: true,
                            });
                        }
                    }
                    kind => {
                        let Some((Kind::Let, name)) = defines(kind) else { continue };
                        let told =
                            self.findings.iter().any(|finding| finding.place == name.span.at(module.file));
                        let sound =
                            !told && matches!(self.lets.get(&(id, index)), Some(State::Done(Some(_))));
                        if sound && !self.used.contains(&(id, name.text.clone())) {
                            unused.push(Unused {
                                name: name.text.clone(),
                                place: name.span.at(module.file),
                                remove: item.span.at(module.file),
                                imported: false,
                            });
                        }
                    }
                }
            }
        }
        unused
    }
}

/// What to delete: the whole statement for its only name, else the name with the comma that follows or precedes.
fn removal(item: &Statement<Item>, names: &[UsedName], position: usize) -> Span {
    let whole = |name: &UsedName| match &name.alias {
        Some(alias) => name.name.span.to(alias.span),
        None => name.name.span,
    };
    let own = whole(&names[position]);
    match (names.get(position + 1), position.checked_sub(1).map(|before| &names[before])) {
        (Some(next), _) => Span { start: own.start, end: whole(next).start },
        (None, Some(before)) => Span { start: whole(before).end, end: own.end },
        (None, None) => item.span,
    }
}

/// Whether any statement of a module could not be read.
fn broken(module: &crate::syntax::ast::Module) -> bool {
    module.broken
        || module.items.iter().any(|item| match &item.kind {
            Item::Use(_) | Item::Let(_) => false,
            Item::Material(item) => item.body.broken,
            Item::Spectrum(item) => item.body.broken,
            Item::Chamber(item) => item.body.broken,
            Item::Specification(item) => item.body.broken,
            Item::Recipe(item) => item.body.broken,
        })
}
