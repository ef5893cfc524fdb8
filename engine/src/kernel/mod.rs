//! The engine's kernels: stacks evaluated at many points at once, on whichever vector instructions the processor has.
//!
//! What they compute is defined, one wavelength and angle at a time, by the scalar modules beside this folder, against which they
//! are tested.

#![expect(clippy::needless_range_loop, reason = "a polarisation's number goes into several lists at once")]

mod beam;
mod face;
mod gradient;
mod march;
mod media;
mod points;
mod program;
mod slopes;
mod spectrum;

pub(crate) use beam::Beam;
pub(crate) use media::{Media, Tilt};
pub(crate) use points::{Points, Row, WIDTH};
pub(crate) use program::Program;
pub(crate) use slopes::{Gradient, Wanted};
pub(crate) use spectrum::{Channel, Outcome, Spectrum, Within};

#[cfg(test)]
mod tests;
