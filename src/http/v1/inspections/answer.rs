//! What is answered about a file.

use serde::Serialize;
use utoipa::ToSchema;

use super::item;
use crate::http::error::FaultItem;
use crate::http::v1::layout::CsvLayout;
use crate::http::v1::notes::Assumption;
use crate::http::v1::predictions::{WeatherFlag, instant, rounded};
use crate::service::records::{Candidate, ColumnFinding, Confidence, Detection, Question, RawReadings, Role};
use crate::service::{Inspected, Inspection};

/// What was found in a weather file.
#[derive(Debug, Serialize, ToSchema)]
pub struct WeatherInspection {
    /// True: a prediction takes this file with what was said here, hints, layout or nothing.
    pub ready: bool,
    /// What cannot be told from the file, with the answers that fit.
    pub questions: Vec<WeatherQuestion>,
    /// What a prediction with this file would be refused for.
    pub faults: Vec<FaultItem>,
    /// Odd values by row; a prediction uses or drops them as their details say.
    pub flags: Vec<WeatherFlag>,
    /// How the text is cut.
    pub form: FileForm,
    /// Every column, in the order of the file.
    pub columns: Vec<InspectedColumn>,
    /// How the time is read.
    pub time: InspectedTime,
    /// The readings, where the file can be read.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub readings: Option<InspectedReadings>,
    /// The first readings.
    pub first_rows: Vec<InspectedRow>,
    /// Everything that was found by looking or has to be assumed.
    pub assumptions: Vec<Assumption>,
    /// The layout to send back as `weather.layout`; complete but for what is asked.
    pub layout: CsvLayout,
}

/// How the text is cut.
#[derive(Debug, Serialize, ToSchema)]
pub struct FileForm {
    /// True: it came gzipped.
    pub gzip: bool,
    /// Encoding, as the WHATWG standard calls it.
    #[schema(examples("utf-8"))]
    pub encoding: String,
    /// Between cells: one character, or `tab`; `fixed_width` for columns by place.
    #[schema(examples(";"))]
    pub delimiter: String,
    /// Decimal sign.
    #[schema(examples(","))]
    pub decimal: String,
    /// Line of the column names, counted from 1; absent where columns have no names.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub header_row: Option<usize>,
    /// Line of the first reading, counted from 1.
    pub first_row: usize,
}

/// A column of the file, or a name in a file of one value a row.
#[derive(Debug, Serialize, ToSchema)]
pub struct InspectedColumn {
    /// Its name in the header; empty where there is none.
    pub name: String,
    /// What a layout or a hint calls it: its name, or its place (`#3`) where names repeat or are missing.
    pub reference: String,
    /// What it is taken for.
    pub role: ColumnRole,
    /// The variable, for the roles `read` and `open`.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, examples("air_temperature"))]
    pub quantity: Option<&'static str>,
    /// Its unit, where it is known.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, examples("°C"))]
    pub unit: Option<&'static str>,
    /// How sure that is.
    pub confidence: ColumnConfidence,
    /// Why.
    pub why: String,
}

/// What a column is taken for.
#[derive(Debug, Clone, Copy, Serialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum ColumnRole {
    /// The time, or a part of it.
    Time,
    /// A variable that is read.
    Read,
    /// A variable that is not read: asked for, or left out.
    Open,
    /// Decides which rows are read, or names what a row holds.
    Selects,
    /// Nothing that is read.
    Other,
}

/// How sure a finding is.
#[derive(Debug, Clone, Copy, Serialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum ColumnConfidence {
    /// Not decided.
    Low,
    /// Follows from the values, or from a custom of the trade.
    Medium,
    /// Written in the file, or told.
    High,
}

/// How the time is read.
#[derive(Debug, Serialize, ToSchema)]
pub struct InspectedTime {
    /// Columns that hold it, joined by one space.
    pub columns: Vec<String>,
    /// As `layout.time.format`.
    pub format: String,
    /// Zone of times without an offset; absent where each has its own, or none is known.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub zone: Option<String>,
    /// Where the zone was found.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub zone_from: Option<String>,
}

/// The readings of the file.
#[derive(Debug, Serialize, ToSchema)]
pub struct InspectedReadings {
    /// How many.
    pub count: usize,
    /// The earliest; the clock's own time without `Z` where the zone is not known.
    #[schema(examples("2026-01-01T00:00:00Z"))]
    pub from: String,
    /// The latest.
    pub to: String,
    /// The most usual step from one to the next [s].
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, examples(3600))]
    pub step_seconds: Option<i64>,
}

/// One reading as it was read; null is a missing value, absent a variable that is not read.
#[derive(Debug, Serialize, ToSchema)]
pub struct InspectedRow {
    /// Line of the file, counted from 1.
    pub row: u32,
    /// Its time; the clock's own time without `Z` where the zone is not known.
    pub time: String,
    /// Air temperature [°C].
    pub air_temperature_c: Option<f64>,
    /// Relative humidity [%].
    #[serde(skip_serializing_if = "Option::is_none")]
    pub relative_humidity_pct: Option<Option<f64>>,
    /// Dew point [°C].
    #[serde(skip_serializing_if = "Option::is_none")]
    pub dew_point_c: Option<Option<f64>>,
    /// Wet bulb [°C].
    #[serde(skip_serializing_if = "Option::is_none")]
    pub wet_bulb_c: Option<Option<f64>>,
    /// Air pressure as read, at the station or at sea level [hPa].
    #[serde(skip_serializing_if = "Option::is_none")]
    pub air_pressure_hpa: Option<Option<f64>>,
    /// Wind speed [m/s].
    #[serde(skip_serializing_if = "Option::is_none")]
    pub wind_speed_m_s: Option<Option<f64>>,
    /// Short-wave irradiance [W/m²].
    #[serde(skip_serializing_if = "Option::is_none")]
    pub shortwave_w_m2: Option<Option<f64>>,
}

/// Something that cannot be told from the file.
#[derive(Debug, Serialize, ToSchema)]
pub struct WeatherQuestion {
    /// Stable code for programs.
    #[schema(examples("no_zone"))]
    pub code: &'static str,
    /// True: without an answer a prediction is refused. False: the variable is left out, and that is said.
    pub needed: bool,
    /// Column it is about.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub column: Option<String>,
    /// Line that shows it, counted from 1.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub row: Option<usize>,
    /// The question.
    pub text: String,
    /// The answers that fit the file.
    pub candidates: Vec<AnswerCandidate>,
}

/// An answer that fits the file.
#[derive(Debug, Serialize, ToSchema)]
pub struct AnswerCandidate {
    /// What it means.
    pub meaning: String,
    /// What to add to `weather` of a prediction; what follows the colon is the part `hints` of an inspection.
    #[schema(examples("\"hints\": {\"zone\":\"UTC\"}"))]
    pub send: String,
}

impl From<Inspection> for WeatherInspection {
    fn from(found: Inspection) -> Self {
        let Inspection {
            detection,
            readings,
            faults,
            flags,
            assumptions,
        } = found;
        let open = detection.questions.iter().any(|question| question.needed);
        Self {
            ready: readings.is_some() && !open && faults.is_empty(),
            faults: faults.iter().map(item).collect(),
            flags: flags.iter().map(Into::into).collect(),
            form: FileForm::of(&detection),
            time: InspectedTime::of(&detection),
            columns: detection.columns.into_iter().map(Into::into).collect(),
            questions: detection.questions.into_iter().map(Into::into).collect(),
            first_rows: readings.as_deref().map(first_rows).unwrap_or_default(),
            readings: readings.as_deref().map(Into::into),
            assumptions: assumptions.into_iter().map(Into::into).collect(),
            layout: detection.layout.into(),
        }
    }
}

impl FileForm {
    fn of(found: &Detection) -> Self {
        let dialect = &found.layout.dialect;
        let fixed = !dialect.fixed_width.is_empty();
        Self {
            gzip: found.gzip,
            encoding: dialect.encoding.clone(),
            delimiter: if fixed {
                "fixed_width".into()
            } else {
                dialect.delimiter.clone()
            },
            decimal: dialect.decimal.clone(),
            header_row: found.header_row,
            first_row: found.first_row,
        }
    }
}

impl InspectedTime {
    fn of(found: &Detection) -> Self {
        let time = &found.layout.time;
        Self {
            columns: time.columns.clone(),
            format: time.format.clone(),
            zone: time.zone.clone(),
            zone_from: found.zone_from.clone(),
        }
    }
}

impl From<ColumnFinding> for InspectedColumn {
    fn from(found: ColumnFinding) -> Self {
        let (role, quantity) = match found.role {
            Role::Time => (ColumnRole::Time, None),
            Role::Read(quantity) => (ColumnRole::Read, Some(quantity.name())),
            Role::Open(quantity) => (ColumnRole::Open, Some(quantity.name())),
            Role::Selects => (ColumnRole::Selects, None),
            Role::Other => (ColumnRole::Other, None),
        };
        let confidence = match found.confidence {
            Confidence::Low => ColumnConfidence::Low,
            Confidence::Medium => ColumnConfidence::Medium,
            Confidence::High => ColumnConfidence::High,
        };
        Self {
            name: found.name,
            reference: found.reference,
            role,
            quantity,
            unit: found.unit.map(|unit| unit.symbol()),
            confidence,
            why: found.why,
        }
    }
}

impl From<Question> for WeatherQuestion {
    fn from(question: Question) -> Self {
        Self {
            code: question.code,
            needed: question.needed,
            column: question.column,
            row: question.row,
            text: question.text,
            candidates: question.candidates.into_iter().map(Into::into).collect(),
        }
    }
}

impl From<Candidate> for AnswerCandidate {
    fn from(candidate: Candidate) -> Self {
        Self {
            meaning: candidate.meaning,
            send: candidate.send,
        }
    }
}

impl From<&Inspected> for InspectedReadings {
    fn from(found: &Inspected) -> Self {
        let (from, to) = found.span_unix_s;
        Self {
            count: found.count,
            from: shown(from, found.zone_known),
            to: shown(to, found.zone_known),
            step_seconds: found.step_s,
        }
    }
}

/// An instant, or the clock's own time.
fn shown(unix_s: i64, zone_known: bool) -> String {
    let text = instant(unix_s);
    if zone_known {
        text
    } else {
        text.trim_end_matches('Z').to_owned()
    }
}

fn first_rows(found: &Inspected) -> Vec<InspectedRow> {
    (0..found.first.len())
        .map(|at| row(&found.first, at, found.zone_known))
        .collect()
}

fn row(readings: &RawReadings, at: usize, zone_known: bool) -> InspectedRow {
    const ZERO_CELSIUS_K: f64 = 273.15;
    let known = |value: f64| (!value.is_nan()).then(|| rounded(value));
    let column = |values: &Option<Vec<f64>>, factor: f64, shift: f64| {
        values.as_ref().map(|values| known(values[at] * factor + shift))
    };
    InspectedRow {
        row: readings.row[at],
        time: shown(readings.time_unix_s[at], zone_known),
        air_temperature_c: known(readings.air_temp_k[at] - ZERO_CELSIUS_K),
        relative_humidity_pct: column(&readings.relative_humidity, 100.0, 0.0),
        dew_point_c: column(&readings.dew_point_k, 1.0, -ZERO_CELSIUS_K),
        wet_bulb_c: column(&readings.wet_bulb_k, 1.0, -ZERO_CELSIUS_K),
        air_pressure_hpa: column(&readings.pressure_pa, 0.01, 0.0),
        wind_speed_m_s: column(&readings.wind_speed_m_s, 1.0, 0.0),
        shortwave_w_m2: column(&readings.shortwave_w_m2, 1.0, 0.0),
    }
}
