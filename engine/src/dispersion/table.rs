//! Tabulated optical constants, interpolated by monotone piecewise cubics.

use num_complex::Complex64;

use super::Index;
use super::model::Model;
use crate::error::ModelError;
use crate::kernel::{Row, WIDTH};
use crate::number::Number;

impl Index {
    /// Rows of (vacuum wavelength in nm, n, k), interpolated in the wavelength by monotone piecewise cubics
    /// (PCHIP), n and k each for itself: between two rows it never leaves their values.
    ///
    /// Source: F. N. Fritsch and J. Butland, SIAM J. Sci. Stat. Comput. 5, 300 (1984), with weighted
    /// harmonic means inside and shape-preserving three-point slopes at the ends.
    ///
    /// # Errors
    /// Fewer than two rows, wavelengths that don't ascend strictly from above 0, n ≤ 0, k < 0.
    pub fn table(rows: &[(f64, f64, f64)]) -> Result<Index, ModelError> {
        if rows.len() < 2 {
            return Err(ModelError::TooFew { what: "rows", given: rows.len(), needed: 2 });
        }
        let mut before = 0.0;
        for (at, &(wavelength, n, k)) in rows.iter().enumerate() {
            let columns = [
                ("the wavelength", wavelength, wavelength > before, "above 0 and above the row before"),
                ("n", n, n > 0.0, "above 0"),
                ("k", k, k >= 0.0, "0 or above"),
            ];
            for (what, value, passes, must) in columns {
                if !(value.is_finite() && passes) {
                    return Err(ModelError::Row { row: at + 1, what, value, must });
                }
            }
            before = wavelength;
        }
        let wavelengths: Vec<f64> = rows.iter().map(|row| row.0).collect();
        let n = Curve::new(&wavelengths, rows.iter().map(|row| row.1).collect());
        let k = Curve::new(&wavelengths, rows.iter().map(|row| row.2).collect());
        let range = (wavelengths[0], wavelengths[wavelengths.len() - 1]);
        let knots = wavelengths.clone();
        Ok(Index::basic(Model::Table(Table { wavelengths, n, k }), Some(range), knots, Vec::new()))
    }
}

#[derive(Debug)]
pub(super) struct Table {
    wavelengths: Vec<f64>,
    n: Curve,
    k: Curve,
}

impl Table {
    /// The index at a wavelength within the table.
    pub(super) fn index<N: Number>(&self, wavelength_nm: &N) -> N {
        let after = self.wavelengths.partition_point(|&row| row <= wavelength_nm.value().re);
        let piece = after.clamp(1, self.wavelengths.len() - 1) - 1;
        let along = wavelength_nm.clone() - N::real(self.wavelengths[piece]);
        self.n.at(piece, &along) + N::constant(Complex64::I) * self.k.at(piece, &along)
    }
}

impl Table {
    /// n and k at several wavelengths within the table.
    pub(super) fn index_all(&self, wavelengths_nm: &[f64; WIDTH], n: &mut Row, k: &mut Row) {
        let last = self.wavelengths.len() - 2;
        let mut piece = 0;
        for (lane, &nm) in wavelengths_nm.iter().enumerate() {
            // Neighbours mostly lie between the same two rows, or the next.
            let holds = |piece: usize| {
                (piece == 0 || self.wavelengths[piece] <= nm)
                    && (piece == last || nm < self.wavelengths[piece + 1])
            };
            if !holds(piece) {
                piece = (piece + 1).min(last);
                if !holds(piece) {
                    piece = self.wavelengths.partition_point(|&row| row <= nm).clamp(1, last + 1) - 1;
                }
            }
            let along = nm - self.wavelengths[piece];
            let value = |[value, slope, second, third]: [f64; 4]| {
                ((third * along + second) * along + slope) * along + value
            };
            n.0[lane] = value(self.n.0[piece]);
            k.0[lane] = value(self.k.0[piece]);
        }
    }
}

/// A piecewise cubic: value, slope and two higher coefficients at each row but the last.
#[derive(Debug)]
struct Curve(Vec<[f64; 4]>);

impl Curve {
    fn new(x: &[f64], y: Vec<f64>) -> Curve {
        let steps: Vec<f64> = x.windows(2).map(|pair| pair[1] - pair[0]).collect();
        let chords: Vec<f64> =
            y.windows(2).zip(&steps).map(|(pair, step)| (pair[1] - pair[0]) / step).collect();
        let slopes = slopes(&steps, &chords);
        let piece = |at: usize| {
            let (step, chord, left, right) = (steps[at], chords[at], slopes[at], slopes[at + 1]);
            let second = (3.0 * chord - 2.0 * left - right) / step;
            let third = (left + right - 2.0 * chord) / (step * step);
            [y[at], left, second, third]
        };
        Curve((0..steps.len()).map(piece).collect())
    }

    fn at<N: Number>(&self, piece: usize, along: &N) -> N {
        let [value, slope, second, third] = self.0[piece];
        let inner = along.scale(third) + N::real(second);
        ((inner * along.clone()) + N::real(slope)) * along.clone() + N::real(value)
    }
}

/// The slopes at the rows from the rows' steps and the chords' slopes.
fn slopes(steps: &[f64], chords: &[f64]) -> Vec<f64> {
    let last = steps.len() - 1;
    if last == 0 {
        return vec![chords[0]; 2];
    }
    let mut slopes = vec![end_slope(steps[0], steps[1], chords[0], chords[1])];
    for at in 1..=last {
        let (before, after) = (chords[at - 1], chords[at]);
        slopes.push(if before * after > 0.0 {
            let w1 = 2.0 * steps[at] + steps[at - 1];
            let w2 = steps[at] + 2.0 * steps[at - 1];
            (w1 + w2) / (w1 / before + w2 / after)
        } else {
            0.0
        });
    }
    slopes.push(end_slope(steps[last], steps[last - 1], chords[last], chords[last - 1]));
    slopes
}

/// The three-point slope at an end, held back where it would overshoot.
fn end_slope(step: f64, next_step: f64, chord: f64, next_chord: f64) -> f64 {
    let slope = ((2.0 * step + next_step) * chord - step * next_chord) / (step + next_step);
    if slope * chord <= 0.0 {
        0.0
    } else if chord * next_chord <= 0.0 && slope.abs() > 3.0 * chord.abs() {
        3.0 * chord
    } else {
        slope
    }
}
