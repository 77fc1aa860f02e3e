//! Everything wrong with a request is named at once, and a caller can stop a run.

use std::sync::atomic::{AtomicUsize, Ordering};

use super::air::*;
use dipcast::model::notes::Fault;
use dipcast::model::prediction::*;

fn faults(series_hours: usize, options: Options) -> Vec<Fault> {
    let (device, mut series) = (shelf(), steady(series_hours, 22.0, 50.0));
    if series_hours == 1 {
        series.known[0] = false;
    }
    let air = placed(&series, &in_moving_air(0.1));
    let request = PredictionRequest {
        device: &device,
        air: &air,
        options,
    };
    match predict(&request, &|_, _| true) {
        Err(PredictionError::Faults(faults)) => faults,
        other => panic!("{other:?}"),
    }
}

#[test]
fn all_faults_come_at_once_with_their_paths() {
    let interval = ClockInterval {
        from: "9".into(),
        to: "12:00".into(),
    };
    let options = Options {
        samples: 257,
        ranges: BandRanges {
            vapour_reset: BandRange { low: 0.8, high: 0.2 },
            cup_factor: BandRange {
                low: f64::NAN,
                high: 1.0,
            },
            ..BandRanges::default()
        },
        time_zone: Some("Europe/Nowhere".into()),
        attendance: Attendance {
            policy: AttendancePolicy::Every,
            days: 0,
            delay_hours: -1.0,
        },
        opening_hours: Some(ClockSchedule {
            weekly: [vec![interval], vec![], vec![], vec![], vec![], vec![], vec![]],
            exceptions: vec![],
        }),
        initial_state: Some(InitialState {
            cup_drop_mm: Some(-1.0),
            felt_liquid_g: Some(5.0),
            cup_strength_abv_pct: Some(40.0),
            body_temp_c: Some(f64::INFINITY),
            ..InitialState::default()
        }),
        spell_minutes: 1e9,
        ..Options::default()
    };
    let found: Vec<(String, &str)> = faults(1, options).into_iter().map(|f| (f.field, f.code)).collect();
    let expected = [
        ("weather", "no_known_hour"),
        ("options/spell_minutes", "above_maximum"),
        ("options/attendance/delay_hours", "below_minimum"),
        ("options/attendance/days", "below_minimum"),
        ("options/samples", "above_maximum"),
        ("options/ranges/cup_factor/low", "not_a_number"),
        ("options/ranges/vapour_reset", "low_above_high"),
        ("options/initial_state/felt_liquid_g", "above_maximum"),
        ("options/initial_state/body_temp_c", "not_a_number"),
        ("options/initial_state/cup_drop_mm", "below_minimum"),
        ("options/initial_state/cup_strength_abv_pct", "above_maximum"),
        ("options/opening_hours/weekly/mon/0", "invalid_interval"),
        ("options/time_zone", "unknown_time_zone"),
    ];
    assert_eq!(found, expected.map(|(field, code)| (field.to_string(), code)));
}

#[test]
fn a_device_without_a_cup_has_no_level_to_begin_with() {
    let mut device = shelf();
    device.cup = None;
    let options = Options {
        initial_state: Some(InitialState {
            cup_drop_mm: Some(1.0),
            ..InitialState::default()
        }),
        ..plain()
    };
    match run(&device, &steady(2, 22.0, 50.0), options) {
        Err(PredictionError::Faults(faults)) => {
            assert_eq!((faults.len(), faults[0].code), (1, "no_cup"));
            assert_eq!(faults[0].field, "options/initial_state/cup_drop_mm");
        }
        other => panic!("{other:?}"),
    }
}

#[test]
fn an_empty_series_is_a_fault_not_a_panic() {
    assert_eq!(faults(0, plain())[0].code, "no_known_hour");
}

#[test]
fn a_caller_can_stop_a_run_and_is_told_how_far_it_is() {
    let (device, series) = (shelf(), steady(1000, 22.0, 50.0));
    let air = placed(&series, &in_moving_air(0.1));
    let request = PredictionRequest {
        device: &device,
        air: &air,
        options: Options {
            samples: 4,
            ..Options::default()
        },
    };
    let last = AtomicUsize::new(0);
    let calls = AtomicUsize::new(0);
    let count = |done: usize, to_do: usize| {
        assert!(done <= to_do && to_do == 5000);
        last.fetch_max(done, Ordering::Relaxed);
        calls.fetch_add(1, Ordering::Relaxed);
        true
    };
    assert!(predict(&request, &count).is_ok());
    assert_eq!(last.load(Ordering::Relaxed), 5000);
    assert!(calls.load(Ordering::Relaxed) >= 25);
    let stopped = predict(&request, &|done, _| done < 600);
    assert!(matches!(stopped, Err(PredictionError::Cancelled)));
}
