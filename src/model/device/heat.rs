//! Surfaces and heat stores of head and body.

use std::f64::consts::PI;

use super::definition::Definition;
use super::filled::Filled;
use super::shape::{ML, MM, STATED_TEMP_K};
use super::sphere::Sphere;
use super::vessel::Vessel;
use super::{Body, Head};
use crate::model::fluids::{Liquid, WorkingFluid};

/// Density of borosilicate glass 3.3 [kg/m³] [ISO3585].
pub const GLASS_DENSITY_KG_M3: f64 = 2230.0;
/// Specific heat of borosilicate glass [J/(kg K)] [MakeItFrom2026].
pub const GLASS_HEAT_J_KGK: f64 = 830.0;
/// Conductivity of borosilicate glass near 20 °C [W/(m K)]: the middle of 0.96 to 1.2 [Matmatch2026].
pub const GLASS_CONDUCTIVITY_W_MK: f64 = 1.1;
/// Specific heat of dry felt [J/(kg K)]: dry cotton 1220 to 1350, dry wool 1360 [MortonHearle2008].
pub const FELT_HEAT_J_KGK: f64 = 1340.0;
/// Conductivity of wet felt [W/(m K)]: taken as that of water at 20 °C [IAPWS2011], which fills it.
pub const WET_FELT_CONDUCTIVITY_W_MK: f64 = 0.6;
/// Long-wave emissivity of wet felt; remembered handbook value of a wet surface.
pub const FELT_EMISSIVITY: f64 = 0.95;
/// Long-wave emissivity of glass; remembered handbook value.
pub const GLASS_EMISSIVITY: f64 = 0.90;

/// Liquid the felt holds when full [kg]: the room given as grams of water, filled with a liquid of this strength.
pub(super) fn felt_capacity_kg(definition: &Definition, strength_abv_pct: f64) -> f64 {
    let density = |abv_pct: f64| Liquid::from_abv(1.0, abv_pct).density_kg_m3(STATED_TEMP_K);
    definition.head.felt.capacity_g * 1e-3 * density(strength_abv_pct) / density(0.0)
}

/// The head: wet surface, resistance of wall and felt, dry heat store.
pub(super) fn head(definition: &Definition, filled: &Filled, vessel: &Vessel, felt_capacity_kg: f64) -> Head {
    let felt = &definition.head.felt;
    let glass = Sphere {
        radius_m: 0.5 * definition.head.outer_diameter_mm * MM,
    };
    let wet = Sphere {
        radius_m: glass.radius_m + felt.thickness_mm * MM,
    };
    let glass_kg = GLASS_DENSITY_KG_M3 * (glass.volume_m3() - vessel.head.volume_m3());
    Head {
        wet_diameter_m: 2.0 * wet.radius_m,
        wet_area_m2: wet.area_m2() + filled.beak_area_cm2 * 1e-4,
        felt_resistance_k_w: shell_resistance_k_w(&vessel.head, &glass, GLASS_CONDUCTIVITY_W_MK)
            + shell_resistance_k_w(&glass, &wet, WET_FELT_CONDUCTIVITY_W_MK),
        dry_capacity_j_k: GLASS_HEAT_J_KGK * glass_kg + FELT_HEAT_J_KGK * felt.dry_mass_g * 1e-3,
        felt_capacity_kg,
        uptake_kg: filled.uptake_g * 1e-3,
        critical_share: filled.critical_share,
        exchange_share: filled.exchange_share,
        emissivity: FELT_EMISSIVITY,
        absorptance: filled.felt_absorptance,
    }
}

/// Steady conduction through a spherical shell, `(1/r1 - 1/r2) / (4 pi k)` [K/W].
fn shell_resistance_k_w(inner: &Sphere, outer: &Sphere, conductivity_w_mk: f64) -> f64 {
    (1.0 / inner.radius_m - 1.0 / outer.radius_m) / (4.0 * PI * conductivity_w_mk)
}

/// Body and tube: surfaces, and the heat store with all the liquid in it.
pub(super) fn body(definition: &Definition, filled: &Filled, vessel: &Vessel, fluid: &WorkingFluid) -> Body {
    let (body, tube) = (&definition.body, &definition.tube);
    let glass = Sphere {
        radius_m: 0.5 * body.outer_diameter_mm * MM,
    };
    let bare_m = (tube.length_mm - 2.0 * vessel.body.radius_m / MM - body.wall_mm - definition.head.wall_mm) * MM;
    let tube_glass_m3 = (vessel.tube_m2() - vessel.bore_m2()) * (vessel.tube_top_m - vessel.tube_end_m);
    let glass_m3 = glass.volume_m3() - vessel.body.volume_m3() + tube_glass_m3;
    let liquid_j_k = definition.fluid.volume_ml * ML * liquid_heat_j_m3k(fluid);
    Body {
        diameter_m: 2.0 * glass.radius_m,
        area_m2: glass.area_m2(),
        tube_diameter_m: tube.outer_diameter_mm * MM,
        tube_length_m: bare_m,
        tube_area_m2: PI * tube.outer_diameter_mm * MM * bare_m,
        full_capacity_j_k: GLASS_DENSITY_KG_M3 * GLASS_HEAT_J_KGK * glass_m3 + liquid_j_k,
        emissivity: GLASS_EMISSIVITY,
        absorptance: filled.absorptance,
    }
}

/// Heat per volume of the liquid at 20 °C [J/(m³ K)].
pub(super) fn liquid_heat_j_m3k(fluid: &WorkingFluid) -> f64 {
    fluid.liquid_density_kg_m3(STATED_TEMP_K) * fluid.liquid_cp_j_kgk(STATED_TEMP_K)
}
