//! `/v1/fluids`, `/v1/evaporants`, `/v1/example-devices`.

use serde_json::json;

use crate::support::{get, predict, request, service};

#[tokio::test]
async fn every_table_is_a_list_of_named_and_sourced_items() {
    let router = service();
    for (path, least) in [("/v1/fluids", 8), ("/v1/evaporants", 2), ("/v1/example-devices", 3)] {
        let answer = get(&router, path).await;
        assert_eq!(
            (answer.status.as_u16(), answer.header("content-type")),
            (200, "application/json")
        );
        let document = answer.json();
        let items = document["items"].as_array().unwrap();
        assert!(items.len() >= least, "{path}");
        for item in items {
            assert!(item["name"].is_string() && item["title"].is_string(), "{path}: {item}");
            let sourced = path == "/v1/example-devices" || !item["sources"].as_array().unwrap().is_empty();
            assert!(sourced, "{path}: {item}");
        }
    }
}

#[tokio::test]
async fn the_figures_of_dichloromethane_are_those_of_the_handbooks() {
    let document = get(&service(), "/v1/fluids").await.json();
    let row = document["items"]
        .as_array()
        .unwrap()
        .iter()
        .find(|item| item["name"] == "dichloromethane")
        .unwrap();
    // Boiling point 39.8 °C and density 1327 kg/m3 at 20 °C: Perry's Chemical Engineers' Handbook, 8th edition, as printed
    // by the library `chemicals` (remembered, not looked up).
    assert!((row["boiling_point_c"].as_f64().unwrap() - 39.8).abs() < 0.3, "{row}");
    assert!(
        (row["liquid_density_kg_m3"].as_f64().unwrap() - 1327.0).abs() < 7.0,
        "{row}"
    );
}

#[tokio::test]
async fn every_example_device_can_be_sent_back_as_it_is() {
    let router = service();
    let document = get(&router, "/v1/example-devices").await.json();
    for item in document["items"].as_array().unwrap() {
        let mut by_name = request(6);
        by_name["device_example"] = item["name"].clone();
        let mut in_full = request(6);
        in_full.as_object_mut().unwrap().remove("device_example");
        in_full["device"] = item["device"].clone();
        let (by_name, in_full) = (predict(&router, &by_name).await, predict(&router, &in_full).await);
        assert_eq!(
            (by_name.status.as_u16(), in_full.status.as_u16()),
            (200, 200),
            "{}",
            in_full.text()
        );
        assert_eq!(by_name.json()["summary"], in_full.json()["summary"], "{}", item["name"]);
        assert_eq!(in_full.json()["device"]["definition"], item["device"]);
    }
}

#[tokio::test]
async fn a_table_has_one_format_and_says_so() {
    let router = service();
    let refused = get(&router, "/v1/fluids?format=csv").await;
    assert_eq!(
        (refused.status.as_u16(), refused.code().as_str()),
        (406, "not_acceptable")
    );
    assert_eq!(refused.problem()["available"], json!(["application/json"]));
    assert_eq!(
        get(&router, "/v1/fluids?limit=3").await.problem()["errors"][0]["parameter"],
        "limit"
    );
}
