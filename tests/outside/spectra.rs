//! The handbook's spectra against the tables that general-purpose packages carry.
//!
//! Sources: ASTM G173-03 (pvlib 0.16.1); CIE 015:2018 and CIE 018 (colour-science 0.4.7). The script
//! `spectra.py` compares every row; here the integrals and a sample of the rows are.

use serde::Deserialize;

use crate::data::{Comparison, reference};
use crate::handbook::{rows, weight};

#[derive(Deserialize)]
struct File {
    spectra: Vec<Entry>,
}

#[derive(Deserialize)]
struct Entry {
    name: String,
    source: String,
    rows: Vec<(f64, f64)>,
    row_count: usize,
    integral: f64,
    /// Band in nm and the current density in mA/cm² when every photon gives one electron.
    photocurrent_ma_per_cm2: Vec<(f64, f64, f64)>,
}

#[test]
fn handbook_spectra_are_the_standards() {
    let file: File = reference("spectra.json");
    let mut comparison = Comparison::default();
    for entry in &file.spectra {
        let own = rows(&entry.name);
        assert!(own.len() >= entry.row_count, "{}: {} rows", entry.name, own.len());
        let spectrum = weight(&entry.name);
        for &(wavelength, expected) in &entry.rows {
            let got = spectrum.at(wavelength).expect("inside the table");
            let what = format!("{} at {wavelength} nm ({})", entry.name, entry.source);
            comparison.add(&what, got, expected, 1e-9 * expected);
        }
        let last = entry.row_count;
        let integral = trapezoid(&own[..last], |_| 1.0);
        comparison.add(&format!("{} summed", entry.name), integral, entry.integral, 1e-9 * entry.integral);
        for &(low, high, expected) in &entry.photocurrent_ma_per_cm2 {
            let band: Vec<(f64, f64)> = own.iter().copied().filter(|r| low <= r.0 && r.0 <= high).collect();
            // q λ/(h c) per watt, with the SI's exact constants; 1 A/m² is 0.1 mA/cm².
            let per_nm = 1.602_176_634e-19 / (6.62607015e-34 * 299_792_458.0) * 1e-9;
            let current = 0.1 * trapezoid(&band, |wavelength| wavelength * per_nm);
            comparison.add(&format!("{} current to {high} nm", entry.name), current, expected, 1e-9);
        }
    }
    comparison.finish(100);
}

fn trapezoid(rows: &[(f64, f64)], weight: impl Fn(f64) -> f64) -> f64 {
    rows.windows(2)
        .map(|w| (w[0].1 * weight(w[0].0) + w[1].1 * weight(w[1].0)) * (w[1].0 - w[0].0) / 2.0)
        .sum()
}
