//! The tables behind the model.

use super::records::{EvaporantRow, Example, WorkingFluid};
use crate::model::{device, fluids as table};

/// All working fluids.
pub fn fluids() -> &'static [WorkingFluid] {
    table::working_fluids()
}

/// All evaporants.
pub fn evaporants() -> &'static [EvaporantRow] {
    table::evaporants()
}

/// All example devices.
pub fn examples() -> Vec<Example> {
    device::examples()
}

/// One example device by its name.
pub fn example(name: &str) -> Option<Example> {
    examples().into_iter().find(|example| example.name == name)
}
