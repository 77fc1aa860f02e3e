//! Moist air.
/// Dry-bulb temperature, vapour pressure and total pressure of moist air at one instant.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Air {
    /// Dry-bulb temperature [K].
    pub temp_k: f64,
    /// Partial pressure of water vapour [Pa].
    pub vapour_pressure_pa: f64,
    /// Total (station) pressure [Pa].
    pub pressure_pa: f64,
}
