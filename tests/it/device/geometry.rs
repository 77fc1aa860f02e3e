//! How the liquid stands: against numbers found another way, and against itself.

use std::f64::consts::PI;

use dipcast::model::device::*;
use proptest::prelude::*;

use super::{example, sound};

fn tips_at(tip_volume_ml: f64) -> BalanceDefinition {
    BalanceDefinition::TipVolume {
        tip_volume_ml,
        dip_angle_deg: None,
    }
}

/// Volume of the shelf device's liquid below a level in the body, by adding thin discs: no formula of a cap is used.
fn discs_m3(level_m: f64, area_m2: impl Fn(f64) -> f64) -> f64 {
    let count = 200_000;
    let thickness = level_m / f64::from(count);
    (0..count)
        .map(|disc| area_m2((f64::from(disc) + 0.5) * thickness) * thickness)
        .sum()
}

#[test]
fn levels_agree_with_discs_added_up() {
    let shelf = sound(&example("shelf-180"));
    let (body_m, bore_m2, tube_m2) = (0.0152, PI * 2.5e-3 * 2.5e-3, PI * 3.5e-3 * 3.5e-3);
    let body = |wall_m2: f64| move |z: f64| PI * z * (2.0 * body_m - z) - if z > 3e-3 { wall_m2 } else { 0.0 };
    let rest_m3 = discs_m3(shelf.derived.rest_level_mm * 1e-3, body(tube_m2 - bore_m2));
    assert!((rest_m3 - 9.5e-6).abs() < 1e-11, "rest {rest_m3}");
    let outside_rest = discs_m3(shelf.derived.rest_level_mm * 1e-3, body(tube_m2));
    let outside_tip = discs_m3(shelf.derived.level_at_tip_mm * 1e-3, body(tube_m2));
    assert!(
        (outside_rest - outside_tip - 3.0e-6).abs() < 1e-11,
        "tip {}",
        outside_rest - outside_tip
    );
    // In the head: discs of its sphere from the mouth of the bore up to the meniscus.
    let head_m: f64 = 0.0117;
    let mouth_m = head_m - (head_m * head_m - 2.5e-3 * 2.5e-3_f64).sqrt();
    let above_mouth_m = (shelf.derived.lift_at_tip_mm + shelf.derived.level_at_tip_mm) * 1e-3 - 0.110;
    let in_head = discs_m3(above_mouth_m, |z| PI * (mouth_m + z) * (2.0 * head_m - mouth_m - z));
    let tube_m3 = bore_m2 * (0.110 - shelf.derived.rest_level_mm * 1e-3);
    assert!((tube_m3 + in_head - 3.0e-6).abs() < 1e-11, "head {}", tube_m3 + in_head);
}

#[test]
fn the_lift_goes_on_straight_beyond_its_ends() {
    let hydrostatics = sound(&example("shelf-180")).device.hydrostatics;
    let last = hydrostatics.last_volume_m3();
    let (end, slope) = hydrostatics.lift_and_slope(last);
    assert!((hydrostatics.lift_m(last + 1e-7) - (end + slope * 1e-7)).abs() < 1e-12);
    assert!(hydrostatics.lift_m(-1e-8) < 0.0 && hydrostatics.lift_slope_1_m2(-1e-8) > 0.0);
    assert!(hydrostatics.lift_m(f64::NAN).is_nan());
}

/// Devices of many sizes, all inside the bounds; those that do not pass the check are left out.
fn devices() -> impl Strategy<Value = Device> {
    (
        12.0..80.0_f64,
        14.0..110.0_f64,
        0.3..2.5_f64,
        3.5..12.0_f64,
        60.0..900.0_f64,
        0.35..0.85_f64,
        0.3..0.95_f64,
    )
        .prop_filter_map("sound", |(head_mm, body_mm, wall_mm, bore_mm, length_mm, fill, tip)| {
            let mut d = example("shelf-180");
            (d.head.outer_diameter_mm, d.head.wall_mm) = (head_mm, wall_mm);
            (d.head.felt.dry_mass_g, d.head.felt.capacity_g) = (0.05, 0.1);
            (d.body.outer_diameter_mm, d.body.wall_mm) = (body_mm, wall_mm);
            (d.tube.bore_mm, d.tube.outer_diameter_mm, d.tube.length_mm) =
                (bore_mm, bore_mm + 2.0 * wall_mm, length_mm);
            d.fluid.volume_ml = fill * PI / 6.0 * (body_mm - 2.0 * wall_mm).powi(3) * 1e-3;
            d.balance = tips_at(tip * d.fluid.volume_ml);
            check(&d).ok().map(|checked| checked.device)
        })
}

proptest! {
    #![proptest_config(ProptestConfig { cases: crate::cases(200), max_global_rejects: 200_000, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn upright_the_lift_always_rises_and_its_slope_is_its_derivative(device in devices(), share in 0.001..0.999_f64) {
        let h = &device.hydrostatics;
        let (volume, step) = (share * h.last_volume_m3(), 1e-6 * h.last_volume_m3());
        let (low, high) = (h.lift_m(volume - step), h.lift_m(volume + step));
        prop_assert!(high > low);
        let numeric = (high - low) / (2.0 * step);
        // The difference of two nearly equal lifts and the kink of the second derivative at the mouth leave 1e-4.
        prop_assert!((h.lift_slope_1_m2(volume) / numeric - 1.0).abs() < 1e-4, "{} against {numeric}", h.lift_slope_1_m2(volume));
    }

    #[test]
    fn the_curve_agrees_with_the_exact_geometry(device in devices(), share in 0.0..1.0_f64) {
        let h = &device.hydrostatics;
        let volume = share * h.last_volume_m3();
        let off = (h.lift_m(volume) - h.exact_lift_m(volume)).abs();
        prop_assert!(off < 1e-8 * h.exact_lift_m(h.last_volume_m3()), "off by {off:e} m at {volume:e} m3");
    }
}
