//! The service's clock. The model has none: whatever depends on the moment is settled before a run starts.

use std::fmt;
use std::sync::Arc;
use std::time::{SystemTime, UNIX_EPOCH};

/// Tells the moment; cheap to clone.
#[derive(Clone)]
pub struct Clock(Arc<dyn Fn() -> i64 + Send + Sync>);

impl Clock {
    /// The machine's own.
    pub fn system() -> Self {
        Self::of(|| {
            let since = SystemTime::now().duration_since(UNIX_EPOCH);
            since.map_or(0, |since| since.as_secs() as i64)
        })
    }

    /// One that asks this function, seconds since 1970-01-01T00:00:00Z.
    pub fn of(now_unix_s: impl Fn() -> i64 + Send + Sync + 'static) -> Self {
        Self(Arc::new(now_unix_s))
    }

    /// The moment, seconds since 1970-01-01T00:00:00Z.
    pub fn now_unix_s(&self) -> i64 {
        (self.0)()
    }
}

impl fmt::Debug for Clock {
    fn fmt(&self, out: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(out, "Clock({})", self.now_unix_s())
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_machine_is_past_2025() {
        assert!(Clock::system().now_unix_s() > 1_735_689_600);
        assert_eq!(Clock::of(|| 7).now_unix_s(), 7);
    }
}
