//! Shown times into instants: calendar, 24 o'clock, halves of the day, zones, and the hours a clock repeats or leaves out.

use super::layout::{Ambiguous, Clock, Nonexistent, TimeLayout};
use super::repeated_hour::RepeatedHour;
use super::shown::Shown;
use crate::model::weather::Flag;
use crate::model::weather::zone::{LocalTime, Zone, offset_name, wall_clock_s, wall_clock_text};

/// A time cell that cannot be an instant: code and sentence.
pub(super) type Refusal = (&'static str, String);

const DAY_S: i64 = 86_400;

/// Turns shown times into instants, row by row in the order of the file.
pub(super) struct WallClock {
    zone: Option<Zone>,
    counts_to_24: bool,
    /// Hours 0 to 23, and 24:00 for the end of a day.
    ends_with_24: bool,
    year: Option<i64>,
    ambiguous: Ambiguous,
    nonexistent: Nonexistent,
    repeated: RepeatedHour,
    /// The last date read and its midnight: most rows share it with the one before.
    last_day: (i64, i64, i64, i64),
}

impl WallClock {
    /// From a layout without faults.
    pub(super) fn new(time: &TimeLayout) -> Self {
        Self {
            zone: time.zone.as_deref().and_then(|name| Zone::parse(name).ok()),
            counts_to_24: time.clock == Some(Clock::From1To24),
            ends_with_24: time.clock == Some(Clock::HourMinute),
            year: time.year,
            ambiguous: time.ambiguous,
            nonexistent: time.nonexistent,
            repeated: RepeatedHour::default(),
            last_day: (0, 0, 0, 0),
        }
    }

    /// The instant of a shown time [unix s]; `row` is for flags.
    pub(super) fn instant(&mut self, shown: &Shown, row: usize) -> Result<i64, Refusal> {
        let wall_s = self.wall_s(shown)?;
        if let Some(offset_s) = shown.offset_s {
            return Ok(wall_s - offset_s);
        }
        self.of_wall_s(wall_s, row)
    }

    /// The instant of a wall clock [s] without an offset of its own.
    pub(super) fn of_wall_s(&mut self, wall_s: i64, row: usize) -> Result<i64, Refusal> {
        let Some(zone) = &self.zone else {
            let detail = "the time has no offset and no zone is given; send layout.time.zone (UTC, an offset such as +01:00, \
                          or an IANA name such as Europe/Oslo)";
            return Err(("no_zone", detail.into()));
        };
        self.repeated.see(wall_s);
        match zone.resolve(wall_s) {
            Some(LocalTime::Once(unix_s)) => Ok(unix_s),
            Some(LocalTime::Twice { first, second }) => self
                .repeated
                .choose(self.ambiguous, wall_s, first, second, row)
                .ok_or_else(|| twice(zone, wall_s)),
            Some(LocalTime::Never { unmoved, .. }) if self.nonexistent == Nonexistent::Unmoved => Ok(unmoved),
            Some(LocalTime::Never { offset_before_s, .. }) => Err(never(zone, wall_s, offset_before_s)),
            None => Err(("bad_time", "the date is outside the calendar".into())),
        }
    }

    /// Says where only one pass of a repeated hour was there.
    pub(super) fn flags(self) -> Vec<Flag> {
        self.repeated.flags()
    }

    fn wall_s(&mut self, shown: &Shown) -> Result<i64, Refusal> {
        let hour = self.hour(shown)?;
        if shown.minute > 59 || shown.second > 60 {
            return Err((
                "bad_time",
                format!("there is no {:02}:{:02}:{:02}", hour, shown.minute, shown.second),
            ));
        }
        let midnight_s = self.midnight_s(shown)?;
        Ok(midnight_s + hour * 3600 + shown.minute * 60 + shown.second)
    }

    fn hour(&self, shown: &Shown) -> Result<i64, Refusal> {
        let hour = shown.hour;
        match shown.afternoon {
            Some(afternoon) if (1..=12).contains(&hour) => return Ok(hour % 12 + if afternoon { 12 } else { 0 }),
            Some(_) => return Err(("bad_time", format!("expected an hour from 1 to 12; found {hour}"))),
            None => {}
        }
        match (self.counts_to_24, hour) {
            (false, 0..=23) | (true, 1..=24) => Ok(hour),
            (false, 24) if self.ends_with_24 && shown.minute == 0 => Ok(hour),
            (false, 24) => Err((
                "bad_time",
                "expected an hour from 0 to 23; found 24. If hours run from 1 to 24, send \
                                 layout.time.clock \"1-24\""
                    .into(),
            )),
            (true, 0) => Err((
                "bad_time",
                "expected an hour from 1 to 24, as layout.time.clock says; found 0".into(),
            )),
            _ => Err(("bad_time", format!("there is no hour {hour}"))),
        }
    }

    fn midnight_s(&mut self, shown: &Shown) -> Result<i64, Refusal> {
        let year = self.year.unwrap_or(shown.year);
        let (month, day) = shown.day_of_year.map_or((shown.month, shown.day), |day| (0, day));
        let (last_year, last_month, last_day, midnight_s) = self.last_day;
        if (year, month, day) == (last_year, last_month, last_day) {
            return Ok(midnight_s);
        }
        let midnight_s = match shown.day_of_year {
            None => wall_clock_s(year, month, day, 0, 0, 0),
            Some(day) => day_of_year_s(year, day),
        };
        let no_such_day = || match shown.day_of_year {
            None => format!("there is no {year:04}-{month:02}-{day:02}"),
            Some(day) => format!("there is no day {day} in {year}"),
        };
        let midnight_s = midnight_s.ok_or_else(|| ("bad_time", no_such_day()))?;
        self.last_day = (year, month, day, midnight_s);
        Ok(midnight_s)
    }
}

fn day_of_year_s(year: i64, day: i64) -> Option<i64> {
    let first_s = wall_clock_s(year, 1, 1, 0, 0, 0)?;
    let length = (wall_clock_s(year.checked_add(1)?, 1, 1, 0, 0, 0)? - first_s) / DAY_S;
    (1..=length).contains(&day).then(|| first_s + (day - 1) * DAY_S)
}

fn twice(zone: &Zone, wall_s: i64) -> Refusal {
    let detail = format!(
        "{} occurs twice in {}, and layout.time.ambiguous is refuse; send times with an offset, or row_order",
        wall_clock_text(wall_s),
        zone.name()
    );
    ("repeated_hour", detail)
}

fn never(zone: &Zone, wall_s: i64, offset_before_s: i64) -> Refusal {
    let detail = format!(
        "{} does not exist in {}: the clock was put forward over it, so what wrote this file does not switch to summer time. \
         Send its fixed offset as layout.time.zone, or \"hints\": {{\"zone\":\"{}\"}}",
        wall_clock_text(wall_s),
        zone.name(),
        offset_name(offset_before_s)
    );
    ("nonexistent_hour", detail)
}

#[cfg(test)]
mod tests {
    use super::super::shown::read_rfc3339;
    use super::*;

    fn clock(zone: &str) -> WallClock {
        let layout = serde_json::json!({"columns": ["t"], "zone": zone});
        WallClock::new(&serde_json::from_value(layout).unwrap())
    }

    fn run(clock: &mut WallClock, cells: &[&str]) -> Vec<Result<i64, Refusal>> {
        cells
            .iter()
            .enumerate()
            .map(|(at, cell)| clock.instant(&read_rfc3339(cell.as_bytes()).unwrap(), at + 1))
            .collect()
    }

    fn utc(cell: &str) -> i64 {
        run(&mut clock("UTC"), &[cell])[0].clone().unwrap()
    }

    #[test]
    fn autumn_goes_by_row_order_upwards_and_downwards() {
        let local = [
            "2013-11-03 00:30",
            "2013-11-03 01:00",
            "2013-11-03 01:30",
            "2013-11-03 01:00",
            "2013-11-03 01:30",
        ];
        let expected = ["04:30", "05:00", "05:30", "06:00", "06:30"].map(|t| Ok(utc(&format!("2013-11-03 {t}"))));
        let mut new_york = clock("America/New_York");
        assert_eq!(run(&mut new_york, &local), expected);
        assert!(new_york.flags().is_empty());

        let mut down = clock("America/New_York");
        let reversed: Vec<&str> = ["2013-11-03 02:00"]
            .into_iter()
            .chain(local.into_iter().rev())
            .collect();
        let mut expected: Vec<_> = expected.into_iter().rev().collect();
        expected.insert(0, Ok(utc("2013-11-03 07:00")));
        assert_eq!(run(&mut down, &reversed), expected);
    }

    #[test]
    fn a_single_pass_is_the_first_and_flagged() {
        let mut new_york = clock("America/New_York");
        let times = run(
            &mut new_york,
            &["2013-11-03 00:00", "2013-11-03 01:00", "2013-11-03 02:00"],
        );
        assert_eq!(times[1], Ok(utc("2013-11-03 05:00")));
        let flags = new_york.flags();
        assert_eq!((flags[0].code, &flags[0].rows[..]), ("repeated_hour_once", &[2][..]));
    }

    #[test]
    fn two_autumns_are_kept_apart() {
        let mut new_york = clock("America/New_York");
        let times = run(
            &mut new_york,
            &[
                "2013-11-03 00:00",
                "2013-11-03 01:00",
                "2013-11-03 01:00",
                "2014-11-02 01:00",
            ],
        );
        assert_eq!(times[3], Ok(utc("2014-11-02 05:00")));
        assert_eq!(new_york.flags()[0].rows, [4]);
    }

    #[test]
    fn spring_is_refused_with_the_offset_that_would_do() {
        let mut brussels = clock("Europe/Brussels");
        let refusal = run(&mut brussels, &["2016-03-27 02:00"]).remove(0).unwrap_err();
        assert_eq!(refusal.0, "nonexistent_hour");
        assert!(refusal.1.contains("\"+01:00\""), "{}", refusal.1);
        brussels.nonexistent = Nonexistent::Unmoved;
        assert_eq!(
            run(&mut brussels, &["2016-03-27 02:00"])[0],
            Ok(utc("2016-03-27 01:00"))
        );
    }

    #[test]
    fn no_zone_is_never_guessed_and_an_offset_in_the_cell_wins() {
        let mut none = WallClock::new(&serde_json::from_value(serde_json::json!({"columns": ["t"]})).unwrap());
        assert_eq!(
            run(&mut none, &["2026-01-01 00:00"])[0].as_ref().unwrap_err().0,
            "no_zone"
        );
        let mut oslo = clock("Europe/Oslo");
        assert_eq!(
            run(&mut oslo, &["2026-01-01T00:00:00-05:00"])[0],
            Ok(utc("2026-01-01 05:00"))
        );
    }

    #[test]
    fn hour_24_and_the_year_of_a_typical_year() {
        let layout = serde_json::json!({"columns": ["t"], "zone": "-09:00", "clock": "1-24", "year": 2021});
        let mut typical = WallClock::new(&serde_json::from_value(layout).unwrap());
        let mut at = |cell: &str| run(&mut typical, &[cell]).remove(0);
        assert_eq!(at("1998-12-31 24:00"), Ok(utc("2022-01-01 09:00")));
        assert_eq!(at("1996-02-29 12:00").unwrap_err().0, "bad_time");
        assert_eq!(at("1996-02-28 00:00").unwrap_err().0, "bad_time");
        assert!(
            run(&mut clock("UTC"), &["2026-01-01 24:00"])[0]
                .as_ref()
                .unwrap_err()
                .1
                .contains("1-24")
        );
    }

    #[test]
    fn days_of_the_year_and_twelve_hours() {
        let mut zone = clock("UTC");
        let shown = |day: i64| Shown {
            year: 2018,
            day_of_year: Some(day),
            ..Shown::default()
        };
        assert_eq!(zone.instant(&shown(291), 1), Ok(utc("2018-10-18 00:00")));
        assert_eq!(zone.instant(&shown(366), 1).unwrap_err().0, "bad_time");
        let half = |hour: i64, afternoon: bool| Shown {
            hour,
            afternoon: Some(afternoon),
            ..shown(1)
        };
        assert_eq!(zone.instant(&half(12, false), 1), Ok(utc("2018-01-01 00:00")));
        assert_eq!(zone.instant(&half(12, true), 1), Ok(utc("2018-01-01 12:00")));
        assert!(zone.instant(&half(13, true), 1).is_err());
    }
}
