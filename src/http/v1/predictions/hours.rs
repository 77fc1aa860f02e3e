//! Hour by hour: as columns, and as rows.

use serde::Serialize;
use utoipa::ToSchema;

use super::{instant, rounded};
use crate::service::records;
use crate::service::records::HourState;

/// Hour by hour; all columns have the same length.
#[derive(Debug, Serialize, ToSchema)]
pub struct HourColumns {
    /// Start of the hour.
    #[schema(value_type = Vec<chrono::DateTime<chrono::Utc>>)]
    pub time: Vec<String>,
    /// Cycles, fractional.
    pub cycles: Vec<f64>,
    /// Share of the hour not running; 0 in an unknown hour.
    pub stall_fraction: Vec<f64>,
    /// Share of the hour in each state.
    pub state_fractions: StateFractions,
    /// Share of the hour in which a person is waited for.
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
    /// Fall of the cup's level since the last fill, at the end of the hour [mm].
    pub cup_drop_mm: Vec<f64>,
    /// Mean body temperature [°C]; null in an unknown hour.
    pub body_temp_c: Vec<Option<f64>>,
    /// Mean head temperature, vapour side [°C]; null in an unknown hour.
    pub head_temp_c: Vec<Option<f64>>,
    /// Mean air temperature at the device [°C]; null in an unknown hour.
    pub air_temp_c: Vec<Option<f64>>,
    /// Relative humidity at the device [%], of the mean vapour at the mean temperature; null in an unknown hour.
    pub air_relative_humidity_pct: Vec<Option<f64>>,
    /// Mean air speed at the device [m/s]; null in an unknown hour.
    pub air_speed_m_s: Vec<Option<f64>>,
    /// Temperature outdoors at the time of the reading [°C]; absent where the readings are the air at the device.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub outdoor_temp_c: Option<Vec<Option<f64>>>,
    /// Relative humidity outdoors at the time of the reading [%]; absent where the readings are the air at the device.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub outdoor_relative_humidity_pct: Option<Vec<Option<f64>>>,
}

/// Share of the hour in each state; they add up to 1.
#[derive(Debug, Serialize, ToSchema)]
pub struct StateFractions {
    /// Dipping.
    pub running: Vec<f64>,
    /// The air cannot hold the temperature difference.
    pub humid: Vec<f64>,
    /// The felt is dry and the cup out of reach.
    pub dry: Vec<f64>,
    /// Felt or cup frozen.
    pub frozen: Vec<f64>,
    /// The head gains more heat than the body.
    pub warm_head: Vec<f64>,
    /// The body is above the limit of fluid or device.
    pub overheated: Vec<f64>,
    /// The weather is missing.
    pub unknown: Vec<f64>,
}

/// One hour: a row of the CSV, a line of the NDJSON.
#[derive(Debug, Serialize, ToSchema)]
pub struct HourRow {
    /// Name of the place, or `places/1` for the second without a name; only where places are compared.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub place: Option<String>,
    /// Start of the hour.
    #[schema(format = DateTime)]
    pub time: String,
    /// Cycles, fractional.
    pub cycles: f64,
    /// Share of the hour not running; 0 in an unknown hour.
    pub stall_fraction: f64,
    /// Share dipping.
    pub running_fraction: f64,
    /// Share too humid.
    pub humid_fraction: f64,
    /// Share dry.
    pub dry_fraction: f64,
    /// Share frozen.
    pub frozen_fraction: f64,
    /// Share with the head heated more than the body.
    pub warm_head_fraction: f64,
    /// Share overheated.
    pub overheated_fraction: f64,
    /// Share unknown.
    pub unknown_fraction: f64,
    /// Share in which a person is waited for.
    pub needs_person_fraction: f64,
    /// Share that is open.
    pub open_fraction: f64,
    /// Water lost by the felt [g].
    pub water_head_g: f64,
    /// Water lost by the cup [g].
    pub water_cup_g: f64,
    /// Ethanol lost by the felt [g].
    pub ethanol_head_g: f64,
    /// Ethanol lost by the cup [g].
    pub ethanol_cup_g: f64,
    /// Fall of the cup's level since the last fill, at the end of the hour [mm].
    pub cup_drop_mm: f64,
    /// Mean body temperature [°C]; empty in an unknown hour.
    pub body_temp_c: Option<f64>,
    /// Mean head temperature, vapour side [°C]; empty in an unknown hour.
    pub head_temp_c: Option<f64>,
    /// Mean air temperature at the device [°C]; empty in an unknown hour.
    pub air_temp_c: Option<f64>,
    /// Relative humidity at the device [%]; empty in an unknown hour.
    pub air_relative_humidity_pct: Option<f64>,
    /// Mean air speed at the device [m/s]; empty in an unknown hour.
    pub air_speed_m_s: Option<f64>,
    /// Temperature outdoors [°C]; empty where the readings are the air at the device.
    pub outdoor_temp_c: Option<f64>,
    /// Relative humidity outdoors [%]; empty where the readings are the air at the device.
    pub outdoor_relative_humidity_pct: Option<f64>,
}

/// One cycle close up, in the air of one hour held steady.
#[derive(Debug, Serialize, ToSchema)]
pub struct CycleTrace {
    /// The middle of the hour whose air was taken: the running hour with the median count.
    #[schema(format = DateTime)]
    pub at: String,
    /// From the end of one dip to the start of the next.
    pub points: Vec<TracePoint>,
}

/// One moment of a cycle.
#[derive(Debug, Serialize, ToSchema)]
pub struct TracePoint {
    /// Time since the end of the last dip [s].
    pub time_s: f64,
    /// Lifted volume [mL].
    pub lifted_ml: f64,
    /// Head temperature, vapour side [°C].
    pub head_temp_c: f64,
    /// Body temperature [°C].
    pub body_temp_c: f64,
}

fn all_rounded(mut values: Vec<f64>) -> Vec<f64> {
    values.iter_mut().for_each(|value| *value = rounded(*value));
    values
}

fn known_rounded(values: Vec<Option<f64>>) -> Vec<Option<f64>> {
    values.into_iter().map(|value| value.map(rounded)).collect()
}

impl From<records::HourColumns> for HourColumns {
    fn from(record: records::HourColumns) -> Self {
        let [running, humid, dry, frozen, warm_head, overheated, unknown] = record.state_fractions.map(all_rounded);
        Self {
            time: record.time_unix_s.into_iter().map(instant).collect(),
            cycles: all_rounded(record.cycles),
            stall_fraction: all_rounded(record.stall_fraction),
            state_fractions: StateFractions {
                running,
                humid,
                dry,
                frozen,
                warm_head,
                overheated,
                unknown,
            },
            needs_person_fraction: all_rounded(record.needs_person_fraction),
            open_fraction: all_rounded(record.open_fraction),
            water_head_g: all_rounded(record.water_head_g),
            water_cup_g: all_rounded(record.water_cup_g),
            ethanol_head_g: all_rounded(record.ethanol_head_g),
            ethanol_cup_g: all_rounded(record.ethanol_cup_g),
            cup_drop_mm: all_rounded(record.cup_drop_mm),
            body_temp_c: known_rounded(record.body_temp_c),
            head_temp_c: known_rounded(record.head_temp_c),
            air_temp_c: known_rounded(record.air_temp_c),
            air_relative_humidity_pct: known_rounded(record.air_relative_humidity_pct),
            air_speed_m_s: known_rounded(record.air_speed_m_s),
            outdoor_temp_c: record.outdoor_temp_c.map(known_rounded),
            outdoor_relative_humidity_pct: record.outdoor_relative_humidity_pct.map(known_rounded),
        }
    }
}

impl HourRow {
    /// Hour `at` of the columns.
    pub fn of(columns: &records::HourColumns, at: usize) -> Self {
        let state = |state: HourState| rounded(columns.state_fractions[state as usize][at]);
        let outdoors = |column: &Option<Vec<Option<f64>>>| column.as_ref().and_then(|column| column[at]).map(rounded);
        Self {
            place: None,
            time: instant(columns.time_unix_s[at]),
            cycles: rounded(columns.cycles[at]),
            stall_fraction: rounded(columns.stall_fraction[at]),
            running_fraction: state(HourState::Running),
            humid_fraction: state(HourState::Humid),
            dry_fraction: state(HourState::Dry),
            frozen_fraction: state(HourState::Frozen),
            warm_head_fraction: state(HourState::WarmHead),
            overheated_fraction: state(HourState::Overheated),
            unknown_fraction: state(HourState::Unknown),
            needs_person_fraction: rounded(columns.needs_person_fraction[at]),
            open_fraction: rounded(columns.open_fraction[at]),
            water_head_g: rounded(columns.water_head_g[at]),
            water_cup_g: rounded(columns.water_cup_g[at]),
            ethanol_head_g: rounded(columns.ethanol_head_g[at]),
            ethanol_cup_g: rounded(columns.ethanol_cup_g[at]),
            cup_drop_mm: rounded(columns.cup_drop_mm[at]),
            body_temp_c: columns.body_temp_c[at].map(rounded),
            head_temp_c: columns.head_temp_c[at].map(rounded),
            air_temp_c: columns.air_temp_c[at].map(rounded),
            air_relative_humidity_pct: columns.air_relative_humidity_pct[at].map(rounded),
            air_speed_m_s: columns.air_speed_m_s[at].map(rounded),
            outdoor_temp_c: outdoors(&columns.outdoor_temp_c),
            outdoor_relative_humidity_pct: outdoors(&columns.outdoor_relative_humidity_pct),
        }
    }
}

impl From<records::CycleTrace> for CycleTrace {
    fn from(record: records::CycleTrace) -> Self {
        let point = |point: &records::TracePoint| TracePoint {
            time_s: rounded(point.time_s),
            lifted_ml: rounded(point.lifted_m3 * 1e6),
            head_temp_c: rounded(point.head_temp_k - 273.15),
            body_temp_c: rounded(point.body_temp_k - 273.15),
        };
        Self {
            at: instant(record.at_unix_s),
            points: record.points.iter().map(point).collect(),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn states_are_numbered_in_the_order_of_their_arrays() {
        for (place, state) in HourState::ALL.into_iter().enumerate() {
            assert_eq!(state as usize, place);
        }
    }
}
