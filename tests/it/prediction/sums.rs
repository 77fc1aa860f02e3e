//! Totals are the sum of their parts, whatever the zone and the visits.

use super::air::*;
use dipcast::model::device::Device;
use dipcast::model::fluids::Liquid;
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

/// What felt and cup hold in the end, told by the end state alone [g of water, g of ethanol].
fn left_g(device: &Device, end: &EndState) -> [f64; 2] {
    let felt = Liquid::from_abv(1e-3 * end.felt_liquid_g, end.felt_strength_abv_pct);
    let cup = device.cup.as_ref().unwrap();
    let of_strength = Liquid::from_abv(1.0, end.cup_strength_abv_pct.unwrap());
    let fallen_m3 = 1e-3 * end.cup_drop_mm.unwrap() * cup.area_m2;
    let cup_kg = cup.full.total_kg() - fallen_m3 * of_strength.density_kg_m3(end.cup_temp_c + 273.15);
    let both = felt.plus(of_strength.scaled(cup_kg));
    [1e3 * both.water_kg, 1e3 * both.ethanol_kg]
}

fn drinking_spirit(strength_abv_pct: f64) -> Device {
    let mut definition = dipcast::model::device::examples().remove(0).definition;
    definition.evaporant.name = "ethanol_water".into();
    definition.evaporant.strength_abv_pct = Some(strength_abv_pct);
    dipcast::model::device::check(&definition).unwrap().device
}

fn full_g(device: &Device) -> [f64; 2] {
    let felt = Liquid::from_abv(device.head.felt_capacity_kg, device.evaporant_abv_pct);
    let both = felt.plus(device.cup.as_ref().unwrap().full);
    [1e3 * both.water_kg, 1e3 * both.ethanol_kg]
}

/// Spirit is replaced whole at a visit: of water and of ethanol, what was there and what was poured is what was lost, what
/// was thrown away and what is left. A run that ends when somebody comes tells what is thrown away.
#[test]
fn spirit_balances_over_its_visits() {
    for strength_abv_pct in [12.0, 40.0, 70.0] {
        let device = drinking_spirit(strength_abv_pct);
        let every = |hours: usize| {
            let attendance = Attendance {
                policy: AttendancePolicy::Every,
                days: 3,
                delay_hours: 0.0,
            };
            run(&device, &steady(hours, 22.0, 45.0), Options { attendance, ..plain() }).unwrap()
        };
        let whole = every(24 * 20);
        let full = full_g(&device);
        let (mut had_g, mut gone_g) = (full, left_g(&device, &whole.end_state));
        for visit in &whole.visits {
            let before = every(((visit.at_unix_s - START_UNIX_S) / 3600) as usize);
            let thrown_g = left_g(&device, &before.end_state);
            for (liquid, poured_g) in [visit.water_g, visit.ethanol_g].into_iter().enumerate() {
                had_g[liquid] += poured_g;
                gone_g[liquid] += thrown_g[liquid];
                assert!(
                    close(poured_g, full[liquid]),
                    "{poured_g} g poured, {} g is full",
                    full[liquid]
                );
            }
        }
        gone_g[0] += whole.summary.totals.water_g.total;
        gone_g[1] += whole.summary.totals.ethanol_g.total;
        assert_eq!(whole.visits.len(), 6);
        for liquid in 0..2 {
            let residual = gone_g[liquid] / had_g[liquid] - 1.0;
            assert!(
                residual.abs() < 1e-9,
                "{strength_abv_pct} %: {had_g:?} g against {gone_g:?} g"
            );
        }
    }
}

/// The same where somebody comes in the very second it is due, hour after hour in changing air.
#[test]
fn spirit_balances_over_visits_in_mid_hour() {
    use dipcast::model::cycle::*;
    // A shallow reach brings somebody within hours, also where every dip is followed.
    for method in [Method::Averaged, Method::Resolved] {
        let mut device = drinking_spirit(40.0);
        device.cup.as_mut().unwrap().reach_m = 2e-4;
        let forcing = |hour: usize| {
            let warm = (hour as f64 / 24.0 * std::f64::consts::TAU).sin();
            Forcing::still(
                dipcast::model::air::Air::from_relative_humidity(295.0 + 4.0 * warm, 0.4 - 0.1 * warm, 101_325.0),
                0.3,
            )
        };
        let mut state = State::settled(&device, &Tuning::default(), &forcing(0));
        let (mut had, mut gone, mut visits) = (state.felt.plus(state.cup), Liquid::default(), 0);
        let hours = if method == Method::Averaged { 240 } else { 3 };
        for hour in 0..hours {
            let air = HourForcing {
                start: forcing(hour),
                end: forcing(hour + 1),
                known: true,
            };
            let mut at_s = 0.0;
            while at_s < 3600.0 {
                let out = run_stretch(
                    &device,
                    &Tuning::default(),
                    method,
                    &mut state,
                    &air,
                    at_s,
                    3600.0,
                    true,
                );
                gone = gone.plus(out.head_loss).plus(out.cup_loss);
                at_s = out.end_s;
                if out.due.is_some() {
                    gone = gone.plus(state.felt).plus(state.cup);
                    had = had.plus(refill(&device, &mut state));
                    visits += 1;
                }
            }
        }
        gone = gone.plus(state.felt).plus(state.cup);
        assert!(visits > 1, "{method:?}: {visits}");
        for (had_kg, gone_kg) in [(had.water_kg, gone.water_kg), (had.ethanol_kg, gone.ethanol_kg)] {
            assert!(
                (gone_kg / had_kg - 1.0).abs() < 1e-9,
                "{method:?}: {had_kg} kg against {gone_kg} kg"
            );
        }
    }
}
