//! Drives the built command on projects in folders of their own.

// In tests a panic is the report, in helpers too.
#![allow(clippy::unwrap_used)]

mod bad_input;
mod check;
mod fmt;
mod formats;
mod handbook;
mod human;
mod paths;
mod pipes;
mod project;
mod reference;
mod settings;
mod spectrum;
mod yields;
