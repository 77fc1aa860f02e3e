//! Cycle.
