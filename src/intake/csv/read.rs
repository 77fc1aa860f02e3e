//! One file from bytes to readings.

use super::detect::{Hints, detect};
use super::layout::{Dialect, Layout};
use super::limits::Limits;
use super::plan::{Header, Plan};
use super::records::Records;
use super::rows::Rows;
use super::source;
use crate::model::notes::Fault;
use crate::model::weather::{RawReadings, WeatherFault};

/// Reads a CSV file, gzipped or not. Without a layout it is found out how ([`detect`]).
///
/// # Errors
/// All faults of the layout; or what has to be asked first; or what is wrong with the file as a whole; or the faults of its
/// rows, the first twenty in full and the others counted. Nothing is guessed: a row is read as the layout says, or it is a
/// fault.
pub fn read(bytes: &[u8], layout: Option<&Layout>, limits: &Limits) -> Result<RawReadings, Vec<WeatherFault>> {
    match layout {
        Some(layout) => by_layout(bytes, layout, limits),
        None => read_with_hints(bytes, &Hints::default(), limits),
    }
}

/// Reads a CSV file as its detection says, and says in the assumptions what was detected.
///
/// # Errors
/// As [`read`].
pub fn read_with_hints(bytes: &[u8], hints: &Hints, limits: &Limits) -> Result<RawReadings, Vec<WeatherFault>> {
    let detection = detect(bytes, hints, limits)?;
    let mut readings = by_layout(bytes, detection.settled()?, limits)?;
    readings.assumptions.splice(0..0, detection.said);
    Ok(readings)
}

fn by_layout(bytes: &[u8], layout: &Layout, limits: &Limits) -> Result<RawReadings, Vec<WeatherFault>> {
    let faults: Vec<WeatherFault> = layout.faults().into_iter().map(in_layout).collect();
    if !faults.is_empty() {
        return Err(faults);
    }
    let mut records = open(bytes, &layout.dialect, limits).map_err(|fault| vec![fault])?;
    let (header, first_row_waits) = header(&mut records, &layout.dialect).map_err(|fault| vec![fault])?;
    let plan = Plan::bind(layout, &header)?;
    Rows::new(layout, &plan, header.names.len()).read(records, first_row_waits, limits)
}

fn in_layout(fault: Fault) -> WeatherFault {
    WeatherFault::column(format!("layout/{}", fault.field), fault.code, fault.detail)
}

fn open<'a>(bytes: &'a [u8], dialect: &Dialect, limits: &Limits) -> Result<Records<'a>, WeatherFault> {
    let text = source::open(bytes, &dialect.encoding, limits)?;
    Ok(Records::new(text, dialect.cut(), dialect.comment_byte(), limits))
}

/// Reads up to the first data row. True: that row is read already, since the file has no header.
fn header(records: &mut Records, dialect: &Dialect) -> Result<(Header, bool), WeatherFault> {
    for _ in 0..dialect.skip_rows {
        records.skip_line()?;
    }
    if !dialect.fixed_width.is_empty() {
        let names = dialect.fixed_width.iter().map(|column| column.name.clone()).collect();
        return Ok((Header { names, named: true }, false));
    }
    if !records.advance()? {
        let detail = format!(
            "expected a header after {} skipped rows; the file ends before it",
            dialect.skip_rows
        );
        return Err(WeatherFault::whole("empty_file", detail));
    }
    let cells = (0..records.len()).filter_map(|at| records.cell(at));
    let names = cells
        .map(|cell| std::str::from_utf8(cell).map(str::to_string))
        .collect::<Result<Vec<_>, _>>();
    let names = names.map_err(|_| header_encoding(records.row()))?;
    if names.iter().any(|name| name.contains('\r')) {
        let detail = "lines end with a carriage return alone; save the file with line feeds";
        return Err(WeatherFault::row(records.row(), None, "line_ends", detail));
    }
    for _ in 1..dialect.header_rows {
        records.advance()?;
    }
    let named = dialect.header_rows > 0;
    Ok((Header { names, named }, !named))
}

fn header_encoding(row: usize) -> WeatherFault {
    let detail =
        "the header is not UTF-8: send layout.dialect.encoding (often windows-1252), or save the file as UTF-8";
    WeatherFault::row(row, None, "wrong_encoding", detail)
}
