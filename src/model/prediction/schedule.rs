//! Clock times of a week become instants.

use std::collections::BTreeMap;

use super::request::{ClockInterval, ClockSchedule};
use crate::model::notes::Fault;
use crate::model::weather::zone::{LocalTime, Zone, wall_clock_s};

/// A stretch of time, from its first second to the first no longer inside, seconds since 1970-01-01T00:00:00Z.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) struct Span {
    pub(super) from_unix_s: i64,
    pub(super) to_unix_s: i64,
}

const DAY_S: i64 = 86_400;
const WEEKDAYS: [&str; 7] = ["mon", "tue", "wed", "thu", "fri", "sat", "sun"];

/// A schedule as read: seconds of the wall clock since midnight of the day on which each interval begins.
#[derive(Debug, Clone, Default)]
pub(super) struct Intervals {
    weekly: [Vec<(i64, i64)>; 7],
    exceptions: BTreeMap<i64, Vec<(i64, i64)>>,
}

/// Reads a schedule; `path` is where it stands in the request, for the faults.
pub(super) fn read_schedule(schedule: &ClockSchedule, path: &str, faults: &mut Vec<Fault>) -> Intervals {
    let mut read = Intervals::default();
    for (weekday, intervals) in schedule.weekly.iter().enumerate() {
        let here = format!("{path}/weekly/{}", WEEKDAYS[weekday]);
        read.weekly[weekday] = read_day(intervals, &here, faults);
    }
    for (i, exception) in schedule.exceptions.iter().enumerate() {
        let here = format!("{path}/exceptions/{i}");
        let intervals = read_day(&exception.intervals, &format!("{here}/intervals"), faults);
        match read_date(&exception.date) {
            None => faults.push(Fault::new(
                format!("{here}/date"),
                "invalid_date",
                format!("expected a date such as 2026-12-24; found {:?}", exception.date),
            )),
            Some(day) if read.exceptions.contains_key(&day) => faults.push(Fault::new(
                format!("{here}/date"),
                "repeated_date",
                format!("{} is listed twice; put its intervals into one entry", exception.date),
            )),
            Some(day) => {
                read.exceptions.insert(day, intervals);
            }
        }
    }
    read
}

fn read_day(intervals: &[ClockInterval], path: &str, faults: &mut Vec<Fault>) -> Vec<(i64, i64)> {
    let mut read: Vec<(i64, i64)> = Vec::new();
    for (i, interval) in intervals.iter().enumerate() {
        match read_interval(interval) {
            Err(detail) => faults.push(Fault::new(format!("{path}/{i}"), "invalid_interval", detail)),
            Ok(new) if read.iter().any(|old| new.0 < old.1 && old.0 < new.1) => faults.push(Fault::new(
                format!("{path}/{i}"),
                "overlapping_interval",
                format!(
                    "{} to {} overlaps an earlier interval of the same day; join the two",
                    interval.from, interval.to
                ),
            )),
            Ok(new) => read.push(new),
        }
    }
    read
}

fn read_interval(interval: &ClockInterval) -> Result<(i64, i64), String> {
    let clock = |text: &str| {
        read_clock(text).ok_or_else(|| format!("expected a clock time such as 09:00, up to 24:00; found {text:?}"))
    };
    let (from, to) = (clock(&interval.from)?, clock(&interval.to)?);
    if from == DAY_S {
        return Err("an interval cannot begin at 24:00; write 00:00 on the next day".into());
    }
    if from == to {
        return Err(format!(
            "begins and ends at {}; write 00:00 to 24:00 for a whole day, or leave it out",
            interval.from
        ));
    }
    Ok((from, if to < from { to + DAY_S } else { to }))
}

/// `HH:MM` as seconds since midnight, up to `24:00`.
fn read_clock(text: &str) -> Option<i64> {
    let (hours, minutes) = text.split_once(':')?;
    let number = |part: &str| (part.len() == 2 && part.bytes().all(|b| b.is_ascii_digit())).then(|| part.parse().ok());
    let (hours, minutes): (i64, i64) = (number(hours)??, number(minutes)??);
    let seconds = hours * 3600 + minutes * 60;
    (minutes < 60 && seconds <= DAY_S).then_some(seconds)
}

/// `YYYY-MM-DD` as days since 1970-01-01.
fn read_date(text: &str) -> Option<i64> {
    let parts: Vec<&str> = text.split('-').collect();
    let [year, month, day] = parts[..] else { return None };
    let number = |part: &str, digits: usize| {
        (part.len() == digits && part.bytes().all(|b| b.is_ascii_digit())).then(|| part.parse::<i64>().ok())?
    };
    let midnight = wall_clock_s(number(year, 4)?, number(month, 2)?, number(day, 2)?, 0, 0, 0)?;
    Some(midnight.div_euclid(DAY_S))
}

/// The stretches of a schedule between two instants, in order and without overlaps.
///
/// An interval belongs to the day on which it begins. A clock time shown twice means its first showing; one that is
/// skipped means the moment at which the clock jumps.
pub(super) fn spans(intervals: &Intervals, zone: &Zone, range: Span) -> Vec<Span> {
    let first_day = zone.wall_clock_s(range.from_unix_s).div_euclid(DAY_S) - 1;
    let last_day = zone.wall_clock_s(range.to_unix_s).div_euclid(DAY_S) + 1;
    let mut all = Vec::new();
    for day in first_day..=last_day {
        let of_weekday = &intervals.weekly[weekday(day)];
        for &(from, to) in intervals.exceptions.get(&day).unwrap_or(of_weekday) {
            all.push(Span {
                from_unix_s: instant(zone, day * DAY_S + from).max(range.from_unix_s),
                to_unix_s: instant(zone, day * DAY_S + to).min(range.to_unix_s),
            });
        }
    }
    joined(all)
}

/// Monday is 0; 1970-01-01 was a Thursday.
fn weekday(day: i64) -> usize {
    (day + 3).rem_euclid(7) as usize
}

fn joined(mut all: Vec<Span>) -> Vec<Span> {
    all.retain(|span| span.from_unix_s < span.to_unix_s);
    all.sort_by_key(|span| span.from_unix_s);
    let mut joined: Vec<Span> = Vec::with_capacity(all.len());
    for span in all {
        match joined.last_mut() {
            Some(last) if span.from_unix_s <= last.to_unix_s => last.to_unix_s = last.to_unix_s.max(span.to_unix_s),
            _ => joined.push(span),
        }
    }
    joined
}

/// The instant of a wall-clock reading.
pub(super) fn instant(zone: &Zone, wall_s: i64) -> i64 {
    match zone.resolve(wall_s) {
        Some(LocalTime::Once(unix_s)) => unix_s,
        Some(LocalTime::Twice { first, .. }) => first,
        Some(LocalTime::Never {
            unmoved,
            offset_before_s,
        }) => jump(zone, unmoved, offset_before_s),
        None => wall_s,
    }
}

/// The instant of a wall-clock reading; `None` on a day that the calendar leaves out.
pub(super) fn instant_of_existing_day(zone: &Zone, wall_s: i64) -> Option<i64> {
    let unix_s = instant(zone, wall_s);
    let day = |unix_s: i64| zone.wall_clock_s(unix_s).div_euclid(DAY_S);
    let wanted = wall_s.div_euclid(DAY_S);
    let is_left_out = day(unix_s - 1) < wanted && wanted < day(unix_s);
    (!is_left_out).then_some(unix_s)
}

/// The moment at which the clock jumped over a reading. No jump is longer than a day.
fn jump(zone: &Zone, unmoved_unix_s: i64, offset_before_s: i64) -> i64 {
    first_second_where(unmoved_unix_s - DAY_S - 1, unmoved_unix_s, |unix_s| {
        zone.offset_s(unix_s) != offset_before_s
    })
}

/// The first second in `(before, after]` at which a condition holds that holds from some second on.
pub(super) fn first_second_where(before: i64, after: i64, holds: impl Fn(i64) -> bool) -> i64 {
    let (mut low, mut high) = (before, after);
    while high - low > 1 {
        let middle = low + (high - low) / 2;
        if holds(middle) {
            high = middle;
        } else {
            low = middle;
        }
    }
    high
}

/// Seconds of overlap with stretches asked for in rising order.
pub(super) struct Overlaps<'a> {
    spans: &'a [Span],
    next: usize,
}

impl<'a> Overlaps<'a> {
    pub(super) fn new(spans: &'a [Span]) -> Self {
        Self { spans, next: 0 }
    }

    /// Seconds of `[from, to)` inside any span.
    pub(super) fn seconds(&mut self, from_unix_s: i64, to_unix_s: i64) -> i64 {
        while self.spans.get(self.next).is_some_and(|s| s.to_unix_s <= from_unix_s) {
            self.next += 1;
        }
        let near = self.spans[self.next..].iter();
        near.take_while(|s| s.from_unix_s < to_unix_s)
            .map(|s| s.to_unix_s.min(to_unix_s) - s.from_unix_s.max(from_unix_s))
            .sum()
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::model::prediction::ScheduleException;

    fn interval(from: &str, to: &str) -> ClockInterval {
        ClockInterval {
            from: from.into(),
            to: to.into(),
        }
    }

    fn every_day(intervals: &[(&str, &str)]) -> ClockSchedule {
        let day: Vec<ClockInterval> = intervals.iter().map(|(from, to)| interval(from, to)).collect();
        ClockSchedule {
            weekly: std::array::from_fn(|_| day.clone()),
            exceptions: Vec::new(),
        }
    }

    fn read(schedule: &ClockSchedule) -> Result<Intervals, Vec<(String, &'static str)>> {
        let mut faults = Vec::new();
        let intervals = read_schedule(schedule, "options/opening_hours", &mut faults);
        let faults: Vec<_> = faults.into_iter().map(|fault| (fault.field, fault.code)).collect();
        if faults.is_empty() { Ok(intervals) } else { Err(faults) }
    }

    /// Hours open between two readings of the clock of a zone.
    fn open_hours(schedule: &ClockSchedule, zone: &str, from: &str, to: &str) -> f64 {
        let zone = Zone::parse(zone).unwrap();
        let midnight = |date: &str| instant(&zone, read_date(date).unwrap() * DAY_S);
        let range = Span {
            from_unix_s: midnight(from),
            to_unix_s: midnight(to),
        };
        let all = spans(&read(schedule).unwrap(), &zone, range);
        assert!(all.windows(2).all(|pair| pair[0].to_unix_s < pair[1].from_unix_s));
        all.iter().map(|span| span.to_unix_s - span.from_unix_s).sum::<i64>() as f64 / 3600.0
    }

    #[test]
    fn several_intervals_a_day() {
        let shop = every_day(&[("09:00", "12:00"), ("13:00", "17:00")]);
        assert_eq!(open_hours(&shop, "Europe/Oslo", "2026-01-05", "2026-01-12"), 49.0);
    }

    #[test]
    fn the_week_begins_on_monday() {
        let mut schedule = ClockSchedule::default();
        schedule.weekly[0] = vec![interval("10:00", "11:00")];
        // 2026-01-05 was a Monday.
        assert_eq!(open_hours(&schedule, "UTC", "2026-01-05", "2026-01-06"), 1.0);
        assert_eq!(open_hours(&schedule, "UTC", "2026-01-06", "2026-01-12"), 0.0);
    }

    #[test]
    fn past_midnight_and_to_midnight() {
        let bar = every_day(&[("22:00", "02:00")]);
        // The night before reaches into the first day; the last night is cut off at midnight.
        assert_eq!(open_hours(&bar, "Europe/Oslo", "2026-01-05", "2026-01-07"), 8.0);
        assert_eq!(
            open_hours(&every_day(&[("20:00", "24:00")]), "UTC", "2026-01-05", "2026-01-06"),
            4.0
        );
        assert_eq!(
            open_hours(&every_day(&[("00:00", "24:00")]), "UTC", "2026-01-05", "2026-01-07"),
            48.0
        );
        let meeting = every_day(&[("18:00", "03:00"), ("01:00", "05:00")]);
        assert_eq!(open_hours(&meeting, "UTC", "2026-01-05", "2026-01-06"), 5.0 + 6.0);
    }

    #[test]
    fn a_date_replaces_its_weekday() {
        let mut shop = every_day(&[("09:00", "17:00")]);
        shop.exceptions = vec![
            ScheduleException {
                date: "2026-12-25".into(),
                intervals: vec![],
            },
            ScheduleException {
                date: "2026-12-24".into(),
                intervals: vec![interval("09:00", "12:00")],
            },
        ];
        assert_eq!(
            open_hours(&shop, "Europe/Oslo", "2026-12-23", "2026-12-27"),
            8.0 + 3.0 + 0.0 + 8.0
        );
    }

    /// Oslo's clock skips 02:00-03:00 on 2026-03-29 and repeats it on 2026-10-25 (Directive 2000/84/EC: last Sundays).
    #[test]
    fn daylight_saving_takes_and_gives_an_hour() {
        let night = every_day(&[("00:00", "06:00")]);
        assert_eq!(open_hours(&night, "Europe/Oslo", "2026-03-29", "2026-03-30"), 5.0);
        assert_eq!(open_hours(&night, "Europe/Oslo", "2026-10-25", "2026-10-26"), 7.0);
        let skipped = every_day(&[("02:15", "02:45")]);
        assert_eq!(open_hours(&skipped, "Europe/Oslo", "2026-03-29", "2026-03-30"), 0.0);
        let half_skipped = every_day(&[("02:30", "03:30")]);
        assert_eq!(
            open_hours(&half_skipped, "Europe/Oslo", "2026-03-29", "2026-03-30"),
            0.5
        );
        let repeated = every_day(&[("02:00", "02:30")]);
        assert_eq!(open_hours(&repeated, "Europe/Oslo", "2026-10-25", "2026-10-26"), 0.5);
    }

    /// Lord Howe moves its clock by half an hour; Apia had no 30 December 2011 (tz database, `australasia`).
    #[test]
    fn half_hours_and_a_day_that_is_not() {
        let all_day = every_day(&[("00:00", "24:00")]);
        assert_eq!(
            open_hours(&all_day, "Australia/Lord_Howe", "2026-04-05", "2026-04-06"),
            24.5
        );
        assert_eq!(
            open_hours(&all_day, "Australia/Lord_Howe", "2026-10-04", "2026-10-05"),
            23.5
        );
        assert_eq!(open_hours(&all_day, "Pacific/Apia", "2011-12-30", "2011-12-31"), 0.0);
        assert_eq!(open_hours(&all_day, "Pacific/Apia", "2011-12-29", "2012-01-01"), 48.0);
        let shop = every_day(&[("09:00", "17:00")]);
        assert_eq!(open_hours(&shop, "Pacific/Apia", "2011-12-29", "2012-01-01"), 16.0);
    }

    /// Apia had no 30 December 2011; in Scoresbysund 29 March 2025 ended at 23:00 (tz database): an hour of a day is
    /// left out, not the day.
    #[test]
    fn only_a_whole_day_that_is_left_out_has_no_instant() {
        let found = |zone: &str, date: &str, hour: i64| {
            let wall_s = read_date(date).unwrap() * DAY_S + hour * 3600;
            instant_of_existing_day(&Zone::parse(zone).unwrap(), wall_s)
        };
        assert_eq!(found("Pacific/Apia", "2011-12-30", 10), None);
        assert!(found("Pacific/Apia", "2011-12-29", 10).is_some());
        assert!(found("Pacific/Apia", "2011-12-31", 0).is_some());
        let midnight = wall_clock_s(2025, 3, 30, 1, 0, 0);
        assert_eq!(found("America/Scoresbysund", "2025-03-29", 23), midnight);
        assert_eq!(found("America/Scoresbysund", "2025-03-30", 0), midnight);
    }

    #[test]
    fn every_bad_interval_is_named_at_once() {
        let mut schedule = ClockSchedule::default();
        schedule.weekly[0] = vec![interval("9:00", "12:00"), interval("10:00", "24:30")];
        schedule.weekly[2] = vec![interval("09:00", "13:00"), interval("12:00", "14:00")];
        schedule.weekly[6] = vec![interval("24:00", "02:00"), interval("08:00", "08:00")];
        let exception = |date: &str| ScheduleException {
            date: date.into(),
            intervals: vec![interval("x", "y")],
        };
        schedule.exceptions = vec![
            exception("2026-02-30"),
            exception("2026-05-01"),
            exception("2026-05-01"),
        ];
        let at = |path: &str, code| (format!("options/opening_hours/{path}"), code);
        let expected = [
            at("weekly/mon/0", "invalid_interval"),
            at("weekly/mon/1", "invalid_interval"),
            at("weekly/wed/1", "overlapping_interval"),
            at("weekly/sun/0", "invalid_interval"),
            at("weekly/sun/1", "invalid_interval"),
            at("exceptions/0/intervals/0", "invalid_interval"),
            at("exceptions/0/date", "invalid_date"),
            at("exceptions/1/intervals/0", "invalid_interval"),
            at("exceptions/2/intervals/0", "invalid_interval"),
            at("exceptions/2/date", "repeated_date"),
        ];
        assert_eq!(read(&schedule).unwrap_err(), expected);
    }

    #[test]
    fn overlaps_are_exact_to_the_second() {
        let spans = [(10, 20), (30, 40)].map(|(from_unix_s, to_unix_s)| Span { from_unix_s, to_unix_s });
        let mut overlaps = Overlaps::new(&spans);
        let asked = [(0, 5), (5, 15), (15, 35), (35, 100), (100, 200)];
        assert_eq!(asked.map(|(from, to)| overlaps.seconds(from, to)), [0, 5, 10, 5, 0]);
    }

    /// Minute by minute: open where an interval of today or one of yesterday that runs past midnight holds the clock.
    fn naive_open_minutes(week: &[Vec<(i64, i64)>; 7], days: i64) -> i64 {
        let holds = |day: i64, minute: i64| {
            week[weekday(day)]
                .iter()
                .any(|(from, to)| (*from..*to).contains(&minute))
        };
        let open = |minute: i64| {
            let (day, minute) = (minute.div_euclid(1440), minute.rem_euclid(1440));
            holds(day, minute) || holds(day - 1, minute + 1440)
        };
        (0..days * 1440).filter(|minute| open(*minute)).count() as i64
    }

    fn clock(minute: i64) -> String {
        format!("{:02}:{:02}", minute % 1440 / 60, minute % 60)
    }

    proptest::proptest! {
        #[test]
        fn spans_agree_with_a_walk_minute_by_minute(
            starts in proptest::collection::vec((0..7_usize, 0..1440_i64, 1..1440_i64), 0..6),
        ) {
            let (mut schedule, mut week) = (ClockSchedule::default(), [const { Vec::new() }; 7]);
            for (weekday, from, length) in starts {
                if week[weekday].iter().any(|(f, t)| from < *t && *f < from + length) {
                    continue;
                }
                week[weekday].push((from, from + length));
                schedule.weekly[weekday].push(interval(&clock(from), &clock(from + length)));
            }
            let range = Span { from_unix_s: 0, to_unix_s: 21 * DAY_S };
            let all = spans(&read(&schedule).unwrap(), &Zone::utc(), range);
            let open_s: i64 = all.iter().map(|span| span.to_unix_s - span.from_unix_s).sum();
            proptest::prop_assert_eq!(open_s, 60 * naive_open_minutes(&week, 21));
        }
    }
}
