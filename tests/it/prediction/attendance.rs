//! Who comes by, and what that does to the hours.

use super::air::*;
use dipcast::model::cycle::HourState;
use dipcast::model::prediction::*;

fn visited(policy: AttendancePolicy, days: u32, delay_hours: f64) -> Options {
    Options {
        attendance: Attendance {
            policy,
            days,
            delay_hours,
        },
        ..plain()
    }
}

#[test]
fn with_nobody_it_uses_the_reach_then_the_felt_and_is_dry_ever_after() {
    let room = steady(24 * 12, 22.0, 45.0);
    let found = run(&shelf(), &room, visited(AttendancePolicy::Never, 7, 0.0)).unwrap();
    assert!(found.visits.is_empty());
    let hours = found.hours.unwrap();
    let dry = &hours.state_fractions[HourState::Dry as usize];
    let last_cycle = hours.cycles.iter().rposition(|cycles| *cycles > 0.0).unwrap();
    assert!(
        last_cycle > 24 && last_cycle < 24 * 10,
        "last cycle in hour {last_cycle}"
    );
    assert!(dry[last_cycle + 1..].iter().all(|share| *share == 1.0));
    let reach_mm = 1e3 * shelf().cup.unwrap().reach_m;
    // The cup goes on drying where the beak no longer reaches.
    assert!(hours.cup_drop_mm[last_cycle] >= reach_mm && *hours.cup_drop_mm.last().unwrap() > reach_mm);
    let waiting: f64 = hours.needs_person_fraction.iter().sum();
    assert!((found.summary.totals.needs_person_hours - waiting).abs() < 1e-9 && waiting > 24.0);
    let spell = found.stall_spells.list.last().unwrap();
    assert_eq!((spell.cause, spell.healed_by), (HourState::Dry, HealedBy::NotYet));
}

#[test]
fn at_once_it_never_waits_and_every_fill_is_a_reach() {
    let found = run(
        &shelf(),
        &steady(24 * 12, 22.0, 45.0),
        visited(AttendancePolicy::WhenDue, 7, 0.0),
    )
    .unwrap();
    assert!(found.visits.len() >= 2);
    assert_eq!(found.summary.totals.needs_person_hours, 0.0);
    assert_eq!(found.summary.totals.stall_hours.total, 0.0);
    let cup = shelf().cup.unwrap();
    for visit in &found.visits {
        assert_eq!(visit.cause, VisitCause::CupAtReach);
        assert_eq!(visit.due_since_unix_s, Some(visit.at_unix_s));
        let reach_g = 1e6 * cup.area_m2 * cup.reach_m;
        assert!(
            (visit.water_g / reach_g - 1.0).abs() < 0.05,
            "{} against {reach_g}",
            visit.water_g
        );
    }
}

#[test]
fn waiting_hours_are_the_delay_of_every_visit() {
    let found = run(
        &shelf(),
        &steady(24 * 12, 22.0, 45.0),
        visited(AttendancePolicy::WhenDue, 7, 6.5),
    )
    .unwrap();
    let waited_s: i64 = found
        .visits
        .iter()
        .map(|v| v.at_unix_s - v.due_since_unix_s.unwrap())
        .sum();
    assert!(found.visits.len() >= 2);
    // The run ends between two visits or while one is waited for.
    let open_end_h = found.summary.totals.needs_person_hours - waited_s as f64 / 3600.0;
    assert!((-0.01..=6.5).contains(&open_end_h), "{open_end_h}");
    assert!(
        found
            .visits
            .iter()
            .all(|v| (v.at_unix_s - v.due_since_unix_s.unwrap() - 23_400).abs() <= 1)
    );
}

/// New York's clock went forward on 2013-03-10 (15 USC 260a): the round keeps its clock time, not its number of hours.
#[test]
fn a_round_keeps_its_clock_time_over_daylight_saving() {
    let mut room = steady(24 * 10, 22.0, 50.0);
    // 2013-03-06T15:00:00Z, ten in the morning there.
    room.start_unix_s = 1_362_582_000;
    let options = Options {
        time_zone: Some("America/New_York".into()),
        ..visited(AttendancePolicy::Every, 3, 0.0)
    };
    let found = run(&shelf(), &room, options).unwrap();
    let hours: Vec<i64> = found
        .visits
        .iter()
        .map(|v| (v.at_unix_s - room.start_unix_s) / 3600)
        .collect();
    assert_eq!(hours, [72, 143, 215]);
    assert!(found.visits.iter().all(|v| v.cause == VisitCause::Scheduled));
}

#[test]
fn spirit_is_replaced_whole_and_counted_apart() {
    let mut definition = dipcast::model::device::examples().remove(0).definition;
    definition.evaporant.name = "ethanol_water".into();
    definition.evaporant.strength_abv_pct = Some(40.0);
    let device = dipcast::model::device::check(&definition).unwrap().device;
    let found = run(
        &device,
        &steady(24 * 6, 22.0, 50.0),
        visited(AttendancePolicy::Every, 2, 0.0),
    )
    .unwrap();
    let totals = found.summary.totals;
    assert!(totals.ethanol_g.total > 0.0 && totals.water_g.total > 0.0);
    assert_eq!(found.visits.len(), 2);
    assert!(found.visits[0].ethanol_g > 0.0 && found.visits[0].ethanol_g < found.visits[0].water_g);
    let hours = found.hours.unwrap();
    // Freshly filled it is quicker than after two days of losing its spirit.
    assert!(
        hours.cycles[48] > 1.05 * hours.cycles[47],
        "{} then {}",
        hours.cycles[47],
        hours.cycles[48]
    );
}
