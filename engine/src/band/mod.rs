//! Promises over whole bands: extremes that are found, not sampled past, and means that have settled.

mod against;
mod angles;
mod chebyshev;
mod cone;
mod crossings;
mod extremes;
mod hemisphere;
mod least;
mod mean;
mod mesh;
mod probe;
mod search;

pub use against::extremes_against;
pub use angles::extremes_over_angles;
pub use crossings::{Crossing, crossings};
pub use extremes::{Extreme, Extremes, extremes};
pub use hemisphere::hemispherical_mean;
pub use mean::{Mean, mean, means};
pub(crate) use probe::Probe;
pub use probe::{value, values};

/// The least value of a function between two bounds, and where it is; to 1e-8 of their distance.
pub(crate) fn minimum_between(
    lo: f64,
    hi: f64,
    function: impl Fn(f64) -> Result<f64, crate::error::OpticsError>,
) -> Result<(f64, f64), crate::error::OpticsError> {
    let middle = 0.5 * (lo + hi);
    let start = search::Point { x: middle, y: function(middle)? };
    let found = search::minimum(lo, start, hi, 1e-8 * (hi - lo), function)?;
    Ok((found.x, found.y))
}
