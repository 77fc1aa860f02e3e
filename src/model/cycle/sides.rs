//! The air side of the device: what the air takes from the head and gives to the body.

use super::types::{Forcing, Tuning};
use crate::model::air::latent_heat_sublimation_j_kg;
use crate::model::air::saturation_pressure_ice_pa;
use crate::model::device::Device;
use crate::model::fluids::{Liquid, latent_heats_j_kg};
use crate::model::transfer::{cylinder_heat_w_m2k, longwave_w_m2, sphere_film, vapour_fluxes_kg_m2s};

/// What the air takes from the wet head.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub(super) struct HeadFlow {
    /// Net heat taken: evaporation less convection, radiation and absorbed short-wave [W].
    pub(super) heat_w: f64,
    /// Water and ethanol leaving [kg/s]; negative where vapour condenses.
    pub(super) loss_kg_s: [f64; 2],
}

/// The head in one forcing with one felt.
#[derive(Debug, Clone, Copy)]
pub(super) struct HeadSide<'a> {
    pub(super) device: &'a Device,
    pub(super) tuning: &'a Tuning,
    pub(super) forcing: &'a Forcing,
    pub(super) felt: Liquid,
    /// Share of the surface that is wet, 0-1.
    pub(super) wetness: f64,
    /// Share of a clean felt's evaporation that scale leaves, 0-1.
    pub(super) clean_share: f64,
    /// The felt is ice.
    pub(super) iced: bool,
}

impl HeadSide<'_> {
    /// Flow with the felt's outer surface at `surface_k`.
    pub(super) fn at_surface(&self, surface_k: f64) -> HeadFlow {
        let air = &self.forcing.air;
        let vapours_pa = self.surface_vapours_pa(surface_k);
        let head = &self.device.head;
        let film = sphere_film(
            head.wet_diameter_m,
            surface_k,
            vapours_pa,
            air,
            self.forcing.air_speed_m_s,
        );
        let film_k = 0.5 * (surface_k + air.temp_k);
        let wet_m2 = head.wet_area_m2 * self.wetness * self.clean_share * self.tuning.transfer_factor;
        let loss_kg_s = vapour_fluxes_kg_m2s(&film, film_k, vapours_pa, air).map(|flux| flux * wet_m2);
        let latent = self.latent_heats_j_kg(surface_k);
        let dry_w_m2 = self.tuning.transfer_factor * film.heat_w_m2k * (air.temp_k - surface_k)
            + longwave_w_m2(head.emissivity, surface_k, self.forcing.surroundings_k);
        let heat_w = loss_kg_s[0] * latent[0] + loss_kg_s[1] * latent[1]
            - head.wet_area_m2 * dry_w_m2
            - self.forcing.head_absorbed_w;
        HeadFlow { heat_w, loss_kg_s }
    }

    /// Flow with the vapour side at `node_k`: the surface is colder by heat times the resistance of wall and felt.
    /// Returns the flow and the surface temperature [K].
    pub(super) fn at_node(&self, node_k: f64) -> (HeadFlow, f64) {
        self.at_node_near(node_k, node_k)
    }

    /// The same, searched from a surface temperature near the answer.
    pub(super) fn at_node_near(&self, node_k: f64, near_k: f64) -> (HeadFlow, f64) {
        let resistance = self.device.head.felt_resistance_k_w;
        let mut surface_k = near_k;
        let mut older: Option<(f64, f64)> = None;
        for _ in 0..20 {
            let flow = self.at_surface(surface_k);
            let miss_k = surface_k + resistance * flow.heat_w - node_k;
            if miss_k.abs() < 1e-8 {
                return (flow, surface_k);
            }
            // One degree of surface moves the miss by little more than a degree; the secant knows better from then on.
            let slope = older.map_or(1.05, |(k, miss)| (miss_k - miss) / (surface_k - k));
            older = Some((surface_k, miss_k));
            surface_k -= miss_k / if slope.is_finite() && slope > 0.2 { slope } else { 1.05 };
        }
        (self.at_surface(surface_k), surface_k)
    }

    fn surface_vapours_pa(&self, surface_k: f64) -> [f64; 2] {
        if self.solid(surface_k) {
            [saturation_pressure_ice_pa(surface_k), 0.0]
        } else {
            self.felt.vapour_pressures_pa(surface_k)
        }
    }

    fn solid(&self, surface_k: f64) -> bool {
        self.iced && surface_k < 273.16
    }

    fn latent_heats_j_kg(&self, surface_k: f64) -> [f64; 2] {
        if self.solid(surface_k) {
            [latent_heat_sublimation_j_kg(surface_k), 0.0]
        } else {
            latent_heats_j_kg(surface_k)
        }
    }
}

/// Net heat the body and the tube between the bulbs gain from air, surroundings, sun and lamp at `body_k` [W].
pub(super) fn body_gain_w(device: &Device, tuning: &Tuning, forcing: &Forcing, body_k: f64) -> f64 {
    let (air, body, speed) = (&forcing.air, &device.body, forcing.air_speed_m_s);
    let dry = [air.vapour_pressure_pa, 0.0];
    let bulb_w_m2k = sphere_film(body.diameter_m, body_k, dry, air, speed).heat_w_m2k;
    let tube_w_m2k = cylinder_heat_w_m2k(body.tube_diameter_m, body.tube_length_m, body_k, air, speed);
    let convective_w_k = tuning.transfer_factor * (bulb_w_m2k * body.area_m2 + tube_w_m2k * body.tube_area_m2);
    let radiant_w = (body.area_m2 + body.tube_area_m2) * longwave_w_m2(body.emissivity, body_k, forcing.surroundings_k);
    convective_w_k * (air.temp_k - body_k) + radiant_w + forcing.body_absorbed_w
}
