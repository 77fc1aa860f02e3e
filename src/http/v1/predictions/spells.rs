//! When it stood still, and who came by.

use serde::Serialize;
use utoipa::ToSchema;

use super::{instant, rounded};
use crate::service::records;
use crate::service::records::StallSpells;

/// One uninterrupted stall.
#[derive(Debug, Serialize, ToSchema)]
pub struct StallSpell {
    /// Its first moment; within a mixed hour an estimate.
    #[schema(format = DateTime)]
    pub from: String,
    /// First moment no longer in it.
    #[schema(format = DateTime)]
    pub to: String,
    /// Stalled time [h]; bridged breaks and unknown hours inside do not count.
    pub hours: f64,
    /// The state that held longest.
    pub cause: HourState,
    /// What ended it.
    pub healed_by: HealedBy,
}

/// The stalls taken together.
#[derive(Debug, Serialize, ToSchema)]
pub struct StallSpellsSummary {
    /// Spells listed.
    pub count: usize,
    /// The longest [h]; 0 without any.
    pub longest_hours: f64,
    /// Breaks shorter than this were bridged, and spells shorter than this are not listed [min].
    pub spell_minutes: f64,
    /// Spells too short to be listed.
    pub short_count: usize,
    /// Their hours together.
    pub short_hours: f64,
}

/// What a device does at a moment.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum HourState {
    /// Dipping.
    Running,
    /// The air cannot hold the temperature difference.
    Humid,
    /// The felt is dry and the cup out of reach.
    Dry,
    /// Felt or cup at or below the freezing point.
    Frozen,
    /// The head gains more heat than the body.
    WarmHead,
    /// The body is above the limit of fluid or device.
    Overheated,
    /// The weather is missing.
    Unknown,
}

/// What ended a stall.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum HealedBy {
    /// It started again alone.
    Itself,
    /// A visit.
    Person,
    /// Nothing before the end of the run.
    NotYet,
}

/// One visit.
#[derive(Debug, Serialize, ToSchema)]
pub struct Visit {
    /// When.
    #[schema(format = DateTime)]
    pub at: String,
    /// Why.
    pub cause: VisitCause,
    /// Since when a visit was due; absent if it was not.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, format = DateTime)]
    pub due_since: Option<String>,
    /// Water filled in [g].
    pub water_g: f64,
    /// Ethanol filled in [g].
    pub ethanol_g: f64,
}

/// Why a visit was made.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum VisitCause {
    /// The level had fallen out of the beak's reach.
    CupAtReach,
    /// The felt had dried out.
    FeltDry,
    /// The calendar said so.
    Scheduled,
}

impl StallSpellsSummary {
    /// Of all spells.
    pub fn of(spells: &StallSpells) -> Self {
        Self {
            count: spells.list.len(),
            longest_hours: rounded(spells.longest_hours),
            spell_minutes: spells.spell_minutes,
            short_count: spells.short_count,
            short_hours: rounded(spells.short_hours),
        }
    }
}

impl From<records::Spell> for StallSpell {
    fn from(record: records::Spell) -> Self {
        Self {
            from: instant(record.from_unix_s),
            to: instant(record.to_unix_s),
            hours: rounded(record.hours),
            cause: record.cause.into(),
            healed_by: match record.healed_by {
                records::HealedBy::Itself => HealedBy::Itself,
                records::HealedBy::Person => HealedBy::Person,
                records::HealedBy::NotYet => HealedBy::NotYet,
            },
        }
    }
}

impl From<records::HourState> for HourState {
    fn from(record: records::HourState) -> Self {
        match record {
            records::HourState::Running => HourState::Running,
            records::HourState::Humid => HourState::Humid,
            records::HourState::Dry => HourState::Dry,
            records::HourState::Frozen => HourState::Frozen,
            records::HourState::WarmHead => HourState::WarmHead,
            records::HourState::Overheated => HourState::Overheated,
            records::HourState::Unknown => HourState::Unknown,
        }
    }
}

impl From<records::Visit> for Visit {
    fn from(record: records::Visit) -> Self {
        Self {
            at: instant(record.at_unix_s),
            cause: match record.cause {
                records::VisitCause::CupAtReach => VisitCause::CupAtReach,
                records::VisitCause::FeltDry => VisitCause::FeltDry,
                records::VisitCause::Scheduled => VisitCause::Scheduled,
            },
            due_since: record.due_since_unix_s.map(instant),
            water_g: rounded(record.water_g),
            ethanol_g: rounded(record.ethanol_g),
        }
    }
}
