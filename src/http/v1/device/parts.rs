//! The parts whose fields are those of the device room's records.

use serde::{Deserialize, Serialize};
use utoipa::ToSchema;

use crate::http::v1::schedule::Schedule;
use crate::service::records;
use crate::service::records::{
    BodyDefinition, CupDefinition, DipDefinition, EvaporantDefinition, FeltDefinition, TubeDefinition,
};

/// The head bulb.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Head {
    /// Outer diameter of the glass [mm].
    pub outer_diameter_mm: f64,
    /// Wall thickness [mm].
    pub wall_mm: f64,
    /// Wet area of the beak, outside the sphere [cm²]. Default 0.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub beak_area_cm2: Option<f64>,
    /// The felt cover.
    pub felt: Felt,
}

mirror! {
    /// The felt on the head.
    Felt = FeltDefinition {
        /// Thickness when wet [mm].
        thickness_mm: f64,
        /// Mass when dry [g].
        dry_mass_g: f64,
        /// Liquid it holds when full [g of water].
        capacity_g: f64,
        /// Most liquid taken up in one dip [g]. Default 1/16 of the capacity.
        #[serde(default, skip_serializing_if = "Option::is_none")]
        uptake_g: Option<f64>,
        /// Share of the capacity below which the surface starts to dry. Default 0.3.
        #[serde(default, skip_serializing_if = "Option::is_none")]
        critical_share: Option<f64>,
        /// Share of the felt's liquid exchanged with the cup in each dip. Default 0.05.
        #[serde(default, skip_serializing_if = "Option::is_none")]
        exchange_share: Option<f64>,
        /// Share of short-wave radiation the wet felt absorbs; used by places with sun. Default 0.7.
        #[serde(default, skip_serializing_if = "Option::is_none")]
        absorptance: Option<f64>,
    }
}

mirror! {
    /// The tube between the bulbs.
    Tube = TubeDefinition {
        /// Inner diameter [mm].
        bore_mm: f64,
        /// Outer diameter [mm].
        outer_diameter_mm: f64,
        /// From the body's inner bottom to the head's bottom [mm].
        length_mm: f64,
        /// Gap between the tube's lower end and the body's inner bottom [mm]. Default 3.
        #[serde(default, skip_serializing_if = "Option::is_none")]
        end_gap_mm: Option<f64>,
    }
}

mirror! {
    /// The body bulb.
    Body = BodyDefinition {
        /// Outer diameter of the glass [mm].
        outer_diameter_mm: f64,
        /// Wall thickness [mm].
        wall_mm: f64,
        /// Share of short-wave radiation the body absorbs; used by places with sun. Default 0.1.
        #[serde(default, skip_serializing_if = "Option::is_none")]
        absorptance: Option<f64>,
    }
}

mirror! {
    /// What happens in a dip.
    Dip = DipDefinition {
        /// Time from letting go to upright again [s]. Default 2.
        #[serde(default, skip_serializing_if = "Option::is_none")]
        seconds: Option<f64>,
        /// Share of the head's liquid that drains in a dip. Default 1.
        #[serde(default, skip_serializing_if = "Option::is_none")]
        drain_fraction: Option<f64>,
        /// Share of the temperature difference closed by vapour in a dip. Default 0.5.
        #[serde(default, skip_serializing_if = "Option::is_none")]
        vapour_reset: Option<f64>,
    }
}

mirror! {
    /// What the felt is wetted with.
    Evaporant = EvaporantDefinition {
        /// A name of `/v1/evaporants`.
        #[schema(examples("water"), max_length = 80)]
        name: String,
        /// Strength of `ethanol_water` [% by volume at 20 °C].
        #[serde(default, skip_serializing_if = "Option::is_none")]
        strength_abv_pct: Option<f64>,
        /// Hardness of the water [mg/L as CaCO3], for scale.
        #[serde(default, skip_serializing_if = "Option::is_none")]
        hardness_mg_l: Option<f64>,
        /// Evaporation lost for each mg/cm² of scale on the felt [%], down to 30 % of a clean felt. Default 1.
        #[serde(default, skip_serializing_if = "Option::is_none")]
        scale_effect_pct: Option<f64>,
    }
}

mirror! {
    /// A mass that is neither glass, felt nor liquid.
    ExtraMass = RecordOfExtraMass {
        /// Mass [g].
        mass_g: f64,
        /// Height above the body's inner bottom [mm].
        height_mm: f64,
    }
}

type RecordOfExtraMass = records::ExtraMass;

mirror! {
    /// The cup.
    Cup = CupDefinition {
        /// Diameter of the opening [mm].
        opening_diameter_mm: f64,
        /// Depth from rim to bottom [mm].
        depth_mm: f64,
        /// How far the level may fall from the brim mark before the beak misses it [mm].
        reach_mm: f64,
        /// Share of the opening that is covered. Default 0.
        #[serde(default, skip_serializing_if = "Option::is_none")]
        covered_fraction: Option<f64>,
        /// Brim mark below the rim [mm]. Default 5.
        #[serde(default, skip_serializing_if = "Option::is_none")]
        freeboard_mm: Option<f64>,
        /// Devices of this kind that drink from this cup. Default 1.
        #[serde(default, skip_serializing_if = "Option::is_none")]
        shared_by: Option<u32>,
    }
}

/// A lamp on one end.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Lamp {
    /// The end it shines on.
    pub on: LampEnd,
    /// Power absorbed there while lit [W].
    pub absorbed_w: f64,
    /// When it is lit. Default: always.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub lit: Option<Schedule>,
}

/// One end of the device.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum LampEnd {
    /// The lower bulb.
    Body,
    /// The felted bulb.
    Head,
}
