//! The least and the greatest value of a function on a mesh that shows its structure.
//!
//! Between the mesh's points the function is taken for the cubic through the four nearest, and the cubic for
//! as good as it would have been at the points themselves, each left out in turn. Wherever that leaves room
//! for something lower than the lowest value seen, another point is set; where the cubics are exact to the
//! last digits that count, what dips they show are closed in on.

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

/// The least and the greatest value over a mesh, its points ascending.
pub(super) fn along(
    points: &[f64],
    mut function: impl FnMut(f64) -> Result<f64, OpticsError>,
) -> Result<(Point, Point), OpticsError> {
    let mut values = Vec::with_capacity(points.len());
    for &x in points {
        values.push(Point { x, y: function(x)? });
    }
    let (values, least) = self::least(values, &mut function)?;
    let mirrored: Vec<Point> = values.iter().map(|point| Point { x: point.x, y: -point.y }).collect();
    let (_, most) = self::least(mirrored, &mut |x| function(x).map(|y| -y))?;
    Ok((least, Point { x: most.x, y: -most.y }))
}

/// The least value, and the values found on the way to it.
fn least(
    mut values: Vec<Point>,
    function: &mut dyn FnMut(f64) -> Result<f64, OpticsError>,
) -> Result<(Vec<Point>, Point), OpticsError> {
    let nothing = OpticsError::Band { band_nm: (f64::NAN, f64::NAN) };
    let mut best = *values.iter().min_by(|a, b| a.y.total_cmp(&b.y)).ok_or(nothing)?;
    if values.len() < 5 {
        // A range without width, or so narrow that rounding left no more points in it.
        return Ok((values, best));
    }
    let greatest = values.iter().map(|point| point.y).fold(f64::NEG_INFINITY, f64::max);
    // What rounding alone may do to values of this size is no structure.
    let rounding = (1e-13 * greatest.abs().max(best.y.abs())).max(1e-15);
    let believed = (BELIEVED * (greatest - best.y)).max(rounding);
    let mut bounds = bounds(&values);
    for _ in 0..PASSES {
        let doubtful =
            |bound: &Bound| bound.slack > believed && bound.least - bound.slack < best.y - believed;
        let mut finer = Vec::with_capacity(values.len());
        for (at, value) in values.iter().enumerate() {
            finer.push(*value);
            let Some(bound) = bounds.get(at).filter(|bound| doubtful(bound)) else { continue };
            let (lo, hi) = (value.x, values[at + 1].x);
            if hi - lo > 1e-11 * hi.abs() && bound.slack.is_finite() {
                let x = 0.5 * (lo + hi);
                finer.push(Point { x, y: function(x)? });
            }
        }
        if finer.len() == values.len() || finer.len() > MOST {
            break;
        }
        values = finer;
        best = values.iter().copied().fold(best, |best, point| if point.y < best.y { point } else { best });
        bounds = self::bounds(&values);
    }
    let mut dips: Vec<(f64, usize)> =
        bounds.iter().enumerate().map(|(at, bound)| (bound.least - bound.slack, at)).collect();
    dips.sort_by(|a, b| a.0.total_cmp(&b.0));
    for &(bound, at) in dips.iter().take(SEARCHES) {
        if bound >= best.y - 1e-2 * believed {
            break;
        }
        // The dip lies in this step, or just beyond the end of it that is the lower one.
        let last = values.len() - 1;
        let start = if values[at].y <= values[at + 1].y { at } else { at + 1 };
        let (lo, hi) =
            (values[start.saturating_sub(1).min(at)].x, values[(start + 1).min(last).max(at + 1)].x);
        let found = minimum(lo, values[start], hi, 1e-7 * (hi - lo), &mut *function)?;
        // An end of the range stays the place of an extreme that lies there but for rounding.
        if found.y < best.y - 1e-2 * believed {
            best = found;
        }
    }
    Ok((values, best))
}

/// What may lie between two neighbours: the least value of the cubic, and how far that may be wrong.
pub(super) struct Bound {
    pub(super) least: f64,
    pub(super) slack: f64,
}

/// For each step of at least five points.
pub(super) fn bounds(values: &[Point]) -> Vec<Bound> {
    let last = values.len() - 1;
    let missed: Vec<f64> = (0..=last)
        .map(|at| {
            // The five nearest points with this one among them, and this one left out.
            let first = at.saturating_sub(2).min(last - 4);
            let mut others = [values[first]; 4];
            for (other, place) in others.iter_mut().zip((first..first + 5).filter(|&place| place != at)) {
                *other = values[place];
            }
            (cubic(&others, values[at].x) - values[at].y).abs()
        })
        .collect();
    let bound = |at: usize| {
        let first = at.saturating_sub(1).min(last - 3);
        let four = [values[first], values[first + 1], values[first + 2], values[first + 3]];
        let (left, right) = (values[at], values[at + 1]);
        let inside = (1..8).map(|eighth| cubic(&four, left.x + (right.x - left.x) * f64::from(eighth) / 8.0));
        // Seven points of the cubic miss at most a sixteenth squared of its sag, which the slack holds.
        let least = inside.fold(left.y.min(right.y), f64::min);
        Bound { least, slack: missed[at].max(missed[at + 1]) + 0.02 * (left.y.min(right.y) - least) }
    };
    (0..last).map(bound).collect()
}

/// The cubic through four points, by Lagrange's formula.
fn cubic(points: &[Point; 4], x: f64) -> f64 {
    let term = |at: usize| {
        let others = points.iter().enumerate().filter(|&(other, _)| other != at);
        let share: f64 = others.map(|(_, other)| (x - other.x) / (points[at].x - other.x)).product();
        share * points[at].y
    };
    (0..4).map(term).sum()
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
        let (least, _) = along(&points, function).expect("values");
        let dense = (0..=1_000_000).map(|at| function(f64::from(at) * 1e-6).expect("a value"));
        assert!(least.y <= dense.fold(f64::INFINITY, f64::min) + 1e-12);
    }

    #[test]
    fn a_constant_needs_no_search() {
        let mut calls = 0;
        let points: Vec<f64> = (0..=16).map(|at| 400.0 + f64::from(at)).collect();
        let (least, most) = along(&points, |_| {
            calls += 1;
            Ok(0.25)
        })
        .expect("values");
        assert_eq!((least.y, most.y), (0.25, 0.25));
        assert!(calls < 300, "{calls}");
    }
}
