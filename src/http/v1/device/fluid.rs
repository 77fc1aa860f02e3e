//! The working fluid: by name, or by its constants.

use serde::{Deserialize, Serialize};
use utoipa::ToSchema;

use crate::service::records;
use crate::service::records::{CustomVapourPressure, FluidDefinition};

/// The working fluid.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Fluid {
    /// A name of `/v1/fluids`, or `custom`.
    #[schema(examples("dichloromethane"), max_length = 80)]
    pub name: String,
    /// Volume at 20 °C [mL].
    pub volume_ml: f64,
    /// The constants, for `custom` only.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub custom: Option<CustomFluid>,
}

/// A working fluid by its constants.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct CustomFluid {
    /// Name for the answer.
    #[schema(min_length = 1, max_length = 80)]
    pub name: String,
    /// Molar mass [g/mol].
    #[schema(minimum = 10, maximum = 500)]
    pub molar_mass_g_mol: f64,
    /// Vapour pressure: Antoine's constants, or three points.
    pub vapour_pressure: VapourPressure,
    /// Liquid density at 20 °C [kg/m³].
    #[schema(minimum = 400, maximum = 3500)]
    pub density_kg_m3: f64,
    /// Thermal expansion of the liquid by volume [1/K].
    #[schema(minimum = 0.0001, maximum = 0.005)]
    pub expansion_per_k: f64,
    /// Latent heat of vaporisation near 20 °C [kJ/kg].
    #[schema(minimum = 40, maximum = 2600)]
    pub latent_kj_kg: f64,
    /// Specific heat of the liquid [J/(kg K)].
    #[schema(minimum = 500, maximum = 5000)]
    pub liquid_cp_j_kgk: f64,
    /// Surface tension [mN/m].
    #[schema(minimum = 3, maximum = 80)]
    pub surface_tension_mn_m: f64,
    /// Coldest temperature the constants hold for [°C].
    #[schema(minimum = -80, maximum = 20)]
    pub valid_from_c: f64,
    /// Hottest temperature the constants hold for [°C].
    #[schema(minimum = 20, maximum = 150)]
    pub valid_to_c: f64,
    /// Hottest temperature the sealed body may see [°C]; not above `valid_to_c`.
    #[schema(minimum = 20, maximum = 150)]
    pub max_temp_c: f64,
    /// Whether the liquid is flammable.
    pub flammable: bool,
    /// Whether it is toxic.
    pub toxic: bool,
    /// Anything else to show beside results.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(max_length = 500)]
    pub note: Option<String>,
}

/// How the vapour pressure of a custom fluid is given.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(untagged)]
#[schema(discriminator(property_name = "kind", mapping(
    ("antoine" = "#/components/schemas/AntoineVapourPressure"),
    ("points" = "#/components/schemas/PointsVapourPressure"),
)))]
pub enum VapourPressure {
    /// By constants.
    Antoine(AntoineVapourPressure),
    /// By points.
    Points(PointsVapourPressure),
}

/// log10 of the pressure in kPa = a - b / (c + temperature in °C).
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct AntoineVapourPressure {
    /// `antoine`
    pub kind: AntoineKind,
    /// Constant a.
    #[schema(minimum = 3, maximum = 12)]
    pub a: f64,
    /// Constant b [K].
    #[schema(minimum = 300, maximum = 4000)]
    pub b: f64,
    /// Constant c [K].
    #[schema(minimum = 120, maximum = 320)]
    pub c: f64,
}

/// A curve through three points at least 5 K apart.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct PointsVapourPressure {
    /// `points`
    pub kind: PointsKind,
    /// The three points.
    #[schema(min_items = 3, max_items = 3, value_type = Vec<VapourPoint>)]
    pub points: [VapourPoint; 3],
}

/// One point of a vapour pressure curve.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct VapourPoint {
    /// Temperature [°C].
    #[schema(minimum = -80, maximum = 200)]
    pub temp_c: f64,
    /// Vapour pressure [kPa].
    #[schema(minimum = 0.01, maximum = 3000)]
    pub pressure_kpa: f64,
}

/// Tag of a vapour pressure by Antoine's constants.
#[derive(Debug, Clone, Copy, Serialize, Deserialize, ToSchema)]
pub enum AntoineKind {
    /// `antoine`
    #[serde(rename = "antoine")]
    Antoine,
}

/// Tag of a vapour pressure by points.
#[derive(Debug, Clone, Copy, Serialize, Deserialize, ToSchema)]
pub enum PointsKind {
    /// `points`
    #[serde(rename = "points")]
    Points,
}

impl From<Fluid> for FluidDefinition {
    fn from(wire: Fluid) -> Self {
        Self {
            name: wire.name,
            volume_ml: wire.volume_ml,
            custom: wire.custom.map(Into::into),
        }
    }
}

impl From<FluidDefinition> for Fluid {
    fn from(record: FluidDefinition) -> Self {
        Self {
            name: record.name,
            volume_ml: record.volume_ml,
            custom: record.custom.map(Into::into),
        }
    }
}

impl From<VapourPressure> for CustomVapourPressure {
    fn from(wire: VapourPressure) -> Self {
        match wire {
            VapourPressure::Antoine(AntoineVapourPressure { a, b, c, .. }) => CustomVapourPressure::Antoine { a, b, c },
            VapourPressure::Points(wire) => {
                CustomVapourPressure::Points(wire.points.map(|point| (point.temp_c, point.pressure_kpa)))
            }
        }
    }
}

impl From<CustomVapourPressure> for VapourPressure {
    fn from(record: CustomVapourPressure) -> Self {
        let point = |(temp_c, pressure_kpa)| VapourPoint { temp_c, pressure_kpa };
        match record {
            CustomVapourPressure::Antoine { a, b, c } => VapourPressure::Antoine(AntoineVapourPressure {
                kind: AntoineKind::Antoine,
                a,
                b,
                c,
            }),
            CustomVapourPressure::Points(points) => VapourPressure::Points(PointsVapourPressure {
                kind: PointsKind::Points,
                points: points.map(point),
            }),
        }
    }
}

impl From<CustomFluid> for records::CustomFluid {
    fn from(wire: CustomFluid) -> Self {
        Self {
            name: wire.name,
            molar_mass_g_mol: wire.molar_mass_g_mol,
            vapour_pressure: wire.vapour_pressure.into(),
            density_kg_m3: wire.density_kg_m3,
            expansion_per_k: wire.expansion_per_k,
            latent_kj_kg: wire.latent_kj_kg,
            liquid_cp_j_kgk: wire.liquid_cp_j_kgk,
            surface_tension_mn_m: wire.surface_tension_mn_m,
            valid_from_c: wire.valid_from_c,
            valid_to_c: wire.valid_to_c,
            max_temp_c: wire.max_temp_c,
            flammable: wire.flammable,
            toxic: wire.toxic,
            note: wire.note.unwrap_or_default(),
        }
    }
}

impl From<records::CustomFluid> for CustomFluid {
    fn from(record: records::CustomFluid) -> Self {
        Self {
            name: record.name,
            molar_mass_g_mol: record.molar_mass_g_mol,
            vapour_pressure: record.vapour_pressure.into(),
            density_kg_m3: record.density_kg_m3,
            expansion_per_k: record.expansion_per_k,
            latent_kj_kg: record.latent_kj_kg,
            liquid_cp_j_kgk: record.liquid_cp_j_kgk,
            surface_tension_mn_m: record.surface_tension_mn_m,
            valid_from_c: record.valid_from_c,
            valid_to_c: record.valid_to_c,
            max_temp_c: record.max_temp_c,
            flammable: record.flammable,
            toxic: record.toxic,
            note: (!record.note.is_empty()).then_some(record.note),
        }
    }
}
