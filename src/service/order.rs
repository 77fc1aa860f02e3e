//! What a caller wants predicted.

use bytes::Bytes;

use super::records::{Definition, FetchedWeather, Layout, Options, RawReadings};
use super::weather::EndpointOrder;

/// One device in one place over one series of readings.
#[derive(Debug, Clone)]
pub struct PredictionOrder {
    /// The device.
    pub device: DeviceChoice,
    /// Where it stands.
    pub place: Place,
    /// The readings.
    pub weather: WeatherSource,
    /// How strict to be with the readings.
    pub weather_checks: WeatherChecks,
    /// Everything that has a default.
    pub options: Options,
}

/// A device of the caller's own, or one of the examples by name.
#[derive(Debug, Clone)]
pub enum DeviceChoice {
    /// The caller's own.
    Own(Box<Definition>),
    /// An example by its name.
    Example(String),
}

/// Where the device stands: the readings are the air there.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct Place {
    /// Air speed at the device [m/s], 0-20; none takes a room's and says so.
    pub air_speed_m_s: Option<f64>,
    /// Elevation above mean sea level [m], for the pressure where none was read.
    pub elevation_m: Option<f64>,
}

/// Where the readings come from.
#[derive(Debug, Clone)]
pub enum WeatherSource {
    /// Given with the order.
    Readings(Box<RawReadings>),
    /// A CSV file, gzipped or not; without a layout the documented form is expected.
    Csv {
        /// The file.
        file: Bytes,
        /// What its columns mean.
        layout: Option<Box<Layout>>,
    },
    /// To be fetched by coordinates.
    Endpoint(Box<EndpointOrder>),
    /// Fetched by coordinates.
    Fetched(Box<FetchedWeather>),
}

impl WeatherSource {
    /// What was fetched, if it was.
    pub fn fetched(&self) -> Option<&FetchedWeather> {
        match self {
            Self::Fetched(fetched) => Some(fetched),
            _ => None,
        }
    }
}

/// How strict to be with the readings; none takes the weather room's default.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct WeatherChecks {
    /// Longest gap that is interpolated [h], 0-24.
    pub max_gap_hours: Option<usize>,
    /// Largest share of unknown hours that is taken, 0-1.
    pub max_unknown_share: Option<f64>,
    /// Take readings that look swapped or in another unit: flagged, not refused.
    pub accept_suspicious: bool,
}
