//! `/livez`, `/readyz`, `/metrics`, `/openapi.json`, `/docs`, `/`, and what holds for every answer.

use axum::body::Body;
use axum::http::Request;
use dipcast::http::router;

use crate::support::{ask, config, get, service};

#[tokio::test]
async fn liveness_and_readiness_answer() {
    let router = service();
    assert_eq!(get(&router, "/livez").await.json()["status"], "ok");
    assert_eq!(get(&router, "/readyz").await.json()["status"], "ready");
}

#[tokio::test]
async fn after_the_stop_signal_it_is_alive_but_not_ready() {
    let (router, app) = router::build(config());
    app.stop();
    assert_eq!(get(&router, "/livez").await.status, 200);
    let refused = get(&router, "/readyz").await;
    assert_eq!((refused.status.as_u16(), refused.code().as_str()), (503, "not_ready"));
    assert_ne!(refused.header("retry-after"), "");
}

#[tokio::test]
async fn metrics_count_by_route_never_by_path() {
    let router = service();
    get(&router, "/problems/busy").await;
    get(&router, "/some/invented/path").await;
    let text = get(&router, "/metrics").await.text();
    assert!(text.contains("route=\"/problems/{code}\""), "{text}");
    assert!(
        text.contains("route=\"unmatched\"") && !text.contains("invented"),
        "{text}"
    );
}

#[tokio::test]
async fn a_request_id_is_given_or_kept() {
    let router = service();
    let given = Request::get("/livez")
        .header("x-request-id", "order-7")
        .body(Body::empty())
        .unwrap();
    assert_eq!(ask(&router, given).await.header("x-request-id"), "order-7");
    assert_eq!(get(&router, "/livez").await.header("x-request-id").len(), 36);
}

#[tokio::test]
async fn the_docs_page_needs_no_other_host() {
    let router = service();
    let start = get(&router, "/").await;
    assert_eq!((start.status.as_u16(), start.header("location")), (307, "/docs/"));
    let page = get(&router, "/docs/").await;
    assert_eq!(page.status, 200);
    let starter = get(&router, "/docs/swagger-initializer.js").await.text();
    assert!(
        starter.contains("/openapi.json") && starter.contains("\"validatorUrl\": \"none\""),
        "{starter}"
    );
    for text in [page.text(), starter] {
        assert!(!text.contains("http://") && !text.contains("https://"), "{text}");
    }
    let assets: Vec<String> = page
        .text()
        .split(['"', '\''])
        .filter(|part| part.ends_with(".js") || part.ends_with(".css"))
        .map(str::to_owned)
        .collect();
    assert!(assets.len() >= 3, "{assets:?}");
    for asset in assets {
        assert_eq!(
            get(&router, &format!("/docs/{}", asset.trim_start_matches("./")))
                .await
                .status,
            200,
            "{asset}"
        );
    }
}

#[tokio::test]
async fn the_description_is_served_as_written() {
    let answer = get(&service(), "/openapi.json").await;
    assert_eq!(answer.header("content-type"), "application/json");
    assert_eq!(
        answer.json()["openapi"]
            .as_str()
            .unwrap()
            .split('.')
            .take(2)
            .collect::<Vec<_>>(),
        ["3", "1"]
    );
}
