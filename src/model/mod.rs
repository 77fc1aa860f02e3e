//! The model, pure: no IO, no async, no HTTP, no clock; results carry no wire format.
//!
//! A room may use the rooms listed above it, never one below.

/// Moist air: saturation, humidity measures, wet bulb, transport properties.
pub mod air;
/// One stretch of time of one device: felt, cup, resolved and averaged cycle.
pub mod cycle;
/// A device definition, checked as a whole, and what follows from it.
pub mod device;
/// Working fluids and evaporants: one table, sources beside numbers.
pub mod fluids;
/// What was assumed and what was wrong: the two small records every room hands back.
pub mod notes;
/// Hours become totals, spells, visits, bands, cautions.
pub mod prediction;
/// Heat and mass transfer between surfaces and air.
pub mod transfer;
/// The hourly series: time axis, units, gaps, plausibility.
pub mod weather;
