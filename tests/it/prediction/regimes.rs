//! One test a regime: running, damp, heated on the wrong end, too hot, unknown; and what is carried over.

use super::air::*;
use dipcast::model::cycle::{HourState, Method};
use dipcast::model::device::{LampDefinition, LampTarget};
use dipcast::model::prediction::*;

fn lamp(on: LampTarget, absorbed_w: f64) -> Option<LampDefinition> {
    Some(LampDefinition { on, absorbed_w })
}

/// An ordinary room: common practice, no source.
#[test]
fn a_room_gives_a_room_pace() {
    let found = run(&shelf(), &steady(48, 22.0, 50.0), plain()).unwrap();
    let totals = found.summary.totals;
    assert!((60.0..280.0).contains(&(totals.cycles / 48.0)), "{totals:?}");
    assert!((0.2..1.0).contains(&(totals.water_g.head / 48.0)), "{totals:?}");
    assert_eq!(totals.stall_hours.total, 0.0);
    let hours = found.hours.unwrap();
    let (body, head) = (hours.body_temp_c[24].unwrap(), hours.head_temp_c[24].unwrap());
    assert!(head < body && body < 22.0, "{head} {body}");
}

#[test]
fn saturated_air_stops_it_without_drying_it() {
    let found = run(&shelf(), &steady(48, 18.0, 100.0), plain()).unwrap();
    let totals = found.summary.totals;
    assert_eq!((totals.cycles, totals.visits), (0.0, 0.0));
    assert!((totals.stall_hours.humid - 48.0).abs() < 1e-9);
    assert!(totals.water_g.head.abs() < 0.01, "{totals:?}");
    let spells = found.stall_spells;
    assert_eq!((spells.list.len(), spells.list[0].healed_by), (1, HealedBy::NotYet));
    assert!((spells.longest_hours - 48.0).abs() < 1e-9);
}

#[test]
fn the_damper_the_slower() {
    let cycles = |pct| {
        run(&shelf(), &steady(24, 22.0, pct), plain())
            .unwrap()
            .summary
            .totals
            .cycles
    };
    let paces: Vec<f64> = [20.0, 40.0, 60.0, 80.0, 90.0].map(cycles).to_vec();
    assert!(paces.windows(2).all(|pair| pair[1] < pair[0]), "{paces:?}");
}

#[test]
fn a_damp_night_heals_itself() {
    let night = (0..48).map(|hour| (15.0, if (12..20).contains(&hour) { 100.0 } else { 60.0 }));
    let found = run(&shelf(), &hours(night), plain()).unwrap();
    assert_eq!(found.stall_spells.list.len(), 1, "{:?}", found.stall_spells);
    let spell = found.stall_spells.list[0];
    assert_eq!((spell.cause, spell.healed_by), (HourState::Humid, HealedBy::Itself));
    let (from_h, to_h) = (
        (spell.from_unix_s - START_UNIX_S) as f64 / 3600.0,
        (spell.to_unix_s - START_UNIX_S) as f64 / 3600.0,
    );
    assert!(
        (11.0..12.5).contains(&from_h) && (19.0..20.5).contains(&to_h),
        "{from_h} to {to_h}"
    );
    assert_eq!(found.summary.totals.needs_person_hours, 0.0);
}

#[test]
fn a_lamp_on_the_head_stops_it_and_says_why() {
    let mut device = shelf();
    device.lamp = lamp(LampTarget::Head, 3.0);
    let options = Options {
        attendance: Attendance {
            policy: AttendancePolicy::Never,
            ..Attendance::default()
        },
        ..plain()
    };
    let totals = run(&device, &steady(1, 22.0, 60.0), options).unwrap().summary.totals;
    // Three watts dry the felt in a quarter of an hour (0.8 g at 2.4 kJ/g); until then the head is the warmer end.
    assert!(totals.cycles == 0.0 && totals.stall_hours.humid == 0.0, "{totals:?}");
    assert!((0.1..0.4).contains(&totals.stall_hours.warm_head), "{totals:?}");
}

#[test]
fn a_body_above_its_limit_is_overheated_and_promises_nothing() {
    let mut device = shelf();
    device.lamp = lamp(LampTarget::Body, 4.0);
    device.max_temp_k = 308.15;
    let found = run(&device, &steady(12, 34.0, 50.0), plain()).unwrap();
    assert!(
        found.summary.totals.stall_hours.overheated > 6.0,
        "{:?}",
        found.summary.totals
    );
    assert!(found.cautions.iter().any(|caution| caution.code == "overheated"));
}

#[test]
fn unknown_hours_hold_nothing_and_are_said() {
    let mut series = steady(30, 22.0, 50.0);
    series.known[10..20].fill(false);
    series.temp_k[10..20].fill(f64::NAN);
    series.vapour_pressure_pa[10..20].fill(f64::NAN);
    let found = run(&shelf(), &series, plain()).unwrap();
    let totals = found.summary.totals;
    assert_eq!((totals.stall_hours.unknown, totals.stall_hours.total), (10.0, 0.0));
    let hours = found.hours.unwrap();
    assert!(hours.cycles[10..20].iter().all(|cycles| *cycles == 0.0));
    assert_eq!((hours.body_temp_c[15], hours.stall_fraction[15]), (None, 0.0));
    assert!(hours.body_temp_c[20].is_some_and(f64::is_finite));
    assert_eq!(hours.cup_drop_mm[9], hours.cup_drop_mm[19]);
    assert!(found.assumptions.iter().any(|a| a.what == "hours without weather"));
}

#[test]
fn a_run_can_be_taken_up_where_another_ended() {
    let device = shelf();
    let whole = run(&device, &steady(48, 22.0, 50.0), plain()).unwrap();
    let first = run(&device, &steady(24, 22.0, 50.0), plain()).unwrap();
    let options = Options {
        initial_state: Some(first.end_state.into()),
        ..plain()
    };
    let second = run(&device, &steady(24, 22.0, 50.0), options).unwrap();
    let cycles = first.summary.totals.cycles + second.summary.totals.cycles;
    // The lifted volume is not carried over: a cycle or so.
    assert!(
        (cycles - whole.summary.totals.cycles).abs() < 2.0,
        "{cycles} {}",
        whole.summary.totals.cycles
    );
    let drop = |p: &Prediction| p.end_state.cup_drop_mm.unwrap();
    assert!(
        (drop(&second) - drop(&whole)).abs() < 0.02,
        "{} {}",
        drop(&second),
        drop(&whole)
    );
    assert!(!second.assumptions.iter().any(|a| a.what == "state at the start"));
}

#[test]
fn a_felt_that_dried_out_waits_although_the_air_is_fine() {
    let options = Options {
        initial_state: Some(InitialState {
            felt_liquid_g: Some(0.0),
            dried_out: Some(true),
            ..InitialState::default()
        }),
        attendance: Attendance {
            delay_hours: 5.0,
            ..Attendance::default()
        },
        ..plain()
    };
    let found = run(&shelf(), &steady(24, 22.0, 50.0), options).unwrap();
    let hours = found.hours.unwrap();
    assert_eq!((hours.cycles[4], hours.needs_person_fraction[4]), (0.0, 1.0));
    assert_eq!((found.visits.len(), found.visits[0].cause), (1, VisitCause::FeltDry));
    assert!(hours.cycles[7] > 60.0);
    assert_eq!(found.stall_spells.list[0].healed_by, HealedBy::Person);
}

#[test]
fn both_ways_of_solving_tell_the_same_story() {
    let run_with = |method| {
        let options = Options { method, ..plain() };
        run(&shelf(), &shed(24 * 5), options).unwrap().summary.totals
    };
    let (averaged, resolved) = (run_with(Method::Averaged), run_with(Method::Resolved));
    assert!(
        (averaged.cycles / resolved.cycles - 1.0).abs() < 0.03,
        "{averaged:?} {resolved:?}"
    );
    assert!(
        (averaged.stall_hours.total - resolved.stall_hours.total).abs() < 2.0,
        "{averaged:?} {resolved:?}"
    );
    assert!((averaged.water_g.total / resolved.water_g.total - 1.0).abs() < 0.03);
}

#[test]
fn one_cycle_close_up_rises_and_dips() {
    let options = Options {
        cycle_trace: true,
        ..plain()
    };
    let trace = run(&shelf(), &steady(24, 22.0, 50.0), options.clone())
        .unwrap()
        .cycle_trace
        .unwrap();
    assert!(trace.points.len() > 5);
    assert!(trace.points.windows(2).all(|pair| pair[0].time_s <= pair[1].time_s));
    let most = trace.points.iter().map(|point| point.lifted_m3).fold(0.0, f64::max);
    assert!((most / shelf().tip_volume_m3 - 1.0).abs() < 0.01, "{most}");
    assert!(
        run(&shelf(), &steady(24, 22.0, 100.0), options)
            .unwrap()
            .cycle_trace
            .is_none()
    );
}

/// What the assumption about air speed says of its effect.
#[test]
fn half_or_twice_the_air_speed_moves_the_period_by_about_a_fifth() {
    let (device, room) = (shelf(), steady(24, 22.0, 50.0));
    let given = |speed| {
        let air = placed(&room, &in_moving_air(speed));
        let request = PredictionRequest {
            device: &device,
            air: &air,
            options: plain(),
        };
        predict(&request, &|_, _| true).unwrap().summary.totals.cycles
    };
    let (slower, faster) = (given(0.1) / given(0.05), given(0.2) / given(0.1));
    assert!(
        (1.12..1.28).contains(&slower) && (1.12..1.3).contains(&faster),
        "{slower} {faster}"
    );
}
