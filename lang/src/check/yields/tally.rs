//! What adds up over the parts: counts, moments, quantiles, the worst part.

use super::Judgement;
use crate::check::sketch::Verdict;

/// Quantiles come from so many parts at most: the first ones, which fill the distributions evenly.
const KEPT: usize = 1 << 16;

/// One requirement over the parts so far.
pub(super) struct Tally {
    parts: f64,
    passed: u32,
    /// Sums of margin and of its square, and of margin × draw, all of margins that are numbers.
    sum: f64,
    squares: f64,
    products: Vec<f64>,
    units: Vec<f64>,
    values: Vec<f64>,
    pub(super) worst: (u32, Verdict),
}

impl Tally {
    pub(super) fn new(draws: usize) -> Tally {
        let worst = (0, Verdict { margin: f64::INFINITY, value: f64::NAN });
        Tally {
            parts: 0.0,
            passed: 0,
            sum: 0.0,
            squares: 0.0,
            products: vec![0.0; draws],
            units: vec![0.0; draws],
            values: Vec::new(),
            worst,
        }
    }

    pub(super) fn add(&mut self, part: &Judgement, verdict: Verdict) {
        self.passed += u32::from(verdict.margin >= 0.0);
        if verdict.margin < self.worst.1.margin {
            self.worst = (part.number, verdict);
        }
        if self.values.len() < KEPT && verdict.value.is_finite() {
            self.values.push(verdict.value);
        }
        if !verdict.margin.is_finite() {
            return;
        }
        self.parts += 1.0;
        self.sum += verdict.margin;
        self.squares += verdict.margin * verdict.margin;
        for ((product, sum), unit) in self.products.iter_mut().zip(&mut self.units).zip(&part.units) {
            *product += verdict.margin * unit;
            *sum += unit;
        }
    }

    pub(super) fn passed(&self) -> u32 {
        self.passed
    }

    /// The covariance of the margin with each draw: the sign of its slope, and the slope itself over the draw's variance.
    pub(super) fn slopes(&self) -> Vec<f64> {
        let parts = self.parts.max(1.0);
        let of = |(product, units): (&f64, &f64)| product / parts - self.sum / parts * units / parts;
        self.products.iter().zip(&self.units).map(of).collect()
    }

    /// The share of the margin's variance that each draw brings about, from its variance.
    pub(super) fn shares(&self, variances: &[f64]) -> Vec<f64> {
        let parts = self.parts.max(1.0);
        let variance = self.squares / parts - (self.sum / parts).powi(2);
        let share = |(covariance, own): (f64, &f64)| {
            if variance > 1e-24 { (covariance * covariance / own / variance).min(1.0) } else { 0.0 }
        };
        self.slopes().into_iter().zip(variances).map(share).collect()
    }

    /// The 5, 50 and 95 % quantiles of the value, between neighbours by the straight line.
    pub(super) fn quantiles(&self) -> Option<[f64; 3]> {
        let mut values = self.values.clone();
        values.sort_by(f64::total_cmp);
        let last = values.len().checked_sub(1)?;
        Some([0.05, 0.5, 0.95].map(|share| {
            let place = share * last as f64;
            let (below, above) = (place.floor() as usize, place.ceil() as usize);
            values[below] + (values[above] - values[below]) * (place - place.floor())
        }))
    }
}
