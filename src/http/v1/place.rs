//! Where a device stands.

use serde::{Deserialize, Serialize};
use utoipa::ToSchema;

use super::moisture::Moisture;
use crate::service::NamedPlace;
use crate::service::records;

/// Where a device stands: in air that was read there, outdoors, in a room, or in a glass case in one of these.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(untagged)]
#[schema(discriminator(property_name = "kind", mapping(
    ("at_device" = "#/components/schemas/PlaceAtDevice"),
    ("outdoors" = "#/components/schemas/PlaceOutdoors"),
    ("room" = "#/components/schemas/PlaceRoom"),
    ("case" = "#/components/schemas/PlaceCase"),
)))]
pub enum Place {
    /// The readings are the air at the device.
    AtDevice(PlaceAtDevice),
    /// In the open.
    Outdoors(PlaceOutdoors),
    /// In a room.
    Room(Box<PlaceRoom>),
    /// In a glass case.
    Case(Box<PlaceCase>),
}

/// What a case stands in.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(untagged)]
#[schema(discriminator(property_name = "kind", mapping(
    ("at_device" = "#/components/schemas/PlaceAtDevice"),
    ("outdoors" = "#/components/schemas/PlaceOutdoors"),
    ("room" = "#/components/schemas/PlaceRoom"),
)))]
pub enum CaseSurroundings {
    /// The readings are the air around the case.
    AtDevice(PlaceAtDevice),
    /// In the open.
    Outdoors(PlaceOutdoors),
    /// In a room.
    Room(Box<PlaceRoom>),
}

tag!(AtDeviceKind, AtDevice, "at_device");
tag!(OutdoorsKind, Outdoors, "outdoors");
tag!(RoomKind, Room, "room");
tag!(CaseKind, Case, "case");

/// The readings are the air at the device.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct PlaceAtDevice {
    /// `at_device`
    pub kind: AtDeviceKind,
    /// A name for the answer.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(max_length = 80)]
    pub name: Option<String>,
    /// Air speed at the device [m/s]: case 0.05, room 0.1, shop floor 0.2, doorway 0.4. Default 0.1.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(minimum = 0, maximum = 20)]
    pub air_speed_m_s: Option<f64>,
    /// Share of the irradiance in the readings that reaches the device. Default 0.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(minimum = 0, maximum = 1)]
    pub shortwave_exposure: Option<f64>,
    /// Elevation above mean sea level [m], for the pressure where none was read. Default 0.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(minimum = -430, maximum = 9000)]
    pub elevation_m: Option<f64>,
}

/// In the open: the air as it was read, wind and sun as far as they reach the device.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct PlaceOutdoors {
    /// `outdoors`
    pub kind: OutdoorsKind,
    /// A name for the answer.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(max_length = 80)]
    pub name: Option<String>,
    /// Air speed at the device over the wind speed in the readings. Default 0.35.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(minimum = 0, maximum = 1)]
    pub shelter_factor: Option<f64>,
    /// Air speed at the device [m/s], in place of wind and shelter. Default 0.4 where no wind was read.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(minimum = 0, maximum = 20)]
    pub air_speed_m_s: Option<f64>,
    /// Share of the irradiance in the readings that reaches the device. Default 1.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(minimum = 0, maximum = 1)]
    pub shortwave_exposure: Option<f64>,
    /// Elevation above mean sea level [m], for the pressure where none was read. Default 0.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(minimum = -430, maximum = 9000)]
    pub elevation_m: Option<f64>,
}

/// A room whose air follows from the weather outside: temperature held in a band, vapour by a named rule.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct PlaceRoom {
    /// `room`
    pub kind: RoomKind,
    /// A name for the answer.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(max_length = 80)]
    pub name: Option<String>,
    /// What kind of spot, for the air speed. Default `quiet`.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub spot: Option<Spot>,
    /// Heated to at least this [°C]. Default 20.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(minimum = -10, maximum = 40)]
    pub heated_to_c: Option<f64>,
    /// Cooled to at most this [°C]. Default: never cooled.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(minimum = 5, maximum = 45)]
    pub cooled_to_c: Option<f64>,
    /// How long the building remembers the temperature outside [h], a first-order lag. Default 24.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(minimum = 0, maximum = 720)]
    pub memory_hours: Option<f64>,
    /// Where the room's own vapour comes from. Default `iso_13788`, class 2.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub moisture: Option<Moisture>,
    /// Walls and furniture take up and give back vapour with this time constant [h]. Default 0: none.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(minimum = 0, maximum = 720)]
    pub buffering_hours: Option<f64>,
    /// Humidified to at least this [% relative humidity].
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(minimum = 0, maximum = 100)]
    pub humidified_to_pct: Option<f64>,
    /// Dried to at most this [% relative humidity].
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(minimum = 0, maximum = 100)]
    pub dehumidified_to_pct: Option<f64>,
    /// Air speed at the device [m/s], in place of the spot's.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(minimum = 0, maximum = 20)]
    pub air_speed_m_s: Option<f64>,
    /// Share of the irradiance in the readings that reaches the device through windows. Default 0.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(minimum = 0, maximum = 1)]
    pub shortwave_exposure: Option<f64>,
    /// Elevation above mean sea level [m], for the pressure where none was read. Default 0.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(minimum = -430, maximum = 9000)]
    pub elevation_m: Option<f64>,
}

/// What kind of spot in a room.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum Spot {
    /// A quiet room: 0.1 m/s.
    Quiet,
    /// A shop floor people walk about on: 0.2 m/s.
    ShopFloor,
    /// Near a door that is often open: 0.4 m/s.
    Doorway,
}

/// A glass case: the device's own vapour moistens its air, and both are solved together.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct PlaceCase {
    /// `case`
    pub kind: CaseKind,
    /// A name for the answer.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(max_length = 80)]
    pub name: Option<String>,
    /// What it stands in.
    pub inside: CaseSurroundings,
    /// Volume of air in it [L].
    #[schema(minimum = 0.5, maximum = 100_000)]
    pub volume_l: f64,
    /// How often an hour its air is exchanged with that around it [1/h].
    #[schema(minimum = 0, maximum = 1000)]
    pub air_changes_per_hour: f64,
    /// Devices of this kind in it; with a shared cup a multiple of those that drink from it. Default 1.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(minimum = 1, maximum = 100)]
    pub devices: Option<u32>,
    /// Vapour from anything else in it [g/h]. Default 0.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(minimum = 0, maximum = 10_000)]
    pub other_vapour_g_per_h: Option<f64>,
    /// Its air is warmer than that around it by this [K], all the time. Default 0.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(minimum = -5, maximum = 30)]
    pub warmer_by_k: Option<f64>,
    /// Air speed at the device [m/s]. Default 0.05.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(minimum = 0, maximum = 20)]
    pub air_speed_m_s: Option<f64>,
    /// Elevation above mean sea level [m], for the pressure where none was read. Default 0.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(minimum = -430, maximum = 9000)]
    pub elevation_m: Option<f64>,
}

impl Place {
    /// The elevations given with it, the outer one first.
    pub fn elevations_m(&self) -> Vec<f64> {
        let given = match self {
            Place::AtDevice(at) => vec![at.elevation_m],
            Place::Outdoors(outdoors) => vec![outdoors.elevation_m],
            Place::Room(room) => vec![room.elevation_m],
            Place::Case(case) => vec![case.elevation_m, case.inside.elevation_m()],
        };
        given.into_iter().flatten().collect()
    }

    fn name(&self) -> Option<String> {
        match self {
            Place::AtDevice(at) => at.name.clone(),
            Place::Outdoors(outdoors) => outdoors.name.clone(),
            Place::Room(room) => room.name.clone(),
            Place::Case(case) => case.name.clone(),
        }
    }
}

impl CaseSurroundings {
    fn elevation_m(&self) -> Option<f64> {
        match self {
            CaseSurroundings::AtDevice(at) => at.elevation_m,
            CaseSurroundings::Outdoors(outdoors) => outdoors.elevation_m,
            CaseSurroundings::Room(room) => room.elevation_m,
        }
    }
}

impl From<Place> for NamedPlace {
    fn from(wire: Place) -> Self {
        Self {
            name: wire.name(),
            place: wire.into(),
        }
    }
}

impl From<Place> for records::Place {
    fn from(wire: Place) -> Self {
        match wire {
            Place::AtDevice(at) => records::Place::AtDevice(at.into()),
            Place::Outdoors(outdoors) => records::Place::Outdoors(outdoors.into()),
            Place::Room(room) => records::Place::Room((*room).into()),
            Place::Case(case) => records::Place::Case((*case).into()),
        }
    }
}

impl From<CaseSurroundings> for records::Place {
    fn from(wire: CaseSurroundings) -> Self {
        match wire {
            CaseSurroundings::AtDevice(at) => records::Place::AtDevice(at.into()),
            CaseSurroundings::Outdoors(outdoors) => records::Place::Outdoors(outdoors.into()),
            CaseSurroundings::Room(room) => records::Place::Room((*room).into()),
        }
    }
}

impl From<PlaceAtDevice> for records::AtDevice {
    fn from(wire: PlaceAtDevice) -> Self {
        Self {
            air_speed_m_s: wire.air_speed_m_s,
            shortwave_exposure: wire.shortwave_exposure,
        }
    }
}

impl From<PlaceOutdoors> for records::Outdoors {
    fn from(wire: PlaceOutdoors) -> Self {
        Self {
            shelter_factor: wire.shelter_factor,
            air_speed_m_s: wire.air_speed_m_s,
            shortwave_exposure: wire.shortwave_exposure,
        }
    }
}

impl From<PlaceRoom> for records::Room {
    fn from(wire: PlaceRoom) -> Self {
        Self {
            spot: wire.spot.map(Into::into).unwrap_or_default(),
            heated_to_c: wire.heated_to_c,
            cooled_to_c: wire.cooled_to_c,
            memory_hours: wire.memory_hours,
            moisture: wire.moisture.map(Into::into),
            buffering_hours: wire.buffering_hours,
            humidified_to_pct: wire.humidified_to_pct,
            dehumidified_to_pct: wire.dehumidified_to_pct,
            air_speed_m_s: wire.air_speed_m_s,
            shortwave_exposure: wire.shortwave_exposure,
        }
    }
}

impl From<Spot> for records::Spot {
    fn from(wire: Spot) -> Self {
        match wire {
            Spot::Quiet => records::Spot::Quiet,
            Spot::ShopFloor => records::Spot::ShopFloor,
            Spot::Doorway => records::Spot::Doorway,
        }
    }
}

impl From<PlaceCase> for records::CaseDefinition {
    fn from(wire: PlaceCase) -> Self {
        Self {
            inside: Box::new(wire.inside.into()),
            volume_l: wire.volume_l,
            air_changes_per_hour: wire.air_changes_per_hour,
            devices: wire.devices,
            other_vapour_g_per_h: wire.other_vapour_g_per_h,
            warmer_by_k: wire.warmer_by_k,
            air_speed_m_s: wire.air_speed_m_s,
        }
    }
}
