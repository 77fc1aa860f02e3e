//! Files that are no CSV text at all, told from their first bytes.

use encoding_rs::{Encoding, UTF_16BE, UTF_16LE};

use crate::model::weather::WeatherFault;

/// Beginnings of files that people send by mistake.
const KNOWN: [(&[u8], &str); 9] = [
    (
        b"PK\x03\x04",
        "a spreadsheet (.xlsx, .ods) or a zip archive: export the sheet as CSV",
    ),
    (
        b"\xd0\xcf\x11\xe0",
        "an old spreadsheet (.xls): export the sheet as CSV",
    ),
    (b"%PDF", "a PDF document"),
    (b"\x89PNG", "a picture"),
    (b"\xff\xd8\xff", "a picture"),
    (b"PAR1", "a Parquet file"),
    (b"\x1f\x8b", "a gzip file inside a gzip file: compress it once"),
    (b"CDF", "a NetCDF file"),
    (b"\x89HDF", "an HDF5 file"),
];

/// The fault of a file that is no text in this encoding.
pub(super) fn not_text(start: &[u8], encoding: &'static Encoding) -> Option<WeatherFault> {
    if let Some((_, what)) = KNOWN.iter().find(|(magic, _)| start.starts_with(magic)) {
        return Some(WeatherFault::whole(
            "not_csv",
            format!("expected CSV text; found {what}"),
        ));
    }
    if start
        .iter()
        .find(|b| !b.is_ascii_whitespace())
        .is_some_and(|b| matches!(b, b'{' | b'<'))
    {
        let detail = "expected CSV text; found what looks like JSON, HTML or XML";
        return Some(WeatherFault::whole("not_csv", detail));
    }
    if encoding == UTF_16LE || encoding == UTF_16BE {
        return None;
    }
    if let Some(name) = sixteen_bit(start) {
        let detail = format!("the file looks like UTF-16: send layout.dialect.encoding {name:?}, or save it as UTF-8");
        return Some(WeatherFault::whole("wrong_encoding", detail));
    }
    binary(start)
}

/// Latin text in UTF-16 has a zero in every second byte.
pub(super) fn sixteen_bit(start: &[u8]) -> Option<&'static str> {
    let zeros = |first: usize| start.iter().skip(first).step_by(2).filter(|b| **b == 0).count();
    let (even, odd) = (zeros(0), zeros(1));
    match start.len() / 2 {
        half if half >= 4 && odd * 10 > half * 8 && even * 10 < half => Some("utf-16le"),
        half if half >= 4 && even * 10 > half * 8 && odd * 10 < half => Some("utf-16be"),
        _ => None,
    }
}

/// A zero, or more than one byte in fifty that no text holds.
fn binary(start: &[u8]) -> Option<WeatherFault> {
    let control = start.iter().filter(|b| **b < 9 || (14..32).contains(*b)).count();
    (start.contains(&0) || control * 50 > start.len()).then(|| {
        WeatherFault::whole(
            "not_csv",
            "expected CSV text; found a binary file (bytes that no text holds)",
        )
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use encoding_rs::UTF_8;

    fn code(start: &[u8]) -> Option<&'static str> {
        not_text(start, UTF_8).map(|fault| fault.code)
    }

    #[test]
    fn what_is_no_csv_is_told() {
        assert_eq!(code(b"PK\x03\x04xxxx"), Some("not_csv"));
        assert_eq!(code(b"  {\"a\": 1}"), Some("not_csv"));
        assert_eq!(code(b"<!doctype html>"), Some("not_csv"));
        assert_eq!(code(b"time,temp\n\x00\x01\x02\x03abc"), Some("not_csv"));
        assert_eq!(code(b"t\0i\0m\0e\0,\0a\0\n\0"), Some("wrong_encoding"));
        assert_eq!(code(b"\0t\0i\0m\0e\0,\0a\0\n"), Some("wrong_encoding"));
        assert_eq!(code(b"time,temp\n2026"), None);
        assert_eq!(code("Zeit,Wärme °C\n".as_bytes()), None);
        assert_eq!(code(b""), None);
    }
}
