//! What services put into an answer: each case ends in a right series or in a clear problem.

use serde_json::{Value, json};

use super::bodies::{JUNE, NOW, celsius, met_norway, nasa_power, open_meteo};
use super::scenarios::{changed, good, near, problem, series};
use super::stand_in::Reply;

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
