//! Horizontal surface in air: the water in a cup.

use super::FilmAir;
use super::correlations::cube_sum;
use super::sphere::SphereFilm;
use crate::model::air::{Air, diffusivity_ethanol_m2_s, diffusivity_water_m2_s, mixture_density_kg_m3};

/// Nusselt (Sherwood) number of a disk that exchanges with still air by conduction alone, on its diameter.
///
/// Half-space conduction from a disk, 8/pi ([Carslaw1959], art. 8.2).
pub const DISK_STILL: f64 = 8.0 / std::f64::consts::PI;

/// Nusselt (Sherwood) number of a laminar flow along a flat plate, on its length: 0.664 Re^(1/2) Pr^(1/3).
///
/// `reynolds` [-] 0 to 5e5; `prandtl` [-] 0.6 to 50 (Prandtl or Schmidt number). Pohlhausen's solution
/// [Incropera2007, eq. 7.30].
#[inline]
pub fn plate_nusselt_forced(reynolds: f64, prandtl: f64) -> f64 {
    0.664 * reynolds.max(0.0).sqrt() * prandtl.cbrt()
}

/// Nusselt (Sherwood) number of natural convection over a horizontal plate, on area over perimeter.
///
/// `rayleigh` [-] from the absolute density difference. Rising plumes (`light_above` true: the film is lighter than the
/// air) follow 0.54 Ra^(1/4), a stable film 0.27 Ra^(1/4) [Incropera2007, eqs. 9.30 and 9.32].
#[inline]
pub fn plate_nusselt_natural(rayleigh: f64, light_above: bool) -> f64 {
    let factor = if light_above { 0.54 } else { 0.27 };
    factor * rayleigh.max(0.0).sqrt().sqrt()
}

/// Film coefficients over a horizontal disk of liquid in air that moves at `speed_m_s` [m/s, 0 or more].
///
/// `diameter_m` [m], `surface_temp_k` [K], `surface_vapours_pa` water and ethanol at the surface [Pa]. What natural and
/// forced convection exceed still conduction by adds up as cubes, like on the sphere; numbers on the diameter.
#[inline]
pub fn disk_film(
    diameter_m: f64,
    surface_temp_k: f64,
    surface_vapours_pa: [f64; 2],
    air: &Air,
    speed_m_s: f64,
) -> SphereFilm {
    let film_k = 0.5 * (surface_temp_k + air.temp_k);
    let film = FilmAir::at(film_k, air.pressure_pa);
    let lighter = air.density_kg_m3() - mixture_density_kg_m3(surface_temp_k, surface_vapours_pa, air.pressure_pa);
    // Area over perimeter of a disk is a quarter of its diameter.
    let grashof = film.grashof(0.25 * diameter_m, lighter);
    let reynolds = speed_m_s * diameter_m / film.viscosity;
    let number = |prandtl: f64| {
        let natural = 4.0 * plate_nusselt_natural(grashof * prandtl, lighter > 0.0);
        let forced = plate_nusselt_forced(reynolds, prandtl);
        DISK_STILL + cube_sum((natural - DISK_STILL).max(0.0), (forced - DISK_STILL).max(0.0))
    };
    let water = diffusivity_water_m2_s(film_k, air.pressure_pa);
    let ethanol = diffusivity_ethanol_m2_s(film_k, air.pressure_pa);
    SphereFilm {
        heat_w_m2k: number(film.prandtl) * film.conductivity / diameter_m,
        water_m_s: number(film.viscosity / water) * water / diameter_m,
        ethanol_m_s: number(film.viscosity / ethanol) * ethanol / diameter_m,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn laminar_plate_value() {
        // Re 1e4, Pr 0.7: 0.664 * 100 * 0.8879 (cube root of 0.7, by hand).
        assert!((plate_nusselt_forced(1e4, 0.7) - 58.96).abs() < 0.01);
    }

    #[test]
    fn a_stable_film_exchanges_half() {
        assert_eq!(
            plate_nusselt_natural(1e4, false) * 2.0,
            plate_nusselt_natural(1e4, true)
        );
    }
}
