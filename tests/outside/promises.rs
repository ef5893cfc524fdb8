//! Promises that are integrals, from the recipe's text to the value in the report, against figures made apart.
//!
//! Sources: ASTM G173-03 as pvlib carries it; D65 and V(λ) as colour-science does; EN 410:2011, EN 12898:2019, Planck's law;
//! M. Born, E. Wolf, Principles of Optics, 1.5 and 1.6, for one layer and its faces.

use overcoat_lang::files::MemoryFiles;
use overcoat_lang::syntax::ast::Date;
use overcoat_lang::{Options, check, load};
use serde::Deserialize;

use crate::data::{Comparison, reference};

#[derive(Deserialize)]
struct File {
    promises: Vec<Row>,
}

#[derive(Deserialize)]
struct Row {
    coat: String,
    promise: String,
    value: f64,
}

#[derive(Deserialize)]
struct Parts {
    promises: Vec<Row>,
    procedures: Vec<Row>,
}

/// The value that the report gives to the one requirement of a recipe.
fn reported(row: &Row) -> f64 {
    let mut files = MemoryFiles::new();
    files.insert("main.coat", row.coat.clone());
    let project = load(&files, &["main.coat".to_owned()]);
    assert!(project.findings.is_empty(), "{}: {:?}", row.coat, project.findings);
    let today = Date { year: 2026, month: 12, day: 1, span: Default::default() };
    let options =
        Options { today, asked: None, remedies: false, yields: true, parts: None, whole_project: true };
    let report = check(project, &options);
    report.recipes[0].requirements[0].value.expect(&row.promise)
}

#[test]
fn promises_that_are_integrals_have_the_values_worked_out_apart() {
    let file: File = reference("promises.json");
    let mut comparison = Comparison::default();
    for row in &file.promises {
        // Means settle to 1e-8, over the hemisphere to 1e-7; V(λ) is joined by straight lines here and there.
        comparison.add(&row.promise, reported(row), row.value, 2e-7 * row.value.abs().max(0.1));
    }
    comparison.finish(17);
}

/// Several dispersive films and thick bodies, absorbers with names, light from both sides and at angles.
#[test]
fn parts_of_several_films_have_the_values_worked_out_apart() {
    let file: Parts = reference("parts.json");
    let mut comparison = Comparison::default();
    for row in &file.promises {
        // What the engine promises: a mean to 1e-8 and one over the hemisphere to 1e-7 of the quantity's size.
        // An optical density is no mean; 1e-9 leaves room for the reference, which is made with doubles.
        let size = row.value.abs().max(0.1);
        let tolerance = match row.promise.as_str() {
            one if one.starts_with("optical_density") => 1e-9,
            one if one.ends_with("hemispherical") => 1e-7 * size,
            _ => 1e-8 * size,
        };
        comparison.add(&row.promise, reported(row), row.value, tolerance);
    }
    comparison.finish(74);
}

/// EN 410:2011, table 1 (D65 V(λ), every 10 nm), and EN 12898 (30 wavelengths at 283 K); both from memory, and compared
/// with the integrals that they stand for where they are written down.
#[test]
fn the_short_tables_of_the_standards_give_nearly_the_same() {
    let file: Parts = reference("parts.json");
    let mut comparison = Comparison::default();
    for row in &file.procedures {
        // Steps of 10 nm follow what D65 and a coating do in the visible to 1e-4; thirtieths of the
        // radiation, and none for beyond 50 um, meet the restrahlen bands of a glass to 2e-3.
        let tolerance = if row.promise.starts_with("luminous") { 1e-4 } else { 2e-3 };
        comparison.add(&row.promise, reported(row), row.value, tolerance);
    }
    comparison.finish(6);
}
