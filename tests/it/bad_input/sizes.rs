//! Too much of everything, against the real program, whose memory is watched.

use std::io::{Read, Write};
use std::net::TcpStream;

use serde_json::{Value, json};

use crate::program::Program;
use crate::support::{form, predict, request, service, upload};

fn answer_of(stream: &mut TcpStream) -> String {
    let mut text = Vec::new();
    let _ = stream.read_to_end(&mut text);
    String::from_utf8_lossy(&text).into_owned()
}

const TWO_GB: u64 = 2 << 30;

#[test]
fn two_gigabytes_are_refused_by_their_stated_length() {
    let program = Program::start(&[]);
    let mut stream = program.connect();
    write!(
        stream,
        "POST /v1/predictions HTTP/1.1\r\nHost: x\r\nConnection: close\r\nContent-Type: application/json\r\nContent-Length: {TWO_GB}\r\n\r\n"
    )
    .unwrap();
    let text = answer_of(&mut stream);
    assert!(
        text.starts_with("HTTP/1.1 413") && text.contains("/problems/body_too_large"),
        "{text}"
    );
    assert!(program.peak_mib() < 100, "{} MiB", program.peak_mib());
}

#[test]
fn two_gigabytes_in_pieces_are_cut_at_the_limit() {
    let program = Program::start(&[]);
    let mut stream = program.connect();
    let head = "POST /v1/predictions HTTP/1.1\r\nHost: x\r\nConnection: close\r\nContent-Type: application/json\r\nTransfer-Encoding: chunked\r\n\r\n";
    stream.write_all(head.as_bytes()).unwrap();
    let piece = [
        format!("{:x}\r\n", 1 << 20).into_bytes(),
        vec![b' '; 1 << 20],
        b"\r\n".to_vec(),
    ]
    .concat();
    let mut sent = 0;
    while sent < TWO_GB && stream.write_all(&piece).is_ok() {
        sent += 1 << 20;
    }
    assert!(sent < 256 << 20, "{sent} bytes were taken");
    assert!(program.peak_mib() < 200, "{} MiB", program.peak_mib());
}

#[test]
fn a_zip_bomb_is_refused_without_being_unpacked() {
    let mut zipped = flate2::write::GzEncoder::new(Vec::new(), flate2::Compression::fast());
    let header = b"time,air_temperature_c,relative_humidity_pct\n";
    zipped.write_all(header).unwrap();
    let zeros = vec![b'0'; 1 << 20];
    (0..400).for_each(|_| zipped.write_all(&zeros).unwrap());
    let bomb = zipped.finish().unwrap();
    let (content_type, body) = form(&[
        ("request", upload(Value::Null).to_string().as_bytes()),
        ("weather", bomb.as_slice()),
    ]);
    let program = Program::start(&[]);
    let mut stream = program.connect();
    let length = body.len();
    write!(
        stream,
        "POST /v1/predictions HTTP/1.1\r\nHost: x\r\nConnection: close\r\nContent-Type: {content_type}\r\nContent-Length: {length}\r\n\r\n"
    )
    .unwrap();
    stream.write_all(&body).unwrap();
    let text = answer_of(&mut stream);
    assert!(
        text.starts_with("HTTP/1.1 413") && text.contains("/problems/body_too_large"),
        "{text}"
    );
    assert!(program.peak_mib() < 150, "{} MiB", program.peak_mib());
}

#[test]
fn values_without_end_cost_no_memory_without_end() {
    let program = Program::start(&[]);
    let values = "1,".repeat(15 << 20);
    let body = format!("{{\"weather\":{{\"kind\":\"inline\",\"air_temperature_c\":[{values}1]}}}}");
    let head = format!(
        "POST /v1/predictions HTTP/1.1\r\nHost: x\r\nConnection: close\r\nContent-Type: application/json\r\nContent-Length: {}\r\n\r\n",
        body.len()
    );
    let answers: Vec<String> = std::thread::scope(|scope| {
        let send = || {
            let mut stream = program.connect();
            stream.write_all(head.as_bytes()).unwrap();
            stream.write_all(body.as_bytes()).unwrap();
            answer_of(&mut stream)
        };
        let running: Vec<_> = (0..6).map(|_| scope.spawn(send)).collect();
        running.into_iter().map(|one| one.join().unwrap()).collect()
    });
    for text in answers {
        assert!(
            text.starts_with("HTTP/1.1 400") && text.contains("more than 4000000 values"),
            "{text}"
        );
    }
    // Six bodies of 30 MiB; their values without a limit would be 6 x 480 MiB.
    assert!(program.peak_mib() < 900, "{} MiB", program.peak_mib());
}

#[tokio::test]
async fn more_hours_than_are_answered_at_once_name_the_limit() {
    let router = service();
    let averaged = request(300_000);
    let mut resolved = request(2_209);
    resolved["options"]["method"] = json!("resolved");
    let mut bands = request(25_001);
    bands["options"] = json!({"bands": true, "samples": 256});
    for (asked, limit, pointer) in [
        (averaged, "200000", "/weather"),
        (resolved, "2208", "/weather"),
        (bands, "6400000", "/options/samples"),
    ] {
        let answer = predict(&router, &asked).await;
        assert_eq!(
            (answer.status.as_u16(), answer.code().as_str()),
            (422, "too_many_hours"),
            "{}",
            answer.text()
        );
        let problem = answer.problem();
        assert!(problem["detail"].as_str().unwrap().contains(limit), "{problem}");
        assert_eq!(problem["errors"][0]["pointer"], pointer);
    }
}

#[tokio::test]
async fn a_body_without_room_is_told_to_come_back() {
    let mut config = crate::support::config();
    config.limits.body_bytes = 4096;
    config.limits.bodies_bytes = 4096;
    let router = crate::support::service_with(config);
    // Pieces of a byte take a KiB each.
    let asked = upload(Value::Null).to_string();
    for (content_type, body) in [
        form(&[("request", asked.as_bytes())]),
        ("application/json".to_owned(), asked.clone().into_bytes()),
    ] {
        let pieces = body
            .chunks(1)
            .map(|piece| Ok::<_, std::io::Error>(piece.to_vec()))
            .collect::<Vec<_>>();
        let request = axum::http::Request::post("/v1/predictions").header("content-type", content_type);
        let request = request.body(axum::body::Body::from_stream(futures::stream::iter(pieces)));
        let answer = crate::support::ask(&router, request.unwrap()).await;
        assert_eq!(
            (answer.status.as_u16(), answer.code().as_str()),
            (503, "busy"),
            "{}",
            answer.text()
        );
        assert_eq!(answer.header("retry-after"), "5");
    }
}

#[tokio::test]
async fn a_body_just_above_a_small_limit_is_refused_alone_and_in_a_form() {
    let mut config = crate::support::config();
    config.limits.body_bytes = 1024;
    let router = crate::support::service_with(config);
    let alone = predict(&router, &request(100)).await;
    assert_eq!((alone.status.as_u16(), alone.code().as_str()), (413, "body_too_large"));
    let file = vec![b'x'; 2000];
    let asked = upload(Value::Null).to_string();
    let parts = [("request", asked.as_bytes()), ("weather", file.as_slice())];
    let (content_type, body) = form(&parts);
    let stated = axum::http::Request::post("/v1/predictions")
        .header("content-type", &content_type)
        .header("content-length", body.len())
        .body(axum::body::Body::from(body.clone()));
    assert_eq!(
        crate::support::ask(&router, stated.unwrap()).await.code(),
        "body_too_large"
    );
    let pieces = body
        .chunks(100)
        .map(|piece| Ok::<_, std::io::Error>(piece.to_vec()))
        .collect::<Vec<_>>();
    let unstated = axum::http::Request::post("/v1/predictions").header("content-type", &content_type);
    let unstated = unstated.body(axum::body::Body::from_stream(futures::stream::iter(pieces)));
    assert_eq!(
        crate::support::ask(&router, unstated.unwrap()).await.code(),
        "body_too_large"
    );
}
