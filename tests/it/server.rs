//! Connections on real sockets: half-sent heads, the cap, draining.

use std::time::{Duration, Instant};

use tokio::io::{AsyncReadExt, AsyncWriteExt};
use tokio::net::TcpStream;

use crate::support::{Running, config};

const ONE_SECOND: Duration = Duration::from_secs(1);

async fn read_to_end(stream: &mut TcpStream) -> String {
    let mut text = Vec::new();
    let _ = stream.read_to_end(&mut text).await;
    String::from_utf8_lossy(&text).into_owned()
}

fn impatient() -> dipcast::config::Config {
    let mut config = config();
    config.server.first_byte_timeout = ONE_SECOND;
    config.server.header_timeout = ONE_SECOND;
    config.server.drain = ONE_SECOND;
    config
}

#[tokio::test]
async fn a_connection_that_says_nothing_or_half_a_head_is_closed() {
    let running = Running::start(impatient()).await;
    for half in ["", "P", "PRI * HT", "GET /livez HTTP/1.1\r\nHost: x\r\n"] {
        let mut stream = TcpStream::connect(running.address).await.unwrap();
        stream.write_all(half.as_bytes()).await.unwrap();
        let started = Instant::now();
        read_to_end(&mut stream).await;
        assert!(
            started.elapsed() < Duration::from_secs(4),
            "{half:?} held for {:?}",
            started.elapsed()
        );
    }
}

#[tokio::test]
async fn a_second_half_sent_head_is_closed_too() {
    let running = Running::start(impatient()).await;
    let mut stream = TcpStream::connect(running.address).await.unwrap();
    stream
        .write_all(b"GET /livez HTTP/1.1\r\nHost: x\r\n\r\nGET /livez HTTP/1.1\r\nHo")
        .await
        .unwrap();
    let started = Instant::now();
    let text = read_to_end(&mut stream).await;
    assert!(text.starts_with("HTTP/1.1 200"), "{text}");
    assert!(
        started.elapsed() < Duration::from_secs(4),
        "held for {:?}",
        started.elapsed()
    );
}

#[tokio::test]
async fn stopping_does_not_wait_for_idle_or_half_sent_connections() {
    let mut running = Running::start(impatient()).await;
    let mut idle = TcpStream::connect(running.address).await.unwrap();
    idle.write_all(b"GET /livez HTTP/1.1\r\nHost: x\r\n\r\n").await.unwrap();
    let mut first = [0; 12];
    idle.read_exact(&mut first).await.unwrap();
    let mut half = TcpStream::connect(running.address).await.unwrap();
    half.write_all(b"POST /v1/predictions HTTP/1.1\r\nHost: x\r\nContent-Length: 100\r\n")
        .await
        .unwrap();
    running.stop();
    let stopped = tokio::time::timeout(Duration::from_secs(5), &mut running.served).await;
    stopped.expect("drained in time").unwrap();
    assert!(TcpStream::connect(running.address).await.is_err(), "still listening");
}

#[tokio::test]
async fn connections_beyond_the_cap_wait_for_a_place() {
    let mut config = config();
    config.server.max_connections = 1;
    let running = Running::start(config).await;
    let mut first = TcpStream::connect(running.address).await.unwrap();
    first
        .write_all(b"GET /livez HTTP/1.1\r\nHost: x\r\n\r\n")
        .await
        .unwrap();
    let mut head = [0; 12];
    first.read_exact(&mut head).await.unwrap();
    let mut second = TcpStream::connect(running.address).await.unwrap();
    second
        .write_all(b"GET /livez HTTP/1.1\r\nHost: x\r\nConnection: close\r\n\r\n")
        .await
        .unwrap();
    let mut byte = [0; 1];
    let early = tokio::time::timeout(Duration::from_millis(300), second.read(&mut byte)).await;
    assert!(early.is_err(), "served although the only place was taken");
    drop(first);
    assert!(read_to_end(&mut second).await.starts_with("HTTP/1.1 200"));
}

#[tokio::test]
async fn http_2_works_without_an_upgrade() {
    let running = Running::start(config()).await;
    let client = reqwest::Client::builder()
        .http2_prior_knowledge()
        .no_proxy()
        .build()
        .unwrap();
    let answer = client.get(running.url("/livez")).send().await.unwrap();
    assert_eq!(answer.version(), reqwest::Version::HTTP_2);
    assert_eq!(answer.status(), 200);
}
