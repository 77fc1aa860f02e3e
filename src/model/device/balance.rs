//! When the device lets go: at a given lifted volume, or where its masses say.
//!
//! Heights from the body's inner bottom, `z` the depth below the pivot. The stiffness `S(V) = sum(m z)` holds the device
//! upright against the forward moment `X`: it leans by `tan(lean) = X / S`. It lets go at the first lifted volume at
//! which the pressure it takes to lift more no longer rises (the lean lowers the lift faster than liquid raises it), or
//! at which the lean reaches the dip angle.

use super::definition::{BalanceDefinition, Definition};
use super::faults::Faults;
use super::filled::Filled;
use super::hydrostatics::Hydrostatics;
use super::shape::{GRAVITY_M_S2, ML, MM, STATED_TEMP_K};
use super::sphere::Sphere;
use super::vessel::Vessel;
use crate::model::fluids::WorkingFluid;

/// Steps in which the balance is searched before the step that lets go is halved down.
const SEARCH_STEPS: usize = 4000;
/// Liquid that the pressure may still push up while the device falls, as a share of the tip volume. More would uncover
/// more, but then the tip volume is not what drains, and neither heat nor period of a cycle would be right.
const PUSHED_SHARE: f64 = 0.1;
/// Kilograms in a gram.
const G: f64 = 1e-3;

/// Everything but the liquid: mass [kg] and its moment about the body's inner bottom [kg m].
#[derive(Debug, Clone, Copy, PartialEq, Default)]
struct Solids {
    mass_kg: f64,
    moment_kg_m: f64,
}

impl Solids {
    fn add(&mut self, mass_kg: f64, height_m: f64) {
        self.mass_kg += mass_kg;
        self.moment_kg_m += mass_kg * height_m;
    }
}

/// The liquids that weigh in the balance.
#[derive(Debug, Clone, Copy)]
pub(super) struct Liquids {
    /// Density of the working fluid at 20 °C [kg/m³].
    pub(super) density_kg_m3: f64,
    /// Liquid in the full felt [kg].
    pub(super) felt_kg: f64,
}

/// Hydrostatics with the lean in it and the tip volume [m³], if the balance is sound.
pub(super) fn settle(
    definition: &Definition,
    filled: &Filled,
    vessel: Vessel,
    liquids: Liquids,
    faults: &mut Faults,
) -> Option<(Hydrostatics, f64)> {
    let upright = reaching_head(vessel, faults)?;
    let dip_angle_rad = filled.dip_angle_deg.to_radians();
    let (hydrostatics, tip_m3) = match &definition.balance {
        BalanceDefinition::TipVolume { tip_volume_ml, .. } => (upright, Some(tip_volume_ml * ML)),
        BalanceDefinition::Masses {
            pivot_height_mm,
            forward_moment_g_mm,
            ..
        } => {
            let solids = solids(definition, filled, &vessel, liquids.felt_kg);
            let stiffness =
                |volume_m3: f64| stiffness(&solids, &vessel, liquids.density_kg_m3, pivot_height_mm * MM, volume_m3);
            let forward_kg_m = forward_moment_g_mm * G * MM;
            stands_at_rest(stiffness(0.0).0, forward_kg_m, dip_angle_rad, faults)?;
            let leaning = upright.leaning(&stiffness, forward_kg_m);
            let tip = lets_go_m3(&leaning, dip_angle_rad);
            (leaning, tip)
        }
    };
    let tip_m3 = within_limits(&hydrostatics, tip_m3, faults)?;
    end_lies_free(&hydrostatics, tip_m3, filled, faults);
    Some((hydrostatics, tip_m3))
}

/// The upright hydrostatics, if there is enough liquid for the meniscus to enter the head at all.
fn reaching_head(vessel: Vessel, faults: &mut Faults) -> Option<Hydrostatics> {
    let (tube, available) = (vessel.tube_volume_m3() / ML, vessel.run_out_m3() / ML);
    if available > tube * (1.0 + 1e-6) {
        return Some(Hydrostatics::new(vessel));
    }
    let detail = format!(
        "expected more than {tube:.2} mL above the tube's end, which fills the tube up to the head, found {available:.2} mL; \
         fill more, or shorten or narrow the tube"
    );
    faults.add("fluid/volume_ml", "never_reaches_head", detail);
    None
}

fn solids(definition: &Definition, filled: &Filled, vessel: &Vessel, felt_liquid_kg: f64) -> Solids {
    let glass_kg_m3 = filled.glass_density_g_cm3 * 1e3;
    let shell_m3 = |outer_mm: f64, inner: &Sphere| {
        Sphere {
            radius_m: 0.5 * outer_mm * MM,
        }
        .volume_m3()
            - inner.volume_m3()
    };
    let felt = &definition.head.felt;
    let mut solids = Solids::default();
    let head_glass_kg = glass_kg_m3 * shell_m3(definition.head.outer_diameter_mm, &vessel.head);
    // The balance is struck with a full felt: so it tips earliest, and so it is right after every dip.
    solids.add(
        head_glass_kg + felt.dry_mass_g * G + felt_liquid_kg,
        vessel.head_centre_m(),
    );
    solids.add(
        glass_kg_m3 * shell_m3(definition.body.outer_diameter_mm, &vessel.body),
        vessel.body.radius_m,
    );
    let tube_m3 = (vessel.tube_m2() - vessel.bore_m2()) * (vessel.tube_top_m - vessel.tube_end_m);
    solids.add(glass_kg_m3 * tube_m3, 0.5 * (vessel.tube_top_m + vessel.tube_end_m));
    if let BalanceDefinition::Masses { extra, .. } = &definition.balance {
        extra
            .iter()
            .for_each(|mass| solids.add(mass.mass_g * G, mass.height_mm * MM));
    }
    solids
}

/// Stiffness [kg m] and its derivative by the lifted volume [kg/m²].
fn stiffness(solids: &Solids, vessel: &Vessel, density: f64, pivot_m: f64, volume_m3: f64) -> (f64, f64) {
    let liquid_kg = density * vessel.content_at_rest_m3(vessel.rest_level_m);
    let (moment, slope) = vessel.liquid_moment(volume_m3);
    let about_bottom = solids.moment_kg_m + density * moment;
    (pivot_m * (solids.mass_kg + liquid_kg) - about_bottom, -density * slope)
}

fn stands_at_rest(stiffness_kg_m: f64, forward_kg_m: f64, dip_angle_rad: f64, faults: &mut Faults) -> Option<()> {
    let stands = stiffness_kg_m > 0.0 && (forward_kg_m / stiffness_kg_m).atan() < dip_angle_rad;
    if stands {
        return Some(());
    }
    let shown = stiffness_kg_m / (G * MM);
    let detail = format!(
        "expected a device that stands upright before any liquid rises, found a righting moment of {shown:.1} g mm with \
         the felt full: it tips at once; raise the pivot, lighten what is above it or add ballast below"
    );
    faults.add("balance/pivot_height_mm", "tips_at_rest", detail);
    None
}

/// First lifted volume at which the device lets go [m³], up to the last one of the vessel.
fn lets_go_m3(hydrostatics: &Hydrostatics, dip_angle_rad: f64) -> Option<f64> {
    first_m3(hydrostatics.last_volume_m3(), |volume_m3| {
        hydrostatics.lift_slope_1_m2(volume_m3) <= 0.0 || hydrostatics.lean_rad(volume_m3) >= dip_angle_rad
    })
}

/// First lifted volume up to a given one at which the lift stops rising [m³].
pub(super) fn stops_rising_m3(hydrostatics: &Hydrostatics, up_to_m3: f64) -> Option<f64> {
    first_m3(up_to_m3, |volume_m3| hydrostatics.lift_slope_1_m2(volume_m3) <= 0.0)
}

/// First volume from 0 to `last_m3` for which something is true: in even steps, the step then halved down.
fn first_m3(last_m3: f64, is_true: impl Fn(f64) -> bool) -> Option<f64> {
    let step = last_m3 / SEARCH_STEPS as f64;
    let first = (0..=SEARCH_STEPS).find(|index| is_true(step * *index as f64))?;
    let (mut before, mut after) = (step * first.saturating_sub(1) as f64, step * first as f64);
    for _ in 0..60 {
        let middle = 0.5 * (before + after);
        if is_true(middle) {
            after = middle
        } else {
            before = middle
        }
    }
    Some(after)
}

/// The tip volume, if liquid and head allow it.
fn within_limits(hydrostatics: &Hydrostatics, tip_m3: Option<f64>, faults: &mut Faults) -> Option<f64> {
    let (code, what, remedy) = first_limit(hydrostatics);
    let last_m3 = hydrostatics.last_volume_m3();
    match tip_m3 {
        Some(tip) if tip > 0.0 && tip < last_m3 => return Some(tip),
        Some(tip) if tip <= 0.0 => {
            let detail = "expected a device that stands until liquid rises, found that the first drop already tips it; \
                          raise the pivot or lower the forward moment";
            faults.add("balance/pivot_height_mm", "tips_at_rest", detail);
        }
        Some(tip) if !hydrostatics.leans() => {
            let detail = format!(
                "expected less, because {what}, found {:.3} mL; tip earlier or {remedy}",
                tip / ML
            );
            faults.add("balance/tip_volume_ml", code, detail);
        }
        _ => {
            let detail = format!(
                "expected a device that lets go at some lifted volume, found that it still stands when {what}; lower the \
                 pivot, raise the forward moment or {remedy}"
            );
            faults.add("balance/pivot_height_mm", "never_tips", detail);
        }
    }
    None
}

/// What ends the lift first: its code, what happens, and the remedy.
fn first_limit(hydrostatics: &Hydrostatics) -> (&'static str, String, &'static str) {
    let vessel = hydrostatics.vessel();
    let (run_out, full) = (vessel.run_out_m3() / ML, vessel.head_full_m3() / ML);
    if run_out < full {
        let what = format!("the body's level falls to the tube's end at {run_out:.2} mL");
        ("body_runs_out", what, "fill more")
    } else {
        (
            "head_full",
            format!("the head is full at {full:.2} mL"),
            "widen the head",
        )
    }
}

/// Refuses a lift that the vapour's whole pressure cannot hold even at the highest temperature allowed.
pub(super) fn check_vapour(
    hydrostatics: &Hydrostatics,
    tip_m3: f64,
    fluid: &WorkingFluid,
    max_temp_k: f64,
    faults: &mut Faults,
) {
    let lift_pa = lift_pa(hydrostatics, tip_m3, fluid);
    let hottest_pa = fluid.vapour_pressure_pa(max_temp_k);
    if hottest_pa > lift_pa {
        return;
    }
    let detail = format!(
        "expected a vapour pressure above the {:.1} kPa that the lift takes, found {:.1} kPa for {} even at {:.0} °C; take a \
         fluid that boils lower or lower the device",
        lift_pa / 1e3,
        hottest_pa / 1e3,
        fluid.title,
        max_temp_k - 273.15
    );
    faults.add("fluid/name", "vapour_too_weak", detail);
}

/// Pressure that holds the lift at the tip, with the liquid at 20 °C [Pa].
pub(super) fn lift_pa(hydrostatics: &Hydrostatics, tip_m3: f64, fluid: &WorkingFluid) -> f64 {
    fluid.liquid_density_kg_m3(STATED_TEMP_K) * GRAVITY_M_S2 * hydrostatics.lift_m(tip_m3)
}

/// Refuses a tube's end that stays covered in a dip: no vapour passes and the head does not drain.
fn end_lies_free(hydrostatics: &Hydrostatics, tip_m3: f64, filled: &Filled, faults: &mut Faults) {
    let pushed_m3 = (tip_m3 * (1.0 + PUSHED_SHARE)).min(hydrostatics.last_volume_m3());
    if hydrostatics
        .vessel()
        .end_is_free(pushed_m3, filled.dip_angle_deg.to_radians())
    {
        return;
    }
    let detail = format!(
        "expected a level that leaves the tube's end free when the device lies at {} degrees, so that vapour passes and the \
         head drains; found the end covered with {:.2} mL lifted, a tenth more than at the tip: it stays down, or drains far \
         more than the tip volume; fill less, tip later, dip deeper or raise the tube's end",
        filled.dip_angle_deg,
        pushed_m3 / ML
    );
    faults.add("fluid/volume_ml", "stuck_down", detail);
}
