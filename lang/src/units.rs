//! Units and dimensions.
//!
//! Base units: nm, rad, s (fs for short times alike), °C, MPa, g/cm³, g, mA/cm², nm/s, W/m², J/cm², N/m, fs², and plain
//! fractions for ratios. Photon energies, wavenumbers and frequencies have dimensions of their own and
//! become vacuum wavelengths only where one is asked for. Constants are exact in the SI of 2019
//! (BIPM, The International System of Units, 9th edition, 2019).

/// Speed of light in vacuum, nm/s.
const LIGHT_NM_PER_S: f64 = 299_792_458.0e9;
/// h c / e in eV nm, from the exact h, c and e of the SI.
pub const EV_NM: f64 = 6.626_070_15e-34 * 299_792_458.0 / 1.602_176_634e-19 * 1e9;

/// What a quantity measures.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Dimension {
    /// A plain number, a fraction.
    Ratio,
    /// Base nm.
    Length,
    /// Base eV; a vacuum wavelength where one is asked for.
    Energy,
    /// Base 1/cm; a vacuum wavelength where one is asked for.
    Wavenumber,
    /// Base THz; a vacuum wavelength where one is asked for.
    Frequency,
    /// Quarter-waves at the recipe's reference.
    OpticalThickness,
    /// Base rad.
    Angle,
    /// Base s.
    Time,
    /// Base fs².
    GroupDelayDispersion,
    /// Base nm/s.
    Rate,
    /// Base °C.
    Temperature,
    /// Base MPa.
    Stress,
    /// Base N/m.
    ForcePerWidth,
    /// Base g/cm³.
    Density,
    /// Base g.
    Mass,
    /// Base mA/cm².
    CurrentDensity,
    /// Base W/m².
    Irradiance,
    /// Base J/cm².
    Fluence,
    /// Base nm²; of Cauchy's second coefficient.
    Area,
    /// Base nm⁴; of Cauchy's third.
    Length4,
    /// Base nm⁶; of a fourth.
    Length6,
}

impl Dimension {
    /// What people call it, with an article.
    pub fn phrase(self) -> &'static str {
        use Dimension::*;
        match self {
            Ratio => "a ratio",
            Length => "a length",
            Energy => "a photon energy",
            Wavenumber => "a wavenumber",
            Frequency => "a frequency",
            OpticalThickness => "an optical thickness",
            Angle => "an angle",
            Time => "a time",
            GroupDelayDispersion => "a dispersion",
            Rate => "a rate",
            Temperature => "a temperature",
            Stress => "a stress",
            ForcePerWidth => "a film force per width",
            Density => "a density",
            Mass => "a mass",
            CurrentDensity => "a current density",
            Irradiance => "an irradiance",
            Fluence => "a fluence",
            Area => "a length squared",
            Length4 => "a length to the fourth power",
            Length6 => "a length to the sixth power",
        }
    }

    /// The unit that a shop would most likely write.
    pub fn usual_unit(self) -> &'static str {
        use Dimension::*;
        match self {
            Ratio => "%",
            Length => "nm",
            Energy => "eV",
            Wavenumber => "1/cm",
            Frequency => "THz",
            OpticalThickness => "qw",
            Angle => "deg",
            Time => "min",
            GroupDelayDispersion => "fs^2",
            Rate => "nm/s",
            Temperature => "degC",
            Stress => "MPa",
            ForcePerWidth => "N/m",
            Density => "g/cm3",
            Mass => "g",
            CurrentDensity => "mA/cm2",
            Irradiance => "W/m2",
            Fluence => "J/cm2",
            Area => "um^2",
            Length4 => "um^4",
            Length6 => "um^6",
        }
    }

    /// Whether a vacuum wavelength can be read from it.
    pub fn spectral(self) -> bool {
        matches!(self, Dimension::Length | Dimension::Energy | Dimension::Wavenumber | Dimension::Frequency)
    }
}

/// A unit: its dimension and how it converts to the base.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct UnitScale {
    /// What it measures.
    pub dimension: Dimension,
    times: f64,
    power_of_ten: i32,
    plus: f64,
}

impl UnitScale {
    /// A number of these units in the base unit. Powers of ten move the decimal point, so that 99.9 % is 0.999 and
    /// not its neighbour.
    pub fn base(self, number: f64) -> f64 {
        let number = number * self.times;
        let moved = match self.power_of_ten {
            0 => number,
            power => format!("{number}e{power}").parse().unwrap_or(number * 10f64.powi(power)),
        };
        moved + self.plus
    }
}

/// Every unit: as the formatter writes it, other spellings, dimension, and how many base units it has: a factor and a power of ten.
const UNITS: &[(&str, &[&str], Dimension, f64, i32)] = &[
    ("A", &["Å", "Å"], Dimension::Length, 1.0, -1),
    ("nm", &[], Dimension::Length, 1.0, 0),
    ("um", &["µm", "μm"], Dimension::Length, 1.0, 3),
    ("mm", &[], Dimension::Length, 1.0, 6),
    ("cm", &[], Dimension::Length, 1.0, 7),
    ("m", &[], Dimension::Length, 1.0, 9),
    ("um^2", &["µm^2", "μm^2"], Dimension::Area, 1.0, 6),
    ("nm^2", &[], Dimension::Area, 1.0, 0),
    ("um^4", &["µm^4", "μm^4"], Dimension::Length4, 1.0, 12),
    ("nm^4", &[], Dimension::Length4, 1.0, 0),
    ("um^6", &["µm^6", "μm^6"], Dimension::Length6, 1.0, 18),
    ("nm^6", &[], Dimension::Length6, 1.0, 0),
    ("eV", &[], Dimension::Energy, 1.0, 0),
    ("1/cm", &[], Dimension::Wavenumber, 1.0, 0),
    ("THz", &[], Dimension::Frequency, 1.0, 0),
    ("qw", &[], Dimension::OpticalThickness, 1.0, 0),
    ("deg", &["°"], Dimension::Angle, std::f64::consts::PI / 180.0, 0),
    ("mrad", &[], Dimension::Angle, 1.0, -3),
    ("rad", &[], Dimension::Angle, 1.0, 0),
    ("%", &[], Dimension::Ratio, 1.0, -2),
    ("ppm", &[], Dimension::Ratio, 1.0, -6),
    ("s", &[], Dimension::Time, 1.0, 0),
    ("min", &[], Dimension::Time, 60.0, 0),
    ("h", &[], Dimension::Time, 3600.0, 0),
    ("fs", &[], Dimension::Time, 1.0, -15),
    ("fs^2", &[], Dimension::GroupDelayDispersion, 1.0, 0),
    ("nm/s", &[], Dimension::Rate, 1.0, 0),
    ("nm/min", &[], Dimension::Rate, 1.0 / 60.0, 0),
    ("A/s", &["Å/s"], Dimension::Rate, 1.0, -1),
    ("degC", &["°C"], Dimension::Temperature, 1.0, 0),
    ("K", &[], Dimension::Temperature, 1.0, 0),
    ("MPa", &[], Dimension::Stress, 1.0, 0),
    ("GPa", &[], Dimension::Stress, 1.0, 3),
    ("N/m", &[], Dimension::ForcePerWidth, 1.0, 0),
    ("g/cm3", &[], Dimension::Density, 1.0, 0),
    ("g", &[], Dimension::Mass, 1.0, 0),
    ("mg", &[], Dimension::Mass, 1.0, -3),
    ("mA/cm2", &[], Dimension::CurrentDensity, 1.0, 0),
    ("W/m2", &[], Dimension::Irradiance, 1.0, 0),
    ("J/cm2", &[], Dimension::Fluence, 1.0, 0),
];

/// Every unit as the formatter writes it.
pub fn all() -> impl Iterator<Item = &'static str> {
    UNITS.iter().map(|(name, ..)| *name)
}

/// The spelling that the formatter writes, for any accepted spelling.
pub fn canonical(text: &str) -> Option<&'static str> {
    UNITS.iter().find(|(name, others, ..)| *name == text || others.contains(&text)).map(|(name, ..)| *name)
}

/// What a unit means.
pub fn scale(text: &str) -> Option<UnitScale> {
    let name = canonical(text)?;
    let (_, _, dimension, times, power_of_ten) = UNITS.iter().copied().find(|unit| unit.0 == name)?;
    let plus = if name == "K" { -273.15 } else { 0.0 };
    Some(UnitScale { dimension, times, power_of_ten, plus })
}

/// The vacuum wavelength in nm of a spectral quantity in its base unit; none where it has none (zero, or another dimension).
pub fn wavelength_nm(value: f64, dimension: Dimension) -> Option<f64> {
    let nm = match dimension {
        Dimension::Length => value,
        Dimension::Energy => EV_NM / value,
        Dimension::Wavenumber => 1e7 / value,
        Dimension::Frequency => LIGHT_NM_PER_S / (value * 1e12),
        _ => return None,
    };
    (nm.is_finite() && nm > 0.0).then_some(nm)
}

/// Whether a text is a number and nothing else: a unit can be written behind it.
pub fn is_bare(text: &str) -> bool {
    let digits = text.strip_prefix('-').unwrap_or(text).replace('_', "");
    digits.starts_with(|first: char| first.is_ascii_digit()) && digits.parse::<f64>().is_ok()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn photon_energy_of_a_wavelength_as_in_codata() {
        // h c / e = 1239.841 984… eV nm (CODATA 2018, exact by definition).
        assert!((EV_NM - 1_239.841_984_332_002_5).abs() < 1e-9);
        let nm = wavelength_nm(10_000.0, Dimension::Wavenumber);
        assert_eq!(nm, Some(1000.0));
        assert!(wavelength_nm(0.0, Dimension::Energy).is_none());
    }

    #[test]
    fn spellings_meet_in_one() {
        assert_eq!(canonical("µm"), Some("um"));
        assert_eq!(canonical("°"), Some("deg"));
        assert_eq!(canonical("parsec"), None);
    }

    #[test]
    fn only_a_bare_number_takes_a_unit() {
        assert!(["62", "-5", "1.5e3", "2_000"].into_iter().all(is_bare));
        assert!(
            ["5 %", "62 nm", "nan", "inf", "(5)", "5 + 1", "design", "- ", ""]
                .into_iter()
                .all(|text| !is_bare(text))
        );
    }

    #[test]
    fn shares_are_exact() {
        let percent = scale("%").map(|unit| unit.base(99.9));
        assert_eq!(percent, Some(0.999));
        assert_eq!(scale("K").map(|unit| unit.base(300.0).round()), Some(27.0));
    }
}
