//! Predictions: whole runs of the shelf device in made-up and real hours.

pub mod air;
mod attendance;
mod bands;
mod calendar;
mod faults;
mod real;
mod regimes;
mod sums;
mod warnings;
