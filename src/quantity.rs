//! Quantities on the command line, with the language's units.

use crate::failure::Failure;
use overcoat_lang::units::{self, Dimension};

/// A number in the base unit of its dimension.
#[derive(Clone, Copy, Debug, PartialEq)]
struct Quantity {
    number: f64,
    dimension: Dimension,
}

/// A vacuum wavelength in nm, from a length, a photon energy, a wavenumber or a frequency.
pub(crate) fn wavelength(text: &str, option: &str) -> Result<f64, Failure> {
    let quantity =
        read(text, None).ok_or_else(|| refusal(text, option, "a wavelength, for example 550nm"))?;
    units::wavelength_nm(quantity.number, quantity.dimension)
        .ok_or_else(|| refusal(text, option, "a wavelength greater than 0, for example 550nm"))
}

/// A band in nm, short end first; a bare first end takes the unit of the second.
pub(crate) fn band(text: &str, option: &str) -> Result<(f64, f64), Failure> {
    let refused = || refusal(text, option, "a band from its lower to its higher end, for example 400..700nm");
    let (low, high) = text.split_once("..").ok_or_else(refused)?;
    let unit = split(high).map(|(_, unit)| unit);
    let (low, high) = (read(low, unit).ok_or_else(refused)?, read(high, None).ok_or_else(refused)?);
    if low.dimension != high.dimension || low.number >= high.number {
        return Err(refused());
    }
    let a = units::wavelength_nm(low.number, low.dimension).ok_or_else(refused)?;
    let b = units::wavelength_nm(high.number, high.dimension).ok_or_else(refused)?;
    // Photon energies, wavenumbers and frequencies rise as wavelengths fall.
    Ok((a.min(b), a.max(b)))
}

/// A length in nm, greater than 0.
pub(crate) fn length(text: &str, option: &str) -> Result<f64, Failure> {
    match read(text, None) {
        Some(Quantity { number, dimension: Dimension::Length }) if number > 0.0 => Ok(number),
        _ => Err(refusal(text, option, "a length greater than 0, for example 1nm")),
    }
}

/// An angle of incidence in rad: from 0 to below 90°.
pub(crate) fn incidence(text: &str, option: &str) -> Result<f64, Failure> {
    match read(text, None) {
        Some(Quantity { number, dimension: Dimension::Angle })
            if (0.0..std::f64::consts::FRAC_PI_2 - 1e-12).contains(&number) =>
        {
            Ok(number)
        }
        _ => Err(refusal(text, option, "an angle from 0deg to below 90deg, for example 45deg")),
    }
}

fn refusal(text: &str, option: &str, needed: &str) -> Failure {
    Failure::message(format!("{option} needs {needed}, not `{text}`"))
}

fn read(text: &str, spare_unit: Option<&str>) -> Option<Quantity> {
    let (number, unit) = split(text)?;
    let unit = if unit.is_empty() { spare_unit? } else { unit };
    let number: f64 = number.parse().ok()?;
    let scale = units::scale(unit)?;
    let number = scale.base(number);
    number.is_finite().then_some(Quantity { number, dimension: scale.dimension })
}

/// The longest number at the start, and the unit behind it.
fn split(text: &str) -> Option<(&str, &str)> {
    let text = text.trim();
    // `inf` and `nan` would be numbers too, but are no quantities.
    let possible =
        text.find(|c: char| !matches!(c, '0'..='9' | '.' | '-' | '+' | 'e' | 'E')).unwrap_or(text.len());
    let end = (1..=possible).rev().find(|end| text[..*end].parse::<f64>().is_ok())?;
    Some((&text[..end], text[end..].trim()))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn bands_have_the_units_of_the_language() {
        let band = |text| band(text, "--over").ok();
        assert_eq!(band("400..700nm"), Some((400.0, 700.0)));
        assert_eq!(band("400 nm .. 0.7 um"), Some((400.0, 700.0)));
        assert_eq!(band("0.4..0.7um"), Some((400.0, 700.0)));
        assert_eq!(band("10000..20000 1/cm"), Some((500.0, 1000.0)));
        let (low, high) = band("1 .. 2 eV").unwrap();
        // hc/e is 1239.841 984 eV nm (exact in the SI of 2019).
        assert!((low - 1_239.841_984_332 / 2.0).abs() < 1e-6 && (high - 1_239.841_984_332).abs() < 1e-6);
        for wrong in [
            "700..400nm",
            "400..700",
            "400nm",
            "..700nm",
            "nan..infnm",
            "0..700nm",
            "400deg..700nm",
            "400..400nm",
        ] {
            assert_eq!(band(wrong), None, "{wrong}");
        }
    }

    #[test]
    fn angles_stay_below_ninety_degrees() {
        assert_eq!(incidence("45deg", "--at").ok(), Some(std::f64::consts::FRAC_PI_4));
        assert_eq!(incidence("0 °", "--at").ok(), Some(0.0));
        for wrong in ["90deg", "-1deg", "45", "45nm", ""] {
            assert!(incidence(wrong, "--at").is_err(), "{wrong}");
        }
    }

    #[test]
    fn numbers_may_have_exponents() {
        assert_eq!(length("1e-1nm", "--step").ok(), Some(0.1));
        assert_eq!(wavelength("5.5e2nm", "--at").ok(), Some(550.0));
        assert!(length("0nm", "--step").is_err());
    }
}
