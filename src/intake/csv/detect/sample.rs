//! The beginning of a file as text: its encoding, and its first lines.

use std::io::Read;

use encoding_rs::{Encoding, UTF_8};

use super::Hints;
use crate::intake::csv::limits::Limits;
use crate::intake::csv::{sniff, source};
use crate::model::weather::WeatherFault;

/// Bytes looked at to tell the form of a file.
const SAMPLE_BYTES: u64 = 192 * 1024;
/// Lines looked at.
const SAMPLE_LINES: usize = 600;

/// The beginning of a file.
pub(super) struct Sample {
    pub gzip: bool,
    /// Name of the encoding, as layouts have it.
    pub encoding: String,
    /// True: not said by anything in the file, only the last that was left.
    pub fallback: bool,
    pub lines: Vec<String>,
}

impl Sample {
    pub(super) fn take(bytes: &[u8], hints: &Hints, limits: &Limits) -> Result<Self, WeatherFault> {
        let start = source::start(bytes, SAMPLE_BYTES, limits)?;
        let (encoding, fallback) = match &hints.encoding {
            Some(name) => (name.clone(), false),
            None => encoding_of(&start),
        };
        let mut text = Vec::new();
        source::open(bytes, &encoding, limits)?
            .take(SAMPLE_BYTES)
            .read_to_end(&mut text)
            .map_err(|error| source::fault_of(&error))?;
        let whole = (text.len() as u64) < SAMPLE_BYTES;
        Ok(Self {
            gzip: source::is_gzip(bytes),
            encoding,
            fallback,
            lines: lines(&text, whole)?,
        })
    }
}

/// Name of the encoding, and whether it is only what is left when UTF-8 does not fit.
fn encoding_of(start: &[u8]) -> (String, bool) {
    if let Some((marked, _)) = Encoding::for_bom(start) {
        return (marked.name().to_lowercase(), false);
    }
    if let Some(name) = sniff::sixteen_bit(start) {
        return (name.into(), false);
    }
    let (_, cut) = UTF_8.decode_without_bom_handling(start);
    // The sample may end inside a character.
    let ends_inside = std::str::from_utf8(start).is_err_and(|error| error.error_len().is_none());
    if cut && !ends_inside {
        return ("windows-1252".into(), true);
    }
    ("utf-8".into(), false)
}

fn lines(text: &[u8], whole: bool) -> Result<Vec<String>, WeatherFault> {
    let text = String::from_utf8_lossy(text);
    if !text.contains('\n') && text.trim_end().contains('\r') {
        let detail = "lines end with a carriage return alone; save the file with line feeds";
        return Err(WeatherFault::row(1, None, "line_ends", detail));
    }
    let mut lines: Vec<String> = text
        .split('\n')
        .take(SAMPLE_LINES)
        .map(|line| line.trim_end_matches('\r').to_string())
        .collect();
    if !whole && lines.len() < SAMPLE_LINES && lines.len() > 1 {
        lines.pop();
    }
    if lines.iter().all(|line| line.trim().is_empty()) {
        let detail = "expected a header and rows of readings; the file ends before its header, or begins with thousands of \
                      blank lines";
        return Err(WeatherFault::whole("empty_file", detail));
    }
    Ok(lines)
}
