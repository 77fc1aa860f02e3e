//! Every number of a definition against its own bounds, whatever the others are.

use super::bounds::*;
use super::definition::*;
use super::faults::Faults;

/// Checks names and numbers one by one.
pub(super) fn check(definition: &Definition, faults: &mut Faults) {
    name(&definition.name, faults);
    head(&definition.head, faults);
    tube(&definition.tube, faults);
    faults.number(BODY_OUTER_DIAMETER_MM, definition.body.outer_diameter_mm);
    faults.number(BODY_WALL_MM, definition.body.wall_mm);
    faults.optional(BODY_ABSORPTANCE, definition.body.absorptance);
    faults.number(FLUID_VOLUME_ML, definition.fluid.volume_ml);
    balance(&definition.balance, faults);
    faults.optional(DIP_SECONDS, definition.dip.seconds);
    faults.optional(DRAIN_FRACTION, definition.dip.drain_fraction);
    faults.optional(VAPOUR_RESET, definition.dip.vapour_reset);
    faults.optional(CONDUCTION_W_K, definition.conduction_w_k);
    faults.optional(STRENGTH_ABV_PCT, definition.evaporant.strength_abv_pct);
    faults.optional(HARDNESS_MG_L, definition.evaporant.hardness_mg_l);
    faults.optional(SCALE_EFFECT_PCT, definition.evaporant.scale_effect_pct);
    faults.optional(LAMP_ABSORBED_W, definition.lamp.as_ref().map(|lamp| lamp.absorbed_w));
    faults.optional(MAX_TEMPERATURE_C, definition.max_temperature_c);
    if let Some(cup) = &definition.cup {
        cup_sizes(cup, faults);
    }
}

fn name(name: &str, faults: &mut Faults) {
    let characters = name.chars().count();
    if name.trim().is_empty() || characters > NAME_MAX_CHARACTERS {
        let detail = format!("expected 1 to {NAME_MAX_CHARACTERS} characters, found {characters}; shorten or fill it");
        faults.add("name", "length", detail);
    }
    if name.chars().any(char::is_control) {
        faults.add(
            "name",
            "control_character",
            "expected printable characters, found a control character; remove it",
        );
    }
}

fn head(head: &HeadDefinition, faults: &mut Faults) {
    faults.number(HEAD_OUTER_DIAMETER_MM, head.outer_diameter_mm);
    faults.number(HEAD_WALL_MM, head.wall_mm);
    faults.optional(BEAK_AREA_CM2, head.beak_area_cm2);
    faults.number(FELT_THICKNESS_MM, head.felt.thickness_mm);
    faults.number(FELT_DRY_MASS_G, head.felt.dry_mass_g);
    faults.number(FELT_CAPACITY_G, head.felt.capacity_g);
    faults.optional(FELT_UPTAKE_G, head.felt.uptake_g);
    faults.optional(FELT_CRITICAL_SHARE, head.felt.critical_share);
    faults.optional(FELT_EXCHANGE_SHARE, head.felt.exchange_share);
    faults.optional(FELT_ABSORPTANCE, head.felt.absorptance);
}

fn tube(tube: &TubeDefinition, faults: &mut Faults) {
    faults.number(TUBE_BORE_MM, tube.bore_mm);
    faults.number(TUBE_OUTER_DIAMETER_MM, tube.outer_diameter_mm);
    faults.number(TUBE_LENGTH_MM, tube.length_mm);
    faults.optional(TUBE_END_GAP_MM, tube.end_gap_mm);
}

fn balance(balance: &BalanceDefinition, faults: &mut Faults) {
    match balance {
        BalanceDefinition::TipVolume {
            tip_volume_ml,
            dip_angle_deg,
        } => {
            faults.number(TIP_VOLUME_ML, *tip_volume_ml);
            faults.optional(DIP_ANGLE_DEG, *dip_angle_deg);
        }
        BalanceDefinition::Masses {
            pivot_height_mm,
            forward_moment_g_mm,
            dip_angle_deg,
            glass_density_g_cm3,
            extra,
        } => {
            faults.number(PIVOT_HEIGHT_MM, *pivot_height_mm);
            faults.number(FORWARD_MOMENT_G_MM, *forward_moment_g_mm);
            faults.optional(DIP_ANGLE_DEG, *dip_angle_deg);
            faults.optional(GLASS_DENSITY_G_CM3, *glass_density_g_cm3);
            extra_masses(extra, faults);
        }
    }
}

fn extra_masses(extra: &[ExtraMass], faults: &mut Faults) {
    if extra.len() > EXTRA_MASSES_MAX {
        let detail = format!(
            "expected at most {EXTRA_MASSES_MAX} masses, found {}; join some of them",
            extra.len()
        );
        faults.add("balance/extra", "too_many", detail);
    }
    for (index, mass) in extra.iter().enumerate().take(EXTRA_MASSES_MAX) {
        faults.number_at(&format!("balance/extra/{index}/mass_g"), EXTRA_MASS_G, mass.mass_g);
        faults.number_at(
            &format!("balance/extra/{index}/height_mm"),
            EXTRA_HEIGHT_MM,
            mass.height_mm,
        );
    }
}

fn cup_sizes(cup: &CupDefinition, faults: &mut Faults) {
    faults.number(CUP_OPENING_DIAMETER_MM, cup.opening_diameter_mm);
    faults.number(CUP_DEPTH_MM, cup.depth_mm);
    faults.number(CUP_REACH_MM, cup.reach_mm);
    faults.optional(CUP_COVERED_FRACTION, cup.covered_fraction);
    faults.optional(CUP_FREEBOARD_MM, cup.freeboard_mm);
    faults.optional(CUP_SHARED_BY, cup.shared_by.map(f64::from));
}
