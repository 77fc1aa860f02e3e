//! Whole columns that look swapped or in another unit: refused, unless the sender says they are right.

use super::readings::{RawReadings, WeatherFault};
use super::screen::celsius;

/// Every such mistake found. Judged on the readings as sent, before single values are taken out.
pub(super) fn suspicions(raw: &RawReadings) -> Vec<WeatherFault> {
    let temp = Spread::of(&raw.air_temp_k);
    let humidity = raw.relative_humidity.as_deref().and_then(Spread::of);
    let mut found = Vec::new();
    found.extend(humidity.as_ref().and_then(humidity_unit));
    if let Some(temp) = &temp {
        found.extend(humidity.as_ref().and_then(|humidity| swapped(temp, humidity)));
        if !found.iter().any(|fault| fault.code == "swapped_columns") {
            found.extend(temperature_unit(temp));
        }
    }
    found.extend(dew_point_mostly_above(raw));
    found.extend(
        raw.pressure_pa
            .as_deref()
            .and_then(Spread::of)
            .as_ref()
            .and_then(pressure_unit),
    );
    found
}

/// Where the readings of a column lie.
struct Spread {
    low: f64,
    median: f64,
    high: f64,
    largest: f64,
}

impl Spread {
    /// Fifth, fiftieth and ninety-fifth percentile and the largest; `None` without readings.
    fn of(values: &[f64]) -> Option<Self> {
        let mut known: Vec<f64> = values.iter().copied().filter(|v| !v.is_nan()).collect();
        if known.is_empty() {
            return None;
        }
        let last = known.len() - 1;
        let mut at = |share: f64| {
            let rank = (share * last as f64).round() as usize;
            *known.select_nth_unstable_by(rank, f64::total_cmp).1
        };
        Some(Self {
            low: at(0.05),
            median: at(0.5),
            high: at(0.95),
            largest: at(1.0),
        })
    }
}

fn humidity_unit(humidity: &Spread) -> Option<WeatherFault> {
    if humidity.largest <= 0.01 {
        let detail = "all readings are 1 or below, which as percent would be drier than any desert: send unit fraction, or \
                      check the column";
        return Some(WeatherFault::column(
            "relative_humidity",
            "humidity_looks_like_fraction",
            detail,
        ));
    }
    (humidity.median > 1.5).then(|| {
        let detail = format!(
            "half of the readings are above {:.1} as fraction of saturation: send unit %, or check the column",
            humidity.median
        );
        WeatherFault::column("relative_humidity", "humidity_looks_like_percent", detail)
    })
}

/// Weather and rooms stay below this in all but the last twentieth of their hours [°C].
const HOT_C: f64 = 50.0;

fn temperature_unit(temp: &Spread) -> Option<WeatherFault> {
    let (median_c, high_c) = (celsius(temp.median), celsius(temp.high));
    let (code, looks_like) = match () {
        () if temp.median < 150.0 => ("temperature_looks_like_celsius", "°C, with unit K given"),
        () if median_c > 180.0 => ("temperature_looks_like_kelvin", "K, with unit °C given"),
        () if high_c > HOT_C => ("temperature_looks_like_fahrenheit", "°F, with unit °C given"),
        () => return None,
    };
    let detail = format!(
        "half of the readings are above {median_c:.1} °C and a twentieth above {high_c:.1} °C: they look like {looks_like}. \
         Correct the unit; if they are right, send accept_suspicious: true"
    );
    Some(WeatherFault::column("air_temperature", code, detail))
}

/// A humidity column that never passes this looks like temperatures [%] when the other column is hot all the time.
const DRY_PCT: f64 = 45.0;

fn swapped(temp: &Spread, humidity: &Spread) -> Option<WeatherFault> {
    let (temp_low, temp_median, temp_high) = (celsius(temp.low), celsius(temp.median), celsius(temp.high));
    let humidity_high = humidity.high * 100.0;
    let like_humidity = temp_low >= 0.0 && temp_high > HOT_C && celsius(temp.largest) <= 105.0;
    let like_temperature = humidity_high <= DRY_PCT && humidity.largest > 0.01;
    (like_humidity && like_temperature).then(|| {
        let detail = format!(
            "the temperature column looks like humidity (median {temp_median:.0}) and the humidity column like temperature \
             (median {:.0}): swap the two. If the temperatures are in °F, give that unit; if all is right, send \
             accept_suspicious: true",
            humidity.median * 100.0
        );
        WeatherFault::column("air_temperature", "swapped_columns", detail)
    })
}

/// Dew point and temperature further apart than this the wrong way round count [K].
const DEW_POINT_EXCESS_K: f64 = 0.5;

fn dew_point_mostly_above(raw: &RawReadings) -> Option<WeatherFault> {
    let dew_point_k = raw.dew_point_k.as_ref()?;
    let pairs = || {
        raw.air_temp_k
            .iter()
            .zip(dew_point_k)
            .filter(|(t, d)| !t.is_nan() && !d.is_nan())
    };
    let above = pairs()
        .filter(|(temp, dew)| **dew > **temp + DEW_POINT_EXCESS_K)
        .count();
    (above * 2 > pairs().count()).then(|| {
        let detail = format!(
            "the dew point is above the temperature in {above} of {} rows, which cannot be: the two columns are swapped, or \
             in different units. Correct the mapping",
            pairs().count()
        );
        WeatherFault::column("dew_point", "dew_point_above_temperature", detail)
    })
}

/// What half of all barometers on Earth's surface read between [Pa].
const PRESSURE_RANGE_PA: (f64, f64) = (45_000.0, 109_000.0);

fn pressure_unit(pressure: &Spread) -> Option<WeatherFault> {
    let plausible = |pa: f64| pa >= PRESSURE_RANGE_PA.0 && pa <= PRESSURE_RANGE_PA.1;
    if plausible(pressure.median) {
        return None;
    }
    let detail = format!(
        "half of the readings are around {:.1} hPa, which is no pressure of air at the ground: correct the unit (hPa, kPa, Pa, \
         inHg, mmHg); if they are right, send accept_suspicious: true",
        pressure.median / 100.0
    );
    Some(WeatherFault::column("pressure", "pressure_unit", detail))
}
