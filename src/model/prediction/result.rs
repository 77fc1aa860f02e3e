//! What a prediction says.

use crate::model::cycle::{DueCause, HourState, Method, TracePoint};
use crate::model::notes::{Assumption, Caution};

use super::request::InitialState;

/// A prediction in practical units: hours, grams, millimetres, °C.
#[derive(Debug, Clone, PartialEq)]
pub struct Prediction {
    /// The whole run.
    pub summary: Period,
    /// When it stood still.
    pub stall_spells: StallSpells,
    /// Each visit, in order.
    pub visits: Vec<Visit>,
    /// Month by month, if kept.
    pub months: Option<Vec<Period>>,
    /// Day by day, if kept.
    pub days: Option<Vec<Period>>,
    /// The 24 hours of the clock, each over the whole run; without bands.
    pub hours_of_day: Vec<Totals>,
    /// Hour by hour, if kept.
    pub hours: Option<HourColumns>,
    /// The air at the device over the whole run.
    pub air: AirSummary,
    /// What the case needs, if the device stands in one.
    pub case: Option<CaseFigures>,
    /// One cycle close up, if asked for and if it ever ran.
    pub cycle_trace: Option<CycleTrace>,
    /// The device at the end: can be sent back as the start of the next run.
    pub end_state: EndState,
    /// IANA name of the zone days, months and clock times were cut in.
    pub time_zone: String,
    /// What had to be assumed for this run (those of device and weather are theirs).
    pub assumptions: Vec<Assumption>,
    /// What to look out for, with the figures of this run.
    pub cautions: Vec<Caution>,
    /// How it was computed.
    pub model: ModelInfo,
}

/// How it was computed.
#[derive(Debug, Clone, PartialEq)]
pub struct ModelInfo {
    /// Version of the program and revision of the model.
    pub version: String,
    /// How the hours were solved.
    pub method: Method,
    /// Seed of the samples.
    pub seed: u64,
    /// Samples run; 0 without bands.
    pub samples: usize,
}

/// A stretch of the calendar and what happened in it.
#[derive(Debug, Clone, PartialEq)]
pub struct Period {
    /// `2026-01` for a month, `2026-01-15` for a day, empty for the whole run.
    pub label: String,
    /// First second inside, since 1970-01-01T00:00:00Z.
    pub from_unix_s: i64,
    /// First second no longer inside.
    pub to_unix_s: i64,
    /// Figures of the nominal run.
    pub totals: Totals,
    /// Low and high values, if asked for.
    pub bands: Option<Bands>,
}

/// The figures of a stretch of time.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct Totals {
    /// Length [h].
    pub hours: f64,
    /// Cycles, fractional.
    pub cycles: f64,
    /// Cycles while open, fractional.
    pub cycles_open_hours: f64,
    /// Time open [h].
    pub open_hours: f64,
    /// Time not running [h].
    pub stall_hours: StallHours,
    /// Time from a visit falling due to the visit, or to the end [h].
    pub needs_person_hours: f64,
    /// Water lost to the air.
    pub water_g: LossG,
    /// Ethanol lost to the air; zero with water.
    pub ethanol_g: LossG,
    /// Visits: whole in a run, fractional only in a band.
    pub visits: f64,
}

/// Time not running [h].
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct StallHours {
    /// Every part of an hour not running, unknown hours apart.
    pub total: f64,
    /// The part of `total` while open.
    pub open: f64,
    /// The air could not hold the difference.
    pub humid: f64,
    /// Felt dry, cup out of reach.
    pub dry: f64,
    /// Felt or cup frozen.
    pub frozen: f64,
    /// Head heated more than the body.
    pub warm_head: f64,
    /// Body above the limit of fluid or device.
    pub overheated: f64,
    /// Weather missing; not part of `total`.
    pub unknown: f64,
}

/// What went into the air [g], net: dew counts against it.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct LossG {
    /// Head and cup together.
    pub total: f64,
    /// From the felt.
    pub head: f64,
    /// From the cup.
    pub cup: f64,
}

/// Each figure's 5th percentile, nominal value and 95th percentile.
///
/// Percentiles are taken figure by figure over the samples together with the nominal run, so the low causes of a stall
/// need not add up to the low total, and a nominal value can lie outside its own band.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Bands {
    /// 5th percentiles.
    pub low: Totals,
    /// The nominal run.
    pub central: Totals,
    /// 95th percentiles.
    pub high: Totals,
}

/// One figure's band.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Band {
    /// 5th percentile.
    pub low: f64,
    /// Nominal run.
    pub central: f64,
    /// 95th percentile.
    pub high: f64,
}

impl Bands {
    /// The band of one figure, for example `bands.of(|t| t.cycles)`.
    pub fn of(&self, figure: impl Fn(&Totals) -> f64) -> Band {
        Band {
            low: figure(&self.low),
            central: figure(&self.central),
            high: figure(&self.high),
        }
    }
}

/// When it stood still.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct StallSpells {
    /// Spells in order.
    pub list: Vec<Spell>,
    /// The longest [h]; 0 without any.
    pub longest_hours: f64,
    /// Breaks shorter than this were bridged, and spells shorter than this are not listed [min].
    pub spell_minutes: f64,
    /// Spells too short to be listed.
    pub short_count: usize,
    /// Their hours together.
    pub short_hours: f64,
}

/// One uninterrupted stall.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Spell {
    /// Its first second, since 1970-01-01T00:00:00Z; within a mixed hour an estimate.
    pub from_unix_s: i64,
    /// First second no longer in it.
    pub to_unix_s: i64,
    /// Stalled time [h]: bridged breaks and unknown hours inside do not count.
    pub hours: f64,
    /// The state that held longest.
    pub cause: HourState,
    /// What ended it.
    pub healed_by: HealedBy,
}

/// What ended a stall.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum HealedBy {
    /// It started again alone.
    Itself,
    /// A visit.
    Person,
    /// Nothing before the end of the run.
    NotYet,
}

/// One visit.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Visit {
    /// When, seconds since 1970-01-01T00:00:00Z.
    pub at_unix_s: i64,
    /// Why.
    pub cause: VisitCause,
    /// Since when a visit was due, if it was.
    pub due_since_unix_s: Option<i64>,
    /// Water filled in [g].
    pub water_g: f64,
    /// Ethanol filled in [g].
    pub ethanol_g: f64,
}

/// Why a visit was made.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum VisitCause {
    /// The level had fallen out of the beak's reach.
    CupAtReach,
    /// The felt had dried out.
    FeltDry,
    /// The calendar said so.
    Scheduled,
}

impl From<DueCause> for VisitCause {
    fn from(cause: DueCause) -> Self {
        match cause {
            DueCause::CupAtReach => VisitCause::CupAtReach,
            DueCause::FeltDry => VisitCause::FeltDry,
        }
    }
}

/// Hour by hour: all columns have the series' length.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct HourColumns {
    /// Start of the hour, seconds since 1970-01-01T00:00:00Z.
    pub time_unix_s: Vec<i64>,
    /// Cycles, fractional.
    pub cycles: Vec<f64>,
    /// Share of the hour not running; unknown hours count as 0 here and 1 in their own column.
    pub stall_fraction: Vec<f64>,
    /// Share of the hour in each state, in the order of [`HourState::ALL`].
    pub state_fractions: [Vec<f64>; 7],
    /// Share of the hour in which somebody is waited for.
    pub needs_person_fraction: Vec<f64>,
    /// Share of the hour that is open.
    pub open_fraction: Vec<f64>,
    /// Water lost by the felt [g].
    pub water_head_g: Vec<f64>,
    /// Water lost by the cup [g].
    pub water_cup_g: Vec<f64>,
    /// Ethanol lost by the felt [g].
    pub ethanol_head_g: Vec<f64>,
    /// Ethanol lost by the cup [g].
    pub ethanol_cup_g: Vec<f64>,
    /// Fall of the level below the brim mark at the end of the hour [mm].
    pub cup_drop_mm: Vec<f64>,
    /// Mean body temperature [°C]; none in an unknown hour.
    pub body_temp_c: Vec<Option<f64>>,
    /// Mean head temperature, vapour side [°C]; none in an unknown hour.
    pub head_temp_c: Vec<Option<f64>>,
    /// Mean air temperature at the device [°C]; none in an unknown hour.
    pub air_temp_c: Vec<Option<f64>>,
    /// Relative humidity at the device [%], of the mean vapour at the mean temperature; none in an unknown hour.
    pub air_relative_humidity_pct: Vec<Option<f64>>,
    /// Mean air speed at the device [m/s]; none in an unknown hour.
    pub air_speed_m_s: Vec<Option<f64>>,
    /// Temperature outdoors [°C]; none where the readings are the air at the device.
    pub outdoor_temp_c: Option<Vec<Option<f64>>>,
    /// Relative humidity outdoors [%]; none where the readings are the air at the device.
    pub outdoor_relative_humidity_pct: Option<Vec<Option<f64>>>,
}

/// Means and extremes of the air at the device, over the known hours of the nominal run.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct AirSummary {
    /// Mean temperature [°C].
    pub mean_temp_c: f64,
    /// Mean of the hours' relative humidity [%].
    pub mean_relative_humidity_pct: f64,
    /// Lowest hourly relative humidity [%].
    pub least_relative_humidity_pct: f64,
    /// Highest hourly relative humidity [%].
    pub most_relative_humidity_pct: f64,
    /// Mean air speed [m/s].
    pub mean_air_speed_m_s: f64,
    /// Hours that end with dew on the glass of the case; none without a case.
    pub dew_hours: Option<usize>,
}

/// What a case needs, in the mean air around it over the known hours, held steady.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct CaseFigures {
    /// Relative humidity above which the device stands still in it [%].
    pub stall_relative_humidity_pct: f64,
    /// Air changes below which its own vapour stops the device [1/h]; none where the air around the case is too damp for
    /// any number of them.
    pub least_air_changes_per_hour: Option<f64>,
}

/// One cycle close up, in the air of the middle of one hour held steady.
#[derive(Debug, Clone, PartialEq)]
pub struct CycleTrace {
    /// The middle of the hour whose air was taken: the running hour with the median count.
    pub at_unix_s: i64,
    /// From the end of one dip to the end of the next.
    pub points: Vec<TracePoint>,
}

/// The device at the end of a run, in the units of [`InitialState`].
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct EndState {
    /// Level of the cup below its brim mark [mm]; none without a cup.
    pub cup_drop_mm: Option<f64>,
    /// Liquid in the felt [g].
    pub felt_liquid_g: f64,
    /// Strength of the liquid in the cup [% ABV]; none without a cup.
    pub cup_strength_abv_pct: Option<f64>,
    /// Strength of the liquid in the felt [% ABV].
    pub felt_strength_abv_pct: f64,
    /// Temperature of the body [°C].
    pub body_temp_c: f64,
    /// Temperature of the head, vapour side [°C].
    pub head_temp_c: f64,
    /// Temperature of the cup [°C].
    pub cup_temp_c: f64,
    /// The felt has dried out and waits for a person.
    pub dried_out: bool,
    /// Scale on the felt [mg].
    pub scale_mg: f64,
    /// Relative humidity in the case around the device [%]; none without a case.
    pub case_relative_humidity_pct: Option<f64>,
}

impl From<EndState> for InitialState {
    /// The start of a run that takes up where another ended; where in a cycle it stood is lost.
    fn from(end: EndState) -> Self {
        Self {
            cup_drop_mm: end.cup_drop_mm,
            felt_liquid_g: Some(end.felt_liquid_g),
            cup_strength_abv_pct: end.cup_strength_abv_pct,
            felt_strength_abv_pct: Some(end.felt_strength_abv_pct),
            body_temp_c: Some(end.body_temp_c),
            head_temp_c: Some(end.head_temp_c),
            cup_temp_c: end.cup_drop_mm.map(|_| end.cup_temp_c),
            dried_out: Some(end.dried_out),
            scale_mg: Some(end.scale_mg),
            case_relative_humidity_pct: end.case_relative_humidity_pct,
        }
    }
}
