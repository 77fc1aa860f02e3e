//! Checks across several lengths, and the vessel they make.

use super::definition::{CupDefinition, Definition};
use super::faults::Faults;
use super::filled::Filled;
use super::sphere::Sphere;
use super::vessel::Vessel;
use crate::model::fluids::WorkingFluid;

/// Metres in a millimetre.
pub(super) const MM: f64 = 1e-3;
/// Cubic metres in a millilitre.
pub(super) const ML: f64 = 1e-6;
/// Temperature at which volumes, masses and heats are stated [K]: 20 °C.
pub(super) const STATED_TEMP_K: f64 = 293.15;
/// Thinnest tube wall [mm].
pub const TUBE_WALL_MIN_MM: f64 = 0.2;
/// Widest tube as a share of a bulb's inner diameter.
pub const TUBE_WIDEST_SHARE: f64 = 0.7;
/// Density of the felt's fibres [kg/m³]: wool 1300, cotton 1550 [MortonHearle2008]; the lighter leaves the least room.
const FIBRE_DENSITY_KG_M3: f64 = 1300.0;
/// Standard gravity [m/s²].
pub(super) const GRAVITY_M_S2: f64 = 9.80665;

/// Inner diameters of head and body [mm].
fn inner_diameters_mm(definition: &Definition) -> (f64, f64) {
    let (head, body) = (&definition.head, &definition.body);
    (
        head.outer_diameter_mm - 2.0 * head.wall_mm,
        body.outer_diameter_mm - 2.0 * body.wall_mm,
    )
}

/// Checks whether walls, tube, felt and cup fit together.
pub(super) fn check(definition: &Definition, filled: &Filled, faults: &mut Faults) {
    walls(definition, faults);
    tube(definition, faults);
    end_gap(definition, filled, faults);
    felt(definition, filled, faults);
    if let Some(cup) = &definition.cup {
        reach(cup, filled, faults);
    }
}

fn walls(definition: &Definition, faults: &mut Faults) {
    let (head_mm, body_mm) = inner_diameters_mm(definition);
    for (end, inner_mm, wall_mm) in [
        ("head", head_mm, definition.head.wall_mm),
        ("body", body_mm, definition.body.wall_mm),
    ] {
        let (wall, outer) = (format!("{end}/wall_mm"), format!("{end}/outer_diameter_mm"));
        if faults.clean(&[&wall, &outer]) && inner_mm <= 0.0 {
            let half = 0.5 * (inner_mm + 2.0 * wall_mm);
            let detail = format!("expected less than the radius of {half} mm, found {wall_mm} mm; thin the wall");
            faults.add(&wall, "wall_too_thick", detail);
        }
    }
}

fn tube(definition: &Definition, faults: &mut Faults) {
    let tube = &definition.tube;
    let wall_mm = 0.5 * (tube.outer_diameter_mm - tube.bore_mm);
    if faults.clean(&["tube/bore_mm", "tube/outer_diameter_mm"]) && wall_mm < TUBE_WALL_MIN_MM * (1.0 - 1e-9) {
        let detail = format!(
            "expected the bore plus two walls of at least {TUBE_WALL_MIN_MM} mm, found {} mm around a bore of {} mm; \
             widen the tube or narrow the bore",
            tube.outer_diameter_mm, tube.bore_mm
        );
        faults.add("tube/outer_diameter_mm", "tube_wall_too_thin", detail);
    }
    let (head_mm, body_mm) = inner_diameters_mm(definition);
    for (end, inner_mm) in [("head", head_mm), ("body", body_mm)] {
        tube_in_bulb(definition, end, inner_mm, faults);
    }
    tube_length(definition, body_mm, faults);
}

fn tube_in_bulb(definition: &Definition, end: &str, inner_mm: f64, faults: &mut Faults) {
    let outer_mm = definition.tube.outer_diameter_mm;
    let (wall, outer) = (format!("{end}/wall_mm"), format!("{end}/outer_diameter_mm"));
    let limit_mm = TUBE_WIDEST_SHARE * inner_mm;
    if faults.clean(&["tube/outer_diameter_mm", &wall, &outer]) && outer_mm > limit_mm {
        let detail = format!(
            "expected at most {limit_mm:.2} mm, {TUBE_WIDEST_SHARE} of the {end}'s inner diameter, found {outer_mm} mm; \
             narrow the tube or widen the {end}"
        );
        faults.add("tube/outer_diameter_mm", "tube_wider_than_bulb", detail);
    }
}

fn tube_length(definition: &Definition, body_inner_mm: f64, faults: &mut Faults) {
    let least_mm = body_inner_mm + definition.body.wall_mm + definition.head.wall_mm;
    let length_mm = definition.tube.length_mm;
    if faults.clean(&["tube/length_mm", "body", "head/wall_mm"]) && length_mm <= least_mm {
        let detail = format!(
            "expected more than {least_mm:.2} mm, the body's inner diameter and both walls, because the length counts from \
             the body's inner bottom, found {length_mm} mm; lengthen the tube"
        );
        faults.add("tube/length_mm", "tube_too_short", detail);
    }
}

fn end_gap(definition: &Definition, filled: &Filled, faults: &mut Faults) {
    let limit_mm = 0.5 * inner_diameters_mm(definition).1;
    if faults.clean(&["tube/end_gap_mm", "body"]) && filled.end_gap_mm >= limit_mm {
        let detail = format!(
            "expected less than the body's inner radius of {limit_mm:.2} mm, found {} mm; bring the tube's end lower",
            filled.end_gap_mm
        );
        faults.add("tube/end_gap_mm", "end_gap_too_large", detail);
    }
}

fn felt(definition: &Definition, filled: &Filled, faults: &mut Faults) {
    let (head, felt) = (&definition.head, &definition.head.felt);
    if !faults.clean(&["head"]) {
        return;
    }
    let sphere_m3 = |diameter_mm: f64| {
        Sphere {
            radius_m: 0.5 * diameter_mm * MM,
        }
        .volume_m3()
    };
    let shell_m3 = sphere_m3(head.outer_diameter_mm + 2.0 * felt.thickness_mm) - sphere_m3(head.outer_diameter_mm);
    let beak_m3 = filled.beak_area_cm2 * 1e-4 * felt.thickness_mm * MM;
    let room_ml = (shell_m3 + beak_m3 - felt.dry_mass_g * 1e-3 / FIBRE_DENSITY_KG_M3) / ML;
    if felt.capacity_g > room_ml {
        let detail = format!(
            "expected at most {:.2} g, the water that fits between the fibres of this felt, found {} g; thicken the felt or \
             lower its capacity or dry mass",
            room_ml.max(0.0),
            felt.capacity_g
        );
        faults.add("head/felt/capacity_g", "felt_too_small", detail);
    }
}

fn reach(cup: &CupDefinition, filled: &Filled, faults: &mut Faults) {
    if !faults.clean(&["cup/depth_mm", "cup/freeboard_mm", "cup/reach_mm"]) {
        return;
    }
    let fill_mm = cup.depth_mm - filled.freeboard_mm;
    if fill_mm <= 0.0 {
        let detail = format!(
            "expected less than the depth of {} mm, found {} mm",
            cup.depth_mm, filled.freeboard_mm
        );
        faults.add(
            "cup/freeboard_mm",
            "above_depth",
            format!("{detail}; move the brim mark up or deepen the cup"),
        );
    } else if cup.reach_mm > fill_mm {
        let detail = format!(
            "expected at most the liquid's depth of {fill_mm} mm, found {} mm",
            cup.reach_mm
        );
        faults.add(
            "cup/reach_mm",
            "deeper_than_cup",
            format!("{detail}; shorten the reach or deepen the cup"),
        );
    }
}

/// The vessel with its level at rest, if the lengths are sound and the liquid stands between tube end and body top.
pub(super) fn vessel(definition: &Definition, filled: &Filled, faults: &mut Faults) -> Option<Vessel> {
    let lengths = [
        "head/outer_diameter_mm",
        "head/wall_mm",
        "tube",
        "body/outer_diameter_mm",
        "body/wall_mm",
    ];
    if !faults.clean(&lengths) || !faults.clean(&["fluid/volume_ml"]) {
        return None;
    }
    let (head_mm, body_mm) = inner_diameters_mm(definition);
    let mut vessel = Vessel {
        body: Sphere {
            radius_m: 0.5 * body_mm * MM,
        },
        head: Sphere {
            radius_m: 0.5 * head_mm * MM,
        },
        bore_radius_m: 0.5 * definition.tube.bore_mm * MM,
        tube_radius_m: 0.5 * definition.tube.outer_diameter_mm * MM,
        tube_top_m: definition.tube.length_mm * MM,
        tube_end_m: filled.end_gap_mm * MM,
        rest_level_m: 0.0,
    };
    let volume_m3 = definition.fluid.volume_ml * ML;
    match vessel.rest_level_for_m(volume_m3) {
        Some(level_m) => {
            vessel.rest_level_m = level_m;
            Some(vessel)
        }
        None => {
            level_fault(&vessel, volume_m3, faults);
            None
        }
    }
}

fn level_fault(vessel: &Vessel, volume_m3: f64, faults: &mut Faults) {
    let least = vessel.content_at_rest_m3(vessel.tube_end_m) / ML;
    let most = vessel.content_at_rest_m3(vessel.body_top_m()) / ML;
    let found = volume_m3 / ML;
    if found <= least {
        let detail = format!("expected more than {least:.2} mL, which just covers the tube's end, found {found} mL");
        faults.add(
            "fluid/volume_ml",
            "too_little_liquid",
            format!("{detail}; fill more or lower the tube's end"),
        );
    } else {
        let detail = format!("expected less than the body's {most:.2} mL, found {found} mL");
        faults.add(
            "fluid/volume_ml",
            "overfilled",
            format!("{detail}; fill less or widen the body"),
        );
    }
}

/// Refuses a bore in which a bubble locks.
pub(super) fn check_bore(definition: &Definition, fluid: &WorkingFluid, faults: &mut Faults) {
    let least_mm = 2.0 * capillary_length_m(fluid) / MM;
    if faults.clean(&["tube/bore_mm"]) && definition.tube.bore_mm < least_mm {
        let detail = format!(
            "expected at least {least_mm:.2} mm, twice the capillary length of {}, because a bubble locks in a narrower \
             tube and the head does not drain, found {} mm; widen the bore",
            fluid.title, definition.tube.bore_mm
        );
        faults.add("tube/bore_mm", "bubble_locks", detail);
    }
}

/// Refuses a body that the hottest liquid fills.
pub(super) fn check_expansion(
    definition: &Definition,
    vessel: &Vessel,
    fluid: &WorkingFluid,
    max_temp_k: f64,
    faults: &mut Faults,
) {
    let growth = fluid.liquid_density_kg_m3(STATED_TEMP_K) / fluid.liquid_density_kg_m3(max_temp_k);
    let hot_ml = definition.fluid.volume_ml * growth;
    let room_ml = vessel.content_at_rest_m3(vessel.body_top_m()) / ML;
    if hot_ml >= room_ml {
        let detail = format!(
            "expected less than {:.2} mL, because the liquid grows by {:.1} % up to {:.0} °C and would fill the body's \
             {room_ml:.2} mL, found {} mL; fill less or lower max_temperature_c",
            room_ml / growth,
            100.0 * (growth - 1.0),
            max_temp_k - 273.15,
            definition.fluid.volume_ml
        );
        faults.add("fluid/volume_ml", "liquid_full_when_hot", detail);
    }
}

/// Capillary length of a liquid against its vapour at 20 °C, `sqrt(tension / (density g))` [m].
pub(super) fn capillary_length_m(fluid: &WorkingFluid) -> f64 {
    let weight = fluid.liquid_density_kg_m3(STATED_TEMP_K) * GRAVITY_M_S2;
    (fluid.surface_tension_n_m(STATED_TEMP_K) / weight).sqrt()
}
