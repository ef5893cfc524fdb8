//! Statements of a spectrum.

use super::super::ast::{SpectrumStatement, Statement};
use super::super::keywords::BlockKind;
use super::Rule;
use super::expression::{table, value};
use super::pieces::{list, name, text, unit};
use super::recovery::sentence;
use chumsky::prelude::*;

pub(super) fn statement<'a>() -> Rule<'a, Statement<SpectrumStatement>> {
    const BLOCK: BlockKind = BlockKind::Spectrum;
    choice((
        sentence(BLOCK, "source", text("the source of the numbers in quotes").map(SpectrumStatement::Source)),
        sentence(BLOCK, "table", table().map(SpectrumStatement::Table)),
        sentence(
            BLOCK,
            "blackbody",
            value("a temperature, for example `2856 K`").map(SpectrumStatement::Blackbody),
        ),
        sentence(BLOCK, "product", list(name("the name of a spectrum")).map(SpectrumStatement::Product)),
        sentence(BLOCK, "irradiance", unit("a unit, for example `W/m2`").map(SpectrumStatement::Irradiance)),
    ))
    .boxed()
}
