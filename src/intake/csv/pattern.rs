//! Time cells: RFC 3339, epoch numbers, or a pattern of date parts.

use super::layout::Clock;
use super::number::digits;

/// How a time cell is written.
#[derive(Debug, Clone, PartialEq)]
pub(super) enum Pattern {
    Rfc3339,
    UnixSeconds,
    UnixMilliseconds,
    /// Days since 1899-12-30, as spreadsheets count them.
    SpreadsheetDays,
    Parts(Vec<Part>),
}

/// One piece of a pattern.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Part {
    Year,
    ShortYear,
    Month,
    MonthName,
    Day,
    DayOfYear,
    Hour,
    HalfDayHour,
    /// Hour and minute as one whole number.
    HourMinute,
    Minute,
    Second,
    AmPm,
    Offset,
    Spaces,
    Text(u8),
}

impl Pattern {
    /// Reads a layout's `format`; the error says what is expected.
    pub(super) fn parse(format: &str) -> Result<Self, String> {
        match format {
            "rfc3339" => Ok(Self::Rfc3339),
            "unix_s" => Ok(Self::UnixSeconds),
            "unix_ms" => Ok(Self::UnixMilliseconds),
            "spreadsheet_days" => Ok(Self::SpreadsheetDays),
            _ if format.contains('%') => parse_parts(format).map(Self::Parts),
            _ => Err(format!(
                "expected rfc3339, unix_s, unix_ms, spreadsheet_days or a pattern such as %Y-%m-%d %H:%M; found {format:?}"
            )),
        }
    }

    /// The pattern as this clock reads it.
    pub(super) fn with_clock(self, clock: Option<Clock>) -> Self {
        match (self, clock) {
            (Self::Parts(mut parts), Some(Clock::HourMinute)) => {
                parts
                    .iter_mut()
                    .filter(|part| **part == Part::Hour)
                    .for_each(|part| *part = Part::HourMinute);
                Self::Parts(parts)
            }
            (other, _) => other,
        }
    }

    /// False for dates whose year stands elsewhere.
    pub(super) fn has_year(&self) -> bool {
        match self {
            Self::Parts(parts) => parts.contains(&Part::Year) || parts.contains(&Part::ShortYear),
            _ => true,
        }
    }

    pub(super) fn has_hour(&self) -> bool {
        matches!(self, Self::Parts(parts) if parts.contains(&Part::Hour))
    }

    pub(super) fn has_minute(&self) -> bool {
        matches!(self, Self::Parts(parts) if parts.contains(&Part::Minute))
    }

    pub(super) fn is_twelve_hour(&self) -> bool {
        matches!(self, Self::Parts(parts) if parts.contains(&Part::AmPm))
    }

    /// The instant of an epoch cell [unix s]; `None` when it is no whole number, or the pattern no epoch.
    pub(super) fn epoch_s(&self, cell: &[u8]) -> Option<i64> {
        let (negative, unsigned) = cell.strip_prefix(b"-").map_or((false, cell), |rest| (true, rest));
        let count = digits(unsigned.strip_suffix(b".0").unwrap_or(unsigned))?;
        let count = if negative { -count } else { count };
        match self {
            Self::UnixSeconds => Some(count),
            Self::UnixMilliseconds => Some(count.div_euclid(1000)),
            Self::Rfc3339 | Self::SpreadsheetDays | Self::Parts(_) => None,
        }
    }

    /// How the cells should look, for messages.
    pub(super) fn expectation(&self, format: &str) -> String {
        match self {
            Self::Rfc3339 => "a time such as 2026-01-31T13:00:00Z".into(),
            Self::UnixSeconds => "seconds since 1970".into(),
            Self::UnixMilliseconds => "milliseconds since 1970".into(),
            Self::SpreadsheetDays => "days since 1899-12-30, such as 46053.5".into(),
            Self::Parts(_) => format!("a time written as {format}"),
        }
    }
}

fn parse_parts(format: &str) -> Result<Vec<Part>, String> {
    let mut parts = Vec::new();
    let mut letters = format.bytes();
    while let Some(letter) = letters.next() {
        let part = match letter {
            b'%' => directive(letters.next()).ok_or_else(|| {
                format!("expected %Y %y %m %d %j %b %H %I %M %S %p %z and text between them; found {format:?}")
            })?,
            b' ' => Part::Spaces,
            other => Part::Text(other),
        };
        parts.push(part);
    }
    complete(&parts).then_some(parts).ok_or_else(|| {
        format!("expected a month and day (or %j), an hour (%H, or %I with %p), and one year at most; found {format:?}")
    })
}

fn directive(letter: Option<u8>) -> Option<Part> {
    Some(match letter? {
        b'Y' => Part::Year,
        b'y' => Part::ShortYear,
        b'm' => Part::Month,
        b'b' | b'B' => Part::MonthName,
        b'd' | b'e' => Part::Day,
        b'j' => Part::DayOfYear,
        b'H' => Part::Hour,
        b'I' => Part::HalfDayHour,
        b'M' => Part::Minute,
        b'S' => Part::Second,
        b'p' => Part::AmPm,
        b'z' => Part::Offset,
        b'%' => Part::Text(b'%'),
        _ => return None,
    })
}

fn complete(parts: &[Part]) -> bool {
    let has = |part: Part| parts.contains(&part);
    let two_years = has(Part::Year) && has(Part::ShortYear);
    let month_and_day = (has(Part::Month) != has(Part::MonthName)) && has(Part::Day);
    let day = has(Part::DayOfYear) != month_and_day;
    let half_day = has(Part::HalfDayHour) && has(Part::AmPm);
    let hour = has(Part::Hour) && !has(Part::AmPm) && !has(Part::HalfDayHour);
    !two_years && day && (hour != half_day)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn incomplete_and_unknown_patterns_are_refused() {
        for bad in [
            "iso",
            "%Y-%m-%d",
            "%Y %H",
            "%Q",
            "%",
            "%Y-%m-%d %I",
            "%Y-%m-%d %H %p",
            "%Y %y %m %d %H",
            "",
        ] {
            assert!(Pattern::parse(bad).is_err(), "{bad}");
        }
    }

    #[test]
    fn epochs_are_whole_numbers() {
        assert_eq!(Pattern::UnixSeconds.epoch_s(b"-5"), Some(-5));
        assert_eq!(Pattern::UnixSeconds.epoch_s(b"1767225600.0"), Some(1_767_225_600));
        assert_eq!(Pattern::UnixMilliseconds.epoch_s(b"-1"), Some(-1));
        assert_eq!(Pattern::UnixSeconds.epoch_s(b"12.5"), None);
    }
}
