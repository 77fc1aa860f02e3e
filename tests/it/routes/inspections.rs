//! `POST /v1/weather/inspections`.

use axum::body::Body;
use axum::http::{Request, header};
use serde_json::{Value, json};

use crate::intake_csv::gzip;
use crate::support::{Answer, ask, post_form, service, upload};

const PATH: &str = "/v1/weather/inspections";
const GERMAN: &str = "Zeit;Lufttemperatur (°C);rel. Luftfeuchte (%);Wind\n13.01.2026 00:00;-1,5;80,5;3\n13.01.2026 01:00;-2,25;81;4\n13.01.2026 02:00;-2,5;82;4\n";

async fn raw(body: impl Into<Body>, kind: &str) -> Answer {
    let request = Request::post(PATH).header(header::CONTENT_TYPE, kind);
    ask(&service(), request.body(body.into()).unwrap()).await
}

fn shape(answer: &Value) -> Value {
    json!({
        "ready": answer["ready"],
        "delimiter": answer["form"]["delimiter"],
        "decimal": answer["form"]["decimal"],
        "header_row": answer["form"]["header_row"],
        "format": answer["time"]["format"],
        "step": answer["readings"]["step_seconds"],
        "first": answer["first_rows"][0],
        "questions": answer["questions"].as_array().unwrap().iter().map(|q| json!([q["code"], q["needed"]])).collect::<Vec<_>>(),
    })
}

#[tokio::test]
async fn a_file_without_a_zone_is_inspected_and_asked_for() {
    let answer = post_form(&service(), PATH, &[("weather", GERMAN.as_bytes())]).await;
    assert_eq!(answer.status, 200, "{}", answer.text());
    let found = answer.json();
    assert_eq!(
        shape(&found),
        json!({
            "ready": false, "delimiter": ";", "decimal": ",", "header_row": 1, "format": "%d.%m.%Y %H:%M", "step": 3600,
            "first": {"row": 2, "time": "2026-01-13T00:00:00", "air_temperature_c": -1.5, "relative_humidity_pct": 80.5},
            "questions": [["no_zone", true], ["unknown_unit", false]],
        })
    );
    assert_eq!(
        found["questions"][0]["candidates"][0]["send"],
        "\"hints\": {\"zone\":\"UTC\"}"
    );
    let temperature = &found["columns"][1];
    assert_eq!(
        (
            &temperature["quantity"],
            &temperature["unit"],
            &temperature["confidence"]
        ),
        (&json!("air_temperature"), &json!("°C"), &json!("high"))
    );
}

#[tokio::test]
async fn the_answer_to_the_question_makes_it_ready_and_a_prediction_takes_both_ways() {
    let router = service();
    let hints = json!({"zone": "Europe/Oslo"});
    let parts = [
        ("weather", GERMAN.as_bytes()),
        ("hints", &hints.to_string().into_bytes()[..]),
    ];
    let found = post_form(&router, PATH, &parts).await.json();
    assert_eq!(
        (&found["ready"], &found["first_rows"][0]["time"]),
        (&json!(true), &json!("2026-01-12T23:00:00Z")),
        "{found}"
    );
    let mut by_hints = upload(Value::Null);
    by_hints["weather"]["hints"] = hints;
    let mut answers = Vec::new();
    for request in [by_hints.to_string(), upload(found["layout"].clone()).to_string()] {
        let answer = post_form(
            &router,
            "/v1/predictions",
            &[("request", request.as_bytes()), ("weather", GERMAN.as_bytes())],
        )
        .await;
        assert_eq!(answer.status, 200, "{}", answer.text());
        answers.push(answer.json());
    }
    assert_eq!(answers[0]["summary"], answers[1]["summary"]);
    let said = answers[0]["assumptions"].to_string();
    assert!(
        said.contains("Europe/Oslo (from the hints)") && said.contains("wind speed, not read"),
        "{said}"
    );
}

#[tokio::test]
async fn a_prediction_without_the_answer_is_refused_with_the_line_to_send() {
    let request = upload(Value::Null).to_string();
    let answer = post_form(
        &service(),
        "/v1/predictions",
        &[("request", request.as_bytes()), ("weather", GERMAN.as_bytes())],
    )
    .await;
    assert_eq!(
        (answer.status.as_u16(), answer.code().as_str()),
        (422, "invalid_weather"),
        "{}",
        answer.text()
    );
    let fault = &answer.problem()["errors"][0];
    assert_eq!(
        (&fault["code"], &fault["row"], &fault["column"]),
        (&json!("no_zone"), &json!(2), &json!("Zeit"))
    );
    assert!(
        fault["detail"]
            .as_str()
            .unwrap()
            .contains("Send \"hints\": {\"zone\":\"UTC\"} (they are UTC), or"),
        "{fault}"
    );
}

#[tokio::test]
async fn the_body_alone_will_do_gzipped_or_not_and_any_type_of_part() {
    for (bytes, kind) in [
        (GERMAN.as_bytes().to_vec(), "text/csv"),
        (gzip(GERMAN.as_bytes()), "application/gzip"),
        (GERMAN.as_bytes().to_vec(), "text/plain; charset=utf-8"),
    ] {
        let answer = raw(bytes, kind).await;
        assert_eq!(
            (answer.status.as_u16(), &answer.json()["readings"]["count"]),
            (200, &json!(3)),
            "{kind}: {}",
            answer.text()
        );
    }
    let refused = raw(GERMAN, "application/x-www-form-urlencoded").await;
    assert_eq!(refused.code(), "unsupported_media_type");
    assert!(refused.text().contains("-F weather=@file.csv"), "{}", refused.text());
}

#[tokio::test]
async fn faults_and_flags_are_inside_where_the_file_is_readable() {
    let wrong = GERMAN.replace("-2,25", "warm").replace("Zeit", "Zeit (UTC)");
    let found = post_form(&service(), PATH, &[("weather", wrong.as_bytes())])
        .await
        .json();
    assert_eq!(
        (&found["faults"][0]["row"], &found["faults"][0]["code"]),
        (&json!(3), &json!("bad_number")),
        "{found}"
    );
    let odd = GERMAN.replace("-2,25", "65").replace("Zeit", "Zeit (UTC)");
    let found = post_form(&service(), PATH, &[("weather", odd.as_bytes())]).await.json();
    let flags = found["flags"].to_string();
    assert!(
        flags.contains("temperature_out_of_range") && flags.contains("[3]"),
        "{flags}"
    );
}

#[tokio::test]
async fn a_layout_may_be_tried_out_and_wrong_parts_are_named() {
    let router = service();
    let layout = json!({"dialect": {"delimiter": ";", "decimal": ","},
        "time": {"columns": ["Zeit"], "format": "%d.%m.%Y %H:%M", "zone": "UTC"},
        "columns": {"air_temperature": {"column": "Lufttemperatur (°C)", "unit": "°C"},
                    "relative_humidity": {"column": "rel. Luftfeuchte (%)", "unit": "%"},
                    "wind_speed": {"column": "Wind", "unit": "km/h"}}});
    let text = layout.to_string();
    let found = post_form(
        &router,
        PATH,
        &[("weather", GERMAN.as_bytes()), ("layout", text.as_bytes())],
    )
    .await
    .json();
    assert_eq!(
        (&found["ready"], &found["first_rows"][0]["wind_speed_m_s"]),
        (&json!(true), &json!(0.833333)),
        "{found}"
    );
    let wrong = text.replace("UTC", "Skerry");
    let refused = post_form(
        &router,
        PATH,
        &[("weather", GERMAN.as_bytes()), ("layout", wrong.as_bytes())],
    )
    .await;
    assert_eq!(
        refused.faults(),
        [("/layout/time/zone".to_owned(), "unknown_zone".to_owned())]
    );
    let both = post_form(
        &router,
        PATH,
        &[
            ("weather", GERMAN.as_bytes()),
            ("layout", text.as_bytes()),
            ("hints", b"{}"),
        ],
    )
    .await;
    assert_eq!(both.code(), "invalid_request");
    for parts in [
        &[("wether", GERMAN.as_bytes())][..],
        &[("weather", b"a,b"), ("weather", b"a,b")],
        &[],
    ] {
        assert_eq!(post_form(&router, PATH, parts).await.code(), "invalid_multipart");
    }
    let hints = post_form(
        &router,
        PATH,
        &[("weather", GERMAN.as_bytes()), ("hints", b"{\"zoen\": \"UTC\"}")],
    )
    .await;
    assert!(hints.text().contains("did you mean \\\"zone\\\"?"), "{}", hints.text());
}

#[tokio::test]
async fn what_is_no_csv_is_a_problem() {
    for (bytes, status) in [
        (&b""[..], 400),
        (b"\x89PNG\r\n\x1a\n\0\0", 400),
        (b"once upon a time\n", 400),
        (b"\x1f\x8b\x08\0broken", 400),
    ] {
        let answer = post_form(&service(), PATH, &[("weather", bytes)]).await;
        assert_eq!(
            (answer.status.as_u16(), answer.code().as_str()),
            (status, "unreadable_weather"),
            "{}",
            answer.text()
        );
    }
}
