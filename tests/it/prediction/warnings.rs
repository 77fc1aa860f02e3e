//! Cautions name this run's figures and defer to local codes.

use super::air::*;
use dipcast::model::device::{LampDefinition, LampTarget, check, examples};
use dipcast::model::notes::{Caution, Severity};
use dipcast::model::prediction::*;

fn find<'a>(found: &'a Prediction, code: &str) -> Option<&'a Caution> {
    found.cautions.iter().find(|caution| caution.code == code)
}

/// Dichloromethane boils at 39.8 °C (CRC Handbook; remembered, not looked up): above it the body is over-pressured.
#[test]
fn pressure_turns_over_at_the_boiling_point() {
    let at = |celsius| run(&shelf(), &steady(2, celsius, 30.0), plain()).unwrap();
    let (cool, hot) = (at(35.0), at(45.0));
    let (cool, hot) = (
        find(&cool, "body_pressure").unwrap().clone(),
        find(&hot, "body_pressure").unwrap().clone(),
    );
    assert_eq!((cool.severity, hot.severity), (Severity::Info, Severity::Warning));
    assert!(
        cool.text.contains("35.0 °C") && cool.text.contains("kPa below"),
        "{}",
        cool.text
    );
    assert!(
        hot.text.contains("kPa above") && hot.text.contains("2026-01-01T"),
        "{}",
        hot.text
    );
}

#[test]
fn warm_water_is_counted_between_visits() {
    let found = run(&shelf(), &steady(24 * 14, 26.0, 60.0), plain()).unwrap();
    let caution = find(&found, "standing_water_hours").unwrap();
    let first_visit_h = (found.visits[0].at_unix_s - START_UNIX_S) / 3600;
    assert!(found.visits.len() > 1 && first_visit_h > 24);
    assert!(caution.text.contains("local health rules"), "{}", caution.text);
    let longest: f64 = caution
        .text
        .split("up to ")
        .nth(1)
        .unwrap()
        .split(' ')
        .next()
        .unwrap()
        .parse()
        .unwrap();
    assert!(
        (longest - first_visit_h as f64).abs() < 0.2 * first_visit_h as f64,
        "{longest} {first_visit_h}"
    );
    let cold = run(&shelf(), &steady(24 * 4, 12.0, 60.0), plain()).unwrap();
    assert!(find(&cold, "standing_water_hours").is_none());
}

#[test]
fn frost_is_warned_of_with_its_hours() {
    let found = run(&shelf(), &steady(24, -5.0, 80.0), plain()).unwrap();
    let caution = find(&found, "freezing").unwrap();
    assert!(caution.text.contains(" h of this run"), "{}", caution.text);
    assert!(find(&run(&shelf(), &steady(24, 10.0, 50.0), plain()).unwrap(), "freezing").is_none());
}

/// Spirit of 40 % by volume flashes at 26 °C (the fluid table).
#[test]
fn spirit_above_its_flash_point_is_a_danger_beside_a_lamp() {
    let mut definition = examples().remove(0).definition;
    definition.evaporant.name = "ethanol_water".into();
    definition.evaporant.strength_abv_pct = Some(40.0);
    let mut device = check(&definition).unwrap().device;
    let severity = |device: &_, celsius| {
        let found = run(device, &steady(4, celsius, 50.0), plain()).unwrap();
        find(&found, "evaporant_above_flash_point").map(|caution| caution.severity)
    };
    assert_eq!(severity(&device, 20.0), None);
    assert_eq!(severity(&device, 30.0), Some(Severity::Warning));
    device.lamp = Some(LampDefinition {
        on: LampTarget::Body,
        absorbed_w: 0.5,
    });
    assert_eq!(severity(&device, 30.0), Some(Severity::Danger));
}

#[test]
fn every_caution_defers_to_local_codes_or_licensed_practice() {
    let mut definition = examples().remove(0).definition;
    definition.lamp = Some(LampDefinition {
        on: LampTarget::Body,
        absorbed_w: 3.0,
    });
    let mut device = check(&definition).unwrap().device;
    device.max_temp_k = 313.15;
    let mut readings: Vec<(f64, f64)> = vec![(-6.0, 80.0); 30];
    readings.extend([(36.0, 30.0); 60]);
    let found = run(&device, &hours(readings), plain()).unwrap();
    assert!(found.cautions.len() >= 4, "{:?}", found.cautions);
    for caution in &found.cautions {
        let defers = ["local", "qualified", "licensed"]
            .iter()
            .any(|word| caution.text.contains(word));
        assert!(defers || caution.severity == Severity::Info, "{}", caution.text);
        assert!(
            !caution.text.contains("NaN") && !caution.text.contains("  "),
            "{}",
            caution.text
        );
    }
}
