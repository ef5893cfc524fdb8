//! Drives the built command on projects in folders of their own.

mod bad_input;
mod check;
mod formats;
mod human;
mod paths;
mod pipes;
mod project;
mod reference;
mod settings;
mod spectrum;
