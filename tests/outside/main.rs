//! What the engine says against values that this project did not make.
//!
//! The figures stand in `tests/reference/data`, made there by Python scripts with general-purpose libraries;
//! each test names the published source. Facts of the trade without a source are marked as common practice.

mod closed_forms;
mod colours;
mod cones;
mod data;
mod dispersion;
mod extremes;
mod graded;
mod handbook;
mod hemispheres;
mod means;
mod neutron;
mod phases;
mod promises;
mod spectra;
mod stacks;
mod tables;
mod trade;
mod yields;
