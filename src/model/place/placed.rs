//! Weather outside in, air at the device out.

use super::case::Case;
use super::check::faults;
use super::definition::{CaseDefinition, Place};
use super::light_and_wind::{air_speed, shortwave};
use super::room::move_indoors;
use super::words;
use crate::model::notes::{Assumption, Fault};
use crate::model::weather::HourlySeries;

/// The air at a device, hour by hour.
#[derive(Debug, Clone, PartialEq)]
pub struct PlacedAir {
    /// Air at the device; with a case the air around the case, at the temperature inside it.
    pub series: HourlySeries,
    /// The weather it was made from; none where the readings are the air at the device.
    pub outdoors: Option<Box<HourlySeries>>,
    /// Air speed at the device [m/s].
    pub air_speed_m_s: Vec<f64>,
    /// Irradiance that reaches the device [W/m²], stamped as `series.shortwave_stamp` says; none where there is none.
    pub shortwave_w_m2: Option<Vec<f64>>,
    /// The case around the device.
    pub case: Option<Case>,
    /// Name of the moisture rule taken, if the air went through a room.
    pub moisture_rule: Option<String>,
    /// What had to be assumed.
    pub assumptions: Vec<Assumption>,
}

impl PlacedAir {
    /// Mean air speed over the hours [m/s].
    pub fn mean_air_speed_m_s(&self) -> f64 {
        self.air_speed_m_s.iter().sum::<f64>() / self.air_speed_m_s.len().max(1) as f64
    }
}

/// Finds the air at a device from the hourly weather and where it stands.
///
/// # Errors
/// Everything wrong with the place, with paths under `path`.
pub fn place_air(weather: &HourlySeries, place: &Place, path: &str) -> Result<PlacedAir, Vec<Fault>> {
    let faults = faults(place, path);
    if !faults.is_empty() {
        return Err(faults);
    }
    let speed = air_speed(place, weather);
    let (shortwave_w_m2, sun) = shortwave(place, weather);
    let mut assumptions: Vec<Assumption> = speed.said.into_iter().chain(sun).collect();
    let mut series = weather.clone();
    let room = match place {
        Place::Room(room) => Some(room),
        Place::Case(CaseDefinition { inside, .. }) => match inside.as_ref() {
            Place::Room(room) => Some(room),
            _ => None,
        },
        _ => None,
    };
    if let Some(room) = room {
        move_indoors(&mut series, room);
        assumptions.extend(words::of_room(room));
    }
    let case = match place {
        Place::Case(case) => Some(case),
        _ => None,
    };
    if let Some(case) = case {
        let warmer_k = case.warmer_by_k.unwrap_or(0.0);
        series.temp_k.iter_mut().for_each(|temp_k| *temp_k += warmer_k);
        assumptions.extend(words::of_case(case));
    }
    let is_moved = room.is_some() || case.is_some();
    Ok(PlacedAir {
        outdoors: (is_moved || matches!(place, Place::Outdoors(_))).then(|| Box::new(weather.clone())),
        air_speed_m_s: speed.values,
        shortwave_w_m2,
        case: case.map(in_si),
        moisture_rule: room.map(|room| words::rule_name(room.rule())),
        assumptions,
        series,
    })
}

fn in_si(case: &CaseDefinition) -> Case {
    Case {
        volume_m3: 1e-3 * case.volume_l,
        air_changes_1_s: case.air_changes_per_hour / 3600.0,
        devices: f64::from(case.devices.unwrap_or(1)),
        other_vapour_kg_s: case.other_vapour_g_per_h.unwrap_or(0.0) / 3.6e6,
    }
}
