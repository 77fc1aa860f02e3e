//! Many at once, clients that go away, runs that take too long.

use std::time::{Duration, Instant};

use serde_json::{Value, json};
use tokio::io::{AsyncReadExt, AsyncWriteExt};
use tokio::net::TcpStream;

use crate::support::{Running, config, predict, request, service_with};

/// A request that takes seconds.
fn long() -> Value {
    let mut asked = request(2_000);
    asked["options"] = json!({"bands": true, "samples": 256, "method": "resolved"});
    asked
}

async fn send(running: &Running, body: &str) -> TcpStream {
    let mut stream = TcpStream::connect(running.address).await.unwrap();
    let head = format!(
        "POST /v1/predictions?format=ndjson HTTP/1.1\r\nHost: x\r\nContent-Type: application/json\r\nContent-Length: {}\r\n\r\n",
        body.len()
    );
    stream.write_all(head.as_bytes()).await.unwrap();
    stream.write_all(body.as_bytes()).await.unwrap();
    stream
}

/// Asks again and again until an answer comes that is not "busy"; a run that was left must free its place.
async fn served_again(running: &Running) -> bool {
    let client = reqwest::Client::builder().no_proxy().build().unwrap();
    let (url, body) = (running.url("/v1/predictions"), request(2).to_string());
    let started = Instant::now();
    while started.elapsed() < Duration::from_secs(30) {
        let asked = client
            .post(&url)
            .header("content-type", "application/json")
            .body(body.clone());
        if asked.send().await.unwrap().status() == 200 {
            return true;
        }
        tokio::task::yield_now().await;
    }
    false
}

#[tokio::test(flavor = "multi_thread", worker_threads = 2)]
async fn twenty_requests_at_once_are_all_answered_on_two_places() {
    let mut config = config();
    config.runs.parallel = 2;
    let router = service_with(config);
    let asked = request(240);
    let all = (0..20).map(|_| predict(&router, &asked));
    let answers = futures::future::join_all(all).await;
    for answer in &answers {
        assert_eq!(answer.status, 200, "{}", answer.text());
        assert_eq!(answer.body, answers[0].body);
    }
}

#[tokio::test(flavor = "multi_thread", worker_threads = 2)]
async fn requests_beyond_the_queue_are_told_to_come_back() {
    let mut config = config();
    config.runs.parallel = 1;
    config.runs.waiting = 1;
    let router = service_with(config);
    let asked = request(2_000);
    let answers = futures::future::join_all((0..20).map(|_| predict(&router, &asked))).await;
    let (good, busy): (Vec<_>, Vec<_>) = answers.iter().partition(|answer| answer.status == 200);
    assert!(
        good.len() >= 2 && !busy.is_empty(),
        "{} good, {} busy",
        good.len(),
        busy.len()
    );
    for answer in busy {
        assert_eq!((answer.status.as_u16(), answer.code().as_str()), (503, "busy"));
        assert!(answer.header("retry-after").parse::<u64>().unwrap() > 0);
    }
}

#[tokio::test(flavor = "multi_thread", worker_threads = 2)]
async fn a_client_that_goes_away_frees_its_place() {
    let mut config = config();
    config.runs.parallel = 1;
    config.runs.waiting = 0;
    let running = Running::start(config).await;
    let stream = send(&running, &long().to_string()).await;
    let busy = reqwest::Client::builder().no_proxy().build().unwrap();
    let started = Instant::now();
    loop {
        let asked = busy
            .post(running.url("/v1/predictions"))
            .header("content-type", "application/json");
        let status = asked.body(request(2).to_string()).send().await.unwrap().status();
        if status == 503 {
            break;
        }
        assert!(
            started.elapsed() < Duration::from_secs(20),
            "the long run never took its place"
        );
    }
    drop(stream);
    assert!(served_again(&running).await, "the run went on without its client");
}

#[tokio::test(flavor = "multi_thread", worker_threads = 2)]
async fn a_client_gone_in_mid_stream_harms_nobody() {
    let mut running = Running::start(config()).await;
    let mut stream = send(&running, &request(20_000).to_string()).await;
    let mut start = vec![0; 2_000];
    stream.read_exact(&mut start).await.unwrap();
    assert!(String::from_utf8_lossy(&start).contains("{\"time\":\"2026-01-01T00:00:00Z\""));
    drop(stream);
    assert!(served_again(&running).await);
    running.stop();
    let stopped = tokio::time::timeout(Duration::from_secs(10), &mut running.served).await;
    stopped
        .expect("nothing of the broken stream is left to wait for")
        .unwrap();
}

#[tokio::test(flavor = "multi_thread", worker_threads = 2)]
async fn a_run_that_takes_too_long_is_stopped_and_says_when_to_come_back() {
    let mut config = config();
    config.server.request_timeout = Duration::from_millis(200);
    config.runs.parallel = 1;
    config.runs.waiting = 0;
    let router = service_with(config);
    let answer = predict(&router, &long()).await;
    assert_eq!(
        (answer.status.as_u16(), answer.code().as_str()),
        (503, "timeout"),
        "{}",
        answer.text()
    );
    assert_ne!(answer.header("retry-after"), "");
    let started = Instant::now();
    while predict(&router, &request(2)).await.status != 200 {
        assert!(
            started.elapsed() < Duration::from_secs(30),
            "the run went on after its time"
        );
    }
}

#[tokio::test(flavor = "multi_thread", worker_threads = 2)]
async fn a_request_in_progress_is_answered_when_the_service_stops() {
    let mut running = Running::start(config()).await;
    let mut stream = TcpStream::connect(running.address).await.unwrap();
    let body = request(5_000).to_string();
    let head = format!(
        "POST /v1/predictions?format=ndjson HTTP/1.1\r\nHost: x\r\nContent-Type: application/json\r\nExpect: 100-continue\r\nContent-Length: {}\r\n\r\n",
        body.len()
    );
    stream.write_all(head.as_bytes()).await.unwrap();
    let mut go_on = vec![0; "HTTP/1.1 100 Continue\r\n\r\n".len()];
    stream.read_exact(&mut go_on).await.unwrap();
    assert!(
        go_on.starts_with(b"HTTP/1.1 100"),
        "the service has the request and waits for its body"
    );
    running.stop();
    stream.write_all(body.as_bytes()).await.unwrap();
    let mut rest = Vec::new();
    stream.read_to_end(&mut rest).await.unwrap();
    let text = String::from_utf8_lossy(&rest);
    let end = &text[text.len().saturating_sub(600)..];
    assert!(end.contains("2026-07-28T07:00:00Z"), "the last hour was sent: {end}");
    (&mut running.served).await.unwrap();
}
