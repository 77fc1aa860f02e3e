//! Records become columns.

use super::calendar::{Calendar, HOUR_S};
use super::record::HourRecord;
use super::result::HourColumns;
use crate::model::air::{ZERO_CELSIUS_K, saturation_pressure_pa};
use crate::model::cycle::HourState;
use crate::model::place::PlacedAir;
use crate::model::weather::HourlySeries;

/// Lays the hours of a run side by side.
pub(super) fn columns(records: &[HourRecord], calendar: &Calendar, air: &PlacedAir) -> HourColumns {
    let column = |value: &dyn Fn(&HourRecord) -> f64| -> Vec<f64> { records.iter().map(value).collect() };
    let known = |value: &dyn Fn(&HourRecord) -> f64| -> Vec<Option<f64>> {
        records.iter().map(|r| (!r.is_unknown()).then(|| value(r))).collect()
    };
    let (hours, start_unix_s) = (0..records.len(), air.series.start_unix_s);
    HourColumns {
        time_unix_s: hours.clone().map(|hour| start_unix_s + hour as i64 * HOUR_S).collect(),
        cycles: column(&|r| r.cycles),
        stall_fraction: column(&|r| share(r.stalled_s())),
        state_fractions: HourState::ALL.map(|state| column(&|r| share(r.seconds(state)))),
        needs_person_fraction: column(&|r| share(r.needs_person_s)),
        open_fraction: hours
            .map(|hour| calendar.parts(hour).iter().map(|part| part.open_share()).sum())
            .collect(),
        water_head_g: column(&|r| 1e3 * r.head_loss.water_kg),
        water_cup_g: column(&|r| 1e3 * r.cup_loss.water_kg),
        ethanol_head_g: column(&|r| 1e3 * r.head_loss.ethanol_kg),
        ethanol_cup_g: column(&|r| 1e3 * r.cup_loss.ethanol_kg),
        cup_drop_mm: column(&|r| 1e3 * r.cup_drop_m),
        body_temp_c: known(&|r| r.body_temp_k_s / HOUR_S as f64 - ZERO_CELSIUS_K),
        head_temp_c: known(&|r| r.head_temp_k_s / HOUR_S as f64 - ZERO_CELSIUS_K),
        air_temp_c: known(&|r| r.air.temp_k - ZERO_CELSIUS_K),
        air_relative_humidity_pct: known(&|r| r.air.relative_humidity_pct()),
        air_speed_m_s: known(&|r| r.air.speed_m_s),
        outdoor_temp_c: outdoors(air, &|series, hour| series.temp_k[hour] - ZERO_CELSIUS_K),
        outdoor_relative_humidity_pct: outdoors(air, &|series, hour| {
            100.0 * series.vapour_pressure_pa[hour] / saturation_pressure_pa(series.temp_k[hour])
        }),
    }
}

/// The weather as it was read, beside the air made from it.
fn outdoors(air: &PlacedAir, value: &dyn Fn(&HourlySeries, usize) -> f64) -> Option<Vec<Option<f64>>> {
    let series = air.outdoors.as_ref()?;
    let hours = 0..series.known.len();
    Some(
        hours
            .map(|hour| series.known[hour].then(|| value(series, hour)))
            .collect(),
    )
}

fn share(seconds: f64) -> f64 {
    seconds / HOUR_S as f64
}
