//! One weather file looked at: how it is read, what is in it, and what has to be asked.

use super::records::{
    Assumption, ColumnFinding, Confidence, Detection, Flag, Hints, Layout, Question, RawReadings, WeatherFault,
};
use crate::config::Limits;
use crate::intake::csv;
use crate::model::weather::{RegulariseOptions, regularise};

/// How many readings are shown.
const FIRST_ROWS: usize = 5;

/// What is said about the file beforehand.
#[derive(Debug, Clone)]
pub enum Told {
    /// Some of it; the rest is found out.
    Hints(Box<Hints>),
    /// All of it.
    Layout(Box<Layout>),
}

/// What was found in a file.
#[derive(Debug, Clone)]
pub struct Inspection {
    /// How it is read.
    pub detection: Detection,
    /// The readings, where it can be read at all.
    pub readings: Option<Box<Inspected>>,
    /// What a prediction would be refused for.
    pub faults: Vec<WeatherFault>,
    /// Odd values; a prediction would name them too.
    pub flags: Vec<Flag>,
    /// What would be assumed.
    pub assumptions: Vec<Assumption>,
}

/// The readings of a file.
#[derive(Debug, Clone)]
pub struct Inspected {
    /// The first of them.
    pub first: RawReadings,
    /// How many there are.
    pub count: usize,
    /// Earliest and latest time, seconds since 1970.
    pub span_unix_s: (i64, i64),
    /// The most usual step from one to the next [s].
    pub step_s: Option<i64>,
    /// False: the zone is not known, and the times are the clock's own.
    pub zone_known: bool,
}

/// Looks at a file, gzipped or not.
///
/// # Errors
/// Faults of the hints or the layout, and files that are no table at all. Everything else is part of the inspection.
pub fn inspect(file: &[u8], told: &Told, limits: &Limits) -> Result<Inspection, Vec<WeatherFault>> {
    let limits = csv::Limits {
        max_decompressed_bytes: limits.decompressed_bytes as u64,
        ..csv::Limits::default()
    };
    let detection = detection(file, told, &limits)?;
    let Some((layout, zone_known)) = readable(&detection) else {
        let assumptions = detection.said.clone();
        return Ok(Inspection {
            detection,
            readings: None,
            faults: Vec::new(),
            flags: Vec::new(),
            assumptions,
        });
    };
    match csv::read(file, Some(&layout), &limits) {
        Ok(readings) => Ok(looked_through(detection, readings, zone_known)),
        Err(faults) if faults.iter().any(is_of_layout) => Err(faults),
        Err(faults) => {
            let assumptions = detection.said.clone();
            Ok(Inspection {
                detection,
                readings: None,
                faults,
                flags: Vec::new(),
                assumptions,
            })
        }
    }
}

fn is_of_layout(fault: &WeatherFault) -> bool {
    fault
        .column
        .as_deref()
        .is_some_and(|column| column.starts_with("layout/"))
}

fn detection(file: &[u8], told: &Told, limits: &csv::Limits) -> Result<Detection, Vec<WeatherFault>> {
    match told {
        Told::Hints(hints) => csv::detect(file, hints, limits),
        Told::Layout(layout) => {
            let found = csv::detect(file, &Hints::default(), limits).ok();
            Ok(Detection {
                gzip: found.as_ref().is_some_and(|found| found.gzip),
                header_row: (layout.dialect.header_rows > 0).then_some(layout.dialect.skip_rows + 1),
                first_row: layout.dialect.skip_rows + layout.dialect.header_rows + 1,
                columns: found
                    .map(|found| found.columns)
                    .unwrap_or_default()
                    .into_iter()
                    .map(|column| as_told(column, layout))
                    .collect(),
                zone_from: layout.time.zone.as_ref().map(|_| "the layout".to_string()),
                layout: layout.as_ref().clone(),
                questions: Vec::new(),
                said: Vec::new(),
            })
        }
    }
}

/// A column as the layout has it.
fn as_told(column: ColumnFinding, layout: &Layout) -> ColumnFinding {
    let mapped = layout.columns.mapped();
    let read = mapped
        .iter()
        .find(|(_, mapping)| mapping.column == column.reference || mapping.column == column.name);
    let role = match read {
        Some((quantity, _)) => csv::Role::Read(*quantity),
        None if layout.time.columns.contains(&column.reference) => csv::Role::Time,
        None => csv::Role::Other,
    };
    ColumnFinding {
        role,
        unit: read.and_then(|(_, mapping)| crate::model::weather::Unit::parse(&mapping.unit)),
        confidence: Confidence::High,
        why: "as the layout says".into(),
        ..column
    }
}

/// The layout with which the file can be read now; without a zone the clock's own time is read.
fn readable(detection: &Detection) -> Option<(Layout, bool)> {
    let open = |question: &&Question| question.needed && question.code != "no_zone";
    if detection.questions.iter().any(|question| open(&question)) {
        return None;
    }
    let mut layout = detection.layout.clone();
    let zone_known = !detection.questions.iter().any(|question| question.code == "no_zone");
    if !zone_known {
        layout.time.zone = Some("UTC".into());
    }
    Some((layout, zone_known))
}

fn looked_through(detection: Detection, readings: RawReadings, zone_known: bool) -> Inspection {
    let inspected = Inspected {
        count: readings.len(),
        span_unix_s: span(&readings.time_unix_s),
        step_s: usual_step_s(&readings.time_unix_s),
        first: first_rows(&readings),
        zone_known,
    };
    let lenient = RegulariseOptions {
        max_unknown_share: 1.0,
        accept_suspicious: true,
        ..RegulariseOptions::default()
    };
    let faults = regularise(readings.clone(), &RegulariseOptions::default())
        .err()
        .unwrap_or_default();
    let (flags, assumptions) = match regularise(readings, &lenient) {
        Ok(series) => (series.report.flags, series.assumptions),
        Err(_) => Default::default(),
    };
    let known = |flag: &Flag| faults.iter().any(|fault| fault.code == flag.code);
    Inspection {
        flags: flags.into_iter().filter(|flag| !known(flag)).collect(),
        assumptions: [detection.said.clone(), assumptions].concat(),
        detection,
        readings: Some(Box::new(inspected)),
        faults,
    }
}

fn span(times: &[i64]) -> (i64, i64) {
    let ends = (times.iter().min(), times.iter().max());
    (ends.0.copied().unwrap_or_default(), ends.1.copied().unwrap_or_default())
}

/// The step that occurs most often from row to row.
fn usual_step_s(times: &[i64]) -> Option<i64> {
    let mut steps: Vec<i64> = times
        .windows(2)
        .map(|pair| (pair[1] - pair[0]).abs())
        .filter(|step| *step > 0)
        .collect();
    steps.sort_unstable();
    steps
        .chunk_by(|a, b| a == b)
        .max_by_key(|run| run.len())
        .map(|run| run[0])
}

fn first_rows(readings: &RawReadings) -> RawReadings {
    let count = readings.len().min(FIRST_ROWS);
    let cut = |column: &Option<Vec<f64>>| column.as_ref().map(|values| values[..count].to_vec());
    RawReadings {
        time_unix_s: readings.time_unix_s[..count].to_vec(),
        row: readings.row[..count].to_vec(),
        air_temp_k: readings.air_temp_k[..count].to_vec(),
        relative_humidity: cut(&readings.relative_humidity),
        dew_point_k: cut(&readings.dew_point_k),
        wet_bulb_k: cut(&readings.wet_bulb_k),
        pressure_pa: cut(&readings.pressure_pa),
        pressure_is_sea_level: readings.pressure_is_sea_level,
        wind_speed_m_s: cut(&readings.wind_speed_m_s),
        shortwave_w_m2: cut(&readings.shortwave_w_m2),
        ..RawReadings::default()
    }
}
