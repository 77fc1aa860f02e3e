//! Opening hours in local time, on the days on which the clock moves.

use serde_json::{Value, json};

use super::{answered, hours_before, of, room};

/// Hours open of one day with the same intervals on every weekday.
async fn open_hours(zone: &str, day: &str, intervals: Value) -> f64 {
    let found = answered(&with_hours(zone, day, intervals)).await;
    of(&found, "days", day, "open_hours")
}

fn with_hours(zone: &str, day: &str, intervals: Value) -> Value {
    let mut request = room(&hours_before(day, 24), 96, zone);
    let weekdays = ["mon", "tue", "wed", "thu", "fri", "sat", "sun"];
    for weekday in weekdays {
        request["options"]["opening_hours"]["weekly"][weekday] = intervals.clone();
    }
    request
}

/// New York skips 02:00 to 03:00 on 2026-03-08 and shows 01:00 to 02:00 twice on 2026-11-01 (15 USC 260a). The hours are
/// counted by hand; a clock time shown twice means its first showing.
#[tokio::test]
async fn an_hour_skipped_and_an_hour_repeated() {
    let (spring, autumn) = ("2026-03-08", "2026-11-01");
    let cases = [
        (json!([["09:00", "17:00"]]), 8.0, 8.0),
        (json!([["00:00", "24:00"]]), 23.0, 25.0),
        (json!([["22:00", "04:00"]]), 5.0, 7.0),
        (json!([["02:15", "02:45"]]), 0.0, 0.5),
        (json!([["01:15", "01:45"]]), 0.5, 0.5),
        (json!([["01:30", "02:30"]]), 0.5, 2.0),
        (json!([["02:30", "03:30"]]), 0.5, 1.0),
        (json!([["00:30", "01:30"]]), 1.0, 1.0),
        (json!([["00:00", "06:00"], ["20:00", "23:00"]]), 8.0, 10.0),
        (json!([["03:00", "02:00"]]), 23.0, 24.0),
    ];
    for (intervals, in_spring, in_autumn) in cases {
        let zone = "America/New_York";
        assert_eq!(
            open_hours(zone, spring, intervals.clone()).await,
            in_spring,
            "{spring} {intervals}"
        );
        assert_eq!(
            open_hours(zone, autumn, intervals.clone()).await,
            in_autumn,
            "{autumn} {intervals}"
        );
    }
}

/// Lord Howe moves by half an hour at 02:00; Casablanca went back at 03:00 when Ramadan began and forward at 02:00 after
/// it (tz database, release 2026f); Troll moves by two hours.
#[tokio::test]
async fn other_steps_than_an_hour_and_a_winter_clock_ahead() {
    for (zone, day, intervals, hours) in [
        ("Australia/Lord_Howe", "2026-04-05", json!([["01:00", "03:00"]]), 2.5),
        ("Australia/Lord_Howe", "2026-10-04", json!([["01:00", "03:00"]]), 1.5),
        ("Australia/Lord_Howe", "2026-10-04", json!([["02:00", "02:30"]]), 0.0),
        ("Africa/Casablanca", "2026-02-15", json!([["01:00", "04:00"]]), 4.0),
        ("Africa/Casablanca", "2026-03-22", json!([["01:00", "04:00"]]), 2.0),
        ("Africa/Casablanca", "2027-03-14", json!([["01:00", "04:00"]]), 3.0),
        ("Antarctica/Troll", "2026-03-29", json!([["00:00", "06:00"]]), 4.0),
        ("Antarctica/Troll", "2026-10-25", json!([["00:00", "06:00"]]), 8.0),
        ("Asia/Kolkata", "2026-03-08", json!([["10:00", "18:00"]]), 8.0),
    ] {
        assert_eq!(
            open_hours(zone, day, intervals.clone()).await,
            hours,
            "{zone} {day} {intervals}"
        );
    }
}

/// A night belongs to the evening on which it begins: closed on the evening of the change, the morning is closed too.
#[tokio::test]
async fn a_night_belongs_to_its_evening() {
    let mut request = with_hours("America/New_York", "2026-11-01", json!([["22:00", "04:00"]]));
    request["options"]["opening_hours"]["exceptions"] = json!([{"date": "2026-10-31", "intervals": []}]);
    let found = answered(&request).await;
    assert_eq!(of(&found, "days", "2026-10-31", "open_hours"), 4.0);
    assert_eq!(of(&found, "days", "2026-11-01", "open_hours"), 2.0);
    assert_eq!(of(&found, "days", "2026-11-02", "open_hours"), 6.0);
}

#[tokio::test]
async fn a_weekday_that_does_not_exist_is_not_open() {
    let mut request = room("2011-12-28T10:00:00Z", 96, "Pacific/Apia");
    // 30 December 2011 would have been a Friday.
    request["options"]["opening_hours"] = json!({"weekly": {"thu": [["22:00", "02:00"]], "fri": [["09:00", "17:00"]],
                                                            "sat": [["09:00", "10:00"]]}});
    let found = answered(&request).await;
    assert_eq!(of(&found, "days", "2011-12-29", "open_hours"), 2.0);
    assert_eq!(of(&found, "days", "2011-12-31", "open_hours"), 1.0);
    assert_eq!(found["summary"]["open_hours"], 3.0);
}

/// In steady air cycles come evenly, so that what happens while open is the open share of the hours.
#[tokio::test]
async fn cycles_while_open_are_those_of_the_open_hours() {
    let found = answered(&with_hours(
        "America/New_York",
        "2026-11-01",
        json!([["00:15", "02:30"]]),
    ))
    .await;
    let (hours, days) = (&found["hours"], &found["days"]);
    let column = |name: &str| -> Vec<f64> { serde_json::from_value(hours[name].clone()).unwrap() };
    let open: f64 = column("open_fraction")
        .iter()
        .zip(column("cycles"))
        .map(|(share, cycles)| share * cycles)
        .sum();
    let summed: f64 = days
        .as_array()
        .unwrap()
        .iter()
        .map(|day| day["cycles_open_hours"].as_f64().unwrap())
        .sum();
    assert!((open / summed - 1.0).abs() < 1e-6, "{open} in hours, {summed} in days");
    assert_eq!(of(&found, "days", "2026-11-01", "open_hours"), 3.25);
    assert_eq!(of(&found, "days", "2026-11-02", "open_hours"), 2.25);
}
