//! Made-up hours for the runs.

use dipcast::model::air::Air;
use dipcast::model::device::{Device, check, examples};
use dipcast::model::place::{AtDevice, Place, PlacedAir, place_air};
use dipcast::model::prediction::{Options, Prediction, PredictionError, PredictionRequest, predict};
use dipcast::model::weather::{HourlySeries, SeriesReport, Stamp};

/// 2026-01-01T00:00:00Z.
pub const START_UNIX_S: i64 = 1_767_225_600;

/// Hours from [`START_UNIX_S`], each given as °C and % RH, at 1013.25 hPa.
pub fn hours(readings: impl IntoIterator<Item = (f64, f64)>) -> HourlySeries {
    let readings = readings.into_iter();
    let airs: Vec<Air> = readings
        .map(|(c, pct)| Air::from_relative_humidity(c + 273.15, pct / 100.0, 101_325.0))
        .collect();
    HourlySeries {
        start_unix_s: START_UNIX_S,
        stamp: Stamp::Instant,
        temp_k: airs.iter().map(|air| air.temp_k).collect(),
        vapour_pressure_pa: airs.iter().map(|air| air.vapour_pressure_pa).collect(),
        pressure_pa: airs.iter().map(|air| air.pressure_pa).collect(),
        wind_speed_m_s: None,
        shortwave_w_m2: None,
        shortwave_stamp: Stamp::Instant,
        known: vec![true; airs.len()],
        report: SeriesReport::default(),
        assumptions: Vec::new(),
    }
}

/// So many hours of the same air.
pub fn steady(count: usize, celsius: f64, humidity_pct: f64) -> HourlySeries {
    hours(std::iter::repeat_n((celsius, humidity_pct), count))
}

/// A made-up year's weather in a shed: seasons, days, a damp spell every three weeks, frost in winter.
pub fn shed(count: usize) -> HourlySeries {
    hours((0..count).map(|hour| {
        let hour = hour as f64;
        let wave = |period_h: f64, phase_h: f64| (std::f64::consts::TAU * (hour - phase_h) / period_h).sin();
        let celsius = 9.0 - 11.0 * wave(8766.0, -2191.5) + 5.0 * wave(24.0, 9.0) + 3.0 * wave(137.0, 0.0);
        let damp = if wave(504.0, 0.0) > 0.9 { 25.0 } else { 0.0 };
        (celsius, (68.0 - 15.0 * wave(24.0, 9.0) + damp).min(100.0))
    }))
}

/// The shelf device.
pub fn shelf() -> Device {
    check(&examples().remove(0).definition)
        .expect("the example passes")
        .device
}

/// Where the readings were taken, in air of this speed.
pub fn in_moving_air(air_speed_m_s: f64) -> Place {
    Place::AtDevice(AtDevice {
        air_speed_m_s: Some(air_speed_m_s),
        shortwave_exposure: None,
    })
}

/// The air at a place.
pub fn placed(series: &HourlySeries, place: &Place) -> PlacedAir {
    place_air(series, place, "place").expect("a sound place")
}

/// Runs a device in a room's moving air.
pub fn run(device: &Device, series: &HourlySeries, options: Options) -> Result<Prediction, PredictionError> {
    let air = placed(series, &in_moving_air(0.1));
    let request = PredictionRequest {
        device,
        air: &air,
        options,
    };
    predict(&request, &|_, _| true)
}

/// The default options without bands.
pub fn plain() -> Options {
    Options {
        bands: false,
        ..Options::default()
    }
}
