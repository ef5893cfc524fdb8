//! Promises over whole bands: extremes that are found, not sampled past, and means that have settled.

mod angles;
mod chebyshev;
mod cone;
mod extremes;
mod least;
mod mean;
mod mesh;
mod probe;
mod search;

pub use angles::extremes_over_angles;
pub use extremes::{Extreme, Extremes, extremes};
pub use mean::{Mean, mean, means};
pub use probe::value;
