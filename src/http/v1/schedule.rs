//! Clock times of a week with dated exceptions.

use serde::{Deserialize, Serialize};
use utoipa::openapi::RefOr;
use utoipa::openapi::schema::{ArrayBuilder, ObjectBuilder, Schema, Type};
use utoipa::{PartialSchema, ToSchema};

use crate::service::records;

/// `HH:MM`, up to and with `24:00`.
const CLOCK_PATTERN: &str = "^(([01][0-9]|2[0-3]):[0-5][0-9]|24:00)$";

/// Clock times of a week in the zone of the request, with dated exceptions. Where the clock is put back, a time it shows
/// twice means its first showing; where it is put forward, a time it skips means the moment of the jump.
#[derive(Debug, Clone, Default, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Schedule {
    /// The intervals that begin on each weekday.
    pub weekly: WeeklyHours,
    /// Dates on which other intervals begin than on their weekday.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(max_items = 1000)]
    pub exceptions: Option<Vec<ScheduleException>>,
}

/// The intervals that begin on each weekday; a day left out is closed.
#[derive(Debug, Clone, Default, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields, default)]
pub struct WeeklyHours {
    /// Monday.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(max_items = 24)]
    pub mon: Option<Vec<ClockInterval>>,
    /// Tuesday.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(max_items = 24)]
    pub tue: Option<Vec<ClockInterval>>,
    /// Wednesday.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(max_items = 24)]
    pub wed: Option<Vec<ClockInterval>>,
    /// Thursday.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(max_items = 24)]
    pub thu: Option<Vec<ClockInterval>>,
    /// Friday.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(max_items = 24)]
    pub fri: Option<Vec<ClockInterval>>,
    /// Saturday.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(max_items = 24)]
    pub sat: Option<Vec<ClockInterval>>,
    /// Sunday.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(max_items = 24)]
    pub sun: Option<Vec<ClockInterval>>,
}

/// One date and the intervals that begin on it; none means closed.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct ScheduleException {
    /// The date.
    #[schema(format = Date, examples("2026-12-24"))]
    pub date: String,
    /// What begins on it instead of the weekday's intervals.
    #[schema(max_items = 24)]
    pub intervals: Vec<ClockInterval>,
}

/// From one clock time to another; an end at or before its start lies on the next day.
#[derive(Debug, Clone, Serialize, Deserialize)]
pub struct ClockInterval(pub [String; 2]);

impl PartialSchema for ClockInterval {
    fn schema() -> RefOr<Schema> {
        let clock = ObjectBuilder::new()
            .schema_type(Type::String)
            .pattern(Some(CLOCK_PATTERN))
            .build();
        let text = "From one clock time to another, `HH:MM`; an end at or before its start lies on the next day; `24:00` is midnight.";
        let pair = ArrayBuilder::new()
            .items(clock)
            .min_items(Some(2))
            .max_items(Some(2))
            .description(Some(text));
        RefOr::T(Schema::Array(
            pair.examples([serde_json::json!(["09:00", "17:00"])]).build(),
        ))
    }
}

impl ToSchema for ClockInterval {}

impl From<Schedule> for records::ClockSchedule {
    fn from(wire: Schedule) -> Self {
        let WeeklyHours {
            mon,
            tue,
            wed,
            thu,
            fri,
            sat,
            sun,
        } = wire.weekly;
        Self {
            weekly: [mon, tue, wed, thu, fri, sat, sun].map(|day| intervals(day.unwrap_or_default())),
            exceptions: wire
                .exceptions
                .unwrap_or_default()
                .into_iter()
                .map(Into::into)
                .collect(),
        }
    }
}

impl From<ScheduleException> for records::ScheduleException {
    fn from(wire: ScheduleException) -> Self {
        Self {
            date: wire.date,
            intervals: intervals(wire.intervals),
        }
    }
}

fn intervals(wire: Vec<ClockInterval>) -> Vec<records::ClockInterval> {
    wire.into_iter()
        .map(|ClockInterval([from, to])| records::ClockInterval { from, to })
        .collect()
}

impl From<records::ClockSchedule> for Schedule {
    fn from(record: records::ClockSchedule) -> Self {
        let [mon, tue, wed, thu, fri, sat, sun] = record
            .weekly
            .map(|day| (!day.is_empty()).then(|| day.into_iter().map(Into::into).collect()));
        let exceptions: Vec<_> = record.exceptions.into_iter().map(ScheduleException::from).collect();
        Self {
            weekly: WeeklyHours {
                mon,
                tue,
                wed,
                thu,
                fri,
                sat,
                sun,
            },
            exceptions: (!exceptions.is_empty()).then_some(exceptions),
        }
    }
}

impl From<records::ScheduleException> for ScheduleException {
    fn from(record: records::ScheduleException) -> Self {
        Self {
            date: record.date,
            intervals: record.intervals.into_iter().map(Into::into).collect(),
        }
    }
}

impl From<records::ClockInterval> for ClockInterval {
    fn from(record: records::ClockInterval) -> Self {
        Self([record.from, record.to])
    }
}
