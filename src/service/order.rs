//! What a caller wants predicted.

use bytes::Bytes;

use super::records::{Definition, FetchedWeather, Hints, Layout, Options, Place, RawReadings};
use super::weather::EndpointOrder;

/// One device over one series of readings, in one place or in several that are compared.
#[derive(Debug, Clone)]
pub struct PredictionOrder {
    /// The device.
    pub device: DeviceChoice,
    /// Where it stands.
    pub site: Site,
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

/// Where a device stands or may stand; all of it is one site with one weather.
#[derive(Debug, Clone, PartialEq)]
pub struct Site {
    /// Elevation above mean sea level [m], for the pressure where none was read.
    pub elevation_m: Option<f64>,
    /// The places, one or more; the first is the one predicted in full.
    pub places: Vec<NamedPlace>,
    /// Several places were asked for, even if there is only one.
    pub is_comparison: bool,
}

/// A place with a name for the answer.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct NamedPlace {
    /// The caller's own name.
    pub name: Option<String>,
    /// The place.
    pub place: Place,
}

impl Default for Site {
    fn default() -> Self {
        Self {
            elevation_m: None,
            places: vec![NamedPlace::default()],
            is_comparison: false,
        }
    }
}

impl Site {
    /// Where a place stands in the order, for messages.
    pub fn path(&self, place: usize) -> String {
        if self.is_comparison {
            format!("places/{place}")
        } else {
            "place".into()
        }
    }
}

/// Where the readings come from.
#[derive(Debug, Clone)]
pub enum WeatherSource {
    /// Given with the order.
    Readings(Box<RawReadings>),
    /// A CSV file, gzipped or not.
    Csv {
        /// The file.
        file: Bytes,
        /// What its columns mean; without one it is found out.
        layout: Option<Box<Layout>>,
        /// What is said about the file where it is found out.
        hints: Box<Hints>,
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
