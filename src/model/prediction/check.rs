//! The request as a whole: every fault at once.

use super::request::{AttendancePolicy, BandRange, InitialState, Options, PredictionRequest};
use super::schedule::{Intervals, read_schedule};
use crate::model::device::Device;
use crate::model::notes::Fault;
use crate::model::weather::zone::Zone;

/// Most samples of a band.
pub const MAX_SAMPLES: usize = 256;

/// An end state must be taken back as it was said.
const ROUNDING: f64 = 1e-9;
/// A level counts from a cup filled at 20 °C: an emptied warm cup has fallen by a little more than its depth.
const EXPANSION: f64 = 0.03;

/// What the check read on its way.
#[derive(Debug, Clone)]
pub(super) struct Checked {
    pub(super) zone: Zone,
    pub(super) open: Option<Intervals>,
    pub(super) lit: Option<Intervals>,
}

/// Checks a request and reads its zone and schedules.
pub(super) fn check(request: &PredictionRequest<'_>) -> Result<Checked, Vec<Fault>> {
    let options = &request.options;
    let mut faults = Vec::new();
    check_series(request, &mut faults);
    check_options(options, &mut faults);
    if let Some(initial) = &options.initial_state {
        check_initial(initial, request.device, &mut faults);
        check_case_start(initial, request.air.case.is_some(), &mut faults);
    }
    check_sharers(request, &mut faults);
    let mut schedule = |schedule: &Option<_>, path| schedule.as_ref().map(|s| read_schedule(s, path, &mut faults));
    let open = schedule(&options.opening_hours, "options/opening_hours");
    let lit = schedule(&options.lamp_hours, "options/lamp_hours");
    let zone = Zone::parse(options.time_zone.as_deref().unwrap_or("UTC")).unwrap_or_else(|detail| {
        faults.push(Fault::new("options/time_zone", "unknown_time_zone", detail));
        Zone::utc()
    });
    if !faults.is_empty() {
        return Err(faults);
    }
    Ok(Checked { zone, open, lit })
}

fn check_series(request: &PredictionRequest<'_>, faults: &mut Vec<Fault>) {
    if !request.air.series.known.contains(&true) {
        let found = request.air.series.known.len();
        let detail =
            format!("expected at least one hour with temperature and humidity; found {found} hours, none known");
        faults.push(Fault::new("weather", "no_known_hour", detail));
    }
}

fn check_options(options: &Options, faults: &mut Vec<Fault>) {
    let attendance = &options.attendance;
    within(faults, "options/spell_minutes", options.spell_minutes, 0.0, 1440.0);
    within(
        faults,
        "options/attendance/delay_hours",
        attendance.delay_hours,
        0.0,
        8784.0,
    );
    if attendance.policy == AttendancePolicy::Every {
        within(
            faults,
            "options/attendance/days",
            f64::from(attendance.days),
            1.0,
            366.0,
        );
    }
    if options.bands {
        within(
            faults,
            "options/samples",
            options.samples as f64,
            1.0,
            MAX_SAMPLES as f64,
        );
        check_ranges(options, faults);
    }
}

fn check_ranges(options: &Options, faults: &mut Vec<Fault>) {
    let ranges = &options.ranges;
    let mut range = |name: &str, range: BandRange, low: f64, high: f64| {
        let path = format!("options/ranges/{name}");
        within(faults, &format!("{path}/low"), range.low, low, high);
        within(faults, &format!("{path}/high"), range.high, low, high);
        if range.low > range.high {
            let detail = format!("low {} is above high {}; swap them", range.low, range.high);
            faults.push(Fault::new(path, "low_above_high", detail));
        }
    };
    range("humidity_points", ranges.humidity_points, -50.0, 50.0);
    range("air_speed_factor", ranges.air_speed_factor, 0.05, 20.0);
    range("transfer_factor", ranges.transfer_factor, 0.2, 5.0);
    range("cup_factor", ranges.cup_factor, 0.2, 5.0);
    range("tip_volume_factor", ranges.tip_volume_factor, 0.5, 2.0);
    range("vapour_reset", ranges.vapour_reset, 0.0, 1.0);
}

fn check_initial(initial: &InitialState, device: &Device, faults: &mut Vec<Fault>) {
    let mut field = |name: &str, value: Option<f64>, low: f64, high: f64| {
        if let Some(value) = value {
            within(faults, &format!("options/initial_state/{name}"), value, low, high);
        }
    };
    let felt_g = 1e3 * device.head.felt_capacity_kg * (1.0 + ROUNDING);
    field("felt_liquid_g", initial.felt_liquid_g, 0.0, felt_g);
    field("scale_mg", initial.scale_mg, 0.0, 1e6);
    field("body_temp_c", initial.body_temp_c, -60.0, 90.0);
    field("head_temp_c", initial.head_temp_c, -60.0, 90.0);
    // Water stays water: a strength can be given only where the device drinks spirit.
    let strongest = if device.evaporant_abv_pct > 0.0 { 100.0 } else { 0.0 };
    field("felt_strength_abv_pct", initial.felt_strength_abv_pct, 0.0, strongest);
    if let Some(cup) = &device.cup {
        let empty_mm = 1e3 * cup.fill_depth_m * (1.0 + EXPANSION);
        field("cup_drop_mm", initial.cup_drop_mm, 0.0, empty_mm);
        field("cup_temp_c", initial.cup_temp_c, -60.0, 90.0);
        field("cup_strength_abv_pct", initial.cup_strength_abv_pct, 0.0, strongest);
        return;
    }
    let cup_fields = [
        ("cup_drop_mm", initial.cup_drop_mm),
        ("cup_temp_c", initial.cup_temp_c),
        ("cup_strength_abv_pct", initial.cup_strength_abv_pct),
    ];
    for (name, _) in cup_fields.iter().filter(|(_, value)| value.is_some()) {
        let detail = "the device has no cup; leave it out, or give the device a cup";
        faults.push(Fault::new(format!("options/initial_state/{name}"), "no_cup", detail));
    }
}

fn check_case_start(initial: &InitialState, has_case: bool, faults: &mut Vec<Fault>) {
    let path = "options/initial_state/case_relative_humidity_pct";
    match initial.case_relative_humidity_pct {
        Some(_) if !has_case => faults.push(Fault::new(
            path,
            "no_case",
            "the device stands in no case; leave it out",
        )),
        Some(value) => within(faults, path, value, 0.0, 100.0),
        None => (),
    }
}

/// Devices in a case share whole cups.
fn check_sharers(request: &PredictionRequest<'_>, faults: &mut Vec<Fault>) {
    let (Some(case), Some(cup)) = (&request.air.case, &request.device.cup) else {
        return;
    };
    if case.devices % cup.shared_by != 0.0 {
        let detail = format!(
            "expected a multiple of the {} devices that drink from one cup (device/cup/shared_by); found {}",
            cup.shared_by, case.devices
        );
        faults.push(Fault::new("place/devices", "cup_not_shared_out", detail));
    }
}

fn within(faults: &mut Vec<Fault>, field: &str, value: f64, low: f64, high: f64) {
    if !(low..=high).contains(&value) {
        let code = if value < low { "below_minimum" } else { "above_maximum" };
        let code = if value.is_finite() { code } else { "not_a_number" };
        faults.push(Fault::new(
            field,
            code,
            format!("expected {low} to {high}; found {value}"),
        ));
    }
}
