//! Every quantity with every bound and every clause, sensible or not: each promise ends in a number or in a diagnostic.

#![allow(clippy::unwrap_used, reason = "in a test a panic is the report")]

use overcoat_lang::diagnostic::Severity;
use overcoat_lang::files::MemoryFiles;
use overcoat_lang::syntax::ast::Date;
use overcoat_lang::{Options, check, load};
use std::collections::BTreeSet;

const QUANTITIES: [&str; 20] = [
    "reflectance",
    "transmittance",
    "absorptance",
    "absorptance in film",
    "absorptance in glass",
    "optical_density",
    "luminous reflectance",
    "luminous transmittance",
    "solar reflectance",
    "solar absorptance",
    "photocurrent in glass",
    "photocurrent_loss in film",
    "reflected colour",
    "transmitted colour",
    "reflected phase",
    "transmitted group_delay",
    "reflected group_delay_dispersion",
    "peak_field",
    "emittance",
    "yield",
];

const CLAUSES: [&str; 16] = [
    "",
    "over 500 .. 520 nm",
    "over 500 .. 502 nm and 510 .. 512 nm at 0, 30 deg",
    "over 500 .. 510 nm at 0 .. 20 deg polarised s",
    "over 500 .. 510 nm cone 10 deg",
    "over 500 .. 520 nm under am15g",
    "over 500 .. 520 nm under d65 photons",
    "over 500 .. 520 nm at 300 K",
    "over 500 .. 520 nm at 300 K hemispherical",
    "over 500 .. 520 nm from exit",
    "at 510 nm",
    "at 500, 510 nm at 45 deg polarised p",
    "over 500 .. 520 nm at 510 nm",
    "over 500 parts",
    "observer 10 deg",
    "nominal",
];

/// Bounds in the unit of each quantity.
fn bounds(quantity: &str) -> Vec<String> {
    let (low, high, unit) = match quantity.split(' ').next_back().unwrap() {
        _ if quantity.starts_with("photocurrent") => (0, 1, "mA/cm2"),
        "colour" => return vec!["within 3 of lab(32, -4, -18)".to_owned(), "<= 5 %".to_owned()],
        "phase" => (0, 90, "deg"),
        "group_delay" => (0, 1, "fs"),
        "group_delay_dispersion" => (-1, 1, "fs^2"),
        _ => (0, 1, ""),
    };
    vec![
        format!("<= {high} {unit}"),
        format!(">= {low} {unit}"),
        format!("{low} .. {high} {unit}"),
        format!("{low} ± {high} {unit}"),
        format!("crosses {high} {unit} rising"),
        format!("crosses {low} {unit} falling within 505 .. 515 nm"),
        "<= mask \"mask.csv\"".to_owned(),
    ]
}

/// Promises everything of a stack; the number of promises that have a value.
fn valued_of(stack: &str) -> usize {
    valued(stack, &CLAUSES, false)
}

/// The same with some of the clauses, and looking for what would mend a promise or not.
fn valued(stack: &str, with: &[&str], remedies: bool) -> usize {
    let mut text = format!(
        "material oxide {{ source \"x\" index 1.46 k 0.001 }}\nmaterial glass {{ source \"x\" index 1.52 k 1e-7 }}\n\
         recipe r {{\nstack {{ {stack} }}\n"
    );
    let first = text.lines().count() as u32 + 1;
    let mut sentences = Vec::new();
    for quantity in QUANTITIES {
        for bound in bounds(quantity) {
            for clauses in with {
                for mean in ["", "mean "] {
                    sentences.push(format!("{mean}{quantity} {bound} {clauses}"));
                }
            }
        }
    }
    for sentence in &sentences {
        text.push_str(&format!("require {sentence}\n"));
    }
    text.push_str("}\n");
    let mut files = MemoryFiles::new();
    files.insert("main.coat", text);
    files.insert("mask.csv", "wavelength_nm,value\n500,0.5\n520,0.6\n");
    let project = load(&files, &["main.coat".to_owned()]);
    let today = Date { year: 2026, month: 12, day: 1, span: Default::default() };
    let report = check(
        project,
        &Options { today, asked: None, remedies, yields: true, parts: None, whole_project: true },
    );
    let line =
        |place: overcoat_lang::source::Place| report.sources.get(place.file).position(place.span.start).line;
    let errors: BTreeSet<u32> = report
        .diagnostics
        .iter()
        .filter(|one| one.severity == Severity::Error)
        .map(|one| line(one.place))
        .collect();
    let mut valued = BTreeSet::new();
    for one in &report.recipes[0].requirements {
        let at = line(one.requirement.place);
        if let Some(value) = one.value {
            assert!(value.is_finite(), "{}: {value}", one.requirement.text);
            assert_eq!(one.met, !errors.contains(&at), "{}", one.requirement.text);
            valued.insert(at);
        }
    }
    for (number, sentence) in sentences.iter().enumerate() {
        let at = first + number as u32;
        assert!(valued.contains(&at) || errors.contains(&at), "{stack}: {sentence}");
    }
    valued.len()
}

#[test]
fn on_a_half_space() {
    assert!(valued_of("incident air  layer oxide 90 nm as film  substrate glass") > 0);
}

#[test]
fn on_a_thick_piece() {
    assert!(valued_of("incident air  layer oxide 90 nm as film  substrate glass 2 mm  exit air") > 0);
}

#[test]
fn without_a_film() {
    assert!(valued_of("incident air  substrate glass") > 0);
}

#[test]
fn where_no_light_comes_out() {
    assert!(
        valued_of("incident air  layer oxide 90 nm as film  substrate glass 2 mm  slab oxide 2 m  exit air")
            > 0
    );
}

#[test]
fn with_a_graded_film() {
    assert!(valued_of("incident air  layer graded oxide to glass 90 nm as film  substrate glass") > 0);
}

#[test]
fn on_a_textured_piece() {
    assert!(valued_of("incident air  layer oxide 90 nm as film  substrate glass textured 54.74 deg") > 0);
    assert!(
        valued_of(
            "incident air  slab oxide 3 mm  layer oxide 90 nm as film  substrate glass textured 50 deg"
        ) > 0
    );
}

#[test]
fn what_would_mend_each_is_looked_for() {
    let stacks = [
        "incident air  layer oxide 90 nm as film rough 2 nm  layer glass 40 nm  substrate glass",
        "incident air  layer oxide 90 nm as film  substrate glass 2 mm  layer oxide 50 nm  exit air",
        "incident air  layer oxide 90 nm as film  substrate glass textured 54.74 deg",
        "incident air  layer graded oxide to glass 90 nm as film in 3 steps  substrate glass",
        "incident air  substrate glass",
    ];
    valued("incident air  layer graded oxide to glass 90 nm as film  substrate glass", &["at 510 nm"], true);
    for stack in stacks {
        for with in [
            "over 500 .. 520 nm",
            "at 510 nm",
            "",
            "over 500 .. 520 nm at 300 K",
            "over 500 .. 520 nm from exit",
        ] {
            valued(stack, &[with], true);
        }
        valued(
            stack,
            &["over 500 .. 520 nm at 0 .. 40 deg polarised p", "over 500 .. 510 nm cone 10 deg"],
            true,
        );
    }
}
