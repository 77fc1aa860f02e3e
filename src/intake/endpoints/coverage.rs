//! Hours a source knows.

use super::facts::Facts;
use super::span::HourSpan;
use crate::model::weather::WeatherFault;

/// Refuses hours outside those a source knows, the beginning and the end each by itself.
///
/// # Errors
/// Columns `endpoint/from` and `endpoint/to`.
pub(super) fn check(facts: &Facts, wanted: &HourSpan, known: &HourSpan) -> Result<(), Vec<WeatherFault>> {
    let (from, to) = (instant(known.from_unix_s), instant(known.to_unix_s));
    let fault = |field: &str, remedy: &str| {
        let detail = format!("{} knows the hours from {from} to {to} now; {remedy}", facts.title);
        WeatherFault::column(format!("endpoint/{field}"), "beyond_coverage", detail)
    };
    let early = (wanted.from_unix_s < known.from_unix_s).then(|| {
        let other = if facts.knows_past {
            "ask for later hours"
        } else {
            "for hours that are over take a source of history"
        };
        fault("from", other)
    });
    let late = (wanted.to_unix_s > known.to_unix_s).then(|| {
        let other = if facts.knows_future {
            "ask for earlier hours"
        } else {
            "for hours to come take a source of forecasts"
        };
        fault("to", other)
    });
    let faults: Vec<WeatherFault> = early.into_iter().chain(late).collect();
    if faults.is_empty() { Ok(()) } else { Err(faults) }
}

fn instant(unix_s: i64) -> String {
    chrono::DateTime::from_timestamp(unix_s, 0)
        .map_or_else(String::new, |instant| instant.format("%Y-%m-%dT%H:00Z").to_string())
}
