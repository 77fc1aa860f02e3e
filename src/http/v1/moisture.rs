//! Named rules for a room's own vapour.

use serde::{Deserialize, Serialize};
use utoipa::ToSchema;

use crate::service::records::MoistureRule;

/// Where a room's own vapour comes from. The rules lie 20 to 30 points of relative humidity apart in winter.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(untagged)]
#[schema(discriminator(property_name = "rule", mapping(
    ("none" = "#/components/schemas/MoistureNone"),
    ("given_excess" = "#/components/schemas/MoistureGivenExcess"),
    ("iso_13788" = "#/components/schemas/MoistureIso13788"),
    ("field_survey" = "#/components/schemas/MoistureFieldSurvey"),
)))]
pub enum Moisture {
    /// Nothing is added.
    None(MoistureNone),
    /// The same excess all the time.
    GivenExcess(MoistureGivenExcess),
    /// A class of EN ISO 13788.
    Iso13788(MoistureIso13788),
    /// A survey of houses.
    FieldSurvey(MoistureFieldSurvey),
}

/// Nothing is added: the outdoor air, warmed.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct MoistureNone {
    /// `none`
    pub rule: NoneRule,
}

/// The same excess all the time.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct MoistureGivenExcess {
    /// `given_excess`
    pub rule: GivenExcessRule,
    /// Vapour above that of the outdoor air [g/m³ of room air].
    #[schema(minimum = -10, maximum = 30)]
    pub excess_g_m3: f64,
}

/// The upper bound of a class of EN ISO 13788, annex A: 2, 4, 6, 8 and 10 g/m³ at 0 °C outdoors and below, falling to
/// nothing at 20 °C.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct MoistureIso13788 {
    /// `iso_13788`
    pub rule: Iso13788Rule,
    /// 1 storage, 2 offices and shops, 3 dwellings few live in, 4 dwellings many live in, sports halls, kitchens,
    /// 5 laundries, breweries, pools.
    #[schema(minimum = 1, maximum = 5)]
    pub class: u8,
}

/// What one house in ten of a survey exceeds: 4 g/m³ at 5 °C outdoors and below, 1.5 g/m³ at 15 °C and above.
#[derive(Debug, Clone, Serialize, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct MoistureFieldSurvey {
    /// `field_survey`
    pub rule: FieldSurveyRule,
}

tag!(NoneRule, None, "none");
tag!(GivenExcessRule, GivenExcess, "given_excess");
tag!(Iso13788Rule, Iso13788, "iso_13788");
tag!(FieldSurveyRule, FieldSurvey, "field_survey");

impl From<Moisture> for MoistureRule {
    fn from(wire: Moisture) -> Self {
        match wire {
            Moisture::None(_) => MoistureRule::None,
            Moisture::GivenExcess(given) => MoistureRule::GivenExcess {
                excess_g_m3: given.excess_g_m3,
            },
            Moisture::Iso13788(class) => MoistureRule::Iso13788 { class: class.class },
            Moisture::FieldSurvey(_) => MoistureRule::FieldSurvey,
        }
    }
}
