//! What a place leaves to be assumed, in words.

use super::definition::{CaseDefinition, Room};
use super::moisture::MoistureRule;
use super::room::{DEFAULT_HEATED_TO_C, DEFAULT_MEMORY_H};
use crate::model::notes::Assumption;

/// The rule in a few words.
pub(super) fn rule_name(rule: MoistureRule) -> String {
    match rule {
        MoistureRule::None => "none: outdoor air, warmed".into(),
        MoistureRule::GivenExcess { excess_g_m3 } => format!("given excess of {excess_g_m3} g/m3"),
        MoistureRule::Iso13788 { class } => format!("upper bound of EN ISO 13788 class {class}"),
        MoistureRule::FieldSurvey => {
            "field survey of houses: +4 g/m3 at 5 °C outdoors and below, +1.5 g/m3 at 15 °C and above".into()
        }
    }
}

/// What is said of a room, given values or not: the rule always.
pub(super) fn of_room(room: &Room) -> Vec<Assumption> {
    let taken = if room.moisture.is_none() {
        " (taken, since none was given)"
    } else {
        ""
    };
    let mut said = vec![Assumption::new(
        "moisture of the room",
        format!("{}{taken}", rule_name(room.rule())),
        "the rules lie 20 to 30 points of relative humidity apart in winter, up to a factor of 1.7 in the period",
    )];
    if room.heated_to_c.is_none() {
        said.push(Assumption::new(
            "heating of the room",
            format!("to at least {DEFAULT_HEATED_TO_C} °C"),
            "cycles rise with temperature at the same vapour; the relative humidity falls",
        ));
    }
    if room.cooled_to_c.is_none() {
        said.push(Assumption::new(
            "cooling of the room",
            "none: it follows the weather above the heating",
            "cycles on summer days",
        ));
    }
    if room.memory_hours.is_none() {
        said.push(Assumption::new(
            "how long the building remembers the weather",
            format!("{DEFAULT_MEMORY_H} h"),
            "how much of the daily swing outdoors is felt inside when it is not heated",
        ));
    }
    if room.buffering_hours.unwrap_or(0.0) == 0.0 {
        said.push(Assumption::new(
            "moisture kept by walls and furniture",
            "none",
            "the room's vapour follows the weather at once; buffering flattens days",
        ));
    }
    said
}

/// What is said of a case.
pub(super) fn of_case(case: &CaseDefinition) -> Vec<Assumption> {
    let mut said = vec![
        Assumption::new(
            "air in the case at the start",
            "as humid as the air around it",
            "the first hours",
        ),
        Assumption::new(
            "temperature of the case's air",
            format!("that around it plus {} K", case.warmer_by_k.unwrap_or(0.0)),
            "the cooling of the air by the device is left out; a lit case is warmer than that and so drier",
        ),
        Assumption::new(
            "ethanol vapour in the case",
            "none, whatever the felt is wetted with",
            "with spirit it is counted too fast: its vapour gathers in a closed case",
        ),
    ];
    if case.devices.is_none() {
        said.push(Assumption::new(
            "devices in the case",
            "1",
            "the vapour that gathers in it",
        ));
    }
    if case.other_vapour_g_per_h.is_none() {
        said.push(Assumption::new(
            "other sources of vapour in the case",
            "none",
            "plants, open water or damp material moisten it too",
        ));
    }
    said
}
