//! What a sender can say about a file without writing the whole layout: answers to the questions of a detection.

use serde::{Deserialize, Serialize};

use crate::intake::csv::layout::{LabelName, RowFilter};
use crate::model::weather::zone::Zone;
use crate::model::weather::{Quantity, Unit, WeatherFault};

/// Answers to questions; whatever is left out is detected.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize)]
#[serde(deny_unknown_fields, default)]
pub struct Hints {
    /// A name of the WHATWG encoding standard.
    pub encoding: Option<String>,
    /// Between cells: one character, or `tab`.
    pub delimiter: Option<String>,
    /// Decimal sign: `.` or `,`.
    pub decimal: Option<String>,
    /// Columns that hold the time, in the order date, time.
    pub time: Vec<String>,
    /// Zone of times without an offset: `UTC`, `+01:00`, or an IANA name.
    pub zone: Option<String>,
    /// True: 03/04 is 3 April; false: March 4th.
    pub day_first: Option<bool>,
    /// What the time says about the value.
    pub label: Option<LabelName>,
    /// Read every date as if in this year.
    pub year: Option<i64>,
    /// Read only the rows in which this holds.
    pub rows: Option<RowFilter>,
    /// Marks of a missing value besides the usual ones.
    pub missing: Vec<String>,
    /// Columns and units of single variables.
    pub columns: ColumnHints,
    /// Columns to leave alone.
    pub ignore: Vec<String>,
}

/// Columns and units of single variables.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize)]
#[serde(deny_unknown_fields, default)]
#[expect(missing_docs, reason = "the variables are described at `Quantity`")]
pub struct ColumnHints {
    pub air_temperature: Option<ColumnHint>,
    pub relative_humidity: Option<ColumnHint>,
    pub dew_point: Option<ColumnHint>,
    pub wet_bulb: Option<ColumnHint>,
    pub station_pressure: Option<ColumnHint>,
    pub sea_level_pressure: Option<ColumnHint>,
    pub wind_speed: Option<ColumnHint>,
    pub shortwave: Option<ColumnHint>,
}

/// Which column, in which unit; either may be left to the detection.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize)]
#[serde(deny_unknown_fields, default)]
pub struct ColumnHint {
    /// Name in the header, or place, `#1` for the first.
    pub column: Option<String>,
    /// Unit of the value.
    pub unit: Option<String>,
}

impl ColumnHints {
    /// The hint for one variable.
    pub fn of(&self, quantity: Quantity) -> Option<&ColumnHint> {
        match quantity {
            Quantity::AirTemperature => self.air_temperature.as_ref(),
            Quantity::RelativeHumidity => self.relative_humidity.as_ref(),
            Quantity::DewPoint => self.dew_point.as_ref(),
            Quantity::WetBulb => self.wet_bulb.as_ref(),
            Quantity::StationPressure => self.station_pressure.as_ref(),
            Quantity::SeaLevelPressure => self.sea_level_pressure.as_ref(),
            Quantity::WindSpeed => self.wind_speed.as_ref(),
            Quantity::Shortwave => self.shortwave.as_ref(),
        }
    }
}

impl Hints {
    /// Everything wrong with the hints themselves; columns are looked for later.
    pub(super) fn faults(&self) -> Vec<WeatherFault> {
        let mut faults = Vec::new();
        let mut fault = |field: &str, code, detail: String| {
            faults.push(WeatherFault::column(format!("hints/{field}"), code, detail));
        };
        if let Some(Err(detail)) = self.zone.as_deref().map(Zone::parse) {
            fault("zone", "unknown_zone", detail);
        }
        if let Some(name) = self
            .encoding
            .as_ref()
            .filter(|name| encoding_rs::Encoding::for_label(name.as_bytes()).is_none())
        {
            fault(
                "encoding",
                "bad_dialect",
                format!("expected utf-8, utf-16le, windows-1252 or another WHATWG name; found {name:?}"),
            );
        }
        if let Some(sign) = self.decimal.as_ref().filter(|sign| *sign != "." && *sign != ",") {
            fault("decimal", "bad_dialect", format!("expected . or ,; found {sign:?}"));
        }
        for quantity in super::QUANTITIES {
            let unit = self.columns.of(quantity).and_then(|hint| hint.unit.as_ref());
            let fits = |unit: &str| Unit::parse(unit).is_some_and(|unit| quantity.units().contains(&unit));
            if let Some(unit) = unit.filter(|unit| !fits(unit)) {
                let known: Vec<&str> = quantity.units().iter().map(|unit| unit.symbol()).collect();
                let detail = format!("expected one of {}; found {unit:?}", known.join(", "));
                fault(&format!("columns/{}/unit", quantity.name()), "bad_unit", detail);
            }
        }
        faults
    }
}
