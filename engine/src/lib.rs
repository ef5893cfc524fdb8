//! The interference engine: what light does in a stack of films.
