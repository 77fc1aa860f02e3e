//! How fast a whole request for a site-year is, through the real router without a socket, beside the model alone.

#![allow(missing_docs, reason = "the benchmark macros write public functions of their own")]

#[allow(dead_code, reason = "each benchmark uses its own part of the scene")]
mod scene;

use axum::Router;
use axum::body::Body;
use axum::http::{Request, StatusCode};
use criterion::{Criterion, criterion_group, criterion_main};
use dipcast::config::Config;
use dipcast::http::router;
use dipcast::model::cycle::Method;
use dipcast::model::prediction::predict;
use http_body_util::BodyExt;
use tokio::runtime::Runtime;
use tower::ServiceExt;

const BOUNDARY: &str = "----------a-line-between-parts";

/// The invented year as the two parts of a form.
fn upload(options: &str) -> String {
    let request = format!(r#"{{"device_example":"shelf-180","weather":{{"kind":"upload"}},"options":{options}}}"#);
    let part = |name: &str, kind: &str, text: &str| {
        format!(
            "--{BOUNDARY}\r\ncontent-disposition: form-data; name=\"{name}\"; filename=\"{name}\"\r\ncontent-type: {kind}\r\n\r\n{text}\r\n"
        )
    };
    part("request", "application/json", &request)
        + &part("weather", "text/csv", &scene::csv())
        + &format!("--{BOUNDARY}--\r\n")
}

/// Sends one request and takes the whole answer.
async fn answer(router: Router, body: String) -> usize {
    let request = Request::post("/v1/predictions")
        .header("content-type", format!("multipart/form-data; boundary={BOUNDARY}"))
        .body(Body::from(body))
        .expect("a well-formed request");
    let response = router.oneshot(request).await.expect("the router always answers");
    assert_eq!(response.status(), StatusCode::OK);
    response
        .into_body()
        .collect()
        .await
        .expect("a whole body")
        .to_bytes()
        .len()
}

fn site_year(c: &mut Criterion) {
    let runtime = Runtime::new().expect("threads to run on");
    let (router, _) = router::build(Config::defaults().expect("the defaults are in order"));
    let (device, year) = (scene::device(), scene::placed_year());
    let alone = scene::request(&device, &year, Method::Averaged, false);
    let mut group = c.benchmark_group("request for a site-year, without bands");
    group.sample_size(10);
    group.bench_function("the model alone", |b| {
        b.iter(|| predict(&alone, &|_, _| true).expect("the year runs"))
    });
    for (name, include) in [
        ("summary and months", "[\"months\"]"),
        ("with days and hours", "[\"hours\",\"days\",\"months\"]"),
    ] {
        let body = upload(&format!(r#"{{"bands":false,"include":{include}}}"#));
        group.bench_function(name, |b| {
            b.iter(|| runtime.block_on(answer(router.clone(), body.clone())))
        });
    }
    group.finish();
}

criterion_group!(benches, site_year);
criterion_main!(benches);
