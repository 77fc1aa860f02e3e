//! dipcast predicts what an evaporation-driven tipping display does in given air: cycles, stall hours, water.
//!
//! Rooms in reading order; a room uses the rooms above it and never one below.

/// The physics: pure, no IO, no clock.
pub mod model;
/// Bytes in: weather files and weather services become hourly series.
pub mod intake;
/// What lasts: an embedded database.
pub mod store;
/// Use cases: fetch or read the weather, run the model.
pub mod service;
/// The only room that knows the web framework and the wire format.
pub mod http;
pub mod config;
pub mod telemetry;
