//! Keys, browsers, requests a minute.

use axum::body::Body;
use axum::http::Request;
use dipcast::config::Config;
use sha2::{Digest, Sha256};

use crate::support::{Answer, ask, config, get, service_with};

const KEY: &str = "dck_invented_for_this_test";

fn guarded() -> Config {
    let mut config = config();
    config.access.key_sha256 = vec![[7; 32], Sha256::digest(KEY).into()];
    config
}

async fn ask_with(header: &str, value: &str) -> Answer {
    let request = Request::get("/v1/fluids")
        .header(header, value)
        .body(Body::empty())
        .unwrap();
    ask(&service_with(guarded()), request).await
}

#[tokio::test]
async fn a_known_key_opens_either_way() {
    assert_ne!(ask_with("x-api-key", KEY).await.status, 401);
    assert_ne!(ask_with("authorization", &format!("Bearer {KEY}")).await.status, 401);
    assert_ne!(ask_with("authorization", &format!("bearer {KEY}")).await.status, 401);
}

#[tokio::test]
async fn no_key_a_wrong_key_and_another_scheme_are_refused() {
    for (header, value) in [
        ("x-other", KEY),
        ("x-api-key", "wrong"),
        ("authorization", "Basic eDp5"),
        ("x-api-key", ""),
    ] {
        let answer = ask_with(header, value).await;
        assert_eq!(
            (answer.status.as_u16(), answer.code().as_str()),
            (401, "unauthorized"),
            "{header}"
        );
        assert!(answer.header("www-authenticate").starts_with("Bearer"));
    }
}

#[tokio::test]
async fn health_and_docs_stay_open_and_metrics_do_not() {
    let router = service_with(guarded());
    for path in ["/livez", "/readyz", "/openapi.json", "/docs/", "/problems"] {
        assert_eq!(get(&router, path).await.status, 200, "{path}");
    }
    assert_eq!(get(&router, "/metrics").await.status, 401);
}

#[tokio::test]
async fn a_configured_origin_may_call_and_read_errors() {
    let mut config = guarded();
    config.access.cors_origins = vec!["https://planner.example".to_owned()];
    let router = service_with(config);
    let asked = |origin: &str, method: &str| {
        let request = Request::builder()
            .method(method)
            .uri("/v1/fluids")
            .header("origin", origin);
        request
            .header("access-control-request-method", "GET")
            .body(Body::empty())
            .unwrap()
    };
    let preflight = ask(&router, asked("https://planner.example", "OPTIONS")).await;
    assert_eq!(preflight.status, 200);
    assert_eq!(
        preflight.header("access-control-allow-origin"),
        "https://planner.example"
    );
    let refused = ask(&router, asked("https://planner.example", "GET")).await;
    assert_eq!(
        (refused.status.as_u16(), refused.header("access-control-allow-origin")),
        (401, "https://planner.example")
    );
    let stranger = ask(&router, asked("https://other.example", "GET")).await;
    assert_eq!(stranger.header("access-control-allow-origin"), "");
}

#[tokio::test]
async fn too_many_requests_are_told_when_to_come_back() {
    let mut config = config();
    config.access.requests_per_minute = 2;
    let router = service_with(config);
    let first = get(&router, "/v1/fluids").await;
    assert_eq!(first.header("ratelimit-policy"), "\"minute\";q=2;w=60");
    get(&router, "/v1/fluids").await;
    let third = get(&router, "/v1/fluids").await;
    assert_eq!(
        (third.status.as_u16(), third.code().as_str()),
        (429, "too_many_requests")
    );
    let wait: u64 = third.header("retry-after").parse().unwrap();
    assert!((1..=31).contains(&wait), "{wait}");
    assert_eq!(get(&router, "/livez").await.status, 200);
}
