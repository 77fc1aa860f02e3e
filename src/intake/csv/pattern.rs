//! Time cells: RFC 3339, epoch numbers, or a pattern of date parts.

use super::number::digits;

/// How a time cell is written.
#[derive(Debug, Clone, PartialEq)]
pub(super) enum Pattern {
    Rfc3339,
    UnixSeconds,
    UnixMilliseconds,
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
            _ if format.contains('%') => parse_parts(format).map(Self::Parts),
            _ => Err(format!(
                "expected rfc3339, unix_s, unix_ms or a pattern such as %Y-%m-%d %H:%M; found {format:?}"
            )),
        }
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
            Self::Rfc3339 | Self::Parts(_) => None,
        }
    }

    /// How the cells should look, for messages.
    pub(super) fn expectation(&self, format: &str) -> String {
        match self {
            Self::Rfc3339 => "a time such as 2026-01-31T13:00:00Z".into(),
            Self::UnixSeconds => "seconds since 1970".into(),
            Self::UnixMilliseconds => "milliseconds since 1970".into(),
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
        format!("expected a year, a month and day (or %j), and an hour (%H, or %I with %p); found {format:?}")
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
    let year = has(Part::Year) != has(Part::ShortYear);
    let month_and_day = (has(Part::Month) != has(Part::MonthName)) && has(Part::Day);
    let day = has(Part::DayOfYear) != month_and_day;
    let half_day = has(Part::HalfDayHour) && has(Part::AmPm);
    let hour = has(Part::Hour) && !has(Part::AmPm) && !has(Part::HalfDayHour);
    year && day && (hour != half_day)
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
