//! Items: what stands at the top of a module.

use super::super::ast::{Item, Let, Module, Named, Use, UseSource, UsedName};
use super::super::keywords::BlockKind;
use super::super::problem::Tokens;
use super::super::tokens::TokenKind;
use super::expression::value;
use super::pieces::{definition, list, mark, text, word};
use super::recovery::{block, opened, sentence, statements};
use super::{Extra, Rule, chamber, material, recipe, requirement, spectrum};
use chumsky::prelude::*;

/// A whole module.
pub(super) fn module<'a>() -> Rule<'a, Module> {
    let item = choice((
        sentence(BlockKind::Module, "use", uses().map(Item::Use)),
        sentence(BlockKind::Module, "let", lets().map(Item::Let)),
        opened("material", named(block(BlockKind::Material, material::statement())).map(Item::Material)),
        opened("spectrum", named(block(BlockKind::Spectrum, spectrum::statement())).map(Item::Spectrum)),
        opened("chamber", named(block(BlockKind::Chamber, chamber::statement())).map(Item::Chamber)),
        opened(
            "specification",
            named(block(BlockKind::Specification, requirement::statement())).map(Item::Specification),
        ),
        opened("recipe", named(block(BlockKind::Recipe, recipe::statement())).map(Item::Recipe)),
    ))
    .boxed();
    statements(BlockKind::Module, item)
        .then_ignore(end())
        .map(|items| Module {
            broken: items.iter().any(Option::is_none),
            items: items.into_iter().flatten().collect(),
        })
        .boxed()
}

/// `name "title" { … }`
fn named<'a, K: 'a>(
    body: Rule<'a, super::super::ast::Block<K>>,
) -> impl Parser<'a, Tokens<'a>, Named<K>, Extra> {
    definition("a name")
        .then(text("a title in quotes").or_not())
        .then(body)
        .map(|((name, title), body)| Named { name, title, body })
}

fn uses<'a>() -> impl Parser<'a, Tokens<'a>, Use, Extra> {
    let used = definition("the name of what is to be used")
        .then(word("as").ignore_then(definition("a name")).or_not())
        .map(|(name, alias)| UsedName { name, alias });
    let from = choice((
        text("the path of a file in quotes").map(UseSource::File),
        word("handbook").map(UseSource::Handbook),
    ));
    list(used.boxed()).then_ignore(word("from")).then(from).map(|(names, from)| Use { names, from })
}

fn lets<'a>() -> impl Parser<'a, Tokens<'a>, Let, Extra> {
    definition("a name")
        .then_ignore(mark(TokenKind::Equals))
        .then(value("a value, for example `62 nm`"))
        .map(|(name, value)| Let { name, value })
}
