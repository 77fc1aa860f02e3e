//! What services and networks do to an answer: each case ends in a right series or in a clear problem, and in no more
//! questions than allowed.

use serde_json::{Value, json};

use super::asking::{config, fetched, june, order, weather};
use super::bodies::{JUNE, NOW, celsius, met_norway, nasa_power, open_meteo};
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
async fn series(source: &str, replies: Vec<Reply>, questions: usize) -> FetchedWeather {
    let (came, seen) = asked(source, replies).await;
    assert_eq!(seen, questions, "{came:?}");
    came.unwrap()
}

/// The problem, which must hold these words, after so many questions.
async fn problem(source: &str, replies: Vec<Reply>, questions: usize, words: &str) -> SourceTrouble {
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
fn changed(pointer: &str, value: Value) -> Reply {
    let mut body = open_meteo(JUNE, 48);
    *body.pointer_mut(pointer).unwrap_or_else(|| panic!("{pointer}")) = value;
    Reply::json(body.to_string())
}

fn good() -> Reply {
    Reply::json(open_meteo(JUNE, 48).to_string())
}

fn near(found: f64, expected: f64) {
    assert!(
        (found - expected).abs() < 1e-6 * expected.abs().max(1.0),
        "{found} is not {expected}"
    );
}

#[tokio::test]
async fn a_plain_answer_comes_in_si_with_its_place() {
    let came = series("open_meteo", vec![good()], 1).await;
    let raw = &came.readings;
    assert_eq!((raw.len(), raw.time_unix_s[0]), (48, JUNE));
    near(raw.air_temp_k[5], celsius(5) + 273.15);
    near(raw.relative_humidity.as_ref().unwrap()[5], 0.5);
    near(raw.dew_point_k.as_ref().unwrap()[5], celsius(5) + 263.15);
    near(raw.pressure_pa.as_ref().unwrap()[5], 100_000.0);
    near(raw.wind_speed_m_s.as_ref().unwrap()[5], 2.0);
    let served = &came.provenance.served;
    assert_eq!((served.at.latitude_deg, served.elevation_m), (50.05, Some(120.0)));
    assert!(
        (came.provenance.distance_km() - 6.6).abs() < 0.3,
        "{}",
        came.provenance.distance_km()
    );
}

/// Labelled by the end of its hour: the value beside 06:00 is that of 05:00 to 06:00.
#[tokio::test]
async fn irradiance_of_the_preceding_hour_lands_in_its_own() {
    let came = series("open_meteo", vec![good()], 1).await;
    near(came.readings.shortwave_w_m2.as_ref().unwrap()[5], 6.0);
}

#[tokio::test]
async fn nulls_in_the_tail_are_missing_hours() {
    let mut body = open_meteo(JUNE, 48);
    for name in ["temperature_2m", "relative_humidity_2m", "dew_point_2m"] {
        (40..48).for_each(|hour| body["hourly"][name][hour] = Value::Null);
    }
    let came = series("open_meteo", vec![Reply::json(body.to_string())], 1).await;
    assert!(came.readings.air_temp_k[39] > 0.0 && came.readings.air_temp_k[40].is_nan());
    assert_eq!(came.provenance.stretches[0].hours_missing, 8);
}

#[tokio::test]
async fn a_list_of_one_place_is_that_place_and_a_list_of_two_is_not() {
    let body = open_meteo(JUNE, 48);
    series("open_meteo", vec![Reply::json(json!([body]).to_string())], 1).await;
    problem(
        "open_meteo",
        vec![Reply::json(json!([body, body]).to_string())],
        1,
        "several places",
    )
    .await;
}

#[tokio::test]
async fn units_are_those_stated() {
    let mph = series(
        "open_meteo",
        vec![changed("/hourly_units/wind_speed_10m", json!("mp/h"))],
        1,
    )
    .await;
    near(mph.readings.wind_speed_m_s.unwrap()[0], 2.0 * 0.44704);
    let fahrenheit = series(
        "open_meteo",
        vec![changed("/hourly_units/temperature_2m", json!("°F"))],
        1,
    )
    .await;
    near(fahrenheit.readings.air_temp_k[0], (celsius(0) - 32.0) / 1.8 + 273.15);
    problem(
        "open_meteo",
        vec![changed("/hourly_units/temperature_2m", json!("furlong"))],
        1,
        "furlong",
    )
    .await;
    problem(
        "open_meteo",
        vec![changed("/hourly_units/surface_pressure", json!("m/s"))],
        1,
        "no unit of station_pressure",
    )
    .await;
    problem(
        "open_meteo",
        vec![changed("/hourly_units", json!({"time": "unixtime"}))],
        1,
        "no unit is stated",
    )
    .await;
}

#[tokio::test]
async fn local_time_and_written_times_are_refused() {
    let local = problem(
        "open_meteo",
        vec![changed("/utc_offset_seconds", json!(3600))],
        1,
        "local",
    )
    .await;
    assert_eq!(local.retry_after_s, None, "asking again does not help");
    problem(
        "open_meteo",
        vec![changed("/hourly_units/time", json!("iso8601"))],
        1,
        "unix seconds",
    )
    .await;
    problem(
        "open_meteo",
        vec![changed("/hourly/time/3", json!("2025-06-01T03:00"))],
        1,
        "not what it is known to answer",
    )
    .await;
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

#[tokio::test]
async fn another_place_is_refused() {
    problem(
        "open_meteo",
        vec![changed("/latitude", json!(8.0))],
        1,
        "km from the place asked for",
    )
    .await;
    problem(
        "open_meteo",
        vec![changed("/latitude", json!(500.0))],
        1,
        "not on Earth",
    )
    .await;
    let mut swapped = nasa_power(JUNE, 48);
    swapped["geometry"]["coordinates"] = json!([50.0, 8.0, 210.5]);
    problem(
        "nasa_power",
        vec![Reply::json(swapped.to_string())],
        1,
        "km from the place asked for",
    )
    .await;
}

#[tokio::test]
async fn absent_columns_are_told_or_done_without() {
    let without = |name: &str| {
        let mut body = open_meteo(JUNE, 48);
        body["hourly"].as_object_mut().unwrap().remove(name);
        Reply::json(body.to_string())
    };
    problem(
        "open_meteo",
        vec![without("temperature_2m")],
        1,
        "temperature_2m is missing",
    )
    .await;
    problem("open_meteo", vec![without("time")], 1, "time is missing").await;
    let still = series("open_meteo", vec![without("wind_speed_10m")], 1).await;
    assert!(still.readings.wind_speed_m_s.is_none());
    let dew_alone = series("open_meteo", vec![without("relative_humidity_2m")], 1).await;
    assert!(dew_alone.readings.relative_humidity.is_none() && dew_alone.readings.dew_point_k.is_some());
    let mut dry = nasa_power(JUNE, 48);
    let parameter = dry["properties"]["parameter"].as_object_mut().unwrap();
    parameter.remove("RH2M");
    parameter.remove("T2MDEW");
    problem(
        "nasa_power",
        vec![Reply::json(dry.to_string())],
        1,
        "neither RH2M nor T2MDEW",
    )
    .await;
}

#[tokio::test]
async fn columns_of_another_length_or_kind_are_refused() {
    problem(
        "open_meteo",
        vec![changed("/hourly/dew_point_2m", json!([1.0, 2.0]))],
        1,
        "2 values for 48 times",
    )
    .await;
    problem(
        "open_meteo",
        vec![changed("/hourly/temperature_2m/7", json!("warm"))],
        1,
        "not what it is known",
    )
    .await;
    problem(
        "open_meteo",
        vec![changed("/hourly", json!(7))],
        1,
        "not what it is known",
    )
    .await;
}

#[tokio::test]
async fn fill_values_are_missing_hours() {
    let mut body = nasa_power(JUNE, 48);
    for name in ["T2M", "RH2M", "T2MDEW"] {
        body["properties"]["parameter"][name]["2025060213"] = json!(-999.0);
    }
    let came = series("nasa_power", vec![Reply::json(body.to_string())], 1).await;
    assert!(came.readings.air_temp_k[37].is_nan() && !came.readings.air_temp_k[36].is_nan());
    body["header"]["fill_value"] = json!(-99.0);
    let kept = series("nasa_power", vec![Reply::json(body.to_string())], 1).await;
    near(kept.readings.air_temp_k[37], -999.0 + 273.15);
}

#[tokio::test]
async fn hours_in_any_order_and_kilopascal_are_read() {
    let mut body = nasa_power(JUNE, 48);
    let hours = body["properties"]["parameter"]["T2M"].as_object().unwrap().clone();
    let backwards: serde_json::Map<String, Value> = hours.into_iter().rev().collect();
    let text = body["properties"]["parameter"]["T2M"].to_string();
    let pairs: Vec<String> = backwards
        .iter()
        .rev()
        .map(|(hour, value)| format!("\"{hour}\":{value}"))
        .collect();
    let unsorted = body.to_string().replace(&text, &format!("{{{}}}", pairs.join(",")));
    assert!(unsorted.contains(&pairs[0]));
    body = serde_json::from_str(&unsorted).unwrap();
    assert_eq!(body["properties"]["parameter"]["T2M"]["2025060100"], json!(10.0));
    let came = series("nasa_power", vec![Reply::json(unsorted)], 1).await;
    near(came.readings.air_temp_k[0], 283.15);
    near(came.readings.air_temp_k[47], celsius(47) + 273.15);
    near(came.readings.pressure_pa.unwrap()[0], 98_500.0);
    near(came.readings.shortwave_w_m2.unwrap()[5], 5.0);
    assert_eq!(came.elevation_m, Some(210.5));
}

#[tokio::test]
async fn local_solar_time_and_odd_hours_are_refused() {
    let mut body = nasa_power(JUNE, 48);
    body["header"]["time_standard"] = json!("LST");
    problem(
        "nasa_power",
        vec![Reply::json(body.to_string())],
        1,
        "UTC was asked for",
    )
    .await;
    let mut body = nasa_power(JUNE, 48);
    body["properties"]["parameter"]["T2M"]["2025-06-01"] = json!(1.0);
    problem("nasa_power", vec![Reply::json(body.to_string())], 1, "is no hour").await;
}

#[tokio::test]
async fn a_six_hourly_tail_has_gaps_that_are_filled_later() {
    let body = met_norway(NOW - 1200, 24, 4).to_string();
    let came = series("met_norway", vec![Reply::json(body)], 1).await;
    let known = |hour: usize| !came.readings.air_temp_k[hour].is_nan();
    assert!(known(23) && !known(24) && known(29) && known(35) && known(47));
    assert_eq!((came.gap_hours, came.readings.pressure_is_sea_level), (Some(6), true));
    assert!(came.readings.shortwave_w_m2.is_none());
    assert_eq!(came.elevation_m, Some(300.0));
}

#[tokio::test]
async fn an_absent_key_is_a_missing_value() {
    let mut body = met_norway(NOW - 1200, 60, 0);
    let details = body
        .pointer_mut("/properties/timeseries/3/data/instant/details")
        .unwrap();
    details.as_object_mut().unwrap().remove("air_temperature");
    let came = series("met_norway", vec![Reply::json(body.to_string())], 1).await;
    assert!(came.readings.air_temp_k[3].is_nan() && !came.readings.air_temp_k[4].is_nan());
    body["properties"]["meta"]["units"]["air_temperature"] = json!("kelvin");
    let kelvin = series("met_norway", vec![Reply::json(body.to_string())], 1).await;
    near(kelvin.readings.air_temp_k[0], celsius(0));
}
