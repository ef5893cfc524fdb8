//! The recipe language: from text to findings.
//!
//! Data flows one way: text → tokens → [`syntax`] tree → resolved [`model`] → evaluation → [`finding`]s →
//! [`diagnostic`]s, which every output is a view of.

mod check;
pub mod code;
pub mod diagnostic;
pub mod files;
pub mod finding;
pub mod handbook;
pub mod markdown;
pub mod messages;
pub mod model;
mod near;
pub mod project;
pub mod report;
mod resolve;
pub mod source;
pub mod syntax;
pub mod units;

pub use check::{Options, check, engine_stack, range_of, simulate};
pub use near::nearest;
pub use resolve::load;
