//! The points at which a stack is evaluated together, in blocks of as many as the widest processor takes at once.

use num_complex::Complex64;
use pulp::Simd;

use crate::error::{IndexError, OpticsError};
use crate::lanes::Lanes;
use crate::plan::Plan;

/// How many points a block has.
pub(crate) const WIDTH: usize = 8;

/// One value at each point of a block.
#[derive(Clone, Copy, Debug, PartialEq)]
#[repr(align(64))]
pub(crate) struct Row(pub(crate) [f64; WIDTH]);

/// In how many parts, each as wide as a register, a block is gone through.
#[inline(always)]
pub(crate) const fn parts<S: Simd>() -> usize {
    WIDTH / Lanes::<S>::COUNT
}

impl Row {
    pub(crate) const ZERO: Row = Row([0.0; WIDTH]);

    /// One part of the row.
    #[inline(always)]
    pub(crate) fn load<S: Simd>(&self, simd: S, part: usize) -> Lanes<S> {
        Lanes::load(simd, &self.0, part)
    }

    /// Into one part of the row.
    #[inline(always)]
    pub(crate) fn store<S: Simd>(&mut self, part: usize, value: Lanes<S>) {
        value.store(&mut self.0, part);
    }
}

/// Vacuum wavelengths with the indices of a stack's materials and mixtures there. The last block is filled up with copies of the
/// last point.
#[derive(Clone, Debug)]
pub(crate) struct Points {
    count: usize,
    media: usize,
    wavelengths: Vec<Row>,
    /// n and k by block, and by material and mixture within it.
    indices: Vec<[Row; 2]>,
    /// Which of them take no power anywhere in the block.
    lossless: Vec<bool>,
}

impl Points {
    /// # Errors
    /// A material without constants at one of the wavelengths; an incident medium that absorbs.
    pub(crate) fn new(plan: &Plan, wavelengths_nm: &[f64]) -> Result<Points, OpticsError> {
        let media = plan.pure();
        let blocks = wavelengths_nm.len().div_ceil(WIDTH);
        let mut points = Points {
            count: wavelengths_nm.len(),
            media,
            wavelengths: Vec::with_capacity(blocks),
            indices: vec![[Row::ZERO; 2]; blocks * media],
            lossless: Vec::new(),
        };
        for some in wavelengths_nm.chunks(WIDTH) {
            let last = some[some.len() - 1];
            points.wavelengths.push(Row(std::array::from_fn(|at| some.get(at).copied().unwrap_or(last))));
        }
        for (medium, index) in plan.materials.iter().enumerate() {
            let failed = |cause: IndexError| OpticsError::Material { index: index.clone(), cause };
            for block in 0..blocks {
                let rows = &mut points.indices[block * media + medium];
                index.at_all(&points.wavelengths[block].0, rows).map_err(failed)?;
            }
        }
        points.check_incident()?;
        if plan.materials.len() < media {
            points.mix(plan)?;
        }
        Ok(points.finished())
    }

    /// With what follows from the indices.
    fn finished(mut self) -> Points {
        self.lossless = self.indices.iter().map(|[_, k]| k.0 == [0.0; WIDTH]).collect();
        self
    }

    /// How many points there are.
    pub(crate) fn count(&self) -> usize {
        self.count
    }

    pub(crate) fn blocks(&self) -> usize {
        self.wavelengths.len()
    }

    /// The wavelengths of a block, nm.
    pub(crate) fn wavelengths(&self, block: usize) -> &Row {
        &self.wavelengths[block]
    }

    /// The wavelength of a point, nm.
    pub(crate) fn wavelength(&self, point: usize) -> f64 {
        self.wavelengths[point / WIDTH].0[point % WIDTH]
    }

    /// The first point so many times.
    pub(crate) fn repeated(&self, count: usize) -> Points {
        let first = |row: &Row| Row([row.0[0]; WIDTH]);
        let blocks = count.div_ceil(WIDTH);
        let indices: Vec<[Row; 2]> =
            self.indices[..self.media].iter().map(|[n, k]| [first(n), first(k)]).collect();
        Points {
            count,
            media: self.media,
            wavelengths: vec![first(&self.wavelengths[0]); blocks],
            indices: indices.repeat(blocks),
            lossless: Vec::new(),
        }
        .finished()
    }

    /// Some of the points, by their numbers.
    pub(crate) fn some(&self, chosen: &[usize]) -> Points {
        let blocks = chosen.len().div_ceil(WIDTH);
        let mut points = Points {
            count: chosen.len(),
            media: self.media,
            wavelengths: Vec::with_capacity(blocks),
            indices: Vec::with_capacity(blocks * self.media),
            lossless: Vec::new(),
        };
        for some in chosen.chunks(WIDTH) {
            let of = |lane: usize| some[lane.min(some.len() - 1)];
            points.wavelengths.push(Row(std::array::from_fn(|lane| self.wavelength(of(lane)))));
            for medium in 0..self.media {
                let part = |part: usize| {
                    Row(std::array::from_fn(|lane| {
                        self.index(of(lane) / WIDTH, medium)[part].0[of(lane) % WIDTH]
                    }))
                };
                points.indices.push([part(0), part(1)]);
            }
        }
        points.finished()
    }

    /// n and k of a material or mixture over a block.
    pub(crate) fn index(&self, block: usize, medium: usize) -> &[Row; 2] {
        &self.indices[block * self.media + medium]
    }

    /// Whether a material or mixture takes no power anywhere in a block; of a mean of two it is not told.
    #[inline(always)]
    pub(crate) fn is_lossless(&self, block: usize, medium: usize) -> bool {
        medium < self.media && self.lossless[block * self.media + medium]
    }

    /// Whether none of them does, but for the half-space behind.
    pub(crate) fn all_lossless(&self, block: usize, exit: usize) -> bool {
        (0..self.media).all(|medium| medium == exit || self.is_lossless(block, medium))
    }

    /// N of a material or mixture at a point.
    pub(crate) fn at(&self, point: usize, medium: usize) -> Complex64 {
        let [n, k] = self.index(point / WIDTH, medium);
        Complex64::new(n.0[point % WIDTH], k.0[point % WIDTH])
    }

    /// The same points with the indices of some materials greater by dn each.
    pub(crate) fn shift(&mut self, medium: usize, dn: f64) {
        for block in 0..self.blocks() {
            self.indices[block * self.media + medium][0].0.iter_mut().for_each(|n| *n += dn);
        }
    }

    /// # Errors
    /// Where a material is no longer one that can be.
    pub(crate) fn check(&self, medium: usize) -> Result<(), IndexError> {
        for point in 0..self.count {
            let index = self.at(point, medium);
            if index.re <= 0.0 {
                let (wavelength_nm, n, k) = (self.wavelength(point), index.re, index.im);
                return Err(IndexError::NotPhysical { wavelength_nm, n, k });
            }
        }
        Ok(())
    }

    fn check_incident(&self) -> Result<(), OpticsError> {
        for point in 0..self.count {
            let k = self.at(point, 0).im;
            if k > 0.0 {
                let wavelength_nm = self.wavelengths[point / WIDTH].0[point % WIDTH];
                return Err(OpticsError::AbsorbingIncident { wavelength_nm, k });
            }
        }
        Ok(())
    }

    /// Fills in the mixtures.
    fn mix(&mut self, plan: &Plan) -> Result<(), OpticsError> {
        for block in 0..self.blocks() {
            for lane in 0..WIDTH {
                let point = block * WIDTH + lane;
                let mut indices: Vec<Complex64> =
                    (0..plan.materials.len()).map(|medium| self.at(point, medium)).collect();
                plan.mix(&mut indices, self.wavelengths[block].0[lane])?;
                for (medium, index) in indices.iter().enumerate().skip(plan.materials.len()) {
                    let rows = &mut self.indices[block * self.media + medium];
                    (rows[0].0[lane], rows[1].0[lane]) = (index.re, index.im);
                }
            }
        }
        Ok(())
    }
}
