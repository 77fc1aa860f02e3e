//! `POST /v1/predictions` in places: where the device stands, and several places side by side.

use serde_json::{Value, json};

use crate::support::{Answer, example, post_json, service};

async fn ask(changes: Value) -> Answer {
    let mut request: Value = json!({
        "device_example": "shelf-180",
        "weather": {
            "kind": "inline", "start": "2026-01-01T00:00:00Z",
            "air_temperature_c": [0, 0, 0, 0], "relative_humidity_pct": [80, 80, 80, 80],
            "wind_speed_m_s": [2, 2, 2, 2], "shortwave_w_m2": [0, 0, 100, 0]
        },
        "options": {"bands": false, "attendance": {"policy": "never"}}
    });
    let fields = changes.as_object().unwrap().clone();
    request.as_object_mut().unwrap().extend(fields);
    post_json(&service(), "/v1/predictions", request.to_string()).await
}

async fn good(changes: Value) -> Value {
    let answer = ask(changes).await;
    assert_eq!(answer.status, 200, "{}", answer.text());
    answer.json()
}

async fn refused(changes: Value) -> Vec<(String, String)> {
    let answer = ask(changes).await;
    assert_eq!(answer.status, 422, "{}", answer.text());
    let text = |fault: &Value, name: &str| fault[name].as_str().unwrap_or_default().to_owned();
    let errors = answer.json()["errors"].as_array().unwrap().clone();
    errors
        .iter()
        .map(|fault| (text(fault, "pointer"), text(fault, "code")))
        .collect()
}

fn number(value: &Value) -> f64 {
    value.as_f64().unwrap_or_else(|| panic!("no number: {value}"))
}

fn room(rule: Value) -> Value {
    json!({"kind": "room", "name": "shop", "heated_to_c": 21, "moisture": rule})
}

#[tokio::test]
async fn a_room_shows_its_air_beside_the_weather_and_names_its_rule() {
    let answer = good(json!({"place": room(json!({"rule": "given_excess", "excess_g_m3": 4}))})).await;
    let place = &answer["place"];
    assert_eq!(
        (place["kind"].as_str(), place["name"].as_str()),
        (Some("room"), Some("shop"))
    );
    assert_eq!(place["moisture_rule"], "given excess of 4 g/m3");
    // 41.5 %: 0 °C and 80 % outdoors, 21 °C and 4 g/m3 more indoors, by a psychrometric table.
    assert!(
        (number(&place["mean_relative_humidity_pct"]) - 41.5).abs() < 0.3,
        "{place}"
    );
    let hours = &answer["hours"];
    assert_eq!(number(&hours["outdoor_temp_c"][0]), 0.0);
    assert!((number(&hours["air_temp_c"][0]) - 21.0).abs() < 1e-6);
    assert!(answer.get("comparison").is_none());
}

#[tokio::test]
async fn readings_at_the_device_have_no_weather_beside_them() {
    let answer = good(json!({})).await;
    assert_eq!(answer["place"]["kind"], "at_device");
    assert!(answer["hours"].get("outdoor_temp_c").is_none());
}

#[tokio::test]
async fn a_case_says_how_much_air_it_needs() {
    let case = json!({
        "kind": "case", "volume_l": 20, "air_changes_per_hour": 1,
        "inside": room(json!({"rule": "iso_13788", "class": 2}))
    });
    let figures = good(json!({"place": case})).await["place"]["case"].clone();
    assert!(
        (0.05..2.0).contains(&number(&figures["least_air_changes_per_hour"])),
        "{figures}"
    );
    assert_eq!(figures["dew_hours"], 0);
}

#[tokio::test]
async fn places_are_compared_side_by_side_and_each_is_what_it_is_alone() {
    let places = [
        room(json!({"rule": "none"})),
        room(json!({"rule": "field_survey"})),
        json!({"kind": "outdoors"}),
    ];
    let together = good(json!({"places": places})).await;
    let compared = together["comparison"].as_array().unwrap();
    assert_eq!(compared.len(), 3);
    for (place, compared) in places.iter().zip(compared) {
        let alone = good(json!({"place": place})).await;
        assert_eq!(alone["summary"], compared["summary"]);
        assert_eq!(alone["assumptions"], compared["assumptions"]);
        assert_eq!(alone["place"], compared["place"]);
    }
    assert_eq!(together["summary"], compared[0]["summary"]);
    let one = good(json!({"places": places[..1]})).await;
    assert_eq!(one["comparison"].as_array().unwrap().len(), 1);
}

#[tokio::test]
async fn rows_of_compared_places_name_their_place() {
    let places = json!([room(json!({"rule": "none"})), {"kind": "outdoors"}, {"kind": "room", "name": "=1+1"}]);
    let request = json!({
        "device_example": "shelf-180", "places": places,
        "weather": {
            "kind": "inline", "start": "2026-01-01T00:00:00Z",
            "air_temperature_c": [0, 0], "relative_humidity_pct": [80, 80]
        }
    });
    let answer = post_json(&service(), "/v1/predictions?format=csv", request.to_string()).await;
    assert_eq!(answer.status, 200, "{}", answer.text());
    let text = answer.text();
    let lines: Vec<&str> = text.split("\r\n").collect();
    assert_eq!(lines.len(), 8, "{text}");
    assert!(lines[0].starts_with("place,time,cycles,"), "{}", lines[0]);
    let starts = [
        "shop,2026-01-01T00:",
        "shop,2026-01-01T01:",
        "places/1,2026",
        "places/1,2026",
        "'=1+1,",
        "'=1+1,",
    ];
    assert!(
        lines[1..]
            .iter()
            .zip(starts)
            .all(|(line, start)| line.starts_with(start)),
        "{text}"
    );
}

#[tokio::test]
async fn the_example_of_places_is_answered() {
    let answer = post_json(&service(), "/v1/predictions", example("places.json")).await;
    assert_eq!(answer.status, 200, "{}", answer.text());
    let answer = answer.json();
    let cycles: Vec<f64> = answer["comparison"]
        .as_array()
        .unwrap()
        .iter()
        .map(|c| number(&c["summary"]["cycles"]))
        .collect();
    assert_eq!(cycles.len(), 5);
    assert!(
        cycles[2] > cycles[1] && cycles[1] > cycles[4] && cycles[4] > cycles[0],
        "{cycles:?}"
    );
}

#[tokio::test]
async fn wrong_places_are_named_where_they_stand() {
    let found = refused(json!({"place": {"kind": "cellar"}})).await;
    assert_eq!(found[0].0, "/place/kind");
    let found = refused(json!({"place": room(json!({"rule": "given_excess"}))})).await;
    assert_eq!(found[0].0, "/place/moisture");
    let found = refused(json!({"place": {"kind": "room", "heated_to_c": 25, "cooled_to_c": 20}})).await;
    assert_eq!(
        found,
        [("/place/cooled_to_c".to_owned(), "below_other_limit".to_owned())]
    );
    let nested = json!({"kind": "case", "volume_l": 5, "air_changes_per_hour": 1, "inside": {"kind": "case"}});
    assert_eq!(refused(json!({"place": nested})).await[0].0, "/place/inside/kind");
    let two = json!({"places": [room(json!({"rule": "none"})), {"kind": "room", "humidified_to_pct": 60, "dehumidified_to_pct": 40}]});
    assert_eq!(refused(two).await[0].0, "/places/1/dehumidified_to_pct");
}

#[tokio::test]
async fn one_site_has_one_elevation_and_one_way_to_say_where() {
    let both = json!({"place": {"kind": "outdoors"}, "places": [{"kind": "outdoors"}]});
    assert_eq!(
        refused(both).await,
        [("/places".to_owned(), "place_and_places".to_owned())]
    );
    let elevations = json!({"places": [{"kind": "outdoors", "elevation_m": 5}, {"kind": "room", "elevation_m": 900}]});
    assert_eq!(
        refused(elevations).await,
        [("/places".to_owned(), "two_elevations".to_owned())]
    );
    assert_eq!(refused(json!({"places": []})).await[0].0, "/places");
}

#[tokio::test]
async fn the_end_of_one_run_in_a_case_is_the_start_of_the_next() {
    let case = json!({
        "kind": "case", "volume_l": 20, "air_changes_per_hour": 0.5,
        "inside": room(json!({"rule": "iso_13788", "class": 2}))
    });
    let first = good(json!({"place": case})).await;
    let end = &first["end_state"];
    assert!(number(&end["case_relative_humidity_pct"]) > 45.0, "{end}");
    let options = json!({"bands": false, "attendance": {"policy": "never"}, "initial_state": end});
    let next = good(json!({"place": case, "options": options})).await;
    assert!(
        number(&next["place"]["least_relative_humidity_pct"]) > number(&first["place"]["least_relative_humidity_pct"])
    );
    let elsewhere = refused(json!({"options": options})).await;
    assert_eq!(
        elsewhere[0],
        (
            "/options/initial_state/case_relative_humidity_pct".to_owned(),
            "no_case".to_owned()
        )
    );
}
