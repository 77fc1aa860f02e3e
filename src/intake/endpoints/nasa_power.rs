//! NASA POWER, hourly values of a point: history since 2001.
//!
//! Values are means of the hour that starts at their label. The service answers in local solar time unless UTC is asked
//! for. Missing values are the fill value of the answer's header, units stand beside each variable. Keys of hours come in
//! any order.

use std::collections::{BTreeMap, HashMap};

use serde::Deserialize;

use super::adapter::{Adapter, AnswerFault, Parsed, Question, Wanted};
use super::answer::{quoted, read, served, unit, wrong};
use super::facts::{Facts, NASA_POWER};
use super::report::Nature;
use super::span::{HourSpan, hour_start};
use super::years::{Days, by_year};
use crate::config;
use crate::model::weather::{Label, Quantity, RawReadings, Unit, WeatherFault};

/// 2001-01-01 [unix s].
const FROM_UNIX_S: i64 = 978_307_200;
const VARIABLES: &str = "T2M,RH2M,T2MDEW,PS,WS10M,ALLSKY_SFC_SW_DWN";

/// NASA POWER as configured.
#[derive(Debug)]
pub struct NasaPower {
    config: config::NasaPower,
}

#[derive(Deserialize)]
struct Answer {
    geometry: Geometry,
    properties: Properties,
    header: Header,
    parameters: HashMap<String, Described>,
}

#[derive(Deserialize)]
struct Geometry {
    coordinates: Vec<f64>,
}

#[derive(Deserialize)]
struct Properties {
    parameter: HashMap<String, BTreeMap<String, Option<f64>>>,
}

#[derive(Deserialize)]
struct Header {
    fill_value: f64,
    time_standard: Option<String>,
}

#[derive(Deserialize)]
struct Described {
    units: String,
}

impl NasaPower {
    /// With these settings.
    pub fn new(config: config::NasaPower) -> Self {
        Self { config }
    }

    fn question(&self, wanted: &Wanted, days: &Days) -> Question {
        let parameters = vec![
            ("parameters", VARIABLES.to_owned()),
            ("community", "RE".to_owned()),
            ("longitude", wanted.at.longitude_deg.to_string()),
            ("latitude", wanted.at.latitude_deg.to_string()),
            ("start", days.first.format("%Y%m%d").to_string()),
            ("end", days.last.format("%Y%m%d").to_string()),
            ("format", "JSON".to_owned()),
            ("time-standard", "UTC".to_owned()),
        ];
        Question {
            service: "nasa_power hourly",
            url: self.config.url.clone(),
            parameters,
            key: None,
            at: wanted.at,
            span: days.span,
            nature: Nature::Reanalysis,
            holds_s: days.holds_s(wanted.now_unix_s),
            weight: 1.0,
        }
    }
}

impl Adapter for NasaPower {
    fn facts(&self) -> &'static Facts {
        &NASA_POWER
    }

    fn questions(&self, wanted: &Wanted) -> Result<Vec<Question>, Vec<WeatherFault>> {
        let known = HourSpan {
            from_unix_s: FROM_UNIX_S,
            to_unix_s: hour_start(wanted.now_unix_s),
        };
        super::coverage::check(&NASA_POWER, &wanted.span, &known)?;
        Ok(by_year(&wanted.span)
            .iter()
            .map(|days| self.question(wanted, days))
            .collect())
    }

    fn parse(&self, question: &Question, answer: &[u8]) -> Result<Parsed, AnswerFault> {
        let answer: Answer = read(answer)?;
        let standard = answer.header.time_standard.as_deref();
        if standard.is_some_and(|standard| !standard.eq_ignore_ascii_case("UTC")) {
            return Err(wrong(format!(
                "times are in {}, though UTC was asked for",
                quoted(standard.unwrap_or_default())
            )));
        }
        let [longitude, latitude, rest @ ..] = answer.geometry.coordinates.as_slice() else {
            return Err(wrong("the place has no two coordinates"));
        };
        Ok(Parsed {
            served: served(&question.at, *latitude, *longitude, rest.first().copied())?,
            readings: readings(&answer)?,
        })
    }
}

fn readings(answer: &Answer) -> Result<RawReadings, AnswerFault> {
    let temperature = answer
        .properties
        .parameter
        .get("T2M")
        .ok_or_else(|| wrong("the column T2M is missing"))?;
    let hours: Vec<&str> = temperature.keys().map(String::as_str).collect();
    let time_unix_s = hours.iter().map(|hour| unix_s(hour)).collect::<Result<Vec<i64>, _>>()?;
    let column = |name: &str, quantity| column(answer, name, quantity, &hours);
    let (humidity, dew_point) = (
        column("RH2M", Quantity::RelativeHumidity)?,
        column("T2MDEW", Quantity::DewPoint)?,
    );
    if humidity.is_none() && dew_point.is_none() {
        return Err(wrong("neither RH2M nor T2MDEW came"));
    }
    Ok(RawReadings {
        row: (1..=hours.len() as u32).collect(),
        label: Label::MeanOfFollowingHour,
        air_temp_k: column("T2M", Quantity::AirTemperature)?.unwrap_or_default(),
        relative_humidity: humidity,
        dew_point_k: dew_point,
        pressure_pa: column("PS", Quantity::StationPressure)?,
        wind_speed_m_s: column("WS10M", Quantity::WindSpeed)?,
        shortwave_w_m2: column("ALLSKY_SFC_SW_DWN", Quantity::Shortwave)?,
        time_unix_s,
        ..RawReadings::default()
    })
}

/// A variable at these hours; none where the answer does not have it.
fn column(answer: &Answer, name: &str, quantity: Quantity, hours: &[&str]) -> Result<Option<Vec<f64>>, AnswerFault> {
    let Some(values) = answer.properties.parameter.get(name) else {
        return Ok(None);
    };
    let stated = answer.parameters.get(name).map(|described| described.units.as_str());
    let unit = match stated {
        // The energy of an hour is its mean power.
        Some("Wh/m^2" | "Wh/m2") if quantity == Quantity::Shortwave => Unit::WattPerSquareMetre,
        stated => unit(quantity, name, stated)?,
    };
    let missing = |value: f64| value == answer.header.fill_value;
    let value = |hour: &&str| match values.get(*hour) {
        Some(Some(value)) if !missing(*value) => unit.to_si(*value),
        _ => f64::NAN,
    };
    Ok(Some(hours.iter().map(value).collect()))
}

/// `YYYYMMDDHH` in UTC.
fn unix_s(hour: &str) -> Result<i64, AnswerFault> {
    // The library wants minutes beside hours.
    let instant = chrono::NaiveDateTime::parse_from_str(&format!("{hour}00"), "%Y%m%d%H%M");
    let fits = hour.len() == 10 && hour.bytes().all(|byte| byte.is_ascii_digit());
    match instant {
        Ok(instant) if fits => Ok(instant.and_utc().timestamp()),
        _ => Err(wrong(format!("{} is no hour", quoted(hour)))),
    }
}
