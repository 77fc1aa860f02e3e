//! How much a source may still be asked: weighted calls in any minute, hour and day, counted exactly.

use std::collections::VecDeque;
use std::time::Duration;

use tokio::time::Instant;

use crate::config;

const MINUTE: Duration = Duration::from_secs(60);
const HOUR: Duration = Duration::from_secs(3600);
const DAY: Duration = Duration::from_secs(86_400);

/// What is left of a budget, in weighted calls.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct BudgetLeft {
    /// In the present minute.
    pub minute: f64,
    /// In the present hour.
    pub hour: f64,
    /// In the present day.
    pub day: f64,
}

/// Every call of the last day. No more can be in it than the day's budget allows, since each counts at least one.
#[derive(Debug)]
pub(super) struct Budget {
    allowed: [(Duration, f64); 3],
    calls: VecDeque<(Instant, f64)>,
}

impl Budget {
    pub(super) fn new(config: &config::Budget) -> Self {
        Self {
            allowed: [
                (MINUTE, f64::from(config.per_minute)),
                (HOUR, f64::from(config.per_hour)),
                (DAY, f64::from(config.per_day)),
            ],
            calls: VecDeque::new(),
        }
    }

    /// Takes a call out of the budget, or tells how long until there is room for it.
    pub(super) fn take(&mut self, weight: f64, now: Instant) -> Result<(), Duration> {
        self.forget(now);
        let waits = self
            .allowed
            .map(|(window, allowed)| self.wait(window, allowed, weight, now));
        match waits.into_iter().flatten().max() {
            Some(wait) => Err(wait),
            None => {
                self.calls.push_back((now, weight));
                Ok(())
            }
        }
    }

    pub(super) fn left(&self, now: Instant) -> BudgetLeft {
        let [minute, hour, day] = self
            .allowed
            .map(|(window, allowed)| (allowed - self.used(window, now)).max(0.0));
        BudgetLeft { minute, hour, day }
    }

    fn used(&self, window: Duration, now: Instant) -> f64 {
        self.within(window, now).map(|(_, weight)| weight).sum()
    }

    fn within(&self, window: Duration, now: Instant) -> impl Iterator<Item = &(Instant, f64)> {
        self.calls
            .iter()
            .filter(move |(at, _)| now.duration_since(*at) < window)
    }

    /// Until enough calls have left the window; a call that is heavier than the whole budget may go when it is untouched.
    fn wait(&self, window: Duration, allowed: f64, weight: f64, now: Instant) -> Option<Duration> {
        let mut over = self.used(window, now) + weight.min(allowed) - allowed;
        if over <= 0.0 {
            return None;
        }
        for (at, earlier) in self.within(window, now) {
            over -= earlier;
            if over <= 0.0 {
                return Some(window.saturating_sub(now.duration_since(*at)));
            }
        }
        Some(window)
    }

    fn forget(&mut self, now: Instant) {
        while self.calls.front().is_some_and(|(at, _)| now.duration_since(*at) >= DAY) {
            self.calls.pop_front();
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn budget(per_minute: u32, per_hour: u32, per_day: u32) -> Budget {
        Budget::new(&config::Budget {
            per_minute,
            per_hour,
            per_day,
            parallel: 1,
        })
    }

    #[test]
    fn no_window_of_a_minute_holds_more_than_allowed() {
        let (mut budget, start) = (budget(2, 100, 100), Instant::now());
        let at = |seconds: u64| start + Duration::from_secs(seconds);
        assert_eq!(budget.take(1.0, at(0)), Ok(()));
        assert_eq!(budget.take(1.0, at(50)), Ok(()));
        assert_eq!(
            budget.take(1.0, at(55)),
            Err(Duration::from_secs(5)),
            "the first leaves after 60 s"
        );
        assert_eq!(budget.take(1.0, at(60)), Ok(()));
        assert_eq!(budget.left(at(61)).minute, 0.0);
        assert_eq!(budget.left(at(61)).hour, 97.0);
    }

    #[test]
    fn the_longest_wait_counts_and_weights_do() {
        let (mut budget, now) = (budget(100, 10, 100), Instant::now());
        assert_eq!(budget.take(7.5, now), Ok(()));
        assert_eq!(budget.take(3.0, now), Err(HOUR));
        assert_eq!(budget.take(2.5, now), Ok(()));
    }

    #[test]
    fn a_call_heavier_than_the_budget_waits_for_an_untouched_one() {
        let (mut budget, now) = (budget(10, 1000, 1000), Instant::now());
        assert_eq!(budget.take(16.0, now), Ok(()));
        assert_eq!(budget.take(1.0, now), Err(MINUTE));
    }

    #[test]
    fn yesterday_is_forgotten() {
        let (mut budget, start) = (budget(10_000, 10_000, 50), Instant::now());
        for call in 0..50 {
            assert_eq!(budget.take(1.0, start + Duration::from_secs(call)), Ok(()));
        }
        assert!(budget.take(1.0, start + HOUR).is_err());
        assert_eq!(budget.take(1.0, start + DAY + HOUR), Ok(()));
        assert_eq!(budget.calls.len(), 1);
    }
}
