//! A device definition, checked as a whole, and what follows from it.

mod assumptions;
mod balance;
mod bands;
mod bounds;
mod cautions;
mod check;
mod curve;
mod definition;
mod derived;
mod examples;
mod faults;
mod filled;
mod heat;
mod hydrostatics;
mod shape;
mod sizes;
mod sphere;
mod substances;
mod vessel;

pub use bounds::*;
pub use check::{Checked, check};
pub use definition::*;
pub use derived::Derived;
pub use examples::{Example, examples};
pub use filled::{
    DEFAULT_ABSORPTANCE, DEFAULT_CONDUCTION_W_K, DEFAULT_CRITICAL_SHARE, DEFAULT_DIP_ANGLE_DEG, DEFAULT_DIP_SECONDS,
    DEFAULT_DRAIN_FRACTION, DEFAULT_END_GAP_MM, DEFAULT_EXCHANGE_SHARE, DEFAULT_FREEBOARD_MM, DEFAULT_SCALE_EFFECT_PCT,
    DEFAULT_UPTAKE_SHARE, DEFAULT_VAPOUR_RESET,
};
pub use hydrostatics::Hydrostatics;
pub use shape::{TUBE_WALL_MIN_MM, TUBE_WIDEST_SHARE};
pub use substances::CUSTOM_FLUID;
pub use vessel::HEAD_FULL_SHARE;

use crate::model::fluids::WorkingFluid;

/// A checked device in SI units: what the cycle room runs.
#[derive(Debug, Clone)]
pub struct Device {
    /// Working fluid.
    pub fluid: WorkingFluid,
    /// Inner geometry and the liquid in it.
    pub hydrostatics: Hydrostatics,
    /// Lifted volume at which it tips [m³].
    pub tip_volume_m3: f64,
    /// Head surface, felt and heat store.
    pub head: Head,
    /// Body and tube surface and heat store.
    pub body: Body,
    /// Conduction from body to head by glass and liquid [W/K].
    pub conduction_w_k: f64,
    /// What happens in a dip.
    pub dip: Dip,
    /// Strength of the evaporant filled in [% by volume]; 0 is water.
    pub evaporant_abv_pct: f64,
    /// Hardness of the water filled in [mg/L as CaCO3]; 0 where it was not given.
    pub hardness_mg_l: f64,
    /// Share of evaporation lost for each kilogram of scale on a square metre of felt [m²/kg].
    pub scale_effect_m2_kg: f64,
    /// Lamp, if any.
    pub lamp: Option<LampDefinition>,
    /// Cup, if any.
    pub cup: Option<Cup>,
    /// Highest allowed temperature of the body [K].
    pub max_temp_k: f64,
    /// Volumetric heat of the working liquid, density times specific heat at 20 °C [J/(m³ K)].
    pub liquid_heat_j_m3k: f64,
}

/// Head surface, felt and heat store.
#[derive(Debug, Clone)]
pub struct Head {
    /// Diameter of the wet surface, felt included [m].
    pub wet_diameter_m: f64,
    /// Evaporating area, beak included [m²].
    pub wet_area_m2: f64,
    /// Heat resistance of wall and wet felt in series [K/W].
    pub felt_resistance_k_w: f64,
    /// Heat capacity of glass and dry felt [J/K].
    pub dry_capacity_j_k: f64,
    /// Liquid the felt holds when full [kg].
    pub felt_capacity_kg: f64,
    /// Most liquid taken up in one dip [kg].
    pub uptake_kg: f64,
    /// Share of the capacity below which the surface starts to dry.
    pub critical_share: f64,
    /// Share of the felt's liquid exchanged with the cup in each dip.
    pub exchange_share: f64,
    /// Long-wave emissivity of the felt.
    pub emissivity: f64,
    /// Share of short-wave radiation absorbed.
    pub absorptance: f64,
}

/// Body and tube: surface and heat store.
#[derive(Debug, Clone)]
pub struct Body {
    /// Outer diameter [m].
    pub diameter_m: f64,
    /// Outer area of the bulb [m²].
    pub area_m2: f64,
    /// Outer diameter of the tube [m].
    pub tube_diameter_m: f64,
    /// Tube length between the bulbs [m].
    pub tube_length_m: f64,
    /// Outer area of the tube between the bulbs [m²].
    pub tube_area_m2: f64,
    /// Heat capacity of glass, tube and all the working liquid [J/K].
    pub full_capacity_j_k: f64,
    /// Long-wave emissivity of the glass.
    pub emissivity: f64,
    /// Share of short-wave radiation absorbed.
    pub absorptance: f64,
}

/// What happens in a dip.
#[derive(Debug, Clone, Copy)]
pub struct Dip {
    /// Duration [s].
    pub duration_s: f64,
    /// Share of the head's liquid that drains.
    pub drain_fraction: f64,
    /// Share of the temperature difference closed by vapour.
    pub vapour_reset: f64,
}

/// The cup.
#[derive(Debug, Clone)]
pub struct Cup {
    /// Diameter of the opening [m].
    pub diameter_m: f64,
    /// Area of the opening [m²].
    pub area_m2: f64,
    /// Depth of liquid when filled to the brim mark [m].
    pub fill_depth_m: f64,
    /// What it holds when filled to the brim mark at 20 °C.
    pub full: crate::model::fluids::Liquid,
    /// Brim mark below the rim [m].
    pub freeboard_m: f64,
    /// Fall of the level at which the beak misses it [m].
    pub reach_m: f64,
    /// Share of the opening that is covered.
    pub covered_fraction: f64,
    /// Devices of this kind drinking from it.
    pub shared_by: f64,
}
