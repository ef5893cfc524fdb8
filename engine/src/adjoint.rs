//! How a coating's amplitudes and powers change with the thickness of every layer, exactly, from one pass there and one back.
//!
//! The matrix of a layer obeys dM/dd = A M, where A = −i k₀ [[0, u], [v, 0]] is what its fields obey along the depth. So
//! D = row · M₁ … Mₙ · pair changes with dⱼ by (row · M₁ … Mⱼ₋₁) · A · (Mⱼ … Mₙ · pair): the rows come from the front, the pairs
//! from behind. It is the reverse mode of differentiation of A. Griewank, A. Walther, *Evaluating Derivatives*, 2nd ed.
//! (2008), chapter 3, for a product of matrices.

#[cfg(test)]
use num_complex::Complex64;

#[cfg(test)]
use crate::coating::{Coating, Detail, Powers};
use crate::matrix::{Medium, Mode, Pair, Step};
use crate::number::Number;
#[cfg(test)]
use crate::real::Slope;

/// How N and D of r = N/D change with the thickness of a layer, over D, per nm.
#[derive(Clone, Debug)]
pub(crate) struct Change<N> {
    pub(crate) numerator: N,
    pub(crate) denominator: N,
}

/// A coating between two media, as light of one mode meets it.
pub(crate) struct Passage<'a, N> {
    /// In the order the light meets them.
    pub(crate) steps: Vec<&'a Step<N>>,
    pub(crate) entry: &'a Medium<N>,
    pub(crate) exit: &'a Medium<N>,
    /// k₀, 1/nm.
    pub(crate) wave_number: N,
    pub(crate) mode: Mode,
}

impl<N: Number> Passage<'_, N> {
    /// The fields at every face, from the front one to the last.
    pub(crate) fn pairs(&self) -> Vec<Pair<N>> {
        let mut pairs = vec![self.exit.wave(self.mode)];
        for step in self.steps.iter().rev() {
            let front = step.carry(&pairs[pairs.len() - 1], self.mode);
            pairs.push(front);
        }
        pairs.reverse();
        pairs
    }

    /// The fields at the front.
    pub(crate) fn front(&self) -> Pair<N> {
        let exit = self.exit.wave(self.mode);
        self.steps.iter().rev().fold(exit, |pair, step| step.carry(&pair, self.mode))
    }

    /// N and D at the front, in the scale of the fields there.
    pub(crate) fn amplitudes(&self, front: &Pair<N>) -> (N, N) {
        let arriving = self.entry.wave(self.mode);
        let (electric, magnetic) = (arriving.c * front.b.clone(), arriving.b * front.c.clone());
        (electric.clone() - magnetic.clone(), electric + magnetic)
    }

    /// The changes for every layer.
    pub(crate) fn changes(&self, pairs: &[Pair<N>]) -> Vec<Change<N>> {
        let arriving = self.entry.wave(self.mode);
        let (_, sum) = self.amplitudes(&pairs[0]);
        let start = |b: N, c: N| Pair { b, c, ln_scale: 0.0 };
        // A pull may move the size of a row into its logarithm: both have their own.
        let mut rows =
            [start(arriving.c.clone(), -arriving.b.clone()), start(arriving.c.clone(), arriving.b)];
        let mut changes = Vec::with_capacity(self.steps.len());
        for (step, pair) in self.steps.iter().zip(pairs) {
            let growth = step.growth(pair, &self.wave_number, self.mode);
            let [numerator, denominator] = rows.each_ref().map(|row| {
                let change = row.b.clone() * growth.b.clone() + row.c.clone() * growth.c.clone();
                let scale = (row.ln_scale + growth.ln_scale - pairs[0].ln_scale).exp();
                change.scale(scale) / sum.clone()
            });
            changes.push(Change { numerator, denominator });
            rows = rows.map(|row| step.pull(&row, self.mode));
        }
        changes
    }
}

#[cfg(test)]
impl Passage<'_, Complex64> {
    /// The coating's powers with their derivative in the thickness of each layer, per nm: one entry a layer.
    pub(crate) fn slopes(&self, detail: Detail) -> Vec<Powers<Slope>> {
        let base =
            Coating::solve(self.steps.iter().copied(), self.entry, self.exit, self.mode, detail).powers;
        let pairs = self.pairs();
        let (difference, sum) = self.amplitudes(&pairs[0]);
        let arriving = self.entry.wave(self.mode);
        let flux_in = arriving.flux();
        if flux_in <= 0.0 {
            return vec![Powers::dark(base.films.len()); self.steps.len()];
        }
        let amplitude = difference / sum;
        // The power flow of a field in the stack over that of the arriving wave alone.
        let share = 4.0 * (arriving.b * arriving.c).norm_sqr() / (flux_in * sum.norm_sqr());
        let flow =
            |at: usize, flux: f64| share * flux * (2.0 * (pairs[at].ln_scale - pairs[0].ln_scale)).exp();
        let of = |(layer, change): (usize, Change<Complex64>)| {
            let fade = -2.0 * change.denominator.re;
            let turn = change.numerator - amplitude * change.denominator;
            let with = |value: f64, slope: f64| Slope { value, slope };
            let films = if detail == Detail::Whole {
                Vec::new()
            } else {
                let inner = self.flux_slopes(layer, &pairs);
                let slope = |at: usize| {
                    flow(at, pairs[at].flux()) * fade + inner.get(at).map_or(0.0, |inner| flow(at, *inner))
                };
                let slopes: Vec<f64> = (0..pairs.len()).map(slope).collect();
                let film =
                    |at: usize| if self.steps[at].is_lossless() { 0.0 } else { slopes[at] - slopes[at + 1] };
                base.films.iter().enumerate().map(|(at, value)| with(*value, film(at))).collect()
            };
            Powers {
                reflectance: with(base.reflectance, 2.0 * (amplitude.conj() * turn).re),
                transmittance: with(base.transmittance, base.transmittance * fade),
                ln_transmittance: with(base.ln_transmittance, fade),
                films,
            }
        };
        self.changes(&pairs).into_iter().enumerate().map(of).collect()
    }

    /// How Re(B* C) changes at each face from the front to that of a layer, per nm of its thickness, in each face's own
    /// squared scale.
    fn flux_slopes(&self, layer: usize, pairs: &[Pair<Complex64>]) -> Vec<f64> {
        let mut change = self.steps[layer].growth(&pairs[layer], &self.wave_number, self.mode);
        let mut slopes = vec![0.0; layer + 1];
        for at in (0..=layer).rev() {
            if at < layer {
                change = self.steps[at].carry(&change, self.mode);
            }
            let own = &pairs[at];
            let scale = (change.ln_scale - own.ln_scale).exp();
            slopes[at] = (change.b.conj() * own.c + own.b.conj() * change.c).re * scale;
        }
        slopes
    }
}
