//! Hours laid into the calendar.

use super::calendar::{Calendar, CalendarSpan};
use super::figures::bands;
use super::record::HourRecord;
use super::result::{Period, Totals, Visit};

/// The figures of one run, day by day and by hour of the clock.
#[derive(Debug, Clone)]
pub(super) struct Ledger {
    pub(super) days: Vec<Totals>,
    pub(super) hours_of_day: Vec<Totals>,
}

impl Ledger {
    pub(super) fn new(calendar: &Calendar) -> Self {
        Self {
            days: vec![Totals::default(); calendar.days.len()],
            hours_of_day: vec![Totals::default(); 24],
        }
    }

    /// Adds one hour, split over the days and clock hours it touches.
    pub(super) fn add(&mut self, calendar: &Calendar, hour: usize, record: &HourRecord) {
        let totals = record.totals();
        for part in calendar.parts(hour) {
            self.days[part.day].add_hour(&totals, part.share(), part.open_share());
            self.hours_of_day[part.hour_of_day].add_hour(&totals, part.share(), part.open_share());
        }
    }

    /// Counts visits in the day and clock hour they were made.
    pub(super) fn add_visits(&mut self, calendar: &Calendar, visits: &[Visit]) {
        for part in visits.iter().filter_map(|visit| calendar.part_at(visit.at_unix_s)) {
            self.days[part.day].visits += 1.0;
            self.hours_of_day[part.hour_of_day].visits += 1.0;
        }
    }

    /// Each month's figures: the sum of its days.
    fn months(&self, calendar: &Calendar) -> Vec<Totals> {
        let days_of = calendar.months.iter().map(|(_, days)| days.clone());
        days_of.map(|days| sum(&self.days[days])).collect()
    }
}

fn sum(parts: &[Totals]) -> Totals {
    let mut total = Totals::default();
    parts.iter().for_each(|part| total.add(part));
    total
}

/// The nominal run and its samples, laid beside each other.
pub(super) struct Ledgers<'a> {
    pub(super) calendar: &'a Calendar,
    pub(super) nominal: &'a Ledger,
    /// Empty without bands.
    pub(super) samples: &'a [Ledger],
}

impl Ledgers<'_> {
    /// The whole run.
    pub(super) fn summary(&self, from_unix_s: i64, to_unix_s: i64) -> Period {
        let whole = CalendarSpan {
            label: String::new(),
            from_unix_s,
            to_unix_s,
        };
        let of = |ledger: &Ledger| vec![sum(&ledger.days)];
        self.periods([&whole].into_iter(), of).remove(0)
    }

    pub(super) fn months(&self) -> Vec<Period> {
        self.periods(self.calendar.months.iter().map(|(month, _)| month), |ledger| {
            ledger.months(self.calendar)
        })
    }

    pub(super) fn days(&self) -> Vec<Period> {
        self.periods(self.calendar.days.iter(), |ledger| ledger.days.clone())
    }

    fn periods<'s>(
        &self,
        spans: impl Iterator<Item = &'s CalendarSpan>,
        of: impl Fn(&Ledger) -> Vec<Totals>,
    ) -> Vec<Period> {
        let nominal = of(self.nominal);
        let samples: Vec<Vec<Totals>> = self.samples.iter().map(&of).collect();
        let period = |(i, span): (usize, &CalendarSpan)| {
            let of_samples: Vec<&Totals> = samples.iter().map(|sample| &sample[i]).collect();
            Period {
                label: span.label.clone(),
                from_unix_s: span.from_unix_s,
                to_unix_s: span.to_unix_s,
                totals: nominal[i],
                bands: (!of_samples.is_empty()).then(|| bands(&nominal[i], &of_samples)),
            }
        };
        spans.enumerate().map(period).collect()
    }
}
