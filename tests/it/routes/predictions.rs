//! `POST /v1/predictions`: what a good request gets.

use serde_json::{Value, json};

use crate::support::{Answer, ask, example, form, get, post_form, post_json, predict, request, service};

fn good(answer: &Answer) -> Value {
    assert_eq!(answer.status, 200, "{}", answer.text());
    answer.json()
}

fn sum(column: &Value) -> f64 {
    column
        .as_array()
        .unwrap()
        .iter()
        .map(|value| value.as_f64().unwrap())
        .sum()
}

fn number(value: &Value) -> f64 {
    value.as_f64().unwrap_or_else(|| panic!("no number: {value}"))
}

#[tokio::test]
async fn every_request_of_the_examples_is_answered() {
    let router = service();
    for name in ["own-device.json", "shortest.json"] {
        good(&post_json(&router, "/v1/predictions", example(name)).await);
    }
}

#[tokio::test]
async fn the_answer_has_the_agreed_names() {
    let answer = good(&post_json(&service(), "/v1/predictions", example("own-device.json")).await);
    let names = [
        "/summary/from",
        "/summary/to",
        "/summary/hours",
        "/summary/cycles",
        "/summary/cycles_open_hours",
        "/summary/open_hours",
        "/summary/needs_person_hours",
        "/summary/water_g/total",
        "/summary/water_g/head",
        "/summary/water_g/cup",
        "/summary/visits",
        "/summary/bands/cycles/low",
        "/summary/bands/stall_hours/high",
        "/summary/bands/water_g/low",
        "/stall_spells",
        "/visits",
        "/days/0/bands/cycles/low",
        "/hours/time/0",
        "/hours/cycles/0",
        "/hours/stall_fraction/0",
        "/hours/state_fractions/running/0",
        "/hours/water_head_g/0",
        "/hours/water_cup_g/0",
        "/hours/cup_drop_mm/0",
        "/hours/body_temp_c/0",
        "/hours/head_temp_c/0",
        "/device/derived/tip_volume_ml",
        "/device/derived/lift_at_tip_k",
        "/device/stall_humidity/2/relative_humidity_pct",
        "/weather/readings",
        "/assumptions/0/effect",
        "/cautions/0/severity",
        "/model/version",
        "/model/method",
        "/model/seed",
    ];
    for name in names {
        assert!(answer.pointer(name).is_some(), "{name} is missing");
    }
    for cause in [
        "total",
        "open",
        "humid",
        "dry",
        "frozen",
        "warm_head",
        "overheated",
        "unknown",
    ] {
        assert!(answer["summary"]["stall_hours"][cause].is_number(), "{cause}");
    }
    assert!(answer.get("months").is_none(), "months were not asked for");
}

#[tokio::test]
async fn hours_days_and_summary_tell_the_same() {
    let answer = good(&predict(&service(), &request(100)).await);
    let (summary, hours) = (&answer["summary"], &answer["hours"]);
    assert_eq!(summary["from"], "2026-01-01T00:00:00Z");
    assert_eq!(
        summary["to"], "2026-01-05T04:00:00Z",
        "to is exclusive: N readings make N hours"
    );
    assert_eq!(hours["time"].as_array().unwrap().len(), 100);
    assert!((sum(&hours["cycles"]) - number(&summary["cycles"])).abs() < 1e-3);
    let water = sum(&hours["water_head_g"]) + sum(&hours["water_cup_g"]);
    assert!((water - number(&summary["water_g"]["total"])).abs() < 1e-3);
    let days: f64 = answer["days"]
        .as_array()
        .unwrap()
        .iter()
        .map(|day| number(&day["cycles"]))
        .sum();
    assert!((days - number(&summary["cycles"])).abs() < 1e-3);
    // In room air 60-280 cycles an hour: common practice, no source.
    assert!(
        (60.0..280.0).contains(&(number(&summary["cycles"]) / 100.0)),
        "{}",
        summary["cycles"]
    );
}

#[tokio::test]
async fn the_same_request_and_seed_give_the_same_bytes() {
    let router = service();
    let mut asked = request(48);
    asked["options"] = json!({"samples": 8, "seed": 7});
    let (first, second) = (predict(&router, &asked).await, predict(&router, &asked).await);
    assert_eq!(first.body, second.body);
    asked["options"]["seed"] = json!(8);
    assert_ne!(
        first.json()["summary"]["bands"],
        good(&predict(&router, &asked).await)["summary"]["bands"]
    );
}

#[tokio::test]
async fn the_end_of_one_run_is_the_start_of_the_next() {
    let router = service();
    let whole = good(&predict(&router, &request(48)).await);
    let mut first = request(24);
    let mut second = request(24);
    first["options"]["include"] = json!(["hours"]);
    second["weather"]["start"] = json!("2026-01-02T00:00:00Z");
    second["options"]["initial_state"] = good(&predict(&router, &first).await)["end_state"].clone();
    let second = good(&predict(&router, &second).await);
    let joined = number(&second["hours"]["cup_drop_mm"][23]);
    let alone = number(&whole["hours"]["cup_drop_mm"][47]);
    assert!((joined / alone - 1.0).abs() < 0.01, "{joined} against {alone}");
}

#[tokio::test]
async fn the_demo_files_are_answered_as_a_form_in_any_order() {
    let router = service();
    let mut asked: Value = serde_json::from_str(&example("demo-request.json")).unwrap();
    asked["options"]["bands"] = json!(false);
    let (asked, weather) = (asked.to_string(), example("demo-weather.csv"));
    let parts = [("request", asked.as_bytes()), ("weather", weather.as_bytes())];
    let answer = good(&post_form(&router, "/v1/predictions", &parts).await);
    assert_eq!(answer["weather"]["hours"], 8760);
    assert_eq!(answer["weather"]["source"], "upload");
    let months = answer["months"].as_array().unwrap().len();
    assert_eq!(months, 12, "the demo cuts its months in UTC, as its weather is");
    let turned = good(&post_form(&router, "/v1/predictions", &[parts[1], parts[0]]).await);
    assert_eq!(turned["summary"], answer["summary"]);
}

#[tokio::test]
async fn a_gzipped_file_gives_the_same_as_a_plain_one() {
    use std::io::Write;
    let weather: String = example("demo-weather.csv")
        .lines()
        .take(49)
        .map(|line| format!("{line}\n"))
        .collect();
    let mut zipped = flate2::write::GzEncoder::new(Vec::new(), flate2::Compression::default());
    zipped.write_all(weather.as_bytes()).unwrap();
    let router = service();
    let plain = good(&crate::support::predict_file(&router, weather.as_bytes()).await);
    assert_eq!(
        plain,
        good(&crate::support::predict_file(&router, &zipped.finish().unwrap()).await)
    );
    assert_eq!(plain["weather"]["readings"], 48);
}

#[tokio::test]
async fn hours_come_as_csv_and_as_lines() {
    let router = service();
    let asked = request(600).to_string();
    let csv = post_json(&router, "/v1/predictions?format=csv", asked.clone()).await;
    assert_eq!(csv.header("content-type"), "text/csv; charset=utf-8; header=present");
    let mut rows = csv::Reader::from_reader(csv.body.as_slice());
    assert_eq!(rows.headers().unwrap().get(0), Some("time"));
    assert_eq!(rows.records().map(Result::unwrap).count(), 600);
    let request = axum::http::Request::post("/v1/predictions")
        .header("content-type", "application/json")
        .header("accept", "application/x-ndjson")
        .body(asked.into());
    let lines = ask(&router, request.unwrap()).await;
    assert_eq!(lines.header("content-type"), "application/x-ndjson");
    let rows: Vec<Value> = lines
        .text()
        .lines()
        .map(|line| serde_json::from_str(line).unwrap())
        .collect();
    assert_eq!(
        (rows.len(), rows[599]["time"].as_str()),
        (600, Some("2026-01-25T23:00:00Z"))
    );
}

#[tokio::test]
async fn one_cycle_can_be_seen_close_up() {
    let mut asked = request(6);
    asked["options"]["include"] = json!(["cycle_trace"]);
    let answer = good(&predict(&service(), &asked).await);
    let points = answer["cycle_trace"]["points"].as_array().unwrap();
    assert!(points.len() > 3 && answer.get("hours").is_none());
    assert!(
        points
            .windows(2)
            .all(|pair| number(&pair[0]["time_s"]) < number(&pair[1]["time_s"]))
    );
}

#[tokio::test]
async fn a_lamp_shines_only_while_it_is_lit() {
    let router = service();
    let document = get(&router, "/v1/example-devices").await.json();
    let mut device = document["items"][0]["device"].clone();
    device["lamp"] = json!({"on": "body", "absorbed_w": 1.0, "lit": {"weekly": {"thu": [["06:00", "12:00"]]}}});
    let mut asked = request(24);
    asked.as_object_mut().unwrap().remove("device_example");
    asked["device"] = device.clone();
    let answer = good(&predict(&router, &asked).await);
    let cycles = &answer["hours"]["cycles"];
    // 2026-01-01 is a Thursday.
    assert!(number(&cycles[9]) > 1.3 * number(&cycles[3]), "{cycles}");
    assert_eq!(answer["device"]["definition"]["lamp"], device["lamp"]);
}

#[tokio::test]
async fn a_device_without_a_cup_is_wetted_by_hand() {
    let router = service();
    let document = get(&router, "/v1/example-devices").await.json();
    let mut asked = request(6);
    asked.as_object_mut().unwrap().remove("device_example");
    asked["device"] = document["items"][0]["device"].clone();
    asked["device"].as_object_mut().unwrap().remove("cup");
    asked["options"]["attendance"] = json!({"policy": "never"});
    let answer = good(&predict(&router, &asked).await);
    assert_eq!(answer["summary"]["water_g"]["cup"], 0.0);
    assert!(
        number(&answer["summary"]["stall_hours"]["dry"]) > 2.0,
        "the felt lasts an hour or two"
    );
}

#[tokio::test]
async fn a_head_request_and_a_get_are_told_the_method() {
    let answer = get(&service(), "/v1/predictions").await;
    assert_eq!((answer.status.as_u16(), answer.header("allow")), (405, "POST"));
}

#[tokio::test]
async fn an_unread_body_does_not_hide_what_else_is_wrong() {
    let (content_type, _) = form(&[]);
    let router = service();
    let request = axum::http::Request::post("/v1/predictions?format=xml").header("content-type", content_type);
    assert_eq!(ask(&router, request.body("".into()).unwrap()).await.status, 406);
    let request = axum::http::Request::post("/v1/predictions").header("content-type", "text/plain");
    let refused = ask(&router, request.body("x".into()).unwrap()).await;
    assert_eq!(
        (refused.status.as_u16(), refused.code().as_str()),
        (415, "unsupported_media_type")
    );
    let none = ask(
        &router,
        axum::http::Request::post("/v1/predictions").body("{}".into()).unwrap(),
    )
    .await;
    assert_eq!(none.status, 415);
}
