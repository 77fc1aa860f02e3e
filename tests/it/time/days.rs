//! Days and months are as long as the clock makes them.

use super::{answered, hours_before, of, room};
use crate::reference::rows;

/// Days of 22 to 26 hours, of half hours more or less, and one that does not exist, counted by a library of another
/// language over the same release of the rules. The days around every change of 2026 and 2027, and all older rows.
#[tokio::test]
async fn every_day_is_as_long_as_another_library_says() {
    let mut compared = 0;
    for row in rows("reference/zone_days.csv") {
        let (zone, day) = (row.text("zone"), row.text("day"));
        if day.starts_with("2025") {
            continue;
        }
        let found = answered(&room(&hours_before(day, 20), 72, zone)).await;
        assert_eq!(of(&found, "days", day, "hours"), row.number("hours"), "{zone} {day}");
        compared += 1;
    }
    assert!(compared > 200, "{compared}");
}

/// Rules that changed this year (release notes of the tz database at iana.org/time-zones): Cuba does not fall back on
/// 2026-11-01 but on 2027-11-07 (2026f); Morocco is on +00 for good from 2026-09-20, no longer behind in Ramadan (2026c);
/// British Columbia and Alberta keep their summer clock (2026b, 2026c).
#[tokio::test]
async fn the_rules_are_those_of_release_2026f() {
    let expected = [
        ("America/Havana", "2026-11-01", 24.0),
        ("America/Havana", "2027-11-07", 25.0),
        ("Africa/Casablanca", "2026-09-20", 25.0),
        ("Africa/Casablanca", "2027-02-07", 24.0),
        ("America/Vancouver", "2026-11-01", 24.0),
        ("America/Edmonton", "2026-11-01", 24.0),
    ];
    for (zone, day, hours) in expected {
        let found = answered(&room(&hours_before(day, 20), 72, zone)).await;
        assert_eq!(of(&found, "days", day, "hours"), hours, "{zone} {day}");
    }
}

#[tokio::test]
async fn a_day_that_does_not_exist_is_not_in_the_answer() {
    let found = answered(&room("2011-12-28T10:00:00Z", 96, "Pacific/Apia")).await;
    let days = found["days"].as_array().unwrap();
    let labels: Vec<&str> = days.iter().map(|day| day["label"].as_str().unwrap()).collect();
    assert_eq!(labels, ["2011-12-28", "2011-12-29", "2011-12-31", "2012-01-01"]);
    assert_eq!(days[1]["to"], "2011-12-30T10:00:00Z");
    assert_eq!(days[2]["from"], "2011-12-30T10:00:00Z");
}

/// Thirty or 31 days and the hour, or half hour, that the clock takes or gives; Apia's December had 30 days.
#[tokio::test]
async fn months_are_as_long_as_the_clock_makes_them() {
    let expected = [
        ("America/New_York", "2026-03", "2026-03-01", 743.0),
        ("America/New_York", "2026-11", "2026-11-01", 721.0),
        ("Australia/Lord_Howe", "2026-04", "2026-04-01", 720.5),
        ("Australia/Lord_Howe", "2026-10", "2026-10-01", 743.5),
        ("Africa/Casablanca", "2026-02", "2026-02-01", 673.0),
        ("Pacific/Apia", "2011-12", "2011-12-01", 720.0),
        ("Asia/Kolkata", "2026-02", "2026-02-01", 672.0),
    ];
    for (zone, month, first, hours) in expected {
        let found = answered(&room(&hours_before(first, 24), 800, zone)).await;
        assert_eq!(of(&found, "months", month, "hours"), hours, "{zone} {month}");
        let days = found["days"].as_array().unwrap().iter();
        let inside = days.filter(|day| day["label"].as_str().unwrap().starts_with(month));
        let cycles: f64 = inside.map(|day| day["cycles"].as_f64().unwrap()).sum();
        let whole = of(&found, "months", month, "cycles");
        assert!(
            (cycles / whole - 1.0).abs() < 1e-9,
            "{zone} {month}: {cycles} in days, {whole}"
        );
    }
}

/// Kolkata is 5:30 ahead, Adelaide 10:30 in summer, Kathmandu 5:45: their midnights cut an hour of UTC.
#[tokio::test]
async fn midnights_of_half_hour_zones_cut_an_hour() {
    for (zone, midnight) in [
        ("Asia/Kolkata", "2026-01-10T18:30:00Z"),
        ("Australia/Adelaide", "2026-01-10T13:30:00Z"),
        ("Asia/Kathmandu", "2026-01-10T18:15:00Z"),
    ] {
        let found = answered(&room("2026-01-10T00:00:00Z", 48, zone)).await;
        let days = found["days"].as_array().unwrap();
        assert_eq!(days[1]["from"], midnight, "{zone}");
        assert_eq!(days[1]["label"], "2026-01-11");
        assert_eq!(days[1]["hours"], 24.0);
        let clock = found["hours_of_day"].as_array().unwrap();
        assert!(clock.iter().all(|hour| hour["hours"] == 2.0), "{zone}: {clock:?}");
    }
}

/// The repeated hour is counted twice in its hour of the clock, the skipped one not at all.
#[tokio::test]
async fn hours_of_the_clock_count_a_repeated_hour_twice() {
    for (first, hours, of_one) in [("2026-11-01T04:00:00Z", 25, 2.0), ("2026-03-08T05:00:00Z", 23, 1.0)] {
        let found = answered(&room(first, hours, "America/New_York")).await;
        let clock = found["hours_of_day"].as_array().unwrap();
        assert_eq!(clock[1]["hours"], of_one, "{first}");
        assert_eq!(clock[2]["hours"], if hours == 25 { 1.0 } else { 0.0 }, "{first}");
        assert_eq!(found["days"].as_array().unwrap().len(), 1);
    }
}
