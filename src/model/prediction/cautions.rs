//! What to look out for, with the figures of this run.
//!
//! What follows from fluid, evaporant, glass and lamp alone comes with the device; these are the ones a run brings out.

use super::observed::Observed;
use super::result::{AirSummary, Totals};
use crate::model::air::ZERO_CELSIUS_K;
use crate::model::device::Device;
use crate::model::fluids::flash_point_c;
use crate::model::notes::{Caution, Severity};
use crate::model::weather::zone::instant_text;

/// Water standing warm for this long without a visit is warned of [h]: common practice, no source.
const WARM_WATER_HOURS: f64 = 24.0;

/// The cautions of a run.
pub(super) fn cautions(device: &Device, observed: &Observed, totals: &Totals, air: &AirSummary) -> Vec<Caution> {
    let found = [
        body_pressure(device, observed),
        liquid_growth(device, observed),
        overheating(device, observed, totals),
        frozen_cup(device, observed, totals),
        flash_point(device, observed),
        warm_water(device, observed),
        fast_cycles(observed),
        dew_in_case(air),
        spirit_in_case(device, air),
    ];
    found.into_iter().flatten().collect()
}

fn caution(code: &'static str, severity: Severity, text: String) -> Option<Caution> {
    Some(Caution { code, severity, text })
}

fn celsius(temp_k: f64) -> f64 {
    temp_k - ZERO_CELSIUS_K
}

/// The fluid's numbers end somewhere; a body beyond that is taken at the end, and the sentence says "at least".
fn within_range(device: &Device, temp_k: f64) -> (f64, &'static str) {
    let (_, last_k) = device.fluid.valid_range_k();
    if temp_k > last_k {
        (last_k, "at least ")
    } else {
        (temp_k, "")
    }
}

fn body_pressure(device: &Device, observed: &Observed) -> Option<Caution> {
    let (temp_k, at_least) = within_range(device, observed.hottest_k);
    let over_kpa = (device.fluid.vapour_pressure_pa(temp_k) - observed.hottest_pressure_pa) / 1e3;
    let side = if over_kpa > 0.0 { "above" } else { "below" };
    let severity = if over_kpa > 0.0 {
        Severity::Warning
    } else {
        Severity::Info
    };
    caution(
        "body_pressure",
        severity,
        format!(
            "At its hottest in this run ({:.1} °C, {}) the body is {at_least}{:.0} kPa {side} the air around it. Have sealed glass \
             designed and tested by a qualified glassblower for that, shield it from people, and follow local \
             pressure-equipment rules.",
            celsius(observed.hottest_k),
            instant_text(observed.hottest_unix_s),
            over_kpa.abs()
        ),
    )
}

fn liquid_growth(device: &Device, observed: &Observed) -> Option<Caution> {
    const FILLED_K: f64 = 293.15;
    let (temp_k, at_least) = within_range(device, observed.hottest_k);
    let density = |temp_k: f64| device.fluid.liquid_density_kg_m3(temp_k);
    let growth_pct = 100.0 * (density(FILLED_K) / density(temp_k) - 1.0);
    (growth_pct >= 1.0).then_some(())?;
    caution(
        "liquid_growth",
        Severity::Info,
        format!(
            "From 20 °C to the hottest hour of this run ({:.1} °C) the working liquid grows by {at_least}{growth_pct:.1} %. A body \
             that it fills bursts: leave room, never heat it beyond the allowed {:.0} °C, and have the filling done by a \
             qualified glassblower.",
            celsius(observed.hottest_k),
            celsius(device.max_temp_k)
        ),
    )
}

fn overheating(device: &Device, observed: &Observed, totals: &Totals) -> Option<Caution> {
    let hours = totals.stall_hours.overheated;
    (hours > 0.0).then_some(())?;
    caution(
        "overheated",
        Severity::Danger,
        format!(
            "The body is above its limit of {:.0} °C for {hours:.1} h of this run (hottest {:.1} °C). Sealed glass can burst: shade \
             or move it, switch the lamp off, and do not install it like this without a qualified person's approval under \
             local codes.",
            celsius(device.max_temp_k),
            celsius(observed.hottest_k)
        ),
    )
}

fn frozen_cup(device: &Device, observed: &Observed, totals: &Totals) -> Option<Caution> {
    let hours = totals.stall_hours.frozen;
    (hours > 0.0 || observed.freezing_cup_hours > 0).then_some(())?;
    let cup = match &device.cup {
        Some(_) => format!(
            "the cup is at or below freezing at the end of {} h",
            observed.freezing_cup_hours
        ),
        None => "it has no cup".into(),
    };
    caution(
        "freezing",
        Severity::Warning,
        format!(
            "Felt or cup is frozen for {hours:.1} h of this run, and {cup}. Ice can crack a cup, and spilt water freezes \
             underfoot: empty it before frost or bring it in, and follow local safety rules for the place."
        ),
    )
}

fn flash_point(device: &Device, observed: &Observed) -> Option<Caution> {
    let flash_c = flash_point_c(device.evaporant_abv_pct)?;
    (celsius(observed.hottest_k) >= flash_c).then_some(())?;
    let (severity, lamp) = match &device.lamp {
        Some(lamp) => (
            Severity::Danger,
            format!(" A lamp of {:.1} W stands beside it.", lamp.absorbed_w),
        ),
        None => (Severity::Warning, String::new()),
    };
    caution(
        "evaporant_above_flash_point",
        severity,
        format!(
            "It reaches {:.1} °C in this run, and ethanol and water of {:.0} % by volume can be lit from {flash_c:.0} °C on.{lamp} Keep \
             lamps, sun-heated surfaces and sparks away, or use water, and have it approved under the local fire code.",
            celsius(observed.hottest_k),
            device.evaporant_abv_pct,
        ),
    )
}

fn warm_water(device: &Device, observed: &Observed) -> Option<Caution> {
    device.cup.as_ref()?;
    let (longest, all) = (observed.warm_water_longest_h, observed.warm_water_h);
    (device.evaporant_abv_pct <= 0.0 && longest >= WARM_WATER_HOURS).then_some(())?;
    caution(
        "standing_water_hours",
        Severity::Warning,
        format!(
            "Water stands at 20-45 °C for up to {longest:.0} h between two visits, {all:.0} h in all. Bacteria can grow in it: empty \
             and clean cup and felt at every visit, and follow local health rules for standing water."
        ),
    )
}

fn fast_cycles(observed: &Observed) -> Option<Caution> {
    (observed.fast_h > 0.0).then_some(())?;
    caution(
        "very_short_cycles",
        Severity::Info,
        format!(
            "For {:.1} h of this run a cycle takes less than 3 s, where neither way of solving it can be trusted. Take those \
             counts as an order of size; judge strength and wear by a test of the device itself.",
            observed.fast_h
        ),
    )
}

fn dew_in_case(air: &AirSummary) -> Option<Caution> {
    let hours = air.dew_hours.filter(|hours| *hours > 0)?;
    caution(
        "dew_in_case",
        Severity::Warning,
        format!(
            "The case ends {hours} h of this run with dew on its glass. Water runs down to whatever stands below: keep \
             electrics and anything that must stay dry out of it, give it more air, and follow local codes for wet places."
        ),
    )
}

fn spirit_in_case(device: &Device, air: &AirSummary) -> Option<Caution> {
    (air.dew_hours.is_some() && device.evaporant_abv_pct > 0.0).then_some(())?;
    caution(
        "spirit_vapour_in_case",
        Severity::Danger,
        format!(
            "Vapour of spirit ({:.0} % by volume) gathers in a closed case and can be lit by a lamp, a switch or a spark. Use water \
             in cases; anything else needs ventilation designed and approved by qualified people under the local fire code.",
            device.evaporant_abv_pct
        ),
    )
}
