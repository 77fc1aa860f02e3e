//! What is asked for, and its way into an order of the service.

use bytes::Bytes;
use serde::{Deserialize, Serialize};
use utoipa::ToSchema;

use crate::http::error::{FaultItem, Problem, ProblemCode};
use crate::http::v1::device::{Device, lamp_schedule};
use crate::http::v1::options::PredictionOptions;
use crate::http::v1::weather::{UploadedWeather, Weather};
use crate::service;
use crate::service::{DeviceChoice, PredictionOrder, WeatherChecks, WeatherSource};

/// Name of the request's schema in the description.
pub const SCHEMA_NAME: &str = "PredictionRequest";

/// One device in one place over one series of readings. Exactly one of `device` and `device_example`.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct PredictionRequest {
    /// A device of your own.
    #[serde(default)]
    pub device: Option<Device>,
    /// Name of a device of `/v1/example-devices`.
    #[serde(default)]
    #[schema(examples("shelf-180"), max_length = 80)]
    pub device_example: Option<String>,
    /// Where it stands. Default: at the readings, in an ordinary room's air speed.
    #[serde(default)]
    pub place: Option<Place>,
    /// The readings.
    pub weather: Weather,
    /// Everything that has a default.
    #[serde(default)]
    pub options: Option<PredictionOptions>,
}

/// Where the device stands.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(untagged)]
#[schema(discriminator(property_name = "kind", mapping(
    ("at_device" = "#/components/schemas/PlaceAtDevice"),
)))]
pub enum Place {
    /// The readings are the air at the device.
    AtDevice(PlaceAtDevice),
}

/// The readings are the air at the device.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct PlaceAtDevice {
    /// `at_device`
    pub kind: AtDeviceKind,
    /// Air speed at the device [m/s]: case 0.05, room 0.1, shop floor 0.2, doorway 0.4. Default 0.1.
    #[serde(default)]
    #[schema(minimum = 0, maximum = 20)]
    pub air_speed_m_s: Option<f64>,
    /// Elevation above mean sea level [m], for the pressure where none was read. Default 0.
    #[serde(default)]
    #[schema(minimum = -430, maximum = 9000)]
    pub elevation_m: Option<f64>,
}

/// Tag of a place at the readings.
#[derive(Debug, Clone, Copy, Serialize, Deserialize, ToSchema)]
pub enum AtDeviceKind {
    /// `at_device`
    #[serde(rename = "at_device")]
    AtDevice,
}

impl PredictionRequest {
    /// The order, with the file of the form if there was one.
    ///
    /// # Errors
    /// What contradicts itself: two devices or none, a file without `upload` or the other way round.
    pub fn order(self, file: Option<Bytes>) -> Result<PredictionOrder, Problem> {
        let lamp_hours = self.device.as_ref().and_then(lamp_schedule);
        let device = choice(self.device, self.device_example);
        let weather = source(self.weather, file);
        match (device, weather) {
            (Ok(device), Ok((weather, weather_checks))) => Ok(PredictionOrder {
                device,
                place: place(self.place),
                weather,
                weather_checks,
                options: self.options.unwrap_or_default().record(lamp_hours),
            }),
            (device, weather) => {
                let faults = device
                    .err()
                    .into_iter()
                    .chain(weather.err().into_iter().flatten())
                    .collect();
                Err(Problem::with_faults(ProblemCode::InvalidRequest, faults))
            }
        }
    }
}

fn choice(own: Option<Device>, example: Option<String>) -> Result<DeviceChoice, FaultItem> {
    let wrong = |found: &str| {
        let detail = format!("give exactly one of device and device_example; found {found}");
        FaultItem::at("", "one_device", detail)
    };
    match (own, example) {
        (Some(device), None) => Ok(DeviceChoice::Own(Box::new(device.into()))),
        (None, Some(name)) => Ok(DeviceChoice::Example(name)),
        (Some(_), Some(_)) => Err(wrong("both")),
        (None, None) => Err(wrong("neither")),
    }
}

fn source(weather: Weather, file: Option<Bytes>) -> Result<(WeatherSource, WeatherChecks), Vec<FaultItem>> {
    let wrong = |detail: &str| vec![FaultItem::at("/weather/kind", "wrong_kind", detail)];
    match (weather, file) {
        (Weather::Inline(inline), None) => {
            let checks = inline.checks();
            let readings = inline.readings().map_err(|fault| vec![fault])?;
            Ok((WeatherSource::Readings(Box::new(readings)), checks))
        }
        (Weather::Upload(upload), Some(file)) => Ok(uploaded(*upload, file)),
        (Weather::Endpoint(endpoint), None) => {
            Ok((WeatherSource::Endpoint(Box::new(endpoint.order()?)), endpoint.checks()))
        }
        (Weather::Inline(_), Some(_)) => Err(wrong(
            "a file came in the part weather, but the kind is inline; set it to upload, or leave the part out",
        )),
        (Weather::Endpoint(_), Some(_)) => Err(wrong(
            "a file came in the part weather, but the kind is endpoint; set it to upload, or leave the part out",
        )),
        (Weather::Upload(_), None) => Err(wrong(
            "upload needs multipart/form-data with the file in the part weather; inline readings have kind inline",
        )),
    }
}

fn uploaded(upload: UploadedWeather, file: Bytes) -> (WeatherSource, WeatherChecks) {
    let checks = upload.checks();
    let layout = upload.layout.map(|layout| Box::new(layout.into()));
    (WeatherSource::Csv { file, layout }, checks)
}

fn place(place: Option<Place>) -> service::Place {
    match place {
        Some(Place::AtDevice(at)) => service::Place {
            air_speed_m_s: at.air_speed_m_s,
            elevation_m: at.elevation_m,
        },
        None => service::Place::default(),
    }
}
