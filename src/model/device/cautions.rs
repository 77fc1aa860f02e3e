//! Hazards that follow from the definition alone.

use super::Device;
use super::definition::{Definition, LampTarget};
use super::shape::STATED_TEMP_K;
use crate::model::fluids::{evaporants, flash_point_c};
use crate::model::notes::{Caution, Severity};

/// Standard atmosphere [Pa].
const ATMOSPHERE_PA: f64 = 101_325.0;
/// Growth of the liquid from which it is worth a word.
const NOTABLE_GROWTH: f64 = 0.02;
/// Code the fluid table gives its flammable rows.
const FLAMMABLE_FLUID: &str = "flammable_fluid";

/// All cautions of a device, the most urgent first.
pub(super) fn of(definition: &Definition, device: &Device) -> Vec<Caution> {
    let mut cautions = device.fluid.cautions();
    cautions.extend(evaporant(definition, device));
    cautions.extend(pressure(device));
    cautions.extend(expansion(device));
    cautions.extend(lamp(definition, device));
    cautions.sort_by_key(|caution| std::cmp::Reverse(caution.severity));
    cautions
}

fn caution(code: &'static str, severity: Severity, text: String) -> Option<Caution> {
    Some(Caution { code, severity, text })
}

/// What the table says of water or spirit; without a cup no water stands.
fn evaporant(definition: &Definition, device: &Device) -> Vec<Caution> {
    let row = evaporants().iter().find(|row| row.name == definition.evaporant.name);
    let stands = |code: &str| device.cup.is_some() || code != "standing_water";
    let hazards = row.map_or(&[][..], |row| row.hazards);
    hazards
        .iter()
        .filter(|hazard| stands(hazard.code))
        .map(|hazard| hazard.caution())
        .collect()
}

fn pressure(device: &Device) -> Option<Caution> {
    let over_kpa = |temp_k: f64| (device.fluid.vapour_pressure_pa(temp_k) - ATMOSPHERE_PA) / 1e3;
    let hottest_kpa = over_kpa(device.max_temp_k);
    if hottest_kpa <= 0.0 {
        return None;
    }
    let severity = if over_kpa(STATED_TEMP_K) > 0.0 {
        Severity::Danger
    } else {
        Severity::Warning
    };
    let text = format!(
        "At {:.0} °C, the hottest allowed, the vapour stands {hottest_kpa:.0} kPa above the atmosphere, so the glass is under \
         inner pressure. Have it designed and tested by a qualified glassblower and follow local pressure-equipment rules.",
        device.max_temp_k - 273.15
    );
    caution("glass_under_pressure", severity, text)
}

fn expansion(device: &Device) -> Option<Caution> {
    let density = |temp_k: f64| device.fluid.liquid_density_kg_m3(temp_k);
    let growth = density(STATED_TEMP_K) / density(device.max_temp_k) - 1.0;
    if growth < NOTABLE_GROWTH {
        return None;
    }
    let text = format!(
        "The liquid grows by {:.1} % from 20 °C to {:.0} °C. Glass that is full of liquid bursts when it is heated further: \
         keep it below that temperature in use, storage and transport.",
        100.0 * growth,
        device.max_temp_k - 273.15
    );
    caution("liquid_expansion", Severity::Warning, text)
}

fn lamp(definition: &Definition, device: &Device) -> Vec<Caution> {
    let Some(lamp) = &definition.lamp else {
        return Vec::new();
    };
    let end = match lamp.on {
        LampTarget::Body => "body",
        LampTarget::Head => "head",
    };
    let flammable = device.fluid.hazards.iter().any(|hazard| hazard.code == FLAMMABLE_FLUID);
    let fluid = flammable.then(|| {
        format!(
            "A lamp on the {end} heats sealed glass with a flammable liquid, {}. If the glass breaks beside a hot lamp it can \
             ignite. Have the display approved under local fire codes by a licensed person, or do without the lamp.",
            device.fluid.title
        )
    });
    let spirit = flash_point_c(device.evaporant_abv_pct).map(|flash_c| {
        format!(
            "Spirit of {} % by volume gives vapour that can be lit from {flash_c:.0} °C on, and a lamp stands beside it. Keep \
             hot surfaces away and follow local fire codes and licensed practice.",
            device.evaporant_abv_pct
        )
    });
    let told = [
        ("flammable_fluid_near_lamp", fluid),
        ("flammable_evaporant_near_lamp", spirit),
    ];
    told.into_iter()
        .filter_map(|(code, text)| caution(code, Severity::Danger, text?))
        .collect()
}
