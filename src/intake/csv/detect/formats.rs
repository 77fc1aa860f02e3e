//! Ways to read a time cell: patterns that fit how it is written, day first and month first side by side.

use crate::intake::csv::layout::Clock;
use crate::intake::csv::pattern::Pattern;
use crate::intake::csv::shown::{MONTHS, Shown, read_parts, read_rfc3339};

/// One way to read the times of a file.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Format {
    pub text: String,
    pub pattern: Pattern,
    pub clock: Option<Clock>,
    /// Zone named in the cells themselves.
    pub zone: Option<String>,
}

impl Format {
    pub(super) fn new(text: impl Into<String>, clock: Option<Clock>) -> Option<Self> {
        let text = text.into();
        let pattern = Pattern::parse(&text).ok()?.with_clock(clock);
        let zone = ["UTC", "GMT"]
            .iter()
            .any(|name| text.ends_with(name))
            .then(|| "UTC".to_string());
        Some(Self {
            text,
            pattern,
            clock,
            zone,
        })
    }

    /// The date and time of a cell, if it can be one: month, day, hour and minute in their ranges.
    pub(super) fn read(&self, cell: &[u8]) -> Option<Shown> {
        let shown = match &self.pattern {
            Pattern::Rfc3339 => read_rfc3339(cell)?,
            Pattern::Parts(parts) => read_parts(parts, cell)?,
            Pattern::UnixSeconds | Pattern::UnixMilliseconds | Pattern::SpreadsheetDays => return None,
        };
        let day = match shown.day_of_year {
            Some(day) => (1..=366).contains(&day),
            None => (1..=12).contains(&shown.month) && (1..=31).contains(&shown.day),
        };
        (day && shown.hour <= 24 && shown.minute < 60 && shown.second <= 60).then_some(shown)
    }

    pub(super) fn is_day_first(&self) -> bool {
        matches!((self.text.find("%d"), self.text.find("%m")), (Some(day), Some(month)) if day < month)
    }
}

/// Every pattern that fits one cell.
pub(super) fn formats(cell: &str) -> Vec<Format> {
    if read_rfc3339(cell.as_bytes()).is_some() {
        return Format::new("rfc3339", None).into_iter().collect();
    }
    let pieces = pieces(cell.trim());
    let Some((dates, rest)) = dates(&pieces) else {
        return Vec::new();
    };
    let Some((time, clock)) = time_of_day(rest) else {
        return Vec::new();
    };
    let all = dates
        .into_iter()
        .filter_map(|date| Format::new(format!("{date}{time}"), clock));
    all.filter(|format| format.read(cell.as_bytes()).is_some()).collect()
}

/// True for a cell that is a date without a time of day.
pub(super) fn is_date(cell: &str) -> bool {
    dates(&pieces(cell.trim())).is_some_and(|(dates, rest)| rest.is_empty() && !dates.is_empty())
}

/// True for a cell that is a time of day without a date, and says so itself.
pub(super) fn is_time_of_day(cell: &str) -> bool {
    let pieces = pieces(cell.trim());
    let begins = matches!(pieces.first(), Some(Piece::Digits(1..=2, _)));
    begins && pieces.len() >= 3 && with_space(&pieces).is_some_and(|pieces| time_of_day(&pieces).is_some())
}

fn with_space<'a>(pieces: &[Piece<'a>]) -> Option<Vec<Piece<'a>>> {
    Some(
        std::iter::once(Piece::Sign(' '))
            .chain(pieces.iter().copied())
            .collect(),
    )
}

/// A run of digits (how many, and their value), of letters, or a sign.
#[derive(Debug, Clone, Copy, PartialEq)]
enum Piece<'a> {
    Digits(usize, u64),
    Letters(&'a str),
    Sign(char),
}

fn pieces(cell: &str) -> Vec<Piece<'_>> {
    let mut pieces = Vec::new();
    let mut rest = cell;
    while let Some(letter) = rest.chars().next().filter(|_| pieces.len() < 24) {
        let length = |is: fn(char) -> bool| rest.find(|c| !is(c)).unwrap_or(rest.len());
        let (piece, length) = if letter.is_ascii_digit() {
            let length = length(|c| c.is_ascii_digit());
            (
                Piece::Digits(length, rest[..length].parse().unwrap_or(u64::MAX)),
                length,
            )
        } else if letter.is_alphabetic() {
            let length = length(char::is_alphabetic);
            (Piece::Letters(&rest[..length]), length)
        } else if letter == ' ' {
            (Piece::Sign(' '), length(|c| c == ' '))
        } else {
            (Piece::Sign(letter), letter.len_utf8())
        };
        pieces.push(piece);
        rest = &rest[length..];
    }
    pieces
}

/// The patterns of the date in front, and what follows it.
fn dates<'p, 'a>(pieces: &'p [Piece<'a>]) -> Option<(Vec<String>, &'p [Piece<'a>])> {
    let (front, rest) = pieces.split_at(pieces.len().min(5));
    if let [first, Piece::Sign(a), second, Piece::Sign(b), third] = front
        && let Some(texts) = three_parts([*first, *second, *third], *a, *b)
    {
        return Some((texts, rest));
    }
    compact(pieces).or_else(|| american(pieces))
}

/// Year, month and day with a sign between them.
fn three_parts(parts: [Piece; 3], a: char, b: char) -> Option<Vec<String>> {
    use Piece::{Digits, Letters};
    let plain = a == b && is_date_sign(a);
    let texts = match parts {
        [Digits(4, _), Digits(1..=2, _), Digits(1..=2, _)] if plain => vec![format!("%Y{a}%m{a}%d")],
        [Digits(1..=2, _), Digits(1..=2, _), Digits(4, _)] if plain => {
            vec![format!("%d{a}%m{a}%Y"), format!("%m{a}%d{a}%Y")]
        }
        [Digits(first @ 1..=2, _), Digits(1..=2, _), Digits(2, _)] if plain => {
            let mut texts = vec![format!("%d{a}%m{a}%y"), format!("%m{a}%d{a}%y")];
            if first == 2 && a != '.' {
                texts.push(format!("%y{a}%m{a}%d"));
            }
            texts
        }
        [Digits(1..=2, _), Letters(month), Digits(year, _)] if is_month(month) => {
            vec![format!("%d{a}%b{b}{}", year_of(year)?)]
        }
        [Letters(month), Digits(1..=2, _), Digits(year, _)] if is_month(month) => {
            vec![format!("%b{a}%d{b}{}", year_of(year)?)]
        }
        _ => return None,
    };
    Some(texts)
}

/// Digits without signs.
fn compact<'p, 'a>(pieces: &'p [Piece<'a>]) -> Option<(Vec<String>, &'p [Piece<'a>])> {
    let (first, rest) = pieces.split_first()?;
    let Piece::Digits(length, value) = *first else {
        return None;
    };
    let (text, below_year) = match length {
        8 => ("%Y%m%d", 10_000),
        10 => ("%Y%m%d%H", 1_000_000),
        12 => ("%Y%m%d%H%M", 100_000_000),
        14 => ("%Y%m%d%H%M%S", 10_000_000_000),
        _ => return None,
    };
    let sound = (1800..2200).contains(&(value / below_year)) && (length == 8 || rest.is_empty());
    sound.then(|| (vec![text.to_string()], rest))
}

/// `Mar 3, 2026`.
fn american<'p, 'a>(pieces: &'p [Piece<'a>]) -> Option<(Vec<String>, &'p [Piece<'a>])> {
    use Piece::{Digits, Letters, Sign};
    match pieces {
        [
            Letters(month),
            Sign(' '),
            Digits(1..=2, _),
            Sign(','),
            Sign(' '),
            Digits(4, _),
            rest @ ..,
        ] => is_month(month).then(|| (vec!["%b %d, %Y".to_string()], rest)),
        _ => None,
    }
}

fn is_date_sign(sign: char) -> bool {
    matches!(sign, '-' | '/' | '.' | ' ')
}

fn year_of(digits: usize) -> Option<&'static str> {
    match digits {
        4 => Some("%Y"),
        2 => Some("%y"),
        _ => None,
    }
}

fn is_month(word: &str) -> bool {
    word.len() >= 3 && MONTHS.iter().any(|name| name.starts_with(&word.to_lowercase()))
}

/// The pattern of the time of day behind a date, with the sign between them; empty for a date that holds it already.
fn time_of_day(pieces: &[Piece]) -> Option<(String, Option<Clock>)> {
    use Piece::{Digits, Letters, Sign};
    let (between, rest) = match pieces {
        [] => return Some((String::new(), None)),
        [Sign(','), Sign(' '), rest @ ..] => (", ".to_string(), rest),
        [Sign(sign @ (' ' | '-' | ',' | ':' | '_')), rest @ ..] => (sign.to_string(), rest),
        [Letters("T"), rest @ ..] => ("T".to_string(), rest),
        _ => return None,
    };
    let twelve = rest
        .iter()
        .any(|piece| matches!(piece, Letters(word) if is_half_day(word)));
    let hour = if twelve { "%I" } else { "%H" };
    let (time, clock, rest) = match rest {
        [
            Digits(1..=2, _),
            Sign(a @ (':' | '.')),
            Digits(2, _),
            Sign(b),
            Digits(2, _),
            Sign('.' | ','),
            Digits(..),
            rest @ ..,
        ]
        | [
            Digits(1..=2, _),
            Sign(a @ (':' | '.')),
            Digits(2, _),
            Sign(b @ (':' | '.')),
            Digits(2, _),
            rest @ ..,
        ] => (format!("{hour}{a}%M{b}%S"), None, rest),
        [Digits(1..=2, _), Sign(a @ (':' | '.')), Digits(2, _), rest @ ..] => (format!("{hour}{a}%M"), None, rest),
        [Digits(1..=2, _), Letters("h"), Digits(2, _), rest @ ..] => (format!("{hour}h%M"), None, rest),
        [Digits(6, _), rest @ ..] => (format!("{hour}%M%S"), None, rest),
        [Digits(3..=4, _), rest @ ..] => (hour.to_string(), Some(Clock::HourMinute), rest),
        [Digits(1..=2, _), Sign(' '), Digits(1..=2, _), rest @ ..] => (format!("{hour} %M"), None, rest),
        [Digits(1..=2, _), Letters("h"), rest @ ..] => (format!("{hour}h"), None, rest),
        [Digits(1..=2, _), rest @ ..] => (hour.to_string(), None, rest),
        _ => return None,
    };
    ending(rest).map(|end| (format!("{between}{time}{end}"), clock))
}

fn is_half_day(word: &str) -> bool {
    ["am", "pm", "a", "p"].contains(&word.to_lowercase().as_str())
}

/// Half of the day, and zone, behind a time of day.
fn ending(pieces: &[Piece]) -> Option<String> {
    use Piece::{Digits, Letters, Sign};
    match pieces {
        [] => Some(String::new()),
        [Sign(' '), rest @ ..] => ending(rest).filter(|end| !end.is_empty()).map(|end| format!(" {end}")),
        [Letters(half), Sign('.'), Letters("m" | "M"), Sign('.'), rest @ ..] if is_half_day(half) => {
            ending(rest).map(|end| format!("%p{end}"))
        }
        [Letters(half), rest @ ..] if is_half_day(half) && half.len() == 2 => {
            ending(rest).map(|end| format!("%p{end}"))
        }
        [Letters("Z")] => Some("%z".into()),
        [Letters(zone @ ("UTC" | "GMT"))] => Some(zone.to_string()),
        [Sign('+' | '-'), Digits(2 | 4, _)] => Some("%z".into()),
        [Sign('+' | '-'), Digits(2, _), Sign(':'), Digits(2, _)] => Some("%z".into()),
        _ => None,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn texts(cell: &str) -> Vec<String> {
        formats(cell).into_iter().map(|format| format.text).collect()
    }

    #[test]
    fn times_as_people_write_them() {
        assert_eq!(texts("2026-01-31T13:00:00Z"), ["rfc3339"]);
        assert_eq!(texts("2026-01-31 13:00"), ["rfc3339"]);
        assert_eq!(texts("31.01.2026 13:00"), ["%d.%m.%Y %H:%M"]);
        assert_eq!(texts("03/04/2026 13:00:05"), ["%d/%m/%Y %H:%M:%S", "%m/%d/%Y %H:%M:%S"]);
        assert_eq!(texts("1/2/26 1:05 PM"), ["%d/%m/%y %I:%M %p", "%m/%d/%y %I:%M %p"]);
        assert_eq!(
            texts("01/02/26 01:05:00 AM"),
            ["%d/%m/%y %I:%M:%S %p", "%m/%d/%y %I:%M:%S %p", "%y/%m/%d %I:%M:%S %p"]
        );
        assert_eq!(texts("3 Mar 2026 04:05"), ["%d %b %Y %H:%M"]);
        assert_eq!(texts("Mar 3, 2026 04:05"), ["%b %d, %Y %H:%M"]);
        assert_eq!(texts("20260131 13"), ["%Y%m%d %H"]);
        assert_eq!(texts("2026013113"), ["%Y%m%d%H"]);
        assert_eq!(texts("202601311305"), ["%Y%m%d%H%M"]);
        assert_eq!(texts("2026/01/31 24:00"), ["%Y/%m/%d %H:%M"]);
        assert_eq!(texts("2026 1 31 13 0"), ["%Y %m %d %H %M"]);
        assert_eq!(texts("31-01-2026 13:00 +0100"), ["%d-%m-%Y %H:%M %z"]);
        assert_eq!(formats("2026/01/31 13:00 UTC")[0].zone.as_deref(), Some("UTC"));
        assert_eq!(formats("20260131 1305")[0].clock, Some(Clock::HourMinute));
    }

    #[test]
    fn dates_and_times_of_day_alone() {
        assert!(is_date("31.01.2026") && is_date("20260131") && is_date("2026-01-31") && !is_date("31.01.2026 1:00"));
        assert!(
            is_time_of_day("13:05") && is_time_of_day("1:05 PM") && is_time_of_day("24:00:00") && !is_time_of_day("13")
        );
        for none in ["", "20.5", "FM-15", "99999999", "2026", "13:05", "12345", "1.2.3.4.5"] {
            assert!(formats(none).is_empty(), "{none}");
        }
    }
}
