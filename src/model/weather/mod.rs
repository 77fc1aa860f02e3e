//! The hourly series: from readings as they come to hours the model can run on.
//!
//! Reading order: [`Quantity`] and [`Unit`] name what is read, [`RawReadings`] holds it as read, [`regularise`] lays it
//! on an hour grid, checks it and says what it did, [`HourlySeries`] is what the model runs on.

mod gaps;
mod grid;
mod humidity;
mod options;
mod order;
mod pressure;
mod readings;
mod regularise;
mod sanity;
mod screen;
mod series;
mod steps;
mod suspicion;
mod units;
/// Time zones: wall clock to instant and back.
pub mod zone;

pub use options::RegulariseOptions;
pub use pressure::station_pressure_pa;
pub use readings::{Label, RawReadings, WeatherFault};
pub use regularise::regularise;
pub use series::{Flag, HourlySeries, ROWS_NAMED, SeriesReport, Stamp};
pub use units::{Quantity, Unit};
