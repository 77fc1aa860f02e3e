//! The rules of this repository, as ordinary tests: who may use whom, how large a file may grow, what may not be said.

mod arrows;
mod formulas;
mod layout;
mod purity;
mod references;
mod sizes;
mod source;
mod words;
