//! Time zones: the one place that knows the zone rules. The rules are built in; the machine's own are never asked.
//!
//! Wall-clock time is carried as seconds: what the clock and calendar show, counted as if they were UTC.

use jiff::Timestamp;
use jiff::civil::DateTime;
use jiff::tz::{AmbiguousOffset, Offset, TimeZone};

/// Where a wall clock belongs: UTC, a fixed offset, or a place with daylight-saving rules.
#[derive(Debug, Clone)]
pub struct Zone {
    name: String,
    rules: Rules,
}

#[derive(Debug, Clone)]
enum Rules {
    Fixed(i64),
    Named(TimeZone),
}

/// The instants a wall-clock time can mean.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum LocalTime {
    /// One instant, as nearly always.
    Once(i64),
    /// Two: the clock was put back and showed it twice (autumn).
    Twice {
        /// Before the clock was put back.
        first: i64,
        /// After it.
        second: i64,
    },
    /// None: the clock was put forward over it (spring), or a calendar day was left out.
    Never {
        /// What it would be had the clock not moved.
        unmoved: i64,
        /// Offset before the clock moved, seconds east of UTC.
        offset_before_s: i64,
    },
}

impl Zone {
    /// Coordinated universal time.
    pub fn utc() -> Self {
        Self {
            name: "UTC".into(),
            rules: Rules::Fixed(0),
        }
    }

    /// Reads `UTC`, `Z`, an offset (`+01:00`, `-0930`, `+01`) or an IANA name (`Europe/Oslo`). The error says what is
    /// expected.
    pub fn parse(text: &str) -> Result<Self, String> {
        let name = text.trim();
        if name.eq_ignore_ascii_case("utc") || name.eq_ignore_ascii_case("z") {
            return Ok(Self::utc());
        }
        if let Some(offset_s) = parse_offset_s(name.as_bytes()) {
            return Ok(Self {
                name: offset_name(offset_s),
                rules: Rules::Fixed(offset_s),
            });
        }
        match TimeZone::get(name) {
            Ok(zone) => Ok(Self {
                name: zone.iana_name().unwrap_or(name).to_string(),
                rules: Rules::Named(zone),
            }),
            Err(_) => Err(format!(
                "expected UTC, an offset such as +01:00, or an IANA zone such as Europe/Oslo; found {name:?}"
            )),
        }
    }

    /// Its name, as an IANA name, an offset, or UTC.
    pub fn name(&self) -> &str {
        &self.name
    }

    /// Seconds east of UTC at an instant; zero outside the calendar's range (years -9999 to 9999).
    pub fn offset_s(&self, unix_s: i64) -> i64 {
        match &self.rules {
            Rules::Fixed(offset_s) => *offset_s,
            Rules::Named(zone) => Timestamp::from_second(unix_s).map_or(0, |t| zone.to_offset(t).seconds().into()),
        }
    }

    /// The wall clock's reading, in seconds, at an instant.
    pub fn wall_clock_s(&self, unix_s: i64) -> i64 {
        unix_s.saturating_add(self.offset_s(unix_s))
    }

    /// The instants a wall-clock reading can mean; `None` outside the calendar's range.
    pub fn resolve(&self, wall_clock_s: i64) -> Option<LocalTime> {
        let zone = match &self.rules {
            Rules::Fixed(offset_s) => return Some(LocalTime::Once(wall_clock_s.checked_sub(*offset_s)?)),
            Rules::Named(zone) => zone,
        };
        let civil = Offset::UTC.to_datetime(Timestamp::from_second(wall_clock_s).ok()?);
        let at = |offset: Offset| wall_clock_s - i64::from(offset.seconds());
        Some(match zone.to_ambiguous_timestamp(civil).offset() {
            AmbiguousOffset::Unambiguous { offset } => LocalTime::Once(at(offset)),
            AmbiguousOffset::Fold { before, after } => LocalTime::Twice {
                first: at(before),
                second: at(after),
            },
            AmbiguousOffset::Gap { before, .. } => LocalTime::Never {
                unmoved: at(before),
                offset_before_s: before.seconds().into(),
            },
        })
    }
}

/// A wall-clock reading in seconds from its parts; `None` when there is no such date or time. Hour 24 is not known here.
pub fn wall_clock_s(year: i64, month: i64, day: i64, hour: i64, minute: i64, second: i64) -> Option<i64> {
    let small = |value: i64| i8::try_from(value).ok();
    let year = i16::try_from(year).ok()?;
    let civil = DateTime::new(
        year,
        small(month)?,
        small(day)?,
        small(hour)?,
        small(minute)?,
        small(second)?,
        0,
    )
    .ok()?;
    Offset::UTC.to_timestamp(civil).ok().map(Timestamp::as_second)
}

/// Reads `+01:00`, `-0930` or `+01` as seconds east of UTC; up to 18 hours either way.
pub fn parse_offset_s(text: &[u8]) -> Option<i64> {
    let (sign, digits) = match text.split_first()? {
        (b'+', rest) => (1, rest),
        (b'-', rest) => (-1, rest),
        _ => return None,
    };
    let number = |two: &[u8]| {
        two.iter()
            .try_fold(0, |n, b| b.is_ascii_digit().then(|| n * 10 + i64::from(b - b'0')))
    };
    let (hours, minutes) = match digits.len() {
        2 => (number(digits)?, 0),
        4 => (number(&digits[..2])?, number(&digits[2..])?),
        5 if digits[2] == b':' => (number(&digits[..2])?, number(&digits[3..])?),
        _ => return None,
    };
    (hours <= 18 && minutes < 60).then_some(sign * (hours * 3600 + minutes * 60))
}

/// Writes seconds east of UTC as `+01:00`.
pub fn offset_name(offset_s: i64) -> String {
    let sign = if offset_s < 0 { '-' } else { '+' };
    let minutes = offset_s.abs() / 60;
    format!("{sign}{:02}:{:02}", minutes / 60, minutes % 60)
}

/// An instant in words, `2026-03-29T01:00:00Z`; the bare number outside the calendar's range.
pub fn instant_text(unix_s: i64) -> String {
    Timestamp::from_second(unix_s).map_or_else(|_| format!("unix second {unix_s}"), |t| t.to_string())
}

/// A wall-clock reading in words, `2026-03-29 02:30`.
pub fn wall_clock_text(wall_clock_s: i64) -> String {
    let text = instant_text(wall_clock_s).replace('T', " ");
    let text = text.trim_end_matches('Z');
    text.strip_suffix(":00").unwrap_or(text).to_string()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn clock(year: i64, month: i64, day: i64, hour: i64, minute: i64) -> i64 {
        wall_clock_s(year, month, day, hour, minute, 0).unwrap()
    }

    #[test]
    fn offsets_and_names_are_read() {
        assert_eq!(Zone::parse("utc").unwrap().name(), "UTC");
        assert_eq!(Zone::parse("-0930").unwrap().name(), "-09:30");
        assert_eq!(Zone::parse("+05:45").unwrap().offset_s(0), 20_700);
        assert_eq!(Zone::parse("europe/oslo").unwrap().name(), "Europe/Oslo");
        for bad in ["", "Oslo", "+1", "+19:00", "+01:60", "+0a:00", "local"] {
            assert!(Zone::parse(bad).is_err(), "{bad}");
        }
    }

    /// New York 2013, from the law in force (15 USC 260a): forward on 10 March at 2:00, back on 3 November at 2:00.
    #[test]
    fn new_york_skips_and_repeats_an_hour() {
        let zone = Zone::parse("America/New_York").unwrap();
        let skipped = zone.resolve(clock(2013, 3, 10, 2, 30)).unwrap();
        assert!(matches!(
            skipped,
            LocalTime::Never {
                offset_before_s: -18_000,
                ..
            }
        ));
        let repeated = zone.resolve(clock(2013, 11, 3, 1, 0)).unwrap();
        let first = clock(2013, 11, 3, 5, 0);
        assert_eq!(
            repeated,
            LocalTime::Twice {
                first,
                second: first + 3600
            }
        );
    }

    /// Lord Howe moves its clock by half an hour (tz database, `australasia`).
    #[test]
    fn lord_howe_repeats_half_an_hour() {
        let zone = Zone::parse("Australia/Lord_Howe").unwrap();
        match zone.resolve(clock(2025, 4, 6, 1, 45)).unwrap() {
            LocalTime::Twice { first, second } => assert_eq!(second - first, 1800),
            other => panic!("{other:?}"),
        }
    }

    /// Apia had no 30 December 2011 (tz database, `australasia`); Casablanca's clock is behind in Ramadan.
    #[test]
    fn a_left_out_day_and_a_negative_summer_time() {
        let apia = Zone::parse("Pacific/Apia").unwrap();
        assert!(matches!(
            apia.resolve(clock(2011, 12, 30, 12, 0)),
            Some(LocalTime::Never { .. })
        ));
        let casablanca = Zone::parse("Africa/Casablanca").unwrap();
        assert_eq!(casablanca.offset_s(clock(2025, 3, 10, 12, 0)), 0);
        assert_eq!(casablanca.offset_s(clock(2025, 7, 10, 12, 0)), 3600);
    }

    #[test]
    fn there_and_back_again() {
        let zone = Zone::parse("Europe/Oslo").unwrap();
        let unix_s = clock(2026, 7, 1, 10, 0);
        assert_eq!(zone.resolve(zone.wall_clock_s(unix_s)), Some(LocalTime::Once(unix_s)));
    }

    #[test]
    fn impossible_dates_are_refused_and_huge_numbers_do_not_panic() {
        assert_eq!(wall_clock_s(2025, 2, 29, 0, 0, 0), None);
        assert_eq!(wall_clock_s(2025, 1, 1, 24, 0, 0), None);
        let zone = Zone::parse("Europe/Oslo").unwrap();
        assert_eq!(zone.resolve(i64::MAX), None);
        assert_eq!(zone.wall_clock_s(i64::MAX), i64::MAX);
        assert_eq!(Zone::parse("-01:00").unwrap().resolve(i64::MAX), None);
    }

    #[test]
    fn times_print_in_words() {
        assert_eq!(instant_text(0), "1970-01-01T00:00:00Z");
        assert_eq!(wall_clock_text(clock(2026, 3, 29, 2, 30)), "2026-03-29 02:30");
        assert_eq!(wall_clock_text(clock(2026, 3, 29, 2, 0)), "2026-03-29 02:00");
        assert_eq!(offset_name(-34_200), "-09:30");
    }
}
