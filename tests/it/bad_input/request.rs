//! Requests that are wrong in their JSON.

use serde_json::{Value, json};

use crate::support::{Answer, example, get, post_form, post_json, predict, request, service};

/// The own-device example with one value changed or added, by its pointer.
fn spoiled(changes: &[(&str, Value)]) -> Value {
    let mut asked: Value = serde_json::from_str(&example("own-device.json")).unwrap();
    for (pointer, value) in changes {
        let (parent, name) = pointer.rsplit_once('/').unwrap();
        match asked.pointer_mut(parent).unwrap() {
            Value::Array(items) => items[name.parse::<usize>().unwrap()] = value.clone(),
            object => object[name] = value.clone(),
        }
    }
    asked
}

fn refused(answer: &Answer, status: u16, code: &str) {
    assert_eq!(
        (answer.status.as_u16(), answer.code().as_str()),
        (status, code),
        "{}",
        answer.text()
    );
}

/// Detail of the fault at a pointer.
fn detail(answer: &Answer, pointer: &str) -> String {
    let problem = answer.problem();
    let fault = problem["errors"]
        .as_array()
        .unwrap()
        .iter()
        .find(|fault| fault["pointer"] == pointer);
    fault.unwrap_or_else(|| panic!("nothing at {pointer}: {problem}"))["detail"]
        .as_str()
        .unwrap()
        .to_owned()
}

#[tokio::test]
async fn wrong_types_and_unknown_fields_are_all_told_at_once() {
    let asked = spoiled(&[
        ("/device/head/outer_diameter_mm", json!("25")),
        ("/device/tube/boar_mm", json!(5)),
        ("/device/cup/reach_mm", json!(null)),
        ("/device/balance/kind", json!("tip_volum")),
        ("/options/method", json!("average")),
        ("/options/opening_hours/weekly/mon", json!([["09:00"]])),
        ("/weather/air_temperature_c/3", json!("18")),
        ("/optoins", json!({})),
    ]);
    let answer = predict(&service(), &asked).await;
    refused(&answer, 422, "invalid_request");
    assert!(detail(&answer, "/device/head/outer_diameter_mm").contains("without quotes"));
    assert!(detail(&answer, "/device/tube/boar_mm").contains("did you mean \"bore_mm\"?"));
    assert!(detail(&answer, "/device/cup/reach_mm").contains("found null"));
    assert!(detail(&answer, "/device/balance/kind").contains("did you mean \"tip_volume\"?"));
    assert!(detail(&answer, "/options/method").contains("did you mean \"averaged\"?"));
    assert!(detail(&answer, "/options/opening_hours/weekly/mon/0").contains("at least 2"));
    assert!(detail(&answer, "/weather/air_temperature_c/3").contains("without quotes"));
    assert!(detail(&answer, "/optoins").contains("did you mean \"options\"?"));
    assert_eq!(answer.faults().len(), 8, "{}", answer.text());
}

#[tokio::test]
async fn numbers_json_does_not_know_are_refused_with_their_place() {
    let router = service();
    for number in ["NaN", "Infinity", "-Infinity", "1e999", "0x10", "1.", "+1"] {
        let text = request(2).to_string().replacen("21.0", number, 1);
        let answer = post_json(&router, "/v1/predictions", text).await;
        refused(&answer, 400, "invalid_json");
        assert!(
            answer.problem()["detail"].as_str().unwrap().contains("line 1 column"),
            "{number}"
        );
    }
}

#[tokio::test]
async fn bodies_that_are_no_json_are_refused() {
    let router = service();
    let deep = "[".repeat(100_000);
    for text in [
        "",
        "{",
        "not json",
        "{\"device_example\":\"a\",\"device_example\":\"b\"}",
        deep.as_str(),
    ] {
        refused(
            &post_json(&router, "/v1/predictions", text.to_owned()).await,
            400,
            "invalid_json",
        );
    }
    refused(
        &post_json(&router, "/v1/predictions", vec![0x22, 0xff, 0x22]).await,
        400,
        "invalid_json",
    );
    for text in ["null", "[]", "3", "\"x\""] {
        refused(
            &post_json(&router, "/v1/predictions", text.to_owned()).await,
            422,
            "invalid_request",
        );
    }
}

#[tokio::test]
async fn negative_and_impossible_sizes_name_their_bounds() {
    let asked = spoiled(&[
        ("/device/head/outer_diameter_mm", json!(-25)),
        ("/device/body/wall_mm", json!(0)),
        ("/device/fluid/volume_ml", json!(1e9)),
        ("/device/dip/vapour_reset", json!(1.5)),
        ("/place/air_speed_m_s", json!(-0.1)),
        ("/options/samples", json!(0)),
    ]);
    let answer = predict(&service(), &asked).await;
    refused(&answer, 422, "invalid_request");
    assert_eq!(answer.faults().len(), 6, "{}", answer.text());
    assert!(detail(&answer, "/device/head/outer_diameter_mm").contains("at least 8"));
    assert!(detail(&answer, "/device/dip/vapour_reset").contains("at most 1"));
}

/// One list of bounds: what the schema refuses and what the device room refuses are the same.
#[tokio::test]
async fn the_bounds_of_the_schema_are_those_of_the_device_room() {
    use dipcast::service::records::ALL_BOUNDS;
    let document = get(&service(), "/openapi.json").await.json();
    let of = |schema: &str, field: &str| document["components"]["schemas"][schema]["properties"][field].clone();
    let named = [
        ("tube/bore_mm", "Tube"),
        ("balance/tip_volume_ml", "TipVolumeBalance"),
        ("balance/extra/*/mass_g", "ExtraMass"),
        ("lamp/absorbed_w", "Lamp"),
        ("max_temperature_c", "Device"),
        ("head/felt/capacity_g", "Felt"),
    ];
    for (path, schema) in named {
        let bound = ALL_BOUNDS.iter().find(|bound| bound.field == path).unwrap();
        let field = of(schema, path.rsplit('/').next().unwrap());
        assert_eq!(field["minimum"].as_f64(), Some(bound.minimum), "{path}");
        assert_eq!(field["maximum"].as_f64(), Some(bound.maximum), "{path}");
    }
}

#[tokio::test]
async fn a_device_that_cannot_work_is_refused_with_every_reason() {
    let asked = spoiled(&[
        ("/device/tube/bore_mm", json!(1.0)),
        ("/device/evaporant/strength_abv_pct", json!(40)),
    ]);
    let answer = predict(&service(), &asked).await;
    refused(&answer, 422, "invalid_device");
    let pointers: Vec<String> = answer.faults().into_iter().map(|(pointer, _)| pointer).collect();
    assert!(pointers.contains(&"/device/tube/bore_mm".to_owned()), "{pointers:?}");
    assert!(
        pointers.contains(&"/device/evaporant/strength_abv_pct".to_owned()),
        "{pointers:?}"
    );
}

#[tokio::test]
async fn faults_of_device_and_weather_are_told_together() {
    let humidity: Vec<f64> = vec![0.5; 24];
    let asked = spoiled(&[
        ("/device/tube/bore_mm", json!(1.0)),
        ("/weather/relative_humidity_pct", json!(humidity)),
    ]);
    let answer = predict(&service(), &asked).await;
    refused(&answer, 422, "invalid_request");
    let pointers: Vec<String> = answer.faults().into_iter().map(|(pointer, _)| pointer).collect();
    assert!(
        pointers.iter().any(|pointer| pointer.starts_with("/device")),
        "{pointers:?}"
    );
    assert!(
        pointers.iter().any(|pointer| pointer.starts_with("/weather")),
        "{pointers:?}"
    );
}

#[tokio::test]
async fn exactly_one_device_is_wanted() {
    let router = service();
    let mut none = request(2);
    none.as_object_mut().unwrap().remove("device_example");
    assert!(
        predict(&router, &none).await.problem()["detail"]
            .as_str()
            .unwrap()
            .contains("neither")
    );
    let both = spoiled(&[("/device_example", json!("shelf-180"))]);
    assert!(
        predict(&router, &both).await.problem()["detail"]
            .as_str()
            .unwrap()
            .contains("both")
    );
    let mut unknown = request(2);
    unknown["device_example"] = json!("shelf-200");
    let answer = predict(&router, &unknown).await;
    refused(&answer, 422, "invalid_request");
    assert!(
        detail(&answer, "/device_example").contains("shelf-180"),
        "the known names are told"
    );
}

#[tokio::test]
async fn options_that_contradict_or_do_not_exist_point_to_their_place() {
    let asked = spoiled(&[
        ("/options/time_zone", json!("Europe/Nowhere")),
        (
            "/options/opening_hours",
            json!({"weekly": {"mon": [["09:00", "12:00"], ["11:00", "13:00"]]},
                                          "exceptions": [{"date": "2026-02-30", "intervals": []}]}),
        ),
        ("/options/ranges", json!({"cup_factor": {"low": 1.2, "high": 0.8}})),
        (
            "/device/lamp",
            json!({"on": "body", "absorbed_w": 1, "lit": {"weekly": {"sun": [["25:00", "26:00"]]}}}),
        ),
    ]);
    let answer = predict(&service(), &asked).await;
    refused(&answer, 422, "invalid_request");
    for pointer in [
        "/options/time_zone",
        "/options/opening_hours/weekly/mon/1",
        "/options/opening_hours/exceptions/0/date",
        "/options/ranges/cup_factor",
        "/device/lamp/lit/weekly/sun/0",
    ] {
        detail(&answer, pointer);
    }
}

#[tokio::test]
async fn forms_with_missing_unknown_or_repeated_parts_are_refused() {
    let router = service();
    let asked = crate::support::upload(Value::Null).to_string();
    let (asked, file) = (asked.as_bytes(), b"time\n".as_slice());
    let wrong: [&[(&str, &[u8])]; 4] = [
        &[("weather", file)],
        &[("request", asked), ("wether", file)],
        &[("request", asked), ("request", asked), ("weather", file)],
        &[],
    ];
    for parts in wrong {
        let answer = post_form(&router, "/v1/predictions", parts).await;
        refused(&answer, 400, "invalid_multipart");
    }
    let no_file = post_form(&router, "/v1/predictions", &[("request", asked)]).await;
    assert!(detail(&no_file, "/weather/kind").contains("the part weather"));
    let inline = request(2).to_string();
    let two = post_form(
        &router,
        "/v1/predictions",
        &[("request", inline.as_bytes()), ("weather", file)],
    )
    .await;
    assert!(detail(&two, "/weather/kind").contains("inline"));
}

#[tokio::test]
async fn a_form_that_breaks_off_or_has_no_boundary_is_refused() {
    use axum::http::Request;
    let router = service();
    let send = |content_type: &'static str, body: &'static str| {
        let request = Request::post("/v1/predictions").header("content-type", content_type);
        request.body(axum::body::Body::from(body)).unwrap()
    };
    let cut = send(
        "multipart/form-data; boundary=x",
        "--x\r\nContent-Disposition: form-data; name=\"request\"\r\n\r\n{",
    );
    refused(&crate::support::ask(&router, cut).await, 400, "invalid_multipart");
    let without = send("multipart/form-data", "--x--\r\n");
    refused(&crate::support::ask(&router, without).await, 400, "invalid_multipart");
}

#[tokio::test]
async fn a_body_compressed_as_a_whole_is_refused_in_words() {
    let request = axum::http::Request::post("/v1/predictions")
        .header("content-type", "application/json")
        .header("content-encoding", "gzip")
        .body(axum::body::Body::from(vec![0x1f, 0x8b]));
    let answer = crate::support::ask(&service(), request.unwrap()).await;
    refused(&answer, 415, "unsupported_media_type");
    assert!(answer.problem()["detail"].as_str().unwrap().contains("compressed"));
}
