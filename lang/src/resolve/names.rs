//! Names: what each module defines and imports, and what a name means.

use super::{ItemId, ModuleId, Resolver, nearest};
use crate::finding::FormFact;
use crate::source::Span;
use crate::syntax::ast::{Item, Name};
use indexmap::IndexMap;

/// The names of one module, in the order in which they were brought in. Each kind of item has names of its own: a
/// material and a recipe may share one.
#[derive(Default)]
pub(super) struct Scope {
    entries: IndexMap<String, Vec<Entry>>,
}

/// One meaning of a name.
#[derive(Clone, Copy)]
pub(super) struct Entry {
    /// Where it is defined or imported here.
    pub(super) span: Span,
    /// What it means; none where the import failed, which has been reported.
    pub(super) item: Option<(ItemId, Kind)>,
}

impl Scope {
    /// All meanings of a name.
    pub(super) fn all(&self, name: &str) -> &[Entry] {
        self.entries.get(name).map_or(&[], Vec::as_slice)
    }

    /// The meaning of a name as one kind of item; a failed import may be of any kind.
    pub(super) fn get(&self, name: &str, kind: Kind) -> Option<Entry> {
        self.all(name).iter().copied().find(|entry| entry.item.is_none_or(|(_, is)| is == kind))
    }

    pub(super) fn insert(&mut self, name: &str, entry: Entry) {
        self.entries.entry(name.to_owned()).or_default().push(entry);
    }

    /// Every meaning with its name.
    pub(super) fn names(&self) -> impl Iterator<Item = (&str, Entry)> {
        self.entries.iter().flat_map(|(name, entries)| entries.iter().map(|entry| (name.as_str(), *entry)))
    }
}

/// What a name can stand for.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Kind {
    Let,
    Material,
    Spectrum,
    Chamber,
    Specification,
    Recipe,
}

impl Kind {
    pub(super) fn word(self) -> &'static str {
        match self {
            Kind::Let => "value",
            Kind::Material => "material",
            Kind::Spectrum => "spectrum",
            Kind::Chamber => "chamber",
            Kind::Specification => "specification",
            Kind::Recipe => "recipe",
        }
    }
}

/// The kind and the name of an item; none for a `use`.
pub(super) fn defines(item: &Item) -> Option<(Kind, &Name)> {
    match item {
        Item::Use(_) => None,
        Item::Let(item) => Some((Kind::Let, &item.name)),
        Item::Material(item) => Some((Kind::Material, &item.name)),
        Item::Spectrum(item) => Some((Kind::Spectrum, &item.name)),
        Item::Chamber(item) => Some((Kind::Chamber, &item.name)),
        Item::Specification(item) => Some((Kind::Specification, &item.name)),
        Item::Recipe(item) => Some((Kind::Recipe, &item.name)),
    }
}

impl Resolver<'_> {
    /// What `name` means in `module` as this kind of item; otherwise reports why not, once.
    pub(super) fn lookup(&mut self, module: ModuleId, name: &Name, kind: Kind) -> Option<ItemId> {
        if let Some(entry) = self.find(module, &name.text, kind) {
            return entry.item.map(|(item, _)| item);
        }
        match self.modules[module.0].scope.all(&name.text).first().copied() {
            Some(Entry { span, item: Some((_, is)) }) => {
                self.used.insert((module, name.text.clone()));
                let defined = self.place(module, span);
                let fact = FormFact::WrongKind {
                    name: name.text.clone(),
                    is: is.word(),
                    needed: kind.word(),
                    defined,
                };
                self.report(module, name.span, fact);
            }
            _ => self.unknown(module, name, kind),
        }
        None
    }

    /// What `name` means in `module` as this kind of item, marked as used; standard names are in scope everywhere.
    pub(super) fn find(&mut self, module: ModuleId, name: &str, kind: Kind) -> Option<Entry> {
        if let Some(entry) = self.modules[module.0].scope.get(name, kind) {
            self.used.insert((module, name.to_owned()));
            return Some(entry);
        }
        let item = self.standard(name)?;
        (item.1 == kind).then_some(Entry { span: Span::default(), item: Some(item) })
    }

    /// Reports a name that nothing defines, with the nearest ones and where it could come from.
    pub(super) fn unknown(&mut self, module: ModuleId, name: &Name, kind: Kind) {
        let names = self.modules[module.0].scope.names();
        let fits = names.filter(|(_, entry)| entry.item.is_none_or(|(_, is)| is == kind));
        let mut candidates: Vec<&str> = fits.map(|(text, _)| text).collect();
        if matches!(kind, Kind::Material | Kind::Spectrum) {
            for standard in crate::handbook::standard_names(kind == Kind::Spectrum) {
                candidates.push(standard);
            }
        }
        let near = nearest(&name.text, candidates);
        let import = self.importable(module, &name.text, kind);
        let fact = FormFact::UnknownName { kind: kind.word(), name: name.text.clone(), near, import };
        self.report(module, name.span, fact);
    }

    /// Where a name could be imported from: another module that was read, or the handbook.
    fn importable(&self, module: ModuleId, name: &str, kind: Kind) -> Option<String> {
        if matches!(kind, Kind::Material | Kind::Spectrum) && crate::handbook::text(name).is_some() {
            return Some("handbook".to_owned());
        }
        let mut others =
            self.modules.iter().enumerate().filter(|(number, other)| {
                *number != module.0 && other.origin == crate::model::Origin::Project
            });
        let defines =
            |other: &super::Loaded| other.scope.get(name, kind).is_some_and(|entry| entry.item.is_some());
        let (_, other) = others.find(|(_, other)| defines(other))?;
        Some(super::paths::relative(&self.modules[module.0].path, &other.path))
    }
}
