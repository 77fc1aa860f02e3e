//! `GET /v1/fluids`: the working fluids behind the model.

use axum::Json;
use axum::extract::RawQuery;
use axum::http::HeaderMap;
use serde::Serialize;
use utoipa::ToSchema;

use super::notes::Caution;
use super::predictions::rounded;
use crate::http::error::Problem;
use crate::http::negotiate::{self, JsonFormatQuery};
use crate::service;
use crate::service::records::WorkingFluid;

/// 20 °C [K], at which the figures are told.
const STATED_TEMP_K: f64 = 293.15;
/// 0 °C [K], by definition.
const ZERO_CELSIUS_K: f64 = 273.15;
/// Standard gravity [m/s²], by definition.
const GRAVITY_M_S2: f64 = 9.80665;

/// All working fluids.
#[derive(Debug, Serialize, ToSchema)]
pub struct FluidList {
    /// One item a fluid.
    pub items: Vec<FluidItem>,
}

/// A working fluid, with its figures at 20 °C.
#[derive(Debug, Serialize, ToSchema)]
pub struct FluidItem {
    /// Name to send as `device.fluid.name`.
    #[schema(examples("n_pentane"))]
    pub name: String,
    /// Name for people.
    pub title: String,
    /// CAS registry number.
    pub cas: String,
    /// Molar mass [g/mol].
    pub molar_mass_g_mol: f64,
    /// Vapour pressure [kPa].
    pub vapour_pressure_kpa: f64,
    /// Slope of the vapour pressure [Pa/K].
    pub vapour_slope_pa_k: f64,
    /// Liquid density [kg/m³].
    pub liquid_density_kg_m3: f64,
    /// Latent heat of vaporisation [kJ/kg].
    pub latent_heat_kj_kg: f64,
    /// Specific heat of the liquid [J/(kg K)].
    pub liquid_cp_j_kgk: f64,
    /// Surface tension [mN/m].
    pub surface_tension_mn_m: f64,
    /// Height to which one kelvin between body and head lifts the liquid [mm/K].
    pub lift_mm_k: f64,
    /// Boiling point at 101.325 kPa [°C].
    pub boiling_point_c: f64,
    /// Coldest temperature the row holds for [°C].
    pub valid_from_c: f64,
    /// Hottest temperature the row holds for [°C].
    pub valid_to_c: f64,
    /// Hottest temperature a sealed body may see [°C].
    pub max_temperature_c: f64,
    /// Where each number comes from.
    pub sources: Vec<String>,
    /// Hazards and restrictions.
    pub cautions: Vec<Caution>,
}

/// The working fluids
///
/// Figures at 20 °C with their sources, valid ranges and hazards.
#[utoipa::path(get, path = "/v1/fluids", tag = "tables", params(JsonFormatQuery),
    responses((status = 200, description = "All working fluids.", body = FluidList)))]
pub async fn list_fluids(headers: HeaderMap, RawQuery(query): RawQuery) -> Result<Json<FluidList>, Problem> {
    negotiate::json_only(&headers, query.as_deref())?;
    Ok(Json(FluidList::all()))
}

impl FluidList {
    /// The whole table.
    pub fn all() -> Self {
        Self {
            items: service::fluids().iter().map(FluidItem::from).collect(),
        }
    }
}

impl From<&WorkingFluid> for FluidItem {
    fn from(fluid: &WorkingFluid) -> Self {
        let (temp_k, (from_k, to_k)) = (STATED_TEMP_K, fluid.valid_range_k());
        let density_kg_m3 = fluid.liquid_density_kg_m3(temp_k);
        let slope_pa_k = fluid.vapour_slope_pa_k(temp_k);
        Self {
            name: fluid.name.to_string(),
            title: fluid.title.to_string(),
            cas: fluid.cas.to_owned(),
            molar_mass_g_mol: rounded(fluid.molar_mass_kg_mol * 1e3),
            vapour_pressure_kpa: rounded(fluid.vapour_pressure_pa(temp_k) / 1e3),
            vapour_slope_pa_k: rounded(slope_pa_k),
            liquid_density_kg_m3: rounded(density_kg_m3),
            latent_heat_kj_kg: rounded(fluid.latent_heat_j_kg(temp_k) / 1e3),
            liquid_cp_j_kgk: rounded(fluid.liquid_cp_j_kgk(temp_k)),
            surface_tension_mn_m: rounded(fluid.surface_tension_n_m(temp_k) * 1e3),
            lift_mm_k: rounded(slope_pa_k / (density_kg_m3 * GRAVITY_M_S2) * 1e3),
            boiling_point_c: rounded(fluid.saturation_temp_k(101_325.0) - ZERO_CELSIUS_K),
            valid_from_c: rounded(from_k - ZERO_CELSIUS_K),
            valid_to_c: rounded(to_k - ZERO_CELSIUS_K),
            max_temperature_c: rounded(fluid.max_temp_k - ZERO_CELSIUS_K),
            sources: fluid.sources.iter().map(|source| (*source).to_owned()).collect(),
            cautions: fluid.hazards.iter().map(Caution::from).collect(),
        }
    }
}
