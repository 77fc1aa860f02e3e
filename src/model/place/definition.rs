//! Where a device stands, in practical units; what is left out has a stated default.

use super::moisture::MoistureRule;

/// Where a device stands.
#[derive(Debug, Clone, PartialEq)]
pub enum Place {
    /// The readings were taken at the device: they are its air.
    AtDevice(AtDevice),
    /// In the open.
    Outdoors(Outdoors),
    /// In a room, whose air follows from the weather outside.
    Room(Room),
    /// In a glass case that stands in one of the others.
    Case(CaseDefinition),
}

impl Default for Place {
    fn default() -> Self {
        Place::AtDevice(AtDevice::default())
    }
}

/// The readings are the air at the device.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct AtDevice {
    /// Air speed at the device [m/s].
    pub air_speed_m_s: Option<f64>,
    /// Share of the read irradiance that reaches the device [0-1]; none is 0.
    pub shortwave_exposure: Option<f64>,
}

/// In the open: air as it is, wind and sunlight as far as they reach the device.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct Outdoors {
    /// Air speed at the device over wind speed at the station [0-1].
    pub shelter_factor: Option<f64>,
    /// Air speed at the device [m/s], in place of wind and shelter.
    pub air_speed_m_s: Option<f64>,
    /// Share of the read irradiance that reaches the device [0-1]; none is 1.
    pub shortwave_exposure: Option<f64>,
}

/// A room: temperature held in a band, vapour from outdoors and from within.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct Room {
    /// What kind of spot in it, for the air speed.
    pub spot: Spot,
    /// Heated to at least this [°C].
    pub heated_to_c: Option<f64>,
    /// Cooled to at most this [°C]; none is never cooled.
    pub cooled_to_c: Option<f64>,
    /// How long the building remembers the temperature outside [h]: the time constant of a first-order lag.
    pub memory_hours: Option<f64>,
    /// Where the room's own vapour comes from.
    pub moisture: Option<MoistureRule>,
    /// Walls and furniture take up and give back vapour with this time constant [h]; none or 0 is no buffering.
    pub buffering_hours: Option<f64>,
    /// Humidified to at least this [% relative humidity].
    pub humidified_to_pct: Option<f64>,
    /// Dried to at most this [% relative humidity].
    pub dehumidified_to_pct: Option<f64>,
    /// Air speed at the device [m/s], in place of the spot's.
    pub air_speed_m_s: Option<f64>,
    /// Share of the read irradiance that reaches the device through windows [0-1]; none is 0.
    pub shortwave_exposure: Option<f64>,
}

/// What kind of spot in a room.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum Spot {
    /// A quiet room.
    #[default]
    Quiet,
    /// A shop floor people walk about on.
    ShopFloor,
    /// Near a door that is often open.
    Doorway,
}

impl Spot {
    /// Air speed taken there [m/s]: ours, nothing measured.
    pub fn air_speed_m_s(self) -> f64 {
        match self {
            Spot::Quiet => 0.1,
            Spot::ShopFloor => 0.2,
            Spot::Doorway => 0.4,
        }
    }
}

/// A glass case: a small volume of air that the devices in it moisten.
#[derive(Debug, Clone, PartialEq)]
pub struct CaseDefinition {
    /// What it stands in; not another case.
    pub inside: Box<Place>,
    /// Volume of air in it [L].
    pub volume_l: f64,
    /// How often an hour its air is exchanged with that around it [1/h].
    pub air_changes_per_hour: f64,
    /// Devices of this kind in it, each drinking from its cup; one or more.
    pub devices: Option<u32>,
    /// Vapour from anything else in it [g/h].
    pub other_vapour_g_per_h: Option<f64>,
    /// Air in it is warmer than that around it by this [K], all the time.
    pub warmer_by_k: Option<f64>,
    /// Air speed at the device [m/s].
    pub air_speed_m_s: Option<f64>,
}
