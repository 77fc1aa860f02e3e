//! Clock times: opening hours, zones, lamps on a timer.

use super::air::*;
use dipcast::model::device::{LampDefinition, LampTarget};
use dipcast::model::prediction::*;

fn daily(from: &str, to: &str) -> ClockSchedule {
    let interval = ClockInterval {
        from: from.into(),
        to: to.into(),
    };
    ClockSchedule {
        weekly: std::array::from_fn(|_| vec![interval.clone()]),
        exceptions: Vec::new(),
    }
}

fn open(schedule: Option<ClockSchedule>, zone: &str) -> Options {
    Options {
        opening_hours: schedule,
        time_zone: Some(zone.into()),
        ..plain()
    }
}

#[test]
fn always_open_is_the_default_and_said() {
    let found = run(&shelf(), &shed(240), plain()).unwrap();
    let totals = found.summary.totals;
    assert_eq!((totals.open_hours, totals.cycles_open_hours), (240.0, totals.cycles));
    assert_eq!(totals.stall_hours.open, totals.stall_hours.total);
    assert!(found.assumptions.iter().any(|a| a.what == "opening hours"));
}

#[test]
fn open_and_closed_are_all_there_is() {
    let shed = shed(24 * 20);
    let zone = "Australia/Lord_Howe";
    let totals = |from: &str, to: &str| {
        run(&shelf(), &shed, open(Some(daily(from, to)), zone))
            .unwrap()
            .summary
            .totals
    };
    let (day, night) = (totals("07:20", "19:40"), totals("19:40", "07:20"));
    assert!((day.open_hours + night.open_hours - 480.0).abs() < 1e-9);
    assert!((day.cycles_open_hours + night.cycles_open_hours - day.cycles).abs() < 1e-6);
    assert!((day.stall_hours.open + night.stall_hours.open - day.stall_hours.total).abs() < 1e-9);
    assert!(day.open_hours > 240.0 && day.cycles_open_hours > 0.0);
}

#[test]
fn a_quarter_past_is_three_quarters_of_an_hour() {
    let found = run(
        &shelf(),
        &steady(24, 22.0, 50.0),
        open(Some(daily("10:15", "11:00")), "UTC"),
    )
    .unwrap();
    let hours = found.hours.unwrap();
    assert_eq!(
        (hours.open_fraction[10], hours.open_fraction[9], hours.open_fraction[11]),
        (0.75, 0.0, 0.0)
    );
    assert!((found.summary.totals.cycles_open_hours - 0.75 * hours.cycles[10]).abs() < 1e-9);
}

#[test]
fn clock_hours_follow_the_zone() {
    let by_hour = |zone: &str| run(&shelf(), &shed(24 * 10), open(None, zone)).unwrap().hours_of_day;
    let (utc, kathmandu) = (by_hour("UTC"), by_hour("Asia/Kathmandu"));
    assert!(
        utc.iter()
            .chain(&kathmandu)
            .all(|hour| (hour.hours - 10.0).abs() < 1e-9)
    );
    // 05:45 ahead: the clock's 06 there is the last quarter of 00 and three quarters of 01... of UTC's 00:15 to 01:15.
    let expected = 0.75 * utc[0].cycles + 0.25 * utc[1].cycles;
    assert!(
        (kathmandu[6].cycles - expected).abs() < 1e-6,
        "{} against {expected}",
        kathmandu[6].cycles
    );
}

#[test]
fn a_lamp_on_a_timer_works_in_its_hours_only() {
    let mut device = shelf();
    device.lamp = Some(LampDefinition {
        on: LampTarget::Body,
        absorbed_w: 1.0,
    });
    let options = Options {
        lamp_hours: Some(daily("12:00", "14:30")),
        ..plain()
    };
    let lit = run(&device, &steady(24, 22.0, 50.0), options).unwrap().hours.unwrap();
    let dark = run(&shelf(), &steady(24, 22.0, 50.0), plain()).unwrap().hours.unwrap();
    assert_eq!(lit.cycles[..12], dark.cycles[..12]);
    assert!(
        lit.cycles[13] > 1.3 * dark.cycles[13],
        "{} against {}",
        lit.cycles[13],
        dark.cycles[13]
    );
    assert!(lit.cycles[14] < lit.cycles[13] && lit.cycles[14] > dark.cycles[14]);
    assert!(
        (lit.cycles[23] / dark.cycles[23] - 1.0).abs() < 0.02,
        "cooled down again"
    );
}
