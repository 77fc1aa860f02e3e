//! From readings to hours, in the order in which it is done.

use super::gaps::fill;
use super::grid::Grid;
use super::humidity::vapour_pressures;
use super::options::RegulariseOptions;
use super::order::{check_repeats, sort_by_time};
use super::pressure::{HourlyPressure, Said, of_station};
use super::readings::{Label, RawReadings, WeatherFault};
use super::sanity::{check_unknown, shape_faults, time_faults};
use super::screen::{flag_spikes, flag_stuck, screen};
use super::series::{Flag, HourlySeries, SeriesReport, Sightings};
use super::steps::flag_steps;
use super::suspicion::suspicions;
use crate::model::air::saturation_pressure_pa;
use crate::model::notes::Assumption;

/// Lays readings on hours: sorts, screens, takes vapour pressure from dew point or relative humidity, averages what shares
/// an hour, fills short gaps in temperature and vapour pressure, finds a station pressure for every hour, and says all of
/// it in `report` and `assumptions`.
///
/// # Errors
/// Every fault found: columns of unequal length, no readings, no humidity, times outside 1800 to 2200, contradictory rows
/// of one time, columns that look swapped or in another unit, too long a span, too large a share of unknown hours.
pub fn regularise(mut raw: RawReadings, options: &RegulariseOptions) -> Result<HourlySeries, Vec<WeatherFault>> {
    let mut faults = options.faults();
    faults.extend(shape_faults(&raw));
    refuse(faults)?;
    let mut faults = time_faults(&raw);
    let suspicious = suspicions(&raw);
    if options.accept_suspicious {
        raw.flags.extend(suspicious.into_iter().map(accepted));
    } else {
        faults.extend(suspicious);
    }
    sort_by_time(&mut raw);
    faults.extend(check_repeats(&mut raw));
    refuse(faults)?;
    screen(&mut raw);
    flag_stuck(&mut raw);
    flag_spikes(&mut raw);
    hours(raw, options)
}

fn refuse(faults: Vec<WeatherFault>) -> Result<(), Vec<WeatherFault>> {
    if faults.is_empty() { Ok(()) } else { Err(faults) }
}

fn accepted(fault: WeatherFault) -> Flag {
    Flag {
        code: fault.code,
        count: 1,
        rows: Vec::new(),
        detail: format!("accepted as sent: {}", fault.detail),
    }
}

/// The second half: everything that needs the hour grid.
fn hours(mut raw: RawReadings, options: &RegulariseOptions) -> Result<HourlySeries, Vec<WeatherFault>> {
    let grid = Grid::lay(&raw, options.max_hours).map_err(|fault| vec![fault])?;
    let humidity = vapour_pressures(&mut raw, options.elevation_m);
    raw.assumptions.extend(grid.assumptions(&raw));
    let rows = grid.first_rows(&raw.row);
    let air = HourlyAir::of(
        &grid,
        &mut raw,
        &humidity.vapour_pressure_pa,
        &rows,
        options.max_gap_hours,
    );
    let pressure_pa = hourly_pressure(&grid, &mut raw, &air, &rows, options.elevation_m);
    let known: Vec<bool> = air
        .temp_k
        .iter()
        .zip(&air.vapour_pa)
        .map(|(t, e)| !t.is_nan() && !e.is_nan())
        .collect();
    let report = SeriesReport {
        readings: raw.len(),
        hours_filled: (0..grid.hours).filter(|&at| known[at] && air.filled[at]).count(),
        hours_unknown: known.iter().filter(|known| !**known).count(),
        humidity_from: humidity.from,
        flags: std::mem::take(&mut raw.flags),
    };
    check_unknown(&report, grid.hours, options)?;
    let outdoor = |column: &Option<Vec<f64>>, label: Label| {
        let mut values = grid.means_labelled(label, &raw.time_unix_s, column.as_deref()?);
        fill(&mut values, options.max_gap_hours);
        Some(values)
    };
    let shortwave_label = raw.shortwave_label.unwrap_or(raw.label);
    raw.assumptions.extend(irradiance_moved(&raw, shortwave_label));
    Ok(HourlySeries {
        start_unix_s: grid.start_unix_s,
        stamp: raw.label.stamp(),
        wind_speed_m_s: outdoor(&raw.wind_speed_m_s, raw.label),
        shortwave_w_m2: outdoor(&raw.shortwave_w_m2, shortwave_label),
        shortwave_stamp: shortwave_label.stamp(),
        temp_k: air.temp_k,
        vapour_pressure_pa: air.vapour_pa,
        pressure_pa,
        known,
        report,
        assumptions: raw.assumptions,
    })
}

/// Irradiance labelled otherwise than the air lies in other hours than the air beside it.
fn irradiance_moved(raw: &RawReadings, label: Label) -> Option<Assumption> {
    let columns_differ = raw.shortwave_w_m2.is_some() && label != raw.label;
    let means = match label {
        Label::Instant => "taken at its time",
        Label::MeanOfFollowingHour => "the mean of the hour following its time",
        Label::MeanOfPrecedingHour => "the mean of the hour preceding its time",
    };
    columns_differ.then(|| {
        let value = format!("{means}, otherwise than the air beside it");
        Assumption::new(
            "irradiance",
            value,
            "hours at the ends of the series that only one of the two tells of",
        )
    })
}

/// Temperature and vapour pressure of the hours, gaps filled where they may be.
struct HourlyAir {
    temp_k: Vec<f64>,
    vapour_pa: Vec<f64>,
    filled: Vec<bool>,
}

impl HourlyAir {
    fn of(grid: &Grid, raw: &mut RawReadings, vapour_pa: &[f64], rows: &[u32], max_gap_hours: usize) -> Self {
        let (mut temp_k, mut vapour_pa) = (grid.means(&raw.air_temp_k), grid.means(vapour_pa));
        flag_steps(&temp_k, rows, &mut raw.flags);
        let mut filled = fill(&mut temp_k, max_gap_hours);
        for (filled, also) in filled.iter_mut().zip(fill(&mut vapour_pa, max_gap_hours)) {
            *filled |= also;
        }
        let derived: Vec<bool> = grid
            .shared()
            .iter()
            .zip(&filled)
            .map(|(shared, filled)| shared | filled)
            .collect();
        clip_at_saturation(&temp_k, &mut vapour_pa, &derived, &mut raw.flags);
        Self {
            temp_k,
            vapour_pa,
            filled,
        }
    }
}

/// Means and interpolated values of moist air can lie a little above the saturation curve, which is hollow. Single
/// readings were held below it one by one.
fn clip_at_saturation(temp_k: &[f64], vapour_pressure_pa: &mut [f64], derived: &[bool], flags: &mut Vec<Flag>) {
    let mut clipped = Sightings::default();
    for hour in (0..temp_k.len()).filter(|&hour| derived[hour]) {
        let saturation = saturation_pressure_pa(temp_k[hour]);
        if vapour_pressure_pa[hour] > saturation {
            clipped.add(hour + 1);
            vapour_pressure_pa[hour] = saturation;
        }
    }
    let detail = "hours (counted from 1) whose averaged or interpolated vapour pressure lay above saturation; taken as saturated";
    clipped.flag_into(flags, "hour_clipped_at_saturation", detail);
}

fn hourly_pressure(
    grid: &Grid,
    raw: &mut RawReadings,
    air: &HourlyAir,
    row_of_hour: &[u32],
    elevation_m: Option<f64>,
) -> Vec<f64> {
    let hourly = HourlyPressure {
        read_pa: raw.pressure_pa.as_deref().map(|values| grid.means(values)),
        is_sea_level: raw.pressure_is_sea_level,
        elevation_m,
        temp_k: &air.temp_k,
        vapour_pressure_pa: &air.vapour_pa,
        row_of_hour,
    };
    of_station(
        hourly,
        &mut Said {
            flags: &mut raw.flags,
            assumptions: &mut raw.assumptions,
        },
    )
}
