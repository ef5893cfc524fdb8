//! Statements of a stack.

use super::super::ast::{Layer, LayerMaterial, LayerOption, LayerOptionKind, StackStatement, Statement};
use super::super::keywords::BlockKind;
use super::super::lexeme::Lexeme;
use super::super::problem::Tokens;
use super::expression::{range, value};
use super::pieces::{definition, extent, name, word};
use super::recovery::{block, opened, sentence};
use super::{Extra, Rule, chamber};
use chumsky::prelude::*;

const MATERIAL: &str = "the name of a material";
const THICKNESS: &str = "a thickness, for example `62 nm`";

pub(super) fn statement<'a>() -> Rule<'a, Statement<StackStatement>> {
    const BLOCK: BlockKind = BlockKind::Stack;
    recursive(|statement| {
        let substrate = name(MATERIAL)
            .then(value(THICKNESS).or_not())
            .map(|(material, thickness)| StackStatement::Substrate { material, thickness });
        let slab = name(MATERIAL)
            .then(value(THICKNESS).or_not())
            .map(|(material, thickness)| StackStatement::Slab { material, thickness });
        let repeat = value("a number of repeats, for example `8`")
            .then(block(BLOCK, statement.boxed()))
            .map(|(count, body)| StackStatement::Repeat { count, body });
        choice((
            sentence(BLOCK, "incident", name(MATERIAL).map(StackStatement::Incident)),
            sentence(BLOCK, "exit", name(MATERIAL).map(StackStatement::Exit)),
            sentence(BLOCK, "substrate", substrate),
            sentence(BLOCK, "slab", slab),
            sentence(
                BLOCK,
                "textured",
                value("an angle, for example `54.74 deg`").map(StackStatement::Textured),
            ),
            sentence(BLOCK, "layer", layer().map(StackStatement::Layer)),
            opened("repeat", repeat),
        ))
    })
    .boxed()
}

fn layer<'a>() -> impl Parser<'a, Tokens<'a>, Layer, Extra> {
    let graded = any()
        .filter(|lexeme: &Lexeme<'a>| lexeme.is("graded"))
        .ignore_then(name(MATERIAL))
        .then_ignore(word("to"))
        .then(name(MATERIAL))
        .map(|(from, to)| LayerMaterial::Graded { from, to });
    let material =
        choice((graded.boxed(), name(MATERIAL).map(LayerMaterial::Plain).boxed())).labelled(MATERIAL);
    material
        .then(value(THICKNESS).or_not())
        .then(option().repeated().collect())
        .map(|((material, thickness), options)| Layer { material, thickness, options })
}

fn option<'a>() -> Rule<'a, LayerOption> {
    let kind = choice((
        word("as").ignore_then(definition("a name for the layer")).map(LayerOptionKind::As).boxed(),
        chamber::spread().map(LayerOptionKind::Spread).boxed(),
        word("fixed").to(LayerOptionKind::Fixed).boxed(),
        word("between")
            .ignore_then(range("a range of thicknesses, for example `5 .. 40 nm`"))
            .map(LayerOptionKind::Between)
            .boxed(),
        word("rough")
            .ignore_then(value("a roughness, for example `1.2 nm`"))
            .map(LayerOptionKind::Rough)
            .boxed(),
        word("by")
            .ignore_then(name("the name of a rule, for example `bruggeman`"))
            .map(LayerOptionKind::By)
            .boxed(),
        word("in")
            .ignore_then(value("a number of steps, for example `24`"))
            .then_ignore(word("steps"))
            .map(LayerOptionKind::Steps)
            .boxed(),
    ));
    kind.map_with(|kind, extra| LayerOption { kind, span: extent(extra.slice()) }).boxed()
}
