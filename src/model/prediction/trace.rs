//! One cycle of a run, close up.

use super::calendar::HOUR_S;
use super::forcing::{self, AirShift};
use super::record::HourRecord;
use super::result::CycleTrace;
use super::run::Common;
use crate::model::cycle::{self, HourState, State, Tuning};

/// One cycle in the air of the running hour with the median count; none if the device never ran a full hour.
pub(super) fn cycle_trace(common: &Common<'_>, records: &[HourRecord]) -> Option<CycleTrace> {
    let runs_through = |hour: &usize| records[*hour].seconds(HourState::Running) >= HOUR_S as f64 - 1.0;
    let mut running: Vec<usize> = (0..records.len()).filter(runs_through).collect();
    running.sort_by(|a, b| records[*a].cycles.total_cmp(&records[*b].cycles));
    let hour = *running.get(running.len() / 2)?;
    let middle_s = HOUR_S as f64 / 2.0;
    let mut forcing = forcing::at(&common.surroundings.hour(hour, AirShift::NONE), middle_s);
    // In a case the device meets other air than what surrounds it.
    forcing.air.vapour_pressure_pa = records[hour].air.vapour_pa;
    let state = State::settled(common.device, &Tuning::default(), &forcing);
    Some(CycleTrace {
        at_unix_s: common.start_unix_s + hour as i64 * HOUR_S + HOUR_S / 2,
        points: cycle::cycle_trace(common.device, &Tuning::default(), &state, &forcing)?,
    })
}
