//! Files that are wrong, cut, hostile or no files at all: always a fault that names the remedy, never a panic.

mod looked_at;
mod refused;

use dipcast::intake::csv::{Layout, Limits, read};
use dipcast::model::weather::{RegulariseOptions, WeatherFault, regularise};
use proptest::prelude::*;

use crate::intake_csv::{gzip, layout};

const HEADER: &str = "time,air_temperature_c,relative_humidity_pct\n";

fn faults(bytes: &[u8]) -> Vec<WeatherFault> {
    read(bytes, None, &Limits::default()).expect_err("should be refused")
}

fn refused(bytes: &[u8], code: &str, remedy: &str) {
    let faults = faults(bytes);
    assert_eq!(faults[0].code, code, "{faults:?}");
    assert!(faults[0].to_string().contains(remedy), "{}", faults[0]);
}

fn row(hour: usize) -> String {
    let (day, hour) = (1 + hour / 24, hour % 24);
    format!("2026-01-{day:02}T{hour:02}:00:00Z,20.5,50\n")
}

fn file(rows: usize) -> String {
    (0..rows).map(row).fold(HEADER.to_string(), |text, row| text + &row)
}

#[test]
fn empty_files_headers_alone_and_blank_files() {
    refused(b"", "empty_file", "no bytes");
    refused(b"\n\n  \n", "empty_file", "header");
    refused(HEADER.as_bytes(), "no_readings", "ends after its header");
    refused(&gzip(b""), "empty_file", "header");
    refused(b"\xef\xbb\xbf", "empty_file", "header");
}

#[test]
fn files_that_are_no_csv() {
    refused(b"PK\x03\x04\x14\x00\x06\x00", "not_csv", "export the sheet as CSV");
    refused(b"%PDF-1.7", "not_csv", "PDF");
    refused(b"{\"hourly\": {}}", "not_csv", "JSON");
    refused(
        &(0..=255).cycle().take(100_000).collect::<Vec<u8>>(),
        "not_csv",
        "binary",
    );
    refused(&gzip(&gzip(HEADER.as_bytes())), "not_csv", "compress it once");
}

#[test]
fn wrong_encodings() {
    let utf_16: Vec<u8> = file(3).encode_utf16().flat_map(u16::to_le_bytes).collect();
    let sent = layout("newark");
    let fault = read(&utf_16, Some(&sent), &Limits::default()).unwrap_err().remove(0);
    assert!(
        fault.code == "wrong_encoding" && fault.detail.contains("utf-16le"),
        "{fault}"
    );
    let fault = read(b"time,temp_\xb0c\n1,2\n", Some(&sent), &Limits::default())
        .unwrap_err()
        .remove(0);
    assert!(
        fault.code == "wrong_encoding" && fault.detail.contains("windows-1252"),
        "{fault}"
    );
    let text = [HEADER.as_bytes(), b"2026-01-01T00:00:00Z,20\xb0,50\n"].concat();
    refused(&text, "bad_number", "dialect.encoding");
}

#[test]
fn damaged_and_cut_gzip() {
    let whole = gzip(file(500).as_bytes());
    refused(&whole[..whole.len() / 2], "damaged_gzip", "Send it again");
    let mut changed = whole.clone();
    let middle = changed.len() / 2;
    changed[middle] ^= 0xff;
    changed[middle + 1] ^= 0xff;
    assert!(!faults(&changed).is_empty());
    refused(b"\x1f\x8b", "damaged_gzip", "gzip");
}

#[test]
fn a_bomb_stops_at_the_ratio_and_a_large_file_at_its_size() {
    let bomb = gzip([HEADER, &row(0).repeat(1_900_000)].concat().as_bytes());
    assert!(bomb.len() < 180_000, "{}", bomb.len());
    refused(&bomb, "compression_bomb", "300 times");
    let bomb = gzip(&vec![b'\n'; 64 * 1024 * 1024]);
    refused(&bomb, "empty_file", "blank lines");
    let fault = read(&bomb, Some(&layout("newark")), &Limits::default())
        .unwrap_err()
        .remove(0);
    assert!(
        fault.code == "too_many_rows" && fault.detail.contains("4002000 lines"),
        "{fault}"
    );
    let bomb = gzip(&vec![b'7'; 64 * 1024 * 1024]);
    refused(&bomb, "no_table", "777");
    let limits = Limits {
        max_decompressed_bytes: 10_000,
        ..Limits::default()
    };
    for bytes in [file(500).into_bytes(), gzip(file(500).as_bytes())] {
        let faults = read(&bytes, None, &limits).unwrap_err();
        assert_eq!((faults.len(), faults[0].code), (1, "too_large"));
    }
}

#[test]
fn too_many_rows_cells_and_bytes() {
    let limits = Limits {
        max_rows: 100,
        ..Limits::default()
    };
    assert!(read(file(100).as_bytes(), None, &limits).is_ok());
    assert_eq!(
        read(file(101).as_bytes(), None, &limits).unwrap_err()[0].code,
        "too_many_rows"
    );
    refused(
        [HEADER, &",".repeat(2000)].concat().as_bytes(),
        "too_many_cells",
        "at most 1000",
    );
    refused(
        [HEADER, &"9".repeat(1_000_000)].concat().as_bytes(),
        "row_too_long",
        "row 2",
    );
    refused(
        [HEADER, "\"", &file(10_000)].concat().as_bytes(),
        "row_too_long",
        "quote",
    );
    refused([HEADER, "\"2026"].concat().as_bytes(), "open_quote", "never closed");
}

#[test]
fn three_hundred_thousand_hours_are_read_and_their_span_is_judged_by_the_caller() {
    let mut text = HEADER.to_string();
    for hour in 0..300_000i64 {
        text += &dipcast::model::weather::zone::instant_text(hour * 3600);
        text += ",20.5,50\n";
    }
    let raw = read(text.as_bytes(), None, &Limits::default()).unwrap();
    assert_eq!(raw.len(), 300_000);
    let options = RegulariseOptions {
        max_hours: 200_000,
        ..Default::default()
    };
    let faults = regularise(raw, &options).unwrap_err();
    assert_eq!(faults[0].code, "too_many_hours");
    assert!(
        faults[0].detail.contains("300000") && faults[0].detail.contains("200000"),
        "{}",
        faults[0].detail
    );
}

#[test]
fn all_row_faults_come_at_once_twenty_in_full() {
    let mut text = HEADER.to_string();
    for hour in 0..30 {
        text += &row(hour).replace("20.5", "warm");
    }
    let faults = faults(text.as_bytes());
    assert_eq!(faults.len(), 21);
    assert_eq!(
        (faults[0].row, faults[0].column.as_deref(), faults[0].code),
        (Some(2), Some("air_temperature_c"), "bad_number")
    );
    assert!(
        faults[0].detail.contains("\"warm\"") && faults[0].detail.contains("missing"),
        "{}",
        faults[0].detail
    );
    assert!(faults[20].detail.contains("10 more"), "{}", faults[20].detail);
}

#[test]
fn different_faults_of_different_rows_are_told_apart() {
    let text = format!(
        "{HEADER}2026-01-01T00:00:00Z,20.5,50\n2026-01-01 01:00,20,50\n2026-13-01T00:00:00Z,20,50\n01.02.2026 03:00,20,50\n\
         2026-01-01T04:00:00Z,20\n2026-01-01T05:00:00Z,20,5,50\n2026-01-01T06:00:00Z,inf,50\n2026-01-01T07:00:00Z,\"20,5\",50\n\
         2026-01-01T24:00:00Z,20,50\n"
    );
    let found: Vec<_> = faults(text.as_bytes())
        .into_iter()
        .map(|fault| (fault.row.unwrap(), fault.code))
        .collect();
    let expected = [
        (3, "no_zone"),
        (4, "bad_time"),
        (5, "bad_time"),
        (6, "wrong_width"),
        (7, "wrong_width"),
        (8, "bad_number"),
        (9, "bad_number"),
        (10, "bad_time"),
    ];
    assert_eq!(found, expected);
}

#[test]
fn foreign_headers_and_delimiters_without_a_layout() {
    refused(b"Zeit;Temp;Feuchte\n1;2;3\n", "no_time", "\"hints\"");
    refused(
        b"time;air_temperature_c;relative_humidity_pct\n",
        "no_table",
        "expected rows of cells with numbers",
    );
    refused(
        b"time,relative_humidity_pct\n2026-01-01T00:00Z,50\n",
        "missing_column",
        "air temperature",
    );
    refused(
        b"time,air_temperature_c,relative_humidity_pct\r2026-01-01T00:00:00Z,1,50\r",
        "line_ends",
        "line feeds",
    );
}

#[test]
fn a_layout_that_does_not_fit_the_file_or_itself() {
    let bytes = std::fs::read(crate::data("newark_laguardia_2013.csv")).unwrap();
    let read_with = |change: &dyn Fn(&mut Layout)| {
        let mut layout = layout("newark");
        change(&mut layout);
        read(&bytes, Some(&layout), &Limits::default()).unwrap_err().remove(0)
    };
    let fault = read_with(&|layout| layout.columns.air_temperature.as_mut().unwrap().column = "Temp".into());
    assert_eq!(fault.code, "missing_column");
    assert!(fault.detail.contains("did you mean \"temp\"?"), "{}", fault.detail);
    let fault = read_with(&|layout| layout.rows.as_mut().unwrap().equals = "OSL".into());
    assert_eq!(fault.code, "no_rows_left");
    let fault = read_with(&|layout| layout.dialect.delimiter = ";".into());
    assert!(fault.detail.contains("another delimiter"), "{}", fault.detail);
    let fault = read_with(&|layout| layout.time.zone = Some("Newark".into()));
    assert_eq!(
        (fault.column.as_deref(), fault.code),
        (Some("layout/time/zone"), "unknown_zone")
    );
    let fault = read_with(&|layout| layout.dialect.skip_rows = 100);
    assert_eq!(fault.code, "missing_column");
}

#[test]
fn a_name_that_stands_twice_in_the_header_must_be_given_by_place() {
    let text = "time,t,t,rh\n2026-01-01T00:00:00Z,1,2,50\n";
    let mut mapping = layout("newark");
    mapping.rows = None;
    mapping.time.columns = vec!["time".into()];
    mapping.columns = serde_json::from_value(serde_json::json!({
        "air_temperature": {"column": "t", "unit": "°C"}, "relative_humidity": {"column": "rh", "unit": "%"}
    }))
    .unwrap();
    let faults = read(text.as_bytes(), Some(&mapping), &Limits::default()).unwrap_err();
    assert_eq!(faults[0].code, "repeated_column");
    mapping.columns.air_temperature.as_mut().unwrap().column = "#3".into();
    let raw = read(text.as_bytes(), Some(&mapping), &Limits::default()).unwrap();
    assert_eq!(raw.air_temp_k, [275.15]);
}

/// The whole way: what comes out is a sound series or a list of faults.
fn whole_way(bytes: &[u8], layout: Option<&Layout>) -> Result<(), TestCaseError> {
    let outcome = read(bytes, layout, &Limits::default()).and_then(|raw| {
        let options = RegulariseOptions {
            max_unknown_share: 1.0,
            max_hours: 100_000,
            ..Default::default()
        };
        regularise(raw, &options)
    });
    match outcome {
        Err(faults) => prop_assert!(!faults.is_empty()),
        Ok(series) => {
            prop_assert!(!series.temp_k.is_empty());
            prop_assert!(series.pressure_pa.iter().all(|p| p.is_finite() && *p > 0.0));
            for at in (0..series.temp_k.len()).filter(|&at| series.known[at]) {
                let (temp, vapour) = (series.temp_k[at], series.vapour_pressure_pa[at]);
                let saturation = dipcast::model::air::saturation_pressure_pa(temp);
                prop_assert!(temp.is_finite() && vapour >= 0.0 && vapour <= saturation * (1.0 + 1e-12));
            }
        }
    }
    Ok(())
}

/// Bytes that matter to a reader of CSV, more often than chance would bring them.
pub fn telling_byte() -> impl Strategy<Value = u8> {
    prop_oneof![
        any::<u8>(),
        prop::sample::select(b"\"\n\r,;:.-+ETZ0123456789 \t\0#%NaN".to_vec())
    ]
}

proptest! {
    #![proptest_config(ProptestConfig { cases: crate::cases(300), failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn any_bytes_never_panic(bytes in prop::collection::vec(telling_byte(), 0..400)) {
        whole_way(&bytes, None)?;
        whole_way(&bytes, Some(&layout("sand_point")))?;
    }

    #[test]
    fn any_bytes_under_our_header_never_panic(bytes in prop::collection::vec(telling_byte(), 0..400)) {
        whole_way(&[HEADER.as_bytes(), &bytes].concat(), None)?;
    }

    #[test]
    fn mangled_files_never_panic(changes in prop::collection::vec((0usize..4000, telling_byte(), 0u8..3), 1..12)) {
        let mut bytes = file(100).into_bytes();
        for (at, byte, how) in changes {
            let at = at % bytes.len();
            match how {
                0 => bytes[at] = byte,
                1 => bytes.insert(at, byte),
                _ => { bytes.remove(at); }
            }
        }
        whole_way(&bytes, None)?;
        whole_way(&gzip(&bytes), None)?;
    }

    #[test]
    fn any_numbers_in_a_sound_file_never_panic(
        rows in prop::collection::vec((any::<f64>(), any::<f64>(), -100i64..100_000), 1..60)
    ) {
        let mut text = HEADER.to_string();
        for (temp, humidity, minutes) in rows {
            let time = dipcast::model::weather::zone::instant_text(1_767_225_600 + minutes * 60);
            text += &format!("{time},{temp:e},{humidity:e}\n");
        }
        whole_way(text.as_bytes(), None)?;
    }

    #[test]
    fn any_layout_text_never_panics(format in "[%a-zA-Z0-9:/ -]{0,20}", zone in "[A-Za-z0-9:+/_-]{0,12}", delimiter in ".{0,2}") {
        let mut mapping = layout("sand_point");
        mapping.time.format = format;
        mapping.time.zone = Some(zone);
        mapping.dialect.delimiter = delimiter;
        let text = b"x\nDate (MM/DD/YYYY),Time (HH:MM),GHI (W/m^2),Dry-bulb (C),Dew-point (C),RHum (%),Pressure (mbar),Wspd (m/s)\n01/01/1997,01:00,0,4.0,3.0,93,1012,2.1\n";
        whole_way(text, Some(&mapping))?;
    }
}
