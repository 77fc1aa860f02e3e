//! A stretch of whole hours.

/// Seconds of an hour.
pub const HOUR_S: i64 = 3600;
/// Seconds of a day of UTC.
pub const DAY_S: i64 = 86_400;

/// Whole hours of UTC from `from_unix_s` to `to_unix_s`, the latter excluded.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct HourSpan {
    /// Start of the first hour, seconds since 1970-01-01T00:00:00Z.
    pub from_unix_s: i64,
    /// End of the last hour, seconds since 1970-01-01T00:00:00Z.
    pub to_unix_s: i64,
}

impl HourSpan {
    /// Number of hours; 0 when it runs backwards.
    pub fn hours(&self) -> usize {
        usize::try_from((self.to_unix_s - self.from_unix_s) / HOUR_S).unwrap_or(0)
    }

    /// Starts of its hours.
    pub fn starts(&self) -> impl Iterator<Item = i64> {
        let from_unix_s = self.from_unix_s;
        (0..self.hours() as i64).map(move |hour| from_unix_s + hour * HOUR_S)
    }

    /// What lies in both; none if nothing does.
    pub fn common(&self, other: &Self) -> Option<Self> {
        let both = Self {
            from_unix_s: self.from_unix_s.max(other.from_unix_s),
            to_unix_s: self.to_unix_s.min(other.to_unix_s),
        };
        (both.from_unix_s < both.to_unix_s).then_some(both)
    }
}

/// Start of the day of UTC a moment lies in [unix s].
pub fn day_start(unix_s: i64) -> i64 {
    unix_s.div_euclid(DAY_S) * DAY_S
}

/// Start of the hour a moment lies in [unix s].
pub fn hour_start(unix_s: i64) -> i64 {
    unix_s.div_euclid(HOUR_S) * HOUR_S
}

#[cfg(test)]
mod tests {
    use super::*;

    fn span(from: i64, to: i64) -> HourSpan {
        HourSpan {
            from_unix_s: from * HOUR_S,
            to_unix_s: to * HOUR_S,
        }
    }

    #[test]
    fn hours_are_counted_and_backwards_is_none() {
        assert_eq!(span(1, 4).hours(), 3);
        assert_eq!(span(1, 4).starts().collect::<Vec<_>>(), [3600, 7200, 10_800]);
        assert_eq!(span(4, 1).hours(), 0);
    }

    #[test]
    fn what_is_common_may_be_nothing() {
        assert_eq!(span(0, 5).common(&span(3, 9)), Some(span(3, 5)));
        assert_eq!(span(0, 3).common(&span(3, 9)), None);
    }

    #[test]
    fn days_and_hours_start_before_1970_too() {
        assert_eq!((day_start(-1), hour_start(-1)), (-DAY_S, -HOUR_S));
        assert_eq!((day_start(90_000), hour_start(90_061)), (DAY_S, 90_000));
    }
}
