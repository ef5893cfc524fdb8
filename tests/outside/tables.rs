//! Interpolation of tables against scipy.
//!
//! Sources: scipy 1.17.1, `PchipInterpolator`; F. N. Fritsch, J. Butland, SIAM J. Sci. Stat. Comput. 5, 300
//! (1984). Silicon's rows: M. A. Green, Sol. Energy Mater. Sol. Cells 92, 1305 (2008).

use overcoat_engine::Index;
use serde::Deserialize;

use crate::data::{Comparison, reference};

#[derive(Deserialize)]
struct File {
    curves: Vec<Curve>,
}

#[derive(Deserialize)]
struct Curve {
    name: String,
    x: Vec<f64>,
    y: Vec<f64>,
    queries: Vec<f64>,
    values: Vec<f64>,
}

#[test]
fn tables_run_as_scipy_runs_them() {
    let file: File = reference("pchip.json");
    let mut comparison = Comparison::default();
    for curve in &file.curves {
        // n must be above 0 and wavelengths too; the method does not change when a constant is added to either.
        let least = curve.y.iter().copied().fold(f64::INFINITY, f64::min);
        let most = curve.y.iter().copied().fold(f64::NEG_INFINITY, f64::max);
        let (lift, move_by) = (1.0 - least, 1.0 - curve.x[0].min(0.0));
        let rows: Vec<(f64, f64, f64)> =
            curve.x.iter().zip(&curve.y).map(|(&x, &y)| (x + move_by, y + lift, y - least)).collect();
        let index = Index::table(&rows).expect("a table");
        let tolerance = 1e-12 * (1.0 + (most - least).max(lift.abs()));
        for (&x, &y) in curve.queries.iter().zip(&curve.values) {
            let got = index.at(x + move_by).expect("within the table");
            comparison.add(&format!("{} at {x}, n", curve.name), got.re - lift, y, tolerance);
            comparison.add(&format!("{} at {x}, k", curve.name), got.im + least, y, tolerance);
        }
    }
    comparison.finish(900);
}
