//! The evaporants a felt can be wetted with.

use super::hazards::Hazard;
use crate::model::notes::Severity;
use std::borrow::Cow;

/// What wets the felt and fills the cup.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum EvaporantKind {
    /// Plain water.
    Water,
    /// Ethanol and water, by strength.
    EthanolWater,
}

/// One evaporant of the table.
#[derive(Debug, Clone, PartialEq)]
pub struct EvaporantRow {
    /// Which one it is.
    pub kind: EvaporantKind,
    /// Stable name for programs.
    pub name: &'static str,
    /// Name for people.
    pub title: &'static str,
    /// Lowest and highest strength [% ABV at 20 °C].
    pub abv_range_pct: (f64, f64),
    /// Lowest and highest temperature of the liquid [K] for which the row holds.
    pub valid_range_k: (f64, f64),
    /// Where the numbers come from.
    pub sources: &'static [&'static str],
    /// Hazard notes.
    pub hazards: &'static [Hazard],
}

/// All evaporants.
pub fn evaporants() -> &'static [EvaporantRow] {
    &ROWS
}

static ROWS: [EvaporantRow; 2] = [
    EvaporantRow {
        kind: EvaporantKind::Water,
        name: "water",
        title: "Water",
        abv_range_pct: (0.0, 0.0),
        valid_range_k: (233.15, 343.15),
        sources: &[
            "vapour pressure: [HylandWexler1983], below 0 °C [MurphyKoop2005]",
            "latent heat: fitted to [WagnerPruss2002] and [MurphyKoop2005]",
            "density: [OIML1975] at strength 0",
        ],
        hazards: &[Hazard {
            code: "standing_water",
            severity: Severity::Warning,
            text: Cow::Borrowed(
                "Standing water between 20 and 45 °C can grow bacteria. Clean cup and felt regularly and follow \
                 local health rules.",
            ),
        }],
    },
    EvaporantRow {
        kind: EvaporantKind::EthanolWater,
        name: "ethanol_water",
        title: "Ethanol and water, by strength",
        abv_range_pct: (0.0, 100.0),
        valid_range_k: (253.15, 343.15),
        sources: &[
            "vapour pressures: van Laar [VanLaar1910] fitted to [Gmehling1993] at 25 °C, pure ethanol [Schroeder2014]",
            "latent heats: [WagnerPruss2002], [Schroeder2014]; heat of mixing ignored",
            "density and strength by volume: [OIML1975]",
            "freezing point: [Melinder2010]",
            "flash point: [EngineeringToolbox2005]",
        ],
        hazards: &[Hazard {
            code: "flammable_evaporant",
            severity: Severity::Warning,
            text: Cow::Borrowed(
                "Ethanol and water above its flash point gives vapour that a lamp, spark or sun-heated surface can \
                 light. Keep ignition away, air the place, and follow local fire codes and licensed practice.",
            ),
        }],
    },
];
