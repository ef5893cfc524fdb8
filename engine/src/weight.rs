//! Spectral weights: light sources, detectors, and their products.

use std::sync::{Arc, LazyLock};

use crate::constants::{BOLTZMANN, LIGHT, PLANCK};
use crate::error::WeightError;

/// Gauss's nodes for each piece of an integral.
static RULE: LazyLock<Vec<(f64, f64)>> = LazyLock::new(|| crate::quadrature::gauss_legendre(8));

/// A function of the vacuum wavelength that is never negative. Cheap to clone.
#[derive(Clone, Debug)]
pub struct SpectralWeight(Arc<Kind>);

#[derive(Debug)]
enum Kind {
    Constant,
    Table(Vec<(f64, f64)>),
    BlackBody { kelvin: f64 },
    Wavelength,
    Product { factors: Vec<SpectralWeight>, range_nm: Option<(f64, f64)> },
}

impl SpectralWeight {
    /// 1 at every wavelength: no weight.
    pub fn constant() -> SpectralWeight {
        SpectralWeight(Arc::new(Kind::Constant))
    }

    /// Rows of (vacuum wavelength in nm, value), joined by straight lines.
    ///
    /// # Errors
    /// Fewer than two rows, wavelengths that don't ascend strictly from above 0, values below 0.
    pub fn table(rows: &[(f64, f64)]) -> Result<SpectralWeight, WeightError> {
        if rows.len() < 2 {
            return Err(WeightError::TooFew { given: rows.len() });
        }
        let mut before = 0.0;
        for (at, &(wavelength, value)) in rows.iter().enumerate() {
            let columns = [
                ("the wavelength", wavelength, wavelength > before, "above 0 and above the row before"),
                ("the value", value, value >= 0.0, "0 or above"),
            ];
            for (what, value, passes, must) in columns {
                if !(value.is_finite() && passes) {
                    return Err(WeightError::Row { row: at + 1, what, value, must });
                }
            }
            before = wavelength;
        }
        Ok(SpectralWeight(Arc::new(Kind::Table(rows.to_vec()))))
    }

    /// The exitance of a black body per wavelength, 2πhc²/λ⁵ /(exp(hc/λkT) − 1), in W m⁻² nm⁻¹.
    ///
    /// Source: M. Planck, Ann. Phys. 309, 553 (1901); constants of the SI, 9th edition.
    ///
    /// # Errors
    /// A temperature that is not above 0 K.
    pub fn blackbody(kelvin: f64) -> Result<SpectralWeight, WeightError> {
        if kelvin.is_finite() && kelvin > 0.0 {
            Ok(SpectralWeight(Arc::new(Kind::BlackBody { kelvin })))
        } else {
            Err(WeightError::Temperature { kelvin })
        }
    }

    /// The product of several, wherever all of them have a value.
    ///
    /// # Errors
    /// No factor, or factors with no wavelength in common.
    pub fn product(factors: &[SpectralWeight]) -> Result<SpectralWeight, WeightError> {
        if factors.is_empty() {
            return Err(WeightError::NoFactor);
        }
        let range_nm = factors
            .iter()
            .filter_map(SpectralWeight::range_nm)
            .reduce(|a: (f64, f64), b| (a.0.max(b.0), a.1.min(b.1)));
        if range_nm.is_some_and(|(lo, hi)| lo >= hi) {
            return Err(WeightError::NoCommonRange);
        }
        Ok(SpectralWeight(Arc::new(Kind::Product { factors: factors.to_vec(), range_nm })))
    }

    /// The product with another, wherever both have a value; where they have none in common it has no value at all.
    pub fn times(&self, other: &SpectralWeight) -> SpectralWeight {
        let factors = [self.clone(), other.clone()];
        SpectralWeight::product(&factors).unwrap_or_else(|_| {
            let range_nm = Some((f64::INFINITY, f64::NEG_INFINITY));
            SpectralWeight(Arc::new(Kind::Product { factors: factors.to_vec(), range_nm }))
        })
    }

    /// ∫ w dλ over bands of vacuum wavelengths in nm, in the unit of w times nm; exact for tables and their products.
    /// `None` where it does not reach over a band, or a band's ends are not in order.
    pub fn integral(&self, bands_nm: &[(f64, f64)]) -> Option<f64> {
        let mut total = 0.0;
        let (mut wavelengths, mut shares) = (Vec::new(), Vec::new());
        for &(lo, hi) in bands_nm {
            if !(lo..=hi).contains(&hi) {
                return None;
            }
            self.at(lo).and(self.at(hi))?;
            wavelengths.clear();
            shares.clear();
            let mut from = lo;
            for to in self.knots_between(lo, hi).into_iter().chain([hi]) {
                // Smooth weights, such as a black body's, are cut where the wavelength has grown by a fiftieth.
                let pieces = ((to / from).ln() / 0.02).ceil().max(1.0);
                let half = 0.5 * (to - from) / pieces;
                for piece in 0..pieces as usize {
                    let middle = from + half * (2 * piece + 1) as f64;
                    wavelengths.extend(RULE.iter().map(|node| middle + half * node.0));
                    shares.extend(RULE.iter().map(|node| half * node.1));
                }
                from = to;
            }
            let weights = self.inside_all(&wavelengths);
            total += weights.iter().zip(&shares).map(|(weight, share)| weight * share).sum::<f64>();
        }
        Some(total)
    }

    /// The same times the wavelength in nm: proportional to the number of photons instead of their energy.
    pub fn photons(&self) -> SpectralWeight {
        let factors = vec![self.clone(), SpectralWeight(Arc::new(Kind::Wavelength))];
        SpectralWeight(Arc::new(Kind::Product { factors, range_nm: self.range_nm() }))
    }

    /// The value at a vacuum wavelength in nm, or `None` outside the range: nothing is extrapolated.
    pub fn at(&self, wavelength_nm: f64) -> Option<f64> {
        match self.range_nm() {
            Some((lo, hi)) if !(lo <= wavelength_nm && wavelength_nm <= hi) => None,
            _ => Some(self.inside(wavelength_nm)),
        }
    }

    /// The range in nm; `None` is everywhere.
    pub fn range_nm(&self) -> Option<(f64, f64)> {
        match &*self.0 {
            Kind::Table(rows) => Some((rows[0].0, rows[rows.len() - 1].0)),
            Kind::Product { range_nm, .. } => *range_nm,
            Kind::Constant | Kind::BlackBody { .. } | Kind::Wavelength => None,
        }
    }

    /// The wavelengths in nm at which it is not smooth, ascending.
    pub fn knots_nm(&self) -> Vec<f64> {
        self.knots_between(0.0, f64::INFINITY)
    }

    /// Those between two wavelengths in nm, without the two.
    fn knots_between(&self, lo: f64, hi: f64) -> Vec<f64> {
        match &*self.0 {
            Kind::Table(rows) => {
                let first = rows.partition_point(|row| row.0 <= lo);
                rows[first..].iter().map(|row| row.0).take_while(|&knot| knot < hi).collect()
            }
            Kind::Product { factors, .. } => {
                let mut knots: Vec<f64> =
                    factors.iter().flat_map(|factor| factor.knots_between(lo, hi)).collect();
                knots.sort_by(f64::total_cmp);
                knots.dedup();
                knots
            }
            Kind::Constant | Kind::BlackBody { .. } | Kind::Wavelength => Vec::new(),
        }
    }

    /// The values at ascending wavelengths that are known to lie within the range.
    pub(crate) fn inside_all(&self, wavelengths_nm: &[f64]) -> Vec<f64> {
        match &*self.0 {
            Kind::Constant => vec![1.0; wavelengths_nm.len()],
            Kind::Wavelength => wavelengths_nm.to_vec(),
            Kind::BlackBody { kelvin } => wavelengths_nm.iter().map(|nm| planck(*nm, *kelvin)).collect(),
            Kind::Table(rows) => {
                // The rows are walked along with the wavelengths.
                let first = wavelengths_nm.first().copied().unwrap_or(0.0);
                let last = rows.len() - 1;
                let mut after = rows.partition_point(|row| row.0 <= first).clamp(1, last);
                let value = |nm: &f64| {
                    while after < last && rows[after].0 <= *nm {
                        after += 1;
                    }
                    let ((x0, y0), (x1, y1)) = (rows[after - 1], rows[after]);
                    y0 + (y1 - y0) * ((nm - x0) / (x1 - x0)).clamp(0.0, 1.0)
                };
                wavelengths_nm.iter().map(value).collect()
            }
            Kind::Product { factors, .. } => {
                let mut product = vec![1.0; wavelengths_nm.len()];
                for factor in factors {
                    let values = factor.inside_all(wavelengths_nm);
                    product.iter_mut().zip(values).for_each(|(product, value)| *product *= value);
                }
                product
            }
        }
    }

    /// The value at a wavelength that is known to lie within the range.
    pub(crate) fn inside(&self, wavelength_nm: f64) -> f64 {
        match &*self.0 {
            Kind::Constant => 1.0,
            Kind::Wavelength => wavelength_nm,
            Kind::Table(rows) => {
                let after = rows.partition_point(|row| row.0 <= wavelength_nm).clamp(1, rows.len() - 1);
                let ((x0, y0), (x1, y1)) = (rows[after - 1], rows[after]);
                let along = ((wavelength_nm - x0) / (x1 - x0)).clamp(0.0, 1.0);
                y0 + (y1 - y0) * along
            }
            Kind::BlackBody { kelvin } => planck(wavelength_nm, *kelvin),
            Kind::Product { factors, .. } => {
                factors.iter().map(|factor| factor.inside(wavelength_nm)).product()
            }
        }
    }
}

/// Spectral exitance in W m⁻² nm⁻¹.
fn planck(wavelength_nm: f64, kelvin: f64) -> f64 {
    let metres = wavelength_nm * 1e-9;
    let exponent = PLANCK * LIGHT / (metres * BOLTZMANN * kelvin);
    2.0 * std::f64::consts::PI * PLANCK * LIGHT * LIGHT / metres.powi(5) / exponent.exp_m1() * 1e-9
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_table_is_joined_by_straight_lines_and_ends_at_its_ends() {
        let lamp = SpectralWeight::table(&[(400.0, 1.0), (500.0, 3.0), (510.0, 0.0)]).expect("valid");
        assert_eq!(lamp.at(450.0), Some(2.0));
        assert_eq!(lamp.at(510.0), Some(0.0));
        assert_eq!(lamp.at(510.1), None);
        assert_eq!(lamp.photons().at(450.0), Some(900.0));
    }

    #[test]
    fn a_black_body_obeys_wien_and_stefan_and_boltzmann() {
        // CODATA 2018: σ = 5.670374419e-8 W m⁻² K⁻⁴, Wien's b = 2.897771955e-3 m K.
        let body = SpectralWeight::blackbody(300.0).expect("valid");
        let peak: f64 = 2.897_771_955e6 / 300.0;
        assert!(
            body.inside(peak) > body.inside(peak * 1.0001) && body.inside(peak) > body.inside(peak / 1.0001)
        );
        let rule = crate::quadrature::gauss_legendre(20);
        let total: f64 = (0..400)
            .flat_map(|at| rule.iter().map(move |(x, w)| (f64::from(at), *x, *w)))
            .map(|(at, x, w)| {
                let wavelength = (6.0 + (at + 0.5 + 0.5 * x) * 0.03_f64).exp();
                0.015 * w * wavelength * body.inside(wavelength)
            })
            .sum();
        let sigma = total / 300.0_f64.powi(4);
        assert!((sigma / 5.670_374_419e-8 - 1.0).abs() < 1e-6, "{sigma}");
    }

    #[test]
    fn many_values_at_once_are_those_one_by_one() {
        let lamp =
            SpectralWeight::table(&[(300.0, 1.0), (500.0, 3.0), (501.0, 0.0), (900.0, 2.0)]).expect("valid");
        let body = SpectralWeight::blackbody(2856.0).expect("valid");
        let weight = lamp.times(&body).photons();
        let all: Vec<f64> = (0..=600).map(|at| 300.0 + f64::from(at)).collect();
        for (nm, value) in all.iter().zip(weight.inside_all(&all)) {
            assert!((weight.inside(*nm) - value).abs() <= 1e-15 * value, "{nm}");
        }
        assert!(weight.inside_all(&[]).is_empty());
    }

    #[test]
    fn an_integral_is_that_of_the_pieces_one_by_one() {
        let rough: Vec<(f64, f64)> =
            (0..400).map(|at| (300.0 + 2.0 * f64::from(at), f64::from(at * 7919 % 101))).collect();
        let lamp = SpectralWeight::table(&rough).expect("valid");
        let mask =
            SpectralWeight::table(&[(350.0, 0.0), (401.3, 1.0), (401.4, 0.2), (1000.0, 0.9)]).expect("valid");
        let body = SpectralWeight::blackbody(2856.0).expect("valid");
        let both = lamp.times(&mask);
        for weight in
            [lamp.clone(), mask.clone(), both.clone(), both.photons(), body.clone(), mask.times(&body)]
        {
            for bands in [&[(400.0, 700.0)][..], &[(350.0, 351.0), (401.35, 401.36), (500.0, 1000.0)]] {
                let mut expected = 0.0;
                for &(lo, hi) in bands {
                    let mut ends = weight.knots_nm();
                    ends.retain(|knot| lo < *knot && *knot < hi);
                    ends.extend((0..=300).map(|at| lo + (hi - lo) * f64::from(at) / 300.0));
                    ends.sort_by(f64::total_cmp);
                    for ends in ends.windows(2) {
                        let half = 0.5 * (ends[1] - ends[0]);
                        let value = |x: f64| weight.inside(0.5 * (ends[0] + ends[1]) + half * x);
                        expected += RULE.iter().map(|&(x, share)| half * share * value(x)).sum::<f64>();
                    }
                }
                let found = weight.integral(bands).expect("within reach");
                assert!((found / expected - 1.0).abs() < 1e-13, "{found} {expected}");
            }
        }
        assert_eq!(lamp.integral(&[(500.0, 500.0)]), Some(0.0));
        assert_eq!(lamp.integral(&[(600.0, 500.0)]), None);
        assert_eq!(SpectralWeight::constant().integral(&[(f64::NAN, 500.0)]), None);
    }

    #[test]
    fn bad_tables_are_refused() {
        assert!(SpectralWeight::table(&[(400.0, 1.0)]).is_err());
        assert!(SpectralWeight::table(&[(400.0, 1.0), (400.0, 1.0)]).is_err());
        assert!(SpectralWeight::table(&[(400.0, 1.0), (500.0, -1.0)]).is_err());
        assert!(SpectralWeight::blackbody(0.0).is_err());
        assert!(SpectralWeight::product(&[]).is_err());
    }
}
