//! What a prediction is asked for.

use crate::model::cycle::Method;
use crate::model::device::Device;
use crate::model::notes::Fault;
use crate::model::place::PlacedAir;

/// One device in one place over one series of hours.
#[derive(Debug, Clone)]
pub struct PredictionRequest<'a> {
    /// The checked device.
    pub device: &'a Device,
    /// Air at the device, hour by hour, and the case around it if there is one.
    pub air: &'a PlacedAir,
    /// Everything that has a default.
    pub options: Options,
}

/// Everything that has a default.
#[derive(Debug, Clone, PartialEq)]
pub struct Options {
    /// How the hours are solved.
    pub method: Method,
    /// Run the samples that give every figure a low and a high value.
    pub bands: bool,
    /// Samples of the bands, 1-256.
    pub samples: usize,
    /// Seed of the samples: the same seed and request give the same answer.
    pub seed: u64,
    /// What the samples vary, and how far.
    pub ranges: BandRanges,
    /// IANA name of the zone in which days, months and clock times are cut; `None` takes UTC and says so.
    pub time_zone: Option<String>,
    /// Who comes by, and when.
    pub attendance: Attendance,
    /// When somebody looks at the device; `None` counts every hour as open and says so.
    pub opening_hours: Option<ClockSchedule>,
    /// When the device's lamp is lit; `None` is always.
    pub lamp_hours: Option<ClockSchedule>,
    /// What the device is like at the start; `None` is a full cup, a wet felt and settled temperatures.
    pub initial_state: Option<InitialState>,
    /// Breaks in a stall shorter than this are bridged, and spells shorter than this are not listed [min], 0-1440.
    pub spell_minutes: f64,
    /// Hand back every hour.
    pub keep_hours: bool,
    /// Hand back every day.
    pub keep_days: bool,
    /// Hand back every month.
    pub keep_months: bool,
    /// Hand back one cycle seen close up.
    pub cycle_trace: bool,
}

impl Default for Options {
    fn default() -> Self {
        Self {
            method: Method::Averaged,
            bands: true,
            samples: 32,
            seed: 1,
            ranges: BandRanges::default(),
            time_zone: None,
            attendance: Attendance::default(),
            opening_hours: None,
            lamp_hours: None,
            initial_state: None,
            spell_minutes: 30.0,
            keep_hours: true,
            keep_days: true,
            keep_months: true,
            cycle_trace: false,
        }
    }
}

/// Who comes by, and when.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Attendance {
    /// What makes a visit happen.
    pub policy: AttendancePolicy,
    /// Days between the visits of [`AttendancePolicy::Every`], 1-366.
    pub days: u32,
    /// Hours from a visit falling due to the visit of [`AttendancePolicy::WhenDue`], 0-8784.
    pub delay_hours: f64,
}

impl Default for Attendance {
    fn default() -> Self {
        Self {
            policy: AttendancePolicy::WhenDue,
            days: 7,
            delay_hours: 0.0,
        }
    }
}

/// What makes a visit happen.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum AttendancePolicy {
    /// The cup at reach or the felt dry.
    WhenDue,
    /// The calendar: each so many days at the clock time of the start.
    Every,
    /// Nothing: it runs until the reach is used up and the felt is dry.
    Never,
}

/// Clock times of a week with dated exceptions, in the zone of the request.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct ClockSchedule {
    /// Monday first: the intervals that begin on that weekday.
    pub weekly: [Vec<ClockInterval>; 7],
    /// Dates on which other intervals begin than on their weekday.
    pub exceptions: Vec<ScheduleException>,
}

/// From one clock time to another, `HH:MM`; an end at or before its start lies on the next day; `24:00` is midnight.
#[derive(Debug, Clone, PartialEq)]
pub struct ClockInterval {
    /// First moment inside.
    pub from: String,
    /// First moment no longer inside.
    pub to: String,
}

/// One date and the intervals that begin on it; none means closed.
#[derive(Debug, Clone, PartialEq)]
pub struct ScheduleException {
    /// The date, `YYYY-MM-DD`.
    pub date: String,
    /// What begins on it instead of the weekday's intervals.
    pub intervals: Vec<ClockInterval>,
}

/// The device at the start; what is not given takes the default state.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct InitialState {
    /// Level of the cup below its brim mark [mm].
    pub cup_drop_mm: Option<f64>,
    /// Liquid in the felt [g].
    pub felt_liquid_g: Option<f64>,
    /// Strength of the liquid in the cup [% ABV].
    pub cup_strength_abv_pct: Option<f64>,
    /// Strength of the liquid in the felt [% ABV].
    pub felt_strength_abv_pct: Option<f64>,
    /// Temperature of the body [°C].
    pub body_temp_c: Option<f64>,
    /// Temperature of the head, vapour side [°C].
    pub head_temp_c: Option<f64>,
    /// Temperature of the cup [°C].
    pub cup_temp_c: Option<f64>,
    /// The felt has dried out and waits for a person.
    pub dried_out: Option<bool>,
    /// Scale on the felt [mg].
    pub scale_mg: Option<f64>,
    /// Relative humidity in the case around the device [%].
    pub case_relative_humidity_pct: Option<f64>,
}

/// From the 5th to the 95th percentile of an uncertain input.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct BandRange {
    /// 5th percentile.
    pub low: f64,
    /// 95th percentile.
    pub high: f64,
}

/// What the samples vary, and how far.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct BandRanges {
    /// Added to relative humidity [points], within -50 to 50.
    pub humidity_points: BandRange,
    /// Factor on the air speed, within 0.05 to 20.
    pub air_speed_factor: BandRange,
    /// Factor on heat and mass transfer, within 0.2 to 5.
    pub transfer_factor: BandRange,
    /// Factor on the cup's evaporation, within 0.2 to 5.
    pub cup_factor: BandRange,
    /// Factor on the tip volume, within 0.5 to 2.
    pub tip_volume_factor: BandRange,
    /// Share of the temperature difference closed in a dip, within 0 to 1.
    pub vapour_reset: BandRange,
}

impl Default for BandRanges {
    fn default() -> Self {
        let range = |low, high| BandRange { low, high };
        Self {
            humidity_points: range(-3.0, 3.0),
            air_speed_factor: range(0.5, 2.0),
            transfer_factor: range(0.87, 1.13),
            cup_factor: range(0.8, 1.2),
            tip_volume_factor: range(0.9, 1.1),
            vapour_reset: range(0.2, 0.8),
        }
    }
}

/// Why there is no prediction.
#[derive(Debug, Clone, PartialEq, thiserror::Error)]
pub enum PredictionError {
    /// The caller asked to stop.
    #[error("the prediction was cancelled")]
    Cancelled,
    /// The request cannot be run; all its faults, with paths such as `options/opening_hours/weekly/mon/0`.
    #[error("the request has {} fault(s)", .0.len())]
    Faults(Vec<Fault>),
}
