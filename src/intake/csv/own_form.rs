//! The documented form, read without a layout: a header of our own names and RFC 3339 times with an offset.

use super::layout::{ColumnMapping, Columns, Dialect, Layout, TimeLayout};
use crate::model::weather::WeatherFault;

/// The names of the documented form, in its usual order.
pub const OWN_HEADER: [&str; 7] = [
    "time",
    "air_temperature_c",
    "relative_humidity_pct",
    "dew_point_c",
    "air_pressure_hpa",
    "wind_speed_m_s",
    "shortwave_w_m2",
];

/// The layout of a file in the documented form. Any order of columns; `time`, `air_temperature_c`, and one of
/// `relative_humidity_pct` and `dew_point_c` are needed.
pub(super) fn layout_for(header: &[String]) -> Result<Layout, Vec<WeatherFault>> {
    let mut faults: Vec<WeatherFault> = header.iter().filter_map(|name| unknown(name)).collect();
    let has = |name: &str| header.iter().any(|given| given == name);
    for name in ["time", "air_temperature_c"].into_iter().filter(|name| !has(name)) {
        faults.push(WeatherFault::column(
            name,
            "missing_column",
            format!("expected a column {name}; {REMEDY}"),
        ));
    }
    if !has("relative_humidity_pct") && !has("dew_point_c") {
        let detail = format!("expected a column relative_humidity_pct or dew_point_c; {REMEDY}");
        faults.push(WeatherFault::whole("missing_column", detail));
    }
    if !faults.is_empty() {
        return Err(faults);
    }
    let column = |name: &str, unit: &str| has(name).then(|| ColumnMapping::new(name, unit));
    Ok(Layout {
        dialect: Dialect::default(),
        time: TimeLayout::utc_or_offset("time"),
        columns: Columns {
            air_temperature: column("air_temperature_c", "°C"),
            relative_humidity: column("relative_humidity_pct", "%"),
            dew_point: column("dew_point_c", "°C"),
            wet_bulb: None,
            station_pressure: column("air_pressure_hpa", "hPa"),
            sea_level_pressure: None,
            wind_speed: column("wind_speed_m_s", "m/s"),
            shortwave: column("shortwave_w_m2", "W/m2"),
        },
        missing: Vec::new(),
        rows: None,
        long_form: None,
    })
}

const REMEDY: &str = "without a layout only the documented form is read (header \
                      time,air_temperature_c,relative_humidity_pct[,dew_point_c,air_pressure_hpa,wind_speed_m_s,\
                      shortwave_w_m2]). Rename the columns, or send a layout that maps them";

fn unknown(name: &str) -> Option<WeatherFault> {
    if OWN_HEADER.contains(&name) {
        return None;
    }
    let nearest = OWN_HEADER.iter().max_by(|a, b| {
        let likeness = |own: &str| strsim::jaro_winkler(own, name);
        likeness(a).total_cmp(&likeness(b))
    });
    let hint = nearest.filter(|own| strsim::jaro_winkler(own, name) > 0.8);
    let hint = hint.map_or(".".to_string(), |own| format!("; did you mean {own}?"));
    let detail = format!(
        "the column is not part of the documented form{hint} {}",
        capitalised(REMEDY)
    );
    Some(WeatherFault::column(name, "unknown_column", detail))
}

fn capitalised(sentence: &str) -> String {
    let mut letters = sentence.chars();
    letters
        .next()
        .map_or(String::new(), |first| first.to_uppercase().chain(letters).collect())
}

#[cfg(test)]
mod tests {
    use super::*;

    fn header(names: &str) -> Vec<String> {
        names.split(',').map(str::to_string).collect()
    }

    #[test]
    fn the_documented_form_maps_itself() {
        let layout = layout_for(&header("time,dew_point_c,air_temperature_c")).unwrap();
        assert!(layout.faults().is_empty());
        assert_eq!(layout.columns.dew_point.unwrap().column, "dew_point_c");
        assert_eq!(layout.columns.relative_humidity, None);
        assert!(layout_for(&OWN_HEADER.map(str::to_string)).is_ok());
    }

    #[test]
    fn everything_missing_or_unknown_is_named() {
        let faults = layout_for(&header("time,air_temp_c,station")).unwrap_err();
        let codes: Vec<_> = faults.iter().map(|fault| fault.code).collect();
        assert_eq!(
            codes,
            ["unknown_column", "unknown_column", "missing_column", "missing_column"]
        );
        assert!(
            faults[0].detail.contains("did you mean air_temperature_c?"),
            "{}",
            faults[0].detail
        );
    }
}
