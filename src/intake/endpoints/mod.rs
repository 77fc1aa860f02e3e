//! Weather by coordinates.
//!
//! Reading order: [`Facts`] say what a source is, [`Coordinates`] and [`HourSpan`] what is asked of it, [`fixture`] is the
//! one that needs no network, [`FetchedWeather`] is what comes back.

mod coordinates;
mod facts;
/// Invented weather.
pub mod fixture;
mod report;
mod span;

pub use coordinates::Coordinates;
pub use facts::{FIXTURE, Facts};
pub use report::{FetchedWeather, Nature, Provenance, Served, Stretch};
pub use span::{DAY_S, HOUR_S, HourSpan, day_start, hour_start};
