//! Reading modules: the files asked for, those that they use, and the handbook's entries.

use super::names::{Entry, Kind, Scope, defines};
use super::paths::{BadPath, join};
use super::{ItemId, Loaded, ModuleId, Resolver, nearest};
use crate::files::ReadError;
use crate::finding::FormFact;
use crate::model::Origin;
use crate::source::{Place, Source, Span};
use crate::syntax::ast::{Item, Name, Text, Use, UseSource};
use crate::syntax::{decode, parse};
use std::sync::Arc;

/// Imports may be nested this deep; a longer chain is a mistake, and would cost stack.
const DEEPEST_IMPORT: usize = 64;

impl Resolver<'_> {
    /// Reads the module at a path that was asked for.
    pub(super) fn load_module(&mut self, path: &str) -> Option<ModuleId> {
        if let Some(known) = self.by_path.get(path) {
            return *known;
        }
        match self.files.read(path) {
            Ok(bytes) => self.add(path, &bytes, Origin::Project),
            Err(error) => {
                let file = self.sources.add(Source::new(path, ""));
                let fact = self.unreadable(path, path, error);
                self.findings.push(crate::finding::Finding::new(fact, Span::default().at(file)));
                self.by_path.insert(path.to_owned(), None);
                None
            }
        }
    }

    /// The fact that says why a file could not be read.
    pub(super) fn unreadable(&self, written: &str, path: &str, error: ReadError) -> FormFact {
        match error {
            ReadError::Missing => {
                let beside = self.files.beside(path);
                let near = nearest(path, beside.iter().map(String::as_str));
                FormFact::UnreadableFile { path: written.to_owned(), why: "does not exist".to_owned(), near }
            }
            ReadError::Outside(why) => FormFact::ImportOutside { path: written.to_owned(), why },
            ReadError::Failed(why) => {
                FormFact::UnreadableFile { path: written.to_owned(), why, near: Vec::new() }
            }
        }
    }

    fn add(&mut self, path: &str, bytes: &[u8], origin: Origin) -> Option<ModuleId> {
        let text = match decode(bytes) {
            Ok(text) => text,
            Err(fact) => {
                let file = self.sources.add(Source::new(path, String::from_utf8_lossy(bytes).into_owned()));
                self.findings.push(crate::finding::Finding::new(fact, Span::default().at(file)));
                self.by_path.insert(path.to_owned(), None);
                return None;
            }
        };
        let source = Source::new(path, text);
        let text = source.text.clone();
        let file = self.sources.add(source);
        let parsed = match path.ends_with(".md") {
            true => parse(&crate::markdown::recipes(&text).unwrap_or_default(), file),
            false => parse(&text, file),
        };
        self.findings.extend(parsed.findings);
        let id = ModuleId(self.modules.len());
        let syntax = Arc::new(parsed.module);
        let path = path.to_owned();
        self.modules.push(Loaded {
            file,
            path: path.clone(),
            origin,
            syntax: syntax.clone(),
            scope: Scope::default(),
            imports: Default::default(),
        });
        self.by_path.insert(path.clone(), Some(id));
        for (number, item) in syntax.items.iter().enumerate() {
            if let Some((kind, name)) = defines(&item.kind) {
                self.bring_in(id, &name.text, Entry { span: name.span, item: Some(((id, number), kind)) });
            }
        }
        self.loading.push(path);
        for item in &syntax.items {
            if let Item::Use(used) = &item.kind {
                self.import(id, used);
            }
        }
        self.loading.pop();
        Some(id)
    }

    /// Adds a meaning of a name to a module's scope, or reports that it has one of this kind already.
    fn bring_in(&mut self, module: ModuleId, name: &str, entry: Entry) {
        let scope = &mut self.modules[module.0].scope;
        let first = match entry.item {
            Some((_, kind)) => scope.get(name, kind),
            None => scope.all(name).first().copied(),
        };
        match first {
            Some(first) if first.item.is_some() && entry.item.is_some() => {
                let first = self.place(module, first.span);
                self.report(module, entry.span, FormFact::DuplicateName { name: name.to_owned(), first });
            }
            _ => scope.insert(name, entry),
        }
    }

    fn import(&mut self, module: ModuleId, used: &Use) {
        let from = match &used.from {
            UseSource::Handbook(_) => None,
            UseSource::File(path) => Some((path, self.imported_module(module, path))),
        };
        if let Some((_, Some(from))) = from {
            self.modules[module.0].imports.insert(from);
        }
        for name in &used.names {
            let span = name.alias.as_ref().unwrap_or(&name.name).span;
            let local = name.alias.as_ref().unwrap_or(&name.name).text.clone();
            let items = match from {
                None => self.handbook_import(module, &name.name),
                Some((path, Some(from))) => self.imported_items(module, from, &name.name, path),
                Some((_, None)) => Vec::new(),
            };
            if items.is_empty() {
                self.bring_in(module, &local, Entry { span, item: None });
            }
            for item in items {
                self.bring_in(module, &local, Entry { span, item: Some(item) });
            }
        }
    }

    fn handbook_import(&mut self, module: ModuleId, name: &Name) -> Vec<(ItemId, Kind)> {
        let item = self.handbook_item(&name.text);
        if item.is_none() {
            let near = nearest(&name.text, crate::handbook::names());
            let fact =
                FormFact::UnknownName { kind: "handbook entry", name: name.text.clone(), near, import: None };
            self.report(module, name.span, fact);
        }
        item.into_iter().collect()
    }

    /// Everything of this name in another module.
    fn imported_items(
        &mut self,
        module: ModuleId,
        from: ModuleId,
        name: &Name,
        path: &Text,
    ) -> Vec<(ItemId, Kind)> {
        let entries = self.modules[from.0].scope.all(&name.text);
        if !entries.is_empty() {
            let items = entries.iter().filter_map(|entry| entry.item).collect();
            self.used.insert((from, name.text.clone()));
            return items;
        }
        // A definition that could not be read may be the one that is missing: say the cause only.
        if !self.modules[from.0].syntax.broken {
            let names = self.modules[from.0].scope.names().map(|(name, _)| name);
            let near = nearest(&name.text, names);
            let fact = FormFact::NotInFile { name: name.text.clone(), path: path.value.clone(), near };
            self.report(module, name.span, fact);
        }
        Vec::new()
    }

    fn imported_module(&mut self, module: ModuleId, written: &Text) -> Option<ModuleId> {
        let path = self.path_of(module, written)?;
        if let Some(start) = self.loading.iter().position(|open| *open == path) {
            let mut chain: Vec<String> = self.loading[start..].to_vec();
            chain.push(path);
            self.report(module, written.span, FormFact::Cycle { kind: "imports", chain });
            return None;
        }
        if let Some(known) = self.by_path.get(&path) {
            return *known;
        }
        if self.loading.len() >= DEEPEST_IMPORT {
            let fact = FormFact::UnreadableFile {
                path: written.value.clone(),
                why: format!("is the end of a chain of more than {DEEPEST_IMPORT} imports"),
                near: Vec::new(),
            };
            self.report(module, written.span, fact);
            return None;
        }
        match self.files.read(&path) {
            Ok(bytes) => self.add(&path, &bytes, Origin::Project),
            Err(error) => {
                let fact = self.unreadable(&written.value, &path, error);
                self.report(module, written.span, fact);
                None
            }
        }
    }

    /// The path, relative to the root, that a text in `module` means; reports one that can't be.
    pub(super) fn path_of(&mut self, module: ModuleId, written: &Text) -> Option<String> {
        match join(&self.modules[module.0].path, &written.value) {
            Ok(path) => Some(path),
            Err(BadPath::Outside(why)) => {
                let fact = FormFact::ImportOutside { path: written.value.clone(), why: why.to_owned() };
                self.report(module, written.span, fact);
                None
            }
            Err(BadPath::Malformed(why)) => {
                let fact = FormFact::UnreadableFile {
                    path: written.value.clone(),
                    why: why.to_owned(),
                    near: Vec::new(),
                };
                self.report(module, written.span, fact);
                None
            }
        }
    }

    /// An item of the handbook, read when it is first asked for.
    pub(super) fn handbook_item(&mut self, name: &str) -> Option<(ItemId, Kind)> {
        let text = crate::handbook::text(name)?;
        let path = format!("handbook/{name}.coat");
        let module = match self.by_path.get(&path) {
            Some(known) => (*known)?,
            None => {
                let origin = if crate::handbook::built_in(name) { Origin::BuiltIn } else { Origin::Handbook };
                self.add(&path, text.as_bytes(), origin)?
            }
        };
        self.modules[module.0].scope.all(name).first()?.item
    }

    /// A name that is in scope unasked: air, vacuum and the standard spectra.
    pub(super) fn standard(&mut self, name: &str) -> Option<(ItemId, Kind)> {
        if crate::handbook::in_scope(name) { self.handbook_item(name) } else { None }
    }

    /// The place of an item's name.
    pub(super) fn name_place(&self, item: ItemId) -> Place {
        let (module, number) = item;
        let span = defines(&self.modules[module.0].syntax.items[number].kind)
            .map_or(Span::default(), |(_, name)| name.span);
        self.place(module, span)
    }

    /// An item's name.
    pub(super) fn name_of(&self, item: ItemId) -> String {
        let (module, number) = item;
        defines(&self.modules[module.0].syntax.items[number].kind)
            .map_or(String::new(), |(_, name)| name.text.clone())
    }
}
