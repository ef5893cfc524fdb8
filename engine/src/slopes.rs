//! How a quantity changes with the thickness of every film: exact first derivatives.

use std::f64::consts::LN_10;

use crate::band::Probe;
use crate::error::OpticsError;
use crate::kernel::{Beam, Points, WIDTH};
use crate::plan::Plan;
use crate::quantity::{Light, Quantity};
use crate::stack::Stack;
use crate::{field, phase};

/// A value with its derivatives.
#[derive(Clone, Debug, PartialEq)]
pub struct Slopes {
    /// The value.
    pub value: f64,
    /// Its derivative in the thickness of each film, per nm, by coating and by film within it, in the light's order. A graded
    /// film is stretched as a whole.
    pub films: Vec<Vec<f64>>,
}

impl Slopes {
    pub(crate) fn zero(plan: &Plan) -> Slopes {
        let films = (0..plan.coatings.len()).map(|at| vec![0.0; plan.films(at).unwrap_or(0)]).collect();
        Slopes { value: 0.0, films }
    }

    /// The derivatives by film from those by layer.
    pub(crate) fn by_film(plan: &Plan, value: f64, layers: &[Vec<f64>]) -> Slopes {
        let mut slopes = Slopes::zero(plan);
        slopes.value = value;
        for ((films, coating), layers) in slopes.films.iter_mut().zip(&plan.coatings).zip(layers) {
            for group in coating.iter().zip(layers).collect::<Vec<_>>().chunk_by(|a, b| a.0.film == b.0.film)
            {
                let whole: f64 = group.iter().map(|(layer, _)| layer.thickness_nm).sum();
                let share = |nm: f64| if whole > 0.0 { nm / whole } else { 1.0 / group.len() as f64 };
                films[group[0].0.film] =
                    group.iter().map(|(layer, slope)| share(layer.thickness_nm) * *slope).sum();
            }
        }
        slopes
    }
}

/// A quantity with its derivatives in the thickness of every film, at vacuum wavelengths in nm: one entry a wavelength.
///
/// # Errors
/// As [`value`](crate::value).
pub fn slopes(
    stack: &Stack,
    quantity: &Quantity,
    light: &Light,
    wavelengths_nm: &[f64],
) -> Result<Vec<Slopes>, OpticsError> {
    let probe = Probe::new(stack, quantity, light)?;
    let (plan, light) = (&*probe.plan, &probe.light);
    let each = |of: &dyn Fn(f64) -> Result<Slopes, OpticsError>| {
        wavelengths_nm.iter().map(|wavelength_nm| of(*wavelength_nm)).collect()
    };
    match *quantity {
        Quantity::Phase(outgoing, kind) => each(&|nm| phase::slopes(plan, light, outgoing, kind, nm)),
        Quantity::PeakField => each(&|nm| field::slopes(plan, light, nm)),
        _ => in_power(&probe, wavelengths_nm),
    }
}

/// The same of a quantity that adds up in power.
pub(crate) fn in_power(probe: &Probe<'_>, wavelengths_nm: &[f64]) -> Result<Vec<Slopes>, OpticsError> {
    let (plan, program) = (&*probe.plan, &*probe.program);
    let points = Points::new(plan, wavelengths_nm)?;
    let wanted = probe.quantity.wanted(probe.within.as_deref());
    let layers: usize = plan.coatings.iter().map(Vec::len).sum();
    let mut values = vec![0.0; wavelengths_nm.len()];
    let mut slopes = vec![0.0; wavelengths_nm.len() * layers];
    let (mut value_rows, mut slope_rows) = (Vec::new(), Vec::new());
    for (angle_rad, shares) in probe.all_rays() {
        let beam = Beam::new(plan, &points, &[angle_rad])?;
        beam.slopes(program, &points, shares, wanted, (&mut value_rows, &mut slope_rows));
        for at in 0..wavelengths_nm.len() {
            let (block, lane) = (at / WIDTH, at % WIDTH);
            let value = value_rows[block].0[lane];
            if !value.is_finite() {
                return Err(OpticsError::NotFinite { wavelength_nm: wavelengths_nm[at], angle_rad });
            }
            values[at] += value;
            let rows = &slope_rows[block * layers..(block + 1) * layers];
            let sums = &mut slopes[at * layers..(at + 1) * layers];
            sums.iter_mut().zip(rows).for_each(|(sum, row)| *sum += row.0[lane]);
        }
    }
    let of = |at: usize| {
        let (mut value, mut own) = (values[at], slopes[at * layers..(at + 1) * layers].to_vec());
        if *probe.quantity == Quantity::OpticalDensity {
            // What was added up is the transmittance.
            if value <= 0.0 {
                return Err(OpticsError::Dark { wavelength_nm: wavelengths_nm[at] });
            }
            own.iter_mut().for_each(|slope| *slope /= -LN_10 * value);
            value = -value.log10();
        }
        let mut rest = &own[..];
        let by_coating = plan.coatings.iter().map(|coating| {
            let (these, others) = rest.split_at(coating.len());
            rest = others;
            these.to_vec()
        });
        let by_coating: Vec<Vec<f64>> = by_coating.collect();
        Ok(Slopes::by_film(plan, value, &by_coating))
    };
    (0..wavelengths_nm.len()).map(of).collect()
}
