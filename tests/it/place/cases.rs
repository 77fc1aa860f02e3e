//! Display cases: a small volume of air that the devices in it moisten.

use dipcast::model::place::*;
use dipcast::model::prediction::{Prediction, PredictionError, PredictionRequest, predict};

use crate::prediction::air::{in_moving_air, placed, plain, shelf, steady};

fn case(air_changes_per_hour: f64) -> CaseDefinition {
    CaseDefinition {
        inside: Box::new(in_moving_air(0.1)),
        volume_l: 20.0,
        air_changes_per_hour,
        devices: None,
        other_vapour_g_per_h: None,
        warmer_by_k: None,
        air_speed_m_s: None,
    }
}

fn predicted(case: CaseDefinition) -> Prediction {
    let air = placed(&steady(72, 22.0, 50.0), &Place::Case(case));
    let request = PredictionRequest {
        device: &shelf(),
        air: &air,
        options: plain(),
    };
    predict(&request, &|_, _| true).unwrap()
}

/// Cycles in the last hour.
fn last(prediction: &Prediction) -> f64 {
    *prediction.hours.as_ref().unwrap().cycles.last().unwrap()
}

#[test]
fn more_air_more_cycles_more_devices_fewer() {
    let found = [0.1, 0.7, 2.0, 20.0].map(|changes| last(&predicted(case(changes))));
    assert_eq!(found[0], 0.0);
    assert!(found.windows(2).all(|pair| pair[0] < pair[1]), "{found:?}");
    let two = last(&predicted(CaseDefinition {
        devices: Some(2),
        ..case(2.0)
    }));
    assert!(two < found[2], "{two} {found:?}");
    let plants = last(&predicted(CaseDefinition {
        other_vapour_g_per_h: Some(0.2),
        ..case(2.0)
    }));
    assert!(plants < found[2], "{plants} {found:?}");
    let warm = last(&predicted(CaseDefinition {
        warmer_by_k: Some(3.0),
        ..case(2.0)
    }));
    assert!(warm > found[2], "{warm} {found:?}");
}

/// Two devices in forty litres fare as one in twenty.
#[test]
fn twice_the_case_for_twice_the_devices() {
    let one = predicted(case(2.0));
    let two = predicted(CaseDefinition {
        volume_l: 40.0,
        devices: Some(2),
        ..case(2.0)
    });
    assert!((last(&one) - last(&two)).abs() < 1e-9);
}

#[test]
fn the_least_ventilation_is_where_it_stops_standing_still() {
    let least = predicted(case(1.0)).case.unwrap().least_air_changes_per_hour.unwrap();
    assert!((0.2..0.7).contains(&least), "{least}");
    assert_eq!(last(&predicted(case(0.9 * least))), 0.0);
    assert!(last(&predicted(case(1.15 * least))) > 0.0);
}

#[test]
fn a_case_in_damp_air_never_runs_and_says_so() {
    let air = placed(&steady(24, 22.0, 97.0), &Place::Case(case(5.0)));
    let request = PredictionRequest {
        device: &shelf(),
        air: &air,
        options: plain(),
    };
    let found = predict(&request, &|_, _| true).unwrap();
    assert_eq!(found.summary.totals.cycles, 0.0);
    assert_eq!(found.case.unwrap().least_air_changes_per_hour, None);
}

#[test]
fn the_hours_show_the_air_inside_beside_the_weather() {
    let found = predicted(case(1.0));
    let hours = found.hours.unwrap();
    let inside = hours.air_relative_humidity_pct.last().unwrap().unwrap();
    assert!((inside - 86.0).abs() < 2.0, "{inside}");
    let around = hours.outdoor_relative_humidity_pct.unwrap().last().unwrap().unwrap();
    assert!((around - 50.0).abs() < 1e-9, "{around}");
    assert!(found.end_state.case_relative_humidity_pct.unwrap() > 80.0);
}

#[test]
fn cups_are_shared_out_whole() {
    let mut definition = dipcast::model::device::examples().remove(0).definition;
    definition.cup.as_mut().unwrap().shared_by = Some(2);
    let device = dipcast::model::device::check(&definition).unwrap().device;
    let air = placed(
        &steady(2, 22.0, 50.0),
        &Place::Case(CaseDefinition {
            devices: Some(3),
            ..case(1.0)
        }),
    );
    let request = PredictionRequest {
        device: &device,
        air: &air,
        options: plain(),
    };
    match predict(&request, &|_, _| true) {
        Err(PredictionError::Faults(faults)) => assert_eq!(faults[0].code, "cup_not_shared_out"),
        other => panic!("{other:?}"),
    }
}

/// Cold nights in a room that is not heated: the case's vapour condenses on its glass, and the answer warns of it.
#[test]
fn dew_on_the_glass_is_warned_of() {
    let days = crate::prediction::air::hours((0..96).map(|hour| {
        let wave = (std::f64::consts::TAU * f64::from(hour) / 24.0).sin();
        (14.0 + 8.0 * wave, 60.0)
    }));
    let air = placed(&days, &Place::Case(case(0.05)));
    let request = PredictionRequest {
        device: &shelf(),
        air: &air,
        options: plain(),
    };
    let found = predict(&request, &|_, _| true).unwrap();
    assert!(found.air.dew_hours.unwrap() > 10, "{:?}", found.air);
    assert!(found.cautions.iter().any(|caution| caution.code == "dew_in_case"));
}

#[test]
fn bands_run_in_cases_too_and_are_the_same_each_time() {
    let air = placed(&steady(24, 22.0, 50.0), &Place::Case(case(1.0)));
    let request = PredictionRequest {
        device: &shelf(),
        air: &air,
        options: dipcast::model::prediction::Options {
            samples: 8,
            ..Default::default()
        },
    };
    let first = predict(&request, &|_, _| true).unwrap();
    let bands = first.summary.bands.unwrap().of(|totals| totals.cycles);
    assert!(bands.low < bands.central && bands.central < bands.high, "{bands:?}");
    assert_eq!(predict(&request, &|_, _| true).unwrap(), first);
}
