//! Totals are the sum of their parts, whatever the zone and the visits.

use super::air::*;
use dipcast::model::prediction::*;

fn close(a: f64, b: f64) -> bool {
    (a - b).abs() <= 1e-9 * a.abs().max(b.abs()).max(1.0)
}

/// Every figure that is a sum over time.
fn sums(totals: &Totals) -> [f64; 18] {
    let (stall, water) = (&totals.stall_hours, &totals.water_g);
    [
        totals.hours,
        totals.cycles,
        totals.cycles_open_hours,
        totals.open_hours,
        totals.needs_person_hours,
        totals.visits,
        stall.total,
        stall.open,
        stall.humid,
        stall.dry,
        stall.frozen,
        stall.warm_head,
        stall.overheated,
        stall.unknown,
        water.total,
        water.head,
        water.cup,
        totals.ethanol_g.total,
    ]
}

fn assert_adds_up<'a>(name: &str, whole: &Totals, parts: impl Iterator<Item = &'a Totals>) {
    let mut added = [0.0; 18];
    for part in parts {
        added
            .iter_mut()
            .zip(sums(part))
            .for_each(|(sum, figure)| *sum += figure);
    }
    for (i, (sum, figure)) in added.iter().zip(sums(whole)).enumerate() {
        assert!(close(*sum, figure), "{name}, figure {i}: {sum} against {figure}");
    }
}

fn opening_hours() -> ClockSchedule {
    let interval = |from: &str, to: &str| ClockInterval {
        from: from.into(),
        to: to.into(),
    };
    ClockSchedule {
        weekly: std::array::from_fn(|_| vec![interval("09:15", "12:00"), interval("20:00", "02:30")]),
        exceptions: vec![ScheduleException {
            date: "2026-01-20".into(),
            intervals: vec![],
        }],
    }
}

#[test]
fn months_days_clock_hours_and_hours_add_up_to_the_run() {
    let mut series = shed(24 * 40);
    series.known[100..107].fill(false);
    for zone in ["UTC", "Asia/Kathmandu", "America/St_Johns"] {
        let options = Options {
            time_zone: Some(zone.into()),
            opening_hours: Some(opening_hours()),
            attendance: Attendance {
                policy: AttendancePolicy::WhenDue,
                delay_hours: 5.5,
                ..Attendance::default()
            },
            ..plain()
        };
        let found = run(&shelf(), &series, options).unwrap();
        let whole = &found.summary.totals;
        assert_adds_up(
            "months",
            whole,
            found.months.iter().flatten().map(|month| &month.totals),
        );
        assert_adds_up("days", whole, found.days.iter().flatten().map(|day| &day.totals));
        assert_adds_up("clock hours", whole, found.hours_of_day.iter());
        let hours = found.hours.unwrap();
        let sum = |column: &[f64]| column.iter().sum::<f64>();
        assert!(close(sum(&hours.cycles), whole.cycles) && close(sum(&hours.stall_fraction), whole.stall_hours.total));
        assert!(
            close(sum(&hours.water_head_g), whole.water_g.head) && close(sum(&hours.water_cup_g), whole.water_g.cup)
        );
        assert!(close(sum(&hours.needs_person_fraction), whole.needs_person_hours));
        assert!(close(sum(&hours.open_fraction), whole.open_hours));
        assert_eq!(whole.stall_hours.unknown, 7.0);
    }
}

#[test]
fn the_states_of_every_hour_fill_it() {
    let hours = run(&shelf(), &shed(24 * 30), plain()).unwrap().hours.unwrap();
    for hour in 0..hours.cycles.len() {
        let all: f64 = hours.state_fractions.iter().map(|column| column[hour]).sum();
        assert!((all - 1.0).abs() < 1e-9, "hour {hour}: {all}");
    }
}

#[test]
fn stall_causes_and_losses_add_up() {
    let totals = run(&shelf(), &shed(24 * 60), plain()).unwrap().summary.totals;
    let stall = totals.stall_hours;
    assert!(close(
        stall.total,
        stall.humid + stall.dry + stall.frozen + stall.warm_head + stall.overheated
    ));
    assert!(close(totals.water_g.total, totals.water_g.head + totals.water_g.cup));
    assert!(
        totals.cycles > 0.0 && stall.humid > 0.0 && stall.frozen > 0.0,
        "{totals:?}"
    );
}

#[test]
fn spells_hold_all_stalled_time() {
    let found = run(&shelf(), &shed(24 * 60), plain()).unwrap();
    let spells = &found.stall_spells;
    let listed: f64 = spells.list.iter().map(|spell| spell.hours).sum();
    assert!((listed + spells.short_hours - found.summary.totals.stall_hours.total).abs() < 1e-6);
    assert!(
        spells
            .list
            .windows(2)
            .all(|pair| pair[0].to_unix_s <= pair[1].from_unix_s)
    );
}

/// What was filled in, less what went into the air, is what felt and cup hold more than at the start.
#[test]
fn water_balances() {
    let device = shelf();
    for (policy, delay_hours) in [
        (AttendancePolicy::WhenDue, 0.0),
        (AttendancePolicy::WhenDue, 30.0),
        (AttendancePolicy::Every, 0.0),
        (AttendancePolicy::Never, 0.0),
    ] {
        let options = Options {
            attendance: Attendance {
                policy,
                days: 3,
                delay_hours,
            },
            ..plain()
        };
        let found = run(&device, &shed(24 * 45), options).unwrap();
        let filled_g: f64 = found.visits.iter().map(|visit| visit.water_g).sum();
        let cup_area_m2 = device.cup.as_ref().unwrap().area_m2;
        let end = found.end_state;
        let density_kg_m3 = dipcast::model::fluids::Liquid::water(1.0).density_kg_m3(end.cup_temp_c + 273.15);
        let cup_g = -end.cup_drop_mm.unwrap() * cup_area_m2 * density_kg_m3;
        let felt_g = end.felt_liquid_g - 1e3 * device.head.felt_capacity_kg;
        let residual_g = filled_g - found.summary.totals.water_g.total - cup_g - felt_g;
        assert!(residual_g.abs() < 1e-6, "{policy:?} {delay_hours}: {residual_g} g");
    }
}
