//! Civil time and what values stand for, from the request to the answer.

mod days;
mod labels;
mod opening_hours;
mod visits;

use std::sync::LazyLock;

use axum::Router;
use serde_json::{Value, json};

use crate::support::{predict, service};

/// A request for hours of an ordinary room from an instant, cut in a zone.
fn room(start: &str, hours: usize, zone: &str) -> Value {
    json!({
        "device_example": "shelf-180",
        "weather": {"kind": "inline", "start": start,
                    "air_temperature_c": vec![21.0; hours], "relative_humidity_pct": vec![45.0; hours]},
        "options": {"bands": false, "time_zone": zone, "include": ["days", "months", "hours"]}
    })
}

/// One service for the hundreds of days that are asked for.
static SERVICE: LazyLock<Router> = LazyLock::new(service);

async fn answered(request: &Value) -> Value {
    let answer = predict(&SERVICE, request).await;
    assert_eq!(answer.status, 200, "{}", answer.text());
    answer.json()
}

/// A figure of a day or month; zero where the calendar has no such day.
fn of(answer: &Value, list: &str, label: &str, figure: &str) -> f64 {
    let periods = answer[list].as_array().unwrap();
    let found = periods.iter().find(|period| period["label"] == label);
    found.map_or(0.0, |period| period[figure].as_f64().unwrap())
}

/// The instant so many hours before a UTC midnight.
fn hours_before(date: &str, hours: i64) -> String {
    let midnight: chrono::DateTime<chrono::Utc> = format!("{date}T00:00:00Z").parse().unwrap();
    (midnight - chrono::TimeDelta::hours(hours)).to_rfc3339_opts(chrono::SecondsFormat::Secs, true)
}
