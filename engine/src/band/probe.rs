//! One quantity of one stack under one beam, as a function of the wavelength.

use std::borrow::Cow;
use std::collections::BTreeMap;

use super::cone::{Cone, Stretch};
use super::mesh::{Along, Mesh};
use crate::error::OpticsError;
use crate::field::{self, peak};
use crate::kernel::{Beam, Outcome, Points, Program, WIDTH, Within};
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
    Probe::new(stack, quantity, light)?.values(wavelengths_nm)
}

/// A stack prepared for many evaluations of one quantity.
#[derive(Clone, Debug)]
pub(crate) struct Probe<'a> {
    pub(crate) plan: Cow<'a, Plan>,
    pub(crate) program: Cow<'a, Program>,
    pub(crate) quantity: &'a Quantity,
    pub(crate) within: Option<Cow<'a, Within>>,
    pub(crate) light: Light,
    pub(crate) cone: Option<Cone>,
    rules: Cow<'a, BTreeMap<usize, Vec<(f64, f64)>>>,
}

impl<'a> Probe<'a> {
    pub(crate) fn new(
        stack: &Stack,
        quantity: &'a Quantity,
        light: &Light,
    ) -> Result<Probe<'a>, OpticsError> {
        let plan = if *quantity == Quantity::PeakField { field::plan(stack)? } else { Plan::new(stack)? };
        quantity.check(&plan)?;
        let cone = Cone::new(light)?;
        let sizes: &[usize] = if cone.is_some() { &NODES } else { &[] };
        let rules = sizes.iter().map(|&size| (size, gauss_legendre(size))).collect();
        Ok(Probe {
            program: Cow::Owned(Program::new(&plan)),
            within: quantity.within(&plan).map(Cow::Owned),
            plan: Cow::Owned(plan),
            quantity,
            light: *light,
            cone,
            rules: Cow::Owned(rules),
        })
    }

    /// For a plan that is known already and films as a program has them.
    pub(crate) fn prepared(
        plan: &'a Plan,
        program: &'a Program,
        quantity: &'a Quantity,
        light: &Light,
    ) -> Result<Probe<'a>, OpticsError> {
        let cone = Cone::new(light)?;
        let sizes: &[usize] = if cone.is_some() { &NODES } else { &[] };
        let rules = sizes.iter().map(|&size| (size, gauss_legendre(size))).collect();
        Ok(Probe {
            plan: Cow::Borrowed(plan),
            program: Cow::Borrowed(program),
            quantity,
            within: quantity.within(plan).map(Cow::Owned),
            light: *light,
            cone,
            rules: Cow::Owned(rules),
        })
    }

    /// The same under a beam of another angle.
    pub(crate) fn at_angle(&self, angle_rad: f64) -> Result<Probe<'_>, OpticsError> {
        let light = Light { angle_rad, ..self.light };
        Ok(Probe {
            plan: Cow::Borrowed(&self.plan),
            program: Cow::Borrowed(&self.program),
            quantity: self.quantity,
            within: self.within.as_deref().map(Cow::Borrowed),
            cone: Cone::new(&light)?,
            light,
            rules: Cow::Borrowed(&self.rules),
        })
    }

    /// The value at a vacuum wavelength in nm.
    pub(crate) fn at(&self, wavelength_nm: f64) -> Result<f64, OpticsError> {
        Ok(self.values(&[wavelength_nm])?[0])
    }

    /// Whether the values come out of the kernel that also tells N and D.
    pub(crate) fn is_plain(&self) -> bool {
        self.cone.is_none() && !matches!(self.quantity, Quantity::Phase(..) | Quantity::PeakField)
    }

    /// The values at vacuum wavelengths in nm.
    pub(crate) fn values(&self, wavelengths_nm: &[f64]) -> Result<Vec<f64>, OpticsError> {
        let each = |of: &dyn Fn(f64) -> Result<f64, OpticsError>| {
            wavelengths_nm.iter().map(|wavelength_nm| of(*wavelength_nm)).collect()
        };
        match *self.quantity {
            Quantity::Phase(outgoing, kind) => {
                return each(&|nm| phase(&self.plan, &self.light, outgoing, kind, nm));
            }
            Quantity::PeakField => return each(&|nm| Ok(peak(&self.plan, &self.light, nm)?.value)),
            _ => {}
        }
        let points = Points::new(&self.plan, wavelengths_nm)?;
        self.values_at(&points)
    }

    /// The values of a quantity in power at points.
    pub(crate) fn values_at(&self, points: &Points) -> Result<Vec<f64>, OpticsError> {
        match &self.cone {
            None => self.values_under(&Beam::new(&self.plan, points, &[self.light.angle_rad])?, points),
            Some(cone) => self.told(points, &self.cones(cone, points)?),
        }
    }

    /// The values at points under the parallel beam that this light is, prepared already.
    pub(crate) fn values_under(&self, beam: &Beam, points: &Points) -> Result<Vec<f64>, OpticsError> {
        let shares = self.light.polarisation.shares();
        self.told_plainly(points, beam, &[self.light.angle_rad], shares)
    }

    /// The values of a quantity at points, each under one ray.
    fn told_plainly(
        &self,
        points: &Points,
        beam: &Beam,
        angles_rad: &[f64],
        shares: [f64; 2],
    ) -> Result<Vec<f64>, OpticsError> {
        if *self.quantity != Quantity::OpticalDensity {
            let mut values = Vec::with_capacity(points.blocks() * WIDTH);
            let mut sound = [0.0; WIDTH];
            let (modes, within) = (Probe::modes(shares), self.within.as_deref());
            beam.outcomes(&self.program, points, modes, within, |outcomes| {
                self.add_up(shares, outcomes, &mut values, &mut sound);
            });
            if sound.iter().sum::<f64>().is_finite() {
                values.truncate(points.count());
                return Ok(values);
            }
        }
        // Where a number was lost this way says at which point.
        let tallies = self.tallies(points, beam, angles_rad, shares)?;
        self.told(points, &tallies)
    }

    /// The values of a quantity that is no logarithm from what the kernel found; `sound` stays finite while all numbers are.
    pub(crate) fn add_up(
        &self,
        shares: [f64; 2],
        outcomes: &[[Outcome; 2]],
        values: &mut Vec<f64>,
        sound: &mut [f64; WIDTH],
    ) {
        for outcome in outcomes {
            let mut sum = [0.0; WIDTH];
            for &mode in Probe::modes(shares) {
                let outcome = &outcome[mode];
                let row = self.quantity.row(outcome);
                for lane in 0..WIDTH {
                    sum[lane] += shares[mode] * row[lane];
                    sound[lane] += outcome.reflectance.0[lane] + outcome.passed.0[lane];
                }
            }
            values.extend(sum);
        }
    }

    /// The values at one vacuum wavelength in nm under beams of several angles.
    pub(crate) fn over_angles(
        &self,
        wavelength_nm: f64,
        angles_rad: &[f64],
    ) -> Result<Vec<f64>, OpticsError> {
        if !self.is_plain() || angles_rad.is_empty() {
            return angles_rad.iter().map(|angle| self.at_angle(*angle)?.at(wavelength_nm)).collect();
        }
        let points = Points::new(&self.plan, &[wavelength_nm])?.repeated(angles_rad.len());
        let beam = Beam::new(&self.plan, &points, angles_rad)?;
        self.told_plainly(&points, &beam, angles_rad, self.light.polarisation.shares())
    }

    /// The quantity itself from what adds up.
    pub(crate) fn told(&self, points: &Points, tallies: &[Tally]) -> Result<Vec<f64>, OpticsError> {
        let value = |(at, tally): (usize, &Tally)| self.quantity.value(*tally, points.wavelength(at));
        tallies.iter().enumerate().map(value).collect()
    }

    /// Which polarisations have a share.
    pub(crate) fn modes(shares: [f64; 2]) -> &'static [usize] {
        match shares {
            [_, 0.0] => &[0],
            [0.0, _] => &[1],
            _ => &[0, 1],
        }
    }

    /// What adds up of rays of one angle, or of one for each point.
    fn rays(&self, points: &Points, angles_rad: &[f64], shares: [f64; 2]) -> Result<Vec<Tally>, OpticsError> {
        self.tallies(points, &Beam::new(&self.plan, points, angles_rad)?, angles_rad, shares)
    }

    /// The same for a beam that is prepared.
    fn tallies(
        &self,
        points: &Points,
        beam: &Beam,
        angles_rad: &[f64],
        shares: [f64; 2],
    ) -> Result<Vec<Tally>, OpticsError> {
        let modes = Probe::modes(shares);
        let mut tallies = Vec::with_capacity(points.blocks() * WIDTH);
        beam.outcomes(&self.program, points, modes, self.within.as_deref(), |outcomes| {
            for outcome in outcomes {
                tallies.extend((0..WIDTH).map(|lane| self.tally(outcome, lane, shares)));
            }
        });
        tallies.truncate(points.count());
        self.sound(points, angles_rad, tallies)
    }

    /// What adds up over the polarisations at a point of a block; none where a number was lost.
    fn tally(&self, outcome: &[Outcome; 2], lane: usize, shares: [f64; 2]) -> Option<Tally> {
        let mut sum = Tally::NONE;
        for &mode in Probe::modes(shares) {
            sum = sum.plus(shares[mode], self.quantity.tally(&outcome[mode], lane)?);
        }
        Some(sum)
    }

    /// An error at the first point where a number was lost.
    fn sound(
        &self,
        points: &Points,
        angles_rad: &[f64],
        tallies: Vec<Option<Tally>>,
    ) -> Result<Vec<Tally>, OpticsError> {
        let of = |(at, tally): (usize, Option<Tally>)| {
            let wavelength_nm = points.wavelength(at);
            let angle_rad = angles_rad[at.min(angles_rad.len() - 1)];
            tally.ok_or(OpticsError::NotFinite { wavelength_nm, angle_rad })
        };
        tallies.into_iter().enumerate().map(of).collect()
    }

    /// The values from outcomes that are there already, each point under one ray.
    pub(crate) fn told_of(
        &self,
        points: &Points,
        angles_rad: &[f64],
        shares: [f64; 2],
        outcomes: &[[Outcome; 2]],
    ) -> Result<Vec<f64>, OpticsError> {
        if *self.quantity != Quantity::OpticalDensity {
            let (mut values, mut sound) = (Vec::with_capacity(outcomes.len() * WIDTH), [0.0; WIDTH]);
            self.add_up(shares, outcomes, &mut values, &mut sound);
            if sound.iter().sum::<f64>().is_finite() {
                values.truncate(points.count());
                return Ok(values);
            }
        }
        let each = (0..points.count()).map(|at| self.tally(&outcomes[at / WIDTH], at % WIDTH, shares));
        let tallies = self.sound(points, angles_rad, each.collect())?;
        self.told(points, &tallies)
    }

    /// The rays that the light consists of, each with its shares of s and p: of a cone, those of one fixed rule.
    pub(crate) fn all_rays(&self) -> Vec<(f64, [f64; 2])> {
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

    /// What adds up over a whole cone, at every point.
    fn cones(&self, cone: &Cone, points: &Points) -> Result<Vec<Tally>, OpticsError> {
        let mut total = vec![Tally::NONE; points.count()];
        for stretch in cone.stretches() {
            // Where it has not settled yet.
            let mut open: Vec<usize> = (0..points.count()).collect();
            let mut before: Vec<Option<Tally>> = vec![None; points.count()];
            for rule in self.rules.values() {
                if open.is_empty() {
                    break;
                }
                let some = points.some(&open);
                let mut sums = vec![Tally::NONE; open.len()];
                for &(x, weight) in rule {
                    let ray = cone.ray(stretch, x);
                    let found = self.rays(&some, &[ray.angle_rad], ray.shares)?;
                    sums.iter_mut().zip(found).for_each(|(sum, tally)| *sum = sum.plus(weight, tally));
                }
                let mut left = Vec::new();
                for (&point, sum) in open.iter().zip(sums) {
                    if before[point].is_some_and(|before| differ(before, sum) <= SETTLED) {
                        total[point] = total[point].plus(1.0, sum);
                    } else {
                        left.push(point);
                    }
                    before[point] = Some(sum);
                }
                open = left;
            }
            for point in open {
                total[point] = total[point].plus(1.0, self.pieces(cone, stretch, &points.some(&[point]))?);
            }
        }
        Ok(total)
    }

    /// The same at one point by pieces, halved until each has settled: for resonances that are narrow in angle.
    fn pieces(&self, cone: &Cone, stretch: Stretch, point: &Points) -> Result<Tally, OpticsError> {
        let wavelength_nm = point.wavelength(0);
        let along = Along::Angle { wavelength_nm };
        let mesh = Mesh::build(self, true, along, cone.range_rad())?;
        let mut ends = vec![-1.0];
        ends.extend(mesh.points().map(|angle| cone.place(stretch, angle)).filter(|x| x.abs() < 1.0));
        ends.push(1.0);
        let rule = &self.rules[&NODES[0]];
        // All nodes of some pieces at once.
        let gauss = |pieces: &[(f64, f64)]| -> Result<Vec<Tally>, OpticsError> {
            let mut rays = Vec::with_capacity(pieces.len() * rule.len());
            for &(lo, hi) in pieces {
                let (middle, half) = (0.5 * (lo + hi), 0.5 * (hi - lo));
                rays.extend(
                    rule.iter().map(|&(x, weight)| (weight * half, cone.ray(stretch, middle + half * x))),
                );
            }
            let angles: Vec<f64> = rays.iter().map(|ray| ray.1.angle_rad).collect();
            let points = point.repeated(angles.len());
            let both = |mode: usize| {
                let shares = [f64::from(mode == 0), f64::from(mode == 1)];
                self.rays(&points, &angles, shares)
            };
            let (s, p) = (both(0)?, both(1)?);
            let each = rays.iter().zip(s.iter().zip(&p)).map(|((weight, ray), (s, p))| {
                Tally::NONE.plus(weight * ray.shares[0], *s).plus(weight * ray.shares[1], *p)
            });
            let each: Vec<Tally> = each.collect();
            let sum = |some: &[Tally]| some.iter().fold(Tally::NONE, |sum, tally| sum.plus(1.0, *tally));
            Ok(each.chunks(rule.len()).map(sum).collect())
        };
        let pieces: Vec<(f64, f64)> = ends.windows(2).map(|ends| (ends[0], ends[1])).collect();
        let mut open: Vec<((f64, f64), Tally)> = pieces.iter().copied().zip(gauss(&pieces)?).collect();
        let mut total = Tally::NONE;
        for depth in 0.. {
            let halves: Vec<(f64, f64)> = open
                .iter()
                .flat_map(|&((lo, hi), _)| [(lo, 0.5 * (lo + hi)), (0.5 * (lo + hi), hi)])
                .collect();
            let found = gauss(&halves)?;
            let mut next = Vec::new();
            for ((&((lo, hi), whole), parts), tallies) in
                open.iter().zip(halves.chunks(2)).zip(found.chunks(2))
            {
                let both = Tally::NONE.plus(1.0, tallies[0]).plus(1.0, tallies[1]);
                if depth > 40 || differ(whole, both) <= SETTLED * (hi - lo).max(1e-3) {
                    total = total.plus(1.0, both);
                } else {
                    next.extend(parts.iter().copied().zip(tallies.iter().copied()));
                }
            }
            open = next;
            if open.is_empty() {
                break;
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
