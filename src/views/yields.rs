//! Yields: the table for people, one JSON object, a row of CSV for each part.

use super::amount::{Scale, shortest, significant, trimmed};
use super::picture::harmless;
use super::table::Paint;
use super::{Shown, called};
use overcoat_lang::messages::{cause, size};
use overcoat_lang::model::{Bound, Quantity, Recipe, Requirement, Spread};
use overcoat_lang::report::{Cause, Column, Part, RequirementYield, Varying, YieldReport};
use serde::Serialize;
use std::fmt::Write;
use std::sync::Arc;

/// A cause below this share of the variance is left out of the table.
const SMALL: f64 = 0.01;

/// So many of the worst part's draws are told.
const TOLD: usize = 3;

/// Whether the yield is below what the recipe promises, if it promises one.
pub(crate) fn short(recipe: &Recipe, found: &YieldReport) -> bool {
    let promised = recipe.all_requirements().filter_map(|(requirement, _)| match requirement.bound {
        Bound::Range { min, .. } if matches!(requirement.quantity, Quantity::Yield) => min,
        _ => None,
    });
    promised.reduce(f64::max).is_some_and(|least| found.value() < least)
}

fn percent(share: f64) -> String {
    format!("{} %", trimmed(significant(100.0 * share, 4)))
}

/// The table for people.
pub(crate) fn table(recipe: &Recipe, found: &YieldReport, shown: &Shown<'_>, coloured: bool) -> String {
    let paint = Paint::new(coloured);
    let file = shown.located(recipe.place).file;
    let (name, place) = (paint.strong(&harmless(&called(recipe))), paint.faint(&format!("({file})")));
    if found.causes.is_empty() {
        let verdict = if found.passed == found.parts { "every part passes" } else { "no part passes" };
        return format!("{name} {place}: {verdict}, for nothing varies\n");
    }
    let verdict = paint.verdict(!short(recipe, found), &percent(found.value()));
    let mut text = format!(
        "{name} {place}: {verdict} of {} parts pass, {} to {} with 95 % confidence\n",
        found.parts,
        percent(found.interval.0),
        percent(found.interval.1)
    );
    for one in &found.requirements {
        text.push_str(&promise(found, one, paint));
    }
    text
}

fn promise(found: &YieldReport, one: &RequirementYield, paint: Paint) -> String {
    let share = f64::from(one.passed) / f64::from(found.parts);
    let mut text =
        format!("\n  {} pass  {}\n", paint.strong(&percent(share)), harmless(&one.requirement.text));
    let scale = Scale::of(&one.requirement.quantity, &one.requirement.bound);
    let value = |value: f64| scale.value(value, &[]);
    if let Some([low, middle, high]) = one.quantiles {
        let _ = writeln!(
            text,
            "    5, 50 and 95 % of the parts stay below {}, {}, {}",
            value(low),
            value(middle),
            value(high)
        );
    }
    let mut causes: Vec<(&Cause, f64)> = found.causes.iter().zip(one.shares.iter().copied()).collect();
    causes.sort_by(|a, b| b.1.total_cmp(&a.1));
    for (of, share) in causes.iter().filter(|cause| cause.1 >= SMALL) {
        let _ = writeln!(
            text,
            "    {:>5} of its variance is {}, {}",
            percent((1e3 * share).round() / 1e3),
            harmless(&cause(of)),
            size(of, 1.0)
        );
    }
    let rest = 1.0 - one.shares.iter().sum::<f64>();
    if rest > 0.05 {
        let rest = percent((1e2 * rest).round() / 1e2);
        let _ = writeln!(text, "    {rest:>5} is where the value bends, or where draws act together");
    }
    let worst = &one.worst;
    if worst.value.is_finite() {
        let drawn = worst_draws(found, one);
        let _ = writeln!(
            text,
            "    the worst part is number {} with {}{drawn}",
            worst.number,
            value(worst.value)
        );
    }
    if let Some(corner) = one.corner {
        let _ = writeln!(text, "    with every ± at its worst end it is {}", value(corner));
    }
    text
}

/// The draws of the worst part that count most, by their size and by how much the value depends on their cause.
fn worst_draws(found: &YieldReport, one: &RequirementYield) -> String {
    let mut draws: Vec<(f64, String)> = one
        .worst
        .draws
        .iter()
        .map(|draw| {
            let cause = &found.causes[draw.cause];
            let of = draw.layer.clone().unwrap_or_else(|| cause.of.clone());
            let what = match cause.varying {
                Varying::Thickness => of,
                Varying::Index => format!("index of {of}"),
                Varying::Angle => "angle".to_owned(),
            };
            (
                one.shares[draw.cause] * draw.units.powi(2),
                format!("{} {}", harmless(&what), amount(cause, draw.units)),
            )
        })
        .collect();
    draws.sort_by(|a, b| b.0.total_cmp(&a.0));
    let told: Vec<String> =
        draws.into_iter().filter(|draw| draw.0 > 0.0).take(TOLD).map(|draw| draw.1).collect();
    if told.is_empty() { String::new() } else { format!(", mostly by {}", told.join(", ")) }
}

/// A draw with its sign and unit.
fn amount(cause: &Cause, units: f64) -> String {
    let (size, unit) = match (cause.spread, cause.varying) {
        (Spread::Relative(share), _) => (100.0 * share, " %"),
        (Spread::Absolute(nm), Varying::Thickness) => (nm, " nm"),
        (Spread::Absolute(by), Varying::Index) => (by, ""),
        (Spread::Absolute(radians), Varying::Angle) => (radians.to_degrees(), " deg"),
    };
    let amount = trimmed(significant((size * units).abs(), 2));
    format!("{}{amount}{unit}", if units < 0.0 { "−" } else { "+" })
}

/// The first row: names of columns with their units.
pub(crate) fn heading(columns: &[Column], requirements: &[Arc<Requirement>]) -> String {
    let mut names = vec!["part".to_owned(), "passes".to_owned()];
    names.extend(columns.iter().map(|column| quoted(&drawn(column))));
    names.extend(requirements.iter().map(|requirement| quoted(&requirement.text)));
    format!("{}\n", names.join(","))
}

/// What a column holds: "the thickness of titania, each layer, titania (layer 2), %".
fn drawn(column: &Column) -> String {
    let mut name = cause(&column.cause);
    if let Some(layer) = &column.layer {
        let _ = write!(name, ", {layer}");
    }
    if let Some(run) = column.run {
        let _ = write!(name, ", run {}", run + 1);
    }
    match (column.cause.spread, column.cause.varying) {
        (Spread::Relative(_), _) => name.push_str(", share"),
        (Spread::Absolute(_), Varying::Thickness) => name.push_str(", nm"),
        (Spread::Absolute(_), Varying::Angle) => name.push_str(", rad"),
        (Spread::Absolute(_), Varying::Index) => {}
    }
    name
}

fn quoted(text: &str) -> String {
    format!("\"{}\"", text.replace('"', "\"\""))
}

/// The row of a part; every number reads back as it was.
pub(crate) fn row(part: &Part) -> String {
    let mut text = format!("{},{}", part.number, u8::from(part.met));
    for draw in &part.draws {
        let _ = write!(text, ",{}", shortest(*draw));
    }
    for value in &part.values {
        let _ = write!(text, ",{}", value.map_or(String::new(), shortest));
    }
    text.push('\n');
    text
}

#[derive(Serialize)]
struct Answer<'r> {
    version: u32,
    recipe: &'r str,
    #[serde(rename = "yield")]
    value: f64,
    low: f64,
    high: f64,
    parts: u32,
    passed: u32,
    causes: Vec<CauseEntry>,
    requirements: Vec<RequirementEntry<'r>>,
}

#[derive(Serialize)]
struct CauseEntry {
    what: String,
    size: String,
}

#[derive(Serialize)]
struct RequirementEntry<'r> {
    text: &'r str,
    passed: u32,
    /// The values that 5, 50 and 95 % of the parts stay below.
    quantiles: Option<[f64; 3]>,
    /// The share of the variance that each of the causes brings about, in their order.
    variance_shares: &'r [f64],
    worst: WorstEntry,
    /// The value with every `±` at its worst end.
    corner: Option<f64>,
}

#[derive(Serialize)]
struct WorstEntry {
    part: u32,
    value: Option<f64>,
    /// In their causes' units, each with the place of its cause.
    draws: Vec<(usize, f64)>,
}

/// One JSON object.
pub(crate) fn json(recipe: &Recipe, found: &YieldReport) -> Result<String, serde_json::Error> {
    let size_of = |at: usize| match found.causes[at].spread {
        Spread::Absolute(size) | Spread::Relative(size) => size,
    };
    let requirement = |one: &'_ RequirementYield| -> WorstEntry {
        let draws =
            one.worst.draws.iter().map(|draw| (draw.cause, draw.units * size_of(draw.cause))).collect();
        let value = Some(one.worst.value).filter(|value| value.is_finite());
        WorstEntry { part: one.worst.number, value, draws }
    };
    let answer = Answer {
        version: 1,
        recipe: &recipe.name,
        value: found.value(),
        low: found.interval.0,
        high: found.interval.1,
        parts: found.parts,
        passed: found.passed,
        causes: found.causes.iter().map(|of| CauseEntry { what: cause(of), size: size(of, 1.0) }).collect(),
        requirements: found
            .requirements
            .iter()
            .map(|one| RequirementEntry {
                text: &one.requirement.text,
                passed: one.passed,
                quantiles: one.quantiles,
                variance_shares: &one.shares,
                worst: requirement(one),
                corner: one.corner,
            })
            .collect(),
    };
    Ok(serde_json::to_string_pretty(&answer)? + "\n")
}
