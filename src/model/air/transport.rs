//! Transport properties of air near room temperature, and the heats of phase change of water.

/// Dynamic viscosity of air [Pa s] at a temperature [K, 100 to 1900]: Sutherland's law as in [USSA1976], eq. 51,
/// within 0.7 % of [LemmonJacobsen2004] from -40 to 80 °C.
#[inline]
pub fn dynamic_viscosity_pa_s(temp_k: f64) -> f64 {
    1.458e-6 * temp_k * temp_k.sqrt() / (temp_k + 110.4)
}

/// Thermal conductivity of air [W/(m K)] at a temperature [K, 233 to 353].
///
/// Quadratic fitted to [LemmonJacobsen2004] as [Bell2014] prints it, within 2e-4.
#[inline]
pub fn thermal_conductivity_w_mk(temp_k: f64) -> f64 {
    let t = temp_k - 293.15;
    0.025_873_89 + t * (7.493_561e-5 - 4.129_247e-8 * t)
}

/// Specific heat of air at constant pressure [J/(kg K)], -40 to 60 °C within 0.3 % [ASHRAE2017].
#[inline]
pub fn specific_heat_j_kgk() -> f64 {
    1006.0
}

/// Diffusivity of water vapour in air [m2/s] at a temperature [K, 240 to 380] and pressure [Pa] [Massman1998].
#[inline]
pub fn diffusivity_water_m2_s(temp_k: f64, pressure_pa: f64) -> f64 {
    // exp and ln: the library's exact power costs twice as much.
    2.178e-5 * (1.81 * (temp_k / 273.15).ln()).exp() * (101_325.0 / pressure_pa)
}

/// Diffusivity of ethanol vapour in air [m2/s] at a temperature [K, 240 to 380] and pressure [Pa].
///
/// 1.02e-5 m2/s at 0 °C and 1 atm [Perry2008], table 2-324, with the temperature exponent that [Massman1998] found for
/// every gas he reviewed in air.
#[inline]
pub fn diffusivity_ethanol_m2_s(temp_k: f64, pressure_pa: f64) -> f64 {
    ETHANOL_OVER_WATER_DIFFUSIVITY * diffusivity_water_m2_s(temp_k, pressure_pa)
}

/// Diffusivity of ethanol vapour in air over that of water vapour, at any temperature and pressure [Perry2008]
/// [Massman1998].
pub const ETHANOL_OVER_WATER_DIFFUSIVITY: f64 = 1.02e-5 / 2.178e-5;

/// Latent heat of vaporisation of water [J/kg] at a temperature [K, 233 to 343].
///
/// Cubic fitted to [WagnerPruss2002] from 0 to 70 °C (within 0.05 %) and to [MurphyKoop2005], eq. 9, for supercooled
/// water down to
/// -40 °C (within 0.14 %).
#[inline]
pub fn latent_heat_vaporisation_j_kg(temp_k: f64) -> f64 {
    let t = temp_k - 273.15;
    2_500_077.0 + t * (-2401.007 + t * (3.646_37 - 0.052_460_3 * t))
}

/// Latent heat of sublimation of ice [J/kg] at a temperature [K, 30 to 273.16] [MurphyKoop2005], eq. 5.
#[inline]
pub fn latent_heat_sublimation_j_kg(temp_k: f64) -> f64 {
    let molar = 46_782.5 + 35.8925 * temp_k - 0.074_14 * temp_k * temp_k + 541.5 * (-(temp_k / 123.75).powi(2)).exp();
    molar / super::MOLAR_MASS_WATER_KG_MOL
}
