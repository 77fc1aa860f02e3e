//! From coordinates to a prediction over HTTP, with a stand-in for the service, and the list of sources.

use serde_json::{Value, json};

use super::asking::config;
use super::bodies::{JUNE, nasa_power, open_meteo};
use super::stand_in::{Reply, StandIn};
use crate::support::{get, predict, service, service_with};

fn asked(source: &str) -> Value {
    json!({
        "device_example": "shelf-180",
        "weather": {"kind": "endpoint", "source": source, "latitude": 50, "longitude": 8,
                    "from": "2025-06-01", "to": "2025-06-03"},
        "options": {"bands": false}
    })
}

#[tokio::test]
async fn coordinates_become_a_prediction_with_credit() {
    let stand_in = StandIn::replying(vec![Reply::json(open_meteo(JUNE, 48).to_string())]).await;
    let router = service_with(config(&stand_in.url));
    let answer = predict(&router, &asked("open_meteo")).await;
    assert_eq!(answer.status, 200, "{}", answer.text());
    let document = answer.json();
    assert!(document["summary"]["cycles"].as_f64().unwrap() > 100.0);
    let fetched = &document["weather"]["fetched"];
    assert_eq!(
        (&fetched["source"], &fetched["licence"]),
        (&json!("open_meteo"), &json!("CC BY 4.0"))
    );
    assert!(fetched["credit_url"].as_str().unwrap().starts_with("https://"));
    assert_eq!(fetched["asked"], json!({"latitude": 50.0, "longitude": 8.0}));
    assert_eq!(
        fetched["served"],
        json!({"latitude": 50.05, "longitude": 8.05, "elevation_m": 120.0})
    );
    assert_eq!(fetched["stretches"][0]["nature"], "reanalysis");
    assert!(fetched["stretches"][0]["fetched_at"].as_str().unwrap().ends_with('Z'));
    assert!(
        document["assumptions"]
            .to_string()
            .contains("that of the source's readings")
    );
    let again = predict(&router, &asked("open_meteo")).await;
    assert_eq!(again.text(), answer.text(), "kept weather gives the same bytes");
    assert_eq!(stand_in.seen().len(), 1);
}

#[tokio::test]
async fn a_series_with_too_many_holes_is_refused_in_words() {
    let mut body = nasa_power(JUNE, 48);
    let hours = body["properties"]["parameter"]["T2M"].as_object_mut().unwrap();
    hours.values_mut().skip(10).for_each(|value| *value = json!(-999.0));
    let stand_in = StandIn::replying(vec![Reply::json(body.to_string())]).await;
    let answer = predict(&service_with(config(&stand_in.url)), &asked("nasa_power")).await;
    assert_eq!(
        (answer.status.as_u16(), answer.code().as_str()),
        (422, "invalid_weather")
    );
    assert!(
        answer.problem()["detail"]
            .as_str()
            .unwrap()
            .starts_with("of the fetched weather"),
        "{}",
        answer.text()
    );
}

#[tokio::test]
async fn a_source_that_is_down_is_503_and_one_that_makes_no_sense_is_502() {
    let down = StandIn::replying(vec![Reply::status(503, "").with("Retry-After", "90")]).await;
    let answer = predict(&service_with(config(&down.url)), &asked("open_meteo")).await;
    assert_eq!(
        (answer.status.as_u16(), answer.code().as_str()),
        (503, "weather_source_unavailable")
    );
    assert_eq!(answer.header("retry-after"), "90");
    let odd = StandIn::replying(vec![Reply::json("{}")]).await;
    let answer = predict(&service_with(config(&odd.url)), &asked("open_meteo")).await;
    assert_eq!(
        (answer.status.as_u16(), answer.code().as_str()),
        (502, "weather_source_failed")
    );
    let detail = answer.problem()["detail"].as_str().unwrap().to_owned();
    assert!(detail.starts_with("Open-Meteo gave no weather"), "{detail}");
    for code in ["weather_source_failed", "weather_source_unavailable"] {
        assert_eq!(get(&service(), &format!("/problems/{code}")).await.status, 200);
    }
}

#[tokio::test]
async fn unknown_and_unconfigured_sources_name_those_that_can_be_asked() {
    let router = service();
    for (source, code) in [("nowhere", "unknown_source"), ("open_meteo", "source_not_configured")] {
        let answer = predict(&router, &asked(source)).await;
        assert_eq!(answer.faults(), [("/weather/source".to_owned(), code.to_owned())]);
        assert!(
            answer.problem()["detail"]
                .as_str()
                .unwrap()
                .contains("configured are fixture, nasa_power"),
            "{}",
            answer.text()
        );
    }
}

#[tokio::test]
async fn the_list_tells_state_terms_and_budget() {
    let stand_in = StandIn::replying(vec![Reply::json(open_meteo(JUNE, 48).to_string())]).await;
    let router = service_with(config(&stand_in.url));
    predict(&router, &asked("open_meteo")).await;
    let document = get(&router, "/v1/weather-sources").await.json();
    let items = document["items"].as_array().unwrap();
    let names: Vec<&str> = items.iter().map(|item| item["name"].as_str().unwrap()).collect();
    assert_eq!(names, ["fixture", "open_meteo", "met_norway", "nasa_power"]);
    assert_eq!(
        (items[0]["climates"].as_array().unwrap().len(), &items[0]["budget_left"]),
        (4, &Value::Null)
    );
    assert_eq!(
        (&items[1]["state"], &items[1]["budget_left"]["day"]),
        (&json!("ready"), &json!(9999.0))
    );
    assert!(items[1]["last_success"].is_string() && items[2]["last_success"].is_null());
    for item in items {
        let told = ["title", "coverage", "credit", "licence"]
            .iter()
            .all(|field| item[field].is_string());
        assert!(told && !item["variables"].as_array().unwrap().is_empty(), "{item}");
    }
    let bare = get(&service(), "/v1/weather-sources").await.json();
    let states: Vec<&str> = bare["items"]
        .as_array()
        .unwrap()
        .iter()
        .map(|item| item["state"].as_str().unwrap())
        .collect();
    assert_eq!(states, ["ready", "not_configured", "not_configured", "ready"]);
    assert!(
        bare["items"][2]["state_detail"]
            .as_str()
            .unwrap()
            .contains("weather.contact")
    );
}

#[tokio::test]
async fn questions_and_answers_are_counted_by_source() {
    let stand_in = StandIn::replying(vec![Reply::json(open_meteo(JUNE, 48).to_string())]).await;
    let router = service_with(config(&stand_in.url));
    predict(&router, &asked("open_meteo")).await;
    let text = get(&router, "/metrics").await.text();
    for line in [
        "weather_questions_total{source=\"open_meteo\",outcome=\"answered\"}",
        "weather_answers_total{source=\"open_meteo\",from=\"fetched\"}",
        "weather_budget_left_day{source=\"open_meteo\"}",
    ] {
        assert!(text.contains(line), "{line} in {text}");
    }
}
