//! A whole project, read and resolved.

use crate::finding::Finding;
use crate::model::Module;
use crate::source::{Place, Sources};

/// All modules that were asked for, with those that they use.
#[derive(Clone, Debug, Default)]
pub struct Project {
    /// All texts, tables included.
    pub sources: Sources,
    /// The modules, in the order in which they were first needed; handbook entries and standard spectra too.
    pub modules: Vec<Module>,
    /// What reading and resolving found, unsorted.
    pub findings: Vec<Finding>,
    /// Imports that nothing in their module uses, and `let`s that nothing at all uses: name and place.
    pub unused: Vec<Unused>,
}

/// A name that nothing uses.
#[derive(Clone, Debug, PartialEq)]
pub struct Unused {
    /// The name.
    pub name: String,
    /// Where it is defined or imported.
    pub place: Place,
    /// What a fix may delete: the whole statement, or the name with its comma.
    pub remove: Place,
    /// Whether it is an import or a `let`.
    pub imported: bool,
}
