//! One stretch of time of one device: felt, cup, resolved and averaged cycle.

mod types;
pub use types::*;
