//! Reading by reading: values out of the plausible range. Odd values are used and flagged; impossible ones are flagged and
//! count as missing.

use super::readings::RawReadings;
use super::series::{Flag, Sightings};
use super::units::Unit;

/// What to do with the values of one column.
struct Screen {
    code: &'static str,
    /// Values outside are flagged.
    plausible: (f64, f64),
    /// True: the flagged values are not used.
    drop: bool,
    detail: &'static str,
}

/// Air hotter or colder than this has hardly been measured on Earth [K].
const ODD_TEMP: Screen = Screen {
    code: "temperature_out_of_range",
    plausible: (213.15, 333.15),
    drop: false,
    detail: "air temperature outside -60 to 60 °C; used as it is. If the value marks a missing reading, name it under `missing`",
};
/// No air at a display, and outside the formulas [K].
const IMPOSSIBLE_TEMP: Screen = Screen {
    code: "temperature_impossible",
    plausible: (173.15, 373.15),
    drop: true,
    detail: "air temperature outside -100 to 100 °C; not used, the reading counts as missing. If the value marks a missing \
             reading, name it under `missing`; otherwise check the unit",
};
const IMPOSSIBLE_DEW_POINT: Screen = Screen {
    code: "dew_point_impossible",
    plausible: (173.15, 373.15),
    drop: true,
    detail: "dew point outside -100 to 100 °C; not used, the reading counts as missing. If the value marks a missing reading, \
             name it under `missing`",
};
const IMPOSSIBLE_WET_BULB: Screen = Screen {
    code: "wet_bulb_impossible",
    plausible: (173.15, 373.15),
    drop: true,
    detail: "wet bulb outside -100 to 100 °C; not used, the reading counts as missing. If the value marks a missing reading, \
             name it under `missing`",
};
/// The instrument's own excess above saturation is allowed [fraction].
const IMPOSSIBLE_HUMIDITY: Screen = Screen {
    code: "humidity_out_of_range",
    plausible: (0.0, 1.05),
    drop: true,
    detail: "relative humidity below 0 or above 105 %; not used, the reading counts as missing",
};
/// Drier than any air at the ground: the driest deserts read 1 % [fraction]; remembered.
const ODD_HUMIDITY: Screen = Screen {
    code: "humidity_next_to_none",
    plausible: (0.005, 1.05),
    drop: false,
    detail: "relative humidity below 0.5 %, which hardly any air has: a failed sensor, or a mark of a missing reading? Used as it \
             is; if it marks a missing reading, name it under `missing`",
};
/// From above the highest summit to above the highest barometer ever [Pa].
const IMPOSSIBLE_PRESSURE: Screen = Screen {
    code: "pressure_out_of_range",
    plausible: (30_000.0, 110_000.0),
    drop: true,
    detail: "air pressure outside 300 to 1100 hPa; not used, the reading counts as missing",
};
const IMPOSSIBLE_WIND: Screen = Screen {
    code: "wind_out_of_range",
    plausible: (0.0, 75.0),
    drop: true,
    detail: "wind below 0 or above 75 m/s; not used, the reading counts as missing",
};
/// The sun's own beam above the air is about 1361 W/m2; clouds' edges add a little on the ground. Instruments read a
/// little below zero at night [W/m2].
const IMPOSSIBLE_SHORTWAVE: Screen = Screen {
    code: "shortwave_out_of_range",
    plausible: (-20.0, 1600.0),
    drop: true,
    detail: "short-wave irradiance outside -20 to 1600 W/m2; not used, the reading counts as missing",
};

/// Flags what is odd, takes out what is impossible.
pub(super) fn screen(raw: &mut RawReadings) {
    let RawReadings { row, flags, .. } = raw;
    apply(&IMPOSSIBLE_TEMP, &mut raw.air_temp_k, row, flags);
    apply(&ODD_TEMP, &mut raw.air_temp_k, row, flags);
    let optional = [
        (&IMPOSSIBLE_DEW_POINT, &mut raw.dew_point_k),
        (&IMPOSSIBLE_WET_BULB, &mut raw.wet_bulb_k),
        (&IMPOSSIBLE_HUMIDITY, &mut raw.relative_humidity),
        (&IMPOSSIBLE_PRESSURE, &mut raw.pressure_pa),
        (&IMPOSSIBLE_WIND, &mut raw.wind_speed_m_s),
        (&IMPOSSIBLE_SHORTWAVE, &mut raw.shortwave_w_m2),
    ];
    for (screen, column) in optional {
        if let Some(values) = column {
            apply(screen, values, row, flags);
        }
    }
    if let Some(values) = &mut raw.relative_humidity {
        apply(&ODD_HUMIDITY, values, row, flags);
    }
    if let Some(values) = &mut raw.shortwave_w_m2 {
        darkness(values, row, flags);
    }
}

/// The offset of a pyranometer at night is no reading of the sun.
fn darkness(values: &mut [f64], row: &[u32], flags: &mut Vec<Flag>) {
    let mut seen = Sightings::default();
    for (value, row) in values.iter_mut().zip(row).filter(|(value, _)| **value < 0.0) {
        seen.add(*row as usize);
        *value = 0.0;
    }
    seen.flag_into(
        flags,
        "shortwave_negative",
        "short-wave irradiance slightly below zero; taken as 0",
    );
}

fn apply(screen: &Screen, values: &mut [f64], row: &[u32], flags: &mut Vec<Flag>) {
    let (low, high) = screen.plausible;
    let mut seen = Sightings::default();
    for (value, row) in values.iter_mut().zip(row) {
        // NaN is missing already and passes.
        if *value < low || *value > high {
            seen.add(*row as usize);
            if screen.drop {
                *value = f64::NAN;
            }
        }
    }
    seen.flag_into(flags, screen.code, screen.detail);
}

/// A reading stuck for longer than this is flagged [s].
const STUCK_S: i64 = 24 * 3600;

/// Flags values that do not change for more than a day. Needs sorted readings.
pub(super) fn flag_stuck(raw: &mut RawReadings) {
    let humidity = raw.dew_point_k.as_ref().or(raw.relative_humidity.as_ref());
    let columns = [
        ("temperature_constant", "air temperature", Some(&raw.air_temp_k)),
        ("humidity_constant", "humidity", humidity),
        ("pressure_constant", "air pressure", raw.pressure_pa.as_ref()),
    ];
    let mut flags = Vec::new();
    for (code, name, column) in columns {
        let Some(values) = column else { continue };
        let detail = format!(
            "stretches in which the {name} does not change for more than 24 hours (first row of each): a stuck sensor, or \
             an estimate; used as they are"
        );
        stuck(&raw.time_unix_s, values, &raw.row).flag_into(&mut flags, code, detail);
    }
    raw.flags.append(&mut flags);
}

/// First rows of stretches without change. Missing readings inside a stretch do not end it.
fn stuck(time_unix_s: &[i64], values: &[f64], row: &[u32]) -> Sightings {
    let mut seen = Sightings::default();
    let mut begin: Option<usize> = None;
    let mut counted = false;
    for at in (0..values.len()).filter(|&at| !values[at].is_nan()) {
        match begin {
            Some(first) if values[first] == values[at] => {
                if !counted && time_unix_s[at].saturating_sub(time_unix_s[first]) > STUCK_S {
                    counted = true;
                    seen.add(row[first] as usize);
                }
            }
            _ => (begin, counted) = (Some(at), false),
        }
    }
    seen
}

/// Neighbours closer than this can show a spike [s].
const SPIKE_SPACING_S: i64 = 3600;
/// A jump up and back again by more than this [K] (WMO-No. 305's step for one hour), with ends this close [K].
const SPIKE_K: (f64, f64) = (4.0, 2.0);

/// Flags single readings that leap away and return. Needs sorted readings.
pub(super) fn flag_spikes(raw: &mut RawReadings) {
    let (time, temp) = (&raw.time_unix_s, &raw.air_temp_k);
    let mut seen = Sightings::default();
    for at in 1..raw.len().saturating_sub(1) {
        let (before, here, after) = (temp[at - 1], temp[at], temp[at + 1]);
        let close = time[at + 1] - time[at] <= SPIKE_SPACING_S && time[at] - time[at - 1] <= SPIKE_SPACING_S;
        let leaps = (here - before).abs() > SPIKE_K.0 && (here - after).abs() > SPIKE_K.0;
        if close && leaps && (after - before).abs() < SPIKE_K.1 {
            seen.add(raw.row[at] as usize);
        }
    }
    let detail = "single temperature readings that leap by more than 4 K and come back; used as they are";
    seen.flag_into(&mut raw.flags, "temperature_spike", detail);
}

/// A temperature [K] in °C, for messages.
pub(super) fn celsius(temp_k: f64) -> f64 {
    temp_k - Unit::Celsius.to_si(0.0)
}
