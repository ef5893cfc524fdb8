//! The standard observers' colour-matching functions, and the photopic response.

use crate::weight::SpectralWeight;
use std::sync::LazyLock;

/// A standard colorimetric observer.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Observer {
    /// CIE 1931, for fields of 2°.
    Two,
    /// CIE 1964, for fields of 10°.
    Ten,
}

static TWO: LazyLock<[SpectralWeight; 3]> = LazyLock::new(|| read(include_str!("../../data/cie1931.csv")));
static TEN: LazyLock<[SpectralWeight; 3]> = LazyLock::new(|| read(include_str!("../../data/cie1964.csv")));

impl Observer {
    /// x̄, ȳ, z̄ from 360 to 830 nm; ȳ of the 2° observer is the photopic response V(λ).
    pub fn functions(self) -> &'static [SpectralWeight; 3] {
        match self {
            Observer::Two => &TWO,
            Observer::Ten => &TEN,
        }
    }
}

fn read(text: &str) -> [SpectralWeight; 3] {
    let mut columns: [Vec<(f64, f64)>; 3] = Default::default();
    for line in text.lines() {
        let cells: Vec<f64> = line.split(',').filter_map(|cell| cell.trim().parse().ok()).collect();
        if let [wavelength, rest @ ..] = cells.as_slice() {
            for (column, value) in columns.iter_mut().zip(rest) {
                column.push((*wavelength, *value));
            }
        }
    }
    columns.map(|rows| SpectralWeight::table(&rows).unwrap_or_else(|_| SpectralWeight::constant()))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_tables_are_whole() {
        for observer in [Observer::Two, Observer::Ten] {
            for function in observer.functions() {
                assert_eq!(function.range_nm(), Some((360.0, 830.0)));
                assert_eq!(function.knots_nm().len(), 471);
            }
        }
        // ISO/CIE 11664-1: V(555 nm) = 1, ȳ₁₀(555 nm) = 0.999 14 (CIE 015:2018, table 1 nm).
        assert_eq!(Observer::Two.functions()[1].at(555.0), Some(1.0));
        assert!((Observer::Ten.functions()[1].at(555.0).unwrap_or(0.0) - 0.9991).abs() < 1e-3);
    }
}
