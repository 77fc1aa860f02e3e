//! The cup: what it loses to the air and how warm it is.

use super::types::{Forcing, State, Tuning};
use crate::model::air::{
    diffusivity_ethanol_m2_s, diffusivity_water_m2_s, saturation_pressure_ice_pa, thermal_conductivity_w_mk,
};
use crate::model::device::Cup;
use crate::model::fluids::{Liquid, latent_heats_j_kg};
use crate::model::transfer::{SphereFilm, cylinder_heat_w_m2k, disk_film, longwave_w_m2, vapour_fluxes_kg_m2s};

/// Emissivity of a water surface and of the cup's glass wall [Incropera2007, table A.11].
const EMISSIVITY: f64 = 0.95;
/// Emissivity of the cup's wall.
const WALL_EMISSIVITY: f64 = 0.90;

/// What a cup loses at one instant.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub(super) struct CupFlow {
    /// Water and ethanol leaving [kg/s].
    pub(super) loss_kg_s: [f64; 2],
    /// Net heat flowing into the liquid [W].
    heat_w: f64,
}

/// Fall of the level below the brim mark [m].
pub(super) fn drop_m(cup: &Cup, current: &Liquid, temp_k: f64) -> f64 {
    (cup.full.total_kg() - current.total_kg()) / (current.density_kg_m3(temp_k) * cup.area_m2)
}

/// One cup in one forcing.
pub(super) struct CupSide<'a> {
    pub(super) cup: &'a Cup,
    pub(super) tuning: &'a Tuning,
    pub(super) forcing: &'a Forcing,
    pub(super) liquid: Liquid,
    /// From the rim down to the surface [m].
    pub(super) gap_m: f64,
}

impl<'a> CupSide<'a> {
    /// The cup as `state` has it.
    pub(super) fn of(cup: &'a Cup, tuning: &'a Tuning, forcing: &'a Forcing, state: &State) -> Self {
        let drop_m = drop_m(cup, &state.cup, state.cup_temp_k).max(0.0);
        let gap_m = (cup.freeboard_m + drop_m).min(cup.freeboard_m + cup.fill_depth_m);
        Self {
            cup,
            tuning,
            forcing,
            liquid: state.cup,
            gap_m,
        }
    }

    /// Loss and heat with the liquid at `temp_k`: the still gap below the rim in series with the layer above it.
    pub(super) fn at(&self, temp_k: f64) -> CupFlow {
        if self.liquid.total_kg() <= 0.0 {
            return CupFlow::default();
        }
        let (air, cup) = (&self.forcing.air, self.cup);
        let vapours_pa = self.vapours_pa(temp_k);
        let outer = disk_film(cup.diameter_m, temp_k, vapours_pa, air, self.forcing.air_speed_m_s);
        let film_k = 0.5 * (temp_k + air.temp_k);
        let behind_gap = |outer: f64, gap: f64| 1.0 / (1.0 / outer + self.gap_m / gap);
        let film = SphereFilm {
            heat_w_m2k: behind_gap(outer.heat_w_m2k, thermal_conductivity_w_mk(film_k)),
            water_m_s: behind_gap(outer.water_m_s, diffusivity_water_m2_s(film_k, air.pressure_pa)),
            ethanol_m_s: behind_gap(outer.ethanol_m_s, diffusivity_ethanol_m2_s(film_k, air.pressure_pa)),
        };
        let open_m2 = cup.area_m2 * (1.0 - cup.covered_fraction);
        let factor = open_m2 * self.tuning.cup_factor;
        let loss_kg_s = vapour_fluxes_kg_m2s(&film, film_k, vapours_pa, air).map(|flux| flux * factor);
        let latent = latent_heats_j_kg(temp_k);
        let evaporation_w = loss_kg_s[0] * latent[0] + loss_kg_s[1] * latent[1];
        let surface_w = open_m2
            * (film.heat_w_m2k * (air.temp_k - temp_k)
                + longwave_w_m2(EMISSIVITY, temp_k, self.forcing.surroundings_k));
        CupFlow {
            loss_kg_s,
            heat_w: surface_w + self.wall_w(temp_k) - evaporation_w,
        }
    }

    /// Heat through the wetted wall; the bottom stands on something and counts as insulated.
    fn wall_w(&self, temp_k: f64) -> f64 {
        let (air, cup) = (&self.forcing.air, self.cup);
        let height_m = (cup.fill_depth_m + cup.freeboard_m - self.gap_m).max(0.001);
        let convective = cylinder_heat_w_m2k(cup.diameter_m, height_m, temp_k, air, self.forcing.air_speed_m_s);
        let area_m2 = std::f64::consts::PI * cup.diameter_m * height_m;
        area_m2
            * (convective * (air.temp_k - temp_k) + longwave_w_m2(WALL_EMISSIVITY, temp_k, self.forcing.surroundings_k))
    }

    fn vapours_pa(&self, temp_k: f64) -> [f64; 2] {
        if temp_k < self.liquid.freezing_point_k() {
            [saturation_pressure_ice_pa(temp_k), 0.0]
        } else {
            self.liquid.vapour_pressures_pa(temp_k)
        }
    }

    /// Temperature at which nothing flows in or out [K].
    pub(super) fn settled_k(&self) -> f64 {
        super::stall::root(|k| self.at(k).heat_w, self.forcing.air.temp_k, -0.1)
    }

    /// Carries the temperature over `duration_s` and returns the new temperature and the mean loss over that time.
    /// Linear in the temperature, so any duration is stable.
    pub(super) fn carry(&self, temp_k: f64, duration_s: f64) -> (f64, [f64; 2]) {
        let capacity_j_k = (self.liquid.total_kg() * self.liquid.heat_capacity_j_kgk()).max(1.0);
        let (here, beside) = (self.at(temp_k), self.at(temp_k - 0.5));
        let decay_1_s = ((beside.heat_w - here.heat_w) / 0.5 / capacity_j_k).max(1e-9);
        let offset_k = here.heat_w / capacity_j_k / decay_1_s;
        let gone = -(-decay_1_s * duration_s).exp_m1();
        let mean_off_k = offset_k * (1.0 - gone / (decay_1_s * duration_s));
        let mean_loss = [0, 1].map(|s| {
            let slope = (here.loss_kg_s[s] - beside.loss_kg_s[s]) / 0.5;
            here.loss_kg_s[s] + slope * mean_off_k
        });
        (temp_k + offset_k * gone, mean_loss)
    }
}
