//! The resolved way: every cycle integrated event by event.

mod climb;
mod integrate;
mod stretch;

#[cfg(test)]
pub(super) use stretch::{HeatBook, run};
pub(super) use stretch::{advance, trace};
