//! Weather by coordinates.
//!
//! Reading order: [`Facts`] say what a source is, [`Coordinates`] and [`HourSpan`] what is asked of it. An [`Adapter`] turns
//! what is wanted into [`Question`]s and reads the answers; there is one file a source ([`fixture`] needs no network).
//! [`Source`] asks within budget, deadline and patience; [`join`] makes one series of the answers, and [`FetchedWeather`]
//! is what comes back.

mod adapter;
mod answer;
mod breaker;
mod budget;
mod coordinates;
mod coverage;
mod error;
mod exchange;
mod facts;
/// Invented weather.
pub mod fixture;
mod headers;
mod join;
mod met_norway;
mod nasa_power;
mod open_meteo;
mod report;
mod source;
mod span;
mod years;

pub use adapter::{Adapter, AnswerFault, Parsed, Question, Wanted};
pub use budget::BudgetLeft;
pub use coordinates::Coordinates;
pub use error::FetchError;
pub use facts::{FIXTURE, Facts, MET_NORWAY, NASA_POWER, OPEN_METEO};
pub use join::{Piece, join};
pub use met_norway::MetNorway;
pub use nasa_power::NasaPower;
pub use open_meteo::OpenMeteo;
pub use report::{FetchedWeather, Nature, Provenance, Served, Stretch};
pub use source::{Answer, Asking, Past, Source};
pub use span::{DAY_S, HOUR_S, HourSpan, day_start, hour_start};
