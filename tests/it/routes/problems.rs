//! Problem documents: the pages behind them, and the framework's own errors.

use axum::body::Body;
use axum::http::Request;
use dipcast::http::problems::KINDS;

use crate::support::{ask, get, service};

#[tokio::test]
async fn every_problem_type_has_a_page() {
    let router = service();
    let list = get(&router, "/problems").await.text();
    for kind in &KINDS {
        let page = get(&router, &format!("/problems/{}", kind.code)).await;
        assert_eq!(page.status, 200, "{}", kind.code);
        assert!(
            page.text().contains("Remedy") && list.contains(kind.code),
            "{}",
            kind.code
        );
    }
    assert_eq!(get(&router, "/problems/no_such").await.code(), "not_found");
}

#[tokio::test]
async fn an_unknown_path_is_a_problem() {
    let answer = get(&service(), "/v1/fluid").await;
    assert_eq!((answer.status.as_u16(), answer.code().as_str()), (404, "not_found"));
    assert_eq!(get(&service(), "/docs/none.js").await.code(), "not_found");
}

#[tokio::test]
async fn a_wrong_method_names_the_right_ones() {
    let request = Request::delete("/livez").body(Body::empty()).unwrap();
    let answer = ask(&service(), request).await;
    assert_eq!(
        (answer.status.as_u16(), answer.code().as_str()),
        (405, "method_not_allowed")
    );
    assert_eq!(answer.header("allow"), "GET,HEAD");
}

#[tokio::test]
async fn a_path_that_is_not_text_is_a_problem() {
    assert_eq!(get(&service(), "/problems/%ff").await.code(), "bad_request");
}

#[tokio::test]
async fn a_panic_is_an_answer_that_says_nothing() {
    use axum::routing;
    let (_, app) = dipcast::http::router::build(crate::support::config());
    async fn broken() -> &'static str {
        panic!("the words of the panic, src/secret.rs")
    }
    let router = dipcast::http::middleware::wrap(axum::Router::new().route("/broken", routing::get(broken)), &app);
    let answer = get(&router, "/broken").await;
    assert_eq!(
        (answer.status.as_u16(), answer.code().as_str()),
        (500, "internal_error")
    );
    assert!(
        !answer.text().contains("words") && !answer.text().contains("src/"),
        "{}",
        answer.text()
    );
}
