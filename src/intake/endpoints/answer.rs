//! What the readers of answers share: JSON, units, places. Nothing is taken for granted.

use serde::de::DeserializeOwned;
use serde_json::Value;

use super::adapter::AnswerFault;
use super::coordinates::Coordinates;
use super::report::Served;
use crate::model::weather::{Quantity, Unit};

/// Longest piece of a foreign text that is repeated.
const LONGEST_QUOTE: usize = 160;
/// A served place further away than this is not the one asked for [km]: the coarsest grid has cells of 70 km, and a point on a coast may be
/// moved to the next land cell.
const FARTHEST_KM: f64 = 100.0;

/// Reads JSON of a known shape: text that breaks off or is garbled may come whole next time, another shape will not.
pub(super) fn read<T: DeserializeOwned>(answer: &[u8]) -> Result<T, AnswerFault> {
    serde_json::from_slice(answer).map_err(|error| {
        let place = format!("line {}, column {}", error.line(), error.column());
        match error.classify() {
            serde_json::error::Category::Data => {
                AnswerFault::Wrong(format!("{} ({place})", quoted(&error.to_string())))
            }
            _ => AnswerFault::Garbled(format!("the JSON breaks at {place} of {} bytes", answer.len())),
        }
    })
}

/// A wrong answer, in words.
pub(super) fn wrong(words: impl Into<String>) -> AnswerFault {
    AnswerFault::Wrong(words.into())
}

/// The unit an answer states for a quantity.
pub(super) fn unit(quantity: Quantity, name: &str, stated: Option<&str>) -> Result<Unit, AnswerFault> {
    let Some(stated) = stated else {
        return Err(wrong(format!("no unit is stated for {name}")));
    };
    let known = Unit::parse(stated).filter(|unit| quantity.units().contains(unit));
    known.ok_or_else(|| {
        wrong(format!(
            "{name} comes in {}, which is no unit of {}",
            quoted(stated),
            quantity.name()
        ))
    })
}

/// Numbers in SI, NaN where missing.
pub(super) fn in_si(cells: &[Option<f64>], unit: Unit) -> Vec<f64> {
    cells
        .iter()
        .map(|cell| cell.map_or(f64::NAN, |value| unit.to_si(value)))
        .collect()
}

/// The place an answer says it is for, if it is about the one asked for.
pub(super) fn served(
    asked: &Coordinates,
    latitude: f64,
    longitude: f64,
    elevation_m: Option<f64>,
) -> Result<Served, AnswerFault> {
    let at = Coordinates::new(latitude, longitude).map_err(|_| wrong("it names a place that is not on Earth"))?;
    let distance_km = asked.distance_km(&at);
    if distance_km > FARTHEST_KM {
        return Err(wrong(format!(
            "it is for {} {}, {distance_km:.0} km from the place asked for",
            at.latitude_deg, at.longitude_deg
        )));
    }
    Ok(Served {
        at,
        elevation_m: elevation_m.filter(|elevation_m| elevation_m.is_finite()),
    })
}

/// What a source gives as its reason in the body of an error, if it does so in JSON.
pub(super) fn reason(body: &[u8]) -> Option<String> {
    let value: Value = serde_json::from_slice(body).ok()?;
    let told = ["reason", "message", "messages", "detail", "error"]
        .iter()
        .filter_map(|name| value.get(name))
        .find_map(|told| match told {
            Value::String(text) => Some(text.clone()),
            Value::Array(texts) => texts.first()?.as_str().map(str::to_owned),
            _ => None,
        })?;
    Some(quoted(&told))
}

/// A foreign text in quotes, cut if long, without control characters.
pub(super) fn quoted(text: &str) -> String {
    let short: String = text.chars().take(LONGEST_QUOTE).collect();
    format!("{short:?}")
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn what_breaks_off_may_come_whole_and_what_is_otherwise_will_not() {
        let read = |text: &str| read::<std::collections::BTreeMap<String, f64>>(text.as_bytes()).unwrap_err();
        assert!(matches!(read("{\"a\": 1.0, \"b"), AnswerFault::Garbled(_)));
        assert!(matches!(read("{\"a\": 1.0 error"), AnswerFault::Garbled(_)));
        assert!(matches!(read("{\"a\": \"x\"}"), AnswerFault::Wrong(_)));
        assert!(matches!(read("[]"), AnswerFault::Wrong(_)));
    }

    #[test]
    fn units_are_those_stated_and_never_assumed() {
        assert_eq!(unit(Quantity::WindSpeed, "w", Some("mp/h")), Ok(Unit::MilePerHour));
        assert!(unit(Quantity::WindSpeed, "w", Some("°C")).is_err());
        assert!(unit(Quantity::WindSpeed, "w", None).is_err());
    }

    #[test]
    fn cells_are_numbers_or_missing() {
        let values = in_si(&[Some(1.0), None], Unit::Celsius);
        assert!((values[0] - 274.15).abs() < 1e-9 && values[1].is_nan());
    }

    #[test]
    fn a_place_far_away_is_not_the_one_asked_for() {
        let asked = Coordinates::new(50.0, 8.0).unwrap();
        assert!(served(&asked, 50.2, 8.1, Some(100.0)).is_ok());
        assert!(
            served(&asked, 8.0, 50.0, None).is_err(),
            "latitude and longitude swapped"
        );
        assert!(served(&asked, 500.0, 8.0, None).is_err());
    }

    #[test]
    fn reasons_are_repeated_short() {
        assert_eq!(reason(b"{\"error\":true,\"reason\":\"No\"}").unwrap(), "\"No\"");
        assert_eq!(reason(b"{\"messages\":[\"first\",\"second\"]}").unwrap(), "\"first\"");
        assert_eq!(reason(b"<html>"), None);
        let long = format!("{{\"reason\":\"{}\"}}", "x".repeat(1000));
        assert!(reason(long.as_bytes()).unwrap().len() < 200);
    }
}
