//! The layout between the wire and the intake, both ways.

use super::{
    AmbiguousTime, CsvClock, CsvColumn, CsvColumns, CsvDialect, CsvFixedColumn, CsvLayout, CsvLongForm, CsvRowFilter,
    CsvTime, NonexistentTime,
};
use crate::service::records;

/// The conversions between two enums with variants of the same names.
macro_rules! same_names {
    ($wire:ident = $record:ident { $($name:ident),* }) => {
        impl From<$wire> for records::$record {
            fn from(wire: $wire) -> Self {
                match wire { $($wire::$name => Self::$name),* }
            }
        }

        impl From<records::$record> for $wire {
            fn from(record: records::$record) -> Self {
                match record { $(records::$record::$name => Self::$name),* }
            }
        }
    };
}

same_names!(
    CsvClock = Clock {
        From0To23,
        From1To24,
        AmPm,
        HourMinute
    }
);
same_names!(
    AmbiguousTime = Ambiguous {
        RowOrder,
        First,
        Second,
        Refuse
    }
);
same_names!(NonexistentTime = Nonexistent { Refuse, Unmoved });

impl From<CsvLayout> for records::Layout {
    fn from(wire: CsvLayout) -> Self {
        Self {
            dialect: wire.dialect.map(Into::into).unwrap_or_default(),
            time: wire.time.into(),
            columns: wire.columns.into(),
            missing: wire.missing.unwrap_or_default(),
            rows: wire.rows.map(Into::into),
            long_form: wire.long_form.map(Into::into),
        }
    }
}

impl From<records::Layout> for CsvLayout {
    fn from(record: records::Layout) -> Self {
        let usual = record.dialect == records::Dialect::default();
        Self {
            dialect: (!usual).then(|| record.dialect.into()),
            time: record.time.into(),
            columns: record.columns.into(),
            missing: some(record.missing),
            rows: record.rows.map(Into::into),
            long_form: record.long_form.map(Into::into),
        }
    }
}

fn some<T>(list: Vec<T>) -> Option<Vec<T>> {
    (!list.is_empty()).then_some(list)
}

impl From<CsvRowFilter> for records::RowFilter {
    fn from(wire: CsvRowFilter) -> Self {
        Self {
            column: wire.column,
            equals: wire.equals,
        }
    }
}

impl From<records::RowFilter> for CsvRowFilter {
    fn from(record: records::RowFilter) -> Self {
        Self {
            column: record.column,
            equals: record.equals,
        }
    }
}

impl From<CsvLongForm> for records::LongForm {
    fn from(wire: CsvLongForm) -> Self {
        Self {
            name_column: wire.name_column,
            value_column: wire.value_column,
            hold_hours: wire.hold_hours,
        }
    }
}

impl From<records::LongForm> for CsvLongForm {
    fn from(record: records::LongForm) -> Self {
        Self {
            name_column: record.name_column,
            value_column: record.value_column,
            hold_hours: record.hold_hours,
        }
    }
}

impl From<CsvDialect> for records::Dialect {
    fn from(wire: CsvDialect) -> Self {
        let usual = Self::default();
        let fixed = wire.fixed_width.unwrap_or_default().into_iter();
        Self {
            encoding: wire.encoding.unwrap_or(usual.encoding),
            delimiter: wire.delimiter.unwrap_or(usual.delimiter),
            decimal: wire.decimal.unwrap_or(usual.decimal),
            thousands: wire.thousands,
            header_rows: wire.header_rows.map_or(usual.header_rows, |rows| rows as usize),
            skip_rows: wire.skip_rows.map_or(usual.skip_rows, |rows| rows as usize),
            comment: wire.comment,
            fixed_width: fixed.map(Into::into).collect(),
        }
    }
}

impl From<records::Dialect> for CsvDialect {
    fn from(record: records::Dialect) -> Self {
        let rows = |count: usize| u32::try_from(count).ok();
        Self {
            encoding: Some(record.encoding),
            delimiter: Some(record.delimiter),
            decimal: Some(record.decimal),
            thousands: record.thousands,
            header_rows: rows(record.header_rows),
            skip_rows: rows(record.skip_rows),
            comment: record.comment,
            fixed_width: some(record.fixed_width.into_iter().map(Into::into).collect()),
        }
    }
}

impl From<CsvFixedColumn> for records::FixedColumn {
    fn from(wire: CsvFixedColumn) -> Self {
        Self {
            name: wire.name,
            start: wire.start as usize,
            width: wire.width as usize,
        }
    }
}

impl From<records::FixedColumn> for CsvFixedColumn {
    fn from(record: records::FixedColumn) -> Self {
        let place = |count: usize| u32::try_from(count).unwrap_or(u32::MAX);
        Self {
            name: record.name,
            start: place(record.start),
            width: place(record.width),
        }
    }
}

impl From<CsvTime> for records::TimeLayout {
    fn from(wire: CsvTime) -> Self {
        Self {
            columns: wire.columns,
            format: wire.format.unwrap_or_else(|| "rfc3339".to_owned()),
            zone: wire.zone,
            clock: wire.clock.map(Into::into),
            label: wire.label.map(Into::into),
            shortwave_label: wire.shortwave_label.map(Into::into),
            ambiguous: wire.ambiguous.map(Into::into).unwrap_or_default(),
            nonexistent: wire.nonexistent.map(Into::into).unwrap_or_default(),
            year: wire.year,
        }
    }
}

impl From<records::TimeLayout> for CsvTime {
    fn from(record: records::TimeLayout) -> Self {
        Self {
            columns: record.columns,
            format: Some(record.format),
            zone: record.zone,
            clock: record.clock.map(Into::into),
            label: record.label.map(Into::into),
            shortwave_label: record.shortwave_label.map(Into::into),
            ambiguous: (record.ambiguous != Default::default()).then(|| record.ambiguous.into()),
            nonexistent: (record.nonexistent != Default::default()).then(|| record.nonexistent.into()),
            year: record.year,
        }
    }
}

impl From<CsvColumns> for records::Columns {
    fn from(wire: CsvColumns) -> Self {
        Self {
            air_temperature: wire.air_temperature.map(Into::into),
            relative_humidity: wire.relative_humidity.map(Into::into),
            dew_point: wire.dew_point.map(Into::into),
            wet_bulb: wire.wet_bulb.map(Into::into),
            station_pressure: wire.station_pressure.map(Into::into),
            sea_level_pressure: wire.sea_level_pressure.map(Into::into),
            wind_speed: wire.wind_speed.map(Into::into),
            shortwave: wire.shortwave.map(Into::into),
        }
    }
}

impl From<records::Columns> for CsvColumns {
    fn from(record: records::Columns) -> Self {
        Self {
            air_temperature: record.air_temperature.map(Into::into),
            relative_humidity: record.relative_humidity.map(Into::into),
            dew_point: record.dew_point.map(Into::into),
            wet_bulb: record.wet_bulb.map(Into::into),
            station_pressure: record.station_pressure.map(Into::into),
            sea_level_pressure: record.sea_level_pressure.map(Into::into),
            wind_speed: record.wind_speed.map(Into::into),
            shortwave: record.shortwave.map(Into::into),
        }
    }
}

impl From<CsvColumn> for records::ColumnMapping {
    fn from(wire: CsvColumn) -> Self {
        let plain = Self::new(wire.column, wire.unit);
        Self {
            scale: wire.scale.unwrap_or(plain.scale),
            offset: wire.offset.unwrap_or(plain.offset),
            missing: wire.missing.unwrap_or_default(),
            ..plain
        }
    }
}

impl From<records::ColumnMapping> for CsvColumn {
    fn from(record: records::ColumnMapping) -> Self {
        Self {
            column: record.column,
            unit: record.unit,
            scale: (record.scale != 1.0).then_some(record.scale),
            offset: (record.offset != 0.0).then_some(record.offset),
            missing: some(record.missing),
        }
    }
}
