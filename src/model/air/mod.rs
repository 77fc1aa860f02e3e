//! Moist air: saturation, humidity measures, wet bulb, density, transport properties.
//!
//! Moist air is an ideal mixture of dry air and water vapour. The few tenths of a percent by which real moist air
//! exceeds ideal saturation (the enhancement factor) are left out, as in psychrometric practice at room pressure.
//! Relative humidity is over *liquid* water at every temperature, as meteorological instruments report it [WMO2018].
//! Every function takes any finite number; a NaN goes through as NaN, nothing panics.

mod saturation;
mod transport;
mod wet_bulb;

pub use saturation::{
    dew_point_k, saturation_pressure_ice_pa, saturation_pressure_pa, saturation_slope_ice_pa_k, saturation_slope_pa_k,
};
pub use transport::{
    ETHANOL_OVER_WATER_DIFFUSIVITY, diffusivity_ethanol_m2_s, diffusivity_water_m2_s, dynamic_viscosity_pa_s,
    latent_heat_sublimation_j_kg, latent_heat_vaporisation_j_kg, specific_heat_j_kgk, thermal_conductivity_w_mk,
};
pub use wet_bulb::{vapour_pressure_from_wet_bulb_pa, wet_bulb_ice_k, wet_bulb_k};

/// Molar gas constant [J/(mol K)], exact in the SI of 2019 [CODATA2018].
pub const GAS_CONSTANT_J_MOLK: f64 = 8.314_462_618;
/// Molar mass of dry air [kg/mol] [ASHRAE2017].
pub const MOLAR_MASS_DRY_AIR_KG_MOL: f64 = 0.028_966;
/// Molar mass of water [kg/mol] [ASHRAE2017].
pub const MOLAR_MASS_WATER_KG_MOL: f64 = 0.018_015_268;
/// Molar mass of ethanol [kg/mol] [Schroeder2014].
pub const MOLAR_MASS_ETHANOL_KG_MOL: f64 = 0.046_068_44;
/// 0 °C [K].
pub const ZERO_CELSIUS_K: f64 = 273.15;

/// Molar mass of water over that of dry air.
const MASS_RATIO: f64 = MOLAR_MASS_WATER_KG_MOL / MOLAR_MASS_DRY_AIR_KG_MOL;

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

impl Air {
    /// Moist air from its temperature [K], relative humidity over liquid [0-1] and total pressure [Pa].
    ///
    /// ```
    /// let air = dipcast::model::air::Air::from_relative_humidity(295.15, 0.5, 101_325.0);
    /// assert!((air.relative_humidity() - 0.5).abs() < 1e-12);
    /// ```
    #[inline]
    pub fn from_relative_humidity(temp_k: f64, rh_fraction: f64, pressure_pa: f64) -> Self {
        Self {
            temp_k,
            vapour_pressure_pa: rh_fraction * saturation_pressure_pa(temp_k),
            pressure_pa,
        }
    }

    /// Relative humidity over liquid water [0-1, above 1 when supersaturated] [WMO2018].
    #[inline]
    pub fn relative_humidity(&self) -> f64 {
        self.vapour_pressure_pa / saturation_pressure_pa(self.temp_k)
    }

    /// Density of the moist air [kg/m3], ideal mixture.
    #[inline]
    pub fn density_kg_m3(&self) -> f64 {
        mixture_density_kg_m3(self.temp_k, [self.vapour_pressure_pa, 0.0], self.pressure_pa)
    }
}

/// Density [kg/m3] of air that holds water and ethanol vapour at the given partial pressures [Pa], ideal mixture.
///
/// `temp_k` [K], `vapours_pa` water then ethanol [Pa], `pressure_pa` total [Pa].
#[inline]
pub fn mixture_density_kg_m3(temp_k: f64, vapours_pa: [f64; 2], pressure_pa: f64) -> f64 {
    let mass_pressure = pressure_pa * MOLAR_MASS_DRY_AIR_KG_MOL
        + vapours_pa[0] * (MOLAR_MASS_WATER_KG_MOL - MOLAR_MASS_DRY_AIR_KG_MOL)
        + vapours_pa[1] * (MOLAR_MASS_ETHANOL_KG_MOL - MOLAR_MASS_DRY_AIR_KG_MOL);
    mass_pressure / (GAS_CONSTANT_J_MOLK * temp_k)
}

/// Humidity ratio [kg water per kg dry air] from vapour pressure and total pressure [Pa] [ASHRAE2017].
///
/// Infinite or negative when the vapour pressure reaches the total pressure.
#[inline]
pub fn humidity_ratio(vapour_pressure_pa: f64, pressure_pa: f64) -> f64 {
    MASS_RATIO * vapour_pressure_pa / (pressure_pa - vapour_pressure_pa)
}

/// Vapour pressure [Pa] from humidity ratio [kg/kg] and total pressure [Pa] [ASHRAE2017].
#[inline]
pub fn vapour_pressure_from_humidity_ratio_pa(humidity_ratio: f64, pressure_pa: f64) -> f64 {
    pressure_pa * humidity_ratio / (MASS_RATIO + humidity_ratio)
}

/// Pressure of the standard atmosphere [Pa] at an elevation above sea level [m, -5000 to 11000] [ICAO1993].
///
/// Above or below that range the troposphere's formula simply continues.
pub fn standard_pressure_pa(elevation_m: f64) -> f64 {
    const EXPONENT: f64 = 9.806_65 * 0.028_964_42 / (8.314_32 * 0.006_5);
    101_325.0 * (1.0 - 0.006_5 * elevation_m / 288.15).max(0.0).powf(EXPONENT)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn humidity_measures_convert_both_ways() {
        for (t, rh) in [(253.15, 0.3), (273.15, 0.9), (295.15, 0.5), (318.15, 0.05)] {
            let air = Air::from_relative_humidity(t, rh, 95_000.0);
            let w = humidity_ratio(air.vapour_pressure_pa, air.pressure_pa);
            let back = vapour_pressure_from_humidity_ratio_pa(w, air.pressure_pa);
            assert!((back / air.vapour_pressure_pa - 1.0).abs() < 1e-12);
            assert!((saturation_pressure_pa(dew_point_k(back)) / back - 1.0).abs() < 1e-10);
        }
    }

    #[test]
    fn nan_goes_through_without_a_panic() {
        let air = Air {
            temp_k: f64::NAN,
            vapour_pressure_pa: 1000.0,
            pressure_pa: 1e5,
        };
        assert!(air.relative_humidity().is_nan() && wet_bulb_k(&air).is_nan() && dew_point_k(f64::NAN).is_nan());
    }
}
