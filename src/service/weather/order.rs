//! Weather by coordinates, as ordered.

use jiff::tz::TimeZone;
use jiff::{Span, Timestamp};

use crate::intake::endpoints::{HOUR_S, HourSpan, hour_start};
use crate::model::weather::WeatherFault;

/// Weather of a place from a source.
#[derive(Debug, Clone)]
pub struct EndpointOrder {
    /// Name of the source.
    pub source: String,
    /// Latitude [degree north, -90 to 90].
    pub latitude_deg: f64,
    /// Longitude [degree east, -180 to 180].
    pub longitude_deg: f64,
    /// Which hours.
    pub span: SpanOrder,
    /// Which invented climate, for the built-in source alone.
    pub climate: Option<super::Climate>,
}

/// Which hours.
#[derive(Debug, Clone)]
pub enum SpanOrder {
    /// From one moment to another, the latter excluded; both seconds since 1970-01-01T00:00:00Z, on full hours.
    Between {
        /// Start of the first hour.
        from_unix_s: i64,
        /// End of the last hour.
        to_unix_s: i64,
    },
    /// Hours behind and ahead of the start of the present hour; at least one is given.
    AroundNow {
        /// How far back.
        past: Option<Span>,
        /// How far ahead.
        ahead: Option<Span>,
    },
}

impl SpanOrder {
    /// The hours, seen from now.
    ///
    /// # Errors
    /// Bounds off the full hour, a span that is empty or runs backwards, a duration beyond the calendar.
    pub fn hours(&self, now_unix_s: i64) -> Result<HourSpan, WeatherFault> {
        let span = match self {
            Self::Between { from_unix_s, to_unix_s } => HourSpan {
                from_unix_s: on_the_hour("from", *from_unix_s)?,
                to_unix_s: on_the_hour("to", *to_unix_s)?,
            },
            Self::AroundNow { past, ahead } => {
                let now_unix_s = hour_start(now_unix_s);
                HourSpan {
                    from_unix_s: moved("past", now_unix_s, past.as_ref().map(|past| past.negate()))?,
                    to_unix_s: moved("ahead", now_unix_s, *ahead)?,
                }
            }
        };
        if span.hours() == 0 {
            return Err(empty(self, &span));
        }
        Ok(span)
    }

    /// Faults of the beginning and the end, pointed at the fields that named them.
    pub(super) fn in_its_own_words(&self, mut faults: Vec<WeatherFault>) -> Vec<WeatherFault> {
        let Self::AroundNow { past, ahead } = self else {
            return faults;
        };
        for fault in &mut faults {
            let field = match fault.column.as_deref() {
                Some("endpoint/from") if past.is_some() => "endpoint/past",
                Some("endpoint/from" | "endpoint/to") if ahead.is_some() => "endpoint/ahead",
                Some("endpoint/to") => "endpoint/past",
                _ => continue,
            };
            fault.column = Some(field.to_owned());
        }
        faults
    }
}

fn empty(order: &SpanOrder, span: &HourSpan) -> WeatherFault {
    match order {
        SpanOrder::Between { .. } => {
            let detail = format!(
                "expected an end after the start, found {} to {}; `to` is excluded",
                instant(span.from_unix_s),
                instant(span.to_unix_s)
            );
            WeatherFault::column("endpoint/to", "reversed_span", detail)
        }
        SpanOrder::AroundNow { past, .. } => {
            let field = if past.is_some() {
                "endpoint/past"
            } else {
                "endpoint/ahead"
            };
            WeatherFault::column(field, "empty_span", "expected at least one hour, such as PT1H or P10D")
        }
    }
}

fn on_the_hour(field: &str, unix_s: i64) -> Result<i64, WeatherFault> {
    if unix_s.rem_euclid(HOUR_S) == 0 {
        return Ok(unix_s);
    }
    let before = hour_start(unix_s);
    let detail = format!(
        "expected a full hour of UTC, found {}; the nearest are {} and {}",
        instant(unix_s),
        instant(before),
        instant(before + HOUR_S)
    );
    Err(WeatherFault::column(
        format!("endpoint/{field}"),
        "not_a_full_hour",
        detail,
    ))
}

fn moved(field: &str, unix_s: i64, by: Option<Span>) -> Result<i64, WeatherFault> {
    let Some(by) = by else { return Ok(unix_s) };
    let fault = |code, detail: &str| WeatherFault::column(format!("endpoint/{field}"), code, detail);
    let moved = Timestamp::from_second(unix_s)
        .and_then(|start| start.to_zoned_datetime(TimeZone::UTC).checked_add(by))
        .map_err(|_| {
            fault(
                "duration_out_of_range",
                "the duration leads beyond the calendar; ask for less",
            )
        })?;
    let moved_s = moved.timestamp().as_second();
    let whole = moved_s.rem_euclid(HOUR_S) == 0 && moved.timestamp().subsec_nanosecond() == 0;
    let detail = "expected a whole number of hours, such as PT6H, P10D or P1Y";
    whole.then_some(moved_s).ok_or_else(|| fault("not_a_full_hour", detail))
}

/// An instant for messages.
pub(super) fn instant(unix_s: i64) -> String {
    Timestamp::from_second(unix_s).map_or_else(|_| unix_s.to_string(), |instant| instant.to_string())
}

#[cfg(test)]
mod tests {
    use super::*;

    /// 2026-03-01T10:20:00Z.
    const NOW: i64 = 1_772_360_400;

    fn around(past: &str, ahead: &str) -> Result<HourSpan, WeatherFault> {
        let span = |text: &str| (!text.is_empty()).then(|| text.parse().unwrap());
        let order = SpanOrder::AroundNow {
            past: span(past),
            ahead: span(ahead),
        };
        order.hours(NOW)
    }

    #[test]
    fn durations_count_from_the_start_of_the_hour() {
        let span = around("P1M", "P2DT6H").unwrap();
        assert_eq!(instant(span.from_unix_s), "2026-02-01T10:00:00Z");
        assert_eq!(instant(span.to_unix_s), "2026-03-03T16:00:00Z");
        assert_eq!(around("", "PT1H").unwrap().hours(), 1);
    }

    #[test]
    fn what_is_no_span_is_refused_by_name() {
        let code = |past: &str, ahead: &str| around(past, ahead).map_err(|fault| (fault.code, fault.column.unwrap()));
        assert_eq!(code("PT90M", ""), Err(("not_a_full_hour", "endpoint/past".to_owned())));
        assert_eq!(code("", "PT0S"), Err(("empty_span", "endpoint/ahead".to_owned())));
        assert_eq!(
            code("P9000Y", "P9000Y"),
            Err(("duration_out_of_range", "endpoint/ahead".to_owned()))
        );
        assert!(code("PT1.5S", "").is_err());
    }

    #[test]
    fn bounds_stand_on_full_hours_and_in_order() {
        let between = |from_unix_s, to_unix_s| SpanOrder::Between { from_unix_s, to_unix_s }.hours(NOW);
        assert_eq!(between(0, 7200).unwrap().hours(), 2);
        assert_eq!(between(7200, 0).unwrap_err().code, "reversed_span");
        assert_eq!(between(0, 0).unwrap_err().code, "reversed_span");
        let fault = between(1800, 7200).unwrap_err();
        assert!(fault.detail.contains("1970-01-01T01:00:00Z"), "{fault}");
    }
}
