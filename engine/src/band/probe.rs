//! One quantity of one stack under one beam, as a function of the wavelength.

use std::collections::BTreeMap;

use num_complex::Complex64;

use super::cone::{Cone, Stretch};
use super::mesh::{Along, Mesh};
use crate::error::OpticsError;
use crate::field::{self, peak};
use crate::phase::phase;
use crate::plan::Plan;
use crate::quadrature::gauss_legendre;
use crate::quantity::{Light, Quantity, Tally};
use crate::stack::Stack;

/// To what a cone's mean has settled.
const SETTLED: f64 = 1e-11;
/// The numbers of nodes tried on each stretch of a cone before it is cut into pieces.
const NODES: [usize; 4] = [12, 24, 48, 96];

/// The quantity at one vacuum wavelength in nm, for a beam and, if it has one, its whole cone.
///
/// # Errors
/// A stack that is not well formed, a place that it does not have, a material without constants there, an
/// absorbing incident medium, an angle or a cone that reaches 90°.
pub fn value(
    stack: &Stack,
    quantity: &Quantity,
    light: &Light,
    wavelength_nm: f64,
) -> Result<f64, OpticsError> {
    Probe::new(stack, quantity, light)?.at(wavelength_nm)
}

/// The same at several vacuum wavelengths in nm.
///
/// # Errors
/// As [`value`].
pub fn values(
    stack: &Stack,
    quantity: &Quantity,
    light: &Light,
    wavelengths_nm: &[f64],
) -> Result<Vec<f64>, OpticsError> {
    let probe = Probe::new(stack, quantity, light)?;
    wavelengths_nm.iter().map(|wavelength_nm| probe.at(*wavelength_nm)).collect()
}

/// A stack prepared for many evaluations of one quantity.
#[derive(Clone, Debug)]
pub(crate) struct Probe {
    pub(crate) plan: Plan,
    pub(crate) quantity: Quantity,
    pub(crate) light: Light,
    pub(crate) cone: Option<Cone>,
    rules: BTreeMap<usize, Vec<(f64, f64)>>,
}

impl Probe {
    pub(crate) fn new(stack: &Stack, quantity: &Quantity, light: &Light) -> Result<Probe, OpticsError> {
        let plan = if *quantity == Quantity::PeakField { field::plan(stack)? } else { Plan::new(stack)? };
        quantity.check(&plan)?;
        let cone = Cone::new(light)?;
        let sizes: &[usize] = if cone.is_some() { &NODES } else { &[] };
        let rules = sizes.iter().map(|&size| (size, gauss_legendre(size))).collect();
        Ok(Probe { plan, quantity: quantity.clone(), light: *light, cone, rules })
    }

    /// The same under a beam of another angle.
    pub(crate) fn at_angle(&self, angle_rad: f64) -> Result<Probe, OpticsError> {
        let light = Light { angle_rad, ..self.light };
        Ok(Probe { cone: Cone::new(&light)?, light, ..self.clone() })
    }

    /// The value at a vacuum wavelength in nm.
    pub(crate) fn at(&self, wavelength_nm: f64) -> Result<f64, OpticsError> {
        if let Quantity::Phase(outgoing, kind) = self.quantity {
            return phase(&self.plan, &self.light, outgoing, kind, wavelength_nm);
        }
        if self.quantity == Quantity::PeakField {
            return Ok(peak(&self.plan, &self.light, wavelength_nm)?.value);
        }
        let indices = self.plan.indices(wavelength_nm)?;
        let Some(cone) = &self.cone else {
            let tilted = self.plan.tilted(&indices, wavelength_nm, self.light.angle_rad)?;
            let tally = self.quantity.tally(&tilted, self.light.polarisation.shares())?;
            return self.quantity.value(tally, wavelength_nm);
        };
        let mut total = Tally::NONE;
        for stretch in cone.stretches() {
            total = total.plus(1.0, self.stretch(cone, stretch, &indices, wavelength_nm)?);
        }
        self.quantity.value(total, wavelength_nm)
    }

    /// The rays that the light consists of, each with its shares of s and p: of a cone, those of one fixed rule.
    pub(crate) fn rays(&self) -> Vec<(f64, [f64; 2])> {
        let Some(cone) = &self.cone else {
            return vec![(self.light.angle_rad, self.light.polarisation.shares())];
        };
        let mut rays = Vec::new();
        for stretch in cone.stretches() {
            for &(x, weight) in &self.rules[&NODES[1]] {
                let ray = cone.ray(stretch, x);
                rays.push((ray.angle_rad, ray.shares.map(|share| weight * share)));
            }
        }
        rays
    }

    /// The part of a cone that one stretch contributes.
    fn stretch(
        &self,
        cone: &Cone,
        stretch: Stretch,
        indices: &[Complex64],
        wavelength_nm: f64,
    ) -> Result<Tally, OpticsError> {
        let ray = |x: f64| {
            let ray = cone.ray(stretch, x);
            let tilted = self.plan.tilted(indices, wavelength_nm, ray.angle_rad)?;
            self.quantity.tally(&tilted, ray.shares)
        };
        let mut before: Option<Tally> = None;
        for rule in self.rules.values() {
            let mut sum = Tally::NONE;
            for &(x, weight) in rule {
                sum = sum.plus(weight, ray(x)?);
            }
            if before.is_some_and(|before| differ(before, sum) <= SETTLED) {
                return Ok(sum);
            }
            before = Some(sum);
        }
        self.pieces(cone, stretch, wavelength_nm, &ray)
    }

    /// The same by pieces, halved until each has settled: for resonances that are narrow in angle.
    fn pieces(
        &self,
        cone: &Cone,
        stretch: Stretch,
        wavelength_nm: f64,
        ray: &dyn Fn(f64) -> Result<Tally, OpticsError>,
    ) -> Result<Tally, OpticsError> {
        let along = Along::Angle { wavelength_nm };
        let mesh = Mesh::build(&self.plan, &self.light, true, along, cone.range_rad())?;
        let mut ends = vec![-1.0];
        ends.extend(mesh.points().map(|angle| cone.place(stretch, angle)).filter(|x| x.abs() < 1.0));
        ends.push(1.0);
        let rule = &self.rules[&NODES[0]];
        let gauss = |lo: f64, hi: f64| {
            let (middle, half) = (0.5 * (lo + hi), 0.5 * (hi - lo));
            let mut sum = Tally::NONE;
            for &(x, weight) in rule {
                sum = sum.plus(weight * half, ray(middle + half * x)?);
            }
            Ok::<Tally, OpticsError>(sum)
        };
        let mut open: Vec<(f64, f64, Tally, u32)> = Vec::new();
        for ends in ends.windows(2) {
            open.push((ends[0], ends[1], gauss(ends[0], ends[1])?, 0));
        }
        let mut total = Tally::NONE;
        while let Some((lo, hi, whole, depth)) = open.pop() {
            let middle = 0.5 * (lo + hi);
            let (left, right) = (gauss(lo, middle)?, gauss(middle, hi)?);
            let both = Tally::NONE.plus(1.0, left).plus(1.0, right);
            if depth > 40 || differ(whole, both) <= SETTLED * (hi - lo).max(1e-3) {
                total = total.plus(1.0, both);
            } else {
                open.push((lo, middle, left, depth + 1));
                open.push((middle, hi, right, depth + 1));
            }
        }
        Ok(total)
    }
}

/// How far two results differ: absolutely, or relatively where only the ratio counts.
fn differ(a: Tally, b: Tally) -> f64 {
    let difference = b.plus(-1.0, a);
    let scale = b.ln_scale.min(0.0);
    if difference.ln_scale == f64::NEG_INFINITY {
        return 0.0;
    }
    difference.value.abs() * (difference.ln_scale - scale).exp()
}
