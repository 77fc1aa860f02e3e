//! A source that keeps failing is left in peace for a while.

use std::sync::Mutex;
use std::sync::PoisonError;
use std::time::Duration;

use tokio::time::Instant;

/// Counts failures in a row.
#[derive(Debug)]
pub(super) struct Breaker {
    failures_before_rest: u32,
    rest: Duration,
    state: Mutex<State>,
}

#[derive(Debug, Default)]
struct State {
    failures: u32,
    resting_until: Option<Instant>,
    /// One question is out to see whether the source is back.
    trying: bool,
}

/// Leave to ask; say how it went, or drop it if it went nowhere.
#[derive(Debug)]
pub(super) struct Leave<'a> {
    breaker: &'a Breaker,
    trial: bool,
}

impl Breaker {
    pub(super) fn new(failures_before_rest: u32, rest: Duration) -> Self {
        Self {
            failures_before_rest,
            rest,
            state: Mutex::default(),
        }
    }

    /// Leave to ask, or how much longer the source rests. After a rest one question goes first.
    pub(super) fn enter(&self, now: Instant) -> Result<Leave<'_>, Duration> {
        self.with(|state| match state.resting_until {
            Some(until) if until > now => Err(until.duration_since(now)),
            Some(_) if state.trying => Err(self.rest),
            resting => {
                state.trying = resting.is_some();
                Ok(resting.is_some())
            }
        })
        .map(|trial| Leave { breaker: self, trial })
    }

    /// Lets the source rest for as long as it asked for.
    pub(super) fn rest_for(&self, wait: Duration, now: Instant) {
        self.with(|state| state.resting_until = state.resting_until.max(Some(now + wait)));
    }

    /// How much longer it rests.
    pub(super) fn resting_for(&self, now: Instant) -> Option<Duration> {
        let until = self.with(|state| state.resting_until)?;
        (until > now).then(|| until.duration_since(now))
    }

    fn with<T>(&self, change: impl FnOnce(&mut State) -> T) -> T {
        // Nothing that can panic runs under this lock.
        change(&mut self.state.lock().unwrap_or_else(PoisonError::into_inner))
    }
}

impl Leave<'_> {
    /// The source answered.
    pub(super) fn succeeded(self) {
        self.breaker.with(|state| *state = State::default());
    }

    /// The source failed.
    pub(super) fn failed(self, now: Instant) {
        let breaker = self.breaker;
        breaker.with(|state| {
            state.failures = state.failures.saturating_add(1);
            if state.failures >= breaker.failures_before_rest {
                state.resting_until = state.resting_until.max(Some(now + breaker.rest));
            }
        });
    }
}

impl Drop for Leave<'_> {
    fn drop(&mut self) {
        if self.trial {
            self.breaker.with(|state| state.trying = false);
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    const REST: Duration = Duration::from_secs(60);

    #[test]
    fn it_rests_after_failures_in_a_row_and_one_tries_first() {
        let (breaker, now) = (Breaker::new(2, REST), Instant::now());
        breaker.enter(now).unwrap().failed(now);
        breaker.enter(now).unwrap().succeeded();
        breaker.enter(now).unwrap().failed(now);
        assert_eq!(breaker.resting_for(now), None, "not in a row");
        breaker.enter(now).unwrap().failed(now);
        assert_eq!(breaker.enter(now).unwrap_err(), REST);
        let later = now + REST;
        let trial = breaker.enter(later).unwrap();
        assert!(breaker.enter(later).is_err(), "one at a time");
        trial.succeeded();
        assert!(breaker.enter(later).is_ok() && breaker.enter(later).is_ok());
    }

    #[test]
    fn a_failed_trial_rests_again_and_a_dropped_one_frees_the_way() {
        let (breaker, now) = (Breaker::new(1, REST), Instant::now());
        breaker.enter(now).unwrap().failed(now);
        let later = now + REST;
        drop(breaker.enter(later).unwrap());
        breaker.enter(later).unwrap().failed(later);
        assert_eq!(breaker.resting_for(later), Some(REST));
    }

    #[test]
    fn the_sources_own_wish_counts() {
        let (breaker, now) = (Breaker::new(5, REST), Instant::now());
        breaker.rest_for(Duration::from_secs(3600), now);
        assert_eq!(breaker.resting_for(now), Some(Duration::from_secs(3600)));
        assert!(breaker.enter(now).is_err());
    }
}
