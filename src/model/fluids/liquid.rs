//! Water and ethanol in felt and cup: two masses that evaporate each in their own way.

use super::alcohol_density;
use super::strength::freezing_point_of_strength_k;
use super::table::working_fluids;
use super::working_fluid::WorkingFluid;
use crate::model::air::{
    MOLAR_MASS_ETHANOL_KG_MOL, MOLAR_MASS_WATER_KG_MOL, ZERO_CELSIUS_K, latent_heat_vaporisation_j_kg,
    saturation_pressure_pa,
};

/// Van Laar constants of ethanol (1) and water (2) near room temperature, our own fit to the modified UNIFAC (Dortmund)
/// model [Gmehling1993] at 25 °C; constants fitted at the boiling point of 1 atm are wrong at the dilute end here.
const ETHANOL_IN_WATER: f64 = 1.549;
const WATER_IN_ETHANOL: f64 = 0.953;

/// A liquid of water and ethanol by its two masses; neither is ever negative.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct Liquid {
    /// Mass of water [kg].
    pub water_kg: f64,
    /// Mass of ethanol [kg].
    pub ethanol_kg: f64,
}

impl Liquid {
    /// Pure water [kg].
    pub fn water(mass_kg: f64) -> Self {
        Self {
            water_kg: mass_kg,
            ethanol_kg: 0.0,
        }
    }

    /// A mixture of `total_kg` [kg] and strength `abv_pct` [% ABV at 20 °C, held to 0-100] [OIML1975].
    pub fn from_abv(total_kg: f64, abv_pct: f64) -> Self {
        let ethanol_kg = total_kg * alcohol_density::mass_fraction(abv_pct);
        Self {
            water_kg: total_kg - ethanol_kg,
            ethanol_kg,
        }
    }

    /// Both masses together [kg].
    #[inline]
    pub fn total_kg(&self) -> f64 {
        self.water_kg + self.ethanol_kg
    }

    /// Mass fraction of ethanol [0-1]; 0 when there is nothing.
    #[inline]
    pub fn ethanol_mass_fraction(&self) -> f64 {
        if self.ethanol_kg > 0.0 {
            self.ethanol_kg / self.total_kg()
        } else {
            0.0
        }
    }

    /// Strength [% ABV at 20 °C] [OIML1975].
    pub fn abv_pct(&self) -> f64 {
        alcohol_density::abv_pct(self.ethanol_mass_fraction())
    }

    /// Vapour pressures of water and ethanol over the liquid [Pa] at a temperature [K, 253 to 353].
    ///
    /// Modified Raoult's law with van Laar activity coefficients [VanLaar1910] that do not change with temperature. An
    /// empty liquid counts as water. Without ethanol this is the saturation pressure of water and nothing else is
    /// computed.
    ///
    /// ```
    /// let spirit = dipcast::model::fluids::Liquid::from_abv(0.1, 40.0);
    /// let [water, ethanol] = spirit.vapour_pressures_pa(293.15);
    /// assert!(water > 2000.0 && water < 2339.0 && ethanol > 2000.0 && ethanol < 3000.0);
    /// ```
    #[inline]
    pub fn vapour_pressures_pa(&self, temp_k: f64) -> [f64; 2] {
        let water = saturation_pressure_pa(temp_k);
        if self.ethanol_kg <= 0.0 {
            return [water, 0.0];
        }
        let ethanol_share = self.ethanol_mole_fraction();
        let [water_activity, ethanol_activity] = activity_coefficients(ethanol_share);
        [
            (1.0 - ethanol_share) * water_activity * water,
            ethanol_share * ethanol_activity * ethanol().vapour_pressure_pa(temp_k),
        ]
    }

    /// Mole fraction of ethanol [0-1]; 0 when there is nothing.
    #[inline]
    pub fn ethanol_mole_fraction(&self) -> f64 {
        if self.ethanol_kg <= 0.0 {
            return 0.0;
        }
        let ethanol = self.ethanol_kg / MOLAR_MASS_ETHANOL_KG_MOL;
        ethanol / (ethanol + self.water_kg / MOLAR_MASS_WATER_KG_MOL)
    }

    /// Temperature [K] at which ice begins to form [Melinder2010]; 273.15 for water.
    #[inline]
    pub fn freezing_point_k(&self) -> f64 {
        if self.ethanol_kg <= 0.0 {
            ZERO_CELSIUS_K
        } else {
            freezing_point_of_strength_k(self.ethanol_mass_fraction())
        }
    }

    /// Density [kg/m3] at a temperature [K, 253 to 313; the nearest end outside] [OIML1975].
    pub fn density_kg_m3(&self, temp_k: f64) -> f64 {
        alcohol_density::mixture_density_kg_m3(self.ethanol_mass_fraction(), temp_k - ZERO_CELSIUS_K)
    }

    /// The same strength in another amount [kg]; an empty liquid becomes water.
    #[inline]
    pub fn scaled(&self, total_kg: f64) -> Self {
        let ethanol_kg = total_kg * self.ethanol_mass_fraction();
        Self {
            water_kg: total_kg - ethanol_kg,
            ethanol_kg,
        }
    }

    /// Both liquids together. The heat of mixing is ignored.
    #[inline]
    pub fn plus(&self, other: Self) -> Self {
        Self {
            water_kg: self.water_kg + other.water_kg,
            ethanol_kg: self.ethanol_kg + other.ethanol_kg,
        }
    }

    /// What is left after taking water and ethanol [kg] away; a mass that would turn negative becomes 0.
    #[inline]
    pub fn minus(&self, taken_kg: [f64; 2]) -> Self {
        Self {
            water_kg: (self.water_kg - taken_kg[0]).max(0.0),
            ethanol_kg: (self.ethanol_kg - taken_kg[1]).max(0.0),
        }
    }

    /// Specific heat [J/(kg K)] at 20 °C: mass mean of water [WagnerPruss2002] and ethanol [Schroeder2014] and an
    /// excess fitted to [Melinder2010], which it meets within 2 % up to 60 % by mass. Its change with temperature is
    /// ignored.
    #[inline]
    pub fn heat_capacity_j_kgk(&self) -> f64 {
        let e = self.ethanol_mass_fraction();
        let w = 1.0 - e;
        w * 4184.0 + e * 2397.0 + w * e * (1928.0 + 2027.0 * (w - e))
    }
}

/// Latent heats of water and ethanol [J/kg] at a temperature [K, 253 to 343]; the heat of mixing is ignored.
#[inline]
pub fn latent_heats_j_kg(temp_k: f64) -> [f64; 2] {
    [
        latent_heat_vaporisation_j_kg(temp_k),
        ethanol().latent_heat_j_kg(temp_k),
    ]
}

/// Activity coefficients of water and ethanol at an ethanol mole fraction [0-1] [VanLaar1910].
#[inline]
fn activity_coefficients(ethanol_share: f64) -> [f64; 2] {
    let ethanol = ETHANOL_IN_WATER * ethanol_share;
    let water = WATER_IN_ETHANOL * (1.0 - ethanol_share);
    let sum = ethanol + water;
    let (water_part, ethanol_part) = (water / sum, ethanol / sum);
    [
        (WATER_IN_ETHANOL * ethanol_part * ethanol_part).exp(),
        (ETHANOL_IN_WATER * water_part * water_part).exp(),
    ]
}

/// The ethanol row of the table.
#[inline]
fn ethanol() -> &'static WorkingFluid {
    &working_fluids()[super::table::ETHANOL_ROW]
}
