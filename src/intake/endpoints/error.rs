//! Why a source gave nothing.

use std::time::Duration;

/// Why a source gave nothing.
#[derive(Debug, Clone, PartialEq, Eq, thiserror::Error)]
pub enum FetchError {
    /// It failed too often, or asked to be left in peace.
    #[error("it failed or refused before and is left in peace for {} s", .0.as_secs())]
    Resting(Duration),
    /// This service's own budget for it is used up.
    #[error("what this service may ask of it is used up; the next question can go in {} s", .0.as_secs())]
    BudgetSpent(Duration),
    /// It says it was asked too much.
    #[error("it says it was asked too much ({told}); it may be asked again in {} s", .wait.as_secs())]
    TooMany {
        /// Its words.
        told: String,
        /// When it may be asked again.
        wait: Duration,
    },
    /// It could not be reached, or broke off.
    #[error("it could not be reached, or broke off: {0}")]
    Unreachable(String),
    /// It was too slow.
    #[error("it took longer than {} s", .0.as_secs_f64())]
    TooSlow(Duration),
    /// It says it is out of order.
    #[error("it answered with status {status}")]
    OutOfOrder {
        /// HTTP status.
        status: u16,
        /// When it may be asked again, if it says so.
        wait: Option<Duration>,
    },
    /// Its answer was cut short or garbled.
    #[error("its answer is cut short or garbled: {0}")]
    Garbled(String),
    /// Its answer is larger than is taken.
    #[error("its answer is larger than {0} bytes")]
    TooLarge(usize),
    /// It answered something other than JSON.
    #[error("it answered {0} where JSON was expected")]
    NotJson(String),
    /// It led on to another address, which is not followed.
    #[error("it led on to another address (status {0}), which is not followed; the operator must name the new one")]
    Redirected(u16),
    /// It does not answer this service.
    #[error(
        "it does not answer this service (status {0}); the operator must look at its terms, weather.contact and keys"
    )]
    Forbidden(u16),
    /// It does not take this question.
    #[error("it does not take the question (status {status}{})", .told.as_ref().map(|told| format!(": {told}")).unwrap_or_default())]
    Refused {
        /// HTTP status.
        status: u16,
        /// Its reason.
        told: Option<String>,
    },
    /// Its answer is whole, but not what it is known to answer.
    #[error("its answer is not what it is known to answer: {0}")]
    Wrong(String),
    /// This service cannot ask it at all.
    #[error("this service cannot ask it: {0}")]
    NotSetUp(String),
}

impl FetchError {
    /// Whether the same question may succeed a moment later.
    pub fn is_worth_another_try(&self) -> bool {
        matches!(
            self,
            Self::Unreachable(_) | Self::TooSlow(_) | Self::OutOfOrder { .. } | Self::Garbled(_) | Self::TooMany { .. }
        )
    }

    /// Whether it tells against the source; a refused question and an empty budget do not.
    pub fn is_the_sources_failure(&self) -> bool {
        !matches!(
            self,
            Self::Resting(_) | Self::BudgetSpent(_) | Self::TooMany { .. } | Self::Refused { .. } | Self::NotSetUp(_)
        )
    }

    /// How long the source itself wants to be left in peace.
    pub fn wish(&self) -> Option<Duration> {
        match self {
            Self::TooMany { wait, .. } => Some(*wait),
            Self::OutOfOrder { wait, .. } => *wait,
            _ => None,
        }
    }

    /// When the same question may be sent again; none if that does not help.
    pub fn retry_after(&self) -> Option<Duration> {
        /// Where nobody said how long.
        const SOME_TIME: Duration = Duration::from_secs(30);
        match self {
            Self::Resting(wait) | Self::BudgetSpent(wait) | Self::TooMany { wait, .. } => Some(*wait),
            Self::OutOfOrder { wait, .. } => Some(wait.unwrap_or(SOME_TIME)),
            Self::Unreachable(_) | Self::TooSlow(_) | Self::Garbled(_) => Some(SOME_TIME),
            _ => None,
        }
    }

    /// A short name for metrics.
    pub fn name(&self) -> &'static str {
        match self {
            Self::Resting(_) => "resting",
            Self::BudgetSpent(_) => "budget_spent",
            Self::TooMany { .. } => "too_many",
            Self::Unreachable(_) => "unreachable",
            Self::TooSlow(_) => "too_slow",
            Self::OutOfOrder { .. } => "out_of_order",
            Self::Garbled(_) => "garbled",
            Self::TooLarge(_) => "too_large",
            Self::NotJson(_) => "not_json",
            Self::Redirected(_) => "redirected",
            Self::Forbidden(_) => "forbidden",
            Self::Refused { .. } => "refused",
            Self::Wrong(_) => "wrong",
            Self::NotSetUp(_) => "not_set_up",
        }
    }
}
