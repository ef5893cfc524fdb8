//! Numbers for people: few digits, yet enough to tell a value from its bound.

use overcoat_lang::model::{Bound, Quantity};

/// Radians as degrees, without the last digits that the conversion brings in.
pub(crate) fn degrees(radians: f64) -> f64 {
    (radians.to_degrees() * 1e10).round() / 1e10
}

/// How a requirement's numbers are shown: times `factor`, before `unit`.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Scale {
    factor: f64,
    unit: &'static str,
}

impl Scale {
    /// The scale of a requirement's values, as the report holds them.
    pub(crate) fn of(quantity: &Quantity, bound: &Bound) -> Scale {
        let scale = |factor, unit| Scale { factor, unit };
        match (bound, quantity) {
            (Bound::Crosses { .. }, _) => scale(1.0, " nm"),
            (Bound::NearColour { .. }, _) => scale(1.0, ""),
            (_, Quantity::OpticalDensity | Quantity::PeakField | Quantity::Colour(_)) => scale(1.0, ""),
            (_, Quantity::Photocurrent(_) | Quantity::PhotocurrentLoss(_)) => scale(1.0, " mA/cm2"),
            (_, Quantity::Phase(_)) => scale(1.0, " deg"),
            (_, Quantity::GroupDelay(_)) => scale(1.0, " fs"),
            (_, Quantity::GroupDelayDispersion(_)) => scale(1.0, " fs^2"),
            _ => scale(100.0, " %"),
        }
    }

    /// A value with as many digits as it takes to tell it from each of its bounds.
    pub(crate) fn value(self, value: f64, bounds: &[Option<f64>]) -> String {
        let scaled = value * self.factor;
        let told = |text: &String| {
            let near = bounds.iter().flatten().map(|bound| bound * self.factor);
            near.into_iter().all(|bound| bound == scaled || significant(bound, digits_of(text)) != *text)
        };
        let texts = (4..=12).map(|digits| significant(scaled, digits));
        let text = texts.into_iter().find(told).unwrap_or_else(|| format!("{scaled}"));
        format!("{text}{}", self.unit)
    }

    /// A bound, with the digits that it was given with.
    pub(crate) fn bound(self, bound: f64) -> String {
        format!("{}{}", trimmed(significant(bound * self.factor, 12)), self.unit)
    }

    /// A difference, in points of the same scale.
    pub(crate) fn difference(self, difference: f64) -> String {
        // The difference of two percentages is not a percentage of anything.
        let unit = if self.unit == " %" { " points" } else { self.unit };
        format!("{}{unit}", significant(difference * self.factor, 2))
    }
}

/// How many significant digits a text was made with.
fn digits_of(text: &str) -> usize {
    let mantissa = text.split('e').next().unwrap_or(text);
    let digits = mantissa.chars().filter(char::is_ascii_digit).collect::<String>();
    digits.trim_start_matches('0').len().max(1)
}

/// A number with so many significant digits, in the plain form where that is short.
pub(crate) fn significant(number: f64, digits: usize) -> String {
    if number == 0.0 {
        return "0".to_owned();
    }
    let rounded = format!("{number:.*e}", digits.saturating_sub(1));
    let exponent: i32 = rounded.split('e').nth(1).and_then(|exponent| exponent.parse().ok()).unwrap_or(0);
    if (-5..=6).contains(&exponent) {
        let places = (digits as i32 - 1 - exponent).max(0) as usize;
        format!("{number:.places$}")
    } else {
        rounded
    }
}

/// A number without the zeros at its end.
pub(crate) fn trimmed(text: String) -> String {
    if text.contains('.') && !text.contains('e') {
        text.trim_end_matches('0').trim_end_matches('.').to_owned()
    } else {
        text
    }
}

/// The shortest form that reads back as the same number; with an exponent where there would be many zeros.
pub(crate) fn shortest(number: f64) -> String {
    let size = number.abs();
    if size == 0.0 {
        "0".to_owned()
    } else if (1e-5..1e16).contains(&size) {
        format!("{number}")
    } else {
        format!("{number:e}")
    }
}

/// A duration in the units of a shift: `15 min 44 s`, `2 h 05 min`.
pub(crate) fn duration(seconds: f64) -> String {
    let whole = seconds.round();
    let (hours, minutes, rest) = ((whole / 3600.0).floor(), (whole / 60.0).floor() % 60.0, whole % 60.0);
    if hours >= 1.0 {
        format!("{hours} h {minutes:02} min")
    } else if minutes >= 1.0 {
        format!("{minutes} min {rest:02} s")
    } else {
        format!("{} s", trimmed(significant(seconds, 3)))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_value_never_reads_as_the_bound_that_it_breaks() {
        let scale = Scale { factor: 100.0, unit: " %" };
        assert_eq!(scale.value(0.1187, &[Some(0.11)]), "11.87 %");
        assert_eq!(scale.value(0.110_004, &[Some(0.11)]), "11.0004 %");
        assert_eq!(scale.value(0.11, &[Some(0.11)]), "11.00 %");
        assert_eq!(scale.bound(0.11), "11 %");
    }

    #[test]
    fn small_numbers_keep_their_digits() {
        assert_eq!(significant(0.000_012_34, 4), "0.00001234");
        assert_eq!(significant(1.234e-9, 4), "1.234e-9");
        assert_eq!(significant(9.9996, 4), "10.00");
        assert_eq!(significant(0.0, 4), "0");
    }

    #[test]
    fn degrees_are_round_again() {
        assert_eq!(degrees(30f64.to_radians()), 30.0);
        assert_eq!(degrees(54.74f64.to_radians()), 54.74);
    }

    #[test]
    fn durations_read_like_a_shift() {
        assert_eq!(duration(944.0), "15 min 44 s");
        assert_eq!(duration(7500.0), "2 h 05 min");
        assert_eq!(duration(12.5), "12.5 s");
    }

    #[test]
    fn numbers_read_back_as_they_were() {
        for number in [0.1 + 0.2, 1.0 / 3.0, 1e-300, 5e-324, 1234.5, 1e-5, 0.0, 1.0] {
            let text = shortest(number);
            assert_eq!(text.parse::<f64>().unwrap(), number, "{text}");
        }
        assert_eq!(shortest(1.5e-30), "1.5e-30");
        assert_eq!(shortest(1000.0), "1000");
    }
}
