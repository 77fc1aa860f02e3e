//! Readings that are wrong, inline and in files.

use serde_json::{Value, json};

use crate::support::{Answer, post_form, predict, predict_file, request, service, upload};

fn refused(answer: &Answer, status: u16, code: &str) {
    assert_eq!(
        (answer.status.as_u16(), answer.code().as_str()),
        (status, code),
        "{}",
        answer.text()
    );
}

/// A day of good readings in the documented form, with some lines changed.
fn file(change: impl Fn(usize, String) -> String) -> Vec<u8> {
    let mut text = "time,air_temperature_c,relative_humidity_pct\n".to_owned();
    for hour in 0..24 {
        let line = format!(
            "2026-01-01T{hour:02}:00:00Z,{:.1},{:.0}",
            20.0 + hour as f64 * 0.1,
            50 + hour % 5
        );
        text.push_str(&change(hour, line));
        text.push('\n');
    }
    text.into_bytes()
}

async fn inline(change: impl Fn(&mut Value)) -> Answer {
    let mut asked = request(24);
    change(&mut asked["weather"]);
    predict(&service(), &asked).await
}

#[tokio::test]
async fn humidity_as_a_fraction_sent_as_per_cent_is_noticed() {
    let answer = inline(|weather| weather["relative_humidity_pct"] = json!(vec![0.45; 24])).await;
    refused(&answer, 422, "invalid_weather");
    let problem = answer.problem();
    assert_eq!(
        problem["errors"][0]["pointer"], "/weather/relative_humidity_pct",
        "{problem}"
    );
    assert!(
        problem["errors"][0]["detail"].as_str().unwrap().contains("fraction"),
        "{problem}"
    );
}

#[tokio::test]
async fn swapped_columns_are_noticed() {
    let answer = inline(|weather| {
        let temperature = weather["air_temperature_c"].clone();
        weather["air_temperature_c"] = weather["relative_humidity_pct"].clone();
        weather["relative_humidity_pct"] = temperature;
    })
    .await;
    refused(&answer, 422, "invalid_weather");
}

#[tokio::test]
async fn a_dew_point_above_the_temperature_is_flagged_or_refused() {
    let one = inline(|weather| {
        let mut dew_points = vec![10.0; 24];
        dew_points[5] = 25.0;
        weather["dew_point_c"] = json!(dew_points);
    })
    .await;
    assert_eq!(one.status, 200, "{}", one.text());
    let flags = one.json()["weather"]["flags"].clone();
    let flag = flags
        .as_array()
        .unwrap()
        .iter()
        .find(|flag| flag["code"].as_str().unwrap().contains("dew_point"));
    assert_eq!(flag.unwrap_or_else(|| panic!("{flags}"))["rows"], json!([6]));
    let all = inline(|weather| weather["dew_point_c"] = json!(vec![30.0; 24])).await;
    refused(&all, 422, "invalid_weather");
}

#[tokio::test]
async fn columns_of_unequal_length_are_named() {
    let answer = inline(|weather| weather["relative_humidity_pct"] = json!([50.0])).await;
    refused(&answer, 422, "invalid_weather");
    assert_eq!(
        answer.problem()["errors"][0]["pointer"],
        "/weather/relative_humidity_pct"
    );
}

#[tokio::test]
async fn no_humidity_and_no_readings_are_refused() {
    let dry = inline(|weather| {
        weather.as_object_mut().unwrap().remove("relative_humidity_pct");
    })
    .await;
    refused(&dry, 422, "invalid_weather");
    let empty = inline(|weather| {
        weather["air_temperature_c"] = json!([]);
        weather["relative_humidity_pct"] = json!([]);
    })
    .await;
    assert!(empty.status.is_client_error(), "{}", empty.text());
    let start = inline(|weather| weather["start"] = json!("2026-01-01 00:00")).await;
    refused(&start, 422, "invalid_request");
}

#[tokio::test]
async fn missing_hours_are_filled_counted_or_refused() {
    let router = service();
    let two_missing = file(|hour, line| {
        if (5..7).contains(&hour) {
            format!("2026-01-01T{hour:02}:00:00Z,,")
        } else {
            line
        }
    });
    let answer = predict_file(&router, &two_missing).await;
    assert_eq!(answer.status, 200, "{}", answer.text());
    assert_eq!(answer.json()["weather"]["hours_filled"], 2);
    let half_missing = file(|hour, line| {
        if hour >= 12 {
            format!("2026-01-01T{hour:02}:00:00Z,,")
        } else {
            line
        }
    });
    refused(&predict_file(&router, &half_missing).await, 422, "invalid_weather");
    let mut asked = upload(Value::Null);
    asked["weather"]["max_unknown_share"] = json!(0.6);
    let asked = asked.to_string();
    let parts = [("request", asked.as_bytes()), ("weather", half_missing.as_slice())];
    let answer = post_form(&router, "/v1/predictions", &parts).await;
    assert_eq!(answer.status, 200, "{}", answer.text());
    assert_eq!(answer.json()["summary"]["stall_hours"]["unknown"], 12.0);
}

#[tokio::test]
async fn repeated_hours_that_contradict_are_refused_by_row() {
    let repeated = file(|hour, line| {
        if hour == 7 {
            line.replace("T07", "T06").replace(",20.7,", ",25.9,")
        } else {
            line
        }
    });
    let answer = predict_file(&service(), &repeated).await;
    refused(&answer, 422, "invalid_weather");
    assert!(
        answer.problem()["errors"][0]["row"].as_u64().is_some(),
        "{}",
        answer.text()
    );
}

#[tokio::test]
async fn days_with_a_clock_change_have_23_and_25_hours() {
    let router = service();
    // Europe/Oslo, 2026: forward on 29 March, back on 25 October (Directive 2000/84/EC: last Sundays).
    for (date, hours) in [("2026-03-29", 23), ("2026-10-25", 25)] {
        let mut text = "t;temp;rh\n".to_owned();
        let mut clock: Vec<usize> = (0..24).collect();
        if hours == 23 {
            clock.remove(2);
        } else {
            clock.insert(3, 2);
        }
        for hour in clock {
            text.push_str(&format!("{date} {hour:02}:00;20,5;50\n"));
        }
        let mut asked = upload(json!({
            "dialect": {"delimiter": ";", "decimal": ","},
            "time": {"columns": ["t"], "format": "%Y-%m-%d %H:%M", "zone": "Europe/Oslo"},
            "columns": {"air_temperature": {"column": "temp", "unit": "°C"}, "relative_humidity": {"column": "rh", "unit": "%"}}
        }));
        asked["options"] = json!({"bands": false, "include": ["days"], "time_zone": "Europe/Oslo"});
        let asked = asked.to_string();
        let parts = [("request", asked.as_bytes()), ("weather", text.as_bytes())];
        let answer = post_form(&router, "/v1/predictions", &parts).await;
        assert_eq!(answer.status, 200, "{}", answer.text());
        let days = answer.json()["days"].clone();
        assert_eq!(
            (days.as_array().unwrap().len(), days[0]["hours"].as_f64()),
            (1, Some(f64::from(hours))),
            "{days}"
        );
    }
}

#[tokio::test]
async fn a_file_of_some_megabytes_is_no_trouble() {
    let mut text = file(|_, line| line);
    // Blank lines are nothing: the file grows without its readings.
    text.resize(3 << 20, b'\n');
    let answer = predict_file(&service(), &text).await;
    assert_eq!(answer.status, 200, "{}", answer.text());
    assert_eq!(answer.json()["weather"]["readings"], 24);
}

#[tokio::test]
async fn files_that_cannot_be_read_are_told_so() {
    let router = service();
    refused(&predict_file(&router, b"").await, 400, "unreadable_weather");
    refused(
        &predict_file(&router, b"\x89PNG\r\n\x1a\n\0\0\0\rIHDR\0\0\x01\0").await,
        400,
        "unreadable_weather",
    );
    refused(
        &predict_file(&router, b"\x1f\x8b\x08\0broken").await,
        400,
        "unreadable_weather",
    );
    let header_only = predict_file(&router, b"time,air_temperature_c,relative_humidity_pct\n").await;
    refused(&header_only, 400, "unreadable_weather");
}

#[tokio::test]
async fn an_encoding_that_nothing_states_is_said() {
    let mut text = b"time,air_temperature_c,relative_humidity_pct,Luft\xfcng\n".to_vec();
    text.extend_from_slice(b"2026-01-01T00:00:00Z,20,50,1\n");
    let answer = predict_file(&service(), &text).await;
    assert_eq!(answer.status, 200, "{}", answer.text());
    let said = answer.json()["assumptions"].to_string();
    assert!(said.contains("windows-1252: the file is not UTF-8"), "{said}");
}

#[tokio::test]
async fn faults_of_rows_are_told_by_row_and_column() {
    let answer = predict_file(
        &service(),
        &file(|hour, line| {
            if hour == 3 {
                line.replace(",20.3,", ",warm,")
            } else {
                line
            }
        }),
    )
    .await;
    refused(&answer, 422, "invalid_weather");
    let fault = &answer.problem()["errors"][0];
    assert_eq!(
        (fault["row"].as_u64(), fault["column"].as_str()),
        (Some(5), Some("air_temperature_c")),
        "{fault}"
    );
}

#[tokio::test]
async fn faults_of_the_layout_point_into_the_request() {
    let mut asked = upload(json!({
        "time": {"columns": ["t"], "zone": "Europe/Nowhere"},
        "columns": {"air_temperature": {"column": "temp", "unit": "furlong"}, "relative_humidity": {"column": "rh", "unit": "%"}}
    }));
    asked["options"] = json!({"bands": false});
    let asked = asked.to_string();
    let parts = [("request", asked.as_bytes()), ("weather", b"t,temp,rh\n".as_slice())];
    let answer = post_form(&service(), "/v1/predictions", &parts).await;
    refused(&answer, 422, "invalid_weather");
    let pointers: Vec<String> = answer.faults().into_iter().map(|(pointer, _)| pointer).collect();
    assert_eq!(
        pointers,
        [
            "/weather/layout/time/zone",
            "/weather/layout/columns/air_temperature/unit"
        ]
    );
}
