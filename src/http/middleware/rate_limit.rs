//! Requests a minute, for each key or each client address.

use std::num::NonZeroU32;
use std::time::Duration;

use axum::extract::{Request, State};
use axum::http::HeaderValue;
use axum::middleware::Next;
use axum::response::{IntoResponse, Response};
use governor::clock::{Clock, DefaultClock};
use governor::middleware::StateInformationMiddleware;
use governor::{DefaultKeyedRateLimiter, Quota, RateLimiter};

use super::access::VerifiedKey;
use crate::http::app::App;
use crate::http::error::{Problem, ProblemCode};
use crate::http::server::Peer;

/// Who is counted.
#[derive(Debug, Clone, PartialEq, Eq, Hash)]
enum Caller {
    Key(VerifiedKey),
    Address(Peer),
}

/// The limit and the callers' counts.
pub struct RateLimit {
    per_minute: NonZeroU32,
    counts: DefaultKeyedRateLimiter<Caller, StateInformationMiddleware>,
}

impl RateLimit {
    /// `None` for 0, which means no limit.
    pub fn new(per_minute: u32) -> Option<Self> {
        let per_minute = NonZeroU32::new(per_minute)?;
        let counts = RateLimiter::keyed(Quota::per_minute(per_minute)).with_middleware();
        Some(Self { per_minute, counts })
    }

    /// Forgets callers that have been quiet; the table would grow without bound otherwise.
    pub fn forget_quiet(&self) {
        self.counts.retain_recent();
        self.counts.shrink_to_fit();
    }

    fn count(&self, caller: &Caller) -> Result<u32, Duration> {
        match self.counts.check_key(caller) {
            Ok(state) => Ok(state.remaining_burst_capacity()),
            Err(refused) => Err(refused.wait_time_from(DefaultClock::default().now())),
        }
    }
}

/// Counts requests to `/v1` and refuses those above the limit.
pub async fn limit(State(app): State<App>, request: Request, next: Next) -> Response {
    let Some(limit) = app.rate_limit().filter(|_| request.uri().path().starts_with("/v1/")) else {
        return next.run(request).await;
    };
    match limit.count(&caller(&request)) {
        Ok(left) => {
            let mut response = next.run(request).await;
            announce(&mut response, limit.per_minute, left, 0);
            response
        }
        Err(wait) => refusal(limit.per_minute, wait.as_secs() + 1),
    }
}

fn caller(request: &Request) -> Caller {
    let extensions = request.extensions();
    let key = extensions.get::<VerifiedKey>().copied().map(Caller::Key);
    key.unwrap_or_else(|| Caller::Address(extensions.get::<Peer>().copied().unwrap_or_default()))
}

fn refusal(per_minute: NonZeroU32, wait_s: u64) -> Response {
    let detail = format!("more than {per_minute} requests a minute; wait {wait_s} s");
    let mut response = Problem::new(ProblemCode::TooManyRequests, detail)
        .retry_after(wait_s)
        .into_response();
    announce(&mut response, per_minute, 0, wait_s);
    response
}

fn announce(response: &mut Response, per_minute: NonZeroU32, left: u32, wait_s: u64) {
    let fields = [
        ("ratelimit-policy", format!("\"minute\";q={per_minute};w=60")),
        ("ratelimit", format!("\"minute\";r={left};t={wait_s}")),
    ];
    for (name, value) in fields {
        if let Ok(value) = HeaderValue::from_str(&value) {
            response.headers_mut().insert(name, value);
        }
    }
}
