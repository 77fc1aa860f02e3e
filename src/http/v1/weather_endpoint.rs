//! Weather by coordinates in a request.

use jiff::Span;
use serde::{Deserialize, Serialize};
use utoipa::ToSchema;

use crate::http::error::FaultItem;
use crate::service::{self, EndpointOrder, SpanOrder};

/// Weather of a place from one of the sources of `/v1/weather-sources`. Say which hours by `from` and `to`, or, seen from
/// now, by `past`, `ahead` or both.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct EndpointWeather {
    /// `endpoint`
    pub kind: EndpointKind,
    /// Name of the source: one of `/v1/weather-sources`.
    #[schema(examples("fixture"), max_length = 40)]
    pub source: String,
    /// Latitude [degree north]; four decimals are kept.
    #[schema(minimum = -90, maximum = 90)]
    pub latitude: f64,
    /// Longitude [degree east]; four decimals are kept.
    #[schema(minimum = -180, maximum = 180)]
    pub longitude: f64,
    /// Start of the first hour: an instant (RFC 3339) on a full hour, or a date, which stands for 00:00 UTC.
    #[serde(default)]
    #[schema(examples("2026-01-01", "2026-01-01T00:00:00Z"), max_length = 40)]
    pub from: Option<String>,
    /// End of the last hour, excluded: an instant on a full hour, or a date.
    #[serde(default)]
    #[schema(examples("2026-07-01"), max_length = 40)]
    pub to: Option<String>,
    /// How far back from the present hour: a duration (ISO 8601) of whole hours.
    #[serde(default)]
    #[schema(examples("P365D"), max_length = 40)]
    pub past: Option<String>,
    /// How far ahead of the present hour: a duration (ISO 8601) of whole hours.
    #[serde(default)]
    #[schema(examples("P10D"), max_length = 40)]
    pub ahead: Option<String>,
    /// An invented climate; needed by the source `fixture`, and for it alone.
    #[serde(default)]
    pub climate: Option<Climate>,
    /// Longest gap that is interpolated [h]. Default 3; for a source whose later hours come six apart, 6.
    #[serde(default)]
    #[schema(maximum = 24)]
    pub max_gap_hours: Option<u32>,
    /// Largest share of unknown hours that is taken. Default 0.1.
    #[serde(default)]
    #[schema(minimum = 0, maximum = 1)]
    pub max_unknown_share: Option<f64>,
    /// Take readings that look swapped or in another unit: flagged, not refused. Default false.
    #[serde(default)]
    pub accept_suspicious: Option<bool>,
}

/// Tag of weather by coordinates.
#[derive(Debug, Clone, Copy, Serialize, Deserialize, ToSchema)]
pub enum EndpointKind {
    /// `endpoint`
    #[serde(rename = "endpoint")]
    Endpoint,
}

/// An invented climate of the source `fixture`.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum Climate {
    /// Hot dry summers, cold winters, wide days.
    DryContinental,
    /// Warm and moist all year, by the sea.
    HumidCoast,
    /// Mild, changeable, rather moist.
    Temperate,
    /// Long frost, short summers.
    Cold,
}

impl Climate {
    /// All of them.
    pub const ALL: [Self; 4] = [Self::DryContinental, Self::HumidCoast, Self::Temperate, Self::Cold];
}

impl From<Climate> for service::Climate {
    fn from(wire: Climate) -> Self {
        match wire {
            Climate::DryContinental => Self::DryContinental,
            Climate::HumidCoast => Self::HumidCoast,
            Climate::Temperate => Self::Temperate,
            Climate::Cold => Self::Cold,
        }
    }
}

impl EndpointWeather {
    /// The order for the service.
    ///
    /// # Errors
    /// Everything wrong with the way the hours are said.
    pub fn order(&self) -> Result<EndpointOrder, Vec<FaultItem>> {
        Ok(EndpointOrder {
            source: self.source.clone(),
            latitude_deg: self.latitude,
            longitude_deg: self.longitude,
            span: self.span()?,
            climate: self.climate.map(Into::into),
        })
    }

    fn span(&self) -> Result<SpanOrder, Vec<FaultItem>> {
        let by_bounds = self.from.is_some() || self.to.is_some();
        let by_duration = self.past.is_some() || self.ahead.is_some();
        match (by_bounds, by_duration) {
            (true, false) => self.between(),
            (false, true) => self.around_now(),
            (true, true) => Err(vec![two_spans()]),
            (false, false) => Err(vec![no_span()]),
        }
    }

    fn between(&self) -> Result<SpanOrder, Vec<FaultItem>> {
        let bound = |field: &str, text: &Option<String>| match text {
            Some(text) => moment(field, text),
            None => Err(at(
                field,
                "required",
                "give both from and to; `to` is excluded".to_owned(),
            )),
        };
        match (bound("from", &self.from), bound("to", &self.to)) {
            (Ok(from_unix_s), Ok(to_unix_s)) => Ok(SpanOrder::Between { from_unix_s, to_unix_s }),
            (from, to) => Err(from.err().into_iter().chain(to.err()).collect()),
        }
    }

    fn around_now(&self) -> Result<SpanOrder, Vec<FaultItem>> {
        let part = |field: &str, text: &Option<String>| text.as_deref().map(|text| duration(field, text)).transpose();
        match (part("past", &self.past), part("ahead", &self.ahead)) {
            (Ok(past), Ok(ahead)) => Ok(SpanOrder::AroundNow { past, ahead }),
            (past, ahead) => Err(past.err().into_iter().chain(ahead.err()).collect()),
        }
    }
}

fn at(field: &str, code: &str, detail: String) -> FaultItem {
    FaultItem::at(format!("/weather/{field}"), code, detail)
}

fn two_spans() -> FaultItem {
    let detail = "give either from and to, or past and ahead; found both ways of naming the hours";
    FaultItem::at("/weather", "two_spans", detail)
}

fn no_span() -> FaultItem {
    let detail = "which hours? Give from and to, for example \"from\": \"2025-01-01\", \"to\": \"2026-01-01\", or past, \
                  ahead or both, for example \"past\": \"P365D\"";
    FaultItem::at("/weather", "no_span", detail)
}

fn moment(field: &str, text: &str) -> Result<i64, FaultItem> {
    let date = || {
        text.parse::<chrono::NaiveDate>()
            .map(|date| date.and_time(chrono::NaiveTime::MIN).and_utc())
    };
    let instant = chrono::DateTime::parse_from_rfc3339(text).map(|instant| instant.to_utc());
    // Fractions of a second must not be lost: half a second past the hour is not on the hour.
    let whole =
        |instant: chrono::DateTime<chrono::Utc>| instant.timestamp() + i64::from(instant.timestamp_subsec_nanos() > 0);
    instant.or_else(|_| date()).map(whole).map_err(|_| {
        let detail =
            format!("expected an instant such as 2026-01-01T00:00:00Z or a date such as 2026-01-01, found {text:?}");
        at(field, "invalid_instant", detail)
    })
}

fn duration(field: &str, text: &str) -> Result<Span, FaultItem> {
    let refused = |wanted: &str| {
        let detail = format!("expected {wanted}, such as P365D, P10D or PT6H, found {text:?}");
        at(field, "invalid_duration", detail)
    };
    // The library also reads words such as "3 days"; the contract is ISO 8601 alone.
    let iso = text.starts_with(['P', '+', '-']);
    let span: Span = text
        .parse()
        .ok()
        .filter(|_| iso)
        .ok_or_else(|| refused("a duration (ISO 8601)"))?;
    if span.is_negative() {
        return Err(refused("a duration without a minus sign"));
    }
    Ok(span)
}

#[cfg(test)]
mod tests {
    use super::*;
    use serde_json::{Value, json};

    fn asked(extra: Value) -> Result<EndpointOrder, Vec<(String, String)>> {
        let mut weather = json!({"kind": "endpoint", "source": "fixture", "latitude": 1.5, "longitude": -2.5});
        for (name, value) in extra.as_object().unwrap() {
            weather[name] = value.clone();
        }
        let wire: EndpointWeather = serde_json::from_value(weather).unwrap();
        let faults = |items: Vec<FaultItem>| {
            items
                .into_iter()
                .map(|item| (item.pointer.unwrap(), item.code))
                .collect()
        };
        wire.order().map_err(faults)
    }

    fn bounds(extra: Value) -> (i64, i64) {
        match asked(extra).unwrap().span {
            SpanOrder::Between { from_unix_s, to_unix_s } => (from_unix_s, to_unix_s),
            other => panic!("{other:?}"),
        }
    }

    #[test]
    fn dates_and_instants_with_any_offset_are_read() {
        assert_eq!(
            bounds(json!({"from": "1970-01-02", "to": "1970-01-03T00:00:00Z"})),
            (86_400, 172_800)
        );
        assert_eq!(
            bounds(json!({"from": "1970-01-01T00:00:00+05:00", "to": "1970-01-01"})).0,
            -18_000
        );
        assert_eq!(
            bounds(json!({"from": "1970-01-01T00:00:00.5Z", "to": "1970-01-02"})).0,
            1,
            "not on the hour"
        );
    }

    #[test]
    fn durations_are_iso_8601_and_not_negative() {
        for good in ["P365D", "PT6H", "P1Y2M3DT4H", "P2W"] {
            assert!(asked(json!({"past": good, "ahead": good})).is_ok(), "{good}");
        }
        for bad in ["365", "3 days", "-P1D", "P", "PD1", ""] {
            let faults = asked(json!({ "ahead": bad })).unwrap_err();
            assert_eq!(
                faults,
                [("/weather/ahead".to_owned(), "invalid_duration".to_owned())],
                "{bad}"
            );
        }
    }

    #[test]
    fn every_way_of_saying_the_hours_wrong_has_a_code() {
        let codes = |extra| -> Vec<String> { asked(extra).unwrap_err().into_iter().map(|(_, code)| code).collect() };
        assert_eq!(codes(json!({})), ["no_span"]);
        assert_eq!(codes(json!({"from": "2026-01-01", "past": "P1D"})), ["two_spans"]);
        assert_eq!(codes(json!({"from": "2026-01-01"})), ["required"]);
        assert_eq!(
            codes(json!({"from": "01.02.2026", "to": "2026-13-01"})),
            ["invalid_instant", "invalid_instant"]
        );
    }
}
