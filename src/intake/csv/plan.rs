//! A layout bound to the header of one file: which cell is what, and the line that turns its number into SI.

use super::faults::quoted;
use super::layout::{ColumnMapping, Layout, RowFilter};
use super::number::{decimal, grouped};
use crate::model::weather::{Quantity, Unit, WeatherFault};

/// Where everything is in a row of this file.
pub(super) struct Plan {
    pub time_at: Vec<usize>,
    pub time_name: String,
    pub values: Vec<ValueColumn>,
    pub filter: Option<(usize, Vec<u8>)>,
    pub missing: MissingMarks,
    pub decimal_sign: u8,
    pub thousands: Option<u8>,
    /// Where the name of what was read stands, in files of one value a row.
    pub name_at: Option<usize>,
}

/// One mapped column.
pub(super) struct ValueColumn {
    pub quantity: Quantity,
    pub name: String,
    pub at: usize,
    /// `si = number * slope + intercept`.
    slope: f64,
    intercept: f64,
    missing: MissingMarks,
}

impl Plan {
    /// Finds every mapped column in the header. The layout has no faults of its own.
    pub(super) fn bind(layout: &Layout, header: &Header) -> Result<Self, Vec<WeatherFault>> {
        let mut faults = Vec::new();
        let decimal_sign = if layout.dialect.decimal == "," { b',' } else { b'.' };
        let mut find = |name: &str| {
            header
                .find(name)
                .map_err(|fault| faults.push(fault))
                .unwrap_or_default()
        };
        let time_at = layout.time.columns.iter().map(|name| find(name)).collect();
        let long = layout
            .long_form
            .as_ref()
            .map(|long| (find(&long.name_column), find(&long.value_column)));
        let mapped = layout.columns.mapped().into_iter();
        let values = mapped.map(|(quantity, mapping)| {
            let at = long.map_or_else(|| find(&mapping.column), |(_, value_at)| value_at);
            ValueColumn::new(quantity, mapping, at, decimal_sign)
        });
        let values = values.collect();
        let filter = layout
            .rows
            .as_ref()
            .map(|RowFilter { column, equals }| (find(column), equals.trim().into()));
        if !faults.is_empty() {
            return Err(faults);
        }
        let missing = MissingMarks::new(&layout.missing, decimal_sign);
        Ok(Self {
            time_at,
            time_name: layout.time.columns.join(" "),
            values,
            filter,
            missing,
            decimal_sign,
            thousands: layout.dialect.thousands_byte(),
            name_at: long.map(|(name_at, _)| name_at),
        })
    }

    /// A cell as a number, in the signs of this file.
    pub(super) fn number(&self, cell: &[u8]) -> Option<f64> {
        match self.thousands {
            None => decimal(cell, self.decimal_sign),
            Some(thousands) => grouped(cell, self.decimal_sign, thousands),
        }
    }

    /// What is wrong with a cell that should be a number.
    pub(super) fn bad_number(&self, cell: &[u8]) -> String {
        let found = quoted(cell);
        let other = if self.decimal_sign == b'.' { b',' } else { b'.' };
        if decimal(cell, other).is_some() {
            let (sign, other) = (char::from(self.decimal_sign), char::from(other));
            return format!(
                "expected a number with decimal sign {sign:?}; found {found}: send layout.dialect.decimal {:?}",
                other.to_string()
            );
        }
        if std::str::from_utf8(cell).is_err() {
            return format!("expected a number; found {found}, which is not UTF-8: send layout.dialect.encoding");
        }
        format!("expected a number; found {found}. If it marks a missing value, name it in layout.missing")
    }
}

impl ValueColumn {
    pub(super) fn new(quantity: Quantity, mapping: &ColumnMapping, at: usize, decimal_sign: u8) -> Self {
        let (slope, intercept) = Unit::parse(&mapping.unit).map_or((1.0, 0.0), Unit::si_line);
        Self {
            quantity,
            name: mapping.column.clone(),
            at,
            slope: slope * mapping.scale,
            intercept: intercept + slope * mapping.offset,
            missing: MissingMarks::new(&mapping.missing, decimal_sign),
        }
    }

    /// The value in SI, NaN for a missing one; `None` when the cell is neither a number nor a mark.
    pub(super) fn read(&self, cell: &[u8], plan: &Plan) -> Option<f64> {
        if cell.is_empty() {
            return Some(f64::NAN);
        }
        match plan.number(cell) {
            Some(number) if plan.missing.has_number(number) || self.missing.has_number(number) => Some(f64::NAN),
            Some(number) => Some(number * self.slope + self.intercept),
            None => (plan.missing.has_text(cell) || self.missing.has_text(cell)).then_some(f64::NAN),
        }
    }
}

/// Cells that stand for a missing value.
pub(super) struct MissingMarks {
    texts: Vec<Vec<u8>>,
    numbers: Vec<f64>,
}

/// Always missing, besides an empty cell.
const USUAL_MARKS: [&str; 8] = ["nan", "na", "n/a", "null", "-", "--", "m", "***"];

impl MissingMarks {
    fn new(given: &[String], sign: u8) -> Self {
        let lower = |mark: &str| mark.trim().to_ascii_lowercase().into_bytes();
        let texts = USUAL_MARKS
            .iter()
            .copied()
            .chain(given.iter().map(String::as_str))
            .map(lower)
            .collect();
        // A mark may be written with either decimal sign, whatever the file uses.
        let number =
            |mark: &String| decimal(mark.trim().as_bytes(), b'.').or_else(|| decimal(mark.trim().as_bytes(), sign));
        Self {
            texts,
            numbers: given.iter().filter_map(number).collect(),
        }
    }

    fn has_number(&self, number: f64) -> bool {
        self.numbers.contains(&number)
    }

    fn has_text(&self, cell: &[u8]) -> bool {
        self.texts.iter().any(|text| text.eq_ignore_ascii_case(cell))
    }
}

/// The names of the columns, or just their number.
pub(super) struct Header {
    pub names: Vec<String>,
    /// False: columns have no names, only places.
    pub named: bool,
}

impl Header {
    /// Place of a column by its name, or `#n`.
    fn find(&self, name: &str) -> Result<usize, WeatherFault> {
        let by_place = name.strip_prefix('#').and_then(|place| place.parse::<usize>().ok());
        if let Some(place) = by_place.filter(|place| (1..=self.names.len()).contains(place)) {
            return Ok(place - 1);
        }
        let mut found = (0..self.names.len()).filter(|&at| self.named && self.names[at] == name.trim());
        match (found.next(), found.next()) {
            (Some(at), None) => Ok(at),
            (Some(first), Some(second)) => {
                let detail = format!(
                    "the header has this name more than once (columns #{} and #{}); send the place instead of the name",
                    first + 1,
                    second + 1
                );
                Err(WeatherFault::column(name, "repeated_column", detail))
            }
            (None, _) => Err(WeatherFault::column(name, "missing_column", self.not_found(name))),
        }
    }

    fn not_found(&self, name: &str) -> String {
        if !self.named {
            return format!(
                "columns have no names here (header_rows is 0); expected #1 to #{}",
                self.names.len()
            );
        }
        let likeness = |given: &&String| strsim::jaro_winkler(&given.to_lowercase(), &name.to_lowercase());
        let nearest = self.names.iter().max_by(|a, b| likeness(a).total_cmp(&likeness(b)));
        let hint = nearest
            .filter(|given| likeness(given) > 0.8)
            .map_or(".".to_string(), |given| format!("; did you mean {given:?}?"));
        let listed: Vec<String> = self.names.iter().take(30).map(|name| quoted(name.as_bytes())).collect();
        let single = if self.names.len() == 1 {
            ". Only one column: is another delimiter used?"
        } else {
            ""
        };
        format!(
            "the header has no such column{hint} It has {}{single}",
            listed.join(", ")
        )
    }
}
