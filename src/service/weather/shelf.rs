//! Looking on the shelf before asking, and putting back what came.

use std::sync::Arc;

use tokio::sync::OnceCell;

use super::flights::{Flights, Outcome};
use crate::config;
use crate::intake::endpoints::{Answer, Asking, DAY_S, FetchError, Parsed, Piece, Question, Source, join};
use crate::service::Clock;
use crate::store::{KeptWeather, Store, StoreError};

/// Kept weather, and the way to more.
#[derive(Debug)]
pub(super) struct Shelf {
    config: config::Store,
    clock: Clock,
    store: OnceCell<Option<Store>>,
    flights: Flights,
}

/// An understood answer.
#[derive(Debug)]
pub(super) struct Held {
    pub(super) parsed: Parsed,
    pub(super) fetched_unix_s: i64,
    /// Why it is no newer, if it has expired.
    pub(super) stale_because: Option<FetchError>,
}

/// An answer off the shelf, understood.
struct Kept {
    row: KeptWeather,
    parsed: Parsed,
}

impl Shelf {
    pub(super) fn new(config: &config::Store, clock: Clock) -> Self {
        Self {
            config: config.clone(),
            clock,
            store: OnceCell::new(),
            flights: Flights::default(),
        }
    }

    /// Opens the store if its file is there already, so that a damaged one is told at the start; else the first answer to be
    /// kept makes it.
    pub(super) async fn open(&self) -> Result<(), StoreError> {
        let there = self.config.file.as_ref().is_some_and(|file| file.exists());
        if there && !self.store.initialized() {
            let store = Store::open(&self.config).await?;
            // If somebody was faster, his serves as well.
            let _ = self.store.set(Some(store));
        }
        Ok(())
    }

    async fn store(&self) -> Option<&Store> {
        let opened = self.store.get_or_init(|| async {
            Store::open(&self.config)
                .await
                .inspect_err(|error| {
                    failed("open");
                    tracing::error!("NOTHING IS KEPT: {error}");
                })
                .ok()
        });
        opened.await.as_ref()
    }

    /// When a source's newest kept answer was fetched, if the store is open.
    pub(super) async fn newest(&self, source: &str) -> Option<i64> {
        let store = self.store.get()?.as_ref()?;
        store.newest_weather(source).await.ok().flatten()
    }

    /// The answer to a question: kept if it still holds, else asked for, else kept though it has expired.
    pub(super) async fn answer(self: &Arc<Self>, source: Arc<Source>, question: Question, asking: Asking) -> Outcome {
        let shelf = Arc::clone(self);
        let name = question.name();
        let look = async move { shelf.look(&source, &question, asking).await.map(Arc::new) };
        self.flights.outcome(name, look).await
    }

    async fn look(&self, source: &Source, question: &Question, asking: Asking) -> Result<Held, FetchError> {
        let kept = self.kept(source, question).await;
        let name = source.adapter().facts().name;
        let kept = match kept {
            Some(kept)
                if kept
                    .row
                    .expires_unix_s
                    .is_none_or(|expires| expires > self.clock.now_unix_s()) =>
            {
                count(name, "kept");
                return Ok(kept.held(None));
            }
            kept => kept,
        };
        let earlier = kept.as_ref().and_then(|kept| kept.row.last_modified.as_deref());
        match (source.ask(question, earlier, asking).await, kept) {
            (Ok(Answer::NotModified { expires_unix_s }), Some(kept)) => {
                count(name, "unchanged");
                Ok(self.renewed(question, kept, expires_unix_s).await)
            }
            (Ok(Answer::NotModified { .. }), None) => {
                Err(FetchError::Wrong("nothing was said to have changed".to_owned()))
            }
            (Ok(new), _) => {
                count(name, "fetched");
                Ok(self.put(name, question, new).await)
            }
            (Err(error), Some(kept)) => {
                count(name, "stale");
                tracing::warn!(source = name, %error, "an answer that has expired is taken");
                Ok(kept.held(Some(error)))
            }
            (Err(error), None) => Err(error),
        }
    }

    async fn kept(&self, source: &Source, question: &Question) -> Option<Kept> {
        let store = self.store().await?;
        let found = store.weather(&question.name(), self.clock.now_unix_s()).await;
        let row = found.map_err(|error| complain("read", &error)).ok()??;
        let parsed = source.parse(question, row.answer.clone().into()).await;
        let parsed =
            parsed.map_err(|error| tracing::warn!(%error, "a kept answer is not understood; it is fetched anew"));
        Some(Kept {
            row,
            parsed: parsed.ok()?,
        })
    }

    async fn renewed(&self, question: &Question, mut kept: Kept, expires_unix_s: Option<i64>) -> Held {
        let now_unix_s = self.clock.now_unix_s();
        kept.row.fetched_unix_s = now_unix_s;
        let expires_unix_s = expires_unix_s.or(question.holds_s.map(|holds_s| now_unix_s + holds_s));
        if let Some(store) = self.store().await {
            let renewed = store.renew_weather(&question.name(), now_unix_s, expires_unix_s).await;
            let _ = renewed.map_err(|error| complain("renew", &error));
        }
        kept.held(None)
    }

    async fn put(&self, source: &str, question: &Question, answer: Answer) -> Held {
        let now_unix_s = self.clock.now_unix_s();
        let Answer::New {
            body,
            parsed,
            expires_unix_s,
            last_modified,
        } = answer
        else {
            unreachable!("the caller took the other answers away");
        };
        let kept = KeptWeather {
            question: question.name(),
            source: source.to_owned(),
            fetched_unix_s: now_unix_s,
            expires_unix_s: expiry(question, &parsed, expires_unix_s, now_unix_s),
            last_modified,
            answer: body.to_vec(),
        };
        if let Some(store) = self.store().await {
            let _ = store.keep_weather(kept).await.map_err(|error| complain("keep", &error));
        }
        Held {
            parsed: *parsed,
            fetched_unix_s: now_unix_s,
            stale_because: None,
        }
    }
}

impl Kept {
    fn held(self, stale_because: Option<FetchError>) -> Held {
        Held {
            parsed: self.parsed,
            fetched_unix_s: self.row.fetched_unix_s,
            stale_because,
        }
    }
}

impl Held {
    /// As a piece of a series.
    pub(super) fn piece(&self, question: &Question) -> Piece {
        Piece {
            span: question.span,
            nature: question.nature,
            fetched_unix_s: self.fetched_unix_s,
            stale: self.stale_because.is_some(),
            parsed: self.parsed.clone(),
        }
    }
}

/// Settled history holds for good, unless hours of it are missing; anything else as the source says, or as is usual for it.
fn expiry(question: &Question, parsed: &Parsed, says_unix_s: Option<i64>, now_unix_s: i64) -> Option<i64> {
    match question.holds_s {
        Some(holds_s) => Some(says_unix_s.unwrap_or(now_unix_s + holds_s)),
        None => {
            let piece = Piece {
                span: question.span,
                nature: question.nature,
                fetched_unix_s: now_unix_s,
                stale: false,
                parsed: parsed.clone(),
            };
            let complete = join(&[piece]).1.iter().all(|stretch| stretch.hours_missing == 0);
            (!complete).then_some(now_unix_s + DAY_S)
        }
    }
}

fn complain(doing: &'static str, error: &StoreError) {
    failed(doing);
    tracing::error!(%error, doing, "the store failed; the request goes on without it");
}

fn failed(doing: &'static str) {
    metrics::counter!("store_failures_total", "doing" => doing).increment(1);
}

fn count(source: &'static str, from: &'static str) {
    metrics::counter!("weather_answers_total", "source" => source, "from" => from).increment(1);
}
