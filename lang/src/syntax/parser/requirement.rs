//! `require` sentences: a quantity, a bound, clauses.

use super::super::ast::{
    AtItem, Bound, BoundKind, Clause, ClauseKind, Name, QuantityWords, Range, Require, Statement,
};
use super::super::keywords::{self, BlockKind};
use super::super::lexeme::Lexeme;
use super::super::problem::Tokens;
use super::super::tokens::TokenKind;
use super::expression::{range, value};
use super::pieces::{any_word, extent, lexeme, list, mark, name, text, word};
use super::recovery::sentence;
use super::{Extra, Rule};
use chumsky::prelude::*;

const LIMIT: &str = "a value, for example `2.5 %`";
const BAND: &str = "a band, for example `420 .. 680 nm`";

pub(super) fn statement<'a>() -> Rule<'a, Statement<Require>> {
    sentence(BlockKind::Specification, "require", require())
}

/// What follows `require`.
pub(super) fn require<'a>() -> Rule<'a, Require> {
    let mean = any().filter(|lexeme: &Lexeme<'a>| lexeme.is("mean")).map(|mean| mean.span).or_not();
    mean.then(quantity())
        .then(bound().or_not())
        .then(clause().repeated().collect())
        .map(|(((mean, quantity), bound), clauses)| Require { mean, quantity, bound, clauses })
        .boxed()
}

fn quantity<'a>() -> impl Parser<'a, Tokens<'a>, QuantityWords, Extra> {
    // A keyword on the next line starts the next sentence; any other word is a matter of meaning.
    let quantity_word = any()
        .filter(|lexeme: &Lexeme<'a>| lexeme.kind == TokenKind::Word && !keywords::reserved(lexeme.text))
        .map(|lexeme| Name { text: lexeme.text.to_owned(), span: lexeme.span });
    quantity_word
        .labelled("a quantity, for example `reflectance`")
        .then(quantity_word.or_not())
        .then(word("in").ignore_then(name("the name of a material or of a layer")).or_not())
        .map_with(|((first, second), target), extra| {
            let (qualifier, name) = match second {
                Some(second) => (Some(first), second),
                None => (None, first),
            };
            QuantityWords { qualifier, name, target, span: extent(extra.slice()) }
        })
}

/// A bound of a requirement or of a chamber's limit.
pub(super) fn bound<'a>() -> Rule<'a, Bound> {
    let mask = || {
        any()
            .filter(|lexeme: &Lexeme<'a>| lexeme.is("mask"))
            .ignore_then(text("the file of the mask in quotes"))
            .boxed()
    };
    let at_most = lexeme(TokenKind::AtMost)
        .ignore_then(choice((mask().map(BoundKind::AtMostMask), value(LIMIT).map(BoundKind::AtMost))));
    let at_least = lexeme(TokenKind::AtLeast)
        .ignore_then(choice((mask().map(BoundKind::AtLeastMask), value(LIMIT).map(BoundKind::AtLeast))));
    let crosses = any()
        .filter(|lexeme: &Lexeme<'a>| lexeme.is("crosses"))
        .ignore_then(value("a level, for example `50 %`"))
        .then(choice((word("rising").to(true), word("falling").to(false))))
        .then(word("within").ignore_then(range("a band, for example `585 .. 595 nm`")).or_not())
        .map(|((level, rising), within)| BoundKind::Crosses { level, rising, within });
    let lab = list(value("a number"))
        .delimited_by(mark(TokenKind::LeftParenthesis), mark(TokenKind::RightParenthesis));
    let colour = any()
        .filter(|lexeme: &Lexeme<'a>| lexeme.is("within"))
        .ignore_then(value("a colour difference, for example `3`"))
        .then_ignore(word("of"))
        .then_ignore(word("lab"))
        .then(lab)
        .map(|(difference, aim)| BoundKind::NearColour { difference, aim });
    let both = value(LIMIT)
        .then(choice((
            mark(TokenKind::DotDot).to(true).then(value("the upper end of the range")),
            mark(TokenKind::PlusMinus).to(false).then(value("a tolerance, for example `2 %`")),
        )))
        .map(|(first, (ranges, second))| {
            if ranges {
                let span = first.span.to(second.span);
                BoundKind::Between(Range { low: first, high: second, span })
            } else {
                BoundKind::Around { aim: first, tolerance: second }
            }
        });
    choice((at_most.boxed(), at_least.boxed(), crosses.boxed(), colour.boxed(), both.boxed()))
        .labelled("a bound, for example `<= 2.5 %` or `30 .. 50 %`")
        .map_with(|kind, extra| Bound { kind, span: extent(extra.slice()) })
        .boxed()
}

fn clause<'a>() -> Rule<'a, Clause> {
    let over = word_unnamed("over").ignore_then(choice((
        range(BAND).separated_by(word("and")).at_least(1).collect().map(ClauseKind::Over).boxed(),
        value(BAND).then_ignore(word("parts")).map(ClauseKind::OverParts).boxed(),
    )));
    let at_item = value("an angle, a wavelength or a temperature, for example `45 deg`")
        .then(mark(TokenKind::DotDot).ignore_then(value("the upper end of the range")).or_not())
        .map(|(low, high)| match high {
            Some(high) => AtItem::Range(Range { span: low.span.to(high.span), low, high }),
            None => AtItem::Value(low),
        })
        .boxed();
    let under = word_unnamed("under")
        .ignore_then(name("the name of a spectrum, for example `am15g`"))
        .then(word("photons").or_not())
        .map(|(spectrum, photons)| ClauseKind::Under { spectrum, photons: photons.is_some() });
    choice((
        over.boxed(),
        word_unnamed("at").ignore_then(list(at_item)).map(ClauseKind::At).boxed(),
        word_unnamed("cone")
            .ignore_then(value("an angle, for example `12 deg`"))
            .map(ClauseKind::Cone)
            .boxed(),
        word_unnamed("polarised").ignore_then(any_word("`s` or `p`")).map(ClauseKind::Polarised).boxed(),
        under.boxed(),
        word_unnamed("from").ignore_then(word("exit")).to(ClauseKind::FromExit).boxed(),
        word_unnamed("nominal").to(ClauseKind::Nominal).boxed(),
        word_unnamed("observer")
            .ignore_then(value("an angle, for example `10 deg`"))
            .map(ClauseKind::Observer)
            .boxed(),
        word_unnamed("hemispherical").to(ClauseKind::Hemispherical).boxed(),
    ))
    .labelled("a clause, for example `over 420 .. 680 nm` or `at 45 deg`")
    .map_with(|kind, extra| Clause { kind, span: extent(extra.slice()) })
    .boxed()
}

/// A clause's keyword: a message names the clause, not each word.
fn word_unnamed<'a>(word: &'static str) -> Rule<'a, ()> {
    any().filter(move |lexeme: &Lexeme<'a>| lexeme.is(word)).ignored().boxed()
}
