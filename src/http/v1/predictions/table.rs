//! The hours as CSV (RFC 4180) and NDJSON, written while they are sent.

use std::ops::Range;

use super::HourRow;
use crate::service::PredictionReport;
use crate::service::records::HourColumns;

/// Hours written at a time.
const HOURS_A_PIECE: usize = 500;

/// The hours piece by piece, each written when it is asked for: a reader that goes away costs no more. Compared places
/// follow one another, each row with the name of its place.
pub fn pieces(report: PredictionReport, write: Writer) -> impl Iterator<Item = Vec<u8>> {
    let is_comparison = report.is_comparison;
    let places = report.outcomes.into_iter().enumerate();
    places.flat_map(move |(number, outcome)| {
        let name = outcome.place.name.unwrap_or_else(|| format!("places/{number}"));
        let hours = PlaceHours {
            place: is_comparison.then_some(name),
            is_first: number == 0,
            columns: outcome.prediction.hours.unwrap_or_default(),
        };
        let count = hours.columns.time_unix_s.len();
        let starts = (0..count.max(1)).step_by(HOURS_A_PIECE);
        starts.map(move |start| write(&hours, start..(start + HOURS_A_PIECE).min(count)))
    })
}

/// The hours of one place.
pub struct PlaceHours {
    /// Its name, where places are compared.
    place: Option<String>,
    /// It comes first.
    is_first: bool,
    columns: HourColumns,
}

/// Writes some of the hours.
pub type Writer = fn(&PlaceHours, Range<usize>) -> Vec<u8>;

/// Hours as CSV lines; the first piece has the header.
pub fn csv_lines(hours: &PlaceHours, range: Range<usize>) -> Vec<u8> {
    let mut writer = csv::WriterBuilder::new()
        .has_headers(hours.is_first && range.start == 0)
        .terminator(csv::Terminator::CRLF)
        .from_writer(Vec::new());
    for at in range {
        let mut row = HourRow::of(&hours.columns, at);
        row.time = harmless(row.time);
        row.place = hours.place.clone().map(harmless);
        writer
            .serialize(row)
            .expect("writing plain fields to memory does not fail");
    }
    writer.into_inner().expect("flushing to memory does not fail")
}

/// Hours as one JSON object a line.
pub fn json_lines(hours: &PlaceHours, range: Range<usize>) -> Vec<u8> {
    let mut text = Vec::new();
    for at in range {
        let mut row = HourRow::of(&hours.columns, at);
        row.place.clone_from(&hours.place);
        serde_json::to_writer(&mut text, &row).expect("writing plain fields to memory does not fail");
        text.push(b'\n');
    }
    text
}

/// A text that no spreadsheet takes for a formula. Every text cell passes here; numbers cannot be formulas.
fn harmless(text: String) -> String {
    if text.starts_with(['=', '+', '-', '@', '\t', '\r']) {
        format!("'{text}")
    } else {
        text
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn two_hours() -> PlaceHours {
        let two = || vec![0.25, -0.5];
        let columns = HourColumns {
            time_unix_s: vec![0, 3600],
            cycles: two(),
            stall_fraction: two(),
            state_fractions: std::array::from_fn(|_| two()),
            needs_person_fraction: two(),
            open_fraction: two(),
            water_head_g: two(),
            water_cup_g: two(),
            ethanol_head_g: two(),
            ethanol_cup_g: two(),
            cup_drop_mm: two(),
            body_temp_c: vec![Some(20.0), None],
            head_temp_c: vec![Some(19.5), None],
            air_temp_c: vec![Some(20.5), None],
            air_relative_humidity_pct: vec![Some(50.0), None],
            air_speed_m_s: vec![Some(0.1), None],
            outdoor_temp_c: None,
            outdoor_relative_humidity_pct: None,
        };
        PlaceHours {
            place: None,
            is_first: true,
            columns,
        }
    }

    #[test]
    fn csv_has_one_header_and_ends_lines_as_rfc_4180_asks() {
        let text = String::from_utf8([csv_lines(&two_hours(), 0..1), csv_lines(&two_hours(), 1..2)].concat()).unwrap();
        let lines: Vec<&str> = text.split("\r\n").collect();
        assert_eq!(lines.len(), 4, "{text:?}");
        assert!(lines[0].starts_with("time,cycles,stall_fraction,running_fraction"));
        assert!(lines[1].starts_with("1970-01-01T00:00:00Z,0.25,") && lines[1].ends_with(",20.0,19.5,20.5,50.0,0.1,,"));
        assert!(
            lines[2].ends_with(",-0.5,,,,,,,"),
            "unknown cells are empty: {}",
            lines[2]
        );
    }

    #[test]
    fn texts_that_look_like_formulas_are_made_harmless() {
        for text in ["=1+1", "+1", "-1", "@x", "\tx", "\rx"] {
            assert!(harmless(text.to_owned()).starts_with('\''), "{text:?}");
        }
        assert_eq!(harmless("2026-01-01T00:00:00Z".to_owned()), "2026-01-01T00:00:00Z");
    }

    #[test]
    fn every_line_of_ndjson_is_an_object() {
        let text = String::from_utf8(json_lines(&two_hours(), 0..2)).unwrap();
        let rows: Vec<serde_json::Value> = text.lines().map(|line| serde_json::from_str(line).unwrap()).collect();
        assert_eq!(rows[1]["body_temp_c"], serde_json::Value::Null);
    }
}
