//! Drives the built command.
