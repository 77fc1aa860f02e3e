//! Figures that follow from a definition, for the user's eye: none of them is used by the cycle.

use super::filled::Filled;
use super::shape::{ML, MM, STATED_TEMP_K};
use super::{Device, balance};
use crate::model::air::{
    Air, GAS_CONSTANT_J_MOLK, MOLAR_MASS_WATER_KG_MOL, latent_heat_vaporisation_j_kg, saturation_pressure_pa,
    saturation_slope_pa_k,
};
use crate::model::fluids::WorkingFluid;
use crate::model::transfer::{cylinder_heat_w_m2k, longwave_w_m2, sphere_film};

/// Standard atmosphere [Pa].
const ATMOSPHERE_PA: f64 = 101_325.0;
/// Air in which the time constants are stated: 22 °C [K], its relative humidity and its speed [m/s].
const STILL_ROOM: (f64, f64, f64) = (295.15, 0.5, 0.1);
/// How far the surfaces stand below that air for the coefficients [K]: body and head.
const BELOW_AIR_K: (f64, f64) = (2.0, 5.0);
/// Specific heat of water, for the felt's store [J/(kg K)].
const WATER_HEAT_J_KGK: f64 = 4184.0;

/// Figures that follow from a definition, in practical units.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Derived {
    /// Lifted volume at which it tips [mL].
    pub tip_volume_ml: f64,
    /// Of that, inside the head [mL].
    pub tip_volume_in_head_ml: f64,
    /// Lifted volume at which the meniscus enters the head [mL].
    pub tube_volume_ml: f64,
    /// Lifted volume beyond which there is no cycle: the body has run out or the head is full [mL].
    pub last_volume_ml: f64,
    /// Level at rest above the body's inner bottom [mm].
    pub rest_level_mm: f64,
    /// Level left in the body at the tip [mm].
    pub level_at_tip_mm: f64,
    /// Share of the body that the liquid fills at rest [%].
    pub body_fill_pct: f64,
    /// Share of the body that the liquid would fill at the highest allowed temperature [%].
    pub body_fill_hottest_pct: f64,
    /// Effective lift at the tip: upper meniscus above the level in the body, times the cosine of the lean [mm].
    pub lift_at_tip_mm: f64,
    /// Pressure that lifts so high at 20 °C [Pa].
    pub lift_at_tip_pa: f64,
    /// How much colder than a body at 20 °C the head has to be for that [K]; `None` where the fluid cannot do it there:
    /// the head would have to be colder than the fluid's numbers hold.
    pub lift_at_tip_k: Option<f64>,
    /// Lean at the tip from upright [°]; `None` where the balance was given as a tip volume.
    pub lean_at_tip_deg: Option<f64>,
    /// Lean at which the beak meets the cup [°].
    pub dip_angle_deg: f64,
    /// Time constant of the wet head in a still room [s].
    pub head_time_constant_s: f64,
    /// Time constant of body and tube in a still room [s].
    pub body_time_constant_s: f64,
    /// Heat that goes from body to head in one cycle at 20 °C [J]: vapour for the lift, warm liquid, vapour in the dip;
    /// `None` with [`Self::lift_at_tip_k`].
    pub heat_per_cycle_j: Option<f64>,
    /// Heat resistance of the head's wall and wet felt [K/W].
    pub felt_resistance_k_w: f64,
    /// Evaporating area of the head, beak included [cm²].
    pub wet_area_cm2: f64,
    /// Pressure inside at 20 °C [kPa].
    pub pressure_20c_kpa: f64,
    /// Pressure inside at 20 °C over a standard atmosphere [kPa]; negative is a partial vacuum.
    pub overpressure_20c_kpa: f64,
    /// Highest allowed temperature [°C].
    pub max_temperature_c: f64,
    /// Pressure inside there, over a standard atmosphere [kPa].
    pub overpressure_hottest_kpa: f64,
    /// Liquid in the cup when filled to the brim mark [L].
    pub cup_volume_l: Option<f64>,
    /// Of that, within the beak's reach [L].
    pub cup_within_reach_l: Option<f64>,
}

/// Works the figures out.
pub(super) fn derive(device: &Device, filled: &Filled) -> Derived {
    let (hydrostatics, fluid, tip_m3) = (&device.hydrostatics, &device.fluid, device.tip_volume_m3);
    let vessel = hydrostatics.vessel();
    let lift_pa = balance::lift_pa(hydrostatics, tip_m3, fluid);
    let (pressure_pa, hottest_pa) = (
        fluid.vapour_pressure_pa(STATED_TEMP_K),
        fluid.vapour_pressure_pa(device.max_temp_k),
    );
    let lift_k = lift_k(fluid, pressure_pa - lift_pa);
    let fill_pct =
        100.0 * vessel.content_at_rest_m3(vessel.rest_level_m) / vessel.content_at_rest_m3(vessel.body_top_m());
    let growth = fluid.liquid_density_kg_m3(STATED_TEMP_K) / fluid.liquid_density_kg_m3(device.max_temp_k);
    let cup_l = |depth_m: f64, area_m2: f64| depth_m * area_m2 * 1e3;
    let (head_s, body_s) = time_constants_s(device);
    Derived {
        tip_volume_ml: tip_m3 / ML,
        tip_volume_in_head_ml: (tip_m3 - hydrostatics.tube_volume_m3()).max(0.0) / ML,
        tube_volume_ml: hydrostatics.tube_volume_m3() / ML,
        last_volume_ml: hydrostatics.last_volume_m3() / ML,
        rest_level_mm: vessel.rest_level_m / MM,
        level_at_tip_mm: vessel.level_m(tip_m3) / MM,
        body_fill_pct: fill_pct,
        body_fill_hottest_pct: fill_pct * growth,
        lift_at_tip_mm: hydrostatics.lift_m(tip_m3) / MM,
        lift_at_tip_pa: lift_pa,
        lift_at_tip_k: lift_k,
        lean_at_tip_deg: hydrostatics.leans().then(|| hydrostatics.lean_rad(tip_m3).to_degrees()),
        dip_angle_deg: filled.dip_angle_deg,
        head_time_constant_s: head_s,
        body_time_constant_s: body_s,
        heat_per_cycle_j: lift_k.map(|difference_k| heat_per_cycle_j(device, difference_k)),
        felt_resistance_k_w: device.head.felt_resistance_k_w,
        wet_area_cm2: device.head.wet_area_m2 * 1e4,
        pressure_20c_kpa: pressure_pa / 1e3,
        overpressure_20c_kpa: (pressure_pa - ATMOSPHERE_PA) / 1e3,
        max_temperature_c: device.max_temp_k - 273.15,
        overpressure_hottest_kpa: (hottest_pa - ATMOSPHERE_PA) / 1e3,
        cup_volume_l: device.cup.as_ref().map(|cup| cup_l(cup.fill_depth_m, cup.area_m2)),
        cup_within_reach_l: device.cup.as_ref().map(|cup| cup_l(cup.reach_m, cup.area_m2)),
    }
}

/// How far below 20 °C the fluid's vapour has a pressure [K], within the range of its numbers.
fn lift_k(fluid: &WorkingFluid, head_pa: f64) -> Option<f64> {
    let coldest_pa = fluid.vapour_pressure_pa(fluid.valid_range_k().0);
    (head_pa > coldest_pa).then(|| STATED_TEMP_K - fluid.saturation_temp_k(head_pa))
}

/// Heat stores of head and body when nothing is lifted beyond the tube, felt full of water [J/K].
fn stores_j_k(device: &Device) -> (f64, f64) {
    (
        device.head.dry_capacity_j_k + WATER_HEAT_J_KGK * device.head.felt_capacity_kg,
        device.body.full_capacity_j_k,
    )
}

/// Vapour for the whole lift, warm liquid into the head, and the share of the difference that vapour closes in the dip [J].
fn heat_per_cycle_j(device: &Device, difference_k: f64) -> f64 {
    let (head, body) = stores_j_k(device);
    let in_head_m3 = (device.tip_volume_m3 - device.hydrostatics.tube_volume_m3()).max(0.0);
    let in_head_j_k = device.liquid_heat_j_m3k * in_head_m3;
    let (head, body) = (head + in_head_j_k, body - in_head_j_k);
    let lift_j = device.fluid.latent_per_vapour_volume_j_m3(STATED_TEMP_K) * device.tip_volume_m3;
    lift_j + difference_k * (in_head_j_k + device.dip.vapour_reset * head * body / (head + body))
}

/// Heat store over heat exchange of head and body in a still room [s].
fn time_constants_s(device: &Device) -> (f64, f64) {
    let (head_store, body_store) = stores_j_k(device);
    let (temp_k, humidity, speed_m_s) = STILL_ROOM;
    let air = Air::from_relative_humidity(temp_k, humidity, ATMOSPHERE_PA);
    let body = &device.body;
    let body_k = temp_k - BELOW_AIR_K.0;
    let bulb = sphere_film(body.diameter_m, body_k, [air.vapour_pressure_pa, 0.0], &air, speed_m_s).heat_w_m2k;
    let tube = cylinder_heat_w_m2k(body.tube_diameter_m, body.tube_length_m, body_k, &air, speed_m_s);
    let radiation =
        |emissivity: f64, surface_k: f64| longwave_w_m2(emissivity, surface_k, temp_k) / (temp_k - surface_k);
    let body_w_k = bulb * body.area_m2
        + tube * body.tube_area_m2
        + radiation(body.emissivity, body_k) * (body.area_m2 + body.tube_area_m2);
    let head = &device.head;
    let head_k = temp_k - BELOW_AIR_K.1;
    let film = sphere_film(
        head.wet_diameter_m,
        head_k,
        [saturation_pressure_pa(head_k), 0.0],
        &air,
        speed_m_s,
    );
    // Evaporation answers to the surface temperature like a large heat transfer coefficient.
    let evaporation = film.water_m_s * MOLAR_MASS_WATER_KG_MOL / (GAS_CONSTANT_J_MOLK * head_k)
        * latent_heat_vaporisation_j_kg(head_k)
        * saturation_slope_pa_k(head_k);
    let head_w_k = (film.heat_w_m2k + evaporation + radiation(head.emissivity, head_k)) * head.wet_area_m2;
    (head_store / head_w_k, body_store / body_w_k)
}
