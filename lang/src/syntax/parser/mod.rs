//! The grammar: from lexemes to the tree, statement by statement.
//!
//! Each file holds the rules of one kind of block. Rules are boxed, so that their types stay small.

mod chamber;
mod expression;
mod item;
mod material;
mod pieces;
mod recipe;
mod recovery;
mod requirement;
mod spectrum;
mod stack;

use super::ast::Module;
use super::problem::{Problem, Tokens};
use chumsky::Boxed;
use chumsky::prelude::*;

/// What every rule carries along.
type Extra = extra::Err<Problem>;
/// A rule of the grammar.
type Rule<'a, O> = Boxed<'a, 'a, Tokens<'a>, O, Extra>;

/// Parses balanced lexemes.
pub(super) fn module<'a>(lexemes: Tokens<'a>) -> (Module, Vec<Problem>) {
    let (module, problems) = item::module().parse(lexemes).into_output_errors();
    (module.unwrap_or_else(|| Module { items: Vec::new(), broken: true }), problems)
}
