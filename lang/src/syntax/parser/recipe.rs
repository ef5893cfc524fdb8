//! Statements of a recipe.

use super::super::ast::{Date, RecipeStatement, Statement};
use super::super::keywords::BlockKind;
use super::super::slips;
use super::super::tokens::TokenKind;
use super::Rule;
use super::expression::value;
use super::pieces::{any_word, lexeme, list, name, text, word};
use super::recovery::{block, opened, sentence};
use super::{requirement, stack};
use chumsky::prelude::*;

pub(super) fn statement<'a>() -> Rule<'a, Statement<RecipeStatement>> {
    const BLOCK: BlockKind = BlockKind::Recipe;
    let reference = value("a wavelength, for example `600 nm`")
        .then(word("at").ignore_then(value("an angle, for example `45 deg`")).or_not())
        .map(|(wavelength, angle)| RecipeStatement::Reference { wavelength, angle });
    let date = lexeme(TokenKind::Date)
        .map(|lexeme| {
            // The lexer lets through none but dates that exist.
            let (year, month, day) = slips::date(lexeme.text).unwrap_or((9999, 12, 31));
            Date { year, month, day, span: lexeme.span }
        })
        .labelled("a date, for example `2027-01-31`");
    let waive = any_word("the code of what is waived, for example `layer_too_thin`")
        .then(word("on").ignore_then(name("the name of a layer or a material")).or_not())
        .then(word("because").ignore_then(text("the reason in quotes")).or_not())
        .then(word("until").ignore_then(date).or_not())
        .map(|(((code, on), because), until)| RecipeStatement::Waive { code, on, because, until });
    choice((
        sentence(
            BLOCK,
            "revision",
            text("the revision in quotes, for example `\"B\"`").map(RecipeStatement::Revision),
        ),
        sentence(BLOCK, "chamber", name("the name of a chamber").map(RecipeStatement::Chamber)),
        sentence(BLOCK, "meets", list(name("the name of a specification")).map(RecipeStatement::Meets)),
        sentence(BLOCK, "reference", reference),
        opened("stack", block(BlockKind::Stack, stack::statement()).map(RecipeStatement::Stack)),
        sentence(BLOCK, "require", requirement::require().map(RecipeStatement::Require)),
        sentence(BLOCK, "waive", waive),
    ))
    .boxed()
}
