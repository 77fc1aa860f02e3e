//! What every benchmark runs on: an invented shelf device and an invented year of air, the same on every run.

use dipcast::model::air::Air;
use dipcast::model::cycle::{Forcing, HourForcing, Method};
use dipcast::model::device::{self, Device};
use dipcast::model::place::{AtDevice, Place, PlacedAir, place_air};
use dipcast::model::prediction::{Options, PredictionRequest};
use dipcast::model::weather::{HourlySeries, RawReadings, RegulariseOptions, regularise};

/// Hours of the invented year.
pub const HOURS: usize = 8760;

/// Air temperature [°C] and relative humidity [%] of an hour of the invented year: a season, a day and a slow weather on
/// top, so that some nights are too humid to run and some are frozen.
pub fn air(hour: usize) -> (f64, f64) {
    let turns = |period_h: f64| (hour as f64 / period_h * std::f64::consts::TAU).cos();
    let temp_c = 13.0 - 11.0 * turns(8760.0) - 4.0 * turns(24.0) + 3.0 * turns(131.0);
    let humidity_pct = (68.0 + 8.0 * turns(8760.0) + 16.0 * turns(24.0) + 14.0 * turns(173.0)).clamp(20.0, 100.0);
    (temp_c, humidity_pct)
}

/// The invented year as a CSV file of about 270 kB.
pub fn csv() -> String {
    let start = "2026-01-01T00:00:00Z"
        .parse::<jiff::Timestamp>()
        .expect("a valid instant");
    let mut text = String::from("time,air_temperature_c,relative_humidity_pct\n");
    for hour in 0..HOURS {
        let (temp_c, humidity_pct) = air(hour);
        let time = start + jiff::SignedDuration::from_hours(hour as i64);
        text += &format!("{time},{temp_c:.2},{humidity_pct:.1}\n");
    }
    text
}

/// The shelf example, checked.
pub fn device() -> Device {
    let example = device::examples()
        .into_iter()
        .find(|example| example.name == "shelf-180")
        .expect("the example exists");
    device::check(&example.definition)
        .expect("the example passes its check")
        .device
}

/// The invented year at the device, in a room's moving air.
pub fn placed_year() -> PlacedAir {
    let place = Place::AtDevice(AtDevice {
        air_speed_m_s: Some(0.1),
        shortwave_exposure: None,
    });
    place_air(&year(), &place, "place").expect("a sound place")
}

/// The invented year as the model takes it.
fn year() -> HourlySeries {
    let mut readings = RawReadings::hourly(1_767_225_600, HOURS);
    readings.air_temp_k = (0..HOURS).map(|hour| air(hour).0 + 273.15).collect();
    readings.relative_humidity = Some((0..HOURS).map(|hour| air(hour).1 / 100.0).collect());
    regularise(readings, &RegulariseOptions::default()).expect("the invented year is in order")
}

/// Air of a room at 22 °C, settled, moving at 0.1 m/s.
pub fn room(humidity: f64) -> Forcing {
    Forcing::still(Air::from_relative_humidity(295.15, humidity, 101_325.0), 0.1)
}

/// An hour in which the room's air goes from 50 to 52 % relative humidity.
pub fn hour() -> HourForcing {
    HourForcing {
        start: room(0.50),
        end: room(0.52),
        known: true,
    }
}

/// What a prediction of the invented year is asked for, without hourly columns.
pub fn request<'a>(device: &'a Device, air: &'a PlacedAir, method: Method, bands: bool) -> PredictionRequest<'a> {
    let options = Options {
        method,
        bands,
        ..Options::default()
    };
    PredictionRequest { device, air, options }
}
