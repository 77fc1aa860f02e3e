//! Real hourly series, from the file to the answer. The ranges are facts of the trade: common practice, no source.

use super::air::{plain, run, shelf};
use dipcast::intake::csv::{Layout, Limits, read};
use dipcast::model::cycle::HourState;
use dipcast::model::prediction::*;
use dipcast::model::weather::{HourlySeries, RegulariseOptions, regularise};

fn series(file: &str, layout: &str, elevation_m: f64) -> HourlySeries {
    let folder = std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/data");
    let layout = std::fs::read(folder.join("layouts").join(layout)).unwrap();
    let layout: Layout = serde_json::from_slice(&layout).unwrap();
    let bytes = std::fs::read(folder.join(file)).unwrap();
    let raw = read(&bytes, Some(&layout), &Limits::default()).unwrap();
    let options = RegulariseOptions {
        elevation_m: Some(elevation_m),
        ..RegulariseOptions::default()
    };
    regularise(raw, &options).unwrap()
}

fn newark() -> HourlySeries {
    series("newark_laguardia_2013.csv", "newark.json", 5.0)
}

#[test]
fn a_lived_in_room_keeps_it_going_at_a_room_pace() {
    let room = series("belgian_house_2016.csv", "belgian_room.json", 50.0);
    let totals = run(&shelf(), &room, plain()).unwrap().summary.totals;
    let cycles_per_hour = totals.cycles / totals.hours;
    let head_g_per_hour = totals.water_g.head / totals.hours;
    assert!((60.0..280.0).contains(&cycles_per_hour), "{cycles_per_hour} cycles/h");
    assert!((0.2..1.0).contains(&head_g_per_hour), "{head_g_per_hour} g/h");
    assert!(totals.stall_hours.total < 0.01 * totals.hours, "{totals:?}");
}

#[test]
fn a_year_outdoors_stalls_in_damp_and_frost() {
    let found = run(&shelf(), &newark(), plain()).unwrap();
    let month = |label: &str| {
        found
            .months
            .as_ref()
            .unwrap()
            .iter()
            .find(|m| m.label == label)
            .unwrap()
            .totals
    };
    let (january, july) = (month("2013-01"), month("2013-07"));
    assert!(
        july.cycles > 5.0 * january.cycles,
        "{} against {}",
        july.cycles,
        january.cycles
    );
    assert!(july.stall_hours.frozen == 0.0 && january.stall_hours.frozen > 100.0);
    assert!(july.water_g.total > 2.0 * january.water_g.total);
    assert!(january.needs_person_hours > 24.0 && july.needs_person_hours == 0.0);
    assert!(
        found
            .stall_spells
            .list
            .iter()
            .any(|spell| spell.cause == HourState::Humid)
    );
    assert!(found.summary.totals.stall_hours.unknown > 0.0, "the series has a hole");
}

#[test]
fn it_never_runs_in_fog() {
    let series = newark();
    let hours = run(&shelf(), &series, plain()).unwrap().hours.unwrap();
    let saturated = |hour: usize| {
        let pressure_pa = dipcast::model::air::saturation_pressure_pa(series.temp_k[hour]);
        series.known[hour] && series.vapour_pressure_pa[hour] >= 0.995 * pressure_pa
    };
    let fog = |hour: &usize| saturated(*hour) && hour + 1 < series.known.len() && saturated(hour + 1);
    let foggy: Vec<usize> = (0..series.known.len()).filter(fog).collect();
    assert!(foggy.len() > 10, "{} foggy hours", foggy.len());
    for hour in foggy {
        assert_eq!(hours.cycles[hour], 0.0, "hour {hour}");
    }
}

#[test]
fn it_never_runs_in_hard_frost_and_frozen_nights_need_a_person() {
    let series = newark();
    let found = run(&shelf(), &series, plain()).unwrap();
    let hours = found.hours.unwrap();
    let frost = |hour: &usize| (hour - 6..=*hour + 1).all(|h| series.known[h] && series.temp_k[h] < 268.15);
    let cold: Vec<usize> = (6..series.known.len() - 1).filter(frost).collect();
    assert!(cold.len() > 50, "{} hours of hard frost", cold.len());
    assert!(cold.iter().all(|hour| hours.cycles[*hour] == 0.0));
    assert!(cold.iter().any(|hour| hours.needs_person_fraction[*hour] == 1.0));
    let healed = |by| {
        found
            .stall_spells
            .list
            .iter()
            .filter(|s| s.cause == HourState::Frozen && s.healed_by == by)
            .count()
    };
    assert!(healed(HealedBy::Person) > 0, "some frozen night needed a person");
}

#[test]
fn visits_lie_in_their_hours_and_in_air_above_freezing() {
    let series = newark();
    let found = run(&shelf(), &series, plain()).unwrap();
    let days = found.days.unwrap();
    let in_days: f64 = days.iter().map(|day| day.totals.visits).sum();
    assert_eq!(in_days as usize, found.visits.len());
    for visit in &found.visits {
        let hour = usize::try_from((visit.at_unix_s - series.start_unix_s) / 3600).unwrap();
        let warmest = series.temp_k[hour].max(series.temp_k[(hour + 1).min(series.temp_k.len() - 1)]);
        assert!(!series.known[hour] || warmest > 273.15, "hour {hour} at {warmest} K");
        assert!(visit.due_since_unix_s.is_some_and(|due| due <= visit.at_unix_s));
        assert!(visit.water_g > 0.0 && visit.water_g < 60.0, "{visit:?}");
    }
}

#[test]
fn a_year_has_its_months_in_the_zone_asked_for() {
    let options = Options {
        time_zone: Some("America/New_York".into()),
        ..plain()
    };
    let found = run(&shelf(), &newark(), options).unwrap();
    let months = found.months.unwrap();
    assert_eq!((months.len(), months[0].label.as_str()), (12, "2013-01"));
    let hours_of = |label: &str| {
        found
            .days
            .as_ref()
            .unwrap()
            .iter()
            .find(|d| d.label == label)
            .unwrap()
            .totals
            .hours
    };
    assert_eq!((hours_of("2013-03-10"), hours_of("2013-11-03")), (23.0, 25.0));
}

/// Every real series of this folder, from the file to a sane answer: time adds up, water follows cycles, causes fit the climate.
#[test]
fn every_climate_gets_an_answer_that_fits_it() {
    let totals = |file: &str, layout: &str, elevation_m: f64| {
        let totals = run(&shelf(), &series(file, layout, elevation_m), plain())
            .unwrap()
            .summary
            .totals;
        let stalled = &totals.stall_hours;
        assert!(stalled.total + stalled.unknown < totals.hours, "{file}: {totals:?}");
        // A cycle of this device costs the felt a few milligrams at most.
        let mg_per_cycle = 1e3 * totals.water_g.head / totals.cycles;
        assert!((2.0..8.0).contains(&mg_per_cycle), "{file}: {mg_per_cycle} mg a cycle");
        totals
    };
    let miami = totals("miami_typical_year.csv", "miami.json", 2.0);
    let alaska = totals("sand_point_typical_year.csv", "sand_point.json", 7.0);
    let lincoln = totals("lincoln_2023_jan_feb.csv", "lincoln.json", 362.7);
    let house = totals("belgian_house_2016.csv", "belgian_outdoors.json", 50.0);

    assert_eq!(miami.stall_hours.frozen, 0.0);
    assert!(
        miami.stall_hours.humid < 0.1 * miami.hours,
        "warm air holds the difference: {miami:?}"
    );
    assert!(
        alaska.stall_hours.humid > 0.2 * alaska.hours,
        "cold and damp all year: {alaska:?}"
    );
    assert!(
        lincoln.stall_hours.frozen > 0.5 * lincoln.hours,
        "a prairie winter: {lincoln:?}"
    );
    assert!(
        lincoln.needs_person_hours > 0.0,
        "felts dry out in weeks of frost: {lincoln:?}"
    );
    let pace = |t: &Totals| t.cycles / t.hours;
    let order = [pace(&miami), pace(&house), pace(&alaska), pace(&lincoln)];
    assert!(order.windows(2).all(|pair| pair[0] > pair[1]), "{order:?}");
}
