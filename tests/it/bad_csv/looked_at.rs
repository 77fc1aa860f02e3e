//! Anything at all looked at and read: an inspection or a list of faults, in bounded time, never a panic. What is settled reads
//! the same when its layout is sent back.

use std::time::{Duration, Instant};

use dipcast::config::Config;
use dipcast::intake::csv::{Hints, Limits, read};
use dipcast::service::{Told, inspect};
use proptest::prelude::*;

use super::telling_byte;
use crate::intake_csv::gzip;

/// Far more than any of these small files takes, even on a busy machine.
const PATIENCE: Duration = Duration::from_secs(20);

fn look(bytes: &[u8], hints: &Hints) -> Result<(), TestCaseError> {
    let started = Instant::now();
    let limits = Config::defaults().unwrap().limits;
    match inspect(bytes, &Told::Hints(Box::new(hints.clone())), &limits) {
        Err(faults) => prop_assert!(!faults.is_empty()),
        Ok(found) => {
            prop_assert!(
                found
                    .detection
                    .questions
                    .iter()
                    .all(|question| !question.text.is_empty())
            );
            if let Ok(layout) = found.detection.settled() {
                let (once, again) = (read(bytes, Some(layout), &Limits::default()), sent_back(bytes, layout));
                prop_assert_eq!(format!("{once:?}"), format!("{again:?}"));
            }
        }
    }
    prop_assert!(started.elapsed() < PATIENCE, "{:?}", started.elapsed());
    Ok(())
}

fn sent_back(
    bytes: &[u8],
    layout: &dipcast::intake::csv::Layout,
) -> Result<dipcast::model::weather::RawReadings, Vec<dipcast::model::weather::WeatherFault>> {
    let text = serde_json::to_string(layout).unwrap();
    read(bytes, Some(&serde_json::from_str(&text).unwrap()), &Limits::default())
}

fn header() -> impl Strategy<Value = String> {
    let names = [
        "time",
        "Zeit (UTC+1)",
        "Date",
        "year",
        "month",
        "day",
        "hour",
        "DOY",
        "epoch",
        "T [°C]",
        "Temperature",
        "temp_f",
        "RH (%)",
        "humidity",
        "Dew point (°C)",
        "wet bulb",
        "pressure",
        "wind",
        "GHI",
        "zone",
        "station",
        "value",
        "sensor",
        "",
        "T1",
        "\"quoted, name\"",
    ];
    prop::collection::vec(prop::sample::select(names.to_vec()), 1..9).prop_map(|names| names.join(","))
}

fn cell() -> impl Strategy<Value = String> {
    let telling = [
        "2026-01-01T00:00Z",
        "01/02/2026 03:04",
        "2026",
        "1",
        "24",
        "366",
        "20.5",
        "20,5",
        "1.013",
        "1,013.2",
        "-999",
        "999.9",
        "NaN",
        "",
        "1767225600",
        "46023.5",
        "12:00 AM",
        "FM-15",
        "hall temperature",
        "\"x\"",
        "1e308",
        "99999999999999",
        "2026-13-45",
        "31.12.2026 24:00",
    ];
    prop_oneof![
        prop::sample::select(telling.to_vec()).prop_map(String::from),
        "[0-9.,:/ -]{0,12}"
    ]
}

proptest! {
    #![proptest_config(ProptestConfig { cases: crate::cases(150), failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn any_bytes(bytes in prop::collection::vec(telling_byte(), 0..600)) {
        look(&bytes, &Hints::default())?;
        look(&gzip(&bytes), &Hints::default())?;
    }

    #[test]
    fn any_cells_under_any_header(
        preamble in prop::collection::vec("[a-zA-Z0-9 ,;:+#-]{0,20}", 0..4),
        header in header(),
        rows in prop::collection::vec(prop::collection::vec(cell(), 1..9), 0..30),
        delimiter in prop::sample::select(vec![",", ";", "\t", "|"]),
    ) {
        let rows: Vec<String> = rows.iter().map(|row| row.join(delimiter)).collect();
        let text = format!("{}\n{}\n{}\n", preamble.join("\n"), header.replace(',', delimiter), rows.join("\n"));
        look(text.as_bytes(), &Hints::default())?;
        let utf_16: Vec<u8> = text.encode_utf16().flat_map(u16::to_le_bytes).collect();
        look(&utf_16, &Hints { zone: Some("Europe/Oslo".into()), day_first: Some(true), ..Hints::default() })?;
    }

    #[test]
    fn sound_files_with_some_cells_broken(broken in prop::collection::vec((0usize..48, 0usize..4, cell()), 0..6)) {
        let mut rows: Vec<Vec<String>> = (0..48)
            .map(|hour| vec![format!("{:02}.02.2026", 1 + hour / 24), format!("{:02}:00", hour % 24), "20,5".into(), "50".into()])
            .collect();
        for (row, column, cell) in broken {
            rows[row][column] = cell;
        }
        let rows: Vec<String> = rows.iter().map(|row| row.join(";")).collect();
        look(format!("Datum;Zeit (UTC);T [°C];RH [%]\n{}\n", rows.join("\n")).as_bytes(), &Hints::default())?;
    }

    #[test]
    fn any_hints(zone in "[A-Za-z/+:0-9]{0,12}", column in "[#A-Za-z0-9]{0,6}", decimal in "[.,;]{0,1}", year in any::<i64>()) {
        let hints = serde_json::json!({"zone": zone, "decimal": decimal, "time": [column], "year": year, "ignore": [column],
            "rows": {"column": column, "equals": zone}, "columns": {"air_temperature": {"column": column}}});
        let hints: Hints = serde_json::from_value(hints).unwrap();
        look(b"time;T [\xb0C];RH [%]\n2026-01-01 00:00;20,5;50\n2026-01-01 01:00;20,5;50\n", &hints)?;
    }
}
