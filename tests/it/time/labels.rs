//! What a value stands for is carried from the reading to the hour, and honoured there.

use dipcast::http::v1::weather::InlineWeather;
use dipcast::intake::csv::{Layout, Limits, read};
use dipcast::model::weather::zone::{Zone, wall_clock_text};
use dipcast::model::weather::{HourlySeries, Label, RawReadings, RegulariseOptions, Stamp, regularise};
use serde_json::{Value, json};

use super::{answered, room};
use crate::support::{post_form, upload};

const START_UNIX_S: i64 = 1_781_049_600; // 2026-06-10T00:00:00Z

fn laid(raw: RawReadings) -> HourlySeries {
    regularise(raw, &RegulariseOptions::default()).unwrap_or_else(|faults| panic!("{faults:?}"))
}

/// A made-up day: irradiance by the hour of the clock, and air that follows it.
fn day_of_sun() -> RawReadings {
    let sun = |hour: usize| 600.0 * ((hour as f64 - 6.0) / 12.0 * std::f64::consts::PI).sin().max(0.0);
    RawReadings {
        air_temp_k: (0..24).map(|hour| 288.0 + sun(hour) / 100.0).collect(),
        relative_humidity: Some(vec![0.5; 24]),
        shortwave_w_m2: Some((0..24).map(sun).collect()),
        ..RawReadings::hourly(START_UNIX_S, 24)
    }
}

/// Many services send air at the instant and irradiance as the mean of the hour before it: the mean of 11 to 12 stands
/// beside the air of 12 and belongs to the hour that begins at 11.
#[test]
fn irradiance_of_the_preceding_hour_moves_to_the_hour_it_fell_in() {
    let raw = day_of_sun();
    let read = raw.shortwave_w_m2.clone().unwrap();
    let series = laid(RawReadings {
        shortwave_label: Some(Label::MeanOfPrecedingHour),
        ..raw.clone()
    });
    assert_eq!(
        (series.stamp, series.shortwave_stamp),
        (Stamp::Instant, Stamp::MeanOfHour)
    );
    assert_eq!((series.start_unix_s, series.temp_k.len()), (START_UNIX_S, 24));
    assert_eq!(series.temp_k, laid(raw).temp_k);
    let hours = series.shortwave_w_m2.unwrap();
    assert_eq!(hours[..23], read[1..]);
    assert!(hours[23].is_nan(), "no reading tells of the last hour");
    let said = series.assumptions.iter().find(|said| said.what == "irradiance");
    assert!(said.unwrap().value.contains("preceding"), "{said:?}");
}

#[test]
fn irradiance_labelled_as_the_rest_stays_with_it() {
    for label in [Label::Instant, Label::MeanOfFollowingHour, Label::MeanOfPrecedingHour] {
        let raw = RawReadings { label, ..day_of_sun() };
        let read = raw.shortwave_w_m2.clone().unwrap();
        let series = laid(raw);
        assert_eq!(series.shortwave_w_m2.unwrap(), read, "{label:?}");
        assert_eq!(series.shortwave_stamp, series.stamp);
        assert!(series.assumptions.iter().all(|said| said.what != "irradiance"));
    }
}

/// Ten-minute means, each labelled by its end: an hour is the mean of the six that end in it.
#[test]
fn ten_minute_means_of_the_preceding_interval_fill_their_hour() {
    let count = 18;
    let raw = RawReadings {
        time_unix_s: (1..=count).map(|n| START_UNIX_S + 600 * n).collect(),
        row: (1..=count as u32).collect(),
        label: Label::MeanOfPrecedingHour,
        air_temp_k: vec![290.0; count as usize],
        relative_humidity: Some(vec![0.5; count as usize]),
        shortwave_w_m2: Some((1..=count).map(|n| n as f64).collect()),
        ..RawReadings::default()
    };
    let series = laid(raw);
    assert_eq!(series.start_unix_s, START_UNIX_S);
    assert_eq!(series.shortwave_w_m2.unwrap(), [3.5, 9.5, 15.5]);
}

/// In a zone half an hour off the hours run from half past, and so does the hour before an instant.
#[test]
fn half_hour_zones_keep_the_preceding_hour_too() {
    let raw = day_of_sun();
    let read = raw.shortwave_w_m2.clone().unwrap();
    let series = laid(RawReadings {
        time_unix_s: raw.time_unix_s.iter().map(|time| time + 1800).collect(),
        shortwave_label: Some(Label::MeanOfPrecedingHour),
        ..raw
    });
    assert_eq!(series.start_unix_s, START_UNIX_S + 1800);
    assert_eq!(series.shortwave_w_m2.unwrap()[..23], read[1..]);
}

#[test]
fn the_request_carries_both_labels() {
    let sent = |more: Value| {
        let mut weather = json!({"kind": "inline", "start": "2026-06-10T00:00:00Z", "air_temperature_c": [20, 21, 22],
                                 "relative_humidity_pct": [50, 50, 50], "shortwave_w_m2": [0, 100, 300]});
        weather
            .as_object_mut()
            .unwrap()
            .extend(more.as_object().unwrap().clone());
        serde_json::from_value::<InlineWeather>(weather)
            .unwrap()
            .readings()
            .unwrap()
    };
    let plain = sent(json!({}));
    assert_eq!((plain.label, plain.shortwave_label), (Label::Instant, None));
    let mixed = sent(json!({"label": "instant", "shortwave_label": "mean_of_preceding_hour"}));
    assert_eq!(
        (mixed.label, mixed.shortwave_label),
        (Label::Instant, Some(Label::MeanOfPrecedingHour))
    );
    assert_eq!(laid(mixed).shortwave_w_m2.unwrap()[..2], [100.0, 300.0]);
    let other = sent(json!({"label": "mean_of_preceding_hour", "shortwave_label": "instant"}));
    let series = laid(other);
    assert_eq!(
        (series.stamp, series.shortwave_stamp),
        (Stamp::MeanOfHour, Stamp::Instant)
    );
    assert_eq!(series.start_unix_s, START_UNIX_S - 3600);
}

/// A label says which hour a mean is of: the answer's hours begin an hour earlier where it is labelled by its end.
#[tokio::test]
async fn hours_of_the_answer_begin_where_the_label_says() {
    for (label, first) in [
        ("instant", "2026-06-10T12:00:00Z"),
        ("mean_of_following_hour", "2026-06-10T12:00:00Z"),
        ("mean_of_preceding_hour", "2026-06-10T11:00:00Z"),
    ] {
        let mut request = room("2026-06-10T12:00:00Z", 6, "UTC");
        request["weather"]["label"] = label.into();
        let found = answered(&request).await;
        assert_eq!(found["hours"]["time"][0], first, "{label}");
        assert_eq!(found["hours"]["time"].as_array().unwrap().len(), 6);
        assert_eq!(found["summary"]["from"], first);
    }
}

/// One and the same air, told by its instants and by its hourly means, gives the same cycles; means taken for instants are
/// half an hour early and do not.
#[tokio::test]
async fn instants_and_means_of_the_same_air_agree() {
    let turn = std::f64::consts::TAU / 24.0;
    // The mean of a sine over an hour is the difference of its cosines at the ends.
    let instant = |hour: f64, phase: f64| (turn * (hour - phase)).sin();
    let mean = |hour: f64, phase: f64| ((turn * (hour - phase)).cos() - (turn * (hour + 1.0 - phase)).cos()) / turn;
    let asked = |label: &str, wave: &dyn Fn(f64, f64) -> f64| {
        let mut request = room("2026-06-10T00:00:00Z", 96, "UTC");
        let column = |base: f64, swing: f64, phase: f64| -> Vec<f64> {
            (0..96)
                .map(|hour| base + swing * wave(f64::from(hour), phase))
                .collect()
        };
        request["weather"]["air_temperature_c"] = json!(column(20.0, 4.0, 9.0));
        request["weather"]["relative_humidity_pct"] = json!(column(50.0, 15.0, 21.0));
        request["weather"]["label"] = label.into();
        request
    };
    let cycles = async |request: Value| -> Vec<f64> {
        serde_json::from_value(answered(&request).await["hours"]["cycles"].clone()).unwrap()
    };
    let instants = cycles(asked("instant", &instant)).await;
    let means = cycles(asked("mean_of_following_hour", &mean)).await;
    let mistaken = cycles(asked("instant", &mean)).await;
    // The first and the last hour have one neighbour only; there a mean is held level.
    let worst = |other: &[f64]| {
        (2..94)
            .map(|hour| (other[hour] / instants[hour] - 1.0).abs())
            .fold(0.0, f64::max)
    };
    assert!(worst(&means) < 0.02, "{}", worst(&means));
    assert!(worst(&mistaken) > 0.05, "{}", worst(&mistaken));
}

/// Hourly readings of an ordinary room as a file in local time.
fn local_file(zone: &str, start_unix_s: i64, hours: i64) -> (String, Value) {
    let clock = Zone::parse(zone).unwrap();
    let mut file = String::from("Time;Temp;RH\n");
    for hour in 0..hours {
        let wall = wall_clock_text(clock.wall_clock_s(start_unix_s + 3600 * hour));
        file += &format!("{wall};{};{}\n", 20.0 + 0.1 * (hour % 24) as f64, 40 + hour % 24);
    }
    let layout = json!({
        "dialect": {"delimiter": ";"},
        "time": {"columns": ["Time"], "format": "%Y-%m-%d %H:%M", "zone": zone, "label": "mean_of_preceding_hour"},
        "columns": {"air_temperature": {"column": "Temp", "unit": "Cel"}, "relative_humidity": {"column": "RH", "unit": "%"}},
    });
    (file, layout)
}

/// A file in local time and the same readings sent as instants of UTC are one and the same series, also where the clock
/// shows an hour twice, leaves one out, or leaves a day out.
#[tokio::test]
async fn a_file_in_local_time_gives_the_hours_of_utc() {
    for (zone, start) in [
        ("America/New_York", "2026-10-31T00:00:00Z"),
        ("America/New_York", "2026-03-07T00:00:00Z"),
        ("Africa/Casablanca", "2026-02-14T00:00:00Z"),
        ("Africa/Casablanca", "2026-03-21T00:00:00Z"),
        ("Pacific/Apia", "2011-12-29T00:00:00Z"),
        ("Asia/Kolkata", "2026-03-07T00:30:00Z"),
        ("Australia/Adelaide", "2026-04-04T00:30:00Z"),
    ] {
        let start_unix_s = start.parse::<chrono::DateTime<chrono::Utc>>().unwrap().timestamp();
        let (file, layout) = local_file(zone, start_unix_s, 72);
        let mut request = upload(layout);
        request["options"]["time_zone"] = zone.into();
        let parts = [("request", request.to_string()), ("weather", file)];
        let parts: Vec<(&str, &[u8])> = parts.iter().map(|(name, text)| (*name, text.as_bytes())).collect();
        let answer = post_form(&super::SERVICE, "/v1/predictions", &parts).await;
        assert_eq!(answer.status, 200, "{zone} {start}: {}", answer.text());

        let mut inline = room(start, 72, zone);
        let column = |value: fn(i64) -> f64| (0..72).map(value).collect::<Vec<f64>>();
        inline["weather"]["air_temperature_c"] = json!(column(|hour| 20.0 + 0.1 * (hour % 24) as f64));
        inline["weather"]["relative_humidity_pct"] = json!(column(|hour| 40.0 + (hour % 24) as f64));
        inline["weather"]["label"] = "mean_of_preceding_hour".into();
        let (by_file, by_instants) = (answer.json(), answered(&inline).await);
        assert_eq!(by_file["hours"]["time"], by_instants["hours"]["time"], "{zone} {start}");
        assert_eq!(
            by_file["hours"]["cycles"], by_instants["hours"]["cycles"],
            "{zone} {start}"
        );
    }
}

/// Lord Howe repeats half an hour, of which an hourly file holds one reading: it cannot be told which, so it is said.
#[tokio::test]
async fn a_single_reading_in_a_repeated_half_hour_is_flagged() {
    let start_unix_s = 1_775_260_800; // 2026-04-04T00:00:00Z
    let (file, layout) = local_file("Australia/Lord_Howe", start_unix_s, 72);
    let request = upload(layout).to_string();
    let parts: [(&str, &[u8]); 2] = [("request", request.as_bytes()), ("weather", file.as_bytes())];
    let answer = post_form(&super::SERVICE, "/v1/predictions", &parts).await.json();
    let flags = answer["weather"]["flags"].as_array().unwrap();
    let said = flags.iter().find(|flag| flag["code"] == "repeated_hour_once").unwrap();
    // Line 17 holds the reading of 15:00Z on the first day: 01:30 there, for the second time.
    assert_eq!(said["rows"], json!([17]));
    assert_eq!(answer["hours"]["time"].as_array().unwrap().len(), 72);
}

/// A layout carries a label of its own for the irradiance: air at the hour beside the mean of the hour before it.
#[test]
fn a_layout_carries_both_labels() {
    let layout: Layout = serde_json::from_value(json!({
        "time": {"columns": ["Time"], "zone": "Asia/Kolkata", "format": "%Y-%m-%d %H:%M", "label": "instant",
                 "shortwave_label": "mean_of_preceding_hour"},
        "columns": {"air_temperature": {"column": "Temp", "unit": "Cel"}, "relative_humidity": {"column": "RH", "unit": "%"},
                    "shortwave": {"column": "Sun", "unit": "W/m2"}},
    }))
    .unwrap();
    let file = "Time,Temp,RH,Sun\n2026-06-10 10:00,30,40,500\n2026-06-10 11:00,31,39,600\n2026-06-10 12:00,32,38,700\n";
    let series = laid(read(file.as_bytes(), Some(&layout), &Limits::default()).unwrap());
    assert_eq!(
        (series.stamp, series.shortwave_stamp),
        (Stamp::Instant, Stamp::MeanOfHour)
    );
    // Ten in the morning there is 04:30Z.
    assert_eq!(series.start_unix_s, START_UNIX_S + 4 * 3600 + 1800);
    assert_eq!(series.shortwave_w_m2.unwrap()[..2], [600.0, 700.0]);
}
