//! Every way a definition can be wrong, each with its field and code.

use dipcast::model::device::*;

use super::example;

/// The shelf device with one thing changed, and what is said about it.
fn said(change: impl FnOnce(&mut Definition)) -> Vec<(String, &'static str)> {
    said_of("shelf-180", change)
}

fn said_of(name: &str, change: impl FnOnce(&mut Definition)) -> Vec<(String, &'static str)> {
    let mut definition = example(name);
    change(&mut definition);
    match check(&definition) {
        Ok(_) => Vec::new(),
        Err(faults) => {
            for fault in &faults {
                assert!(fault.detail.contains("found"), "says what was found: {fault:?}");
                assert!(
                    fault.detail.contains(';') || fault.detail.contains('?'),
                    "says a remedy: {fault:?}"
                );
            }
            faults.into_iter().map(|fault| (fault.field, fault.code)).collect()
        }
    }
}

fn only(field: &str, code: &'static str) -> Vec<(String, &'static str)> {
    vec![(field.to_string(), code)]
}

#[test]
fn sizes_that_are_no_sizes() {
    assert_eq!(said(|d| d.body.wall_mm = f64::NAN), only("body/wall_mm", "not_finite"));
    assert_eq!(
        said(|d| d.tube.length_mm = f64::INFINITY),
        only("tube/length_mm", "not_finite")
    );
    assert_eq!(
        said(|d| d.head.outer_diameter_mm = -25.0),
        only("head/outer_diameter_mm", "below_minimum")
    );
    assert_eq!(
        said(|d| d.body.outer_diameter_mm = 32_000.0),
        only("body/outer_diameter_mm", "above_maximum")
    );
    assert_eq!(
        said(|d| d.dip.vapour_reset = Some(1.5)),
        only("dip/vapour_reset", "above_maximum")
    );
    assert_eq!(
        said(|d| d.cup.as_mut().unwrap().covered_fraction = Some(-0.1)),
        only("cup/covered_fraction", "below_minimum")
    );
    assert_eq!(
        said(|d| d.cup.as_mut().unwrap().shared_by = Some(0)),
        only("cup/shared_by", "below_minimum")
    );
}

#[test]
fn walls_and_tube_that_do_not_fit() {
    assert_eq!(
        said(|d| (d.head.outer_diameter_mm, d.head.wall_mm) = (18.0, 9.5)),
        only("head/wall_mm", "wall_too_thick")
    );
    assert_eq!(
        said(|d| d.tube.outer_diameter_mm = 5.0),
        only("tube/outer_diameter_mm", "tube_wall_too_thin")
    );
    assert_eq!(
        said(|d| d.tube.length_mm = 31.0),
        only("tube/length_mm", "tube_too_short")
    );
    assert_eq!(
        said(|d| d.tube.end_gap_mm = Some(16.0)),
        only("tube/end_gap_mm", "end_gap_too_large")
    );
    let wide = said(|d| (d.tube.bore_mm, d.tube.outer_diameter_mm) = (18.0, 20.0));
    assert_eq!(wide, only("tube/outer_diameter_mm", "tube_wider_than_bulb"));
}

#[test]
fn felt_and_cup_that_do_not_fit() {
    assert_eq!(
        said(|d| d.head.felt.capacity_g = 3.0),
        only("head/felt/capacity_g", "felt_too_small")
    );
    assert_eq!(
        said(|d| d.cup.as_mut().unwrap().reach_mm = 76.0),
        only("cup/reach_mm", "deeper_than_cup")
    );
    assert_eq!(
        said(|d| d.cup.as_mut().unwrap().freeboard_mm = Some(80.0)),
        only("cup/freeboard_mm", "above_depth")
    );
}

#[test]
fn too_little_and_too_much_liquid() {
    assert_eq!(
        said(|d| d.fluid.volume_ml = 0.5),
        only("fluid/volume_ml", "never_reaches_head")
    );
    assert_eq!(
        said(|d| (d.fluid.volume_ml, d.tube.end_gap_mm) = (1.0, Some(8.0))),
        only("fluid/volume_ml", "too_little_liquid")
    );
    assert_eq!(
        said(|d| d.fluid.volume_ml = 16.0),
        only("fluid/volume_ml", "overfilled")
    );
    assert!(said(|d| d.fluid.volume_ml = 13.8).contains(&("fluid/volume_ml".to_string(), "liquid_full_when_hot")));
    assert_eq!(
        said(|d| d.fluid.volume_ml = 13.0),
        only("fluid/volume_ml", "stuck_down")
    );
}

#[test]
fn tip_volumes_beyond_what_is_there() {
    let tip = |tip_volume_ml: f64| BalanceDefinition::TipVolume {
        tip_volume_ml,
        dip_angle_deg: None,
    };
    assert_eq!(
        said(|d| d.balance = tip(8.4)),
        only("balance/tip_volume_ml", "head_full")
    );
    let shallow = said(|d| {
        d.fluid.volume_ml = 6.0;
        d.balance = tip(5.9);
    });
    assert_eq!(shallow, only("balance/tip_volume_ml", "body_runs_out"));
}

#[test]
fn a_bore_in_which_a_bubble_locks() {
    // 2 sqrt(0.0278 / (1326 * 9.81)) = 2.92 mm for dichloromethane.
    assert_eq!(said(|d| d.tube.bore_mm = 2.8), only("tube/bore_mm", "bubble_locks"));
    assert_eq!(said(|d| d.tube.bore_mm = 3.0), []);
}

#[test]
fn a_body_that_the_hot_liquid_fills_can_be_kept_cooler() {
    let fill = |d: &mut Definition| {
        d.fluid.volume_ml = 13.6;
        d.balance = BalanceDefinition::TipVolume {
            tip_volume_ml: 7.0,
            dip_angle_deg: None,
        };
    };
    assert!(said(fill).contains(&("fluid/volume_ml".to_string(), "liquid_full_when_hot")));
    let cooler = said(|d| {
        fill(d);
        d.max_temperature_c = Some(35.0);
    });
    assert!(
        !cooler.iter().any(|(_, code)| *code == "liquid_full_when_hot"),
        "{cooler:?}"
    );
}

#[test]
fn a_fluid_too_weak_for_the_height() {
    let weak = said_of("foyer-900", |d| {
        d.fluid.name = "ethanol".to_string();
        d.max_temperature_c = Some(20.0);
    });
    assert_eq!(weak, only("fluid/name", "vapour_too_weak"));
}

#[test]
fn wrong_names_are_answered_with_the_nearest() {
    let mut definition = example("shelf-180");
    definition.fluid.name = "dicloromethane".to_string();
    definition.evaporant.name = "wter".to_string();
    let faults = check(&definition).unwrap_err();
    let detail = |field: &str| &faults.iter().find(|fault| fault.field == field).unwrap().detail;
    assert!(
        detail("fluid/name").contains("did you mean `dichloromethane`?"),
        "{faults:?}"
    );
    assert!(detail("evaporant/name").contains("did you mean `water`?"), "{faults:?}");
}

#[test]
fn strength_and_constants_belong_to_their_own_names() {
    let strength = "evaporant/strength_abv_pct";
    assert_eq!(
        said(|d| d.evaporant.strength_abv_pct = Some(40.0)),
        only(strength, "not_for_water")
    );
    assert_eq!(
        said(|d| d.evaporant.name = "ethanol_water".to_string()),
        only(strength, "missing")
    );
    assert_eq!(
        said(|d| d.evaporant.strength_abv_pct = Some(140.0)),
        [
            (strength.to_string(), "above_maximum"),
            (strength.to_string(), "not_for_water")
        ]
    );
    assert_eq!(
        said(|d| d.fluid.name = "custom".to_string()),
        only("fluid/custom", "missing")
    );
    assert_eq!(
        said(|d| d.max_temperature_c = Some(120.0)),
        only("max_temperature_c", "beyond_the_fluid")
    );
}

#[test]
fn names_that_are_no_names() {
    assert_eq!(said(|d| d.name = "  ".to_string()), only("name", "length"));
    assert_eq!(said(|d| d.name = "x".repeat(81)), only("name", "length"));
    assert_eq!(
        said(|d| d.name = "a\u{7}b".to_string()),
        only("name", "control_character")
    );
}

#[test]
fn masses_that_do_not_balance() {
    let masses = |change: fn(&mut f64, &mut f64)| {
        said_of("shelf-180-masses", |d| {
            if let BalanceDefinition::Masses {
                pivot_height_mm,
                forward_moment_g_mm,
                ..
            } = &mut d.balance
            {
                change(pivot_height_mm, forward_moment_g_mm);
            }
        })
    };
    assert_eq!(
        masses(|pivot, _| *pivot = 30.0),
        only("balance/pivot_height_mm", "tips_at_rest")
    );
    assert_eq!(
        masses(|_, forward| *forward = 90_000.0),
        only("balance/pivot_height_mm", "tips_at_rest")
    );
    assert_eq!(
        masses(|pivot, _| *pivot = 100.0),
        only("balance/pivot_height_mm", "never_tips")
    );
    let extra = said_of("shelf-180-masses", |d| {
        if let BalanceDefinition::Masses { extra, .. } = &mut d.balance {
            extra[1].mass_g = f64::NAN;
        }
    });
    assert_eq!(extra, only("balance/extra/1/mass_g", "not_finite"));
}

#[test]
fn all_faults_are_told_at_once() {
    let all = said(|d| {
        d.name = String::new();
        d.head.wall_mm = -1.0;
        d.tube.bore_mm = 1.0;
        d.fluid.name = "lava".to_string();
        d.evaporant.name = "beer".to_string();
        d.dip.seconds = Some(f64::NAN);
        d.cup.as_mut().unwrap().reach_mm = 200.0;
        d.balance = BalanceDefinition::TipVolume {
            tip_volume_ml: 0.0,
            dip_angle_deg: Some(300.0),
        };
    });
    let fields: Vec<&str> = all.iter().map(|(field, _)| field.as_str()).collect();
    for field in [
        "name",
        "head/wall_mm",
        "fluid/name",
        "evaporant/name",
        "dip/seconds",
        "cup/reach_mm",
        "balance/tip_volume_ml",
        "balance/dip_angle_deg",
    ] {
        assert!(fields.contains(&field), "{field} is missing in {fields:?}");
    }
}

#[test]
fn every_bound_is_sane_and_named_once() {
    for (index, bound) in ALL_BOUNDS.iter().enumerate() {
        assert!(bound.minimum < bound.maximum, "{bound:?}");
        assert!(
            ALL_BOUNDS[index + 1..].iter().all(|other| other.field != bound.field),
            "{bound:?}"
        );
    }
}
