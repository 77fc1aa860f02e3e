//! When the device tips: given, or from the masses.

use serde::{Deserialize, Serialize};
use utoipa::ToSchema;

use super::ExtraMass;
use crate::service::records::BalanceDefinition;

/// When the device tips.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(untagged)]
#[schema(discriminator(property_name = "kind", mapping(
    ("tip_volume" = "#/components/schemas/TipVolumeBalance"),
    ("masses" = "#/components/schemas/MassesBalance"),
)))]
pub enum Balance {
    /// At a given lifted volume.
    TipVolume(TipVolumeBalance),
    /// Where the masses about the pivot say.
    Masses(MassesBalance),
}

/// It tips at a lifted volume that was measured or is wanted.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct TipVolumeBalance {
    /// `tip_volume`
    pub kind: TipVolumeKind,
    /// Lifted volume at the tip [mL].
    pub tip_volume_ml: f64,
    /// Angle from upright at which the beak meets the cup [°]. Default 80.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub dip_angle_deg: Option<f64>,
}

/// It tips where the masses about the pivot say.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct MassesBalance {
    /// `masses`
    pub kind: MassesKind,
    /// Pivot above the body's inner bottom [mm].
    pub pivot_height_mm: f64,
    /// Sum of mass times forward offset of everything but the liquid [g mm].
    pub forward_moment_g_mm: f64,
    /// Angle from upright at which the beak meets the cup [°]. Default 80.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub dip_angle_deg: Option<f64>,
    /// Density of the glass [g/cm³]. Default 2.23.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub glass_density_g_cm3: Option<f64>,
    /// Beak, crossbar, hat, ballast: anything not glass, felt or liquid.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    #[schema(max_items = 32)]
    pub extra: Option<Vec<ExtraMass>>,
}

/// Tag of a balance by tip volume.
#[derive(Debug, Clone, Copy, Serialize, Deserialize, ToSchema)]
pub enum TipVolumeKind {
    /// `tip_volume`
    #[serde(rename = "tip_volume")]
    TipVolume,
}

/// Tag of a balance by masses.
#[derive(Debug, Clone, Copy, Serialize, Deserialize, ToSchema)]
pub enum MassesKind {
    /// `masses`
    #[serde(rename = "masses")]
    Masses,
}

impl From<Balance> for BalanceDefinition {
    fn from(wire: Balance) -> Self {
        match wire {
            Balance::TipVolume(TipVolumeBalance {
                tip_volume_ml,
                dip_angle_deg,
                ..
            }) => BalanceDefinition::TipVolume {
                tip_volume_ml,
                dip_angle_deg,
            },
            Balance::Masses(wire) => BalanceDefinition::Masses {
                pivot_height_mm: wire.pivot_height_mm,
                forward_moment_g_mm: wire.forward_moment_g_mm,
                dip_angle_deg: wire.dip_angle_deg,
                glass_density_g_cm3: wire.glass_density_g_cm3,
                extra: wire.extra.unwrap_or_default().into_iter().map(Into::into).collect(),
            },
        }
    }
}

impl From<BalanceDefinition> for Balance {
    fn from(record: BalanceDefinition) -> Self {
        match record {
            BalanceDefinition::TipVolume {
                tip_volume_ml,
                dip_angle_deg,
            } => Balance::TipVolume(TipVolumeBalance {
                kind: TipVolumeKind::TipVolume,
                tip_volume_ml,
                dip_angle_deg,
            }),
            BalanceDefinition::Masses {
                pivot_height_mm,
                forward_moment_g_mm,
                dip_angle_deg,
                glass_density_g_cm3,
                extra,
            } => Balance::Masses(MassesBalance {
                kind: MassesKind::Masses,
                pivot_height_mm,
                forward_moment_g_mm,
                dip_angle_deg,
                glass_density_g_cm3,
                extra: (!extra.is_empty()).then(|| extra.into_iter().map(Into::into).collect()),
            }),
        }
    }
}
