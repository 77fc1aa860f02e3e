//! The fixed-width typical year `tmy2`, told by its two kinds of lines. Places of the fields: user's manual for TMY2s,
//! National Renewable Energy Laboratory 1995, tables 3-1 and 3-2 (remembered; checked against values of the same year
//! published as columns).

use super::finding::{ColumnFinding, Confidence, Detection, Role};
use super::sample::Sample;
use super::{Hints, typical_year};
use crate::intake::csv::layout::{Clock, ColumnMapping, Columns, Dialect, FixedColumn, LabelName, Layout, TimeLayout};
use crate::model::notes::Assumption;
use crate::model::weather::zone::offset_name;
use crate::model::weather::{Quantity, Unit};

/// Characters of a line of readings.
const LINE: usize = 142;

/// Name, first character from 1, width.
const FIELDS: [(&str, usize, usize); 10] = [
    ("year", 2, 2),
    ("month", 4, 2),
    ("day", 6, 2),
    ("hour", 8, 2),
    ("global_horizontal", 18, 4),
    ("dry_bulb", 68, 4),
    ("dew_point", 74, 4),
    ("relative_humidity", 80, 3),
    ("pressure", 85, 4),
    ("wind_speed", 96, 3),
];

/// The detection of a `tmy2` file; `None` for any other.
pub(super) fn tmy2(sample: &Sample, hints: &Hints) -> Option<Detection> {
    let station = sample.lines.first()?;
    let zone = zone_of(station)?;
    let readings = sample
        .lines
        .get(1..)?
        .iter()
        .take(24)
        .filter(|line| !line.trim().is_empty());
    let (all, fit) = readings.fold((0, 0), |(all, fit), line| {
        (all + 1, fit + usize::from(is_reading(line)))
    });
    if fit == 0 || fit < all {
        return None;
    }
    Some(Detection {
        gzip: sample.gzip,
        header_row: None,
        first_row: 2,
        columns: FIELDS.iter().map(|(name, ..)| finding(name)).collect(),
        zone_from: Some("the station line".into()),
        layout: layout(sample, zone, hints),
        questions: Vec::new(),
        said: vec![Assumption::new(
            "form of the weather file",
            "tmy2, a typical year of fixed width: hours end at their stamp, local standard time of the station line",
            "every figure, if it is another form",
        )],
    })
}

/// Hours east of UTC stand in characters 34 to 36, latitude and longitude behind them.
fn zone_of(station: &str) -> Option<String> {
    let part = |from: usize, to: usize| station.get(from..to).map(str::trim);
    let hours: i64 = part(33, 36)?.parse().ok()?;
    let sound =
        part(1, 6)?.parse::<u32>().is_ok() && matches!(part(37, 39), Some("N" | "S")) && (-12..=14).contains(&hours);
    sound.then(|| offset_name(hours * 3600))
}

fn is_reading(line: &str) -> bool {
    line.len() == LINE
        && line
            .get(1..21)
            .is_some_and(|start| start.bytes().all(|b| b.is_ascii_digit()))
}

fn finding(name: &str) -> ColumnFinding {
    let read = |quantity, unit| (Role::Read(quantity), Some(unit));
    let (role, unit) = match name {
        "dry_bulb" => read(Quantity::AirTemperature, Unit::Celsius),
        "dew_point" => read(Quantity::DewPoint, Unit::Celsius),
        "relative_humidity" => read(Quantity::RelativeHumidity, Unit::Percent),
        "pressure" => read(Quantity::StationPressure, Unit::Hectopascal),
        "wind_speed" => read(Quantity::WindSpeed, Unit::MetrePerSecond),
        "global_horizontal" => read(Quantity::Shortwave, Unit::WattPerSquareMetre),
        _ => (Role::Time, None),
    };
    ColumnFinding {
        name: name.into(),
        reference: name.into(),
        role,
        unit,
        confidence: Confidence::High,
        why: "by its place in a tmy2 line".into(),
    }
}

fn layout(sample: &Sample, zone: String, hints: &Hints) -> Layout {
    let column = |name: &str, unit: &str, scale: f64, missing: &str| {
        Some(ColumnMapping {
            scale,
            missing: vec![missing.into()],
            ..ColumnMapping::new(name, unit)
        })
    };
    Layout {
        dialect: Dialect {
            encoding: sample.encoding.clone(),
            skip_rows: 1,
            header_rows: 0,
            fixed_width: FIELDS
                .iter()
                .map(|(name, start, width)| FixedColumn {
                    name: name.to_string(),
                    start: *start,
                    width: *width,
                })
                .collect(),
            ..Dialect::default()
        },
        time: TimeLayout {
            columns: ["year", "month", "day", "hour"].map(String::from).to_vec(),
            format: "%y %m %d %H".into(),
            zone: Some(hints.zone.clone().unwrap_or(zone)),
            clock: Some(Clock::From1To24),
            label: Some(hints.label.unwrap_or(LabelName::MeanOfPrecedingHour)),
            year: Some(hints.year.unwrap_or(typical_year(false))),
            ..TimeLayout::utc_or_offset("year")
        },
        columns: Columns {
            air_temperature: column("dry_bulb", "°C", 0.1, "9999"),
            relative_humidity: column("relative_humidity", "%", 1.0, "999"),
            dew_point: column("dew_point", "°C", 0.1, "9999"),
            station_pressure: column("pressure", "hPa", 1.0, "9999"),
            wind_speed: column("wind_speed", "m/s", 0.1, "999"),
            shortwave: column("global_horizontal", "W/m2", 1.0, "9999"),
            ..Columns::default()
        },
        missing: hints.missing.clone(),
        rows: hints.rows.clone(),
        long_form: None,
    }
}
