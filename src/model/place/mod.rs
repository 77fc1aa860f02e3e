//! From the weather outside to the air at the device.
//!
//! [`Place`] says where the device stands; [`place_air`] turns hourly weather into [`PlacedAir`]: temperature, vapour, air
//! speed and sunlight at the device, hour by hour. A display case adds a small volume of air that the device itself
//! moistens: [`Case`] keeps its books, and the prediction carries it along with the device.
//!
//! Ventilation carries the mixing ratio: at one total pressure that is the vapour pressure, not the grams in a cubic metre,
//! which fall when the air is warmed.
//!
//! ```
//! use dipcast::model::place::{MoistureRule, Room, room_vapour_pa};
//! // Outdoors 0 °C and 80 %, indoors 21 °C: 20 % without a gain, 42 % with 4 g/m3.
//! let outdoors_pa = 0.8 * dipcast::model::air::saturation_pressure_pa(273.15);
//! let indoors = |rule| {
//!     let room = Room { moisture: Some(rule), ..Room::default() };
//!     100.0 * room_vapour_pa(&room, 273.15, outdoors_pa, 294.15) / dipcast::model::air::saturation_pressure_pa(294.15)
//! };
//! assert!((indoors(MoistureRule::None) - 19.7).abs() < 0.3);
//! assert!((indoors(MoistureRule::GivenExcess { excess_g_m3: 4.0 }) - 41.5).abs() < 0.3);
//! ```

mod case;
mod check;
mod definition;
mod light_and_wind;
mod moisture;
mod placed;
mod room;
mod words;

pub use case::{Case, CaseAir};
pub use check::{PLACE_BOUNDS, PlaceBound, faults};
pub use definition::{AtDevice, CaseDefinition, Outdoors, Place, Room, Spot};
pub use moisture::{MoistureRule, excess_kg_m3, vapour_pressure_excess_pa};
pub use placed::{PlacedAir, place_air};
pub use room::{DEFAULT_HEATED_TO_C, DEFAULT_MEMORY_H, room_vapour_pa};
