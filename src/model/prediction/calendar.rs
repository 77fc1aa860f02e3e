//! Where each hour lies in the calendar of a zone.

use std::collections::BTreeMap;
use std::ops::Range;

use super::schedule::{Overlaps, Span, first_second_where};
use crate::model::weather::zone::{Zone, wall_clock_text};

/// One hour of the series [s].
pub(super) const HOUR_S: i64 = 3600;
const DAY_S: i64 = 86_400;

/// A part of an hour that lies in one hour of the clock of one day.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Part {
    pub(super) from_unix_s: i64,
    pub(super) to_unix_s: i64,
    /// Seconds of it that are open.
    pub(super) open_s: i64,
    /// Index into [`Calendar::days`].
    pub(super) day: usize,
    /// Hour of the clock, 0-23.
    pub(super) hour_of_day: usize,
}

impl Part {
    /// Its share of an hour.
    pub(super) fn share(&self) -> f64 {
        (self.to_unix_s - self.from_unix_s) as f64 / HOUR_S as f64
    }

    /// Share of an hour that is open in it.
    pub(super) fn open_share(&self) -> f64 {
        self.open_s as f64 / HOUR_S as f64
    }
}

/// A day or a month of the calendar.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct CalendarSpan {
    pub(super) label: String,
    pub(super) from_unix_s: i64,
    pub(super) to_unix_s: i64,
}

/// The hours of a series cut at the clock hours, days and months of a zone.
#[derive(Debug, Clone)]
pub(super) struct Calendar {
    parts: Vec<Part>,
    /// Index of each hour's first part, and one past the last.
    first_part: Vec<usize>,
    /// Days in order of their first second.
    pub(super) days: Vec<CalendarSpan>,
    /// Months in order, with their days.
    pub(super) months: Vec<(CalendarSpan, Range<usize>)>,
    start_unix_s: i64,
}

impl Calendar {
    /// Cuts `hours` hours from a start; `open` are the opening hours as instants, none meaning always.
    pub(super) fn new(zone: &Zone, start_unix_s: i64, hours: usize, open: Option<&[Span]>) -> Self {
        let mut building = Building::new(zone, open);
        let mut first_part = Vec::with_capacity(hours + 1);
        for hour in 0..hours as i64 {
            first_part.push(building.parts.len());
            building.cut_hour(start_unix_s + hour * HOUR_S);
        }
        first_part.push(building.parts.len());
        let months = months_of(&building.days);
        Self {
            parts: building.parts,
            first_part,
            days: building.days,
            months,
            start_unix_s,
        }
    }

    /// The parts of an hour, in order.
    pub(super) fn parts(&self, hour: usize) -> &[Part] {
        &self.parts[self.first_part[hour]..self.first_part[hour + 1]]
    }

    /// The part an instant lies in; `None` outside the series.
    pub(super) fn part_at(&self, unix_s: i64) -> Option<&Part> {
        let hour = usize::try_from((unix_s - self.start_unix_s).div_euclid(HOUR_S)).ok()?;
        if hour + 1 >= self.first_part.len() {
            return None;
        }
        self.parts(hour).iter().find(|part| unix_s < part.to_unix_s)
    }
}

struct Building<'a> {
    zone: &'a Zone,
    open: Option<Overlaps<'a>>,
    parts: Vec<Part>,
    days: Vec<CalendarSpan>,
    day_by_number: BTreeMap<i64, usize>,
}

impl<'a> Building<'a> {
    fn new(zone: &'a Zone, open: Option<&'a [Span]>) -> Self {
        Self {
            zone,
            open: open.map(Overlaps::new),
            parts: Vec::new(),
            days: Vec::new(),
            day_by_number: BTreeMap::new(),
        }
    }

    /// No zone moves its clock twice in an hour.
    fn cut_hour(&mut self, from: i64) {
        let to = from + HOUR_S;
        let (before, after) = (self.zone.offset_s(from), self.zone.offset_s(to - 1));
        if before == after {
            return self.cut_steady(from, to, before);
        }
        let moved = first_second_where(from, to - 1, |unix_s| self.zone.offset_s(unix_s) != before);
        self.cut_steady(from, moved, before);
        self.cut_steady(moved, to, after);
    }

    fn cut_steady(&mut self, from: i64, to: i64, offset_s: i64) {
        let mut at = from;
        while at < to {
            let wall = at + offset_s;
            let end = to.min(at + HOUR_S - wall.rem_euclid(HOUR_S));
            let open_s = self.open.as_mut().map_or(end - at, |open| open.seconds(at, end));
            let day = self.day_of(wall, at, end);
            self.parts.push(Part {
                from_unix_s: at,
                to_unix_s: end,
                open_s,
                day,
                hour_of_day: (wall.rem_euclid(DAY_S) / HOUR_S) as usize,
            });
            at = end;
        }
    }

    /// The same date can come back when the clock is put back over midnight, so days are found by number.
    fn day_of(&mut self, wall: i64, from: i64, to: i64) -> usize {
        let days = &mut self.days;
        let index = *self.day_by_number.entry(wall.div_euclid(DAY_S)).or_insert_with(|| {
            days.push(CalendarSpan {
                label: wall_clock_text(wall).chars().take(10).collect(),
                from_unix_s: from,
                to_unix_s: to,
            });
            days.len() - 1
        });
        self.days[index].to_unix_s = to;
        index
    }
}

fn months_of(days: &[CalendarSpan]) -> Vec<(CalendarSpan, Range<usize>)> {
    let mut months: Vec<(CalendarSpan, Range<usize>)> = Vec::new();
    for (index, day) in days.iter().enumerate() {
        let label: String = day.label.chars().take(7).collect();
        match months.last_mut() {
            Some((month, of)) if month.label == label => {
                month.to_unix_s = month.to_unix_s.max(day.to_unix_s);
                of.end = index + 1;
            }
            _ => months.push((CalendarSpan { label, ..day.clone() }, index..index + 1)),
        }
    }
    months
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::model::weather::zone::wall_clock_s;

    /// A run of so many hours from a UTC midnight.
    fn calendar(zone: &str, date: (i64, i64, i64), hours: usize) -> Calendar {
        let start = wall_clock_s(date.0, date.1, date.2, 0, 0, 0).unwrap();
        Calendar::new(&Zone::parse(zone).unwrap(), start, hours, None)
    }

    fn day_hours(calendar: &Calendar) -> Vec<(String, f64)> {
        let mut hours: Vec<(String, f64)> = calendar.days.iter().map(|day| (day.label.clone(), 0.0)).collect();
        for part in &calendar.parts {
            hours[part.day].1 += part.share();
        }
        hours
    }

    fn hours_of(zone: &str, date: (i64, i64, i64), label: &str) -> f64 {
        let all = day_hours(&calendar(zone, date, 96));
        all.iter()
            .find(|(day, _)| day == label)
            .map_or(0.0, |(_, hours)| *hours)
    }

    /// Days of 23, 24 and 25 hours: the United States in 2013 (15 USC 260a), Lord Howe's half hours, Apia's missing day
    /// (tz database, `australasia`), Casablanca's clock behind in Ramadan (tz database, `africa`).
    #[test]
    fn days_are_as_long_as_the_clock_makes_them() {
        assert_eq!(hours_of("America/New_York", (2013, 3, 9), "2013-03-10"), 23.0);
        assert_eq!(hours_of("America/New_York", (2013, 11, 2), "2013-11-03"), 25.0);
        assert_eq!(hours_of("Australia/Lord_Howe", (2026, 4, 3), "2026-04-05"), 24.5);
        assert_eq!(hours_of("Australia/Lord_Howe", (2026, 10, 2), "2026-10-04"), 23.5);
        assert_eq!(hours_of("Pacific/Apia", (2011, 12, 28), "2011-12-30"), 0.0);
        assert_eq!(hours_of("Africa/Casablanca", (2025, 2, 21), "2025-02-23"), 25.0);
        assert_eq!(hours_of("UTC", (2026, 1, 1), "2026-01-02"), 24.0);
    }

    #[test]
    fn every_second_lies_in_exactly_one_part() {
        for zone in [
            "UTC",
            "Asia/Kathmandu",
            "Australia/Lord_Howe",
            "Pacific/Apia",
            "America/St_Johns",
        ] {
            let calendar = calendar(zone, (2011, 1, 1), 8760);
            let parts = &calendar.parts;
            assert!(
                parts.windows(2).all(|pair| pair[0].to_unix_s == pair[1].from_unix_s),
                "{zone}"
            );
            for hour in 0..8760 {
                let share: f64 = calendar.parts(hour).iter().map(Part::share).sum();
                assert!((share - 1.0).abs() < 1e-12, "{zone} hour {hour}");
            }
        }
    }

    #[test]
    fn hours_are_cut_at_the_zones_full_hours() {
        let calendar = calendar("Asia/Kathmandu", (2026, 1, 1), 24);
        // 00:00Z is 05:45 there: a quarter of the hour belongs to 5, the rest to 6.
        let parts: Vec<(usize, f64)> = calendar.parts(0).iter().map(|p| (p.hour_of_day, p.share())).collect();
        assert_eq!(parts, [(5, 0.25), (6, 0.75)]);
        assert_eq!(
            calendar.part_at(calendar.start_unix_s + 899).map(|p| p.hour_of_day),
            Some(5)
        );
        assert_eq!(
            calendar.part_at(calendar.start_unix_s + 900).map(|p| p.hour_of_day),
            Some(6)
        );
        assert_eq!(calendar.part_at(calendar.start_unix_s - 1), None);
        assert_eq!(calendar.part_at(calendar.start_unix_s + 24 * 3600), None);
    }

    #[test]
    fn months_hold_their_days() {
        let calendar = calendar("Europe/Oslo", (2025, 12, 31), 48);
        let labels: Vec<&str> = calendar.days.iter().map(|day| day.label.as_str()).collect();
        assert_eq!(labels, ["2025-12-31", "2026-01-01", "2026-01-02"]);
        let months: Vec<(&str, Range<usize>)> = calendar
            .months
            .iter()
            .map(|(m, d)| (m.label.as_str(), d.clone()))
            .collect();
        assert_eq!(months, [("2025-12", 0..1), ("2026-01", 1..3)]);
        assert_eq!(calendar.months[1].0.from_unix_s, calendar.months[0].0.to_unix_s);
    }

    /// St John's put its clock back at 00:01 until 2011 (tz database, `northamerica`): a date that comes back.
    #[test]
    fn a_date_that_comes_back_is_one_day() {
        let calendar = calendar("America/St_Johns", (2010, 11, 5), 96);
        let labels: Vec<&str> = calendar.days.iter().map(|day| day.label.as_str()).collect();
        assert_eq!(
            labels,
            ["2010-11-04", "2010-11-05", "2010-11-06", "2010-11-07", "2010-11-08"]
        );
        assert_eq!(
            hours_of("America/St_Johns", (2010, 11, 5), "2010-11-06"),
            24.0 + 59.0 / 60.0
        );
        assert_eq!(
            hours_of("America/St_Johns", (2010, 11, 5), "2010-11-07"),
            24.0 + 1.0 / 60.0
        );
    }
}
