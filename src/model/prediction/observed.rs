//! The extremes of a nominal run that its cautions speak of.

use super::calendar::HOUR_S;
use super::forcing::{AirShift, Surroundings};
use super::record::HourRecord;
use super::result::{AirSummary, Visit};
use crate::model::air::ZERO_CELSIUS_K;
use crate::model::device::Device;
use crate::model::fluids::Liquid;

/// Water between these temperatures grows bacteria [K] (20-45 °C, as health authorities put it; remembered, not looked up).
const WARM_WATER_K: std::ops::RangeInclusive<f64> = 293.15..=318.15;

/// The extremes of a run.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub(super) struct Observed {
    /// Highest temperature of air or body, the body's as an hourly mean [K].
    pub(super) hottest_k: f64,
    /// Start of the hour it belongs to.
    pub(super) hottest_unix_s: i64,
    /// Air pressure then [Pa].
    pub(super) hottest_pressure_pa: f64,
    /// Hours that end with a cup at or below the freezing point.
    pub(super) freezing_cup_hours: usize,
    /// Hours that end with warm water in the cup.
    pub(super) warm_water_h: f64,
    /// The most of those between two visits.
    pub(super) warm_water_longest_h: f64,
    /// Time with cycles shorter than 3 s [h].
    pub(super) fast_h: f64,
}

/// Means and extremes of the air at the device over the known hours.
pub(super) fn air_summary(records: &[HourRecord], has_case: bool) -> AirSummary {
    let known: Vec<&HourRecord> = records.iter().filter(|record| !record.is_unknown()).collect();
    let mean = |value: &dyn Fn(&HourRecord) -> f64| {
        known.iter().map(|record| value(record)).sum::<f64>() / known.len().max(1) as f64
    };
    let humidities = known.iter().map(|record| record.air.relative_humidity_pct());
    let dew_hours = known.iter().filter(|record| record.air.dew_kg > 0.0).count();
    AirSummary {
        mean_temp_c: mean(&|r| r.air.temp_k - ZERO_CELSIUS_K),
        mean_relative_humidity_pct: mean(&|r| r.air.relative_humidity_pct()),
        least_relative_humidity_pct: humidities.clone().reduce(f64::min).unwrap_or(0.0),
        most_relative_humidity_pct: humidities.reduce(f64::max).unwrap_or(0.0),
        mean_air_speed_m_s: mean(&|r| r.air.speed_m_s),
        dew_hours: has_case.then_some(dew_hours),
    }
}

/// Looks through a run; unknown hours are left out.
pub(super) fn observe(
    device: &Device,
    surroundings: &Surroundings,
    records: &[HourRecord],
    visits: &[Visit],
    start_unix_s: i64,
) -> Observed {
    let freezing_k = Liquid::from_abv(1.0, device.evaporant_abv_pct).freezing_point_k();
    let mut observed = Observed::default();
    let mut visits = visits.iter().peekable();
    let mut warm_since_visit_h = 0.0;
    for (hour, record) in records.iter().enumerate() {
        let unix_s = start_unix_s + hour as i64 * HOUR_S;
        while visits.next_if(|visit| visit.at_unix_s < unix_s + HOUR_S).is_some() {
            warm_since_visit_h = 0.0;
        }
        if record.is_unknown() {
            continue;
        }
        observed.see_heat(surroundings, hour, record, unix_s);
        observed.fast_h += record.fast_s / HOUR_S as f64;
        observed.freezing_cup_hours += usize::from(record.cup_temp_k.is_some_and(|k| k <= freezing_k));
        if record.cup_temp_k.is_some_and(|k| WARM_WATER_K.contains(&k)) {
            warm_since_visit_h += 1.0;
            observed.warm_water_h += 1.0;
            observed.warm_water_longest_h = observed.warm_water_longest_h.max(warm_since_visit_h);
        }
    }
    observed
}

impl Observed {
    fn see_heat(&mut self, surroundings: &Surroundings, hour: usize, record: &HourRecord, unix_s: i64) {
        let air = surroundings.hour(hour, AirShift::NONE);
        let body_k = record.body_temp_k_s / HOUR_S as f64;
        let hottest_k = body_k.max(air.start.air.temp_k).max(air.end.air.temp_k);
        if hottest_k > self.hottest_k {
            self.hottest_k = hottest_k;
            self.hottest_unix_s = unix_s;
            self.hottest_pressure_pa = air.start.air.pressure_pa;
        }
    }
}
