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

#[test]
fn promises_that_are_integrals_have_the_values_worked_out_apart() {
    let file: File = reference("promises.json");
    let mut comparison = Comparison::default();
    for row in &file.promises {
        let mut files = MemoryFiles::new();
        files.insert("main.coat", row.coat.clone());
        let project = load(&files, &["main.coat".to_owned()]);
        let today = Date { year: 2026, month: 12, day: 1, span: Default::default() };
        let options =
            Options { today, asked: None, remedies: false, yields: true, parts: None, whole_project: true };
        let report = check(project, &options);
        let value = report.recipes[0].requirements[0].value.expect(&row.promise);
        // Means settle to 1e-8, over the hemisphere to 1e-7; V(λ) is joined by straight lines here and there.
        comparison.add(&row.promise, value, row.value, 2e-7 * row.value.abs().max(0.1));
    }
    comparison.finish(17);
}
