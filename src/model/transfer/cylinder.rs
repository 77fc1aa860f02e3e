//! The tube: a slender vertical cylinder.

use super::FilmAir;
use super::correlations::{cube_sum, cylinder_nusselt_crossflow, vertical_nusselt_natural};
use crate::model::air::{Air, mixture_density_kg_m3};

/// Convective heat transfer coefficient [W/(m2 K)] of an upright dry cylinder in air that moves across it.
///
/// `diameter_m` and `length_m` [m], `surface_temp_k` [K], `speed_m_s` [m/s, 0 or more]. Crossflow
/// [ChurchillBernstein1977] on the diameter and natural convection [ChurchillChu1975] on the height, cubes of the
/// coefficients added [Churchill1977]. The gain that a thin tube has over a flat wall in still air is left out (it is
/// small beside the crossflow of any room).
#[inline]
pub fn cylinder_heat_w_m2k(diameter_m: f64, length_m: f64, surface_temp_k: f64, air: &Air, speed_m_s: f64) -> f64 {
    let film = FilmAir::at(0.5 * (surface_temp_k + air.temp_k), air.pressure_pa);
    let at_surface = mixture_density_kg_m3(surface_temp_k, [air.vapour_pressure_pa, 0.0], air.pressure_pa);
    let grashof = film.grashof(length_m, at_surface - air.density_kg_m3());
    let natural = vertical_nusselt_natural(grashof * film.prandtl, film.prandtl) * film.conductivity / length_m;
    let reynolds = speed_m_s * diameter_m / film.viscosity;
    let forced = cylinder_nusselt_crossflow(reynolds, film.prandtl) * film.conductivity / diameter_m;
    cube_sum(natural, forced)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn faster_air_and_larger_difference_carry_more_heat() {
        let air = Air::from_relative_humidity(295.15, 0.5, 101_325.0);
        let mut last = 0.0;
        for speed in [0.0, 0.05, 0.1, 0.3, 1.0, 3.0] {
            let heat = cylinder_heat_w_m2k(0.007, 0.11, 293.15, &air, speed);
            assert!(heat > last, "{speed}");
            last = heat;
        }
        let near = cylinder_heat_w_m2k(0.007, 0.11, 294.15, &air, 0.0);
        let far = cylinder_heat_w_m2k(0.007, 0.11, 285.15, &air, 0.0);
        assert!(far > near && near > 0.0);
    }
}
