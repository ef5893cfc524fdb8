//! Statements of a chamber and of its sources.

use super::super::ast::{
    ChamberStatement, DepositStatement, Each, Per, Spread, SpreadKind, Statement, Varying,
};
use super::super::keywords::BlockKind;
use super::super::problem::Tokens;
use super::super::tokens::TokenKind;
use super::expression::{range, value};
use super::pieces::{any_word, extent, mark, name, text, word};
use super::recovery::{block, opened, sentence};
use super::requirement::bound;
use super::{Extra, Rule};
use chumsky::prelude::*;

pub(super) fn statement<'a>() -> Rule<'a, Statement<ChamberStatement>> {
    const BLOCK: BlockKind = BlockKind::Chamber;
    let sources = name("the name of a material")
        .then(block(BlockKind::Deposit, source()))
        .map(|(material, body)| ChamberStatement::Deposit { material, body });
    let angle = varies().map(|(spread, each)| ChamberStatement::AngleVaries { spread, each });
    let per = word("per").ignore_then(choice((word("run").to(Per::Run), word("layer").to(Per::Layer))));
    let overhead = value("a time, for example `35 min`")
        .then(per)
        .map(|(time, per)| ChamberStatement::Overhead { time, per });
    let forbid = name("the name of a material")
        .then_ignore(word("on"))
        .then(name("the name of a material"))
        .then(word("because").ignore_then(text("the reason in quotes")).or_not())
        .map(|((upper, lower), because)| ChamberStatement::Forbid { upper, lower, because });
    let limit = any_word("what is limited, for example `thickness`")
        .then(bound())
        .map(|(what, bound)| ChamberStatement::Limit { what, bound });
    choice((
        opened("deposit", sources),
        sentence(BLOCK, "angle", angle),
        sentence(BLOCK, "overhead", overhead),
        sentence(
            BLOCK,
            "resolution",
            value("a thickness, for example `0.5 nm`").map(ChamberStatement::Resolution),
        ),
        sentence(BLOCK, "forbid", forbid),
        sentence(BLOCK, "limit", limit),
        sentence(BLOCK, "source", text("the source of the numbers in quotes").map(ChamberStatement::Source)),
    ))
    .boxed()
}

fn source<'a>() -> Rule<'a, Statement<DepositStatement>> {
    const BLOCK: BlockKind = BlockKind::Deposit;
    let varying = |what: Varying| {
        varies().map(move |(spread, each)| DepositStatement::Varies { what, spread, each }).boxed()
    };
    let thickness = choice((
        varying(Varying::Thickness),
        range("a range of thicknesses, for example `20 .. 160 nm`").map(DepositStatement::Thickness).boxed(),
    ));
    let capacity = value("a thickness, for example `6 um`").then_ignore(word("per")).then_ignore(word("run"));
    choice((
        sentence(BLOCK, "rate", value("a rate, for example `0.3 nm/s`").map(DepositStatement::Rate)),
        sentence(BLOCK, "thickness", thickness),
        sentence(BLOCK, "index", varying(Varying::Index)),
        sentence(
            BLOCK,
            "temperature",
            value("a temperature, for example `250 degC`").map(DepositStatement::Temperature),
        ),
        sentence(BLOCK, "capacity", capacity.map(DepositStatement::Capacity)),
        sentence(BLOCK, "tooling", value("a ratio, for example `1.12`").map(DepositStatement::Tooling)),
    ))
    .boxed()
}

/// `± x` or `sigma x`.
pub(super) fn spread<'a>() -> Rule<'a, Spread> {
    let kind = choice((
        mark(TokenKind::PlusMinus).to(SpreadKind::Rectangular),
        word("sigma").to(SpreadKind::Normal),
    ));
    kind.then(value("a variation, for example `2 %` or `0.4 nm`"))
        .map_with(|(kind, value), extra| Spread { kind, value, span: extent(extra.slice()) })
        .boxed()
}

/// `varies ± 1 % each run`.
fn varies<'a>() -> impl Parser<'a, Tokens<'a>, (Spread, Each), Extra> {
    let each = word("each").ignore_then(choice((
        word("layer").to(Each::Layer),
        word("run").to(Each::Run),
        word("part").to(Each::Part),
    )));
    word("varies").ignore_then(spread()).then(each)
}
