//! Readings onto hours: which hour a reading belongs to, and the mean of those that share one.
//!
//! * Instants belong to the nearest full hour, half past to the later one: a logger's 10-minute readings become a mean
//!   centred on the hour, a station's `:54` stands for the hour six minutes later.
//! * Means of the following interval belong to the hour they start in, means of the preceding one to the hour they end in
//!   (its end included: `01:00` and `24:00` close an hour).
//!
//! Full hours are those of UTC, unless more than half of all readings stand exactly on the same other quarter of an hour:
//! then the hours run from there (zones that are half an hour off, loggers that read at half past).

use super::readings::{Label, RawReadings, WeatherFault};
use super::zone::instant_text;
use crate::model::notes::Assumption;

const HOUR_S: i64 = 3600;
const QUARTER_S: i64 = 900;

/// The hours of a series and the hour of each reading.
pub(super) struct Grid {
    /// Start of the first hour [unix s].
    pub start_unix_s: i64,
    /// Number of hours.
    pub hours: usize,
    /// Which hour each reading belongs to; never falls.
    pub hour_of: Vec<u32>,
}

impl Grid {
    /// Lays the hours. Needs sorted readings, at least one.
    pub(super) fn lay(raw: &RawReadings, max_hours: usize) -> Result<Self, WeatherFault> {
        let phase_s = phase_s(&raw.time_unix_s);
        let number = |time: i64| hour_number(time - phase_s, raw.label);
        let (first, last) = (number(raw.time_unix_s[0]), number(raw.time_unix_s[raw.len() - 1]));
        let hours = (last - first + 1) as usize;
        if hours > max_hours {
            return Err(too_many_hours(raw, hours, max_hours));
        }
        let hour_of = raw
            .time_unix_s
            .iter()
            .map(|&time| (number(time) - first) as u32)
            .collect();
        Ok(Self {
            start_unix_s: first * HOUR_S + phase_s,
            hours,
            hour_of,
        })
    }

    /// Mean of the readings of each hour, NaN where there is none. Missing readings are left out of the mean.
    pub(super) fn means(&self, values: &[f64]) -> Vec<f64> {
        self.means_of(self.hour_of.iter().map(|hour| i64::from(*hour)), values)
    }

    /// The same for values that are labelled in their own way; those of hours outside the grid are left out.
    pub(super) fn means_labelled(&self, label: Label, time_unix_s: &[i64], values: &[f64]) -> Vec<f64> {
        let hour_of = time_unix_s
            .iter()
            .map(|time| hour_number(time - self.start_unix_s, label));
        self.means_of(hour_of, values)
    }

    fn means_of(&self, hour_of: impl Iterator<Item = i64>, values: &[f64]) -> Vec<f64> {
        let mut sums = vec![(0.0, 0u32); self.hours];
        for (hour, value) in hour_of.zip(values).filter(|(_, value)| !value.is_nan()) {
            if let Some((sum, count)) = usize::try_from(hour).ok().and_then(|hour| sums.get_mut(hour)) {
                *sum += value;
                *count += 1;
            }
        }
        let mean = |(sum, count)| if count > 0 { sum / f64::from(count) } else { f64::NAN };
        sums.into_iter().map(mean).collect()
    }

    /// Hours that hold several readings.
    pub(super) fn shared(&self) -> Vec<bool> {
        let mut shared = vec![false; self.hours];
        for pair in self.hour_of.windows(2).filter(|pair| pair[0] == pair[1]) {
            shared[pair[0] as usize] = true;
        }
        shared
    }

    /// Source row of the first reading of each hour; 0 where there is none.
    pub(super) fn first_rows(&self, row: &[u32]) -> Vec<u32> {
        let mut rows = vec![0; self.hours];
        for (hour, row) in self.hour_of.iter().zip(row).rev() {
            rows[*hour as usize] = *row;
        }
        rows
    }

    /// What was done to get from readings to hours, where it is not plain.
    pub(super) fn assumptions(&self, raw: &RawReadings) -> Vec<Assumption> {
        let mut said = Vec::new();
        let phase_min = self.start_unix_s.rem_euclid(HOUR_S) / 60;
        if phase_min != 0 {
            let value = format!("{phase_min} minutes past the full hour of UTC, as the readings do");
            said.push(Assumption::new(
                "hours start",
                value,
                "the time of every hour in the answer",
            ));
        }
        if self.hour_of.windows(2).any(|pair| pair[0] == pair[1]) {
            let value = "averaged: temperature and vapour pressure, not relative humidity";
            said.push(Assumption::new(
                "several readings in one hour",
                value,
                "short extremes are smoothed",
            ));
        }
        let moved_s = self.largest_move_s(raw);
        if moved_s > 0 {
            let value = format!("taken for the nearest hour, up to {} minutes away", (moved_s + 59) / 60);
            said.push(Assumption::new(
                "readings between full hours",
                value,
                "the daily course shifts by as much",
            ));
        }
        said
    }

    /// How far a reading taken at an instant was moved, where no other reading of its hour balances it.
    fn largest_move_s(&self, raw: &RawReadings) -> i64 {
        if raw.label != Label::Instant {
            return 0;
        }
        let alone = |at: usize| {
            let hour = self.hour_of[at];
            (at == 0 || self.hour_of[at - 1] != hour) && self.hour_of.get(at + 1) != Some(&hour)
        };
        let moved = |at: usize| {
            let hour_start = self.start_unix_s + i64::from(self.hour_of[at]) * HOUR_S;
            (raw.time_unix_s[at] - hour_start).abs()
        };
        (0..raw.len()).filter(|&at| alone(at)).map(moved).max().unwrap_or(0)
    }
}

/// Number of the hour a reading belongs to, counted from 1970.
fn hour_number(time_s: i64, label: Label) -> i64 {
    match label {
        Label::Instant => (time_s + HOUR_S / 2).div_euclid(HOUR_S),
        Label::MeanOfFollowingHour => time_s.div_euclid(HOUR_S),
        Label::MeanOfPrecedingHour => (time_s - 1).div_euclid(HOUR_S),
    }
}

/// Offset of the hour grid from full hours of UTC [s].
fn phase_s(time_unix_s: &[i64]) -> i64 {
    let mut on_quarter = [0usize; 4];
    for time in time_unix_s {
        let past_hour_s = time.rem_euclid(HOUR_S);
        if past_hour_s % QUARTER_S == 0 {
            on_quarter[(past_hour_s / QUARTER_S) as usize] += 1;
        }
    }
    let most = (1..4).find(|&quarter| on_quarter[quarter] * 2 > time_unix_s.len());
    most.map_or(0, |quarter| quarter as i64 * QUARTER_S)
}

fn too_many_hours(raw: &RawReadings, hours: usize, max_hours: usize) -> WeatherFault {
    let last = raw.len() - 1;
    let detail = format!(
        "the readings span {hours} hours, from {} (row {}) to {} (row {}); at most {max_hours} are taken. Is one of these \
         times wrong?",
        instant_text(raw.time_unix_s[0]),
        raw.row[0],
        instant_text(raw.time_unix_s[last]),
        raw.row[last],
    );
    WeatherFault::whole("too_many_hours", detail)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn readings(label: Label, minutes: &[i64]) -> RawReadings {
        RawReadings {
            time_unix_s: minutes.iter().map(|m| m * 60).collect(),
            row: (1..=minutes.len() as u32).collect(),
            label,
            ..Default::default()
        }
    }

    #[test]
    fn instants_go_to_the_nearest_hour() {
        let raw = readings(Label::Instant, &[-6, 54, 114, 149, 151]);
        let grid = Grid::lay(&raw, 100).unwrap();
        assert_eq!((grid.start_unix_s, grid.hours), (0, 4));
        assert_eq!(grid.hour_of, [0, 1, 2, 2, 3]);
    }

    #[test]
    fn ten_minute_instants_become_means_centred_on_the_hour() {
        let raw = readings(Label::Instant, &[0, 10, 20, 30, 40, 50, 60, 70, 80, 90]);
        let grid = Grid::lay(&raw, 100).unwrap();
        assert_eq!(grid.hour_of, [0, 0, 0, 1, 1, 1, 1, 1, 1, 2]);
        assert_eq!(
            grid.means(&[1.0, 2.0, f64::NAN, 4.0, 5.0, 6.0, 7.0, 8.0, 9.0, f64::NAN])[..2],
            [1.5, 6.5]
        );
        assert!(grid.means(&[f64::NAN; 10])[2].is_nan());
    }

    #[test]
    fn hour_ends_close_the_hour_before() {
        let raw = readings(Label::MeanOfPrecedingHour, &[60, 120, 1440]);
        let grid = Grid::lay(&raw, 100).unwrap();
        assert_eq!((grid.start_unix_s, grid.hours), (0, 24));
        assert_eq!(grid.hour_of, [0, 1, 23]);
    }

    #[test]
    fn a_column_may_be_labelled_in_its_own_way() {
        let raw = readings(Label::Instant, &[0, 60, 120]);
        let grid = Grid::lay(&raw, 100).unwrap();
        let ends = grid.means_labelled(Label::MeanOfPrecedingHour, &raw.time_unix_s, &[1.0, 2.0, 3.0]);
        assert_eq!(ends[..2], [2.0, 3.0]);
        assert!(ends[2].is_nan());
    }

    #[test]
    fn hour_starts_stay_where_they_are() {
        let grid = Grid::lay(&readings(Label::MeanOfFollowingHour, &[60, 119, 120]), 100).unwrap();
        assert_eq!((grid.start_unix_s, grid.hour_of), (3600, vec![0, 0, 1]));
    }

    #[test]
    fn half_hour_zones_keep_their_hours() {
        let raw = readings(Label::Instant, &[30, 90, 150]);
        let grid = Grid::lay(&raw, 100).unwrap();
        assert_eq!((grid.start_unix_s, grid.hours), (1800, 3));
        assert!(grid.assumptions(&raw)[0].value.contains("30 minutes"));
    }

    #[test]
    fn a_wrong_year_is_refused_with_its_rows() {
        let fault = Grid::lay(&readings(Label::Instant, &[0, 60, 600_000_000]), 1000)
            .err()
            .unwrap();
        assert_eq!(fault.code, "too_many_hours");
        assert!(fault.detail.contains("row 3"), "{}", fault.detail);
    }

    #[test]
    fn moved_readings_are_said() {
        let raw = readings(Label::Instant, &[-6, 54, 114]);
        let said = Grid::lay(&raw, 100).unwrap().assumptions(&raw);
        assert!(said[0].value.contains("up to 6 minutes"), "{said:?}");
    }
}
