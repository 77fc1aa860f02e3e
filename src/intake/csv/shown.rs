//! A time cell into the date and time it shows.

use super::number::digits;
use super::pattern::Part;
use crate::model::weather::zone::parse_offset_s;

/// Date and time as the cell shows them; hour 0 to 24, nothing checked against a calendar.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub(super) struct Shown {
    pub year: i64,
    pub month: i64,
    pub day: i64,
    /// Set instead of month and day.
    pub day_of_year: Option<i64>,
    pub hour: i64,
    pub minute: i64,
    pub second: i64,
    /// True for the second half of the day on a 12-hour clock.
    pub afternoon: Option<bool>,
    /// Offset in the cell, seconds east of UTC.
    pub offset_s: Option<i64>,
}

/// Reads a cell by the parts of a pattern; `None` when it does not fit.
pub(super) fn read_parts(parts: &[Part], cell: &[u8]) -> Option<Shown> {
    let mut rest = cell.trim_ascii();
    let mut shown = Shown::default();
    for part in parts {
        rest = shown.take(*part, rest)?;
    }
    rest.is_empty().then_some(shown)
}

impl Shown {
    /// Takes one part off the front; what is left comes back.
    fn take<'a>(&mut self, part: Part, text: &'a [u8]) -> Option<&'a [u8]> {
        let (value, rest) = match part {
            Part::Text(expected) => {
                return text
                    .split_first()
                    .filter(|(b, _)| **b == expected)
                    .map(|(_, rest)| rest);
            }
            Part::Spaces => return spaces(text),
            Part::MonthName => month_name(text)?,
            Part::AmPm => am_pm(text)?,
            Part::Offset => offset(text)?,
            Part::Year => number(text, 4, 4)?,
            Part::DayOfYear => number(text, 1, 3)?,
            Part::Second => second(text)?,
            Part::ShortYear => number(text, 2, 2)?,
            Part::HourMinute => number(text, 1, 4)?,
            Part::Month | Part::Day | Part::Hour | Part::HalfDayHour | Part::Minute => number(text, 1, 2)?,
        };
        self.put(part, value);
        Some(rest)
    }

    fn put(&mut self, part: Part, value: i64) {
        match part {
            Part::Year => self.year = value,
            // POSIX: 69 to 99 are the twentieth century.
            Part::ShortYear => self.year = if value < 69 { 2000 + value } else { 1900 + value },
            Part::Month | Part::MonthName => self.month = value,
            Part::Day => self.day = value,
            Part::DayOfYear => self.day_of_year = Some(value),
            Part::Hour | Part::HalfDayHour => self.hour = value,
            Part::HourMinute => (self.hour, self.minute) = (value / 100, value % 100),
            Part::Minute => self.minute = value,
            Part::Second => self.second = value,
            Part::AmPm => self.afternoon = Some(value == 1),
            Part::Offset => self.offset_s = Some(value),
            Part::Spaces | Part::Text(_) => {}
        }
    }
}

fn spaces(text: &[u8]) -> Option<&[u8]> {
    let rest = text.trim_ascii_start();
    (rest.len() < text.len()).then_some(rest)
}

/// As many digits as there are, from `least` to `most`.
fn number(text: &[u8], least: usize, most: usize) -> Option<(i64, &[u8])> {
    let length = text.iter().take(most).take_while(|b| b.is_ascii_digit()).count();
    (length >= least).then(|| Some((digits(&text[..length])?, &text[length..])))?
}

/// Whole seconds; a fraction behind them is read over.
fn second(text: &[u8]) -> Option<(i64, &[u8])> {
    let (second, rest) = number(text, 1, 2)?;
    Some((second, without_fraction(rest)))
}

fn without_fraction(text: &[u8]) -> &[u8] {
    match text {
        [b'.' | b',', fraction @ ..] if fraction.first().is_some_and(u8::is_ascii_digit) => {
            let length = fraction.iter().take_while(|b| b.is_ascii_digit()).count();
            &fraction[length..]
        }
        other => other,
    }
}

/// Names of the months, in the order of the year; any beginning of three letters or more stands for one.
pub(super) const MONTHS: [&str; 12] = [
    "january",
    "february",
    "march",
    "april",
    "may",
    "june",
    "july",
    "august",
    "september",
    "october",
    "november",
    "december",
];

fn month_name(text: &[u8]) -> Option<(i64, &[u8])> {
    let length = text.iter().take_while(|b| b.is_ascii_alphabetic()).count();
    let word = text[..length].to_ascii_lowercase();
    let fits = |name: &&str| length >= 3 && name.as_bytes().starts_with(&word);
    let month = MONTHS.iter().position(fits)? as i64 + 1;
    Some((month, text[length..].strip_prefix(b".").unwrap_or(&text[length..])))
}

/// `AM`, `p.m.` and the like; 1 is the afternoon.
fn am_pm(text: &[u8]) -> Option<(i64, &[u8])> {
    let afternoon = match text.first()?.to_ascii_lowercase() {
        b'a' => 0,
        b'p' => 1,
        _ => return None,
    };
    let rest = text[1..].strip_prefix(b".").unwrap_or(&text[1..]);
    let rest = rest.strip_prefix(b"m").or_else(|| rest.strip_prefix(b"M"))?;
    Some((afternoon, rest.strip_prefix(b".").unwrap_or(rest)))
}

/// `Z`, `+01:00`, `+0100` or `+01`.
fn offset(text: &[u8]) -> Option<(i64, &[u8])> {
    if let Some(rest) = text.strip_prefix(b"Z").or_else(|| text.strip_prefix(b"z")) {
        return Some((0, rest));
    }
    let lengths = [6, 5, 3].into_iter().filter(|length| text.len() >= *length);
    lengths
        .filter_map(|length| Some((parse_offset_s(&text[..length])?, &text[length..])))
        .next()
}

/// Longest serial day that has a date: 31 December 9999.
const LAST_SERIAL_DAY: f64 = 2_958_466.0;

/// Days since 1899-12-30 with a fraction, as wall clock [s], to the nearest second.
pub(super) fn serial_wall_s(days: f64) -> Option<i64> {
    const EPOCH_1899_S: i64 = -25_569 * 86_400;
    (1.0..LAST_SERIAL_DAY)
        .contains(&days)
        .then(|| EPOCH_1899_S + (days * 86_400.0).round() as i64)
}

/// RFC 3339, read a little more widely: a space for `T`, no seconds, no offset.
pub(super) fn read_rfc3339(cell: &[u8]) -> Option<Shown> {
    let cell = cell.trim_ascii();
    let [
        y1,
        y2,
        y3,
        y4,
        b'-',
        m1,
        m2,
        b'-',
        d1,
        d2,
        b'T' | b't' | b' ',
        h1,
        h2,
        b':',
        n1,
        n2,
        rest @ ..,
    ] = cell
    else {
        return None;
    };
    let mut shown = Shown {
        year: digits(&[*y1, *y2, *y3, *y4])?,
        month: digits(&[*m1, *m2])?,
        day: digits(&[*d1, *d2])?,
        hour: digits(&[*h1, *h2])?,
        minute: digits(&[*n1, *n2])?,
        ..Shown::default()
    };
    let rest = match rest {
        [b':', s1, s2, rest @ ..] => {
            shown.second = digits(&[*s1, *s2])?;
            without_fraction(rest)
        }
        other => other,
    };
    if !rest.is_empty() {
        let (offset_s, rest) = offset(rest.trim_ascii_start())?;
        shown.offset_s = Some(offset_s);
        rest.is_empty().then_some(())?;
    }
    Some(shown)
}

#[cfg(test)]
mod tests {
    use super::super::pattern::Pattern;
    use super::*;

    fn parts(format: &str, cell: &str) -> Option<(i64, i64, i64, i64, i64)> {
        let Ok(Pattern::Parts(parts)) = Pattern::parse(format) else {
            panic!("{format}")
        };
        read_parts(&parts, cell.as_bytes()).map(|s| (s.year, s.month, s.day, s.hour, s.minute))
    }

    #[test]
    fn patterns_read_what_they_describe() {
        assert_eq!(parts("%m/%d/%Y %H:%M", "01/31/1997 24:00"), Some((1997, 1, 31, 24, 0)));
        assert_eq!(parts("%m/%d/%Y %H:%M", "1/2/1997   1:05"), Some((1997, 1, 2, 1, 5)));
        assert_eq!(parts("%d.%m.%y %H", "31.12.99 7"), Some((1999, 12, 31, 7, 0)));
        assert_eq!(
            parts("%d %b %Y, %H:%M:%S", "3 March 2026, 04:05:06.7"),
            Some((2026, 3, 3, 4, 5))
        );
        assert_eq!(parts("%Y%m%d%H", "2026013113"), Some((2026, 1, 31, 13, 0)));
        assert_eq!(parts("%m/%d/%Y %H:%M", "2026-01-31 13:00"), None);
        assert_eq!(parts("%Y-%m-%d %H", "2026-01-31 13:00"), None);
    }

    #[test]
    fn halves_of_the_day_and_offsets_are_read() {
        let Ok(Pattern::Parts(p)) = Pattern::parse("%Y-%m-%d %I:%M %p %z") else {
            panic!()
        };
        let shown = read_parts(&p, b"2026-01-31 1:00 p.m. -0930").unwrap();
        assert_eq!(
            (shown.hour, shown.afternoon, shown.offset_s),
            (1, Some(true), Some(-34_200))
        );
        let Ok(Pattern::Parts(p)) = Pattern::parse("%Y %j %H") else {
            panic!()
        };
        assert_eq!(read_parts(&p, b"2018 291 0").unwrap().day_of_year, Some(291));
    }

    #[test]
    fn rfc3339_and_its_cousins() {
        for (cell, offset_s) in [
            ("2026-01-31T13:00:00Z", Some(0)),
            ("2026-01-31t13:00:00.25+01:00", Some(3600)),
            ("2026-01-31 13:00", None),
            (" 2026-01-31 13:00:00 +0100 ", Some(3600)),
        ] {
            let shown = read_rfc3339(cell.as_bytes()).unwrap_or_else(|| panic!("{cell}"));
            assert_eq!((shown.year, shown.hour, shown.offset_s), (2026, 13, offset_s), "{cell}");
        }
        for bad in [
            "",
            "2026-01-31",
            "2026-01-31T13",
            "2026-01-31T13:00:00ZZ",
            "2026-01-31T13:00:0",
            "31-01-2026 13:00",
        ] {
            assert_eq!(read_rfc3339(bad.as_bytes()), None, "{bad}");
        }
    }
}
