//! From syntax trees to the model: names are bound, units converted, tables read.
//!
//! Items are resolved when they are first needed and kept, so that the order of items does not matter; an
//! item that is met again while it is being resolved closes a cycle. A wrong statement is reported once, at
//! its place, and what rests on it is left out silently: causes, not consequences.

mod applies;
mod chamber;
mod clause;
mod expression;
mod layer;
mod loader;
mod material;
mod names;
mod paths;
mod quantity;
mod recipe;
mod requirement;
mod spectrum;
mod stack;
mod table;
mod unused;

use crate::files::Files;
use crate::finding::{Fact, Finding};
use crate::model;
use crate::near::nearest;
use crate::project::Project;
use crate::source::{FileId, Place, Sources, Span};
use crate::syntax::ast;
use expression::Value;
use names::Scope;
use std::collections::{BTreeMap, BTreeSet};
use std::sync::Arc;

/// Reads the modules at `paths` (relative to the project's root, with `/`) with all that they use, and resolves them.
///
/// Never fails: what could not be read or understood is among the project's findings.
pub fn load(files: &dyn Files, paths: &[String]) -> Project {
    let mut resolver = Resolver::new(files);
    for path in paths {
        resolver.load_module(path);
    }
    resolver.finish()
}

/// The statements of one kind with their keywords: `all!(statements, Pattern(value) => value)`.
macro_rules! all {
    ($statements:expr, $pattern:pat => $value:expr) => {
        $statements.iter().filter_map(|statement| match &statement.kind {
            $pattern => Some((statement.keyword, $value)),
            _ => None,
        })
    };
}
use all;

/// A module by its number in [`Resolver::modules`].
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
struct ModuleId(usize);

/// An item by its module and its number in it.
type ItemId = (ModuleId, usize);

/// A module as it was read.
struct Loaded {
    file: FileId,
    /// Relative to the root; for an entry of the handbook, below `handbook/`.
    path: String,
    origin: model::Origin,
    syntax: Arc<ast::Module>,
    scope: Scope,
    /// The modules that its `use` statements name.
    imports: BTreeSet<ModuleId>,
}

/// What is known of an item that others may need.
#[derive(Clone)]
enum State<T> {
    /// It is being resolved: meeting it now closes a cycle.
    Open,
    /// Done; none where it was wrong.
    Done(Option<T>),
}

struct Resolver<'a> {
    files: &'a dyn Files,
    sources: Sources,
    modules: Vec<Loaded>,
    by_path: BTreeMap<String, Option<ModuleId>>,
    /// The modules being loaded, to tell a cycle of imports.
    loading: Vec<String>,
    findings: Vec<Finding>,
    lets: BTreeMap<ItemId, State<Value>>,
    materials: BTreeMap<ItemId, State<Arc<model::Material>>>,
    spectra: BTreeMap<ItemId, State<Arc<model::Spectrum>>>,
    chambers: BTreeMap<ItemId, Arc<model::Chamber>>,
    specifications: BTreeMap<ItemId, Arc<model::Specification>>,
    /// Items being resolved, to print a cycle.
    path: Vec<ItemId>,
    /// Names of scopes that something used.
    used: BTreeSet<(ModuleId, String)>,
    tables: BTreeMap<String, Option<Arc<table::Csv>>>,
}

impl<'a> Resolver<'a> {
    fn new(files: &'a dyn Files) -> Self {
        Resolver {
            files,
            sources: Sources::default(),
            modules: Vec::new(),
            by_path: BTreeMap::new(),
            loading: Vec::new(),
            findings: Vec::new(),
            lets: BTreeMap::new(),
            materials: BTreeMap::new(),
            spectra: BTreeMap::new(),
            chambers: BTreeMap::new(),
            specifications: BTreeMap::new(),
            path: Vec::new(),
            used: BTreeSet::new(),
            tables: BTreeMap::new(),
        }
    }

    /// Resolves every item of every module and hands the project over.
    fn finish(mut self) -> Project {
        let mut modules: Vec<model::Module> = Vec::new();
        let mut next = 0;
        // Resolving may load a standard spectrum, so the number of modules can grow.
        while next < self.modules.len() {
            modules.push(self.module(ModuleId(next)));
            next += 1;
        }
        let unused = self.unused_names();
        Project { sources: self.sources, modules, findings: self.findings, unused }
    }

    fn module(&mut self, id: ModuleId) -> model::Module {
        let syntax = self.modules[id.0].syntax.clone();
        let uses = self.uses(id);
        let mut module =
            model::Module { file: Some(self.modules[id.0].file), uses, ..model::Module::default() };
        for (number, item) in syntax.items.iter().enumerate() {
            let at = (id, number);
            match &item.kind {
                ast::Item::Use(_) => {}
                ast::Item::Let(_) => {
                    self.let_value(at);
                }
                ast::Item::Material(_) => module.materials.extend(self.material(at)),
                ast::Item::Spectrum(_) => module.spectra.extend(self.spectrum(at)),
                ast::Item::Chamber(_) => module.chambers.extend(self.chamber(at)),
                ast::Item::Specification(_) => module.specifications.extend(self.specification(at)),
                ast::Item::Recipe(recipe) => {
                    module.recipes.push(Arc::new(self.recipe(id, recipe, &item.description)));
                }
            }
        }
        module
    }

    /// The files that a module uses, directly or not.
    fn uses(&self, id: ModuleId) -> Vec<FileId> {
        let mut seen = BTreeSet::from([id]);
        let mut open = vec![id];
        while let Some(next) = open.pop() {
            open.extend(self.modules[next.0].imports.iter().filter(|import| seen.insert(**import)));
        }
        seen.into_iter().filter(|module| *module != id).map(|module| self.modules[module.0].file).collect()
    }

    fn place(&self, module: ModuleId, span: Span) -> Place {
        span.at(self.modules[module.0].file)
    }

    fn report(&mut self, module: ModuleId, span: Span, fact: impl Into<Fact>) {
        let place = self.place(module, span);
        self.findings.push(Finding::new(fact, place));
    }

    /// Reports every statement that may stand once and stands again; returns the first of the kind. Without a name in
    /// `what`, each is called as it is written.
    fn once<'s, T>(
        &mut self,
        module: ModuleId,
        what: &str,
        found: impl IntoIterator<Item = (Span, &'s T)>,
    ) -> Option<(Span, &'s T)> {
        let mut found = found.into_iter();
        let first = found.next()?;
        let first_place = self.place(module, first.0);
        for (span, _) in found {
            let what = if what.is_empty() { self.written(module, span) } else { what.to_owned() };
            let fact = crate::finding::FormFact::Repeated { what, first: first_place };
            self.report(module, span, fact);
        }
        Some(first)
    }
}
