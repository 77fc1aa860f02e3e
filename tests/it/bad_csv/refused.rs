//! Files that cannot be read as they are: each refusal names the row or the column, and the line to send back, and that line
//! makes the file readable.

use dipcast::intake::csv::{Hints, Limits, detect, read, read_with_hints};
use dipcast::model::weather::WeatherFault;

fn faults(text: &str) -> Vec<WeatherFault> {
    read(text.as_bytes(), None, &Limits::default()).expect_err(text)
}

/// The fault with this code; its text must hold all the words.
fn refused(text: &str, code: &str, place: (Option<usize>, Option<&str>), words: &[&str]) {
    let all = faults(text);
    let fault = all
        .iter()
        .find(|fault| fault.code == code)
        .unwrap_or_else(|| panic!("{code} is not in {all:#?}"));
    assert_eq!((fault.row, fault.column.as_deref()), place, "{fault}");
    for word in words {
        assert!(fault.detail.contains(word), "{word:?} is not in {fault}");
    }
}

/// Every line offered by the fault's question reads the file, or leads to the next question.
fn answers_help(text: &str, code: &str) -> usize {
    let detection = detect(text.as_bytes(), &Hints::default(), &Limits::default()).unwrap();
    let question = detection
        .questions
        .iter()
        .find(|question| question.code == code)
        .unwrap();
    for candidate in &question.candidates {
        let hints = candidate.send.strip_prefix("\"hints\": ").unwrap();
        let hints: Hints = serde_json::from_str(hints).unwrap_or_else(|error| panic!("{}: {error}", candidate.send));
        let answered = detect(text.as_bytes(), &hints, &Limits::default())
            .unwrap_or_else(|faults| panic!("{}: {faults:#?}", candidate.send));
        let same = |q: &&dipcast::intake::csv::Question| q.code == question.code && q.column == question.column;
        assert_eq!(answered.questions.iter().find(same), None, "{}", candidate.send);
    }
    question.candidates.len()
}

#[test]
fn no_zone_anywhere() {
    let text = "time,temperature (°C),humidity (%)\n2026-01-01 00:00,20,50\n2026-01-01 01:00,21,51\n";
    refused(
        text,
        "no_zone",
        (Some(2), Some("time")),
        &["\"hints\": {\"zone\":\"UTC\"}", "Europe/Oslo"],
    );
    assert_eq!(answers_help(text, "no_zone"), 3);
    let hints: Hints = serde_json::from_str("{\"zone\": \"+01:00\"}").unwrap();
    let raw = read_with_hints(text.as_bytes(), &hints, &Limits::default()).unwrap();
    assert_eq!(raw.time_unix_s[0], 1_767_225_600 - 3600);
}

#[test]
fn day_or_month_first_with_no_row_that_decides() {
    let text = "time (UTC),temperature (°C),humidity (%)\n03/04/2026 00:00,20,50\n03/04/2026 01:00,21,51\n";
    refused(
        text,
        "ambiguous_date",
        (Some(2), Some("time (UTC)")),
        &["03/04/2026 00:00", "{\"day_first\":true}", "{\"day_first\":false}"],
    );
    assert_eq!(answers_help(text, "ambiguous_date"), 2);
}

#[test]
fn two_temperatures_and_the_humidity_that_follows_the_choice() {
    let text = "time,Temp indoor (°C),RH indoor (%),Temp outdoor (°C),RH outdoor (%)\n2026-01-01T00:00Z,20,40,-5,90\n2026-01-01T01:00Z,21,41,-6,91\n";
    refused(
        text,
        "ambiguous_column",
        (None, Some("air_temperature")),
        &[
            "Temp indoor (°C)",
            "{\"columns\":{\"air_temperature\":{\"column\":\"Temp outdoor (°C)\"}}}",
        ],
    );
    assert_eq!(faults(text).len(), 1, "the humidity is not asked for beside it");
    let hints: Hints =
        serde_json::from_str("{\"columns\":{\"air_temperature\":{\"column\":\"Temp outdoor (°C)\"}}}").unwrap();
    let raw = read_with_hints(text.as_bytes(), &hints, &Limits::default()).unwrap();
    assert_eq!((raw.air_temp_k[0], raw.relative_humidity.unwrap()[0]), (268.15, 0.9));
    assert!(
        raw.assumptions
            .iter()
            .any(|said| said.value.contains("same mark as \"Temp outdoor (°C)\"")),
        "{:#?}",
        raw.assumptions
    );
}

#[test]
fn a_unit_that_nothing_tells() {
    let text = "time,temperature,humidity\n2026-01-01T00:00Z,20,50\n2026-01-01T01:00Z,21,51\n";
    refused(
        text,
        "unknown_unit",
        (None, Some("temperature")),
        &["20 to 21", "\"unit\":\"°C\"", "\"unit\":\"°F\""],
    );
    assert_eq!(answers_help(text, "unknown_unit"), 2);
}

#[test]
fn a_unit_that_is_not_read_here() {
    let text = "time,temperature [°Ré],humidity\n2026-01-01T00:00Z,16,50\n2026-01-01T01:00Z,17,51\n";
    refused(
        text,
        "unknown_unit",
        (None, Some("temperature [°Ré]")),
        &["\"°Ré\" is written"],
    );
}

#[test]
fn bare_letters_without_units() {
    let text = "time,T1,RH_1\n2026-01-01T00:00Z,20,50\n2026-01-01T01:00Z,21,51\n";
    refused(
        text,
        "missing_column",
        (None, Some("air_temperature")),
        &["\"T1\" (it holds 20 to 21)", "\"column\":\"T1\""],
    );
    let hints = r#"{"columns":{"air_temperature":{"column":"T1","unit":"°C"},"relative_humidity":{"column":"RH_1","unit":"%"}}}"#;
    let raw = read_with_hints(
        text.as_bytes(),
        &serde_json::from_str(hints).unwrap(),
        &Limits::default(),
    )
    .unwrap();
    assert_eq!((raw.air_temp_k[1], raw.relative_humidity.unwrap()[1]), (294.15, 0.51));
}

#[test]
fn no_humidity() {
    let text = "time,temperature (°C),rain (mm)\n2026-01-01T00:00Z,20,0\n2026-01-01T01:00Z,21,1\n";
    refused(
        text,
        "missing_column",
        (None, Some("relative_humidity")),
        &["dew point or wet bulb", "rain (mm)"],
    );
}

/// Columns that are known to be something else are not offered.
#[test]
fn only_columns_that_may_be_it_are_offered() {
    let text = "time,temp_c,rh,rain (mm)\n2026-01-01T00:00Z,20,50,0\n2026-01-01T01:00Z,21,51,1\n";
    refused(
        text,
        "missing_column",
        (None, Some("relative_humidity")),
        &["\"column\":\"rh\",\"unit\":\"%\"", "count only with a unit"],
    );
    assert!(!faults(text)[0].detail.contains("temp_c"), "{}", faults(text)[0]);
}

#[test]
fn a_line_of_totals_is_named() {
    let text = "time,temp_c,humidity\n2026-01-01T00:00Z,20,50\n2026-01-01T01:00Z,21,51\nTotal,41,101\n";
    refused(text, "bad_time", (Some(4), Some("time")), &["Total"]);
}

#[test]
fn no_header() {
    let text = "2026-01-01T00:00Z,20,50\n2026-01-01T01:00Z,21,51\n";
    refused(
        text,
        "missing_column",
        (None, Some("air_temperature")),
        &["\"column\":\"#2\""],
    );
    let hints = r##"{"columns":{"air_temperature":{"column":"#2","unit":"°C"},"relative_humidity":{"column":"#3","unit":"%"}}}"##;
    let raw = read_with_hints(
        text.as_bytes(),
        &serde_json::from_str(hints).unwrap(),
        &Limits::default(),
    )
    .unwrap();
    assert_eq!((raw.len(), raw.row[0]), (2, 1));
}

#[test]
fn no_time_of_day() {
    let text = "date,temperature (°C),humidity (%)\n2026-01-01,20,50\n2026-01-02,21,51\n";
    refused(
        text,
        "no_time",
        (None, Some("time")),
        &["hour", "{\"time\":[\"date\"]}"],
    );
}

#[test]
fn two_columns_of_times() {
    let text = "measured,stored,temperature (°C),humidity (%)\n2026-01-01 00:00,2026-01-01 00:07,20,50\n2026-01-01 01:00,2026-01-01 01:07,21,51\n";
    refused(
        text,
        "ambiguous_column",
        (None, Some("time")),
        &["\"measured\"", "{\"time\":[\"stored\"]}"],
    );
}

#[test]
fn a_sign_that_may_be_decimal_or_thousands() {
    let text = "time;temperature (°C);humidity (%);pressure (hPa)\n2026-01-01T00:00Z;20;50;1.013\n2026-01-01T01:00Z;21;51;1.012\n";
    refused(
        text,
        "ambiguous_decimal",
        (Some(2), None),
        &["1.013", "{\"decimal\":\",\"}"],
    );
    assert_eq!(answers_help(text, "ambiguous_decimal"), 2);
}

#[test]
fn two_stations_in_one_file() {
    let mut text = "time,station,temperature (°C),humidity (%)\n".to_string();
    for station in ["quay", "tower"] {
        text.extend((0..24).map(|hour| format!("2026-01-01T{hour:02}:00Z,{station},20,50\n")));
    }
    refused(
        &text,
        "several_series",
        (None, Some("station")),
        &["24 times", "{\"rows\":{\"column\":\"station\",\"equals\":\"tower\"}}"],
    );
    assert_eq!(answers_help(&text, "several_series"), 2);
}

#[test]
fn an_hour_that_the_clocks_of_the_zone_left_out() {
    let text = "time (Europe/Oslo),temperature (°C),humidity (%)\n2026-03-29 01:00,5,50\n2026-03-29 02:00,5,50\n2026-03-29 03:00,5,50\n";
    refused(
        text,
        "nonexistent_hour",
        (Some(3), Some("time (Europe/Oslo)")),
        &["does not switch to summer time", "{\"zone\":\"+01:00\"}"],
    );
}

#[test]
fn single_cells_that_are_wrong_keep_their_row_and_column() {
    let text = "Zeit (UTC);Temperatur (°C);Feuchte (%)\n01.02.2026 00:00;20,5;50\n01.02.2026 25:00;20,5;50\n13.02.2026 02:00;20.5.1;50\n14.02.2026 03:00;warm;50\n15.02.2026 04:00;20,5\n";
    refused(
        text,
        "bad_time",
        (Some(3), Some("Zeit (UTC)")),
        &["there is no hour 25"],
    );
    refused(text, "bad_number", (Some(4), Some("Temperatur (°C)")), &["20.5.1"]);
    refused(text, "wrong_width", (Some(6), None), &["expected 3 cells"]);
}

#[test]
fn hints_that_do_not_fit_the_file() {
    let text = "time,temperature (°C),humidity (%)\n2026-01-01 00:00,20,50\n2026-01-01 01:00,21,51\n";
    let refuse = |hints: &str| {
        let hints = serde_json::from_str(hints).unwrap();
        read_with_hints(text.as_bytes(), &hints, &Limits::default())
            .unwrap_err()
            .remove(0)
    };
    let fault = refuse(r#"{"zone": "Oslo"}"#);
    assert_eq!(
        (fault.column.as_deref(), fault.code),
        (Some("hints/zone"), "unknown_zone")
    );
    let fault = refuse(r#"{"columns": {"dew_point": {"column": "dew"}}}"#);
    assert_eq!(
        (fault.column.as_deref(), fault.code),
        (Some("hints/columns/dew_point/column"), "missing_column")
    );
    let fault = refuse(r#"{"columns": {"dew_point": {"unit": "%"}}}"#);
    assert_eq!(fault.code, "bad_unit");
}

#[test]
fn what_is_no_table() {
    for (text, code) in [
        ("once upon a time\nthere was a sensor\n", "no_table"),
        ("time\n2026-01-01T00:00Z\n", "no_table"),
        ("{\"a\": 1}", "not_csv"),
    ] {
        assert_eq!(faults(text)[0].code, code, "{text}");
    }
}
