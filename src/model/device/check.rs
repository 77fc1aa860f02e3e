//! A definition goes in; a device with all that follows from it comes out, or every fault at once.

use super::balance::{self, Liquids};
use super::definition::{CupDefinition, Definition};
use super::derived::Derived;
use super::faults::Faults;
use super::filled::Filled;
use super::hydrostatics::Hydrostatics;
use super::shape::{MM, STATED_TEMP_K};
use super::substances::{self, Substances};
use super::vessel::Vessel;
use super::{Cup, Device, Dip, assumptions, cautions, derived, heat, shape, sizes};
use crate::model::fluids::Liquid;
use crate::model::notes::{Assumption, Caution, Fault};

/// A sound device and what goes with it.
#[derive(Debug, Clone)]
pub struct Checked {
    /// The device in SI units.
    pub device: Device,
    /// Figures that follow from it, for the user.
    pub derived: Derived,
    /// Every value that was not given.
    pub assumptions: Vec<Assumption>,
    /// Hazards that need no weather to be known.
    pub cautions: Vec<Caution>,
}

/// Checks a definition as a whole.
///
/// Numbers are practical (mm, mL, g, °C) and lie within [`super::ALL_BOUNDS`]. Missing ones are filled and said in
/// [`Checked::assumptions`]. The error holds every fault that can be told at once: each names the field, what was
/// expected, what was found and the remedy. A check across several fields waits until each of them is sound.
///
/// ```
/// use dipcast::model::device::{check, examples};
/// let checked = check(&examples()[0].definition).expect("our own example is sound");
/// assert!((checked.device.tip_volume_m3 - 3.0e-6).abs() < 1e-12);
/// let mut thin = examples()[0].definition.clone();
/// thin.tube.bore_mm = 1.0;
/// assert_eq!(check(&thin).expect_err("a bubble locks")[0].field, "tube/bore_mm");
/// ```
pub fn check(definition: &Definition) -> Result<Checked, Vec<Fault>> {
    let mut faults = Faults::default();
    let (filled, mut said) = Filled::from(definition);
    sizes::check(definition, &mut faults);
    shape::check(definition, &filled, &mut faults);
    let vessel = shape::vessel(definition, &filled, &mut faults);
    let substances = substances::read(definition, &mut faults);
    let worked = substances.and_then(|substances| work_out(definition, &filled, vessel, substances, &mut faults));
    let (Some(device), true) = (worked, faults.0.is_empty()) else {
        return Err(faults.0);
    };
    said.extend(assumptions::always(definition, &device));
    Ok(Checked {
        derived: derived::derive(&device, &filled),
        cautions: cautions::of(definition, &device),
        assumptions: said,
        device,
    })
}

fn work_out(
    definition: &Definition,
    filled: &Filled,
    vessel: Option<Vessel>,
    substances: Substances,
    faults: &mut Faults,
) -> Option<Device> {
    let fluid = &substances.fluid;
    shape::check_bore(definition, fluid, faults);
    let vessel = vessel?;
    shape::check_expansion(definition, &vessel, fluid, substances.max_temp_k, faults);
    if !faults.clean(&["balance", "head/felt", "evaporant"]) {
        return None;
    }
    let liquids = Liquids {
        density_kg_m3: fluid.liquid_density_kg_m3(STATED_TEMP_K),
        felt_kg: heat::felt_capacity_kg(definition, substances.strength_abv_pct),
    };
    let (hydrostatics, tip_volume_m3) = balance::settle(definition, filled, vessel, liquids, faults)?;
    balance::check_vapour(&hydrostatics, tip_volume_m3, fluid, substances.max_temp_k, faults);
    Some(assemble(definition, filled, substances, hydrostatics, tip_volume_m3))
}

fn assemble(
    definition: &Definition,
    filled: &Filled,
    substances: Substances,
    hydrostatics: Hydrostatics,
    tip_volume_m3: f64,
) -> Device {
    let vessel = *hydrostatics.vessel();
    let Substances {
        fluid,
        strength_abv_pct,
        max_temp_k,
    } = substances;
    Device {
        tip_volume_m3,
        head: heat::head(
            definition,
            filled,
            &vessel,
            heat::felt_capacity_kg(definition, strength_abv_pct),
        ),
        body: heat::body(definition, filled, &vessel, &fluid),
        conduction_w_k: filled.conduction_w_k,
        dip: Dip {
            duration_s: filled.dip_seconds,
            drain_fraction: filled.drain_fraction,
            vapour_reset: filled.vapour_reset,
        },
        evaporant_abv_pct: strength_abv_pct,
        hardness_mg_l: filled.hardness_mg_l,
        // 1 mg/cm² is 0.01 kg/m², so a percent for each is one for a kilogram on a square metre.
        scale_effect_m2_kg: filled.scale_effect_pct,
        lamp: definition.lamp.clone(),
        cup: definition
            .cup
            .as_ref()
            .map(|given| cup(given, filled, strength_abv_pct)),
        max_temp_k,
        liquid_heat_j_m3k: heat::liquid_heat_j_m3k(&fluid),
        hydrostatics,
        fluid,
    }
}

fn cup(given: &CupDefinition, filled: &Filled, strength_abv_pct: f64) -> Cup {
    let diameter_m = given.opening_diameter_mm * MM;
    let area_m2 = 0.25 * std::f64::consts::PI * diameter_m * diameter_m;
    let fill_depth_m = (given.depth_mm - filled.freeboard_mm) * MM;
    let strength = Liquid::from_abv(1.0, strength_abv_pct);
    Cup {
        diameter_m,
        area_m2,
        fill_depth_m,
        full: strength.scaled(strength.density_kg_m3(STATED_TEMP_K) * area_m2 * fill_depth_m),
        freeboard_m: filled.freeboard_mm * MM,
        reach_m: given.reach_mm * MM,
        covered_fraction: filled.covered_fraction,
        shared_by: f64::from(filled.shared_by),
    }
}
