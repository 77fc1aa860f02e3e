//! Files as people have them: what is found out by looking, and what has to be asked.
//!
//! Reading order: `sample` takes the beginning of the file as text, `table` finds delimiter, header and data in it (`cells`,
//! `signs`), `times` and `formats` find the columns of the time and the ways they may be read, `survey` passes over the
//! rows, `meaning` and `words` say what a column's name speaks of, `columns` and `units` decide, `zone` looks for the zone,
//! `long` and `fixed` know two forms of their own, `decide` settles the time, and `assemble` makes a [`Layout`] of it all. What stays open is a
//! [`Question`] with its candidates; nothing is guessed in silence.

mod assemble;
mod cells;
mod columns;
mod decide;
mod finding;
mod fixed;
mod formats;
mod hints;
mod long;
mod meaning;
mod questions;
mod sample;
mod signs;
mod survey;
mod table;
mod times;
mod units;
mod words;
mod zone;

pub use finding::{Candidate, ColumnFinding, Confidence, Detection, Question, Role};
pub use hints::{ColumnHint, ColumnHints, Hints};

use super::limits::Limits;
use super::own_form;
use crate::model::weather::{Quantity, WeatherFault};
use sample::Sample;
use table::Table;

/// Every variable, in the order in which they are decided.
const QUANTITIES: [Quantity; 8] = [
    Quantity::AirTemperature,
    Quantity::RelativeHumidity,
    Quantity::DewPoint,
    Quantity::WetBulb,
    Quantity::StationPressure,
    Quantity::SeaLevelPressure,
    Quantity::WindSpeed,
    Quantity::Shortwave,
];

/// Finds out how a file is to be read.
///
/// # Errors
/// Faults of the hints, and files that are no table at all. What is a table but leaves something open is no error here:
/// see [`Detection::questions`].
pub fn detect(bytes: &[u8], hints: &Hints, limits: &Limits) -> Result<Detection, Vec<WeatherFault>> {
    let faults = hints.faults();
    if !faults.is_empty() {
        return Err(faults);
    }
    let sample = Sample::take(bytes, hints, limits).map_err(|fault| vec![fault])?;
    if let Some(own) = own(&sample, hints) {
        return Ok(own);
    }
    if let Some(typical) = fixed::tmy2(&sample, hints) {
        return Ok(typical);
    }
    let table = Table::find(&sample, hints).map_err(|fault| vec![fault])?;
    assemble::detection(bytes, &sample, &table, hints, limits)
}

/// The documented form needs no looking.
fn own(sample: &Sample, hints: &Hints) -> Option<Detection> {
    let header_at = sample.lines.iter().position(|line| !line.trim().is_empty())?;
    let names = cells::cut(&sample.lines[header_at], ',');
    let mut layout = own_form::layout_for(&names)
        .ok()
        .filter(|_| *hints == Hints::default())?;
    if !sample.fallback {
        layout.dialect.encoding.clone_from(&sample.encoding);
    }
    let columns = names
        .iter()
        .map(|name| finding::ColumnFinding::own(name, &layout))
        .collect();
    Some(Detection {
        gzip: sample.gzip,
        header_row: Some(header_at + 1),
        first_row: header_at + 2,
        columns,
        zone_from: Some("the offset of each time".into()),
        layout,
        questions: Vec::new(),
        said: Vec::new(),
    })
}

/// The year in which a typical year is read: its months come from several. Neither begins with a leap day by chance.
fn typical_year(leap_day: bool) -> i64 {
    if leap_day { 2024 } else { 2021 }
}
