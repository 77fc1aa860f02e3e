//! The model, pure: no IO, no async, no HTTP, no clock; results carry no wire format.
//!
//! A room may use the rooms listed above it, never one below.

/// What was assumed and what was wrong: the two small records every room hands back.
pub mod notes;
/// Moist air: saturation, humidity measures, wet bulb, transport properties.
pub mod air;
/// Heat and mass transfer between surfaces and air.
pub mod transfer;
/// Working fluids and evaporants: one table, sources beside numbers.
pub mod fluids;
/// A device definition, checked as a whole, and what follows from it.
pub mod device;
/// The hourly series: time axis, units, gaps, plausibility.
pub mod weather;
/// From the weather outside to the air at the device: outdoors, a room, a glass case.
pub mod place;
/// One stretch of time of one device: felt, cup, resolved and averaged cycle.
pub mod cycle;
/// Hours become totals, spells, visits, bands, cautions.
pub mod prediction;
