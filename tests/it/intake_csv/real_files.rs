//! The committed real series, read with one object of hints at most: the same readings as by their layouts in full.

use dipcast::intake::csv::{Hints, Limits, read, read_with_hints};
use dipcast::model::weather::RawReadings;
use serde_json::{Value, json};

use super::layout;

fn by_hints(file: &str, hints: Value) -> RawReadings {
    let bytes = std::fs::read(crate::data(file)).unwrap();
    let hints: Hints = serde_json::from_value(hints).unwrap();
    read_with_hints(&bytes, &hints, &Limits::default()).unwrap_or_else(|faults| panic!("{file}: {faults:#?}"))
}

/// Everything the layout in full reads; what looking finds besides is left aside.
fn same_as_by_layout(file: &str, name: &str, hints: Value) {
    let bytes = std::fs::read(crate::data(file)).unwrap();
    let full = read(&bytes, Some(&layout(name)), &Limits::default()).unwrap();
    let found = by_hints(file, hints);
    assert_eq!(
        (found.len(), &found.time_unix_s, &found.row),
        (full.len(), &full.time_unix_s, &full.row),
        "{name}"
    );
    let same = |found: &[f64], full: &[f64]| {
        found
            .iter()
            .zip(full)
            .all(|(a, b)| a.is_nan() && b.is_nan() || (a - b).abs() < 1e-9 * b.abs().max(1.0))
    };
    assert!(same(&found.air_temp_k, &full.air_temp_k), "{name}");
    for (found, full) in [
        (&found.relative_humidity, &full.relative_humidity),
        (&found.dew_point_k, &full.dew_point_k),
        (&found.pressure_pa, &full.pressure_pa),
        (&found.wind_speed_m_s, &full.wind_speed_m_s),
        (&found.shortwave_w_m2, &full.shortwave_w_m2),
    ] {
        let Some(full) = full else { continue };
        assert!(found.as_ref().is_some_and(|found| same(found, full)), "{name}");
    }
    assert_eq!(
        (found.label, found.pressure_is_sea_level),
        (full.label, full.pressure_is_sea_level),
        "{name}"
    );
}

#[test]
fn newark() {
    let hints = json!({"rows": {"column": "origin", "equals": "EWR"}, "label": "instant",
                       "columns": {"air_temperature": {"unit": "°F"}, "sea_level_pressure": {"column": "pressure"},
                                   "wind_speed": {"unit": "mph"}}});
    same_as_by_layout("newark_laguardia_2013.csv", "newark", hints);
}

#[test]
fn lincoln() {
    let hints = json!({"rows": {"column": "REPORT_TYPE", "equals": "FM-15"}, "zone": "-06:00", "label": "instant",
                       "columns": {"air_temperature": {"column": "HourlyDryBulbTemperature", "unit": "°C"},
                                   "wind_speed": {"unit": "m/s"}}});
    same_as_by_layout("lincoln_2023_jan_feb.csv", "lincoln", hints);
}

#[test]
fn sand_point_needs_no_hints() {
    same_as_by_layout("sand_point_typical_year.csv", "sand_point", json!({}));
}

#[test]
fn miami_as_columns_needs_its_zone() {
    same_as_by_layout(
        "miami_typical_year.csv",
        "miami",
        json!({"zone": "-05:00", "label": "mean_of_preceding_hour"}),
    );
}

#[test]
fn the_belgian_house_inside_and_outside() {
    for (name, number) in [("belgian_room", "1"), ("belgian_outdoors", "6")] {
        let hints = json!({"zone": "+01:00", "label": "mean_of_following_hour",
                           "columns": {"air_temperature": {"column": format!("T{number}"), "unit": "°C"},
                                       "relative_humidity": {"column": format!("RH_{number}"), "unit": "%"}}});
        same_as_by_layout("belgian_house_2016.csv", name, hints);
    }
}

/// The clocks of Brussels left out 02:00 on 27 March 2016; the logger has it.
#[test]
fn the_belgian_logger_is_told_by_hints_too() {
    let bytes = std::fs::read(crate::data("belgian_house_2016.csv")).unwrap();
    let hints = json!({"zone": "Europe/Brussels",
                       "columns": {"air_temperature": {"column": "T1", "unit": "°C"},
                                   "relative_humidity": {"column": "RH_1", "unit": "%"}}});
    let faults = read_with_hints(&bytes, &serde_json::from_value(hints).unwrap(), &Limits::default()).unwrap_err();
    assert_eq!((faults[0].code, faults[0].row), ("nonexistent_hour", Some(1811)));
    assert!(
        faults[0].detail.contains("\"hints\": {\"zone\":\"+01:00\"}"),
        "{}",
        faults[0]
    );
}

/// Hours of a year without the year, and values scaled to 0..1: `Jan,1,0,0.24,0.81,0` is 24 of 47 parts above -8 °C.
#[test]
fn a_day_of_the_year_without_its_year_needs_the_year_once() {
    let text = "mnth,day,hr,temp,hum,windspeed\nJan,1,0,0.24,0.81,0\nDec,365,23,0.36,0.66,0.1343\n";
    let layout = json!({"time": {"columns": ["day", "hr"], "format": "%j %H", "zone": "America/New_York", "year": 2011},
                        "columns": {"air_temperature": {"column": "temp", "unit": "°C", "scale": 47, "offset": -8},
                                    "relative_humidity": {"column": "hum", "unit": "fraction"},
                                    "wind_speed": {"column": "windspeed", "unit": "km/h", "scale": 67}}});
    let raw = read(
        text.as_bytes(),
        Some(&serde_json::from_value(layout.clone()).unwrap()),
        &Limits::default(),
    )
    .unwrap();
    assert!((raw.air_temp_k[0] - (273.15 + 0.24 * 47.0 - 8.0)).abs() < 1e-9);
    assert_eq!(
        dipcast::model::weather::zone::instant_text(raw.time_unix_s[1]),
        "2012-01-01T04:00:00Z"
    );
    let mut without = layout;
    without["time"].as_object_mut().unwrap().remove("year");
    let faults = read(
        text.as_bytes(),
        Some(&serde_json::from_value(without).unwrap()),
        &Limits::default(),
    )
    .unwrap_err();
    assert_eq!(
        (faults[0].column.as_deref(), faults[0].code),
        (Some("layout/time/year"), "missing")
    );
}
