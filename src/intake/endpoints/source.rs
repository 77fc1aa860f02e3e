//! A source as it is asked here: within its budget, so many questions at once, again after a failure, and not while it
//! rests.

use std::sync::{Arc, Mutex, MutexGuard, OnceLock, PoisonError};
use std::time::Duration;

use backon::{ExponentialBuilder, Retryable};
use bytes::Bytes;
use reqwest::Client;
use tokio::sync::Semaphore;
use tokio::time::Instant;

use super::adapter::{Adapter, AnswerFault, Parsed, Question};
use super::breaker::Breaker;
use super::budget::{Budget, BudgetLeft};
use super::error::FetchError;
use super::exchange::{self, Came};
use crate::config;

/// A source behind a network.
#[derive(Debug)]
pub struct Source {
    adapter: Arc<dyn Adapter>,
    contact: String,
    try_timeout: Duration,
    tries: usize,
    first_wait: Duration,
    answer_bytes: usize,
    client: OnceLock<Result<Client, FetchError>>,
    budget: Mutex<Budget>,
    breaker: Breaker,
    places: Semaphore,
    told_deprecated: OnceLock<()>,
    past: Mutex<Past>,
}

/// How it went so far.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub struct Past {
    /// When it last answered, seconds since 1970.
    pub last_success_unix_s: Option<i64>,
    /// When it last failed, seconds since 1970, and why.
    pub last_failure: Option<(i64, String)>,
}

/// The moment of asking, by two clocks.
#[derive(Debug, Clone, Copy)]
pub struct Asking {
    /// The present, seconds since 1970.
    pub now_unix_s: i64,
    /// When nobody waits for the answer any more.
    pub deadline: Instant,
}

/// What asking came to.
#[derive(Debug, Clone, PartialEq)]
pub enum Answer {
    /// An answer that was understood.
    New {
        /// As it came.
        body: Bytes,
        /// As it was understood.
        parsed: Box<Parsed>,
        /// When it expires, seconds since 1970, if the source says so.
        expires_unix_s: Option<i64>,
        /// Its Last-Modified, to the letter.
        last_modified: Option<String>,
    },
    /// The earlier answer still holds.
    NotModified {
        /// Until when, seconds since 1970, if the source says so.
        expires_unix_s: Option<i64>,
    },
}

impl Source {
    /// Behind this adapter, with these settings and this budget.
    pub fn new(adapter: Arc<dyn Adapter>, config: &config::Weather, budget: &config::Budget) -> Self {
        Self {
            adapter,
            contact: config.contact.clone(),
            try_timeout: config.try_timeout,
            tries: config.tries,
            first_wait: config.first_wait,
            answer_bytes: config.answer_bytes,
            client: OnceLock::new(),
            budget: Mutex::new(Budget::new(budget)),
            breaker: Breaker::new(config.failures_before_rest, config.rest),
            places: Semaphore::new(budget.parallel),
            told_deprecated: OnceLock::new(),
            past: Mutex::default(),
        }
    }

    /// What it understands.
    pub fn adapter(&self) -> &Arc<dyn Adapter> {
        &self.adapter
    }

    /// What is left of its budget.
    pub fn budget_left(&self) -> BudgetLeft {
        locked(&self.budget).left(Instant::now())
    }

    /// How much longer it is left in peace, if it is.
    pub fn resting_for(&self) -> Option<Duration> {
        self.breaker.resting_for(Instant::now())
    }

    /// How it went so far.
    pub fn past(&self) -> Past {
        locked(&self.past).clone()
    }

    /// Asks, again after a passing failure, until an answer is understood; `earlier` is the Last-Modified of an answer that
    /// is at hand. Waiting between tries grows, with a random part; what the source itself wishes is honoured.
    ///
    /// # Errors
    /// The last failure, once another try does not help or does not fit before the deadline.
    pub async fn ask(&self, question: &Question, earlier: Option<&str>, asking: Asking) -> Result<Answer, FetchError> {
        let patience = ExponentialBuilder::default()
            .with_jitter()
            .with_min_delay(self.first_wait)
            .with_max_times(self.tries.saturating_sub(1));
        (|| self.try_once(question, earlier, asking))
            .retry(patience)
            .when(FetchError::is_worth_another_try)
            .adjust(|error, planned| wait_within(asking.deadline, error, planned))
            .notify(|error, wait| {
                let source = self.adapter.facts().name;
                tracing::info!(source, %error, wait_ms = wait.as_millis() as u64, "asking again");
            })
            .await
    }

    async fn try_once(&self, question: &Question, earlier: Option<&str>, asking: Asking) -> Result<Answer, FetchError> {
        let out_of_time = |_| FetchError::TooSlow(self.try_timeout);
        let place = tokio::time::timeout_at(asking.deadline, self.places.acquire()).await;
        let _place = place.map_err(out_of_time)?;
        let leave = self.breaker.enter(Instant::now()).map_err(FetchError::Resting)?;
        locked(&self.budget)
            .take(question.weight, Instant::now())
            .map_err(FetchError::BudgetSpent)?;
        let started = Instant::now();
        let limit = asking.deadline.min(started + self.try_timeout);
        let came = tokio::time::timeout_at(limit, self.exchange(question, earlier, asking.now_unix_s)).await;
        let came = came.unwrap_or_else(|_| Err(FetchError::TooSlow(limit.duration_since(started))));
        match &came {
            Ok(_) => leave.succeeded(),
            Err(error) if error.is_the_sources_failure() => leave.failed(Instant::now()),
            Err(_) => drop(leave),
        }
        self.note(question, &came, started, asking.now_unix_s);
        came
    }

    async fn exchange(
        &self,
        question: &Question,
        earlier: Option<&str>,
        now_unix_s: i64,
    ) -> Result<Answer, FetchError> {
        let client = self
            .client
            .get_or_init(|| exchange::client(&question.url, &self.contact));
        let client = client.as_ref().map_err(Clone::clone)?;
        match exchange::ask(client, question, earlier, self.answer_bytes, now_unix_s).await? {
            Came::NotModified { expires_unix_s } => Ok(Answer::NotModified { expires_unix_s }),
            Came::Answer {
                body,
                expires_unix_s,
                last_modified,
                deprecated,
            } => {
                if deprecated {
                    self.tell_deprecated();
                }
                Ok(Answer::New {
                    parsed: Box::new(self.parse(question, body.clone()).await?),
                    body,
                    expires_unix_s,
                    last_modified,
                })
            }
        }
    }

    /// Reads an answer on a thread that may be held up.
    ///
    /// # Errors
    /// An answer that is garbled, or not what the source is known to answer.
    pub async fn parse(&self, question: &Question, body: Bytes) -> Result<Parsed, FetchError> {
        let (adapter, question) = (Arc::clone(&self.adapter), question.clone());
        let parsed = tokio::task::spawn_blocking(move || adapter.parse(&question, &body)).await;
        match parsed {
            Ok(Ok(parsed)) => Ok(parsed),
            Ok(Err(AnswerFault::Garbled(words))) => Err(FetchError::Garbled(words)),
            Ok(Err(AnswerFault::Wrong(words))) => Err(FetchError::Wrong(words)),
            Err(broken) => Err(FetchError::Wrong(broken.to_string())),
        }
    }

    fn note(&self, question: &Question, came: &Result<Answer, FetchError>, started: Instant, now_unix_s: i64) {
        let source = self.adapter.facts().name;
        let outcome = came.as_ref().map_or_else(|error| error.name(), |_| "answered");
        let duration = started.elapsed();
        metrics::counter!("weather_questions_total", "source" => source, "outcome" => outcome).increment(1);
        metrics::histogram!("weather_question_duration_seconds", "source" => source).record(duration.as_secs_f64());
        metrics::gauge!("weather_budget_left_day", "source" => source).set(self.budget_left().day);
        let duration_ms = duration.as_millis() as u64;
        let mut past = locked(&self.past);
        match came {
            Ok(_) => {
                past.last_success_unix_s = Some(now_unix_s);
                tracing::info!(
                    source,
                    question = question.service,
                    duration_ms,
                    "a weather source answered"
                );
            }
            Err(error) => {
                if let Some(wish) = error.wish() {
                    self.breaker.rest_for(wish, Instant::now());
                }
                past.last_failure = Some((now_unix_s, error.to_string()));
                tracing::warn!(source, question = question.service, duration_ms, %error, "a weather source failed");
            }
        }
    }

    fn tell_deprecated(&self) {
        self.told_deprecated.get_or_init(|| {
            let source = self.adapter.facts().name;
            tracing::warn!(
                source,
                "the source says that this version of it is deprecated (status 203)"
            );
        });
    }
}

/// The wait before another try, if it ends before the deadline.
fn wait_within(deadline: Instant, error: &FetchError, planned: Option<Duration>) -> Option<Duration> {
    let planned = planned?;
    let wait = error.wish().map_or(planned, |wish| wish.max(planned));
    (Instant::now() + wait < deadline).then_some(wait)
}

/// Nothing that can panic runs under these locks.
fn locked<T>(mutex: &Mutex<T>) -> MutexGuard<'_, T> {
    mutex.lock().unwrap_or_else(PoisonError::into_inner)
}
