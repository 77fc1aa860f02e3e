//! What is asked for, and its way into an order of the service.

use bytes::Bytes;
use serde::{Deserialize, Serialize};
use utoipa::ToSchema;

use crate::http::error::{FaultItem, Problem, ProblemCode};
use crate::http::v1::device::{Device, lamp_schedule};
use crate::http::v1::options::PredictionOptions;
use crate::http::v1::place::Place;
use crate::http::v1::weather::{UploadedWeather, Weather};
use crate::service::{DeviceChoice, PredictionOrder, Site, WeatherChecks, WeatherSource};

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
    /// In place of `place`: several places of one site to compare. The first is answered in full, all of them side by
    /// side in `comparison`.
    #[serde(default)]
    #[schema(min_items = 1, max_items = 16)]
    pub places: Option<Vec<Place>>,
    /// The readings.
    pub weather: Weather,
    /// Everything that has a default.
    #[serde(default)]
    pub options: Option<PredictionOptions>,
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
        let site = site(self.place, self.places);
        match (device, weather, site) {
            (Ok(device), Ok((weather, weather_checks)), Ok(site)) => Ok(PredictionOrder {
                device,
                site,
                weather,
                weather_checks,
                options: self.options.unwrap_or_default().record(lamp_hours),
            }),
            (device, weather, site) => {
                let faults = device
                    .err()
                    .into_iter()
                    .chain(weather.err().into_iter().flatten())
                    .chain(site.err())
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
        (Weather::Upload(upload), Some(file)) => uploaded(*upload, file).map_err(|fault| vec![fault]),
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

fn uploaded(upload: UploadedWeather, file: Bytes) -> Result<(WeatherSource, WeatherChecks), FaultItem> {
    if upload.layout.is_some() && upload.hints.is_some() {
        let detail = "hints and layout are both there; a layout says everything, so send one of them";
        return Err(FaultItem::at("/weather/hints", "one_of_two", detail));
    }
    let checks = upload.checks();
    let layout = upload.layout.map(|layout| Box::new(layout.into()));
    let hints = upload.hints.map(|hints| Box::new(hints.into())).unwrap_or_default();
    Ok((WeatherSource::Csv { file, layout, hints }, checks))
}

fn site(place: Option<Place>, places: Option<Vec<Place>>) -> Result<Site, FaultItem> {
    let is_comparison = places.is_some();
    let places = match (place, places) {
        (Some(_), Some(_)) => {
            let detail = "give place or places, not both; found both";
            return Err(FaultItem::at("/places", "place_and_places", detail));
        }
        (Some(place), None) => vec![place],
        (None, Some(places)) => places,
        (None, None) => return Ok(Site::default()),
    };
    let elevations: Vec<f64> = places.iter().flat_map(Place::elevations_m).collect();
    if let Some(other) = elevations.iter().find(|other| **other != elevations[0]) {
        let detail = format!(
            "one site has one elevation; found elevation_m {} and {other}. Give it once, or ask for each site in its own request",
            elevations[0]
        );
        let pointer = if is_comparison { "/places" } else { "/place" };
        return Err(FaultItem::at(pointer, "two_elevations", detail));
    }
    Ok(Site {
        elevation_m: elevations.first().copied(),
        places: places.into_iter().map(Into::into).collect(),
        is_comparison,
    })
}
