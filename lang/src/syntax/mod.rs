//! From text to tree.

pub mod ast;
