//! Expressions, ranges and tables.

use super::super::ast::{Expr, ExprKind, Operator, Range, Table, Unit};
use super::super::keywords;
use super::super::lexeme::Lexeme;
use super::super::problem::{Problem, Tokens};
use super::super::tokens::TokenKind;
use super::pieces::{extent, lexeme, list, mark, name, text};
use super::{Extra, Rule};
use crate::finding::FormFact;
use crate::source::Span;
use chumsky::prelude::*;

/// Any expression.
pub(super) fn expression<'a>() -> Rule<'a, Expr> {
    recursive(|expression| {
        let parenthesis = lexeme(TokenKind::LeftParenthesis)
            .ignore_then(expression.clone())
            .then_ignore(mark(TokenKind::RightParenthesis))
            .map_with(|inner, extra| Expr {
                kind: ExprKind::Parenthesis(Box::new(inner)),
                span: extent(extra.slice()),
            });
        let call = any()
            .filter(|lexeme: &Lexeme<'a>| {
                let name = keywords::FUNCTIONS.contains(&lexeme.text) || !keywords::reserved(lexeme.text);
                lexeme.kind == TokenKind::Word && name
            })
            .map(|function| super::super::ast::Name { text: function.text.to_owned(), span: function.span })
            .then_ignore(lexeme(TokenKind::LeftParenthesis))
            .then(list(expression.boxed()))
            .then_ignore(mark(TokenKind::RightParenthesis))
            .map_with(|(function, arguments), extra| Expr {
                kind: ExprKind::Call { function, arguments },
                span: extent(extra.slice()),
            });
        let variable = name("a name").map(|name| Expr { span: name.span, kind: ExprKind::Name(name) });
        let atom =
            choice((number(), call, variable, parenthesis)).labelled("a value, for example `62 nm`").boxed();

        let negations = lexeme(TokenKind::Minus).map(|minus| minus.span).repeated().collect::<Vec<Span>>();
        let power = atom
            .clone()
            .then(
                lexeme(TokenKind::Caret)
                    .ignore_then(negations.clone().then(atom))
                    .repeated()
                    .collect::<Vec<_>>(),
            )
            .map(|(base, exponents)| raise(base, exponents))
            .boxed();
        let signed = negations.then(power).map(|(signs, value)| negate(signs, value)).boxed();
        let product = signed
            .clone()
            .foldl(
                choice((
                    lexeme(TokenKind::Star).to(Operator::Multiply),
                    lexeme(TokenKind::Slash).to(Operator::Divide),
                ))
                .then(signed)
                .repeated(),
                |left, (operator, right)| binary(operator, left, right),
            )
            .boxed();
        product.clone().foldl(
            choice((
                lexeme(TokenKind::Plus).to(Operator::Add),
                lexeme(TokenKind::Minus).to(Operator::Subtract),
            ))
            .then(product)
            .repeated(),
            |left, (operator, right)| binary(operator, left, right),
        )
    })
    .boxed()
}

/// An expression under the name that a message should give it here.
pub(super) fn value<'a>(label: &'static str) -> Rule<'a, Expr> {
    expression().labelled(label).boxed()
}

/// `a .. b`.
pub(super) fn range<'a>(label: &'static str) -> Rule<'a, Range> {
    value(label)
        .then_ignore(mark(TokenKind::DotDot))
        .then(value("the upper end of the range"))
        .map(|(low, high)| Range { span: low.span.to(high.span), low, high })
        .boxed()
}

/// `table "file.csv"` or `table { … }`, after the word.
pub(super) fn table<'a>() -> Rule<'a, Table> {
    let file = text("the file of the table in quotes, or its rows in braces").map(Table::File);
    let row = cell().repeated().at_least(1).collect::<Vec<_>>().validate(|cells, _, emitter| {
        // Rows written without commas would otherwise make one long row.
        for (cell, first_on_line) in cells.iter().skip(1) {
            if *first_on_line {
                let fact = FormFact::Syntax {
                    expected: vec!["`,` between two rows".to_owned()],
                    found: None,
                    hint: Some("a comma ends each row but the last".to_owned()),
                };
                emitter.emit(Problem::fact(cell.span, fact));
                break;
            }
        }
        cells.into_iter().map(|(cell, _)| cell).collect::<Vec<Expr>>()
    });
    let rows = row
        .separated_by(mark(TokenKind::Comma))
        .allow_trailing()
        .collect::<Vec<_>>()
        .delimited_by(mark(TokenKind::LeftBrace), mark(TokenKind::RightBrace))
        .map_with(|rows, extra| Table::Inline { rows, span: extent(extra.slice()) });
    choice((file, rows)).boxed()
}

/// A signed number, a name or a parenthesis, and whether it stands first on its line.
fn cell<'a>() -> impl Parser<'a, Tokens<'a>, (Expr, bool), Extra> + Clone {
    let signed = lexeme(TokenKind::Minus)
        .or_not()
        .then(number())
        .map(|(minus, number)| negate(minus.map(|minus| minus.span).into_iter().collect(), number));
    let variable = name("a name").map(|name| Expr { span: name.span, kind: ExprKind::Name(name) });
    let parenthesis = expression()
        .delimited_by(lexeme(TokenKind::LeftParenthesis), mark(TokenKind::RightParenthesis))
        .map_with(|inner, extra| Expr {
            kind: ExprKind::Parenthesis(Box::new(inner)),
            span: extent(extra.slice()),
        });
    choice((signed.boxed(), variable.boxed(), parenthesis.boxed()))
        .labelled("a number")
        .map_with(|cell, extra| {
            let taken: &[Lexeme<'a>] = extra.slice();
            (cell, taken.first().is_some_and(|first| first.first_on_line))
        })
        .boxed()
}

/// A number, perhaps with its unit.
fn number<'a>() -> impl Parser<'a, Tokens<'a>, Expr, Extra> + Clone {
    lexeme(TokenKind::Number).then(lexeme(TokenKind::Unit).or_not()).map(|(number, unit)| {
        let span = unit.map_or(number.span, |unit| number.span.to(unit.span));
        // The lexer lets through none but finite numbers.
        let value = number.text.replace('_', "").parse().unwrap_or(0.0);
        let unit = unit.map(|unit| Unit { text: unit.text.to_owned(), span: unit.span });
        Expr { kind: ExprKind::Number { value, unit }, span }
    })
}

fn binary(operator: Operator, left: Expr, right: Expr) -> Expr {
    let span = left.span.to(right.span);
    Expr { kind: ExprKind::Binary { operator, left: Box::new(left), right: Box::new(right) }, span }
}

fn negate(signs: Vec<Span>, value: Expr) -> Expr {
    signs.into_iter().rev().fold(value, |value, sign| Expr {
        span: sign.to(value.span),
        kind: ExprKind::Negative(Box::new(value)),
    })
}

/// `a ^ b ^ c` is `a ^ (b ^ c)`.
fn raise(base: Expr, mut exponents: Vec<(Vec<Span>, Expr)>) -> Expr {
    let Some((mut signs, mut raised)) = exponents.pop() else {
        return base;
    };
    while let Some((before, operand)) = exponents.pop() {
        raised = binary(Operator::Power, operand, negate(signs, raised));
        signs = before;
    }
    binary(Operator::Power, base, negate(signs, raised))
}
