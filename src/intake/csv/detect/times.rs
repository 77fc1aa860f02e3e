//! Which columns hold the time, and the ways in which they may be read.

use super::Hints;
use super::cells::Look;
use super::finding::Question;
use super::formats::{Format, formats, is_date, is_time_of_day};
use super::questions;
use super::table::Table;
use super::words::TimeWord;
use crate::intake::csv::layout::Clock;

/// Cells of a column that are looked at to tell what it holds.
const CELLS: usize = 60;
/// Cells from which ways of reading are taken.
const CELLS_FOR_FORMATS: usize = 400;

/// The columns of the time.
#[derive(Debug, Clone, Default)]
pub(super) struct TimeColumns {
    pub at: Vec<usize>,
    /// Ways in which the joined cells may be read; none for numbers.
    pub formats: Vec<Format>,
    /// Numbers that count seconds, milliseconds or days.
    pub number: Option<&'static str>,
}

/// What is known of each column before its cells are read.
pub(super) struct Names<'a> {
    pub table: &'a Table,
    pub words: &'a [Vec<TimeWord>],
    pub references: &'a [String],
}

impl Names<'_> {
    fn cells(&self, at: usize) -> impl Iterator<Item = &str> {
        let cells = self
            .table
            .rows
            .iter()
            .filter_map(move |(_, row)| row.get(at).map(String::as_str));
        cells.filter(|cell| Look::of(cell) != Look::Empty && Look::of(cell) != Look::Mark)
    }

    fn has(&self, at: usize, word: TimeWord) -> bool {
        self.words[at].contains(&word)
    }

    fn with(&self, word: TimeWord) -> Option<usize> {
        (0..self.words.len()).find(|at| self.has(*at, word))
    }

    /// Nearly all cells are so; one in ten may be broken.
    fn mostly(&self, at: usize, is: impl Fn(&str) -> bool) -> bool {
        let (mut all, mut fit) = (0, 0);
        for cell in self.cells(at).take(CELLS) {
            all += 1;
            fit += usize::from(is(cell));
        }
        // In a short sample one broken cell is more than that.
        fit > 0 && (fit * 10 >= all * 9 || fit >= 2 && fit + 1 == all)
    }

    fn is_number(&self, at: usize) -> bool {
        self.mostly(at, |cell| Look::of(cell) == Look::Number)
    }

    /// A column of whole numbers up to a largest one; one cell beyond it tells another thing.
    fn counts_to(&self, at: usize, most: u32) -> bool {
        let whole = |cell: &str| cell.parse::<u32>().ok();
        let beyond = self.cells(at).take(CELLS).filter_map(whole).any(|number| number > most);
        !beyond && self.mostly(at, |cell| whole(cell).is_some())
    }

    fn joined(&self, at: &[usize]) -> impl Iterator<Item = String> {
        self.table.rows.iter().map(move |(_, row)| {
            let cells: Vec<&str> = at.iter().filter_map(|at| row.get(*at)).map(String::as_str).collect();
            cells.join(" ").trim().to_string()
        })
    }

    /// The columns with every way in which their cells may be read.
    fn columns(&self, at: Vec<usize>) -> TimeColumns {
        let mut found: Vec<Format> = Vec::new();
        for cell in self.joined(&at).take(CELLS_FOR_FORMATS) {
            for format in formats(&cell) {
                if found.len() < 12 && !found.iter().any(|known| known.text == format.text) {
                    found.push(format);
                }
            }
        }
        // Numbers without leading zeros: 5 is five past midnight where 100 is one o'clock.
        if let Some(whole) = found
            .iter()
            .find(|format| format.clock == Some(Clock::HourMinute))
            .cloned()
        {
            let date = whole.text.split("%H").next().unwrap_or_default().to_string();
            found.retain(|format| format.clock == Some(Clock::HourMinute) || !format.text.starts_with(&date));
        }
        TimeColumns {
            at,
            formats: found,
            number: None,
        }
    }
}

/// Finds the columns of the time, or asks for them.
pub(super) fn find(names: &Names, hints: &Hints) -> Result<TimeColumns, Box<Question>> {
    if !hints.time.is_empty() {
        return hinted(names, hints);
    }
    let usable: Vec<usize> = (0..names.words.len())
        .filter(|at| !hints.ignore.contains(&names.references[*at]))
        .collect();
    if let Some(at) = one_stamp(names, &usable)? {
        return Ok(names.columns(vec![at]));
    }
    date_and_time(names, &usable)
        .or_else(|| parts(names))
        .or_else(|| counted(names, &usable))
        .ok_or_else(|| Box::new(questions::no_time(names.references)))
}

fn hinted(names: &Names, hints: &Hints) -> Result<TimeColumns, Box<Question>> {
    let place = |name: &String| names.references.iter().position(|known| known == name.trim());
    let at: Vec<usize> = hints.time.iter().filter_map(place).collect();
    if at.len() != hints.time.len() {
        return Err(Box::new(questions::no_time(names.references)));
    }
    if let [only] = at[..]
        && let Some(number) = number_format(names, only)
    {
        return Ok(TimeColumns {
            at,
            formats: Vec::new(),
            number: Some(number),
        });
    }
    Ok(names.columns(at))
}

/// The one column that holds date and time together; those with an offset in each cell come first.
fn one_stamp(names: &Names, usable: &[usize]) -> Result<Option<usize>, Box<Question>> {
    let is_stamp = |at: &usize| {
        let named = !names.words[*at].is_empty();
        let fits = |cell: &str| !formats(cell).is_empty();
        (named || !names.is_number(*at)) && names.mostly(*at, fits)
    };
    let stamps: Vec<usize> = usable.iter().copied().filter(is_stamp).collect();
    let has_offset = |at: &usize| {
        names.mostly(*at, |cell| {
            formats(cell).iter().any(|f| f.text.contains("%z") || f.zone.is_some()) || shows_offset(cell)
        })
    };
    let says_zone = |at: &usize| super::zone::written(&names.table.names[*at].first).is_some();
    let of = |is: &dyn Fn(&usize) -> bool| stamps.iter().copied().filter(is).collect::<Vec<_>>();
    let named = |at: &usize| names.has(*at, TimeWord::Stamp);
    for group in [of(&has_offset), of(&says_zone), of(&named), stamps.clone()] {
        match group[..] {
            [] => {}
            [only] => return Ok(Some(only)),
            [first, ..] if has_offset(&first) => return Ok(Some(first)),
            _ => {
                let listed: Vec<String> = group.iter().map(|at| names.references[*at].clone()).collect();
                return Err(Box::new(questions::several_times(&listed)));
            }
        }
    }
    Ok(None)
}

fn shows_offset(cell: &str) -> bool {
    crate::intake::csv::shown::read_rfc3339(cell.as_bytes()).is_some_and(|shown| shown.offset_s.is_some())
}

/// A column of dates and one of times of day.
fn date_and_time(names: &Names, usable: &[usize]) -> Option<TimeColumns> {
    let named = |at: usize| !names.words[at].is_empty();
    let is_day = |at: &&usize| names.mostly(**at, is_date) && (named(**at) || !names.is_number(**at));
    let date = *usable.iter().find(is_day)?;
    let is_hour = |at: &&usize| {
        let whole =
            |most| names.counts_to(**at, most) && (names.has(**at, TimeWord::Hour) || names.has(**at, TimeWord::Stamp));
        **at != date && (names.mostly(**at, is_time_of_day) || whole(2400))
    };
    let time = usable.iter().find(is_hour)?;
    let mut at = vec![date, *time];
    let minute = names
        .with(TimeWord::Minute)
        .filter(|minute| names.counts_to(*time, 24) && names.counts_to(*minute, 59));
    at.extend(minute.filter(|minute| !at.contains(minute)));
    Some(names.columns(at))
}

/// Columns of year, month, day and hour, or of year, day of the year and hour.
fn parts(names: &Names) -> Option<TimeColumns> {
    let year = names.with(TimeWord::Year)?;
    let hour = names.with(TimeWord::Hour).filter(|at| names.counts_to(*at, 2400));
    let minute = names.with(TimeWord::Minute).filter(|at| names.counts_to(*at, 59));
    let year_sign = if names.mostly(year, |cell| cell.len() <= 2) {
        "%y"
    } else {
        "%Y"
    };
    let day_of_year = names.with(TimeWord::DayOfYear).filter(|at| names.counts_to(*at, 366));
    let (mut at, mut text) = match (names.with(TimeWord::Month), names.with(TimeWord::Day), day_of_year) {
        (Some(month), Some(day), _) if names.counts_to(day, 31) => {
            let month_sign = if names.counts_to(month, 12) { "%m" } else { "%b" };
            (vec![year, month, day], format!("{year_sign} {month_sign} %d"))
        }
        (_, _, Some(day)) => (vec![year, day], format!("{year_sign} %j")),
        _ => return None,
    };
    let hour = hour.or_else(|| hour_by_zone(names, &at))?;
    at.push(hour);
    text.push_str(" %H");
    let minute = minute.filter(|minute| names.counts_to(hour, 24) && !at.contains(minute));
    if let Some(minute) = minute {
        at.push(minute);
        text.push_str(" %M");
    }
    let clock = (!names.counts_to(hour, 24)).then_some(Clock::HourMinute);
    let formats = Format::new(text, clock).into_iter().collect();
    Some(TimeColumns {
        at,
        formats,
        number: None,
    })
}

/// A column of hours and minutes in one number that is called by its zone alone, as `MST`.
fn hour_by_zone(names: &Names, taken: &[usize]) -> Option<usize> {
    let called = |at: &usize| !taken.contains(at) && super::zone::written(&names.table.names[*at].first).is_some();
    (0..names.words.len())
        .filter(called)
        .find(|at| names.counts_to(*at, 2400))
}

/// A column of numbers that counts from an epoch.
fn counted(names: &Names, usable: &[usize]) -> Option<TimeColumns> {
    usable.iter().filter(|at| !names.words[**at].is_empty()).find_map(|at| {
        let number = number_format(names, *at)?;
        Some(TimeColumns {
            at: vec![*at],
            formats: Vec::new(),
            number: Some(number),
        })
    })
}

/// Seconds from 1973 on, milliseconds from 1973 on, or days of a spreadsheet from 1954 to 2119.
fn number_format(names: &Names, at: usize) -> Option<&'static str> {
    let within = |low: f64, high: f64| {
        names.mostly(at, |cell| {
            cell.replace(',', ".")
                .parse::<f64>()
                .is_ok_and(|number| number >= low && number < high)
        })
    };
    let ranges = [
        ("unix_s", 1e8, 1e10),
        ("unix_ms", 1e11, 1e13),
        ("spreadsheet_days", 20_000.0, 80_000.0),
    ];
    ranges
        .iter()
        .find(|(_, low, high)| within(*low, *high))
        .map(|(name, _, _)| *name)
}
