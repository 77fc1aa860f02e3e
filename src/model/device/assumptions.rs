//! What is assumed of every device, given values or not.

use super::Device;
use super::definition::{BalanceDefinition, Definition};
use super::heat::*;
use crate::model::notes::Assumption;

/// The assumptions that no field of a definition replaces.
pub(super) fn always(definition: &Definition, device: &Device) -> Vec<Assumption> {
    let mut said = vec![
        Assumption::new(
            "glass of head, tube and body",
            format!(
                "borosilicate 3.3: {GLASS_DENSITY_KG_M3} kg/m3, {GLASS_HEAT_J_KGK} J/(kg K), {GLASS_CONDUCTIVITY_W_MK} W/(m K)"
            ),
            "heat stores, and with them the period",
        ),
        Assumption::new(
            "felt",
            format!(
                "dry fibres {FELT_HEAT_J_KGK} J/(kg K); wet felt conducts like water, {WET_FELT_CONDUCTIVITY_W_MK} W/(m K)"
            ),
            format!(
                "the felt's surface is {:.2} K colder than the vapour for every watt: a few percent of the period",
                device.head.felt_resistance_k_w
            ),
        ),
        Assumption::new(
            "long-wave emissivity",
            format!("felt {FELT_EMISSIVITY}, glass {GLASS_EMISSIVITY}"),
            "heat from the surroundings, as large as natural convection",
        ),
        Assumption::new(
            "volumes and masses of the working liquid",
            "as at 20 °C at every temperature",
            "the levels by a few hundredths of a millimetre for each kelvin away from 20 °C",
        ),
        Assumption::new(
            "gas inside",
            "vapour of the working fluid alone, no air",
            "trapped air slows or stops a device",
        ),
    ];
    said.push(match definition.balance {
        BalanceDefinition::TipVolume { .. } => Assumption::new(
            "lean before the tip",
            "upright",
            "a lean lowers the lift by its cosine: 3 % at 14 degrees; give the balance as masses to have it counted",
        ),
        BalanceDefinition::Masses { .. } => {
            Assumption::new("felt in the balance", "full", "a felt that is not full tips later")
        }
    });
    said
}
