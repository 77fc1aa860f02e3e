//! A round comes by at its clock time, whatever the clock does.

use serde_json::{Value, json};

use super::{answered, room};

/// When somebody comes by who comes each so many days at the clock time of the start.
async fn visits(zone: &str, start: &str, hours: usize, days: u32) -> Vec<String> {
    let mut request = room(start, hours, zone);
    request["options"]["attendance"] = json!({"policy": "every", "days": days});
    let found = answered(&request).await;
    let visits = found["visits"].as_array().unwrap().iter();
    visits
        .map(|visit: &Value| visit["at"].as_str().unwrap().trim_end_matches(":00Z").to_owned())
        .collect()
}

/// Ten in the morning in New York is 15:00Z in winter and 14:00Z in summer (15 USC 260a).
#[tokio::test]
async fn ten_in_the_morning_stays_ten_in_the_morning() {
    let spring = visits("America/New_York", "2026-03-06T15:00:00Z", 90, 1).await;
    assert_eq!(spring, ["2026-03-07T15:00", "2026-03-08T14:00", "2026-03-09T14:00"]);
    let autumn = visits("America/New_York", "2026-10-30T14:00:00Z", 90, 1).await;
    assert_eq!(autumn, ["2026-10-31T14:00", "2026-11-01T15:00", "2026-11-02T15:00"]);
    let weekly = visits("America/New_York", "2026-03-02T15:00:00Z", 400, 7).await;
    assert_eq!(weekly, ["2026-03-09T14:00", "2026-03-16T14:00"]);
}

/// A time that is skipped means the moment of the jump, one shown twice its first showing.
#[tokio::test]
async fn a_skipped_time_is_the_jump_and_a_repeated_one_comes_once() {
    // 02:30 there; skipped on 8 March, when 02:00 became 03:00 at 07:00Z.
    let spring = visits("America/New_York", "2026-03-06T07:30:00Z", 84, 1).await;
    assert_eq!(spring, ["2026-03-07T07:30", "2026-03-08T07:00", "2026-03-09T06:30"]);
    // 01:30 there; shown twice on 1 November.
    let autumn = visits("America/New_York", "2026-10-30T05:30:00Z", 84, 1).await;
    assert_eq!(autumn, ["2026-10-31T05:30", "2026-11-01T05:30", "2026-11-02T06:30"]);
}

/// Lord Howe at 02:15, skipped on 2026-10-04 when 02:00 became 02:30 at 15:30Z the day before.
#[tokio::test]
async fn half_an_hour_is_skipped_likewise() {
    let found = visits("Australia/Lord_Howe", "2026-10-01T15:45:00Z", 84, 1).await;
    assert_eq!(found, ["2026-10-02T15:45", "2026-10-03T15:30", "2026-10-04T15:15"]);
}

/// Apia had no 30 December 2011, so nobody comes on it; and nobody comes in the first second of the 31st instead, ten hours
/// before the round of that day.
#[tokio::test]
async fn nobody_comes_on_a_day_that_does_not_exist() {
    // Ten in the morning there is 20:00Z of the same date up to the 29th, of the date before from the 31st on.
    let found = visits("Pacific/Apia", "2011-12-28T20:00:00Z", 84, 1).await;
    assert_eq!(found, ["2011-12-29T20:00", "2011-12-30T20:00", "2011-12-31T20:00"]);
}
