//! The film around a wet or dry sphere, and the vapour that crosses it.

use super::FilmAir;
use super::correlations::{cube_sum, forced_speed_part, sphere_nusselt_natural};
use crate::model::air::{
    Air, GAS_CONSTANT_J_MOLK, MOLAR_MASS_ETHANOL_KG_MOL, MOLAR_MASS_WATER_KG_MOL, diffusivity_ethanol_m2_s,
    diffusivity_water_m2_s, mixture_density_kg_m3,
};

/// Transfer coefficients of the film around a sphere at one instant.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SphereFilm {
    /// Convective heat transfer coefficient [W/(m2 K)].
    pub heat_w_m2k: f64,
    /// Mass transfer coefficient of water vapour, Sh D / d [m/s].
    pub water_m_s: f64,
    /// Mass transfer coefficient of ethanol vapour, Sh D / d [m/s].
    pub ethanol_m_s: f64,
}

/// Film coefficients of a sphere in air that moves at `speed_m_s` [m/s, 0 or more].
///
/// `diameter_m` [m], `surface_temp_k` [K], `surface_vapours_pa` water and ethanol at the surface [Pa], ambient `air` (no
/// ethanol). Natural convection [Churchill1983] is driven by the density difference of the two gas mixtures, so cooling
/// (sinks) and added water vapour (rises) pull against each other while ethanol vapour (heavy) sinks too; forced
/// convection is [Whitaker1972]; the cubes of both add up [Churchill1977]. Surface vapours above 99.9 % of the total
/// pressure count as 99.9 %.
///
/// ```
/// use dipcast::model::{air::Air, transfer::sphere_film};
/// let air = Air::from_relative_humidity(295.15, 0.5, 101_325.0);
/// let film = sphere_film(0.027, 291.15, [2063.0, 0.0], &air, 0.1);
/// assert!(film.heat_w_m2k > 6.0 && film.heat_w_m2k < 12.0);
/// ```
#[inline]
pub fn sphere_film(
    diameter_m: f64,
    surface_temp_k: f64,
    surface_vapours_pa: [f64; 2],
    air: &Air,
    speed_m_s: f64,
) -> SphereFilm {
    let film_k = 0.5 * (surface_temp_k + air.temp_k);
    let film = FilmAir::at(film_k, air.pressure_pa);
    let surface_density = mixture_density_kg_m3(surface_temp_k, bounded(surface_vapours_pa, air), air.pressure_pa);
    let grashof = film.grashof(diameter_m, surface_density - air.density_kg_m3());
    let forced = forced_speed_part(speed_m_s * diameter_m / film.viscosity);
    let number = |prandtl_or_schmidt: f64| {
        let natural = sphere_nusselt_natural(grashof * prandtl_or_schmidt, prandtl_or_schmidt) - 2.0;
        2.0 + cube_sum(natural, forced * prandtl_or_schmidt.powf(0.4))
    };
    let water = diffusivity_water_m2_s(film_k, air.pressure_pa);
    let ethanol = diffusivity_ethanol_m2_s(film_k, air.pressure_pa);
    SphereFilm {
        heat_w_m2k: number(film.prandtl) * film.conductivity / diameter_m,
        water_m_s: number(film.viscosity / water) * water / diameter_m,
        ethanol_m_s: number(film.viscosity / ethanol) * ethanol / diameter_m,
    }
}

/// Vapours scaled down together so that a thousandth of the total pressure is left to the dry air.
#[inline]
fn bounded(vapours_pa: [f64; 2], air: &Air) -> [f64; 2] {
    let (sum, limit) = (vapours_pa[0] + vapours_pa[1], 0.999 * air.pressure_pa);
    if sum <= limit {
        vapours_pa
    } else {
        [vapours_pa[0] * limit / sum, vapours_pa[1] * limit / sum]
    }
}

/// Vapour leaving the surface, water and ethanol [kg/(m2 s), negative = condensing], with Stefan flow.
///
/// `film` from [`sphere_film`], `film_temp_k` mean of surface and air [K], `surface_vapours_pa` water and ethanol at the
/// surface [Pa], ambient `air` (no ethanol). Each species diffuses on its own difference; the drift that both cause is
/// shared: with one species alone this is exactly `k M p / (R T) ln[(p - e_air) / (p - e_surface)]` [BirdStewartLightfoot2002],
/// eq. 18.2-14. A surface at or above its boiling point is held at 99.9 % of the total pressure, so the result stays finite.
#[inline]
pub fn vapour_fluxes_kg_m2s(film: &SphereFilm, film_temp_k: f64, surface_vapours_pa: [f64; 2], air: &Air) -> [f64; 2] {
    let surface = bounded(surface_vapours_pa, air);
    let ambient = bounded([air.vapour_pressure_pa, 0.0], air);
    let (surface_rest, sum) = (air.pressure_pa - surface[0] - surface[1], surface[0] + surface[1]);
    let drift = air.pressure_pa / surface_rest * log_mean_share((sum - ambient[0]) / surface_rest);
    let per_pascal = drift / (GAS_CONSTANT_J_MOLK * film_temp_k);
    [
        film.water_m_s * MOLAR_MASS_WATER_KG_MOL * per_pascal * (surface[0] - ambient[0]),
        film.ethanol_m_s * MOLAR_MASS_ETHANOL_KG_MOL * per_pascal * surface[1],
    ]
}

/// ln(1 + u) / u, continuous through u = 0.
#[inline]
fn log_mean_share(u: f64) -> f64 {
    if u.abs() < 1e-4 {
        1.0 - u * (0.5 - u * (1.0 / 3.0 - 0.25 * u))
    } else {
        u.ln_1p() / u
    }
}
