//! Predictions: whole runs of the shelf device.

mod air;
mod sums;
