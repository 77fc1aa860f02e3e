//! The film around a wet or dry sphere, and the vapour that crosses it.

use super::FilmAir;
use super::correlations::SphereDrive;
use crate::model::air::{
    Air, ETHANOL_OVER_WATER_DIFFUSIVITY, GAS_CONSTANT_J_MOLK, MOLAR_MASS_ETHANOL_KG_MOL, MOLAR_MASS_WATER_KG_MOL,
    diffusivity_water_m2_s, mixture_density_kg_m3,
};

/// Transfer coefficients of the film around a sphere at one instant.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SphereFilm {
    /// Convective heat transfer coefficient [W/(m2 K)].
    pub heat_w_m2k: f64,
    /// Mass transfer coefficient of water vapour, Sh D / d [m/s].
    pub water_m_s: f64,
    /// Mass transfer coefficient of ethanol vapour, Sh D / d [m/s]; 0 when the surface holds none, for nothing can
    /// cross then.
    pub ethanol_m_s: f64,
}

/// Film coefficients of a sphere in air that moves at `speed_m_s` [m/s, 0 or more].
///
/// `diameter_m` [m], `surface_temp_k` [K], `surface_vapours_pa` water and ethanol at the surface [Pa], ambient `air`
/// (no ethanol). Natural convection [Churchill1983] is driven by the density difference of the two gas mixtures, so
/// cooling (sinks) and added water vapour (rises) pull against each other while ethanol vapour (heavy) sinks too;
/// forced convection is [Whitaker1972]; the cubes of both add up [Churchill1977]. Surface vapours above 99.9 % of the
/// total pressure count as 99.9 %.
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
    let drive = SphereDrive::new(grashof, speed_m_s * diameter_m / film.viscosity);
    let mass = |diffusivity: f64| drive.nusselt(film.viscosity / diffusivity) * diffusivity / diameter_m;
    let water = diffusivity_water_m2_s(film_k, air.pressure_pa);
    let has_ethanol = surface_vapours_pa[1] > 0.0;
    SphereFilm {
        heat_w_m2k: drive.nusselt(film.prandtl) * film.conductivity / diameter_m,
        water_m_s: mass(water),
        ethanol_m_s: if has_ethanol {
            mass(water * ETHANOL_OVER_WATER_DIFFUSIVITY)
        } else {
            0.0
        },
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
/// `film` from [`sphere_film`], `film_temp_k` mean of surface and air [K], `surface_vapours_pa` water and ethanol at
/// the surface [Pa], ambient `air` (no ethanol). Each species diffuses on its own difference; the drift that both cause
/// is shared: with one species alone this is exactly `k M p / (R T) ln[(p - e_air) / (p - e_surface)]`
/// [BirdStewartLightfoot2002], eq. 18.2-14. A surface at or above its boiling point is held at 99.9 % of the total
/// pressure, so the result stays finite.
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

#[cfg(test)]
mod tests {
    use super::*;
    use crate::model::air::saturation_pressure_pa;
    use crate::model::transfer::{blend, sphere_nusselt_forced, sphere_nusselt_natural};

    fn room() -> Air {
        Air::from_relative_humidity(295.15, 0.5, 101_325.0)
    }

    #[test]
    fn one_vapour_alone_follows_the_log_form() {
        let (air, film) = (
            room(),
            SphereFilm {
                heat_w_m2k: 10.0,
                water_m_s: 0.009,
                ethanol_m_s: 0.006,
            },
        );
        for surface in [100.0, 1300.0, 1321.0, 2000.0, 20_000.0, 90_000.0] {
            let flux = vapour_fluxes_kg_m2s(&film, 293.0, [surface, 0.0], &air)[0];
            let rest = ((air.pressure_pa - air.vapour_pressure_pa) / (air.pressure_pa - surface)).ln();
            let printed =
                film.water_m_s * MOLAR_MASS_WATER_KG_MOL * air.pressure_pa / (GAS_CONSTANT_J_MOLK * 293.0) * rest;
            assert!((flux / printed - 1.0).abs() < 1e-9, "{surface}: {flux} {printed}");
        }
    }

    #[test]
    fn equal_vapour_pressures_exchange_nothing() {
        let air = room();
        let surface = [air.vapour_pressure_pa, 0.0];
        let film = sphere_film(0.027, 290.0, surface, &air, 0.1);
        assert_eq!(vapour_fluxes_kg_m2s(&film, 292.0, surface, &air), [0.0, 0.0]);
    }

    #[test]
    fn vapours_condense_and_evaporate_side_by_side() {
        let air = room();
        let surface = [300.0, 2000.0];
        let film = sphere_film(0.027, 280.0, surface, &air, 0.1);
        let [water, ethanol] = vapour_fluxes_kg_m2s(&film, 287.0, surface, &air);
        assert!(water < 0.0 && ethanol > 0.0);
    }

    #[test]
    fn a_boiling_surface_stays_finite() {
        let air = room();
        for surface in [[101_325.0, 0.0], [60_000.0, 60_000.0], [1e9, 0.0]] {
            let film = sphere_film(0.027, 373.15, surface, &air, 0.1);
            let fluxes = vapour_fluxes_kg_m2s(&film, 330.0, surface, &air);
            assert!(film.heat_w_m2k.is_finite() && fluxes.iter().all(|flux| flux.is_finite() && *flux >= 0.0));
        }
    }

    #[test]
    fn buoyancy_sees_the_vapours() {
        let air = Air::from_relative_humidity(295.15, 0.1, 101_325.0);
        // Surface temperature at which cooling and added water vapour cancel: only conduction is left.
        let (mut low, mut high) = (280.0, 295.15);
        for _ in 0..80 {
            let middle = 0.5 * (low + high);
            let wet = mixture_density_kg_m3(middle, [saturation_pressure_pa(middle), 0.0], air.pressure_pa);
            if wet > air.density_kg_m3() {
                low = middle
            } else {
                high = middle
            }
        }
        let still = sphere_film(0.027, low, [saturation_pressure_pa(low), 0.0], &air, 0.0);
        let dry = sphere_film(0.027, low, [air.vapour_pressure_pa, 0.0], &air, 0.0);
        let laden = sphere_film(0.027, low, [saturation_pressure_pa(low), 2500.0], &air, 0.0);
        assert!(still.heat_w_m2k < 0.7 * dry.heat_w_m2k, "{still:?} {dry:?}");
        assert!(laden.heat_w_m2k > dry.heat_w_m2k);
    }

    #[test]
    fn the_film_is_the_public_laws_put_together() {
        let (air, surface_k, surface) = (room(), 290.15, [1900.0, 1200.0]);
        let film = sphere_film(0.027, surface_k, surface, &air, 0.25);
        let dry = FilmAir::at(0.5 * (surface_k + air.temp_k), air.pressure_pa);
        let difference = mixture_density_kg_m3(surface_k, surface, air.pressure_pa) - air.density_kg_m3();
        let grashof = 9.806_65 * 0.027_f64.powi(3) * difference.abs() / (dry.density * dry.viscosity.powi(2));
        let number = |pr: f64| {
            let forced = sphere_nusselt_forced(0.25 * 0.027 / dry.viscosity, pr);
            blend(sphere_nusselt_natural(grashof * pr, pr), forced)
        };
        let film_k = 0.5 * (surface_k + air.temp_k);
        let ethanol = crate::model::air::diffusivity_ethanol_m2_s(film_k, air.pressure_pa);
        let expected = number(dry.viscosity / ethanol) * ethanol / 0.027;
        assert!((film.ethanol_m_s / expected - 1.0).abs() < 1e-12);
        let expected = number(dry.prandtl) * dry.conductivity / 0.027;
        assert!((film.heat_w_m2k / expected - 1.0).abs() < 1e-12);
    }
}
