//! The recipe language: from text to findings.
