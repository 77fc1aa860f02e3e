//! Figures that follow from a device.

use serde::Serialize;
use utoipa::ToSchema;

use crate::http::v1::predictions::rounded;
use crate::service::StallPoint;
use crate::service::records::Derived;

/// Figures that follow from a device's definition.
#[derive(Debug, Clone, Serialize, ToSchema)]
pub struct DerivedFigures {
    /// Lifted volume at which it tips [mL].
    pub tip_volume_ml: f64,
    /// Of that, inside the head [mL].
    pub tip_volume_in_head_ml: f64,
    /// Lifted volume at which the liquid enters the head [mL].
    pub tube_volume_ml: f64,
    /// Lifted volume beyond which there is no cycle [mL].
    pub last_volume_ml: f64,
    /// Level at rest above the body's inner bottom [mm].
    pub rest_level_mm: f64,
    /// Level left in the body at the tip [mm].
    pub level_at_tip_mm: f64,
    /// Share of the body the liquid fills at rest [%].
    pub body_fill_pct: f64,
    /// Share of the body the liquid would fill at the highest allowed temperature [%].
    pub body_fill_hottest_pct: f64,
    /// Effective lift at the tip [mm].
    pub lift_at_tip_mm: f64,
    /// Pressure that lifts so high at 20 °C [Pa].
    pub lift_at_tip_pa: f64,
    /// How much colder than a body at 20 °C the head has to be for that [K]; null where no head is cold enough within the range of the fluid.
    #[schema(required = true)]
    pub lift_at_tip_k: Option<f64>,
    /// Lean from upright at the tip [°]; null where the tip volume was given.
    #[schema(required = true)]
    pub lean_at_tip_deg: Option<f64>,
    /// Lean at which the beak meets the cup [°].
    pub dip_angle_deg: f64,
    /// Time constant of the wet head in a still room [s].
    pub head_time_constant_s: f64,
    /// Time constant of body and tube in a still room [s].
    pub body_time_constant_s: f64,
    /// Heat from body to head in one cycle at 20 °C [J]; null with `lift_at_tip_k`.
    #[schema(required = true)]
    pub heat_per_cycle_j: Option<f64>,
    /// Heat resistance of the head's wall and wet felt [K/W].
    pub felt_resistance_k_w: f64,
    /// Evaporating area of the head, beak included [cm²].
    pub wet_area_cm2: f64,
    /// Pressure inside at 20 °C [kPa].
    pub pressure_20c_kpa: f64,
    /// The same over a standard atmosphere [kPa]; negative is a partial vacuum.
    pub overpressure_20c_kpa: f64,
    /// Highest allowed temperature [°C].
    pub max_temperature_c: f64,
    /// Pressure inside there, over a standard atmosphere [kPa].
    pub overpressure_hottest_kpa: f64,
    /// Liquid in the cup when filled to the brim mark [L]; null without a cup.
    #[schema(required = true)]
    pub cup_volume_l: Option<f64>,
    /// Of that, within the beak's reach [L]; null without a cup.
    #[schema(required = true)]
    pub cup_within_reach_l: Option<f64>,
}

/// Where the device stops in settled air, without lamp or sun.
#[derive(Debug, Clone, Serialize, ToSchema)]
pub struct StallHumidity {
    /// Air temperature [°C].
    pub air_temperature_c: f64,
    /// Relative humidity above which it stands still [%]; 0 where it would not run even in dry air.
    pub relative_humidity_pct: f64,
}

impl From<Derived> for DerivedFigures {
    fn from(record: Derived) -> Self {
        Self {
            tip_volume_ml: rounded(record.tip_volume_ml),
            tip_volume_in_head_ml: rounded(record.tip_volume_in_head_ml),
            tube_volume_ml: rounded(record.tube_volume_ml),
            last_volume_ml: rounded(record.last_volume_ml),
            rest_level_mm: rounded(record.rest_level_mm),
            level_at_tip_mm: rounded(record.level_at_tip_mm),
            body_fill_pct: rounded(record.body_fill_pct),
            body_fill_hottest_pct: rounded(record.body_fill_hottest_pct),
            lift_at_tip_mm: rounded(record.lift_at_tip_mm),
            lift_at_tip_pa: rounded(record.lift_at_tip_pa),
            lift_at_tip_k: record.lift_at_tip_k.map(rounded),
            lean_at_tip_deg: record.lean_at_tip_deg.map(rounded),
            dip_angle_deg: rounded(record.dip_angle_deg),
            head_time_constant_s: rounded(record.head_time_constant_s),
            body_time_constant_s: rounded(record.body_time_constant_s),
            heat_per_cycle_j: record.heat_per_cycle_j.map(rounded),
            felt_resistance_k_w: rounded(record.felt_resistance_k_w),
            wet_area_cm2: rounded(record.wet_area_cm2),
            pressure_20c_kpa: rounded(record.pressure_20c_kpa),
            overpressure_20c_kpa: rounded(record.overpressure_20c_kpa),
            max_temperature_c: rounded(record.max_temperature_c),
            overpressure_hottest_kpa: rounded(record.overpressure_hottest_kpa),
            cup_volume_l: record.cup_volume_l.map(rounded),
            cup_within_reach_l: record.cup_within_reach_l.map(rounded),
        }
    }
}

impl From<&StallPoint> for StallHumidity {
    fn from(record: &StallPoint) -> Self {
        Self {
            air_temperature_c: record.air_temperature_c,
            relative_humidity_pct: rounded(record.relative_humidity_pct),
        }
    }
}
