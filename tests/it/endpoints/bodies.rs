//! Answers in the forms of the three services, with invented weather: hour `i` of an answer has 10 + i / 10 degrees Celsius,
//! 50 %, 1000 hPa, 2 m/s and i W/m2, so that every number can be told apart.

use serde_json::{Map, Value, json};

/// 2026-03-01T10:20:00Z, the present of the tests.
pub const NOW: i64 = 1_772_360_400;
/// 2026-03-01T00:00:00Z.
pub const TODAY: i64 = 1_772_323_200;
/// 2025-06-01T00:00:00Z.
pub const JUNE: i64 = 1_748_736_000;

fn column(hours: usize, value: impl Fn(usize) -> f64) -> Vec<f64> {
    (0..hours).map(|hour| (value(hour) * 100.0).round() / 100.0).collect()
}

pub fn celsius(hour: usize) -> f64 {
    10.0 + hour as f64 / 10.0
}

/// As Open-Meteo answers for 50.05 N 8.05 E, hour by hour.
pub fn open_meteo(from_unix_s: i64, hours: usize) -> Value {
    let times: Vec<i64> = (0..hours as i64).map(|hour| from_unix_s + 3600 * hour).collect();
    json!({
        "latitude": 50.05, "longitude": 8.05, "elevation": 120.0, "generationtime_ms": 0.3, "utc_offset_seconds": 0,
        "timezone": "GMT", "timezone_abbreviation": "GMT",
        "hourly_units": {"time": "unixtime", "temperature_2m": "°C", "relative_humidity_2m": "%", "dew_point_2m": "°C",
                         "surface_pressure": "hPa", "wind_speed_10m": "m/s", "shortwave_radiation": "W/m²"},
        "hourly": {"time": times, "temperature_2m": column(hours, celsius),
                   "relative_humidity_2m": column(hours, |_| 50.0), "dew_point_2m": column(hours, |hour| celsius(hour) - 10.0),
                   "surface_pressure": column(hours, |_| 1000.0), "wind_speed_10m": column(hours, |_| 2.0),
                   "shortwave_radiation": column(hours, |hour| hour as f64)}
    })
}

/// As MET Norway answers: hourly for `hourly` hours from the present hour, then `six_hourly` times every six hours.
pub fn met_norway(from_unix_s: i64, hourly: usize, six_hourly: usize) -> Value {
    let hours = (0..hourly).chain((1..=six_hourly).map(|step| hourly - 1 + 6 * step));
    let moment = |hour: usize| {
        let time = chrono::DateTime::from_timestamp(from_unix_s + 3600 * hour as i64, 0).unwrap();
        json!({"time": time.to_rfc3339_opts(chrono::SecondsFormat::Secs, true),
               "data": {"instant": {"details": {
                   "air_temperature": celsius(hour), "relative_humidity": 50.0, "dew_point_temperature": celsius(hour) - 10.0,
                   "air_pressure_at_sea_level": 1010.0, "wind_speed": 2.0}}}})
    };
    json!({
        "type": "Feature", "geometry": {"type": "Point", "coordinates": [8.0, 50.0, 300.0]},
        "properties": {
            "meta": {"updated_at": "2026-03-01T09:00:00Z",
                     "units": {"air_temperature": "celsius", "relative_humidity": "%", "dew_point_temperature": "celsius",
                               "air_pressure_at_sea_level": "hPa", "wind_speed": "m/s"}},
            "timeseries": hours.map(moment).collect::<Vec<_>>()
        }
    })
}

/// As NASA POWER answers, hour by hour.
pub fn nasa_power(from_unix_s: i64, hours: usize) -> Value {
    let by_hour = |value: &dyn Fn(usize) -> f64| -> Value {
        let pair = |hour: usize| {
            let time = chrono::DateTime::from_timestamp(from_unix_s + 3600 * hour as i64, 0).unwrap();
            (
                time.format("%Y%m%d%H").to_string(),
                json!((value(hour) * 100.0).round() / 100.0),
            )
        };
        Value::Object((0..hours).map(pair).collect::<Map<_, _>>())
    };
    json!({
        "type": "Feature", "geometry": {"type": "Point", "coordinates": [8.0, 50.0, 210.5]},
        "properties": {"parameter": {
            "T2M": by_hour(&celsius), "RH2M": by_hour(&|_| 50.0), "T2MDEW": by_hour(&|hour| celsius(hour) - 10.0),
            "PS": by_hour(&|_| 98.5), "WS10M": by_hour(&|_| 2.0), "ALLSKY_SFC_SW_DWN": by_hour(&|hour| hour as f64)}},
        "header": {"title": "Invented", "fill_value": -999.0, "time_standard": "UTC", "start": "20250601", "end": "20250602"},
        "messages": [],
        "parameters": {
            "T2M": {"units": "C", "longname": "x"}, "RH2M": {"units": "%", "longname": "x"},
            "T2MDEW": {"units": "C", "longname": "x"}, "PS": {"units": "kPa", "longname": "x"},
            "WS10M": {"units": "m/s", "longname": "x"}, "ALLSKY_SFC_SW_DWN": {"units": "Wh/m^2", "longname": "x"}}
    })
}
