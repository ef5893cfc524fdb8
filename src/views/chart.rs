//! A curve drawn with plain characters, for any terminal and any file.

use super::amount::{significant, trimmed};

/// Columns and rows of the drawing itself.
const SIZE: (usize, usize) = (64, 12);

/// Values spread wider than this are drawn on a logarithmic scale.
const LOGARITHMIC: f64 = 100.0;

/// Below this a logarithmic scale ends: nobody measures less, and the tails of models would fill the drawing.
const FLOOR: f64 = 1e-10;

/// One axis: where a value stands between 0 and 1.
struct Axis {
    low: f64,
    high: f64,
    logarithmic: bool,
}

impl Axis {
    fn wavelengths(low: f64, high: f64) -> Axis {
        Axis { low, high, logarithmic: high / low > 10.0 }
    }

    fn values(values: impl Iterator<Item = f64> + Clone) -> Option<Axis> {
        let (low, high) = ends(values.clone())?;
        let drawn = ends(values.filter(|value| *value >= FLOOR));
        match drawn {
            Some((least, _)) if high / least > LOGARITHMIC => {
                // An even count of whole decades, so that all three marks are round.
                let (floor, top) = (least.log10().floor(), high.log10().ceil());
                let bottom = if (top - floor) % 2.0 == 0.0 { floor } else { floor - 1.0 };
                let (low, high) = (10f64.powf(bottom), 10f64.powf(top));
                Some(Axis { low, high, logarithmic: true })
            }
            _ if high > low => Some(Axis { low, high, logarithmic: false }),
            _ => Some(Axis { low: low - 0.5, high: high + 0.5, logarithmic: false }),
        }
    }

    fn part(&self, value: f64) -> Option<f64> {
        let part = if self.logarithmic {
            (value / self.low).ln() / (self.high / self.low).ln()
        } else {
            (value - self.low) / (self.high - self.low)
        };
        (-1e-9..=1.0 + 1e-9).contains(&part).then_some(part)
    }

    fn value(&self, part: f64) -> f64 {
        if self.logarithmic {
            self.low * (self.high / self.low).powf(part)
        } else {
            self.low + (self.high - self.low) * part
        }
    }
}

/// The wavelengths at which a curve must be known to be drawn: all over the band, and the curve's own knots, between
/// which it has no extremes.
pub(crate) fn wavelengths((low, high): (f64, f64), knots: &[f64]) -> Vec<f64> {
    let axis = Axis::wavelengths(low, high);
    let count = 8 * SIZE.0;
    let even = (0..=count).map(|at| axis.value(at as f64 / count as f64).clamp(low, high));
    let mut all: Vec<f64> =
        even.chain(knots.iter().copied().filter(|at| (low..=high).contains(at))).collect();
    all.sort_by(f64::total_cmp);
    all.dedup();
    all
}

/// Draws values against wavelengths in nm, which rise.
pub(crate) fn chart(title: &str, curve: &[(f64, f64)]) -> String {
    let (Some((first, _)), Some((last, _))) = (curve.first(), curve.last()) else { return String::new() };
    if curve.iter().all(|(_, value)| *value == 0.0) {
        return format!("{title} is 0 over the whole range\n");
    }
    let across = Axis::wavelengths(*first, *last);
    let Some(up) = Axis::values(curve.iter().map(|(_, value)| *value)) else { return String::new() };
    let cells = cells(curve, &across, &up);
    let label = |part: f64| short(up.value(part));
    let labels = [(0, label(1.0)), (SIZE.1 / 2, label(0.5)), (SIZE.1, label(0.0))];
    let margin = labels.iter().map(|(_, text)| text.len()).max().unwrap_or_default();
    let cut = up.logarithmic && curve.iter().any(|(_, value)| *value < FLOOR);
    let scale = if up.logarithmic { ", logarithmic" } else { "" };
    let below = if cut { format!(", what is below {FLOOR:e} left out") } else { String::new() };
    let mut text = format!("{title}{scale}{below}\n");
    for (row, line) in cells.iter().enumerate() {
        let name = labels.iter().find(|(at, _)| *at == row).map_or("", |(_, name)| name);
        let mark = if name.is_empty() { '|' } else { '+' };
        let line: String = line.iter().map(|drawn| if *drawn { '*' } else { ' ' }).collect();
        text.push_str(format!("{name:>margin$} {mark}{line}").trim_end());
        text.push('\n');
    }
    text.push_str(&format!("{:margin$} +{}\n", "", "-".repeat(SIZE.0)));
    let [left, middle, right] = [0.0, 0.5, 1.0].map(|part| short(across.value(part)));
    let right = format!("{right} nm");
    let scale = if across.logarithmic { ", logarithmic" } else { "" };
    let (half, rest) = (SIZE.0 / 2, (SIZE.0 / 2).saturating_sub(right.len()));
    text.push_str(&format!("{:margin$}  {left:half$}{middle:rest$}{right}{scale}\n", ""));
    text
}

/// Which cells the curve runs through, top row first: each step from point to point fills its column.
fn cells(curve: &[(f64, f64)], across: &Axis, up: &Axis) -> Vec<[bool; SIZE.0]> {
    let mut cells = vec![[false; SIZE.0]; SIZE.1 + 1];
    let mut before: Option<usize> = None;
    for (wavelength, value) in curve {
        let place = across.part(*wavelength).zip(up.part(*value));
        let row = place.map(|(_, part)| ((1.0 - part) * SIZE.1 as f64).round().max(0.0) as usize);
        if let (Some(row), Some((part, _))) = (row, place) {
            let column = ((part * SIZE.0 as f64) as usize).min(SIZE.0 - 1);
            let from = before.unwrap_or(row);
            let filled = from.min(row)..=from.max(row).min(SIZE.1);
            cells[filled].iter_mut().for_each(|line| line[column] = true);
        }
        before = row;
    }
    cells
}

fn ends(values: impl Iterator<Item = f64>) -> Option<(f64, f64)> {
    values.map(|value| (value, value)).reduce(|a, b| (a.0.min(b.0), a.1.max(b.1)))
}

fn short(number: f64) -> String {
    let small = number.abs() < 1e-3 && number != 0.0;
    let text = if small { format!("{number:.3e}") } else { significant(number, 4) };
    match text.split_once('e') {
        Some((mantissa, exponent)) => format!("{}e{exponent}", trimmed(mantissa.to_owned())),
        None => trimmed(text),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The cells of each column that are drawn, from the bottom.
    fn drawn(text: &str) -> Vec<Vec<usize>> {
        let lines: Vec<&str> = text.lines().skip(1).take(SIZE.1 + 1).collect();
        let margin = lines[0].find('+').unwrap() + 1;
        let cell = |row: usize, column: usize| lines[row].as_bytes().get(margin + column) == Some(&b'*');
        let column =
            |column| (0..=SIZE.1).rev().filter(|row| cell(*row, column)).map(|row| SIZE.1 - row).collect();
        (0..SIZE.0).map(column).collect()
    }

    #[test]
    fn a_straight_line_is_drawn_straight_and_whole() {
        let curve: Vec<(f64, f64)> =
            wavelengths((400.0, 800.0), &[]).into_iter().map(|nm| (nm, nm / 400.0)).collect();
        let columns = drawn(&chart("n", &curve));
        assert_eq!((columns[0].first(), columns[63].last()), (Some(&0), Some(&SIZE.1)));
        for pair in columns.windows(2) {
            assert!(pair[0].last() <= pair[1].last() && !pair[1].is_empty());
        }
    }

    #[test]
    fn a_wide_spread_is_logarithmic_and_zero_is_left_out() {
        let curve = [(400.0, 1e-6), (500.0, 1e-3), (600.0, 1.0), (700.0, 0.0)];
        let text = chart("k", &curve);
        assert!(
            text.starts_with("k, logarithmic, what is below 1e-10 left out\n") && !text.contains("NaN"),
            "{text}"
        );
        let columns = drawn(&text);
        assert_eq!((columns[0].as_slice(), columns[63].len()), (&[0][..], 0), "{text}");
        assert!(columns[42].contains(&SIZE.1), "{text}");
    }

    #[test]
    fn nothing_but_zeros_is_said_in_words() {
        assert_eq!(chart("k", &[(400.0, 0.0), (500.0, 0.0)]), "k is 0 over the whole range\n");
    }

    #[test]
    fn knots_are_among_the_wavelengths_drawn() {
        let all = wavelengths((400.0, 800.0), &[399.0, 512.3, 800.0]);
        assert!(all.contains(&512.3) && !all.contains(&399.0));
        assert_eq!((all[0], all[all.len() - 1]), (400.0, 800.0));
    }
}
