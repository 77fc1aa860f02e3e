//! History is asked for in calendar years, so that whole years are asked for once.

use chrono::{DateTime, Datelike, NaiveDate};

use super::span::{DAY_S, HourSpan, day_start};

/// Figures that are this old no longer change [s]: preliminary ones are replaced within about three months (remembered).
const SETTLED_S: i64 = 90 * DAY_S;
/// Younger ones are asked for again after this [s].
const UNSETTLED_HOLDS_S: i64 = DAY_S;

/// Some days of one year.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) struct Days {
    /// First day.
    pub first: NaiveDate,
    /// Last day, included.
    pub last: NaiveDate,
    /// Their hours within what is wanted.
    pub span: HourSpan,
}

impl Days {
    /// How many.
    pub(super) fn count(&self) -> i64 {
        (self.last - self.first).num_days() + 1
    }

    /// How long an answer about them holds, seen from now [s]; none for good.
    pub(super) fn holds_s(&self, now_unix_s: i64) -> Option<i64> {
        let end_unix_s = day_of(self.last) + DAY_S;
        (now_unix_s - end_unix_s < SETTLED_S).then_some(UNSETTLED_HOLDS_S)
    }
}

/// Cuts a span into the days of each calendar year.
pub(super) fn by_year(span: &HourSpan) -> Vec<Days> {
    let mut pieces = Vec::new();
    let mut from_unix_s = span.from_unix_s;
    while from_unix_s < span.to_unix_s {
        let first = date_of(from_unix_s);
        let year_end_unix_s = NaiveDate::from_ymd_opt(first.year() + 1, 1, 1).map_or(i64::MAX, day_of);
        let to_unix_s = span.to_unix_s.min(year_end_unix_s);
        pieces.push(Days {
            first,
            last: date_of(to_unix_s - 1),
            span: HourSpan { from_unix_s, to_unix_s },
        });
        from_unix_s = to_unix_s;
    }
    pieces
}

fn date_of(unix_s: i64) -> NaiveDate {
    DateTime::from_timestamp(day_start(unix_s), 0)
        .unwrap_or_default()
        .date_naive()
}

fn day_of(date: NaiveDate) -> i64 {
    date.and_time(chrono::NaiveTime::MIN).and_utc().timestamp()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::intake::endpoints::HOUR_S;

    fn span(from: &str, to: &str) -> HourSpan {
        let unix_s = |text: &str| DateTime::parse_from_rfc3339(text).unwrap().timestamp();
        HourSpan {
            from_unix_s: unix_s(from),
            to_unix_s: unix_s(to),
        }
    }

    #[test]
    fn years_are_cut_at_new_year_and_days_are_whole() {
        let pieces = by_year(&span("2023-12-30T06:00:00Z", "2025-01-01T01:00:00Z"));
        let days: Vec<String> = pieces
            .iter()
            .map(|days| format!("{}..{}", days.first, days.last))
            .collect();
        assert_eq!(
            days,
            [
                "2023-12-30..2023-12-31",
                "2024-01-01..2024-12-31",
                "2025-01-01..2025-01-01"
            ]
        );
        assert_eq!(pieces[1].count(), 366);
        assert_eq!(pieces[0].span.from_unix_s % DAY_S, 6 * HOUR_S);
        let hours: usize = pieces.iter().map(|days| days.span.hours()).sum();
        assert_eq!(hours, span("2023-12-30T06:00:00Z", "2025-01-01T01:00:00Z").hours());
    }

    #[test]
    fn only_settled_days_hold_for_good() {
        let days = by_year(&span("2024-01-01T00:00:00Z", "2025-01-01T00:00:00Z"))[0];
        let end = days.span.to_unix_s;
        assert_eq!(days.holds_s(end + 91 * DAY_S), None);
        assert_eq!(days.holds_s(end + 89 * DAY_S), Some(DAY_S));
    }
}
