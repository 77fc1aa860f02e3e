//! Names of fluid and evaporant become the substances of the tables, or faults that tell the nearest name.

use super::definition::{Definition, EvaporantDefinition};
use super::faults::{Faults, nearest};
use crate::model::fluids::{WorkingFluid, evaporants, working_fluid, working_fluids};
use crate::model::notes::Fault;

/// Name under which a user's own constants are taken.
pub const CUSTOM_FLUID: &str = "custom";
/// Name of plain water among the evaporants.
const WATER: &str = "water";
/// 0 °C [K].
const ZERO_CELSIUS_K: f64 = 273.15;

/// What is inside and what wets the felt.
#[derive(Debug, Clone)]
pub(super) struct Substances {
    /// Working fluid.
    pub(super) fluid: WorkingFluid,
    /// Strength of the evaporant [% by volume]; 0 for water.
    pub(super) strength_abv_pct: f64,
    /// Highest temperature allowed [K].
    pub(super) max_temp_k: f64,
}

/// Reads the substances; `None` where there is no fluid to work with.
pub(super) fn read(definition: &Definition, faults: &mut Faults) -> Option<Substances> {
    let fluid = fluid(definition, faults);
    let strength_abv_pct = strength_abv_pct(&definition.evaporant, faults);
    let fluid = fluid?;
    let max_temp_k = max_temp_k(definition, &fluid, faults);
    Some(Substances {
        fluid,
        strength_abv_pct,
        max_temp_k,
    })
}

/// The working fluid, if name and constants are right.
fn fluid(definition: &Definition, faults: &mut Faults) -> Option<WorkingFluid> {
    let given = &definition.fluid;
    if given.name == CUSTOM_FLUID {
        return custom_fluid(definition, faults);
    }
    if given.custom.is_some() {
        let detail = format!(
            "constants belong to the fluid `{CUSTOM_FLUID}`, found `{}`; drop one of them",
            given.name
        );
        faults.add("fluid/custom", "not_for_this_fluid", detail);
    }
    let found = working_fluid(&given.name).cloned();
    if found.is_none() {
        let known = working_fluids()
            .iter()
            .map(|fluid| fluid.name.as_ref())
            .chain([CUSTOM_FLUID]);
        unknown_name("fluid/name", &given.name, known.collect(), faults);
    }
    found
}

fn custom_fluid(definition: &Definition, faults: &mut Faults) -> Option<WorkingFluid> {
    let Some(constants) = &definition.fluid.custom else {
        let detail = format!("the fluid `{CUSTOM_FLUID}` needs its constants, found none; give them or name a fluid");
        faults.add("fluid/custom", "missing", detail);
        return None;
    };
    match WorkingFluid::custom(constants.clone()) {
        Ok(fluid) => Some(fluid),
        Err(found) => {
            let placed = |fault: Fault| Fault {
                field: format!("fluid/custom/{}", fault.field),
                ..fault
            };
            faults.0.extend(found.into_iter().map(placed));
            None
        }
    }
}

/// Strength of the evaporant [% by volume]; 0 for water.
fn strength_abv_pct(evaporant: &EvaporantDefinition, faults: &mut Faults) -> f64 {
    let rows = evaporants();
    if !rows.iter().any(|row| row.name == evaporant.name) {
        let known = rows.iter().map(|row| row.name).collect();
        unknown_name("evaporant/name", &evaporant.name, known, faults);
        return 0.0;
    }
    let field = "evaporant/strength_abv_pct";
    match evaporant.strength_abv_pct {
        Some(strength) if evaporant.name == WATER && strength != 0.0 => {
            let detail = format!("water has no strength, found {strength}; drop it or name ethanol_water");
            faults.add(field, "not_for_water", detail);
            0.0
        }
        None if evaporant.name != WATER => {
            let detail = format!(
                "{} needs its strength in % by volume at 20 °C, found none; give it",
                evaporant.name
            );
            faults.add(field, "missing", detail);
            0.0
        }
        strength => strength.unwrap_or(0.0),
    }
}

/// The highest temperature allowed [K]: the maker's, or the fluid's own.
fn max_temp_k(definition: &Definition, fluid: &WorkingFluid, faults: &mut Faults) -> f64 {
    let Some(given_c) = definition
        .max_temperature_c
        .filter(|_| faults.clean(&["max_temperature_c"]))
    else {
        return fluid.max_temp_k;
    };
    let limit_c = fluid.valid_range_k().1 - ZERO_CELSIUS_K;
    if given_c > limit_c {
        let detail = format!(
            "expected at most {limit_c:.0} °C, to which the numbers of {} hold, found {given_c} °C; lower it",
            fluid.title
        );
        faults.add("max_temperature_c", "beyond_the_fluid", detail);
    }
    given_c + ZERO_CELSIUS_K
}

fn unknown_name(field: &str, wrong: &str, known: Vec<&str>, faults: &mut Faults) {
    let shown: String = wrong.chars().take(40).collect();
    let remedy = match nearest(wrong, known.iter().copied()) {
        Some(near) => format!("did you mean `{near}`?"),
        None => "take one of these".to_string(),
    };
    faults.add(
        field,
        "unknown_name",
        format!("expected one of {}, found `{shown}`; {remedy}", known.join(", ")),
    );
}
