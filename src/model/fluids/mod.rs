//! Working fluids and evaporants: one table, one row a fluid, sources beside the numbers.
//!
//! Reading order: [`WorkingFluid`] (what a row can tell), [`working_fluids`] (the rows), [`CustomFluid`] (a row from
//! given constants), [`Liquid`] (water and ethanol in felt and cup), [`evaporants`]. All SI, temperatures in kelvin. A
//! row holds inside its own range ([`WorkingFluid::valid_range_k`]); outside it the formulas still return numbers, so
//! that a solver can step across, but whoever reports a result must refuse it.

mod alcohol_density;
mod custom;
mod evaporants;
mod hazards;
mod liquid;
mod strength;
mod table;
mod working_fluid;

pub use custom::{CustomFluid, CustomVapourPressure};
pub use evaporants::{EvaporantKind, EvaporantRow, evaporants};
pub use hazards::Hazard;
pub use liquid::{Liquid, latent_heats_j_kg};
pub use strength::{flash_point_c, freezing_point_of_strength_k};
pub use table::{working_fluid, working_fluids};
pub use working_fluid::WorkingFluid;
