//! CSV files read as they should be: the committed real series, and one small file in many dresses.

mod layouts;
mod real_files;

use std::io::Write;

use dipcast::intake::csv::{Layout, Limits, OWN_HEADER, read};
use dipcast::model::weather::zone::instant_text;
use dipcast::model::weather::{HourlySeries, RawReadings, RegulariseOptions, WeatherFault, regularise};
use serde_json::{Value, json};

pub fn layout(name: &str) -> Layout {
    let text = std::fs::read_to_string(crate::data(&format!("layouts/{name}.json"))).unwrap();
    serde_json::from_str(&text).unwrap()
}

fn readings(file: &str, layout: &Layout) -> RawReadings {
    let bytes = std::fs::read(crate::data(file)).unwrap();
    read(&bytes, Some(layout), &Limits::default()).unwrap_or_else(|faults| panic!("{file}: {faults:?}"))
}

fn hours(raw: RawReadings, elevation_m: f64) -> HourlySeries {
    let options = RegulariseOptions {
        elevation_m: Some(elevation_m),
        ..Default::default()
    };
    regularise(raw, &options).unwrap_or_else(|faults| panic!("{faults:?}"))
}

fn near(found: f64, expected: f64, tolerance: f64) {
    assert!(
        (found - expected).abs() <= tolerance,
        "found {found}, expected {expected}"
    );
}

fn flagged(series: &HourlySeries, code: &str) -> usize {
    series
        .report
        .flags
        .iter()
        .find(|flag| flag.code == code)
        .map_or(0, |flag| flag.count)
}

/// Values beside the raw lines, read by eye:
/// `EWR,2013,1,1,1,39.02,26.06,59.37,10.357...,1012,2013-01-01T06:00:00Z` (row 2) and
/// `EWR,2013,6,16,22,73.94,64.94,73.49,13.809...,1010.6,2013-06-17T02:00:00Z` (row 4002).
#[test]
fn newark_2013_is_read_with_its_faults() {
    let raw = readings("newark_laguardia_2013.csv", &layout("newark"));
    assert_eq!(raw.len(), 8703);
    assert_eq!((raw.row[0], raw.row[4000]), (2, 4002));
    assert_eq!(instant_text(raw.time_unix_s[4000]), "2013-06-17T02:00:00Z");
    near(raw.air_temp_k[0], 277.05, 1e-9);
    near(raw.air_temp_k[4000], 296.45, 1e-9);
    near(raw.dew_point_k.as_ref().unwrap()[4000], 291.45, 1e-9);
    near(raw.relative_humidity.as_ref().unwrap()[4000], 0.7349, 1e-12);
    near(raw.pressure_pa.as_ref().unwrap()[4000], 101_060.0, 1e-6);
    near(raw.wind_speed_m_s.as_ref().unwrap()[4000], 13.80936 * 0.44704, 1e-9);

    let series = hours(raw, 5.0);
    assert_eq!(instant_text(series.start_unix_s), "2013-01-01T06:00:00Z");
    // 6 h to 23 h UTC of 30 December: 364 days less 6 hours.
    assert_eq!(series.temp_k.len(), 8730);
    assert_eq!(
        series.report.hours_filled + series.report.hours_unknown,
        27 + 1,
        "27 missing hours, one row without values"
    );
    assert_eq!(flagged(&series, "wind_out_of_range"), 1);
    assert_eq!(flagged(&series, "pressure_filled"), 27 + 935);
    assert!(flagged(&series, "humidity_disagrees") > 100);
    assert!(
        series
            .assumptions
            .iter()
            .any(|said| said.value.contains("reduced from sea level to 5 m"))
    );
    // WMO-No. 305 expects its step limits to be passed in 0.1 to 1.4 % of honest hours.
    let share = flagged(&series, "temperature_step") as f64 / 8730.0;
    assert!((0.001..0.014).contains(&share), "{share}");
}

#[test]
fn laguardia_is_the_other_station_of_the_same_file() {
    let mut other = layout("newark");
    other.rows.as_mut().unwrap().equals = "LGA".into();
    let raw = readings("newark_laguardia_2013.csv", &other);
    assert_eq!((raw.len(), raw.row[0]), (8706, 8705));
    near(raw.air_temp_k[0], 39.92 / 1.8 + 273.15 - 32.0 / 1.8, 1e-9);
}

#[test]
fn both_stations_at_once_are_refused() {
    let mut both = layout("newark");
    both.rows = None;
    let raw = readings("newark_laguardia_2013.csv", &both);
    let faults = regularise(raw, &RegulariseOptions::default()).unwrap_err();
    assert_eq!(faults[0].code, "contradictory_rows");
    assert!(faults[0].detail.contains("`rows`"), "{}", faults[0].detail);
}

/// Wall clock of New York against the UTC column of the same rows: 25 hours on 3 November, 23 on 10 March.
#[test]
fn new_york_wall_clock_gives_the_same_instants_as_the_utc_column() {
    let mut local = serde_json::to_value(layout("newark")).unwrap();
    local["time"] =
        json!({"columns": ["year", "month", "day", "hour"], "format": "%Y %m %d %H", "zone": "America/New_York"});
    let local = readings("newark_laguardia_2013.csv", &serde_json::from_value(local).unwrap());
    let utc = readings("newark_laguardia_2013.csv", &layout("newark"));
    assert_eq!(local.time_unix_s, utc.time_unix_s);
    assert!(local.flags.is_empty(), "{:?}", local.flags);
}

/// `USW00014939,2023-01-30T18:54:00,...,FM-15,...,-19.4,-14.4,...,66,...,989.1,...,2.6`: data row 1101 of the file.
#[test]
fn lincoln_is_read_by_its_routine_reports() {
    let raw = readings("lincoln_2023_jan_feb.csv", &layout("lincoln"));
    assert_eq!(raw.len(), 1357);
    let at = raw.row.iter().position(|row| *row == 1102).unwrap();
    assert_eq!(instant_text(raw.time_unix_s[at]), "2023-01-31T00:54:00Z");
    near(raw.air_temp_k[at], 258.75, 1e-9);
    near(raw.dew_point_k.as_ref().unwrap()[at], 253.75, 1e-9);
    near(raw.pressure_pa.as_ref().unwrap()[at], 98_910.0, 1e-6);
    let series = hours(raw, 362.7);
    assert_eq!((series.temp_k.len(), series.report.hours_unknown), (1357, 0));
    assert_eq!(instant_text(series.start_unix_s), "2023-01-01T07:00:00Z");
    assert!(
        series
            .assumptions
            .iter()
            .any(|said| said.what == "readings between full hours")
    );
}

/// Last line `12/31/1998,24:00,0,-6.0,A,-13.0,54,A,1012,5.1`; line 5004 `07/28/1991,10:00,258,11.8,B,5.6,66,A,1012,2.1`.
#[test]
fn sand_point_hours_end_at_their_stamp() {
    let raw = readings("sand_point_typical_year.csv", &layout("sand_point"));
    assert_eq!((raw.len(), raw.row[0], raw.row[5001]), (8760, 3, 5004));
    assert_eq!(instant_text(raw.time_unix_s[5001]), "2021-07-28T19:00:00Z");
    near(raw.air_temp_k[5001], 284.95, 1e-9);
    assert_eq!(raw.shortwave_w_m2.as_ref().unwrap()[5001], 258.0);
    assert_eq!(instant_text(raw.time_unix_s[8759]), "2022-01-01T09:00:00Z");
    let series = hours(raw, 7.0);
    assert_eq!((series.temp_k.len(), series.report.hours_unknown), (8760, 0));
    assert_eq!(instant_text(series.start_unix_s), "2021-01-01T09:00:00Z");
    near(series.temp_k[8759], 267.15, 1e-9);
    assert_eq!(flagged(&series, "pressure_constant"), 1);
}

#[test]
fn a_typical_year_without_a_year_of_its_own_is_refused() {
    let mut mixed = layout("sand_point");
    mixed.time.year = None;
    let faults = regularise(
        readings("sand_point_typical_year.csv", &mixed),
        &RegulariseOptions::default(),
    )
    .unwrap_err();
    assert_eq!(faults[0].code, "too_much_unknown");
}

/// First line `2016-01-11 17:00:00,19.89,46.503,6.587,84.26,6.308,92.0,733.75`.
#[test]
fn the_belgian_house_is_read_inside_and_outside() {
    let room = readings("belgian_house_2016.csv", &layout("belgian_room"));
    assert_eq!(room.len(), 3289);
    assert_eq!(instant_text(room.time_unix_s[0]), "2016-01-11T16:00:00Z");
    near(room.air_temp_k[0], 293.04, 1e-9);
    near(room.pressure_pa.as_ref().unwrap()[0], 97_825.3, 0.1);
    let outdoors = hours(readings("belgian_house_2016.csv", &layout("belgian_outdoors")), 20.0);
    near(outdoors.temp_k[0], 279.737, 1e-9);
    assert!(
        flagged(&outdoors, "humidity_constant") >= 1,
        "outdoor humidity is stuck at 1 % for days"
    );
}

#[test]
fn the_belgian_logger_that_does_not_switch_is_told_apart() {
    let mut zoned = layout("belgian_room");
    zoned.time.zone = Some("Europe/Brussels".into());
    let bytes = std::fs::read(crate::data("belgian_house_2016.csv")).unwrap();
    let faults = read(&bytes, Some(&zoned), &Limits::default()).unwrap_err();
    assert_eq!(
        (faults.len(), faults[0].code, faults[0].row),
        (1, "nonexistent_hour", Some(1811))
    );
    assert!(
        faults[0].detail.contains("2016-03-27 02:00") && faults[0].detail.contains("+01:00"),
        "{}",
        faults[0].detail
    );
}

const OWN: &str = "time,air_temperature_c,relative_humidity_pct,dew_point_c,air_pressure_hpa,wind_speed_m_s,shortwave_w_m2\n\
                   2026-01-01T00:00:00Z,20.5,50,9.8,1010.5,1.5,0\n\
                   2026-01-01T02:00:00+01:00,20.0,51,,1010.6,,10\n\
                   2026-01-01T02:00:00Z,19.5,NaN,9.0,NA,2.5,null\n";

#[test]
fn the_documented_form_needs_no_layout() {
    assert_eq!(OWN.lines().next().unwrap(), OWN_HEADER.join(","));
    let raw = read(OWN.as_bytes(), None, &Limits::default()).unwrap();
    assert_eq!(raw.time_unix_s, [1_767_225_600, 1_767_229_200, 1_767_232_800]);
    near(raw.air_temp_k[1], 293.15, 1e-9);
    assert!(raw.dew_point_k.as_ref().unwrap()[1].is_nan() && raw.relative_humidity.as_ref().unwrap()[2].is_nan());
    near(raw.pressure_pa.as_ref().unwrap()[0], 101_050.0, 1e-9);
    assert!(!raw.pressure_is_sea_level);
    assert!(
        raw.assumptions[0].value.starts_with("instant"),
        "the label was not stated, so it is said"
    );
    let series = hours(raw, 0.0);
    assert_eq!(flagged(&series, "humidity_from_relative_humidity"), 1);
}

#[test]
fn gzip_byte_order_marks_and_carriage_returns_change_nothing() {
    let plain = read(OWN.as_bytes(), None, &Limits::default()).unwrap();
    let same = |bytes: &[u8]| {
        let read = read(bytes, None, &Limits::default()).unwrap();
        assert_eq!(read.time_unix_s, plain.time_unix_s);
        assert_eq!(read.air_temp_k, plain.air_temp_k);
    };
    same(&gzip(OWN.as_bytes()));
    same(&[b"\xef\xbb\xbf", OWN.as_bytes()].concat());
    same(OWN.replace('\n', "\r\n").as_bytes());
    same(OWN.trim_end().as_bytes());
    same(OWN.replace("20.5", "\"20.5\"").as_bytes());
    same(&[&[0xff, 0xfe][..], &utf_16le(OWN)].concat());
    same(&gzip(&[&[0xff, 0xfe][..], &utf_16le(OWN)].concat()));
}

pub fn gzip(bytes: &[u8]) -> Vec<u8> {
    let mut encoder = flate2::write::GzEncoder::new(Vec::new(), flate2::Compression::default());
    encoder.write_all(bytes).unwrap();
    encoder.finish().unwrap()
}

fn utf_16le(text: &str) -> Vec<u8> {
    text.encode_utf16().flat_map(u16::to_le_bytes).collect()
}

/// A mapping over the smallest one: `changes` replaces whole members.
fn mapped(text: &[u8], changes: Value) -> Result<RawReadings, Vec<WeatherFault>> {
    let mut layout = json!({
        "time": {"columns": ["Zeit"], "zone": "UTC"},
        "columns": {"air_temperature": {"column": "T", "unit": "°C"}, "relative_humidity": {"column": "F", "unit": "%"}}
    });
    for (name, value) in changes.as_object().unwrap() {
        layout[name] = value.clone();
    }
    read(text, Some(&serde_json::from_value(layout).unwrap()), &Limits::default())
}

#[test]
fn semicolons_decimal_commas_and_windows_1252() {
    let (text, _, _) =
        encoding_rs::WINDOWS_1252.encode("Zeit;T °C;F\n2026-01-01 00:00;-1,5;80,5\n2026-01-01 01:00;\"-2,5\";81\n");
    let raw = mapped(
        &text,
        json!({"dialect": {"encoding": "windows-1252", "delimiter": ";", "decimal": ","},
               "columns": {"air_temperature": {"column": "T °C", "unit": "°C"}, "relative_humidity": {"column": "F", "unit": "%"}}}),
    )
    .unwrap();
    near(raw.air_temp_k[0], 271.65, 1e-9);
    near(raw.air_temp_k[1], 270.65, 1e-9);
    near(raw.relative_humidity.unwrap()[0], 0.805, 1e-12);
}

#[test]
fn tabs_preambles_comments_unit_rows_and_filters() {
    let text = "Station 7\nlogger\tx\nT\tF\tZeit\tsite\n°C\t%\t\t\n# note\n1\t50\t2026-01-01 00:00\tA\n9\t90\t2026-01-01 00:00\tB\n\n2\t51\t2026-01-01 01:00\t A \n";
    let raw = mapped(
        text.as_bytes(),
        json!({"dialect": {"delimiter": "tab", "skip_rows": 2, "header_rows": 2, "comment": "#"},
               "rows": {"column": "site", "equals": "A"}}),
    )
    .unwrap();
    assert_eq!(raw.row, [6, 9]);
    near(raw.air_temp_k[1], 275.15, 1e-9);
    assert!(
        raw.assumptions
            .iter()
            .any(|said| said.value.contains("1 others left out")),
        "{:?}",
        raw.assumptions
    );
}

#[test]
fn files_without_a_header_are_read_by_place() {
    let raw = mapped(
        b"2026-01-01 00:00,1,50\n2026-01-01 01:00,2,51\n",
        json!({"dialect": {"header_rows": 0}, "time": {"columns": ["#1"], "zone": "+01:00"},
               "columns": {"air_temperature": {"column": "#2", "unit": "°C"}, "relative_humidity": {"column": "#3", "unit": "%"}}}),
    )
    .unwrap();
    assert_eq!(
        (raw.len(), raw.row[0], raw.time_unix_s[0]),
        (2, 1, 1_767_225_600 - 3600)
    );
}

#[test]
fn scales_offsets_marks_and_epochs() {
    let raw = mapped(
        b"Zeit,T,F\n1767225600000,215,5\n1767229200000,-999.0,-7999\n1767232800000,*,6\n",
        json!({"time": {"columns": ["Zeit"], "format": "unix_ms"}, "missing": ["-999", "-7999", "*"],
               "columns": {"air_temperature": {"column": "T", "unit": "°C", "scale": 0.1, "offset": -0.5},
                           "relative_humidity": {"column": "F", "unit": "%", "scale": 10}}}),
    )
    .unwrap();
    assert_eq!(raw.time_unix_s[0], 1_767_225_600);
    near(raw.air_temp_k[0], 294.15, 1e-9);
    near(raw.relative_humidity.as_ref().unwrap()[0], 0.5, 1e-12);
    assert!(raw.air_temp_k[1].is_nan() && raw.air_temp_k[2].is_nan() && raw.relative_humidity.unwrap()[1].is_nan());
}

#[test]
fn twelve_hour_clocks_and_month_first_dates() {
    let raw = mapped(
        b"Zeit,T,F\n1/31/2026 12:00 AM,1,50\n1/31/2026 1:30 pm,1,50\n",
        json!({"time": {"columns": ["Zeit"], "format": "%m/%d/%Y %I:%M %p", "zone": "UTC"}}),
    )
    .unwrap();
    assert_eq!(
        raw.time_unix_s.iter().map(|t| instant_text(*t)).collect::<Vec<_>>(),
        ["2026-01-31T00:00:00Z", "2026-01-31T13:30:00Z"]
    );
}

/// A day on the wall is 23 hours in spring and 25 in autumn, 23.5 and 24.5 on Lord Howe (tz database).
#[test]
fn days_with_a_change_of_clock_have_their_own_length() {
    for (zone, day, hours) in [
        ("America/New_York", "2013-03-10", 23.0),
        ("America/New_York", "2013-11-03", 25.0),
        ("Australia/Lord_Howe", "2025-10-05", 23.5),
        ("Australia/Lord_Howe", "2025-04-06", 24.5),
        ("UTC", "2025-04-06", 24.0),
    ] {
        let next = format!("{}{:02}", &day[..8], day[8..].parse::<u32>().unwrap() + 1);
        let text = format!("Zeit,T,F\n{day} 00:00,1,50\n{next} 00:00,1,50\n");
        let raw = mapped(text.as_bytes(), json!({"time": {"columns": ["Zeit"], "zone": zone}})).unwrap();
        assert_eq!(
            (raw.time_unix_s[1] - raw.time_unix_s[0]) as f64 / 3600.0,
            hours,
            "{zone} {day}"
        );
    }
}
