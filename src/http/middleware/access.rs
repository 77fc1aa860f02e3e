//! Keys: `/v1` and `/metrics` ask for one when any is configured.

use axum::extract::{Request, State};
use axum::http::{HeaderMap, header};
use axum::middleware::Next;
use axum::response::{IntoResponse, Response};
use sha2::{Digest, Sha256};
use subtle::{Choice, ConstantTimeEq};

use crate::http::app::App;
use crate::http::error::{Problem, ProblemCode};

/// SHA-256 of the verified key a request came with.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub struct VerifiedKey(pub [u8; 32]);

/// Lets a request pass if its path is open, no key is configured, or its key is known.
pub async fn check_key(State(app): State<App>, mut request: Request, next: Next) -> Response {
    let known = &app.config().access.key_sha256;
    if known.is_empty() || !is_guarded(request.uri().path()) {
        return next.run(request).await;
    }
    match verify(request.headers(), known) {
        Ok(key) => {
            request.extensions_mut().insert(key);
            next.run(request).await
        }
        Err(detail) => Problem::new(ProblemCode::Unauthorized, detail).into_response(),
    }
}

fn is_guarded(path: &str) -> bool {
    path == "/metrics" || path == "/v1" || path.starts_with("/v1/")
}

fn verify(headers: &HeaderMap, known: &[[u8; 32]]) -> Result<VerifiedKey, &'static str> {
    let key = given_key(headers).ok_or("no key was sent; use Authorization: Bearer KEY or X-Api-Key: KEY")?;
    let hash: [u8; 32] = Sha256::digest(key.as_bytes()).into();
    // Every known hash is compared, so that the time taken says nothing about which one fits.
    let fits = known
        .iter()
        .fold(Choice::from(0), |fits, known| fits | known.ct_eq(&hash));
    if bool::from(fits) {
        Ok(VerifiedKey(hash))
    } else {
        Err("the key sent is not known here")
    }
}

fn given_key(headers: &HeaderMap) -> Option<&str> {
    let text = |name: &str| headers.get(name).and_then(|value| value.to_str().ok());
    let bearer = text(header::AUTHORIZATION.as_str()).and_then(|value| {
        let (scheme, key) = value.split_once(' ')?;
        scheme.eq_ignore_ascii_case("bearer").then_some(key.trim())
    });
    bearer.or_else(|| text("x-api-key"))
}
