//! The resolved way: every cycle integrated event by event.

mod climb;
mod integrate;
mod stretch;

pub(super) use stretch::{advance, trace};
