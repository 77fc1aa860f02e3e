//! What services and networks do to an answer: each case ends in a right series or in a clear problem, and in no more
//! questions than allowed.

use serde_json::{Value, json};

use super::asking::{config, fetched, june, order, weather};
use super::bodies::{JUNE, NOW, celsius, met_norway, open_meteo};
use super::stand_in::{Reply, StandIn};
use dipcast::service::SourceTrouble;
use dipcast::service::records::FetchedWeather;

/// Asks a source for two days of June, or from now on, with the stand-in replying in turn; what came and how many questions
/// it saw.
async fn asked(source: &str, replies: Vec<Reply>) -> (Result<FetchedWeather, SourceTrouble>, usize) {
    let stand_in = StandIn::replying(replies).await;
    let wanted = match source {
        "met_norway" => order(source, NOW - 1200, 48),
        source => june(source),
    };
    let came = fetched(&weather(&config(&stand_in.url)), wanted).await;
    (came, stand_in.seen().len())
}

/// The series, after so many questions.
pub async fn series(source: &str, replies: Vec<Reply>, questions: usize) -> FetchedWeather {
    let (came, seen) = asked(source, replies).await;
    assert_eq!(seen, questions, "{came:?}");
    came.unwrap()
}

/// The problem, which must hold these words, after so many questions.
pub async fn problem(source: &str, replies: Vec<Reply>, questions: usize, words: &str) -> SourceTrouble {
    let (came, seen) = asked(source, replies).await;
    let trouble = came.expect_err(words);
    assert_eq!(seen, questions, "{trouble:?}");
    assert!(
        trouble.detail.contains(words),
        "expected {words:?} in {:?}",
        trouble.detail
    );
    assert!(!trouble.detail.contains("http"), "no addresses: {}", trouble.detail);
    trouble
}

/// A good answer of Open-Meteo for the two days, changed at a JSON pointer.
pub fn changed(pointer: &str, value: Value) -> Reply {
    let mut body = open_meteo(JUNE, 48);
    *body.pointer_mut(pointer).unwrap_or_else(|| panic!("{pointer}")) = value;
    Reply::json(body.to_string())
}

pub fn good() -> Reply {
    Reply::json(open_meteo(JUNE, 48).to_string())
}

pub fn near(found: f64, expected: f64) {
    assert!(
        (found - expected).abs() < 1e-6 * expected.abs().max(1.0),
        "{found} is not {expected}"
    );
}

#[tokio::test]
async fn an_error_in_the_middle_of_a_good_status_is_asked_again() {
    let text = open_meteo(JUNE, 48).to_string();
    let torn = Reply::json(format!(
        "{}Unexpected error while streaming data: timeoutReached",
        &text[..text.len() / 2]
    ));
    series("open_meteo", vec![torn.clone(), good()], 2).await;
    let trouble = problem("open_meteo", vec![torn], 3, "garbled").await;
    assert!(trouble.retry_after_s.is_some());
    let told = Reply::json("{\"error\":true,\"reason\":\"Data is being moved\"}");
    problem("open_meteo", vec![told.clone()], 3, "Data is being moved").await;
    series("open_meteo", vec![told, good()], 2).await;
}

#[tokio::test]
async fn a_cut_empty_or_torn_body_is_asked_again() {
    let body = open_meteo(JUNE, 48).to_string().into_bytes();
    series("open_meteo", vec![Reply::Cut(body.clone(), body.len() - 40), good()], 2).await;
    problem("open_meteo", vec![Reply::Cut(body, 100)], 3, "broke off").await;
    problem("open_meteo", vec![Reply::json("")], 3, "garbled").await;
}

#[tokio::test]
async fn silence_and_slow_bodies_end_in_time() {
    let slow = Reply::Stalled(open_meteo(JUNE, 48).to_string().into_bytes());
    let trouble = problem("open_meteo", vec![slow.clone()], 3, "took longer than 0.4").await;
    assert!(trouble.retry_after_s.is_some());
    problem("open_meteo", vec![Reply::Silent], 3, "took longer").await;
    series("open_meteo", vec![slow, Reply::Silent, good()], 3).await;
}

#[tokio::test]
async fn a_reset_connection_is_asked_again_and_nobody_there_is_told() {
    series("open_meteo", vec![Reply::Reset, good()], 2).await;
    problem("open_meteo", vec![Reply::Reset], 3, "could not be reached").await;
    // Port 9 of this machine: nobody listens.
    let nobody = weather(&config("http://127.0.0.1:9/weather"));
    let trouble = fetched(&nobody, june("open_meteo")).await.unwrap_err();
    assert!(trouble.detail.contains("could not be reached"), "{trouble}");
}

/// The service's own words for its limits (remembered): only the last passes within the deadline.
#[tokio::test]
async fn too_many_in_four_wordings() {
    let refused = |reason: &str| Reply::status(429, &json!({"error": true, "reason": reason}).to_string());
    let waits = [
        (
            "Minutely API request limit exceeded. Please try again in one minute.",
            60,
        ),
        // Ten twenty: forty minutes of the hour are left, and 13 h 40 min of the day.
        (
            "Hourly API request limit exceeded. Please try again in the next hour.",
            2400,
        ),
        ("Daily API request limit exceeded. Please try again tomorrow.", 49_200),
    ];
    for (words, wait_s) in waits {
        let trouble = problem("open_meteo", vec![refused(words), good()], 1, "asked too much").await;
        assert_eq!(trouble.retry_after_s, Some(wait_s), "{words}");
    }
    series("open_meteo", vec![refused("Too many concurrent requests"), good()], 2).await;
    let header = refused("Slow down").with("Retry-After", "7");
    assert_eq!(
        problem("open_meteo", vec![header], 1, "Slow down").await.retry_after_s,
        Some(7)
    );
}

#[tokio::test]
async fn out_of_order_with_and_without_a_wish() {
    let down = Reply::status(503, "upstream sleeps");
    series("open_meteo", vec![down.clone(), down.clone(), good()], 3).await;
    problem("open_meteo", vec![down.clone()], 3, "status 503").await;
    let later = problem(
        "open_meteo",
        vec![down.clone().with("Retry-After", "3600"), good()],
        1,
        "status 503",
    )
    .await;
    assert_eq!(later.retry_after_s, Some(3600));
    let started = std::time::Instant::now();
    series("open_meteo", vec![down.with("Retry-After", "1"), good()], 2).await;
    assert!(started.elapsed().as_millis() >= 1000, "the wish was not honoured");
    series("open_meteo", vec![Reply::status(500, ""), good()], 2).await;
}

#[tokio::test]
async fn not_modified_without_an_earlier_answer_is_no_answer() {
    problem("open_meteo", vec![Reply::status(304, "")], 1, "status 304").await;
}

#[tokio::test]
async fn a_deprecated_answer_is_still_an_answer() {
    let body = met_norway(NOW - 1200, 60, 0).to_string();
    let came = series(
        "met_norway",
        vec![Reply::Whole(
            203,
            vec![("Content-Type", "application/geo+json".into())],
            body.into(),
        )],
        1,
    );
    near(came.await.readings.air_temp_k[0], celsius(0) + 273.15);
}

#[tokio::test]
async fn forbidden_and_refused_are_told_once() {
    let forbidden = problem("met_norway", vec![Reply::status(403, "<html>")], 1, "weather.contact").await;
    assert_eq!(forbidden.retry_after_s, None);
    let page = Reply::Whole(
        400,
        vec![("Content-Type", "text/html".into())],
        b"<html><b>secret page</b></html>".to_vec(),
    );
    let trouble = problem("met_norway", vec![page], 1, "status 400").await;
    assert!(!trouble.detail.contains("secret page"), "{trouble}");
    let told = Reply::status(
        400,
        "{\"error\":true,\"reason\":\"Parameter 'start_date' is out of allowed range\"}",
    );
    problem("open_meteo", vec![told], 1, "out of allowed range").await;
}

#[tokio::test]
async fn a_redirect_is_not_followed() {
    let elsewhere = StandIn::replying(vec![good()]).await;
    for status in [301, 302, 307, 308] {
        let away = Reply::status(status, "").with("Location", &elsewhere.url);
        problem("open_meteo", vec![away], 1, "led on to another address").await;
    }
    assert!(elsewhere.seen().is_empty());
}

#[tokio::test]
async fn a_page_with_a_good_status_is_no_answer() {
    let page = good().with("Content-Type", "text/html; charset=utf-8");
    problem(
        "open_meteo",
        vec![page],
        1,
        "answered text/html where JSON was expected",
    )
    .await;
    series(
        "open_meteo",
        vec![good().with("Content-Type", "application/geo+json; charset=utf-8")],
        1,
    )
    .await;
}

#[tokio::test]
async fn fifty_megabytes_are_not_read() {
    let bytes = 50 << 20;
    problem("open_meteo", vec![Reply::Flood(bytes)], 1, "larger than").await;
    problem(
        "open_meteo",
        vec![Reply::Whole(
            200,
            vec![("Content-Type", "application/json".into())],
            vec![b' '; bytes],
        )],
        1,
        "larger than",
    )
    .await;
    let mut packed = flate2::write::GzEncoder::new(Vec::new(), flate2::Compression::best());
    std::io::Write::write_all(&mut packed, &vec![b' '; bytes]).unwrap();
    let packed = packed.finish().unwrap();
    assert!(packed.len() < 100_000);
    let bomb =
        Reply::Whole(200, vec![("Content-Type", "application/json".into())], packed).with("Content-Encoding", "gzip");
    problem("open_meteo", vec![bomb], 1, "larger than").await;
}
