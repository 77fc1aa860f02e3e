//! Use cases: resolve the device, fetch or read the weather, run the model. No words of any protocol.
//!
//! Reading order: [`PredictionOrder`] is what a caller wants, [`Weather`] fetches what it lacks, [`Predictions`] runs it, [`PredictionReport`] comes back,
//! [`PredictError`] says why not.

mod clock;
mod error;
mod inspect;
mod order;
mod places;
/// The records of the rooms below that callers of the service fill in and read.
pub mod records;
mod report;
mod run;
mod tables;
mod weather;

pub use clock::Clock;
pub use error::{HourLimit, OrderFault, PredictError, SourceTrouble, WeatherTrouble, trouble};
pub use inspect::{Inspected, Inspection, Told, inspect};
pub use order::{DeviceChoice, NamedPlace, PredictionOrder, Site, WeatherChecks, WeatherSource};
pub use places::Places;
pub use report::{PlaceOutcome, PredictionReport, StallPoint};
pub use run::{AVERAGED_HOURS_MAX, BAND_HOUR_SAMPLES_MAX, PLACES_MAX, Predictions, Progress, RESOLVED_HOURS_MAX};
pub use tables::{evaporants, example, examples, fluids};
pub use weather::{Climate, EndpointOrder, SourceReport, SourceState, SpanOrder, Weather};
