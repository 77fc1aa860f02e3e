//! Figures for the user, heat stores, assumptions and cautions.

use dipcast::model::device::*;
use dipcast::model::notes::Severity;

use super::{example, sound};

fn near(found: f64, expected: f64, relative: f64, what: &str) {
    assert!(
        (found / expected - 1.0).abs() < relative,
        "{what}: found {found}, expected {expected}"
    );
}

#[test]
fn stores_and_resistance_of_the_shelf_device_by_hand() {
    let device = sound(&example("shelf-180")).device;
    // Glass shells 4/3 pi (12.5^3 - 11.7^3) = 1472.3 mm3 and (16^3 - 15.2^3) = 2447.2 mm3, tube pi/4 (7^2 - 5^2) x 107 =
    // 2016.9 mm3, at 2230 kg/m3 and 830 J/(kg K); felt 0.5 g at 1340; liquid 9.5 mL at 1326.8 kg/m3 and 1191.6 J/(kg K).
    let glass = 2230.0 * 830.0 * 1e-9;
    near(device.head.dry_capacity_j_k, 1472.3 * glass + 0.67, 1e-3, "head");
    near(
        device.body.full_capacity_j_k,
        (2447.2 + 2016.9) * glass + 9.5e-6 * 1326.8 * 1191.6,
        1e-3,
        "body",
    );
    // (1/11.7 - 1/12.5) / (4 pi 1.1) + (1/12.5 - 1/13.5) / (4 pi 0.6), mm to m: 0.396 + 0.786 K/W.
    near(device.head.felt_resistance_k_w, 1.182, 1e-3, "wall and felt");
    // pi 27^2 mm2 + 5 cm2.
    near(device.head.wet_area_m2, 27.902e-4, 1e-4, "wet area");
    near(device.body.tube_length_m, 0.078, 1e-9, "tube between the bulbs");
}

#[test]
fn spirit_weighs_less_in_the_felt() {
    let mut spirit = example("shelf-180");
    spirit.evaporant = EvaporantDefinition {
        name: "ethanol_water".to_string(),
        strength_abv_pct: Some(40.0),
        hardness_mg_l: None,
        scale_effect_pct: None,
    };
    let device = sound(&spirit).device;
    // 948.05 kg/m3 at 40 % by volume and 20 °C against 998.2 (OIML R 22).
    near(device.head.felt_capacity_kg, 0.8e-3 * 948.05 / 998.20, 1e-3, "felt");
    assert_eq!(device.evaporant_abv_pct, 40.0);
}

#[test]
fn lift_pressure_and_cup_of_the_shelf_device() {
    let derived = sound(&example("shelf-180")).derived;
    // 148 mm of lift for a kelvin: slope 1950 Pa/K (two libraries: 1920-1980) over 1326.8 kg/m3 x 9.80665 m/s2.
    near(
        derived.lift_at_tip_mm / derived.lift_at_tip_k.unwrap(),
        148.0,
        0.03,
        "mm/K",
    );
    near(derived.pressure_20c_kpa, 47.25, 0.01, "46.8-47.7 kPa at 20 °C");
    near(derived.overpressure_hottest_kpa, 95.0, 0.02, "+95 kPa at 60 °C");
    near(
        derived.body_fill_hottest_pct / derived.body_fill_pct,
        1.064,
        0.002,
        "6.4 % from 20 to 60 °C",
    );
    // pi/4 65^2 x 75 and x 11 mm.
    near(derived.cup_volume_l.unwrap(), 0.24887, 1e-4, "cup");
    near(derived.cup_within_reach_l.unwrap(), 0.036501, 1e-4, "within reach");
    assert!(derived.lean_at_tip_deg.is_none() && derived.dip_angle_deg == 80.0);
    assert!(derived.body_time_constant_s > derived.head_time_constant_s);
}

#[test]
fn what_a_fluid_cannot_do_at_twenty_degrees_is_left_open() {
    let mut tall = example("foyer-900");
    tall.fluid.name = "ethanol".to_string();
    let derived = sound(&tall).derived;
    assert!(derived.lift_at_tip_pa > 5.9e3 && derived.lift_at_tip_k.is_none() && derived.heat_per_cycle_j.is_none());
}

#[test]
fn every_missing_number_is_said_and_given_ones_are_not() {
    let mut bare = example("shelf-180");
    bare.dip = DipDefinition::default();
    bare.conduction_w_k = None;
    bare.head.beak_area_cm2 = None;
    let said = sound(&bare).assumptions;
    let value = |what: &str| {
        said.iter()
            .find(|one| one.what.contains(what))
            .map(|one| one.value.as_str())
    };
    for (what, expected) in [
        ("beak", "0 cm2"),
        ("conducted from body", "0.002 W/K"),
        ("upright again", "2 s"),
        ("liquid that drains", "1"),
        ("closed by vapour", "0.5"),
        ("tube's lower end", "3 mm"),
        ("beak meets the cup", "80 deg"),
        ("brim mark", "5 mm"),
        ("taken up in one dip", "0.05 g"),
    ] {
        let found = value(what).or_else(|| {
            said.iter()
                .find(|one| one.value == expected)
                .map(|one| one.value.as_str())
        });
        assert_eq!(found, Some(expected), "{what} in {said:#?}");
    }
    assert!(said.iter().all(|one| !one.effect.is_empty()));
    let given = sound(&example("shelf-180")).assumptions;
    assert!(given.len() < said.len() && !given.iter().any(|one| one.what.contains("conducted from body")));
}

#[test]
fn cautions_follow_fluid_lamp_strength_and_cup() {
    let codes = |definition: &Definition| -> Vec<&'static str> {
        let cautions = sound(definition).cautions;
        assert!(
            cautions.windows(2).all(|pair| pair[0].severity >= pair[1].severity),
            "most urgent first"
        );
        assert!(
            cautions
                .iter()
                .all(|one| one.severity != Severity::Danger || one.text.len() > 60)
        );
        cautions.iter().map(|one| one.code).collect()
    };
    let shelf = codes(&example("shelf-180"));
    for code in [
        "toxic_fluid",
        "restricted_fluid",
        "restricted_in_ornaments",
        "glass_under_pressure",
        "liquid_expansion",
        "standing_water",
    ] {
        assert!(shelf.contains(&code), "{code} in {shelf:?}");
    }
    let mut lit = example("window-220");
    lit.lamp = Some(LampDefinition {
        on: LampTarget::Body,
        absorbed_w: 2.0,
    });
    lit.evaporant = EvaporantDefinition {
        name: "ethanol_water".into(),
        strength_abv_pct: Some(40.0),
        hardness_mg_l: None,
        scale_effect_pct: None,
    };
    let lit = codes(&lit);
    for code in [
        "flammable_fluid",
        "flammable_fluid_near_lamp",
        "flammable_evaporant",
        "flammable_evaporant_near_lamp",
    ] {
        assert!(lit.contains(&code), "{code} in {lit:?}");
    }
    let mut dry = example("shelf-180");
    dry.cup = None;
    assert!(!codes(&dry).contains(&"standing_water"));
}
