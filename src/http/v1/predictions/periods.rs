//! The figures of a stretch of time, with their bands.

use serde::Serialize;
use utoipa::ToSchema;

use super::{instant, rounded};
use crate::service::records;
use crate::service::records::{Bands, Totals};

/// The figures of the whole run, a month or a day.
#[derive(Debug, Serialize, ToSchema)]
pub struct Period {
    /// `2026-01` for a month, `2026-01-15` for a day; absent for the whole run.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, examples("2026-01"))]
    pub label: Option<String>,
    /// First moment inside.
    #[schema(format = DateTime)]
    pub from: String,
    /// First moment no longer inside.
    #[schema(format = DateTime)]
    pub to: String,
    /// Length [h].
    pub hours: f64,
    /// Cycles, fractional.
    pub cycles: f64,
    /// Cycles while open, fractional.
    pub cycles_open_hours: f64,
    /// Time open [h].
    pub open_hours: f64,
    /// Time not running [h], by cause.
    pub stall_hours: StallHours,
    /// Time from a visit falling due to the visit, or to the end [h].
    pub needs_person_hours: f64,
    /// Water lost to the air [g].
    pub water_g: Substance,
    /// Ethanol lost to the air [g]; zero with water.
    pub ethanol_g: Substance,
    /// Visits made.
    pub visits: u64,
    /// Low and high values, if asked for.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub bands: Option<PeriodBands>,
}

/// Time not running [h], by cause.
#[derive(Debug, Serialize, ToSchema)]
pub struct StallHours {
    /// Every part of an hour not running; unknown hours apart.
    pub total: f64,
    /// The part of `total` while open.
    pub open: f64,
    /// The air could not hold the temperature difference.
    pub humid: f64,
    /// Felt dry, cup out of reach.
    pub dry: f64,
    /// Felt or cup frozen.
    pub frozen: f64,
    /// The head gained more heat than the body.
    pub warm_head: f64,
    /// The body was above the limit of fluid or device: no cycle is promised.
    pub overheated: f64,
    /// The weather is missing; not part of `total`.
    pub unknown: f64,
}

/// What went into the air [g], net: dew counts against it.
#[derive(Debug, Serialize, ToSchema)]
pub struct Substance {
    /// Head and cup together.
    pub total: f64,
    /// From the felt.
    pub head: f64,
    /// From the cup.
    pub cup: f64,
}

/// 5th and 95th percentile over the samples.
#[derive(Debug, Serialize, ToSchema)]
pub struct Band {
    /// 5th percentile.
    pub low: f64,
    /// 95th percentile.
    pub high: f64,
}

/// The band of each figure, taken figure by figure: the low causes need not add up to the low total.
#[derive(Debug, Serialize, ToSchema)]
pub struct PeriodBands {
    /// Cycles.
    pub cycles: Band,
    /// Cycles while open.
    pub cycles_open_hours: Band,
    /// Time not running, all causes [h].
    pub stall_hours: Band,
    /// The same by cause [h].
    pub stall_hours_by_cause: StallHoursBands,
    /// Time a person is waited for [h].
    pub needs_person_hours: Band,
    /// Water lost to the air, head and cup together [g].
    pub water_g: Band,
    /// The same by part [g].
    pub water_by_part_g: SubstanceBands,
    /// Ethanol lost to the air [g].
    pub ethanol_g: Band,
    /// Visits.
    pub visits: Band,
}

/// Bands of the stall hours by cause [h].
#[derive(Debug, Serialize, ToSchema)]
pub struct StallHoursBands {
    /// While open.
    pub open: Band,
    /// Humid.
    pub humid: Band,
    /// Dry.
    pub dry: Band,
    /// Frozen.
    pub frozen: Band,
    /// Warm head.
    pub warm_head: Band,
    /// Overheated.
    pub overheated: Band,
}

/// Bands by part [g].
#[derive(Debug, Serialize, ToSchema)]
pub struct SubstanceBands {
    /// From the felt.
    pub head: Band,
    /// From the cup.
    pub cup: Band,
}

/// One hour of the clock over the whole run.
#[derive(Debug, Serialize, ToSchema)]
pub struct HourOfDay {
    /// Hour of the clock in the zone of the request.
    #[schema(minimum = 0, maximum = 23)]
    pub hour: usize,
    /// Time that fell into it [h].
    pub hours: f64,
    /// Cycles.
    pub cycles: f64,
    /// Time not running [h].
    pub stall_hours: f64,
    /// Water lost to the air [g].
    pub water_g: f64,
}

impl From<records::Period> for Period {
    fn from(record: records::Period) -> Self {
        let totals = record.totals;
        Self {
            label: Some(record.label).filter(|label| !label.is_empty()),
            from: instant(record.from_unix_s),
            to: instant(record.to_unix_s),
            hours: rounded(totals.hours),
            cycles: rounded(totals.cycles),
            cycles_open_hours: rounded(totals.cycles_open_hours),
            open_hours: rounded(totals.open_hours),
            stall_hours: totals.stall_hours.into(),
            needs_person_hours: rounded(totals.needs_person_hours),
            water_g: totals.water_g.into(),
            ethanol_g: totals.ethanol_g.into(),
            visits: totals.visits.round() as u64,
            bands: record.bands.as_ref().map(Into::into),
        }
    }
}

impl From<records::StallHours> for StallHours {
    fn from(record: records::StallHours) -> Self {
        Self {
            total: rounded(record.total),
            open: rounded(record.open),
            humid: rounded(record.humid),
            dry: rounded(record.dry),
            frozen: rounded(record.frozen),
            warm_head: rounded(record.warm_head),
            overheated: rounded(record.overheated),
            unknown: rounded(record.unknown),
        }
    }
}

impl From<records::LossG> for Substance {
    fn from(record: records::LossG) -> Self {
        Self {
            total: rounded(record.total),
            head: rounded(record.head),
            cup: rounded(record.cup),
        }
    }
}

impl From<&Bands> for PeriodBands {
    fn from(bands: &Bands) -> Self {
        let of = |figure: fn(&Totals) -> f64| Band {
            low: rounded(figure(&bands.low)),
            high: rounded(figure(&bands.high)),
        };
        Self {
            cycles: of(|totals| totals.cycles),
            cycles_open_hours: of(|totals| totals.cycles_open_hours),
            stall_hours: of(|totals| totals.stall_hours.total),
            stall_hours_by_cause: StallHoursBands {
                open: of(|totals| totals.stall_hours.open),
                humid: of(|totals| totals.stall_hours.humid),
                dry: of(|totals| totals.stall_hours.dry),
                frozen: of(|totals| totals.stall_hours.frozen),
                warm_head: of(|totals| totals.stall_hours.warm_head),
                overheated: of(|totals| totals.stall_hours.overheated),
            },
            needs_person_hours: of(|totals| totals.needs_person_hours),
            water_g: of(|totals| totals.water_g.total),
            water_by_part_g: SubstanceBands {
                head: of(|totals| totals.water_g.head),
                cup: of(|totals| totals.water_g.cup),
            },
            ethanol_g: of(|totals| totals.ethanol_g.total),
            visits: of(|totals| totals.visits),
        }
    }
}

impl HourOfDay {
    /// All hours of the clock, from midnight.
    pub fn all(totals: &[Totals]) -> Vec<Self> {
        let hour = |(hour, totals): (usize, &Totals)| Self {
            hour,
            hours: rounded(totals.hours),
            cycles: rounded(totals.cycles),
            stall_hours: rounded(totals.stall_hours.total),
            water_g: rounded(totals.water_g.total),
        };
        totals.iter().enumerate().map(hour).collect()
    }
}
