//! Records become columns.

use super::calendar::{Calendar, HOUR_S};
use super::record::HourRecord;
use super::result::HourColumns;
use crate::model::air::ZERO_CELSIUS_K;
use crate::model::cycle::HourState;

/// Lays the hours of a run side by side.
pub(super) fn columns(records: &[HourRecord], calendar: &Calendar, start_unix_s: i64) -> HourColumns {
    let column = |value: &dyn Fn(&HourRecord) -> f64| -> Vec<f64> { records.iter().map(value).collect() };
    let hours = 0..records.len();
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
        body_temp_c: records.iter().map(|r| mean_c(r, r.body_temp_k_s)).collect(),
        head_temp_c: records.iter().map(|r| mean_c(r, r.head_temp_k_s)).collect(),
    }
}

fn share(seconds: f64) -> f64 {
    seconds / HOUR_S as f64
}

fn mean_c(record: &HourRecord, integral_k_s: f64) -> Option<f64> {
    (!record.is_unknown()).then(|| integral_k_s / HOUR_S as f64 - ZERO_CELSIUS_K)
}
