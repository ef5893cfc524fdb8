//! Statements of a material, and the models of its index.

use super::super::ast::{
    Change, Expr, Extinction, IndexModel, MaterialStatement, Name, Oscillator, Statement,
};
use super::super::keywords::BlockKind;
use super::super::lexeme::Lexeme;
use super::super::tokens::TokenKind;
use super::Rule;
use super::expression::{range, table, value};
use super::pieces::{list, mark, name, text, word};
use super::recovery::sentence;
use chumsky::prelude::*;

const MODEL: &str = "an index, for example `1.46`, `table \"file.csv\"` or `cauchy 1.45, 0.004 um^2`";
const SHARE: &str = "a share, for example `70 %`";

pub(super) fn statement<'a>() -> Rule<'a, Statement<MaterialStatement>> {
    const BLOCK: BlockKind = BlockKind::Material;
    let index = model()
        .then(word("k").ignore_then(extinction()).or_not())
        .map(|(model, extinction)| MaterialStatement::Index { model, extinction });
    choice((
        sentence(BLOCK, "source", text("the source of the numbers in quotes").map(MaterialStatement::Source)),
        sentence(BLOCK, "index", index),
        sentence(
            BLOCK,
            "valid",
            range("a range of wavelengths, for example `300 .. 1200 nm`").map(MaterialStatement::Valid),
        ),
        sentence(
            BLOCK,
            "density",
            value("a density, for example `2.7 g/cm3`").map(MaterialStatement::Density),
        ),
        sentence(BLOCK, "stress", value("a stress, for example `-300 MPa`").map(MaterialStatement::Stress)),
        sentence(BLOCK, "caution", text("the caution in quotes").map(MaterialStatement::Caution)),
    ))
    .boxed()
}

fn model<'a>() -> Rule<'a, IndexModel> {
    let sellmeier = value("a strength, for example `0.6962`")
        .then_ignore(word("at"))
        .then(value("a resonance wavelength, for example `0.0684 um`"))
        .boxed();
    let oscillators = value("the permittivity far above all terms, for example `1.0`")
        .then_ignore(mark(TokenKind::LeftBrace))
        .then(oscillator().repeated().collect::<Vec<_>>())
        .then_ignore(mark(TokenKind::RightBrace))
        .map(|(background, terms)| IndexModel::Oscillators { background, terms });
    let part = name("the name of a material").then(value(SHARE)).boxed();
    let mixture = word("of")
        .ignore_then(list(part))
        .then(word("by").ignore_then(name("the name of a rule, for example `bruggeman`")).or_not())
        .map(|(parts, rule)| IndexModel::Mixture { parts, rule });
    let change = choice((
        word("shifted").ignore_then(value("what is added to n, for example `0.012`")).map(Change::Shifted),
        word("scaled").ignore_then(value("a share of n, for example `1.5 %`")).map(Change::Scaled),
    ));
    let derived = name("the name of a material")
        .then(change.or_not())
        .map(|(of, change)| IndexModel::Derived { of, change });
    let words = choice((
        plain("table").ignore_then(table()).map(IndexModel::Table).boxed(),
        plain("cauchy").ignore_then(list(value("a coefficient"))).map(IndexModel::Cauchy).boxed(),
        plain("sellmeier").ignore_then(list(sellmeier)).map(IndexModel::Sellmeier).boxed(),
        plain("oscillators").ignore_then(oscillators).boxed(),
        plain("mixture").ignore_then(mixture).boxed(),
        plain("of").ignore_then(derived).boxed(),
    ));
    // The models' names first: a `let` of such a name could never be meant.
    let constant = plain_model_name().not().ignore_then(value(MODEL)).map(IndexModel::Constant);
    choice((words, constant)).labelled(MODEL).boxed()
}

fn plain_model_name<'a>() -> Rule<'a, ()> {
    any()
        .filter(|lexeme: &Lexeme<'a>| {
            lexeme.kind == TokenKind::Word
                && matches!(lexeme.text, "table" | "cauchy" | "sellmeier" | "oscillators" | "mixture")
        })
        .ignored()
        .boxed()
}

/// A word that no message names by itself.
fn plain<'a>(word: &'static str) -> Rule<'a, ()> {
    any().filter(move |lexeme: &Lexeme<'a>| lexeme.is(word)).ignored().boxed()
}

fn oscillator<'a>() -> Rule<'a, Oscillator> {
    let kind = any()
        .filter(|lexeme: &Lexeme<'a>| {
            lexeme.kind == TokenKind::Word && matches!(lexeme.text, "lorentz" | "drude" | "tauc_lorentz")
        })
        .map(|lexeme| Name { text: lexeme.text.to_owned(), span: lexeme.span })
        .labelled("a term: `lorentz`, `drude` or `tauc_lorentz`");
    let clause = |keyword: &'static str, label: &'static str| -> Rule<'a, Option<Expr>> {
        word(keyword).ignore_then(value(label)).or_not().boxed()
    };
    kind.then(value("a strength, for example `2.1` or `6.2 eV`"))
        .then(clause("at", "a photon energy, for example `7.3 eV`"))
        .then(clause("width", "a width, for example `0.4 eV`"))
        .then(clause("gap", "a gap, for example `2.4 eV`"))
        .map(|((((kind, strength), centre), width), gap)| Oscillator { kind, strength, centre, width, gap })
        .boxed()
}

fn extinction<'a>() -> Rule<'a, Extinction> {
    const LABEL: &str = "an extinction coefficient, for example `0.003`";
    let urbach = plain("urbach")
        .ignore_then(value(LABEL))
        .then_ignore(word("at"))
        .then(value("a wavelength, for example `300 nm`"))
        .then_ignore(word("width"))
        .then(value("a width, for example `0.25 eV`"))
        .map(|((k, at), width)| Extinction::Urbach { k, at, width });
    let rows = plain("table").ignore_then(table()).map(Extinction::Table);
    let special = choice((plain("urbach"), plain("table")));
    let constant = special.not().ignore_then(value(LABEL)).map(Extinction::Constant);
    choice((urbach.boxed(), rows.boxed(), constant.boxed())).labelled(LABEL).boxed()
}
