//! Data rows into columns of readings.

use super::clock::WallClock;
use super::faults::{RowFaults, quoted};
use super::layout::Layout;
use super::limits::Limits;
use super::long_form::Notes;
use super::pattern::Pattern;
use super::plan::Plan;
use super::records::Records;
use super::shown::{read_parts, read_rfc3339, serial_wall_s};
use crate::model::weather::{Quantity, RawReadings, WeatherFault};

/// Reads data rows by a plan.
pub(super) struct Rows<'p> {
    layout: &'p Layout,
    plan: &'p Plan,
    width: usize,
    pattern: Pattern,
    clock: WallClock,
    faults: RowFaults,
    time_cell: Vec<u8>,
    time_unix_s: Vec<i64>,
    row: Vec<u32>,
    values: Vec<Vec<f64>>,
    /// Single values, where each row holds one.
    notes: Notes,
}

impl<'p> Rows<'p> {
    pub(super) fn new(layout: &'p Layout, plan: &'p Plan, width: usize) -> Self {
        Self {
            layout,
            plan,
            width,
            pattern: Pattern::parse(&layout.time.format)
                .unwrap_or(Pattern::Rfc3339)
                .with_clock(layout.time.clock),
            clock: WallClock::new(&layout.time),
            faults: RowFaults::default(),
            time_cell: Vec::new(),
            time_unix_s: Vec::new(),
            row: Vec::new(),
            values: vec![Vec::new(); plan.values.len()],
            notes: Notes::default(),
        }
    }

    /// Reads to the end of the file. `first_row_waits`: the first row is read already.
    pub(super) fn read(
        mut self,
        mut records: Records,
        first_row_waits: bool,
        limits: &Limits,
    ) -> Result<RawReadings, Vec<WeatherFault>> {
        let mut waits = first_row_waits;
        let (mut rows, mut left_out) = (0, 0);
        loop {
            match if waits { Ok(true) } else { records.advance() } {
                Ok(true) => {}
                Ok(false) => break,
                Err(fault) => return Err(self.stopped_by(fault)),
            }
            waits = false;
            rows += 1;
            if rows > limits.max_rows {
                let detail = format!("expected at most {} data rows; the file has more", limits.max_rows);
                return Err(self.stopped_by(WeatherFault::whole("too_many_rows", detail)));
            }
            if self.is_filtered_out(&records) {
                left_out += 1;
            } else {
                self.take(&records);
            }
            if self.faults.are_hopeless() {
                break;
            }
        }
        self.finish(rows, left_out, limits.max_rows)
    }

    /// The file cannot be read further: what was found so far, and why.
    fn stopped_by(self, fault: WeatherFault) -> Vec<WeatherFault> {
        let mut faults = self.faults.finish();
        faults.push(fault);
        faults
    }

    fn is_filtered_out(&self, records: &Records) -> bool {
        self.plan
            .filter
            .as_ref()
            .is_some_and(|(at, wanted)| records.cell(*at).is_none_or(|cell| cell != &wanted[..]))
    }

    /// Reads one row into the columns, or its faults into the list.
    fn take(&mut self, records: &Records) {
        let row = records.row();
        if let Some(fault) = self.wrong_width(records) {
            return self.faults.add(|| fault);
        }
        let plan = self.plan;
        if let Some(name_at) = plan.name_at {
            return self.take_note(records, name_at);
        }
        let time = self.time(records);
        for (column, into) in plan.values.iter().zip(&mut self.values) {
            let cell = records.cell(column.at).unwrap_or_default();
            into.push(column.read(cell, plan).unwrap_or_else(|| {
                self.faults
                    .add(|| WeatherFault::row(row, Some(&column.name), "bad_number", plan.bad_number(cell)));
                f64::NAN
            }));
        }
        self.row.push(u32::try_from(row).unwrap_or(u32::MAX));
        match time {
            Ok(unix_s) => self.time_unix_s.push(unix_s),
            Err((code, detail)) => self
                .faults
                .add(|| WeatherFault::row(row, Some(&plan.time_name), code, detail)),
        }
    }

    /// Reads the one value of a row, if its name is asked for.
    fn take_note(&mut self, records: &Records, name_at: usize) {
        let (plan, row) = (self.plan, records.row());
        let name = records.cell(name_at).unwrap_or_default();
        let Some(place) = plan.values.iter().position(|column| column.name.as_bytes() == name) else {
            return;
        };
        let column = &plan.values[place];
        let cell = records.cell(column.at).unwrap_or_default();
        let time = self.time(records);
        match (time, column.read(cell, plan)) {
            (Ok(unix_s), Some(value)) => self.notes.add(unix_s, place, value, row),
            (time, value) => {
                if let Err((code, detail)) = time {
                    self.faults
                        .add(|| WeatherFault::row(row, Some(&plan.time_name), code, detail));
                }
                if value.is_none() {
                    let fault = || WeatherFault::row(row, Some(&column.name), "bad_number", plan.bad_number(cell));
                    self.faults.add(fault);
                }
            }
        }
    }

    /// A row must be as wide as the header; empty cells at its end do not count.
    fn wrong_width(&self, records: &Records) -> Option<WeatherFault> {
        let found = records.len();
        let extra_is_empty = || (self.width..found).all(|at| records.cell(at).is_some_and(<[u8]>::is_empty));
        if found == self.width || found > self.width && extra_is_empty() {
            return None;
        }
        let hint = if found > self.width {
            "; decimal commas in a comma-separated file?"
        } else {
            "; is the row cut short?"
        };
        let detail = format!("expected {} cells, as in the header; found {found}{hint}", self.width);
        Some(WeatherFault::row(records.row(), None, "wrong_width", detail))
    }

    fn time(&mut self, records: &Records) -> Result<i64, (&'static str, String)> {
        let cell = match self.plan.time_at[..] {
            [at] => records.cell(at).unwrap_or_default(),
            _ => {
                self.time_cell.clear();
                for at in &self.plan.time_at {
                    self.time_cell.extend_from_slice(records.cell(*at).unwrap_or_default());
                    self.time_cell.push(b' ');
                }
                self.time_cell.trim_ascii_end()
            }
        };
        let shown = match &self.pattern {
            Pattern::Rfc3339 => read_rfc3339(cell),
            Pattern::Parts(parts) => read_parts(parts, cell),
            Pattern::SpreadsheetDays => {
                let wall_s = self
                    .plan
                    .number(cell)
                    .and_then(serial_wall_s)
                    .ok_or_else(|| self.bad_time(cell))?;
                return self.clock.of_wall_s(wall_s, records.row());
            }
            epoch => return epoch.epoch_s(cell).ok_or_else(|| self.bad_time(cell)),
        };
        match shown {
            Some(shown) => self.clock.instant(&shown, records.row()),
            None => Err(self.bad_time(cell)),
        }
    }

    fn bad_time(&self, cell: &[u8]) -> (&'static str, String) {
        let expected = self.pattern.expectation(&self.layout.time.format);
        ("bad_time", format!("expected {expected}; found {}", quoted(cell)))
    }

    fn finish(mut self, rows: usize, left_out: usize, most: usize) -> Result<RawReadings, Vec<WeatherFault>> {
        let faults = std::mem::take(&mut self.faults).finish();
        if !faults.is_empty() {
            return Err(faults);
        }
        if let Some(long) = &self.layout.long_form {
            let notes = std::mem::take(&mut self.notes);
            let looked = notes
                .looked_at(self.plan.values.len(), long.hold_hours, most)
                .map_err(|fault| vec![fault])?;
            (self.time_unix_s, self.row, self.values) = (looked.time_unix_s, looked.row, looked.values);
        }
        if self.row.is_empty() {
            return Err(vec![no_rows(rows, self.layout)]);
        }
        let mut raw = RawReadings {
            time_unix_s: self.time_unix_s,
            row: self.row,
            label: self.layout.time.label.map(Into::into).unwrap_or_default(),
            shortwave_label: self.layout.time.shortwave_label.map(Into::into),
            flags: self.clock.flags(),
            assumptions: super::said::assumptions(self.layout, left_out),
            ..RawReadings::default()
        };
        for (column, values) in self.plan.values.iter().zip(self.values) {
            put(&mut raw, column.quantity, values);
        }
        Ok(raw)
    }
}

fn put(raw: &mut RawReadings, quantity: Quantity, values: Vec<f64>) {
    match quantity {
        Quantity::AirTemperature => raw.air_temp_k = values,
        Quantity::RelativeHumidity => raw.relative_humidity = Some(values),
        Quantity::DewPoint => raw.dew_point_k = Some(values),
        Quantity::WetBulb => raw.wet_bulb_k = Some(values),
        Quantity::StationPressure => raw.pressure_pa = Some(values),
        Quantity::SeaLevelPressure => (raw.pressure_pa, raw.pressure_is_sea_level) = (Some(values), true),
        Quantity::WindSpeed => raw.wind_speed_m_s = Some(values),
        Quantity::Shortwave => raw.shortwave_w_m2 = Some(values),
    }
}

fn no_rows(rows: usize, layout: &Layout) -> WeatherFault {
    if let Some(long) = layout.long_form.as_ref().filter(|_| rows > 0) {
        let detail = format!(
            "none of {rows} rows has a name that is mapped in {:?}",
            long.name_column
        );
        return WeatherFault::column(&long.name_column, "no_rows_left", detail);
    }
    match &layout.rows {
        Some(filter) if rows > 0 => {
            let detail = format!(
                "none of {rows} rows has {:?} in this column, as layout.rows asks for",
                filter.equals
            );
            WeatherFault::column(&filter.column, "no_rows_left", detail)
        }
        _ => WeatherFault::whole("no_readings", "expected data rows; the file ends after its header"),
    }
}
