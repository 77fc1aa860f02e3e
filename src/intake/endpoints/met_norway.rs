//! MET Norway Locationforecast 2.0, `complete`: forecast for the next nine to ten days.
//!
//! Hourly for about two and a half days, then every six hours. Pressure is that at sea level only; there is no
//! radiation. An absent key is a missing value. At most four decimals of a degree are allowed.

use serde::Deserialize;

use super::adapter::{Adapter, AnswerFault, Parsed, Question, Wanted};
use super::answer::{read, served, unit, wrong};
use super::facts::{Facts, MET_NORWAY};
use super::report::Nature;
use super::span::{DAY_S, HOUR_S, HourSpan, hour_start};
use crate::config;
use crate::model::weather::{Label, Quantity, RawReadings, Unit, WeatherFault};

/// How far ahead it may be asked; the last of these days may be missing.
const AHEAD_DAYS: i64 = 10;
/// Unless the answer says when it expires [s].
const HOLDS_S: i64 = HOUR_S / 2;
/// Later hours come six apart, so that runs of five are missing between them.
const GAP_HOURS: usize = 6;

/// MET Norway as configured.
#[derive(Debug)]
pub struct MetNorway {
    config: config::MetNorway,
}

#[derive(Deserialize)]
struct Feature {
    geometry: Geometry,
    properties: Properties,
}

#[derive(Deserialize)]
struct Geometry {
    coordinates: Vec<f64>,
}

#[derive(Deserialize)]
struct Properties {
    meta: Meta,
    timeseries: Vec<Moment>,
}

#[derive(Deserialize)]
struct Meta {
    units: Units,
}

#[derive(Deserialize)]
struct Units {
    air_temperature: Option<String>,
    relative_humidity: Option<String>,
    dew_point_temperature: Option<String>,
    air_pressure_at_sea_level: Option<String>,
    wind_speed: Option<String>,
}

#[derive(Deserialize)]
struct Moment {
    time: String,
    data: Data,
}

#[derive(Deserialize)]
struct Data {
    instant: Instant,
}

#[derive(Deserialize)]
struct Instant {
    details: Details,
}

#[derive(Deserialize)]
struct Details {
    air_temperature: Option<f64>,
    relative_humidity: Option<f64>,
    dew_point_temperature: Option<f64>,
    air_pressure_at_sea_level: Option<f64>,
    wind_speed: Option<f64>,
}

impl MetNorway {
    /// With these settings.
    pub fn new(config: config::MetNorway) -> Self {
        Self { config }
    }
}

impl Adapter for MetNorway {
    fn facts(&self) -> &'static Facts {
        &MET_NORWAY
    }

    fn questions(&self, wanted: &Wanted) -> Result<Vec<Question>, Vec<WeatherFault>> {
        let now_unix_s = hour_start(wanted.now_unix_s);
        let known = HourSpan {
            from_unix_s: now_unix_s,
            to_unix_s: now_unix_s + AHEAD_DAYS * DAY_S,
        };
        super::coverage::check(&MET_NORWAY, &wanted.span, &known)?;
        let mut parameters = vec![
            ("lat", wanted.at.latitude_deg.to_string()),
            ("lon", wanted.at.longitude_deg.to_string()),
        ];
        if let Some(elevation_m) = wanted.elevation_m {
            parameters.push(("altitude", elevation_m.round().to_string()));
        }
        Ok(vec![Question {
            service: "met_norway locationforecast",
            url: self.config.url.clone(),
            parameters,
            key: None,
            at: wanted.at,
            span: wanted.span,
            nature: Nature::Forecast,
            holds_s: Some(HOLDS_S),
            weight: 1.0,
        }])
    }

    fn parse(&self, question: &Question, answer: &[u8]) -> Result<Parsed, AnswerFault> {
        let feature: Feature = read(answer)?;
        let [longitude, latitude, rest @ ..] = feature.geometry.coordinates.as_slice() else {
            return Err(wrong("the place has no two coordinates"));
        };
        Ok(Parsed {
            served: served(&question.at, *latitude, *longitude, rest.first().copied())?,
            readings: readings(&feature.properties)?,
        })
    }

    fn gap_hours(&self) -> Option<usize> {
        Some(GAP_HOURS)
    }
}

fn readings(properties: &Properties) -> Result<RawReadings, AnswerFault> {
    let (units, series) = (&properties.meta.units, &properties.timeseries);
    let time_unix_s = series
        .iter()
        .map(|moment| unix_s(&moment.time))
        .collect::<Result<Vec<i64>, _>>()?;
    let column = |name: &str, quantity, stated: &Option<String>, of: fn(&Details) -> Option<f64>| {
        column(series, name, quantity, stated.as_deref(), of)
    };
    let temperature = column(
        "air_temperature",
        Quantity::AirTemperature,
        &units.air_temperature,
        |at| at.air_temperature,
    )?;
    let humidity = column(
        "relative_humidity",
        Quantity::RelativeHumidity,
        &units.relative_humidity,
        |at| at.relative_humidity,
    )?;
    let dew_point = column(
        "dew_point_temperature",
        Quantity::DewPoint,
        &units.dew_point_temperature,
        |at| at.dew_point_temperature,
    )?;
    if humidity.is_none() && dew_point.is_none() {
        return Err(wrong("neither relative_humidity nor dew_point_temperature came"));
    }
    Ok(RawReadings {
        row: (1..=series.len() as u32).collect(),
        label: Label::Instant,
        air_temp_k: temperature.ok_or_else(|| wrong("air_temperature is missing throughout"))?,
        relative_humidity: humidity,
        dew_point_k: dew_point,
        pressure_pa: column(
            "air_pressure_at_sea_level",
            Quantity::SeaLevelPressure,
            &units.air_pressure_at_sea_level,
            |at| at.air_pressure_at_sea_level,
        )?,
        pressure_is_sea_level: true,
        wind_speed_m_s: column("wind_speed", Quantity::WindSpeed, &units.wind_speed, |at| at.wind_speed)?,
        time_unix_s,
        ..RawReadings::default()
    })
}

/// One variable over all moments; none where it is missing throughout.
fn column(
    series: &[Moment],
    name: &str,
    quantity: Quantity,
    stated: Option<&str>,
    of: fn(&Details) -> Option<f64>,
) -> Result<Option<Vec<f64>>, AnswerFault> {
    let found = series.iter().map(|moment| of(&moment.data.instant.details));
    if found.clone().all(|value| value.is_none()) {
        return Ok(None);
    }
    let unit: Unit = unit(quantity, name, stated)?;
    Ok(Some(
        found
            .map(|value| value.map_or(f64::NAN, |value| unit.to_si(value)))
            .collect(),
    ))
}

fn unix_s(text: &str) -> Result<i64, AnswerFault> {
    let instant = chrono::DateTime::parse_from_rfc3339(text);
    instant
        .map(|instant| instant.timestamp())
        .map_err(|_| wrong(format!("{} is no time", super::answer::quoted(text))))
}
