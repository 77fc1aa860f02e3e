//! Example devices of our own, ready to be sent back as they are.

use super::definition::*;

/// A device with a name to ask for it by.
#[derive(Debug, Clone, PartialEq)]
pub struct Example {
    /// Stable name for programs, for example `shelf-180`.
    pub name: &'static str,
    /// Name for people.
    pub title: &'static str,
    /// What it shows, in a sentence or two.
    pub note: &'static str,
    /// The device itself.
    pub definition: Definition,
}

/// All example devices, the plainest first. Each passes [`super::check`].
pub fn examples() -> Vec<Example> {
    vec![Example {
        name: "shelf-180",
        title: "Shelf 180",
        note: "A device for a shelf, 180 mm tall, with dichloromethane; its tip volume is given.",
        definition: shelf(),
    }]
}

fn shelf() -> Definition {
    Definition {
        name: "Shelf 180".to_string(),
        head: HeadDefinition {
            outer_diameter_mm: 25.0,
            wall_mm: 0.8,
            beak_area_cm2: Some(5.0),
            felt: felt(1.0, 0.5, 0.8),
        },
        tube: tube(5.0, 7.0, 110.0),
        body: body(32.0, 0.8),
        fluid: fluid("dichloromethane", 9.5),
        balance: BalanceDefinition::TipVolume {
            tip_volume_ml: 3.0,
            dip_angle_deg: None,
        },
        dip: DipDefinition {
            seconds: Some(2.0),
            drain_fraction: Some(1.0),
            vapour_reset: Some(0.5),
        },
        conduction_w_k: Some(0.002),
        evaporant: water(),
        lamp: None,
        cup: Some(cup(65.0, 80.0, 11.0)),
        max_temperature_c: None,
    }
}

fn felt(thickness_mm: f64, dry_mass_g: f64, capacity_g: f64) -> FeltDefinition {
    FeltDefinition {
        thickness_mm,
        dry_mass_g,
        capacity_g,
        uptake_g: None,
        critical_share: None,
        exchange_share: None,
    }
}

fn tube(bore_mm: f64, outer_diameter_mm: f64, length_mm: f64) -> TubeDefinition {
    TubeDefinition {
        bore_mm,
        outer_diameter_mm,
        length_mm,
        end_gap_mm: None,
    }
}

fn body(outer_diameter_mm: f64, wall_mm: f64) -> BodyDefinition {
    BodyDefinition {
        outer_diameter_mm,
        wall_mm,
        absorptance: None,
    }
}

fn fluid(name: &str, volume_ml: f64) -> FluidDefinition {
    FluidDefinition {
        name: name.to_string(),
        volume_ml,
        custom: None,
    }
}

fn water() -> EvaporantDefinition {
    EvaporantDefinition {
        name: "water".to_string(),
        strength_abv_pct: None,
        hardness_mg_l: None,
    }
}

fn cup(opening_diameter_mm: f64, depth_mm: f64, reach_mm: f64) -> CupDefinition {
    CupDefinition {
        opening_diameter_mm,
        depth_mm,
        reach_mm,
        covered_fraction: Some(0.0),
        freeboard_mm: None,
        shared_by: None,
    }
}
