//! Heat and mass transfer between surfaces and moist air.
//!
//! Dimensionless laws, the wet sphere's film, vapour fluxes with Stefan flow, the tube, and long-wave exchange. Air in
//! the film has the properties of dry air at the mean of surface and air temperature; only the buoyancy sees the
//! vapours.

mod correlations;
mod cylinder;
mod plate;
mod sphere;

pub use correlations::{
    blend, cylinder_nusselt_crossflow, sphere_nusselt_forced, sphere_nusselt_natural, sphere_nusselt_ranz_marshall,
    vertical_nusselt_natural,
};
pub use cylinder::cylinder_heat_w_m2k;
pub use plate::{DISK_STILL, disk_film, plate_nusselt_forced, plate_nusselt_natural};
pub use sphere::{SphereFilm, sphere_film, vapour_fluxes_kg_m2s};

/// Standard acceleration of free fall [m/s2].
pub const GRAVITY_M_S2: f64 = 9.806_65;

/// Stefan-Boltzmann constant [W/(m2 K4)] [CODATA2018].
pub const STEFAN_BOLTZMANN_W_M2K4: f64 = 5.670_374_419e-8;

/// Net long-wave gain of a surface [W/m2, positive = the surface gains] from surroundings that enclose it.
///
/// `emissivity` [0-1] of the surface, `surface_temp_k` and `surroundings_k` [K]; the surroundings act as a black
/// enclosure [Incropera2007], eq. 1.7.
///
/// ```
/// let gain = dipcast::model::transfer::longwave_w_m2(0.95, 293.15, 295.15);
/// assert!((gain - 10.97).abs() < 0.01);
/// ```
#[inline]
pub fn longwave_w_m2(emissivity: f64, surface_temp_k: f64, surroundings_k: f64) -> f64 {
    let (hot, cold) = (surroundings_k * surroundings_k, surface_temp_k * surface_temp_k);
    emissivity * STEFAN_BOLTZMANN_W_M2K4 * (hot * hot - cold * cold)
}

/// Dry air of a film: density [kg/m3], kinematic viscosity [m2/s], conductivity [W/(m K)], Prandtl number.
struct FilmAir {
    density: f64,
    viscosity: f64,
    conductivity: f64,
    prandtl: f64,
}

impl FilmAir {
    #[inline]
    fn at(temp_k: f64, pressure_pa: f64) -> Self {
        use super::air;
        let density = air::mixture_density_kg_m3(temp_k, [0.0, 0.0], pressure_pa);
        let dynamic = air::dynamic_viscosity_pa_s(temp_k);
        let conductivity = air::thermal_conductivity_w_mk(temp_k);
        let prandtl = air::specific_heat_j_kgk() * dynamic / conductivity;
        Self {
            density,
            viscosity: dynamic / density,
            conductivity,
            prandtl,
        }
    }

    /// Grashof number of a length [m] and a density difference [kg/m3] of either sign.
    #[inline]
    fn grashof(&self, length_m: f64, density_difference: f64) -> f64 {
        let scale = GRAVITY_M_S2 * length_m * length_m * length_m;
        scale * density_difference.abs() / (self.density * self.viscosity * self.viscosity)
    }
}
