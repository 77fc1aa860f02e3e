//! A device as sent and as shown: lengths in mm, areas in cm², masses in g, volumes in mL.
//!
//! The bounds of every number are written into the schema from the device room's own list.

mod balance;
mod convert;
mod derived;
mod fluid;
mod parts;

pub use balance::{Balance, MassesBalance, TipVolumeBalance};
pub use convert::lamp_schedule;
pub use derived::{DerivedFigures, StallHumidity};
pub use fluid::{AntoineVapourPressure, CustomFluid, Fluid, PointsVapourPressure, VapourPoint, VapourPressure};
pub use parts::{Body, Cup, Dip, Evaporant, ExtraMass, Felt, Head, Lamp, LampEnd, Tube};

use serde::{Deserialize, Serialize};
use utoipa::ToSchema;

/// A device as drawn: a head bulb with a wet felt, a tube, a body bulb with a working fluid, a cup it drinks from.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Device {
    /// Free name.
    #[schema(min_length = 1, max_length = 80, examples("Shelf 180"))]
    pub name: String,
    /// The upper bulb with the felt.
    pub head: Head,
    /// The tube between the bulbs.
    pub tube: Tube,
    /// The lower bulb.
    pub body: Body,
    /// What is sealed inside.
    pub fluid: Fluid,
    /// When it tips.
    pub balance: Balance,
    /// What happens in a dip; defaults are told in `assumptions`.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub dip: Option<Dip>,
    /// Heat conducted from body to head by glass and liquid [W/K]. Default 0.002.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub conduction_w_k: Option<f64>,
    /// What the felt is wetted with.
    pub evaporant: Evaporant,
    /// A lamp that shines on one end. Default none.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub lamp: Option<Lamp>,
    /// The cup it drinks from; none for a device wetted by hand.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub cup: Option<Cup>,
    /// Highest temperature the maker allows [°C]. Default: the fluid's own limit.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub max_temperature_c: Option<f64>,
}
