//! A pass over the rows of a file: which ways of reading the times fit, and what values the columns hold.

use std::collections::{BTreeMap, BTreeSet, HashSet};

use super::formats::Format;
use crate::intake::csv::layout::Dialect;
use crate::intake::csv::limits::Limits;
use crate::intake::csv::number::{decimal, grouped};
use crate::intake::csv::records::Records;
use crate::intake::csv::shown::Shown;
use crate::intake::csv::source;
use crate::model::weather::WeatherFault;
use crate::model::weather::zone::wall_clock_s;

/// Rows after which nothing new is expected: two years of hours. Undecided dates are followed to the end.
const ROWS_ENOUGH: usize = 20_000;
/// No mark of a missing value is nearer to zero.
const SMALLEST_MARK: f64 = 99.0;
/// Different words in a column after which it is no set of categories.
const MOST_CATEGORIES: usize = 20;
/// Values that loggers and services write for a missing one; numbers that can be readings count only where they cannot.
const MARKS: [f64; 16] = [
    -999.0, -999.9, -999.99, -9999.0, -9999.9, -99999.0, -7999.0, -6999.0, -8888.0, -99.0, -99.9, 999.0, 999.9, 9999.0,
    9999.9, 99999.0,
];

/// What to look at.
pub(super) struct Ask<'a> {
    pub dialect: &'a Dialect,
    /// Columns of the time, joined by a space.
    pub time_at: &'a [usize],
    pub formats: Vec<Format>,
    /// Columns that may hold numbers.
    pub values: &'a [usize],
    /// Columns that may hold categories.
    pub texts: &'a [usize],
}

/// What was seen.
pub(super) struct Survey {
    pub fits: Vec<Fit>,
    pub values: BTreeMap<usize, Values>,
    pub categories: BTreeMap<usize, Categories>,
    pub rows: usize,
    /// The first row of data.
    pub first_row: usize,
    /// Room for the joined cells of the time.
    cell: Vec<u8>,
}

/// How one way of reading the times fits.
pub(super) struct Fit {
    pub format: Format,
    pub read: usize,
    /// The first row that only other ways can read, with its cell.
    pub refuted: Option<(usize, String)>,
    /// The first row that lies weeks from the one before.
    pub leap: Option<usize>,
    pub hour_0: bool,
    pub hour_24: bool,
    pub years: BTreeSet<i64>,
    pub leap_day: bool,
    /// Rows that go back in time, and back when years are passed over; rows more than ten months ahead.
    pub backward: usize,
    pub backward_in_year: usize,
    pub far_ahead: usize,
    pub offsets: usize,
    pub repeated: usize,
    last_s: Option<i64>,
    last_in_year: (i64, i64, i64, i64),
    seen: HashSet<i64>,
}

/// Numbers of a column.
#[derive(Default)]
pub(super) struct Values {
    pub count: usize,
    pub low: f64,
    pub high: f64,
    /// Marks that were met, as written, with their number and count.
    pub marks: BTreeMap<String, (f64, usize)>,
}

/// Words of a column.
#[derive(Default)]
pub(super) struct Categories {
    pub names: BTreeSet<String>,
    /// Times that come back beside the same word.
    pub repeated: usize,
    seen: HashSet<(i64, usize)>,
}

impl Survey {
    pub(super) fn run(bytes: &[u8], ask: Ask, limits: &Limits) -> Result<Self, WeatherFault> {
        let text = source::open(bytes, &ask.dialect.encoding, limits)?;
        let mut records = Records::new(text, ask.dialect.cut(), ask.dialect.comment_byte(), limits);
        for _ in 0..ask.dialect.skip_rows {
            records.skip_line()?;
        }
        for _ in 0..ask.dialect.header_rows {
            records.advance()?;
        }
        let mut survey = Self::new(&ask);
        while survey.rows < ROWS_ENOUGH || survey.is_undecided() {
            // A row that cannot be cut is told by the reading itself.
            if !records.advance().unwrap_or(false) || survey.rows >= limits.max_rows {
                break;
            }
            survey.rows += 1;
            if survey.first_row == 0 {
                survey.first_row = records.row();
            }
            survey.look(&records, &ask);
        }
        Ok(survey)
    }

    fn new(ask: &Ask) -> Self {
        Self {
            fits: ask.formats.iter().cloned().map(Fit::new).collect(),
            values: ask.values.iter().map(|at| (*at, Values::default())).collect(),
            categories: ask.texts.iter().map(|at| (*at, Categories::default())).collect(),
            rows: 0,
            first_row: 0,
            cell: Vec::new(),
        }
    }

    /// Ways of reading that have not been refuted.
    pub(super) fn standing(&self) -> impl Iterator<Item = &Fit> {
        let most = self.fits.iter().map(|fit| fit.read).max().unwrap_or(0);
        self.fits
            .iter()
            .filter(move |fit| fit.refuted.is_none() && fit.read == most && most > 0)
    }

    fn is_undecided(&self) -> bool {
        self.standing().count() > 1
    }

    fn look(&mut self, records: &Records, ask: &Ask) {
        let mut cell = std::mem::take(&mut self.cell);
        cell.clear();
        for at in ask.time_at {
            cell.extend_from_slice(records.cell(*at).unwrap_or_default());
            cell.push(b' ');
        }
        let stamp = self.look_at_time(cell.trim_ascii(), records.row(), !ask.texts.is_empty());
        self.cell = cell;
        if self.rows > ROWS_ENOUGH {
            return;
        }
        let sign = ask.dialect.decimal.bytes().next().unwrap_or(b'.');
        let thousands = ask.dialect.thousands_byte();
        for (at, values) in &mut self.values {
            values.add(records.cell(*at).unwrap_or_default(), sign, thousands);
        }
        for (at, categories) in &mut self.categories {
            categories.add(records.cell(*at).unwrap_or_default(), stamp);
        }
    }

    fn look_at_time(&mut self, cell: &[u8], row: usize, may_repeat: bool) -> Option<i64> {
        let shown: Vec<Option<(Shown, i64)>> = self.fits.iter().map(|fit| fit.read(cell)).collect();
        if shown.iter().all(Option::is_none) {
            return None;
        }
        for (fit, shown) in self.fits.iter_mut().zip(&shown) {
            match shown {
                Some((shown, wall_s)) => {
                    fit.add(shown, *wall_s, row);
                    // Series can be told apart only where there are words to tell them by.
                    if may_repeat && fit.seen.len() < ROWS_ENOUGH && !fit.seen.insert(*wall_s) {
                        fit.repeated += 1;
                    }
                }
                None => {
                    fit.refuted
                        .get_or_insert_with(|| (row, String::from_utf8_lossy(cell).into_owned()));
                }
            }
        }
        shown.iter().flatten().next().map(|(_, wall_s)| *wall_s)
    }
}

const DAY_S: i64 = 86_400;
/// Day and month mixed up, one day becomes a month: 28 days at least. Files have gaps, but hardly at each midnight.
const LEAP_S: i64 = 20 * DAY_S;
const FAR_AHEAD_S: i64 = 300 * DAY_S;

impl Fit {
    fn new(format: Format) -> Self {
        Self {
            format,
            read: 0,
            refuted: None,
            leap: None,
            hour_0: false,
            hour_24: false,
            years: BTreeSet::new(),
            leap_day: false,
            backward: 0,
            backward_in_year: 0,
            far_ahead: 0,
            offsets: 0,
            repeated: 0,
            last_s: None,
            last_in_year: (0, 0, 0, 0),
            seen: HashSet::new(),
        }
    }

    fn read(&self, cell: &[u8]) -> Option<(Shown, i64)> {
        let shown = self.format.read(cell)?;
        let (month, day) = shown.day_of_year.map_or((shown.month, shown.day), |_| (1, 1));
        let days = shown.day_of_year.unwrap_or(1) - 1;
        let midnight_s = wall_clock_s(shown.year, month, day, 0, 0, 0)?;
        Some((
            shown,
            midnight_s + days * DAY_S + shown.hour * 3600 + shown.minute * 60 + shown.second,
        ))
    }

    fn add(&mut self, shown: &Shown, wall_s: i64, row: usize) {
        self.read += 1;
        self.hour_0 |= shown.hour == 0 && shown.afternoon.is_none();
        self.hour_24 |= shown.hour == 24;
        self.offsets += usize::from(shown.offset_s.is_some());
        self.leap_day |= (shown.month, shown.day) == (2, 29);
        if self.years.len() <= MOST_CATEGORIES {
            self.years.insert(shown.year);
        }
        let in_year = (
            shown.month,
            shown.day_of_year.unwrap_or(shown.day),
            shown.hour,
            shown.minute,
        );
        if let Some(last_s) = self.last_s {
            self.backward += usize::from(wall_s < last_s);
            self.backward_in_year += usize::from(in_year < self.last_in_year);
            self.far_ahead += usize::from(wall_s - last_s > FAR_AHEAD_S);
            if (wall_s - last_s).abs() > LEAP_S {
                self.leap.get_or_insert(row);
            }
        }
        (self.last_s, self.last_in_year) = (Some(wall_s), in_year);
    }

    /// Months of different years put together to one: dates run through the calendar once, their years to and fro.
    pub(super) fn is_typical_year(&self) -> bool {
        self.years.len() > 1 && self.backward_in_year == 0 && self.backward + self.far_ahead > 0
    }
}

impl Values {
    pub(super) fn add(&mut self, cell: &[u8], sign: u8, thousands: Option<u8>) {
        let number = match thousands {
            None => decimal(cell, sign),
            Some(thousands) => grouped(cell, sign, thousands),
        };
        let Some(number) = number else { return };
        if number.abs() >= SMALLEST_MARK && MARKS.contains(&number) {
            let written = String::from_utf8_lossy(cell).into_owned();
            if self.marks.len() < MOST_CATEGORIES || self.marks.contains_key(&written) {
                self.marks.entry(written).or_insert((number, 0)).1 += 1;
            }
            return;
        }
        (self.low, self.high) = match self.count {
            0 => (number, number),
            _ => (self.low.min(number), self.high.max(number)),
        };
        self.count += 1;
    }
}

impl Categories {
    fn add(&mut self, cell: &[u8], stamp: Option<i64>) {
        if self.names.len() > MOST_CATEGORIES {
            return;
        }
        let name = String::from_utf8_lossy(&cell[..cell.len().min(100)]).into_owned();
        let key = name
            .bytes()
            .fold(0usize, |key, byte| key.wrapping_mul(31).wrapping_add(usize::from(byte)));
        self.names.insert(name);
        if let Some(stamp) = stamp
            && !self.seen.insert((stamp, key))
        {
            self.repeated += 1;
        }
    }

    /// Few words, more than one.
    pub(super) fn are_few(&self) -> bool {
        (2..=MOST_CATEGORIES).contains(&self.names.len())
    }
}
