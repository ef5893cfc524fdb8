//! The least value of a function between two bounds.

use crate::error::OpticsError;

/// The golden section's smaller part.
const GOLDEN: f64 = 0.381_966_011_250_105_1;

/// A point and the function's value there.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Point {
    pub(crate) x: f64,
    pub(crate) y: f64,
}

/// The least value between `lo` and `hi`, from a point between them that is known already.
///
/// Parabolic steps, with golden sections where they don't help. Source: R. P. Brent, *Algorithms for
/// Minimization without Derivatives* (1973), chapter 5.
pub(crate) fn minimum(
    lo: f64,
    start: Point,
    hi: f64,
    tolerance: f64,
    mut function: impl FnMut(f64) -> Result<f64, OpticsError>,
) -> Result<Point, OpticsError> {
    let (mut lo, mut hi) = (lo, hi);
    let (mut best, mut second, mut third) = (start, start, start);
    let (mut step, mut step_before) = (0.0_f64, 0.0_f64);
    for _ in 0..100 {
        let middle = 0.5 * (lo + hi);
        let close = tolerance + 4.0 * f64::EPSILON * best.x.abs();
        if (best.x - middle).abs() <= 2.0 * close - 0.5 * (hi - lo) {
            break;
        }
        let mut golden = true;
        if step_before.abs() > close {
            let r = (best.x - second.x) * (best.y - third.y);
            let q = (best.x - third.x) * (best.y - second.y);
            let mut p = (best.x - third.x) * q - (best.x - second.x) * r;
            let mut q = 2.0 * (q - r);
            if q > 0.0 {
                p = -p;
            }
            q = q.abs();
            let limit = step_before;
            step_before = step;
            if p.abs() < (0.5 * q * limit).abs() && p > q * (lo - best.x) && p < q * (hi - best.x) {
                step = p / q;
                let next = best.x + step;
                if next - lo < 2.0 * close || hi - next < 2.0 * close {
                    step = close.copysign(middle - best.x);
                }
                golden = false;
            }
        }
        if golden {
            step_before = if best.x < middle { hi - best.x } else { lo - best.x };
            step = GOLDEN * step_before;
        }
        let x = best.x + if step.abs() >= close { step } else { close.copysign(step) };
        let next = Point { x, y: function(x)? };
        if next.y <= best.y {
            if next.x < best.x {
                hi = best.x
            } else {
                lo = best.x
            }
            (third, second, best) = (second, best, next);
        } else {
            if next.x < best.x {
                lo = next.x
            } else {
                hi = next.x
            }
            if next.y <= second.y || second.x == best.x {
                (third, second) = (second, next);
            } else if next.y <= third.y || third.x == best.x || third.x == second.x {
                third = next;
            }
        }
    }
    Ok(best)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn smooth_and_kinked_minima_are_found() {
        for place in [0.21, 0.5, 0.93] {
            let smooth = |x: f64| Ok((x - place).powi(2) + 0.1 * (x - place).powi(4));
            let start = Point { x: 0.5, y: smooth(0.5).expect("a value") };
            let found = minimum(0.0, start, 1.0, 1e-9, smooth).expect("a minimum");
            assert!((found.x - place).abs() < 1e-7);
            let kinked = |x: f64| Ok((x - place).abs());
            let start = Point { x: 0.5, y: kinked(0.5).expect("a value") };
            let found = minimum(0.0, start, 1.0, 1e-9, kinked).expect("a minimum");
            assert!((found.x - place).abs() < 1e-8);
        }
    }

    #[test]
    fn a_minimum_at_a_bound_is_approached() {
        let found = minimum(0.0, Point { x: 0.4, y: 0.4 }, 1.0, 1e-9, Ok).expect("a minimum");
        assert!(found.x < 1e-8);
    }
}
