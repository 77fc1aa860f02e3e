//! Working fluids and evaporants.
/// Constants of a user's own fluid.
#[derive(Debug, Clone, PartialEq)]
pub struct CustomFluid {}
/// A working fluid.
#[derive(Debug, Clone)]
pub struct WorkingFluid {}
/// Evaporant liquid: two masses.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct Liquid {
    /// Water [kg].
    pub water_kg: f64,
    /// Ethanol [kg].
    pub ethanol_kg: f64,
}
