//! How numbers are shown: with their units, to the digits that matter.

use crate::source::Sources;
use crate::units::Dimension;

/// A number with `digits` significant digits, without trailing zeros.
pub(super) fn significant(number: f64, digits: usize) -> String {
    if number == 0.0 || !number.is_finite() {
        return "0".to_owned();
    }
    let magnitude = number.abs().log10().floor() as i32;
    let decimals = (digits as i32 - 1 - magnitude).max(0) as usize;
    let text = format!("{number:.decimals$}");
    if text.contains('.') { text.trim_end_matches('0').trim_end_matches('.').to_owned() } else { text }
}

/// Two numbers to the same number of digits: at least three, and as many more as it takes to tell them apart.
pub(super) fn apart(a: f64, b: f64) -> usize {
    (3..=15).find(|digits| significant(a, *digits) != significant(b, *digits)).unwrap_or(3)
}

/// A ratio in % (in ppm where it is below 0.01 %), to this many digits.
pub(super) fn ratio(number: f64, digits: usize) -> String {
    if number != 0.0 && number.abs() < 1e-4 {
        format!("{} ppm", significant(number * 1e6, digits))
    } else {
        format!("{} %", significant(number * 100.0, digits))
    }
}

/// A length in the unit that reads best, to this many digits.
pub(super) fn length(nm: f64, digits: usize) -> String {
    match nm.abs() {
        size if size >= 1e6 => format!("{} mm", significant(nm / 1e6, digits)),
        size if size >= 1e4 => format!("{} um", significant(nm / 1e3, digits)),
        _ => format!("{} nm", significant(nm, digits)),
    }
}

/// A wavelength, to 0.01 nm.
pub(super) fn wavelength(nm: f64) -> String {
    if nm >= 1e4 {
        return format!("{} um", rounded(nm / 1e3, 4));
    }
    format!("{} nm", rounded(nm, 2))
}

/// A band.
pub(super) fn band(band: (f64, f64)) -> String {
    if band.0 == band.1 {
        return wavelength(band.0);
    }
    if band.1 >= 1e4 {
        return format!("{} .. {} um", rounded(band.0 / 1e3, 4), rounded(band.1 / 1e3, 4));
    }
    format!("{} .. {} nm", rounded(band.0, 2), rounded(band.1, 2))
}

/// A number to at most this many decimals, without trailing zeros.
pub(super) fn rounded(number: f64, decimals: usize) -> String {
    let text = format!("{number:.decimals$}");
    let text =
        if text.contains('.') { text.trim_end_matches('0').trim_end_matches('.').to_owned() } else { text };
    if text == "-0" { "0".to_owned() } else { text }
}

/// A time in hours, minutes and seconds.
pub(super) fn time(seconds: f64) -> String {
    let whole = seconds.round() as u64;
    let (hours, minutes, rest) = (whole / 3600, whole / 60 % 60, whole % 60);
    let mut parts = Vec::new();
    for (number, unit) in [(hours, "h"), (minutes, "min"), (rest, "s")] {
        if number > 0 {
            parts.push(format!("{number} {unit}"));
        }
    }
    if parts.is_empty() { format!("{} s", rounded(seconds, 3)) } else { parts.join(" ") }
}

/// An angle of incidence.
pub(super) fn angle(radians: f64) -> String {
    format!("{} deg", rounded(radians.to_degrees(), 2))
}

/// Names in quotes: `a`, `b` or `c`.
pub(super) fn or_list(names: &[String]) -> String {
    list(names, "or")
}

/// Names in quotes: `a`, `b` and `c`.
pub(super) fn and_list(names: &[String]) -> String {
    list(names, "and")
}

fn list(names: &[String], word: &str) -> String {
    let quoted: Vec<String> = names.iter().map(|name| format!("`{name}`")).collect();
    match quoted.split_last() {
        None => String::new(),
        Some((last, [])) => last.clone(),
        Some((last, rest)) => format!("{} {word} {last}", rest.join(", ")),
    }
}

/// The dimension's phrase with a unit, for what was needed: "a length, for example in `nm`".
pub(super) fn needed(phrase: &str, unit: Option<&str>) -> String {
    if let Some(unit) = unit {
        return format!("{phrase}, for example in `{unit}`");
    }
    let all = [
        Dimension::Length,
        Dimension::Energy,
        Dimension::Angle,
        Dimension::Time,
        Dimension::GroupDelayDispersion,
        Dimension::Rate,
        Dimension::Temperature,
        Dimension::Stress,
        Dimension::ForcePerWidth,
        Dimension::Density,
        Dimension::CurrentDensity,
        Dimension::Area,
        Dimension::Length4,
        Dimension::Length6,
    ];
    match all.iter().find(|dimension| dimension.phrase() == phrase) {
        Some(dimension) => format!("{phrase}, for example in `{}`", dimension.usual_unit()),
        None => phrase.to_owned(),
    }
}

/// The text at a place, for a fix that keeps part of it.
pub(super) fn text(place: crate::source::Place, sources: &Sources) -> String {
    sources.get(place.file).slice(place.span).to_owned()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn value_and_bound_are_told_apart() {
        assert_eq!(apart(0.025, 0.0250001), 6);
        assert_eq!(apart(0.0312, 0.025), 3);
        assert_eq!(ratio(0.0312, 3), "3.12 %");
        assert_eq!(ratio(2.4e-5, 3), "24 ppm");
        assert_eq!(ratio(0.999, 4), "99.9 %");
    }

    #[test]
    fn lengths_and_times_read_as_in_the_shop() {
        assert_eq!(length(636.3, 4), "636.3 nm");
        assert_eq!(length(12_300.0, 4), "12.3 um");
        assert_eq!(time(3278.7), "54 min 39 s");
        assert_eq!(time(7200.0), "2 h");
        assert_eq!(band((300.0, 1100.0)), "300 .. 1100 nm");
        assert_eq!(wavelength(10_600.0), "10.6 um");
    }
}
