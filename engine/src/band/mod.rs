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
pub use probe::value;
