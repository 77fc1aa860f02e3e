//! The examples of the description are answers as the service gives them.

use axum::body::Body;
use axum::http::{Request, header};
use dipcast::http::router;
use serde_json::Value;

use crate::support::{Answer, ask, example, post_form, post_json, service};

/// The last digits are there to be read: other tests hold them.
const TOLERANCE: f64 = 1e-3;

const MEND: &str = "mend it by sending openapi/examples/shortest.json to /v1/predictions again, then write openapi/v1.json \
                    and openapi/v1-3.0.json anew";

async fn answer_to_the_shortest(media_type: &str) -> Answer {
    let request = Request::post("/v1/predictions")
        .header(header::CONTENT_TYPE, "application/json")
        .header(header::ACCEPT, media_type)
        .body(Body::from(example("shortest.json")));
    ask(&service(), request.unwrap()).await
}

#[tokio::test]
async fn the_answer_in_json_is_the_present_one() {
    let answer = answer_to_the_shortest("application/json").await.json();
    let shown: Value = serde_json::from_str(&example("answers/shortest.json")).unwrap();
    assert_alike("", &answer, &shown);
}

#[tokio::test]
async fn the_answer_in_lines_is_the_present_one() {
    let lines = answer_to_the_shortest("application/x-ndjson").await.text();
    let shown = example("answers/shortest.ndjson");
    assert_eq!(lines.lines().count(), shown.lines().count(), "{MEND}");
    for (line, shown) in lines.lines().zip(shown.lines()) {
        let [line, shown] = [line, shown].map(|text| serde_json::from_str(text).unwrap());
        assert_alike("", &line, &shown);
    }
    let table = answer_to_the_shortest("text/csv").await.text();
    let shown = example("answers/shortest.csv");
    let cells = |text: &str| -> Vec<Vec<Value>> {
        let cell = |cell: &str| cell.parse::<f64>().map_or_else(|_| Value::from(cell), Value::from);
        text.lines().map(|line| line.split(',').map(cell).collect()).collect()
    };
    assert_alike("", &serde_json::json!(cells(&table)), &serde_json::json!(cells(&shown)));
}

#[tokio::test]
async fn the_inspection_is_the_present_one() {
    let file = example("shop-logger.csv");
    let parts = [("weather", file.as_bytes())];
    let answer = post_form(&service(), "/v1/weather/inspections", &parts).await.json();
    let shown: Value = serde_json::from_str(&example("answers/inspection.json")).unwrap();
    let mend =
        "mend it with: dipcast inspect openapi/examples/shop-logger.csv > openapi/examples/answers/inspection.json";
    assert_eq!(answer, shown, "{mend}");
}

#[tokio::test]
async fn the_refusal_is_the_present_one() {
    let spoilt = example("shortest.json").replace("device_example", "device_exampel");
    let mut answer = post_json(&service(), "/v1/predictions", spoilt).await.problem();
    let shown: Value = serde_json::from_str(&example("answers/refused.json")).unwrap();
    answer["instance"] = shown["instance"].clone();
    assert_eq!(answer, shown);
}

/// Without an example the page of the description makes one up.
#[test]
fn every_answer_in_json_shows_a_real_one() {
    let document = serde_json::to_value(router::document()).unwrap();
    let mut shown = 0;
    for (path, item) in document["paths"].as_object().unwrap() {
        // The description does not quote itself.
        for operation in item
            .as_object()
            .unwrap()
            .values()
            .filter(|_| !path.starts_with("/openapi"))
        {
            let content = &operation["responses"]["200"]["content"]["application/json"];
            if content.is_object() {
                let real = &content["examples"]["real"]["value"];
                assert!(
                    real.as_object().is_some_and(|value| !value.is_empty()),
                    "{path} has no example"
                );
                shown += 1;
            }
        }
    }
    assert!(shown >= 6, "{shown}");
    for (name, answer) in document["components"]["responses"].as_object().unwrap() {
        let problem = &answer["content"]["application/problem+json"]["example"];
        assert!(
            name == "Problem" || problem["status"].is_number(),
            "{name} has no example"
        );
    }
}

/// The same names and texts; numbers within the tolerance.
fn assert_alike(at: &str, found: &Value, shown: &Value) {
    match (found, shown) {
        (Value::Object(found), Value::Object(shown)) => {
            let names = |object: &serde_json::Map<String, Value>| object.keys().cloned().collect::<Vec<_>>();
            assert_eq!(names(found), names(shown), "{at}: {MEND}");
            found
                .iter()
                .for_each(|(name, value)| assert_alike(&format!("{at}/{name}"), value, &shown[name]));
        }
        (Value::Array(found), Value::Array(shown)) => {
            assert_eq!(found.len(), shown.len(), "{at}: {MEND}");
            let pairs = found.iter().zip(shown).enumerate();
            pairs.for_each(|(index, (value, shown))| assert_alike(&format!("{at}/{index}"), value, shown));
        }
        (Value::Number(found), Value::Number(shown)) => {
            let (found, shown) = (found.as_f64().unwrap(), shown.as_f64().unwrap());
            let allowed = TOLERANCE * shown.abs().max(1e-3);
            assert!((found - shown).abs() <= allowed, "{at}: {found}, shown {shown}; {MEND}");
        }
        _ => assert_eq!(found, shown, "{at}: {MEND}"),
    }
}
