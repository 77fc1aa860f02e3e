//! The options of a prediction.

use serde::{Deserialize, Serialize};
use utoipa::ToSchema;

use super::schedule::Schedule;
use crate::service::records;
use crate::service::records::BandRange;

/// Everything that has a default.
#[derive(Debug, Clone, Default, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields, default)]
pub struct PredictionOptions {
    /// How the hours are solved. Default `averaged`.
    pub method: Option<Method>,
    /// What to answer besides summary, spells and visits. Default `hours`, `days`, `months`.
    #[schema(max_items = 8)]
    pub include: Option<Vec<Include>>,
    /// Give every cycle, stall and water figure a low and a high value. Default true.
    pub bands: Option<bool>,
    /// Samples of the bands. Default 32.
    #[schema(minimum = 1, maximum = 256)]
    pub samples: Option<u32>,
    /// Seed of the samples: the same request and seed give the same answer. Default 1.
    #[schema(maximum = 9007199254740991_i64)]
    pub seed: Option<u64>,
    /// What the samples vary, and how far.
    pub ranges: Option<BandRangesGiven>,
    /// IANA name of the zone in which days, months and clock times are cut. Default UTC.
    #[schema(examples("Europe/Oslo"), max_length = 60)]
    pub time_zone: Option<String>,
    /// Who comes by, and when. Default `when_due`.
    pub attendance: Option<Attendance>,
    /// When somebody looks at the device. Default: always.
    pub opening_hours: Option<Schedule>,
    /// What the device is like at the start. Default: full cup, wet felt, settled temperatures.
    pub initial_state: Option<DeviceState>,
    /// Breaks in a stall shorter than this are bridged, and spells shorter than this are not listed [min]. Default 30.
    #[schema(minimum = 0, maximum = 1440)]
    pub spell_minutes: Option<f64>,
}

/// How the hours are solved.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum Method {
    /// The periodic cycle in slowly changing air: fast.
    Averaged,
    /// Every cycle, event by event: slow, for short series.
    Resolved,
}

/// A part of the answer.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum Include {
    /// Hour by hour.
    Hours,
    /// Day by day.
    Days,
    /// Month by month.
    Months,
    /// One cycle close up.
    CycleTrace,
}

/// Who comes by, and when. A visit fills the cup, wets the felt and resets the strength.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Attendance {
    /// What makes a visit happen.
    pub policy: AttendancePolicy,
    /// Days between visits, for `every`. Default 7.
    #[serde(default)]
    #[schema(minimum = 1, maximum = 366)]
    pub days: Option<u32>,
    /// Hours from a visit falling due to the visit, for `when_due`. Default 0.
    #[serde(default)]
    #[schema(minimum = 0, maximum = 8784)]
    pub delay_hours: Option<f64>,
}

/// What makes a visit happen.
#[derive(Debug, Clone, Copy, Serialize, Deserialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum AttendancePolicy {
    /// The cup at reach or the felt dry.
    WhenDue,
    /// The calendar: each so many days.
    Every,
    /// Nothing: it runs until the reach is used up and the felt is dry.
    Never,
}

/// The device at one moment; what is left out takes the default state.
#[derive(Debug, Clone, Default, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields, default)]
pub struct DeviceState {
    /// Level of the cup below its brim mark [mm].
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(minimum = 0, maximum = 1000)]
    pub cup_drop_mm: Option<f64>,
    /// Liquid in the felt [g].
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(minimum = 0, maximum = 1000)]
    pub felt_liquid_g: Option<f64>,
    /// Strength of the liquid in the cup [% by volume].
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(minimum = 0, maximum = 100)]
    pub cup_strength_abv_pct: Option<f64>,
    /// Strength of the liquid in the felt [% by volume].
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(minimum = 0, maximum = 100)]
    pub felt_strength_abv_pct: Option<f64>,
    /// Temperature of the body [°C].
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(minimum = -60, maximum = 90)]
    pub body_temp_c: Option<f64>,
    /// Temperature of the head, vapour side [°C].
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(minimum = -60, maximum = 90)]
    pub head_temp_c: Option<f64>,
    /// Temperature of the cup [°C].
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(minimum = -60, maximum = 90)]
    pub cup_temp_c: Option<f64>,
    /// The felt has dried out and waits for a person.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub dried_out: Option<bool>,
    /// Scale on the felt [mg]; a new felt has none.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(minimum = 0, maximum = 1_000_000)]
    pub scale_mg: Option<f64>,
    /// Relative humidity in the case around the device [%]; only with a case.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(minimum = 0, maximum = 100)]
    pub case_relative_humidity_pct: Option<f64>,
}

/// What the samples vary: 5th and 95th percentile of each uncertain input.
#[derive(Debug, Clone, Default, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields, default)]
pub struct BandRangesGiven {
    /// Added to relative humidity [points], within -50 to 50. Default -3 to 3.
    pub humidity_points: Option<Range>,
    /// Factor on the air speed, within 0.05 to 20. Default 0.5 to 2.
    pub air_speed_factor: Option<Range>,
    /// Factor on heat and mass transfer, within 0.2 to 5. Default 0.87 to 1.13.
    pub transfer_factor: Option<Range>,
    /// Factor on the cup's evaporation, within 0.2 to 5. Default 0.8 to 1.2.
    pub cup_factor: Option<Range>,
    /// Factor on the tip volume, within 0.5 to 2. Default 0.9 to 1.1.
    pub tip_volume_factor: Option<Range>,
    /// Share of the temperature difference closed in a dip, within 0 to 1. Default 0.2 to 0.8.
    pub vapour_reset: Option<Range>,
}

/// From a low to a high value.
#[derive(Debug, Clone, Copy, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Range {
    /// 5th percentile.
    pub low: f64,
    /// 95th percentile.
    pub high: f64,
}

impl PredictionOptions {
    /// The record, with defaults where nothing was given; lamp hours stand with the device's lamp.
    pub fn record(self, lamp_hours: Option<Schedule>) -> records::Options {
        let usual = records::Options::default();
        let keep = |part: Include| self.include.as_ref().is_none_or(|parts| parts.contains(&part));
        let keep_default = (keep(Include::Hours), keep(Include::Days), keep(Include::Months));
        let trace = self
            .include
            .as_ref()
            .is_some_and(|parts| parts.contains(&Include::CycleTrace));
        records::Options {
            method: self.method.map_or(usual.method, Into::into),
            bands: self.bands.unwrap_or(usual.bands),
            samples: self.samples.map_or(usual.samples, |samples| samples as usize),
            seed: self.seed.unwrap_or(usual.seed),
            ranges: self.ranges.unwrap_or_default().into(),
            time_zone: self.time_zone,
            attendance: self.attendance.map_or(usual.attendance, Into::into),
            opening_hours: self.opening_hours.map(Into::into),
            lamp_hours: lamp_hours.map(Into::into),
            initial_state: self.initial_state.map(Into::into),
            spell_minutes: self.spell_minutes.unwrap_or(usual.spell_minutes),
            keep_hours: keep_default.0,
            keep_days: keep_default.1,
            keep_months: keep_default.2,
            cycle_trace: trace,
        }
    }
}

impl From<Method> for records::Method {
    fn from(wire: Method) -> Self {
        match wire {
            Method::Averaged => records::Method::Averaged,
            Method::Resolved => records::Method::Resolved,
        }
    }
}

impl From<records::Method> for Method {
    fn from(record: records::Method) -> Self {
        match record {
            records::Method::Averaged => Method::Averaged,
            records::Method::Resolved => Method::Resolved,
        }
    }
}

impl From<Attendance> for records::Attendance {
    fn from(wire: Attendance) -> Self {
        let usual = Self::default();
        let policy = match wire.policy {
            AttendancePolicy::WhenDue => records::AttendancePolicy::WhenDue,
            AttendancePolicy::Every => records::AttendancePolicy::Every,
            AttendancePolicy::Never => records::AttendancePolicy::Never,
        };
        Self {
            policy,
            days: wire.days.unwrap_or(usual.days),
            delay_hours: wire.delay_hours.unwrap_or(usual.delay_hours),
        }
    }
}

impl From<DeviceState> for records::InitialState {
    fn from(wire: DeviceState) -> Self {
        Self {
            cup_drop_mm: wire.cup_drop_mm,
            felt_liquid_g: wire.felt_liquid_g,
            cup_strength_abv_pct: wire.cup_strength_abv_pct,
            felt_strength_abv_pct: wire.felt_strength_abv_pct,
            body_temp_c: wire.body_temp_c,
            head_temp_c: wire.head_temp_c,
            cup_temp_c: wire.cup_temp_c,
            dried_out: wire.dried_out,
            scale_mg: wire.scale_mg,
            case_relative_humidity_pct: wire.case_relative_humidity_pct,
        }
    }
}

impl From<records::EndState> for DeviceState {
    fn from(record: records::EndState) -> Self {
        Self {
            cup_drop_mm: record.cup_drop_mm,
            felt_liquid_g: Some(record.felt_liquid_g),
            cup_strength_abv_pct: record.cup_strength_abv_pct,
            felt_strength_abv_pct: Some(record.felt_strength_abv_pct),
            body_temp_c: Some(record.body_temp_c),
            head_temp_c: Some(record.head_temp_c),
            cup_temp_c: record.cup_drop_mm.map(|_| record.cup_temp_c),
            dried_out: Some(record.dried_out),
            scale_mg: Some(record.scale_mg),
            case_relative_humidity_pct: record.case_relative_humidity_pct,
        }
    }
}

impl From<BandRangesGiven> for records::BandRanges {
    fn from(wire: BandRangesGiven) -> Self {
        let usual = Self::default();
        let given = |range: Option<Range>, usual: BandRange| {
            range.map_or(usual, |range| BandRange {
                low: range.low,
                high: range.high,
            })
        };
        Self {
            humidity_points: given(wire.humidity_points, usual.humidity_points),
            air_speed_factor: given(wire.air_speed_factor, usual.air_speed_factor),
            transfer_factor: given(wire.transfer_factor, usual.transfer_factor),
            cup_factor: given(wire.cup_factor, usual.cup_factor),
            tip_volume_factor: given(wire.tip_volume_factor, usual.tip_volume_factor),
            vapour_reset: given(wire.vapour_reset, usual.vapour_reset),
        }
    }
}
