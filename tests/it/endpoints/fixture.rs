//! The built-in source, end to end, with no network; and every way of asking wrong.

use serde_json::{Value, json};

use crate::support::{example, get, post_json, predict, service};

/// Three days of the built-in source.
fn asked() -> Value {
    json!({
        "device_example": "shelf-180",
        "weather": {"kind": "endpoint", "source": "fixture", "climate": "temperate",
                    "latitude": 61.3, "longitude": -3.9, "from": "2026-06-01", "to": "2026-06-04"},
        "options": {"bands": false}
    })
}

fn with(changes: Value) -> Value {
    let mut request = asked();
    for (name, value) in changes.as_object().unwrap() {
        let weather = request["weather"].as_object_mut().unwrap();
        match value {
            Value::Null => drop(weather.remove(name)),
            value => drop(weather.insert(name.clone(), value.clone())),
        }
    }
    request
}

#[tokio::test]
async fn a_prediction_from_coordinates_needs_no_network() {
    let answer = predict(&service(), &asked()).await;
    assert_eq!(answer.status, 200, "{}", answer.text());
    let document = answer.json();
    assert_eq!(document["summary"]["from"], "2026-06-01T00:00:00Z");
    assert_eq!(document["summary"]["to"], "2026-06-04T00:00:00Z");
    assert!(document["summary"]["cycles"].as_f64().unwrap() > 100.0);
    let weather = &document["weather"];
    assert_eq!(
        (weather["source"].as_str(), weather["hours"].as_u64()),
        (Some("endpoint"), Some(72))
    );
    let fetched = &weather["fetched"];
    assert!(fetched["credit"].as_str().unwrap().contains("Invented"));
    assert_eq!(
        (&fetched["stale"], &fetched["served"]["latitude"]),
        (&json!(false), &json!(61.3))
    );
    assert_eq!(fetched["stretches"][0]["nature"], "invented");
    let said = document["assumptions"].to_string();
    assert!(said.contains("invented: climate temperate"), "{said}");
}

#[tokio::test]
async fn the_same_request_gives_the_same_bytes() {
    let (first, second) = (predict(&service(), &asked()).await, predict(&service(), &asked()).await);
    assert_eq!(first.text(), second.text());
    let elsewhere = predict(&service(), &with(json!({"longitude": -3.8}))).await.json();
    assert_ne!(elsewhere["summary"]["cycles"], first.json()["summary"]["cycles"]);
}

#[tokio::test]
async fn past_and_ahead_join_at_the_present_hour() {
    let around = with(json!({"from": null, "to": null, "past": "P2D", "ahead": "PT12H"}));
    let answer = predict(&service(), &around).await;
    assert_eq!(answer.status, 200, "{}", answer.text());
    assert_eq!(answer.json()["weather"]["hours"], 60);
}

#[tokio::test]
async fn elevation_of_the_place_moves_the_pressure() {
    let mut high = asked();
    high["place"] = json!({"kind": "at_device", "elevation_m": 2500});
    let (low, high) = (
        predict(&service(), &asked()).await.json(),
        predict(&service(), &high).await.json(),
    );
    assert_ne!(low["summary"]["cycles"], high["summary"]["cycles"]);
    assert_eq!(high["weather"]["fetched"]["served"]["elevation_m"], 2500.0);
}

#[tokio::test]
async fn the_example_runs_and_comes_as_csv_too() {
    let router = service();
    let request = example("by-coordinates.json");
    assert_eq!(post_json(&router, "/v1/predictions", request.clone()).await.status, 200);
    let table = post_json(&router, "/v1/predictions?format=csv", request).await;
    assert_eq!(table.text().matches("\r\n").count(), 1 + 7 * 24);
}

#[tokio::test]
async fn weather_from_outdoors_taken_as_the_air_at_the_device_is_said() {
    let said = |answer: Value| {
        let assumptions = answer["assumptions"].as_array().unwrap().clone();
        assumptions.iter().any(|assumption| assumption["what"] == "place")
    };
    let mut request: Value = serde_json::from_str(&example("by-coordinates.json")).unwrap();
    assert!(!said(predict(&service(), &request).await.json()));
    request.as_object_mut().unwrap().remove("place");
    assert!(said(predict(&service(), &request).await.json()));
}

/// What is wrong, where it is pointed at, and by which code.
#[tokio::test]
async fn every_wrong_way_of_asking_is_named() {
    let cases = [
        (json!({"climate": null}), "/weather/climate", "no_climate"),
        (json!({"climate": "polar"}), "/weather/climate", "not_allowed"),
        (json!({"source": "fixtur"}), "/weather/source", "unknown_source"),
        (json!({"latitude": 90.5}), "/weather/latitude", "above_maximum"),
        (json!({"longitude": -180.5}), "/weather/longitude", "below_minimum"),
        (json!({"latitude": null}), "/weather", "required"),
        (json!({"past": "P1D"}), "/weather", "two_spans"),
        (json!({"from": null, "to": null}), "/weather", "no_span"),
        (json!({"to": null}), "/weather/to", "required"),
        (json!({"from": "2026-06-05"}), "/weather/to", "reversed_span"),
        (json!({"from": "yesterday"}), "/weather/from", "invalid_instant"),
        (
            json!({"from": "2026-06-01T00:30:00Z"}),
            "/weather/from",
            "not_a_full_hour",
        ),
        (json!({"from": "1850-01-01"}), "/weather/from", "beyond_coverage"),
        (
            json!({"from": null, "to": null, "ahead": "P1"}),
            "/weather/ahead",
            "invalid_duration",
        ),
        (
            json!({"from": null, "to": null, "ahead": "-P1D"}),
            "/weather/ahead",
            "invalid_duration",
        ),
        (
            json!({"from": null, "to": null, "past": "PT0H"}),
            "/weather/past",
            "empty_span",
        ),
        (
            json!({"from": null, "to": null, "past": "PT90M"}),
            "/weather/past",
            "not_a_full_hour",
        ),
        (json!({"api_key": "x"}), "/weather/api_key", "unknown_field"),
        (json!({"url": "http://127.0.0.1/"}), "/weather/url", "unknown_field"),
    ];
    let router = service();
    for (change, pointer, code) in cases {
        let answer = predict(&router, &with(change.clone())).await;
        assert_eq!(answer.status, 422, "{change}: {}", answer.text());
        let faults = answer.faults();
        assert!(
            faults.contains(&(pointer.to_owned(), code.to_owned())),
            "{change}: {faults:?}"
        );
    }
}

#[tokio::test]
async fn faults_of_device_and_weather_come_at_once() {
    let mut request = with(json!({"source": "nowhere", "from": "2026-06-05"}));
    request["device_example"] = json!("shelf-181");
    let faults = predict(&service(), &request).await.faults();
    let pointers: Vec<&str> = faults.iter().map(|(pointer, _)| pointer.as_str()).collect();
    assert_eq!(pointers, ["/device_example", "/weather/to", "/weather/source"]);
}

#[tokio::test]
async fn a_span_beyond_the_limit_is_refused_before_it_is_made() {
    let answer = predict(&service(), &with(json!({"from": "1950-01-01"}))).await;
    assert_eq!(
        (answer.status.as_u16(), answer.code().as_str()),
        (422, "too_many_hours")
    );
}

#[tokio::test]
async fn a_file_beside_coordinates_is_refused() {
    let router = service();
    let request = asked().to_string();
    let parts: [(&str, &[u8]); 2] = [("request", request.as_bytes()), ("weather", b"time,t\n")];
    let answer = crate::support::post_form(&router, "/v1/predictions", &parts).await;
    assert_eq!(answer.faults(), [("/weather/kind".to_owned(), "wrong_kind".to_owned())]);
    assert_eq!(get(&router, "/livez").await.status, 200);
}
