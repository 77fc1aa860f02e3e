//! dipcast predicts what an evaporation-driven tipping display does in given air: cycles, stall hours, water.
//!
//! Rooms in reading order; data flows down this list and never up.

pub mod config;
/// The only room that knows the web framework and the wire format.
pub mod http;
/// Bytes in: weather files become hourly series.
pub mod intake;
/// The physics: pure, no IO, no clock.
pub mod model;
/// Use cases: read the weather, run the model.
pub mod service;
pub mod telemetry;
