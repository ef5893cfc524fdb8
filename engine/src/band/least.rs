//! The least and the greatest value of a function on a mesh that shows its structure.
//!
//! Between the mesh's points the function is taken for the cubic through the four nearest, and the cubic for
//! as good as it would have been at the points themselves, each left out in turn. Wherever that leaves room
//! for something lower than the lowest value seen, or higher than the highest, another point is set; where the cubics are
//! exact to the last digits that count, what dips and crests they show are closed in on.

use super::search::{Point, minimum};
use crate::error::OpticsError;

/// The accuracy of cubics, in terms of the function's range, at which they are believed.
const BELIEVED: f64 = 1e-9;
/// How often the mesh may be made finer.
const PASSES: usize = 60;
/// How many dips are searched, at most.
const SEARCHES: usize = 64;
/// More points than this are beyond patience.
const MOST: usize = 1_000_000;

/// A function evaluated at several points at once.
pub(super) type Function<'a> = &'a mut dyn FnMut(&[f64]) -> Result<Vec<f64>, OpticsError>;

/// The function's values at points.
pub(super) fn valued(points: &[f64], function: Function<'_>) -> Result<Vec<Point>, OpticsError> {
    let values = function(points)?;
    Ok(points.iter().zip(values).map(|(x, y)| Point { x: *x, y }).collect())
}

/// The least and the greatest value over a mesh, its points ascending and with their values.
pub(super) fn along(mut values: Vec<Point>, function: Function<'_>) -> Result<(Point, Point), OpticsError> {
    let nothing = OpticsError::Band { band_nm: (f64::NAN, f64::NAN) };
    let mut least = *values.iter().min_by(|a, b| a.y.total_cmp(&b.y)).ok_or(nothing.clone())?;
    let mut most = *values.iter().rev().max_by(|a, b| a.y.total_cmp(&b.y)).ok_or(nothing)?;
    if values.len() < 5 {
        // A range without width, or so narrow that rounding left no more points in it.
        return Ok((least, most));
    }
    // What rounding alone may do to values of this size is no structure.
    let rounding = (1e-13 * most.y.abs().max(least.y.abs())).max(1e-15);
    let believed = (BELIEVED * (most.y - least.y)).max(rounding);
    let mut bounds = bounds(&values);
    for _ in 0..PASSES {
        let doubtful = |bound: &Bound| {
            bound.slack > believed
                && bound.slack.is_finite()
                && (bound.lowest() < least.y - believed || bound.highest() > most.y + believed)
        };
        let mut wanted = Vec::new();
        for (bound, step) in bounds.iter().zip(values.windows(2)) {
            let (lo, hi) = (step[0].x, step[1].x);
            if doubtful(bound) && hi - lo > 1e-11 * hi.abs() {
                wanted.push(0.5 * (lo + hi));
            }
        }
        if wanted.is_empty() || values.len() + wanted.len() > MOST {
            break;
        }
        let found = valued(&wanted, function)?;
        for point in &found {
            if point.y < least.y {
                least = *point;
            }
            if point.y > most.y {
                most = *point;
            }
        }
        values = merged(values, found);
        bounds = self::bounds(&values);
    }
    let least = closed_in(&values, &bounds, 1.0, least, believed, function)?;
    let most = closed_in(&values, &bounds, -1.0, most, believed, function)?;
    Ok((least, most))
}

/// Two ascending lists as one.
pub(super) fn merged(values: Vec<Point>, new: Vec<Point>) -> Vec<Point> {
    let mut all = Vec::with_capacity(values.len() + new.len());
    let mut new = new.into_iter().peekable();
    for value in values {
        while let Some(next) = new.next_if(|next| next.x < value.x) {
            all.push(next);
        }
        all.push(value);
    }
    all.extend(new);
    all
}

/// The least value (of the function times `sign`) after a search in every dip that the cubics show below the best one known.
fn closed_in(
    values: &[Point],
    bounds: &[Bound],
    sign: f64,
    best: Point,
    believed: f64,
    function: Function<'_>,
) -> Result<Point, OpticsError> {
    let turned = |point: Point| Point { y: sign * point.y, ..point };
    let mut best = turned(best);
    let reach = |bound: &Bound| if sign > 0.0 { bound.lowest() } else { -bound.highest() };
    let mut dips: Vec<(f64, usize)> = bounds
        .iter()
        .enumerate()
        .map(|(at, bound)| (reach(bound), at))
        .filter(|dip| dip.0 < best.y - 1e-2 * believed)
        .collect();
    dips.sort_by(|a, b| a.0.total_cmp(&b.0));
    for &(bound, at) in dips.iter().take(SEARCHES) {
        if bound >= best.y - 1e-2 * believed {
            break;
        }
        // The dip lies in this step, or just beyond the end of it that is the lower one.
        let last = values.len() - 1;
        let start = if sign * values[at].y <= sign * values[at + 1].y { at } else { at + 1 };
        let (lo, hi) =
            (values[start.saturating_sub(1).min(at)].x, values[(start + 1).min(last).max(at + 1)].x);
        let one = |x: f64| function(&[x]).map(|values| sign * values[0]);
        let found = minimum(lo, turned(values[start]), hi, 1e-7 * (hi - lo), one)?;
        // An end of the range stays the place of an extreme that lies there but for rounding.
        if found.y < best.y - 1e-2 * believed {
            best = found;
        }
    }
    Ok(turned(best))
}

/// What may lie between two neighbours: the least and the greatest value of the cubic, and how far those may be wrong.
#[derive(Clone, Copy, Debug)]
pub(super) struct Bound {
    least: f64,
    most: f64,
    /// Of the cubic itself.
    slack: f64,
    /// Of the seven points of it that were looked at, below and above: they miss at most a sixteenth squared of its sag.
    missed: (f64, f64),
}

impl Bound {
    pub(super) fn lowest(&self) -> f64 {
        self.least - self.slack - self.missed.0
    }

    pub(super) fn highest(&self) -> f64 {
        self.most + self.slack + self.missed.1
    }
}

/// For each step of at least five points, by Newton's divided differences.
pub(super) fn bounds(values: &[Point]) -> Vec<Bound> {
    let last = values.len() - 1;
    let difference = |lower: &[f64], order: usize| -> Vec<f64> {
        lower
            .windows(2)
            .enumerate()
            .map(|(at, pair)| (pair[1] - pair[0]) / (values[at + order].x - values[at].x))
            .collect()
    };
    let zeroth: Vec<f64> = values.iter().map(|point| point.y).collect();
    let first = difference(&zeroth, 1);
    let second = difference(&first, 2);
    let third = difference(&second, 3);
    let fourth = difference(&third, 4);
    // How far the cubic through the four others of the five nearest points misses each: the fourth difference times the
    // distances to them.
    let missed: Vec<f64> = (0..=last)
        .map(|at| {
            let from = at.saturating_sub(2).min(last - 4);
            let others = (from..from + 5).filter(|&other| other != at);
            (fourth[from] * others.map(|other| values[at].x - values[other].x).product::<f64>()).abs()
        })
        .collect();
    let bound = |at: usize| {
        let from = at.saturating_sub(1).min(last - 3);
        let (x0, x1, x2) = (values[from].x, values[from + 1].x, values[from + 2].x);
        let (left, right) = (values[at], values[at + 1]);
        let (lower, higher) = (left.y.min(right.y), left.y.max(right.y));
        let (mut least, mut most) = (lower, higher);
        for eighth in 1..8 {
            let x = left.x + (right.x - left.x) * f64::from(eighth) / 8.0;
            let inner = (third[from] * (x - x2) + second[from]) * (x - x1) + first[from];
            let y = inner * (x - x0) + zeroth[from];
            least = least.min(y);
            most = most.max(y);
        }
        let slack = missed[at].max(missed[at + 1]);
        Bound { least, most, slack, missed: (0.02 * (lower - least), 0.02 * (most - higher)) }
    };
    (0..last).map(bound).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_faint_dip_on_a_slope_is_found_between_wide_points() {
        // A rise of 1 with a wiggle whose dip at 0.35 is lower than the start by a ten-millionth only.
        let function = |x: f64| {
            let rise = (x - 0.2).max(0.0).powi(6);
            Ok(rise + 1e-3 * (6.0 * x).cos())
        };
        let points: Vec<f64> = (0..=16).map(|at| f64::from(at) / 16.0).collect();
        let mut all = |xs: &[f64]| xs.iter().map(|x| function(*x)).collect();
        let start = valued(&points, &mut all).expect("values");
        let (least, _) = along(start, &mut all).expect("values");
        let dense = (0..=1_000_000).map(|at| function(f64::from(at) * 1e-6).expect("a value"));
        assert!(least.y <= dense.fold(f64::INFINITY, f64::min) + 1e-12);
    }

    #[test]
    fn a_constant_needs_no_search() {
        let mut calls = 0;
        let points: Vec<f64> = (0..=16).map(|at| 400.0 + f64::from(at)).collect();
        let mut all = |xs: &[f64]| {
            calls += xs.len();
            Ok(vec![0.25; xs.len()])
        };
        let start = valued(&points, &mut all).expect("values");
        let (least, most) = along(start, &mut all).expect("values");
        assert_eq!((least.y, most.y), (0.25, 0.25));
        assert!(calls < 300, "{calls}");
    }
}
