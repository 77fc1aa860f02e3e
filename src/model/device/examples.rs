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
    vec![
        Example {
            name: "shelf-180",
            title: "Shelf 180",
            note: "A device for a shelf, about 140 mm of glass, with dichloromethane; its tip volume is given.",
            definition: shelf(),
        },
        Example {
            name: "window-220",
            title: "Window 220",
            note: "A device for a shop window, 220 mm tall, with n-pentane: the lighter liquid lifts far for each kelvin, but \
                   it is extremely flammable.",
            definition: window(),
        },
        Example {
            name: "foyer-900",
            title: "Foyer 900",
            note: "A device for a foyer, 0.9 m tall, with n-pentane. It stalls at a lower humidity than the smaller ones: \
                   the lift grows with the height, so the head has to be over 2 K colder than the body instead of half a \
                   kelvin, and moist air cannot hold that difference.",
            definition: foyer(),
        },
        Example {
            name: "shelf-180-masses",
            title: "Shelf 180, balanced by its masses",
            note: "The shelf device with its balance given as masses about the pivot: the tip volume follows from them, and \
                   the lean before the tip is counted.",
            definition: shelf_by_masses(),
        },
    ]
}

fn shelf() -> Definition {
    Definition {
        name: "Shelf 180".to_string(),
        head: head([25.0, 0.8], 5.0, felt(1.0, 0.5, 0.8)),
        tube: tube(5.0, 7.0, 110.0),
        body: body(32.0, 0.8),
        fluid: fluid("dichloromethane", 9.5),
        balance: tips_at(3.0),
        dip: dip(2.0),
        conduction_w_k: Some(0.002),
        evaporant: water(),
        lamp: None,
        cup: Some(cup(65.0, 80.0, 11.0)),
        max_temperature_c: None,
    }
}

fn shelf_by_masses() -> Definition {
    let extra = |mass_g: f64, height_mm: f64| ExtraMass { mass_g, height_mm };
    Definition {
        name: "Shelf 180, balanced by its masses".to_string(),
        balance: BalanceDefinition::Masses {
            pivot_height_mm: 55.0,
            forward_moment_g_mm: 16.0,
            dip_angle_deg: None,
            glass_density_g_cm3: None,
            // Crossbar at the pivot, beak at the head.
            extra: vec![extra(1.5, 55.0), extra(0.4, 120.0)],
        },
        ..shelf()
    }
}

fn window() -> Definition {
    Definition {
        name: "Window 220".to_string(),
        head: head([30.0, 1.0], 6.0, felt(1.0, 0.7, 1.1)),
        tube: tube(5.5, 8.0, 190.0),
        body: body(42.0, 1.0),
        fluid: fluid("n_pentane", 21.0),
        balance: tips_at(6.0),
        cup: Some(cup(70.0, 90.0, 13.0)),
        ..shelf()
    }
}

fn foyer() -> Definition {
    Definition {
        name: "Foyer 900".to_string(),
        head: head([70.0, 2.0], 20.0, felt(2.0, 6.0, 9.5)),
        tube: tube(8.0, 12.0, 830.0),
        body: body(100.0, 2.5),
        fluid: fluid("n_pentane", 240.0),
        balance: tips_at(60.0),
        dip: dip(4.0),
        conduction_w_k: Some(0.004),
        cup: Some(cup(160.0, 120.0, 25.0)),
        ..shelf()
    }
}

fn head([outer_diameter_mm, wall_mm]: [f64; 2], beak_area_cm2: f64, felt: FeltDefinition) -> HeadDefinition {
    HeadDefinition {
        outer_diameter_mm,
        wall_mm,
        beak_area_cm2: Some(beak_area_cm2),
        felt,
    }
}

fn tips_at(tip_volume_ml: f64) -> BalanceDefinition {
    BalanceDefinition::TipVolume {
        tip_volume_ml,
        dip_angle_deg: None,
    }
}

fn dip(seconds: f64) -> DipDefinition {
    DipDefinition {
        seconds: Some(seconds),
        drain_fraction: Some(1.0),
        vapour_reset: Some(0.5),
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
        absorptance: None,
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
        scale_effect_pct: None,
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
