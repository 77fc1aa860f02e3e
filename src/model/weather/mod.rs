//! The hourly series: from readings as they come to hours the model can run on.
//!
//! Reading order: [`Quantity`] and [`Unit`] name what is read, [`RawReadings`] holds it as read, [`regularise`] lays it
//! on an hour grid, checks it and says what it did, [`HourlySeries`] is what the model runs on.

mod readings;
mod series;
mod units;

pub use readings::{Label, RawReadings, WeatherFault};
pub use series::{Flag, HourlySeries, SeriesReport, Stamp};
pub use units::{Quantity, Unit};
