//! Yields against plain Monte Carlo with independent draws.
//!
//! Sources: JCGM 101:2008 for the method and the distributions; M. Born, E. Wolf, Principles of Optics, 1.6, for the stack.

use std::sync::Arc;

use overcoat_lang::files::MemoryFiles;
use overcoat_lang::model::Requirement;
use overcoat_lang::report::{Column, Part, Watch};
use overcoat_lang::{load, simulate};
use serde::Deserialize;

use crate::data::{Comparison, reference};

#[derive(Deserialize)]
struct File {
    recipes: Vec<Row>,
}

#[derive(Deserialize)]
struct Row {
    coat: String,
    parts: f64,
    #[serde(rename = "yield")]
    share: f64,
    met: Vec<f64>,
    quantiles: Vec<[f64; 3]>,
}

struct Nobody;

impl Watch for Nobody {
    fn begin(&mut self, _: &[Column], _: &[Arc<Requirement>], _: u32) {}

    fn part(&mut self, _: &Part) -> bool {
        true
    }
}

const PARTS: u32 = 20_000;

#[test]
fn yields_and_distributions_are_those_of_plain_monte_carlo() {
    let file: File = reference("yields.json");
    let mut comparison = Comparison::default();
    for row in &file.recipes {
        let mut files = MemoryFiles::new();
        files.insert("main.coat", row.coat.clone());
        let project = load(&files, &["main.coat".to_owned()]);
        let found = simulate(&project.modules[0].recipes[0], Some(PARTS), &mut Nobody).expect("a yield");
        // The joint interval of two independent estimates of a share, at four standard deviations.
        let joint =
            |share: f64| 4.0 * (share * (1.0 - share) * (1.0 / row.parts + 1.0 / f64::from(PARTS))).sqrt();
        comparison.add("the yield", found.value(), row.share, joint(row.share));
        assert!(row.share > 0.2 && row.share < 0.95, "{} tells little", row.share);
        for ((one, met), quantiles) in found.requirements.iter().zip(&row.met).zip(&row.quantiles) {
            let passed = f64::from(one.passed) / f64::from(PARTS);
            comparison.add(&one.requirement.text, passed, *met, joint(*met));
            let spread = quantiles[2] - quantiles[0];
            for (found, expected) in one.quantiles.expect("quantiles").iter().zip(quantiles) {
                comparison.add(
                    &format!("a quantile of {}", one.requirement.text),
                    *found,
                    *expected,
                    0.02 * spread,
                );
            }
        }
    }
    comparison.finish(14);
}
