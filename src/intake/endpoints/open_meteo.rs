//! Open-Meteo: forecast, reanalysis and past forecasts; one form of answer from three addresses.
//!
//! Hours older than a week come from the archive, in calendar years one after another, since the reanalysis lags by about
//! five days; the last week and the forecast come in one answer of the forecast. Times are asked for as unix seconds in
//! GMT, never local: one offset would be laid on the whole range. Radiation is the mean of the preceding hour, everything
//! else an instant. Relative humidity is rounded to 1 %, the dew point to 0.1 degrees, so the latter is asked for too.

use std::collections::HashMap;

use serde::Deserialize;

use super::adapter::{Adapter, AnswerFault, Parsed, Question, Wanted};
use super::answer::{in_si, read, reason, served, unit, wrong};
use super::facts::{Facts, OPEN_METEO};
use super::report::Nature;
use super::span::{DAY_S, HOUR_S, HourSpan, day_start};
use super::years::{Days, by_year};
use crate::config;
use crate::config::History;
use crate::model::weather::{Label, Quantity, RawReadings, WeatherFault};

/// Days before today that come from the forecast.
const RECENT_DAYS: i64 = 7;
/// Days ahead, today included.
const AHEAD_DAYS: i64 = 16;
/// 1940-01-01 and 2022-01-01 [unix s].
const REANALYSIS_FROM_UNIX_S: i64 = -946_771_200;
const PAST_FORECASTS_FROM_UNIX_S: i64 = 1_640_995_200;
/// A forecast holds this long [s]: the models behind it run every one to six hours.
const FORECAST_HOLDS_S: i64 = HOUR_S;

const VARIABLES: &str =
    "temperature_2m,relative_humidity_2m,dew_point_2m,surface_pressure,wind_speed_10m,shortwave_radiation";
/// How many those are, for the weight of a call.
const VARIABLE_COUNT: f64 = 6.0;

/// Open-Meteo as configured.
#[derive(Debug)]
pub struct OpenMeteo {
    config: config::OpenMeteo,
}

#[derive(Deserialize)]
struct Answer {
    latitude: f64,
    longitude: f64,
    elevation: Option<f64>,
    utc_offset_seconds: i64,
    hourly_units: HashMap<String, String>,
    hourly: HashMap<String, Vec<Option<f64>>>,
}

impl OpenMeteo {
    /// With these settings.
    pub fn new(config: config::OpenMeteo) -> Self {
        Self { config }
    }

    fn history(&self, wanted: &Wanted, days: &Days) -> Question {
        let (service, url, nature) = match self.config.history {
            History::Reanalysis => ("open_meteo archive", &self.config.archive_url, Nature::Reanalysis),
            History::PastForecasts => (
                "open_meteo past forecasts",
                &self.config.past_forecast_url,
                Nature::PastForecast,
            ),
        };
        let mut parameters = common(wanted);
        parameters.push(("start_date", days.first.to_string()));
        parameters.push(("end_date", days.last.to_string()));
        Question {
            service,
            url: url.clone(),
            parameters,
            key: self.key(),
            at: wanted.at,
            span: days.span,
            nature,
            holds_s: days.holds_s(wanted.now_unix_s),
            weight: weight(days.count()),
        }
    }

    /// Always the same days around today, so that every span is served by one answer a place and hour.
    fn forecast(&self, wanted: &Wanted, span: HourSpan) -> Question {
        let mut parameters = common(wanted);
        parameters.push(("past_days", RECENT_DAYS.to_string()));
        parameters.push(("forecast_days", AHEAD_DAYS.to_string()));
        Question {
            service: "open_meteo forecast",
            url: self.config.forecast_url.clone(),
            parameters,
            key: self.key(),
            at: wanted.at,
            span,
            nature: Nature::Forecast,
            holds_s: Some(FORECAST_HOLDS_S),
            weight: weight(RECENT_DAYS + AHEAD_DAYS),
        }
    }

    fn key(&self) -> Option<(&'static str, String)> {
        let key = self.config.api_key.reveal()?;
        Some(("apikey", key.to_owned()))
    }

    fn coverage(&self, now_unix_s: i64) -> HourSpan {
        HourSpan {
            from_unix_s: match self.config.history {
                History::Reanalysis => REANALYSIS_FROM_UNIX_S,
                History::PastForecasts => PAST_FORECASTS_FROM_UNIX_S,
            },
            to_unix_s: day_start(now_unix_s) + AHEAD_DAYS * DAY_S,
        }
    }
}

/// What every question says. Rounded as kept: one place is one question.
fn common(wanted: &Wanted) -> Vec<(&'static str, String)> {
    let mut parameters = vec![
        ("latitude", wanted.at.latitude_deg.to_string()),
        ("longitude", wanted.at.longitude_deg.to_string()),
        ("hourly", VARIABLES.to_owned()),
        ("timezone", "GMT".to_owned()),
        ("timeformat", "unixtime".to_owned()),
        ("wind_speed_unit", "ms".to_owned()),
    ];
    if let Some(elevation_m) = wanted.elevation_m {
        parameters.push(("elevation", elevation_m.to_string()));
    }
    parameters
}

/// What the service counts for a call: one for ten variables over two weeks, more in proportion.
fn weight(days: i64) -> f64 {
    let variables = VARIABLE_COUNT / 10.0;
    variables.max(variables * days as f64 / 14.0).max(1.0)
}

impl Adapter for OpenMeteo {
    fn facts(&self) -> &'static Facts {
        &OPEN_METEO
    }

    fn questions(&self, wanted: &Wanted) -> Result<Vec<Question>, Vec<WeatherFault>> {
        super::coverage::check(&OPEN_METEO, &wanted.span, &self.coverage(wanted.now_unix_s))?;
        let recent_from_unix_s = day_start(wanted.now_unix_s) - RECENT_DAYS * DAY_S;
        let part = |from_unix_s, to_unix_s| wanted.span.common(&HourSpan { from_unix_s, to_unix_s });
        let old = part(i64::MIN, recent_from_unix_s)
            .map(|span| by_year(&span))
            .unwrap_or_default();
        let mut questions: Vec<Question> = old.iter().map(|days| self.history(wanted, days)).collect();
        questions.extend(part(recent_from_unix_s, i64::MAX).map(|span| self.forecast(wanted, span)));
        Ok(questions)
    }

    fn parse(&self, question: &Question, answer: &[u8]) -> Result<Parsed, AnswerFault> {
        let place = only_place(answer)?;
        let served = served(&question.at, place.latitude, place.longitude, place.elevation)?;
        Ok(Parsed {
            served,
            readings: readings(&place)?,
        })
    }
}

/// One place is answered by an object, several by a list.
fn only_place(answer: &[u8]) -> Result<Answer, AnswerFault> {
    if answer.trim_ascii_start().first() != Some(&b'[') {
        return read(answer).map_err(|fault| match reason(answer) {
            Some(told) => AnswerFault::Garbled(format!("an error came in place of readings: {told}")),
            None => fault,
        });
    }
    let mut places: Vec<Answer> = read(answer)?;
    match places.pop() {
        Some(place) if places.is_empty() => Ok(place),
        _ => Err(wrong("several places, or none, came for one")),
    }
}

fn readings(place: &Answer) -> Result<RawReadings, AnswerFault> {
    if place.utc_offset_seconds != 0 {
        return Err(wrong(format!(
            "times are local, {} s from GMT, though GMT was asked for",
            place.utc_offset_seconds
        )));
    }
    let time_unix_s = times(place)?;
    let column = |name: &str, quantity| column(place, name, quantity, time_unix_s.len());
    let needed =
        |name: &str, quantity| column(name, quantity)?.ok_or_else(|| wrong(format!("the column {name} is missing")));
    let (humidity, dew_point) = (
        column("relative_humidity_2m", Quantity::RelativeHumidity)?,
        column("dew_point_2m", Quantity::DewPoint)?,
    );
    if humidity.is_none() && dew_point.is_none() {
        return Err(wrong("neither relative_humidity_2m nor dew_point_2m came"));
    }
    Ok(RawReadings {
        row: (1..=time_unix_s.len() as u32).collect(),
        label: Label::Instant,
        air_temp_k: needed("temperature_2m", Quantity::AirTemperature)?,
        relative_humidity: humidity,
        dew_point_k: dew_point,
        pressure_pa: column("surface_pressure", Quantity::StationPressure)?,
        wind_speed_m_s: column("wind_speed_10m", Quantity::WindSpeed)?,
        shortwave_w_m2: column("shortwave_radiation", Quantity::Shortwave)?,
        shortwave_label: Some(Label::MeanOfPrecedingHour),
        time_unix_s,
        ..RawReadings::default()
    })
}

fn times(place: &Answer) -> Result<Vec<i64>, AnswerFault> {
    if place.hourly_units.get("time").map(String::as_str) != Some("unixtime") {
        return Err(wrong("times do not come as unix seconds, as asked for"));
    }
    let cells = place
        .hourly
        .get("time")
        .ok_or_else(|| wrong("the column time is missing"))?;
    let whole = |cell: &Option<f64>| cell.filter(|time| time.fract() == 0.0).map(|time| time as i64);
    let times: Option<Vec<i64>> = cells.iter().map(whole).collect();
    times.ok_or_else(|| wrong("a time is not a whole number of seconds"))
}

fn column(place: &Answer, name: &str, quantity: Quantity, hours: usize) -> Result<Option<Vec<f64>>, AnswerFault> {
    let Some(cells) = place.hourly.get(name) else {
        return Ok(None);
    };
    if cells.len() != hours {
        return Err(wrong(format!("{name} has {} values for {hours} times", cells.len())));
    }
    let unit = unit(quantity, name, place.hourly_units.get(name).map(String::as_str))?;
    Ok(Some(in_si(cells, unit)))
}
