//! A layout checked as a whole, before any byte of the file is read.

use super::layout::{Clock, ColumnMapping, Columns, Dialect, FixedColumn, Layout, TimeLayout};
use super::pattern::Pattern;
use super::records::Cut;
use crate::model::notes::Fault;
use crate::model::weather::zone::Zone;
use crate::model::weather::{Quantity, Unit};

impl Layout {
    /// Everything wrong with the layout itself; `field` is a path inside it, for example `columns/dew_point/unit`.
    pub fn faults(&self) -> Vec<Fault> {
        let mut faults = self.dialect.faults();
        faults.extend(self.time.faults());
        faults.extend(self.columns.faults());
        let hold = self.long_form.as_ref().and_then(|long| long.hold_hours);
        if hold.is_some_and(|hours| !(hours > 0.0 && hours <= LONGEST_HOLD_HOURS)) {
            let detail = format!("expected more than 0 and at most {LONGEST_HOLD_HOURS} hours; found {hold:?}");
            faults.push(Fault::new("long_form/hold_hours", "out_of_range", detail));
        }
        if self.rows.as_ref().is_some_and(|rows| rows.column.is_empty()) {
            faults.push(Fault::new("rows/column", "empty", "expected the name of a column"));
        }
        faults
    }
}

impl Dialect {
    /// The byte between cells.
    pub(super) fn delimiter_byte(&self) -> Option<u8> {
        match self.delimiter.as_str() {
            "tab" | "\\t" => Some(b'\t'),
            other => single_byte(other).filter(|b| !b.is_ascii_alphanumeric() && !b"\"\r\n.-+".contains(b)),
        }
    }

    /// How rows are cut into cells.
    pub(super) fn cut(&self) -> Cut {
        if self.fixed_width.is_empty() {
            return Cut::Delimiter(self.delimiter_byte().unwrap_or(b','));
        }
        let place = |column: &FixedColumn| (column.start.saturating_sub(1), column.width);
        Cut::Places(self.fixed_width.iter().map(place).collect())
    }

    /// The sign between groups of three digits.
    pub(super) fn thousands_byte(&self) -> Option<u8> {
        self.thousands.as_deref().and_then(single_byte)
    }

    /// The byte that starts a comment line.
    pub(super) fn comment_byte(&self) -> Option<u8> {
        self.comment.as_deref().and_then(single_byte)
    }

    fn faults(&self) -> Vec<Fault> {
        let mut faults = Vec::new();
        let mut fault = |field: &str, detail: String| faults.push(Fault::new(field, "bad_dialect", detail));
        if encoding_rs::Encoding::for_label(self.encoding.as_bytes()).is_none() {
            let known = "utf-8, utf-16le, utf-16be, windows-1252 or another WHATWG name";
            fault(
                "dialect/encoding",
                format!("expected {known}; found {:?}", self.encoding),
            );
        }
        if self.delimiter_byte().is_none() {
            let found = &self.delimiter;
            fault(
                "dialect/delimiter",
                format!("expected one character such as , ; | or tab; found {found:?}"),
            );
        }
        if self.decimal != "." && self.decimal != "," {
            fault("dialect/decimal", format!("expected . or ,; found {:?}", self.decimal));
        }
        if self.decimal == "," && self.delimiter == "," {
            fault(
                "dialect/decimal",
                "decimal and delimiter are both a comma; one of them must be another".into(),
            );
        }
        if self.comment.is_some() && self.comment_byte().is_none() {
            fault(
                "dialect/comment",
                format!("expected one character; found {:?}", self.comment),
            );
        }
        for (field, rows) in [
            ("dialect/header_rows", self.header_rows),
            ("dialect/skip_rows", self.skip_rows),
        ] {
            if rows > MOST_PREAMBLE_ROWS {
                fault(field, format!("expected 0 to {MOST_PREAMBLE_ROWS}; found {rows}"));
            }
        }
        faults.extend(self.thousands_fault());
        faults.extend(self.fixed_width_faults());
        faults
    }

    fn thousands_fault(&self) -> Option<Fault> {
        let sign = self.thousands.as_ref()?;
        let sound = [".", ",", "'", " "].contains(&sign.as_str()) && *sign != self.decimal;
        let detail = format!("expected . , ' or a space, and not the decimal sign; found {sign:?}");
        (!sound).then(|| Fault::new("dialect/thousands", "bad_dialect", detail))
    }

    fn fixed_width_faults(&self) -> Vec<Fault> {
        let wrong = |column: &FixedColumn| column.name.is_empty() || column.start == 0 || column.width == 0;
        let places = (0..self.fixed_width.len()).filter(|at| wrong(&self.fixed_width[*at]));
        let detail = "expected a name, a start from 1 and a width of at least 1";
        places
            .map(|at| Fault::new(format!("dialect/fixed_width/{at}"), "bad_dialect", detail))
            .collect()
    }
}

/// A year: whatever holds longer was read once [h].
const LONGEST_HOLD_HOURS: f64 = 8784.0;

/// More lines before the data than any file met.
const MOST_PREAMBLE_ROWS: usize = 1000;

fn single_byte(text: &str) -> Option<u8> {
    match text.as_bytes() {
        [byte] if byte.is_ascii() => Some(*byte),
        _ => None,
    }
}

impl TimeLayout {
    fn faults(&self) -> Vec<Fault> {
        let mut faults = Vec::new();
        if self.columns.is_empty() {
            faults.push(Fault::new(
                "time/columns",
                "empty",
                "expected the name of at least one column",
            ));
        }
        match Pattern::parse(&self.format) {
            Ok(pattern) => {
                faults.extend(self.clock_fault(&pattern));
                if !pattern.has_year() && self.year.is_none() {
                    let detail = "the format has no year (%Y or %y): send time.year, the year of all readings";
                    faults.push(Fault::new("time/year", "missing", detail));
                }
            }
            Err(detail) => faults.push(Fault::new("time/format", "bad_format", detail)),
        }
        if let Some(Err(detail)) = self.zone.as_deref().map(Zone::parse) {
            faults.push(Fault::new("time/zone", "unknown_zone", detail));
        }
        if let Some(year) = self.year.filter(|year| !(1800..2200).contains(year)) {
            faults.push(Fault::new(
                "time/year",
                "year_out_of_range",
                format!("expected 1800 to 2199; found {year}"),
            ));
        }
        faults
    }

    fn clock_fault(&self, pattern: &Pattern) -> Option<Fault> {
        let wants_half = self.clock == Some(Clock::AmPm);
        let whole_number = self.clock == Some(Clock::HourMinute);
        if whole_number && (!pattern.has_hour() || pattern.has_minute()) {
            let detail = "clock hhmm needs %H in the format, which holds hour and minute, and no %M";
            return Some(Fault::new("time/clock", "clock_mismatch", detail));
        }
        if self.clock.is_some() && pattern.is_twelve_hour() != wants_half {
            let detail = "clock am_pm needs %I and %p in the format, and the other clocks need %H";
            return Some(Fault::new("time/clock", "clock_mismatch", detail));
        }
        None
    }
}

impl Columns {
    fn faults(&self) -> Vec<Fault> {
        let mapped = self.mapped();
        let has = |quantity: Quantity| mapped.iter().any(|(q, _)| *q == quantity);
        let mut faults: Vec<Fault> = mapped
            .iter()
            .flat_map(|(quantity, mapping)| mapping.faults(*quantity))
            .collect();
        if !has(Quantity::AirTemperature) {
            faults.push(Fault::new(
                "columns/air_temperature",
                "missing",
                "expected the column of the air temperature",
            ));
        }
        let humidity = [Quantity::RelativeHumidity, Quantity::DewPoint, Quantity::WetBulb];
        if !humidity.into_iter().any(has) {
            let detail = "expected a column for relative_humidity, dew_point or wet_bulb; found none";
            faults.push(Fault::new("columns", "no_humidity", detail));
        }
        if has(Quantity::StationPressure) && has(Quantity::SeaLevelPressure) {
            let detail = "station_pressure and sea_level_pressure are both mapped; map one (station pressure needs no reduction)";
            faults.push(Fault::new("columns/sea_level_pressure", "two_pressures", detail));
        }
        faults
    }
}

impl ColumnMapping {
    fn faults(&self, quantity: Quantity) -> Vec<Fault> {
        let mut faults = Vec::new();
        let field = |name: &str| format!("columns/{}/{name}", quantity.name());
        if self.column.is_empty() {
            faults.push(Fault::new(field("column"), "empty", "expected the name of a column"));
        }
        if !Unit::parse(&self.unit).is_some_and(|unit| quantity.units().contains(&unit)) {
            let known: Vec<&str> = quantity.units().iter().map(|unit| unit.symbol()).collect();
            let detail = format!("expected one of {}; found {:?}", known.join(", "), self.unit);
            faults.push(Fault::new(field("unit"), "bad_unit", detail));
        }
        if !self.scale.is_finite() || self.scale == 0.0 {
            let detail = format!("expected a number other than 0; found {}", self.scale);
            faults.push(Fault::new(field("scale"), "bad_scale", detail));
        }
        if !self.offset.is_finite() {
            faults.push(Fault::new(field("offset"), "bad_offset", "expected a finite number"));
        }
        faults
    }
}

#[cfg(test)]
mod tests {
    use super::super::layout::*;

    fn sound() -> Layout {
        serde_json::from_str(
            r#"{"time": {"columns": ["t"]}, "columns": {"air_temperature": {"column": "T", "unit": "°C"},
                "relative_humidity": {"column": "RH", "unit": "%"}}}"#,
        )
        .unwrap()
    }

    #[test]
    fn a_sound_layout_has_no_faults_and_survives_json() {
        let layout = sound();
        assert!(layout.faults().is_empty(), "{:?}", layout.faults());
        let text = serde_json::to_string(&layout).unwrap();
        assert_eq!(serde_json::from_str::<Layout>(&text).unwrap(), layout);
    }

    #[test]
    fn unknown_fields_are_refused() {
        let text = r#"{"time": {"columns": ["t"], "zon": "UTC"}, "columns": {}}"#;
        assert!(
            serde_json::from_str::<Layout>(text)
                .unwrap_err()
                .to_string()
                .contains("zon")
        );
    }

    #[test]
    fn every_fault_is_named_at_once() {
        let mut layout = sound();
        layout.dialect.encoding = "klingon".into();
        layout.dialect.delimiter = "ab".into();
        layout.dialect.decimal = ";".into();
        layout.dialect.comment = Some("##".into());
        layout.time.columns.clear();
        layout.time.format = "%Q".into();
        layout.time.zone = Some("Moon".into());
        layout.time.year = Some(1);
        layout.columns.air_temperature.as_mut().unwrap().unit = "furlong".into();
        layout.columns.relative_humidity = None;
        layout.columns.wind_speed = Some(ColumnMapping {
            scale: 0.0,
            offset: f64::NAN,
            ..ColumnMapping::new("", "m/s")
        });
        layout.rows = Some(RowFilter {
            column: String::new(),
            equals: "x".into(),
        });
        let fields: Vec<String> = layout.faults().into_iter().map(|fault| fault.field).collect();
        let expected = [
            "dialect/encoding",
            "dialect/delimiter",
            "dialect/decimal",
            "dialect/comment",
            "time/columns",
            "time/format",
            "time/zone",
            "time/year",
            "columns/air_temperature/unit",
            "columns/wind_speed/column",
            "columns/wind_speed/scale",
            "columns/wind_speed/offset",
            "columns",
            "rows/column",
        ];
        assert_eq!(fields, expected);
    }

    #[test]
    fn the_clock_must_fit_the_format() {
        let mut layout = sound();
        layout.time.clock = Some(Clock::AmPm);
        assert_eq!(layout.faults()[0].field, "time/clock");
        layout.time.format = "%Y-%m-%d %I:%M %p".into();
        assert!(layout.faults().is_empty());
    }

    #[test]
    fn two_pressures_are_one_too_many() {
        let mut layout = sound();
        layout.columns.station_pressure = Some(ColumnMapping::new("p", "hPa"));
        layout.columns.sea_level_pressure = Some(ColumnMapping::new("q", "hPa"));
        assert_eq!(layout.faults()[0].code, "two_pressures");
    }
}
